// Package offer knows what can be bought: price books with quantity breaks,
// packs and stock, and the cheapest way to buy a number of pieces from them.
package offer

import (
	"cmp"
	"math"
	"slices"
	"sort"

	"batchwright/bom/part"
)

// Row is one line of a price book: what it sells, and for how much.
type Row struct {
	Tolerance float64 // fraction
	AnyGrade  bool    // the book names no tolerance: every grade
	Low, High float64 // SI; equal for one value; a trimmer's two ends
	AnyValue  bool    // the book names no value: parts that have none
	Series    string  // which values from Low to High; "" for one value and for trimmers
	AtLeast   int     // pieces to buy before the price holds
	Each      Money
	Multiple  int // pieces come in multiples of it
	Stock     int // NoLimit where the book names none
	Line      int // in the book
	// values are the magnitudes that Series has from Low to High, rising; kept
	// because a search for the cheapest parts asks thousands of times.
	values []float64
}

// NoLimit is the Stock of a row that names none.
const NoLimit = -1

// Offer is every price at which one piece can be bought.
type Offer struct {
	Family string
	Rows   []Row // in the book's order
}

// Offer finds what the book asks for a part: by family, grade and value. A
// row may name no tolerance or no value; it then sells every one.
func (b *Book) Offer(p part.Part) (*Offer, bool) {
	o := &Offer{Family: p.Family}
	value := p.Main().Value
	w := wish{grade: p.Grade(), low: value, high: value}
	if low := p.Parameter("low"); low != nil {
		w.low = low.Value
	}
	rows := b.rows[p.Family]
	for i := range rows {
		if rows[i].sells(w) {
			o.Rows = append(o.Rows, rows[i])
		}
	}
	return o, len(o.Rows) > 0
}

// wish is what a row is searched for: a grade, and a value or a trimmer's ends.
type wish struct{ grade, low, high float64 }

// sells reports whether the row's grade and value are those wished for.
func (r *Row) sells(w wish) bool {
	switch {
	case !r.AnyGrade && !same(r.Tolerance, w.grade):
		return false
	case r.AnyValue:
		return true
	case r.Series == "":
		return same(r.Low, w.low) && same(r.High, w.high)
	}
	return (w.high < 0) == (r.High < 0) && contains(r.values, math.Abs(w.high))
}

// contains reports whether x is one of the rising values.
func contains(values []float64, x float64) bool {
	i := sort.SearchFloat64s(values, x*(1-tight))
	return i < len(values) && same(values[i], x)
}

// tight is the relative distance within which two figures are the same one,
// read with different prefixes.
const tight = 1e-9

// same compares two figures.
func same(a, b float64) bool {
	return math.Abs(a-b) <= tight*max(math.Abs(a), math.Abs(b))
}

// Buy finds the cheapest way to hold at least `needed` pieces: how many to buy,
// at what each, for what price. Buying more than needed to reach a break or a
// pack counts. Of two ways at one price it takes the one with fewer pieces. ok
// is false if no row can supply so many.
func (o *Offer) Buy(needed int) (buy int, each, price Money, ok bool) {
	if needed <= 0 {
		return 0, 0, 0, true
	}
	r := o.best(needed)
	if r == nil {
		return 0, 0, 0, false
	}
	n := r.quantity(needed)
	return n, r.Each, Money(n) * r.Each, true
}

// best is the row that sells at least `needed` pieces, one or more, most
// cheaply, nil if none sells so many. Of two at one price it is the one that
// sells fewer pieces, of two alike the one that draws on no stock.
func (o *Offer) best(needed int) *Row {
	var best *Row
	if needed > mostPieces {
		return best
	}
	for i := range o.Rows {
		r := &o.Rows[i]
		if n := r.quantity(needed); r.Stock != NoLimit && n > r.Stock {
			continue
		}
		if best == nil || r.compare(best, needed) < 0 {
			best = r
		}
	}
	return best
}

// compare says which of two rows is better to buy from: by price, by how many
// pieces that buys, and by whether it draws on a stock.
func (r *Row) compare(q *Row, needed int) int {
	n, m := r.quantity(needed), q.quantity(needed)
	return cmp.Or(cmp.Compare(Money(n)*r.Each, Money(m)*q.Each), cmp.Compare(n, m), cmp.Compare(r.limited(), q.limited()))
}

// limited is 1 for a row that sells while a stock lasts, 0 for others.
func (r *Row) limited() int {
	if r.Stock == NoLimit {
		return 0
	}
	return 1
}

// quantity is the fewest pieces, at least `needed`, that the row's price holds for.
func (r *Row) quantity(needed int) int {
	n := max(needed, r.AtLeast)
	return (n + r.Multiple - 1) / r.Multiple * r.Multiple
}

// Floor is the lowest price of one piece at any quantity: no way of buying is
// cheaper for each piece needed.
func (o *Offer) Floor() Money {
	low := o.Rows[0].Each
	for _, r := range o.Rows[1:] {
		low = min(low, r.Each)
	}
	return low
}

// Multiple is what the pieces of a purchase come in, given what each costs: the
// multiple of the row that Buy took.
func (o *Offer) Multiple(needed int) int {
	if r := o.best(needed); r != nil && needed > 0 {
		return r.Multiple
	}
	return 1
}

// Draws is how many pieces a purchase takes from the stock: all that are
// bought, or none where the row that sells them names no stock.
func (o *Offer) Draws(needed int) int {
	r := o.best(needed)
	if r == nil || needed <= 0 {
		return 0
	}
	return r.limited() * r.quantity(needed)
}

// Most is the largest number of pieces that can be had, NoLimit if any number.
func (o *Offer) Most() int {
	most := 0
	for _, r := range o.Rows {
		if r.Stock == NoLimit {
			return NoLimit
		}
		n := r.Stock / r.Multiple * r.Multiple
		if n >= r.AtLeast {
			most = max(most, n)
		}
	}
	return most
}

// Limited reports whether any price of a part holds only while a stock lasts.
func (b *Book) Limited(p part.Part) bool {
	o, _ := b.Offer(p)
	for _, r := range o.Rows {
		if r.limited() > 0 {
			return true
		}
	}
	return false
}

// After is the same offer once so many pieces are taken from its stock. Rows that
// name a stock are prices for the same pieces, and draw on it together.
func (o *Offer) After(taken int) *Offer {
	left := &Offer{Family: o.Family, Rows: slices.Clone(o.Rows)}
	for i := range left.Rows {
		if r := &left.Rows[i]; r.Stock != NoLimit {
			r.Stock = max(0, r.Stock-taken)
		}
	}
	return left
}
