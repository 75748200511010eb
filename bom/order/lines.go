package order

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"batchwright/bom/marking"
	"batchwright/bom/offer"
	"batchwright/bom/part"
)

// Key is the same for two parts that are bought on one line, and so come from
// one lot: family, type, rated voltage, and every figure with how it scatters. Correlations
// are left out, for they describe the lot and not the piece.
func Key(p part.Part) string {
	var b strings.Builder
	b.WriteString(p.Family + "|" + string(p.Type) + "|" + figure(p.Rated))
	for _, q := range p.Parameters {
		b.WriteString("|" + q.Name + "|" + string(shape(q.Shape)) + "|" + strconv.FormatBool(q.Absolute))
		for _, x := range []float64{
			q.Value, q.Tolerance, q.Temperature.Value, q.Temperature.Spread,
			q.Humidity.Value, q.Humidity.Spread, q.Ageing.Value, q.Ageing.Spread.Spread,
		} {
			b.WriteString("|" + figure(x))
		}
		b.WriteString("|" + string(q.Ageing.Per))
		for _, l := range q.Law {
			b.WriteString("|" + figure(l.Celsius) + "|" + figure(l.Low) + "|" + figure(l.High))
		}
		for _, l := range q.Bias {
			b.WriteString("|bias " + figure(l.Share) + "|" + figure(l.Low) + "|" + figure(l.High))
		}
	}
	return b.String()
}

// Shelf is the same for two parts that the price book knows as one thing, and
// so draw on one stock, whatever else a build file says of each: its family,
// grade and value, or its family alone where that comes in no values.
func Shelf(p part.Part) string {
	text := p.Family
	if p.ValueText() == "" {
		return text
	}
	text += "|" + figure(p.Grade()) + "|" + figure(p.Main().Value)
	if low := p.Parameter("low"); low != nil {
		text += "|" + figure(low.Value)
	}
	return text
}

// shape reads the zero value as what it stands for.
func shape(s part.Shape) part.Shape {
	if s == "" {
		return part.Normal
	}
	return s
}

// figure writes a number so that two readings of one figure with different
// prefixes (0.22 nF, 220 pF) come out alike.
func figure(x float64) string { return strconv.FormatFloat(x, 'e', 11, 64) }

// Spares is how many pieces to buy beyond those needed: so many per cent of
// them, rounded up.
//
//	ceil(needed · percent / 100)
func Spares(needed, percent int) int {
	if needed <= 0 || percent <= 0 {
		return 0
	}
	// In two parts, so that the product cannot overflow where the answer does not.
	whole, rest := needed/100, needed%100
	return whole*percent + (rest*percent+99)/100
}

// New groups the fitted parts of one unit into lines and buys for `units` of
// them and so many per cent of spares. Lines stand in the natural order of their
// first references. What nobody offers stands apart and is counted in no total.
func New(parts []part.Part, units, sparesPercent int, book *offer.Book, families *part.Catalogue) Order {
	o := Order{
		Lines: []Line{}, Unoffered: []Line{},
		Currency: book.Currency, Units: units, SparesPercent: sparesPercent,
		Book: book.Name, Demonstration: book.Demonstration,
	}
	taken := map[string]int{} // of each shelf
	for _, g := range group(parts) {
		l := describe(g, families)
		l.Needed = l.PerUnit * units
		l.Spares = Spares(l.Needed, sparesPercent)
		shelf := Shelf(g[0])
		taken[shelf] += l.buy(g[0], book, taken[shelf])
		if l.Why != "" {
			o.Unoffered = append(o.Unoffered, l)
			continue
		}
		o.Total += l.Price
		o.PerUnit += offer.Money(l.PerUnit) * l.Each
		o.Lines = append(o.Lines, l)
	}
	byRef := func(a, b Line) int { return compare(a.Refs[0], b.Refs[0]) }
	slices.SortStableFunc(o.Lines, byRef)
	slices.SortStableFunc(o.Unoffered, byRef)
	return o
}

// group gathers the parts of each line, lines in the order they first come.
func group(parts []part.Part) [][]part.Part {
	at := make(map[string]int)
	var groups [][]part.Part
	for _, p := range parts {
		k := Key(p)
		i, known := at[k]
		if !known {
			i = len(groups)
			at[k] = i
			groups = append(groups, nil)
		}
		groups[i] = append(groups[i], p)
	}
	return groups
}

// describe says what a line is: its references and the piece that goes there.
func describe(g []part.Part, families *part.Catalogue) Line {
	p := g[0]
	f, known := families.Family(p.Family)
	l := Line{
		Family: p.Family, Title: string(p.Type), Text: p.Bought(f),
		Tolerance: p.Grade(), Marking: marking.Text(p),
		PerUnit: len(g), Multiple: 1,
	}
	if l.Text != "" {
		l.Value = p.Main().Value
	}
	if known {
		l.Title = f.Title
	}
	for _, q := range g {
		l.Refs = append(l.Refs, q.Ref)
	}
	slices.SortFunc(l.Refs, compare)
	return l
}

// buy fills in quantity and price, or why there is none. Other lines have taken
// some pieces from the stock already; it gives how many more this one takes.
func (l *Line) buy(p part.Part, book *offer.Book, taken int) (draws int) {
	l.Buy = l.Needed + l.Spares
	if p.Family == "" {
		l.Why = "no family is given"
		return 0
	}
	o, ok := book.Offer(p)
	if !ok {
		l.Why = fmt.Sprintf("%s does not offer it", book.Name)
		return 0
	}
	if taken > 0 {
		o = o.After(taken)
	}
	buy, each, price, ok := o.Buy(l.Buy)
	switch most := o.Most(); {
	case !ok && most == offer.NoLimit:
		l.Why = fmt.Sprintf("%d pieces are more than one line can be", l.Buy)
		return 0
	case !ok:
		l.Why = fmt.Sprintf("%s has %d, %d are needed", book.Name, most, l.Buy)
		if taken > 0 {
			l.Why = fmt.Sprintf("%s has %d left beside the %d on other lines, %d are needed", book.Name, most, taken, l.Buy)
		}
		return 0
	}
	l.Multiple, draws = o.Multiple(l.Buy), o.Draws(l.Buy)
	l.Buy, l.Each, l.Price = buy, each, price
	return draws
}
