package build

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/bom/series"
)

// pairValues are the values from which an opening's pairs are made: some that
// are listed, any two of which make a pair, or those of a series of which two
// come near enough to a value.
type pairValues struct {
	listed         []Worth
	series         string
	centre, within float64
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
	if centre == nil {
		r.Add(part, "missing key value", "what the pair is to come to in "+p.Type.Unit().Symbol)
		return
	}
	r.read(centre, p.Type.Unit(), &o.pairs.centre)
	if n := at.Get("within"); n != nil {
		if r.read(n, quantity.Percent, &o.pairs.within) && !(o.pairs.within >= 0 && o.pairs.within < 1) {
			r.Add(n, "within", "a share of the value from 0 % to below 100 %")
		}
	}
	if n := at.Get("series"); n != nil {
		if name, ok := r.Word(n, "a series", series.Names()...); ok {
			o.pairs.series = name
		}
	}
}

// values are those a piece of a pair may have.
func (v pairValues) values(t part.Type, join series.Join) []Worth {
	if v.listed != nil {
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
	return v.listed != nil || math.Abs(whole/v.centre-1) <= v.within*(1+1e-9)
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
		Worth: Worth{v, v, p.Text + combine.sign() + q.Text},
	}
}

// checkFittings complains of openings that may be filled with more than a
// search can look at, and of series pairs at a position under a steady voltage.
func (r *reader) checkFittings() {
	for _, o := range r.build.Openings {
		at := o.node.Get("choose")
		if n := len(r.build.Fittings(o)); o.paired() && n > MaxFittings {
			r.Add(at, "too much to choose from", fmt.Sprintf("at most %d ways to fill a position, not %d: a smaller within, a coarser series or fewer families", MaxFittings, n))
		}
		if slices.Contains(o.Combines, InSeries) {
			r.checkUnshared(o.Positions...)
		}
	}
	for _, s := range r.stages {
		for i := range s.Places {
			if p := &s.Places[i]; p.Combine == InSeries && p.SameAs != "" {
				r.checkUnshared(s.Name + "." + p.Role)
			}
		}
	}
}

// checkUnshared complains where capacitors in series follow another position
// and stand under a steady voltage. At the position itself that is said as soon
// as it is read.
func (r *reader) checkUnshared(positions ...string) {
	for _, position := range positions {
		p := r.build.Place(position)
		if p.Type == part.Capacitor && p.Across != nil && p.SameAs != "" {
			r.Add(r.refs[p.base()], "series pair under a steady voltage", unshared)
		}
	}
}
