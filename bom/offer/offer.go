// Package offer knows what can be bought: price books with quantity breaks,
// packs and stock, and the cheapest way to buy a number of pieces from them.
package offer

import (
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
	if needed > mostPieces {
		return 0, 0, 0, false
	}
	for _, r := range o.Rows {
		n := r.quantity(needed)
		if r.Stock != NoLimit && n > r.Stock {
			continue
		}
		cost := Money(n) * r.Each
		if !ok || cost < price || cost == price && n < buy {
			buy, each, price, ok = n, r.Each, cost, true
		}
	}
	return buy, each, price, ok
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
	buy, each, _, ok := o.Buy(needed)
	for _, r := range o.Rows {
		if ok && r.Each == each && r.quantity(needed) == buy {
			return r.Multiple
		}
	}
	return 1
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
		if r.Stock != NoLimit {
			return true
		}
	}
	return false
}

// After is the same offer once so many pieces are taken from its stock.
func (o *Offer) After(taken int) *Offer {
	left := &Offer{Family: o.Family, Rows: slices.Clone(o.Rows)}
	for i := range left.Rows {
		if r := &left.Rows[i]; r.Stock != NoLimit {
			r.Stock = max(0, r.Stock-taken)
		}
	}
	return left
}
