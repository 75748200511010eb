package offer

import (
	"fmt"
	"path/filepath"
	"sync"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/bom/series"
	"batchwright/data"
)

// Book is a price book.
type Book struct {
	Name          string
	Currency      string // "" where the book does not say
	Demonstration bool   // the embedded one, whose prices are invented
	rows          map[string][]Row
}

// Embedded is the price book that batchwright carries with it, so that a build
// can be planned without one. Its prices are invented.
func Embedded() *Book { return embedded() }

// embedded reads the embedded book once; a book is never changed after that.
var embedded = sync.OnceValue(func() *Book {
	b, complaints := Read("prices.csv", data.Prices, part.Embedded())
	if len(complaints) > 0 {
		panic("offer: embedded prices: " + complaints.Error())
	}
	b.Name, b.Currency, b.Demonstration = "demonstration prices (invented)", "credits", true
	return b
})

// header is what the first line of a price book names; multiple, stock and
// currency need not be there.
var header = []string{
	"family", "tolerance", "from", "to", "series", "at_least", "price_each", "multiple", "stock", "currency",
}

// Read reads a price book, a CSV text with the columns
//
//	family,tolerance,from,to,series,at_least,price_each,multiple,stock
//
// and, if it likes, currency. A row sells every value of the series from `from`
// to `to` in that grade; one value where from and to are equal and the series is
// empty; a trimmer's range, likewise without series; parts that have no value
// where both are empty. An empty tolerance is every grade. Every fault is
// complained of; the book is then nil.
func Read(file string, text []byte, families *part.Catalogue) (*Book, document.Complaints) {
	lines, complaints := document.ReadCSV(file, text, header, "multiple", "stock", "currency")
	if len(complaints) > 0 {
		return nil, complaints
	}
	r := reader{
		book:     &Book{Name: filepath.Base(file), rows: make(map[string][]Row)},
		families: families,
		seen:     make(map[condition]int),
		values:   make(map[span][]float64),
	}
	for _, line := range lines {
		r.readLine(line)
	}
	if complaints := r.faults.List(); len(complaints) > 0 {
		return nil, complaints
	}
	return r.book, nil
}

// Rows is how many rows the book has for a family.
func (b *Book) Rows(family string) int { return len(b.rows[family]) }

// reader reads a book.
type reader struct {
	book     *Book
	families *part.Catalogue
	faults   document.Faults
	seen     map[condition]int // the line that set a price first
	values   map[span][]float64
}

// span is what a row with a series sells. Its breaks share the values.
type span struct {
	series    string
	low, high float64
}

// condition is what may have one price only.
type condition struct {
	family, series       string
	tolerance, low, high float64
	anyGrade, anyValue   bool
	atLeast, multiple    int
}

// readLine reads one row; a row with a fault is left out.
func (r *reader) readLine(line document.Row) {
	cell := make(map[string]*document.Node, len(header))
	for i, name := range header {
		cell[name] = line.Cells[i]
	}
	r.readCurrency(cell["currency"])
	name, ok := r.faults.Word(cell["family"], "a family", r.families.Names()...)
	if !ok {
		return
	}
	family, _ := r.families.Family(name)
	row := Row{Line: line.Line, Multiple: 1, Stock: NoLimit}
	good := r.readGrade(cell["tolerance"], family, &row)
	good = r.readValues(cell, family, &row) && good
	good = r.readTerms(cell, &row) && good
	if !good {
		return
	}
	key := condition{
		name, row.Series, row.Tolerance, row.Low, row.High, row.AnyGrade, row.AnyValue, row.AtLeast, row.Multiple,
	}
	if first, twice := r.seen[key]; twice {
		r.faults.Add(cell["at_least"], fmt.Sprintf("the same piece and quantity as on line %d", first), "one price for each quantity")
		return
	}
	r.seen[key] = line.Line
	r.book.rows[name] = append(r.book.rows[name], row)
}

// empty reports whether a cell says nothing.
func empty(n *document.Node) bool { return n.Value == "" }

// readCurrency takes the currency of the first row that names one; the others
// must agree.
func (r *reader) readCurrency(n *document.Node) {
	switch {
	case empty(n):
	case r.book.Currency == "":
		r.book.Currency = n.Value
	case r.book.Currency != n.Value:
		r.faults.Add(n, "a second currency", "one currency in the whole book, here "+r.book.Currency)
	}
}

