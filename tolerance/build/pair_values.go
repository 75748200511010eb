package build

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/series"
)

// pairValues are the values from which an opening's pairs are made: some that
// are listed, any two of which make a pair, or those of a series of which two
// come near enough to a value.
type pairValues struct {
	listed         []Worth
	series         string
	centre, within float64
	at             *document.Node // where the centre is written; nil where it is no good
}

// What pairs are made of where a build file does not say: common values that
// come within a hundredth of what is written.
const (
	pairSeries = "E24"
	pairWithin = 0.01
)

// lesser is how much of the whole the lesser piece of a pair must make up. What
// is less moves neither the value nor its slope.
const lesser = 0.01

// rounding is the relative distance within which two values are one: 100 pF and
// 120 pF make up 220 pF but for their last digit.
const rounding = 1e-9

// MaxFittings is how much one opening may be filled with.
const MaxFittings = 20_000

// readPairValues reads what pairs are made of.
func (r *reader) readPairValues(at *document.Node, p *Place, part *document.Node, o *Opening) {
	o.pairs = pairValues{listed: o.Values, series: pairSeries, within: pairWithin}
	if at.Get("values") != nil {
		return
	}
	o.pairs.listed = nil
	centre := at.Get("around")
	if centre == nil {
		centre = part.Get("value")
	}
	if centre == nil || !r.readCentre(centre, p.Type, &o.pairs.centre) {
		return // complained of
	}
	if n := at.Get("within"); n == nil || r.readWithin(n, &o.pairs.within) {
		o.pairs.at = centre
	}
	if n := at.Get("series"); n != nil {
		if name, ok := r.Word(n, "a series", series.Names()...); ok {
			o.pairs.series = name
		}
	}
}

// values are those a piece of a pair may have.
func (v pairValues) values(t part.Type, join series.Join) []Worth {
	if v.listed != nil || v.at == nil {
		return v.listed
	}
	low, high := v.centre*lesser, v.centre*(1+v.within)
	if join == series.Reciprocal {
		low, high = v.centre*(1-v.within), v.centre/lesser
	}
	var list []Worth
	for _, x := range series.Between(v.series, low, high) {
		list = append(list, Worth{x, x, part.Text(x, t.Unit())})
	}
	return list
}

// near says whether a whole is one that was asked for.
func (v pairValues) near(whole float64) bool {
	return v.listed != nil || math.Abs(whole/v.centre-1) <= v.within+rounding
}

// pairs are the fittings of two pieces, those that come nearest to the value
// first. The piece that makes up more of the whole is the first of the two.
func (b *Build) pairs(o Opening, combine Combine) []Fitting {
	join := combine.Join(o.Type)
	pieces := b.pieces(o, o.pairs.values(o.Type, join))
	var list []Fitting
	for i, p := range pieces {
		for _, q := range pieces[i:] {
			if v := join.Of(p.High, q.High); o.pairs.near(v) {
				list = append(list, pairOf(combine, join, p, q, v))
			}
		}
	}
	if c := o.pairs.centre; c > 0 {
		slices.SortStableFunc(list, func(x, y Fitting) int { return cmp.Compare(math.Abs(x.High/c-1), math.Abs(y.High/c-1)) })
	}
	return list
}

// pairOf joins two pieces.
func pairOf(combine Combine, join series.Join, p, q Piece, v float64) Fitting {
	if (join == series.Adding) == (q.High > p.High) {
		p, q = q, p
	}
	return Fitting{
		Combine: combine, Pieces: []Piece{p, q},
		Worth: Worth{v, v, p.Text + combine.Sign() + q.Text},
	}
}

// countPairs is how many fittings there are of two pieces, without making them.
func (b *Build) countPairs(o Opening, combine Combine) int {
	join := combine.Join(o.Type)
	pieces := b.pieces(o, o.pairs.values(o.Type, join))
	if o.pairs.listed != nil {
		return len(pieces) * (len(pieces) + 1) / 2
	}
	var values []float64
	sold := map[float64]int{} // pieces of each value
	for _, p := range pieces {
		if sold[p.High]++; sold[p.High] == 1 {
			values = append(values, p.High)
		}
	}
	n := 0
	for i, x := range values {
		for k, y := range values[i:] {
			switch {
			case !o.pairs.near(join.Of(x, y)):
			case k == 0:
				n += sold[x] * (sold[x] + 1) / 2
			default:
				n += sold[x] * sold[y]
			}
		}
	}
	return n
}

// countFittings is how many fittings an opening has, without making them.
func (b *Build) countFittings(o Opening) int {
	n := 0
	for _, combine := range o.combines() {
		if combine == Single {
			n += len(b.singles(o))
		} else {
			n += b.countPairs(o, combine)
		}
	}
	return n * max(1, len(o.Lots))
}

// checkFittings complains of openings that no pair fills, or more than a search
// can look at.
func (r *reader) checkFittings() {
	for _, o := range r.build.Openings {
		if !o.paired() {
			continue
		}
		switch n := r.build.countFittings(o); {
		case n > MaxFittings:
			r.Add(o.node.Get("choose"), "too much to choose from", fmt.Sprintf("at most %d ways to fill a position, not %d: a smaller within, a coarser series or fewer families", MaxFittings, n))
		case n == 0 && o.pairs.at != nil:
			r.Add(o.pairs.at, "nothing to choose from", "a value that two come to: a wider within, a finer series or other families")
		}
	}
}