// readGrade reads the tolerance.
func (r *reader) readGrade(n *document.Node, family *part.Family, row *Row) bool {
	if empty(n) {
		row.AnyGrade = true
		return true
	}
	if len(family.Grades) == 0 {
		r.faults.Add(n, family.Name+" is not sold by tolerance", "nothing in this cell")
		return false
	}
	q, ok := r.faults.Quantity(n, quantity.Percent)
	if ok && !(q.Value >= 0 && q.Value <= 1) {
		r.faults.Add(n, "tolerance out of range", "0 % to 100 %")
		return false
	}
	row.Tolerance = q.Value
	return ok
}

// readValues reads from, to and series.
func (r *reader) readValues(cell map[string]*document.Node, family *part.Family, row *Row) bool {
	from, to, names := cell["from"], cell["to"], cell["series"]
	switch {
	case empty(from) && empty(to) && empty(names):
		row.AnyValue = true
		if family.HasValue() {
			r.faults.Add(cell["family"], family.Name+" comes in values", "from and to filled in")
			return false
		}
		return true
	case empty(from) || empty(to):
		r.faults.Add(cell["family"], "only one of from and to, or a series without them", "both filled in, or neither")
		return false
	case !family.HasValue():
		r.faults.Add(from, family.Name+" has no value to choose", "nothing in from, to and series")
		return false
	}
	low, ok := r.faults.Quantity(from, family.Type.Unit())
	high, ok2 := r.faults.Quantity(to, family.Type.Unit())
	if !ok || !ok2 {
		return false
	}
	row.Low, row.High = low.Value, high.Value
	if !(row.Low <= row.High) || family.Type.Trimmer() && !(row.Low >= 0 && row.Low < row.High) {
		r.faults.Add(to, "range that does not rise", "a value above "+from.Value)
		return false
	}
	return r.readSeries(names, family, row)
}

// readSeries reads the series and checks that it sells something.
func (r *reader) readSeries(n *document.Node, family *part.Family, row *Row) bool {
	single := same(row.Low, row.High) || family.Type.Trimmer()
	switch {
	case empty(n) && single:
		return true
	case empty(n):
		r.faults.Add(n, "range of values without a series", "one of the preferred series", series.Names()...)
		return false
	case single:
		r.faults.Add(n, "series for one value", "nothing in this cell")
		return false
	}
	name, ok := r.faults.Word(n, "a preferred series", series.Names()...)
	if !ok {
		return false
	}
	row.Series = name
	if row.values = r.sold(name, row.Low, row.High); len(row.values) == 0 {
		r.faults.Add(n, fmt.Sprintf("no value of %s in the range", name), "a range that holds one")
		return false
	}
	return true
}

// sold lists the magnitudes of a series in a range that is all above zero or
// all below it; of a range across zero it lists none.
func (r *reader) sold(name string, low, high float64) []float64 {
	if high < 0 {
		low, high = -high, -low
	}
	k := span{name, low, high}
	if _, known := r.values[k]; !known {
		r.values[k] = series.Between(name, low, high)
	}
	return r.values[k]
}

// readTerms reads quantity, price, multiple and stock.
func (r *reader) readTerms(cell map[string]*document.Node, row *Row) bool {
	atLeast, ok := r.faults.Whole(cell["at_least"], 1, mostPieces)
	row.AtLeast = atLeast
	price, err := ParseMoney(cell["price_each"].Value)
	switch {
	case err != nil:
		r.faults.Add(cell["price_each"], "not a price", "an amount such as 0.034, with at most four decimals")
		ok = false
	case price > largestPrice:
		r.faults.Add(cell["price_each"], "price too large", "at most "+largestPrice.String())
		ok = false
	}
	row.Each = price
	for _, c := range []struct {
		name string
		low  int
		to   *int
	}{{"multiple", 1, &row.Multiple}, {"stock", 0, &row.Stock}} {
		if n := cell[c.name]; !empty(n) {
			v, good := r.faults.Whole(n, c.low, mostPieces)
			*c.to = v
			ok = ok && good
		}
	}
	return ok
}
