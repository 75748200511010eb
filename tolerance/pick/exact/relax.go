package exact

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// A row is a linear condition that every choice meeting a demand obeys:
//
//	sum of use(chosen option) <= limit,  use = perMean*mean + perVariance*variance + perHalf*half
type row struct {
	demand                        int
	perMean, perVariance, perHalf float64
	limit                         float64
}

func (r *row) use(e Effect) float64 {
	return r.perMean*e.Mean + r.perVariance*e.Variance + r.perHalf*e.Half
}

// rows derives the linear conditions of demand q. span is what the sums of
// effects (base included) can come to within the options left.
//
// A worst case is linear as it stands. For a share above one half the greatest
// standard deviation S(m) that the demand allows at mean m is a concave
// function on [Low, High], so each of its tangents is a condition s <= c + k m.
// Proof: on the edge, with a = (m-Low)/s and h = (High-m)/s,
//
//	Phi(a) + Phi(h) = 1 + Share  and  S' = (phi(a)-phi(h)) / (h phi(h) + a phi(a)).
//
// Both a, h >= 0 as Share > 1/2. Going right a grows and dh phi(h) = -da phi(a),
// whence d(numerator) = -(a+h) phi(a) da, d(denominator) = (h^2-a^2) phi(a) da
// and the sign of dS' is that of
//
//	-(a+h) (denominator + numerator*(h-a)) = -(a+h) (h phi(a) + a phi(h)) <= 0.
//
// s is the root of the variance, which lies above its chord over the variances
// that are possible at all: s >= alpha + beta*variance, linear again.
func (p *Problem) rows(q int, span span) []row {
	d := &p.Demands[q]
	if d.WorstCase {
		return worstRows(q, d, span)
	}
	if d.Share <= 0.5 {
		return nil
	}
	rest := d.rest()
	var out []row
	bounded := finite(d.Low) && finite(d.High)
	high := span.varianceHigh
	if widest := d.widest(); !math.IsInf(widest, 1) {
		high = min(high, widest*widest)
		out = append(out, row{demand: q, perVariance: 1, limit: widest*widest - d.BaseVariance})
	}
	alpha, beta := chord(span.varianceLow, max(high, span.varianceLow))
	for _, t := range tangents(d, rest, bounded) {
		out = append(out, row{
			demand: q, perMean: -t.slope, perVariance: beta,
			limit: t.at - alpha - beta*d.BaseVariance + t.slope*d.BaseMean,
		})
	}
	return out
}

// widest is the greatest standard deviation with which a share demand can hold
// at all, at a mean in the middle; +Inf with an open side or a share of at most
// one half.
func (d *Demand) widest() float64 {
	if !finite(d.Low) || !finite(d.High) || d.Share <= 0.5 {
		return math.Inf(1)
	}
	return (d.High - d.Low) / 2 / quantile(d.rest()/2)
}

func worstRows(q int, d *Demand, s span) []row {
	var out []row
	if finite(d.High) {
		out = append(out, row{demand: q, perMean: 1, perHalf: 1, limit: d.High - d.BaseMean - d.BaseHalf})
	}
	if finite(d.Low) {
		out = append(out, row{demand: q, perMean: -1, perHalf: 1, limit: d.BaseMean - d.BaseHalf - d.Low})
	}
	return out
}

// A line s <= at + slope*m.
type tangent struct{ at, slope float64 }

// tangents of S: one per limit at its end, where all misses lie on one side
// (s <= (m-Low)/z), and between the end and the crown of S one for each
// fraction of the misses on the nearer side.
func tangents(d *Demand, rest float64, bounded bool) []tangent {
	var out []tangent
	z := quantile(rest)
	if z <= 0 {
		return nil
	}
	if finite(d.Low) {
		out = append(out, tangent{-d.Low / z, 1 / z})
	}
	if finite(d.High) {
		out = append(out, tangent{d.High / z, -1 / z})
	}
	if !bounded || d.High == d.Low {
		return out
	}
	for _, nearer := range [...]float64{0.75} {
		a, h := quantile(rest*nearer), quantile(rest*(1-nearer))
		s := (d.High - d.Low) / (a + h)
		slope := (density(a) - density(h)) / (h*density(h) + a*density(a))
		low, high := d.Low+a*s, d.High-a*s
		out = append(out, tangent{s - slope*low, slope}, tangent{s + slope*high, -slope})
	}
	return out
}

// quantile is the z that a standard normal exceeds with probability p,
// polished by Newton steps so that p is met to the last digits.
func quantile(p float64) float64 {
	z := -mathext.NormalQuantile(p)
	for range 2 {
		z += (tail(z) - p) / density(z)
	}
	return z
}

// chord is the line through the ends of the square root over [low, high],
// nowhere above it.
func chord(low, high float64) (alpha, beta float64) {
	a, b := math.Sqrt(low), math.Sqrt(high)
	if a+b == 0 {
		return 0, 0
	}
	// (b-a)/(high-low) = 1/(a+b), and the chord passes (low, a).
	beta = 1 / (a + b)
	return a - beta*low, beta
}

// span is how far the totals of one demand can go, base included.
type span struct {
	varianceLow, varianceHigh float64
}

// spans adds up the least and greatest effects of the options left.
func (p *Problem) spans(q int, kept [][]int) span {
	d := &p.Demands[q]
	s := span{d.BaseVariance, d.BaseVariance}
	for i, options := range kept {
		low, high := math.Inf(1), math.Inf(-1)
		for _, j := range options {
			v := p.Lines[i].Options[j].Effects[q].Variance
			low, high = min(low, v), max(high, v)
		}
		s.varianceLow += low
		s.varianceHigh += high
	}
	return s
}

// A relaxation is the problem with its money as a sum of floors and its
// demands as linear rows. use[i][o*rows+k] is what kept option o of line i
// takes of row k.
type relaxation struct {
	p     *Problem
	kept  [][]int
	floor [][]float64
	use   [][]float64
	limit []float64
}

// relax builds the relaxation over the kept options. Rows are scaled to a
// largest step of 1 and their limits loosened by rounding; rows that can never
// bind are left out.
func (p *Problem) relax(kept [][]int) *relaxation {
	r := &relaxation{p: p, kept: kept}
	var rows []row
	for q := range p.Demands {
		for _, w := range p.rows(q, p.spans(q, kept)) {
			if scaled, binds := p.scale(w, kept); binds {
				rows = append(rows, scaled)
			}
		}
	}
	for _, w := range rows {
		r.limit = append(r.limit, w.limit)
	}
	for i, options := range kept {
		floor := make([]float64, 0, len(options))
		use := make([]float64, 0, len(options)*len(rows))
		for _, j := range options {
			option := &p.Lines[i].Options[j]
			floor = append(floor, float64(option.Floor))
			for k := range rows {
				use = append(use, rows[k].use(option.Effects[rows[k].demand]))
			}
		}
		r.floor = append(r.floor, floor)
		r.use = append(r.use, use)
	}
	return r
}

// scale loosens a row by the rounding of its sum, scales it, and says whether
// any choice could break it.
func (p *Problem) scale(w row, kept [][]int) (row, bool) {
	most, size, step := 0.0, math.Abs(w.limit), 0.0
	for i, options := range kept {
		low, high := math.Inf(1), math.Inf(-1)
		for _, j := range options {
			u := w.use(p.Lines[i].Options[j].Effects[w.demand])
			low, high = min(low, u), max(high, u)
		}
		most += high
		size += max(math.Abs(low), math.Abs(high))
		step = max(step, high-low)
	}
	w.limit += forgive * size
	if most <= w.limit {
		return w, false
	}
	if step == 0 {
		step = max(size, math.SmallestNonzeroFloat64)
	}
	w.perMean /= step
	w.perVariance /= step
	w.perHalf /= step
	w.limit /= step
	return w, true
}

// narrow is the relaxation with fewer options and the same rows.
func (r *relaxation) narrow(kept [][]int) *relaxation {
	out := &relaxation{p: r.p, kept: kept, limit: r.limit}
	for i, options := range kept {
		if len(options) == len(r.kept[i]) {
			out.floor, out.use = append(out.floor, r.floor[i]), append(out.use, r.use[i])
			continue
		}
		floor, use, at := make([]float64, 0, len(options)), make([]float64, 0, len(options)*len(r.limit)), 0
		for _, j := range options {
			for r.kept[i][at] != j {
				at++
			}
			floor, use = append(floor, r.floor[i][at]), append(use, r.takes(i, at)...)
		}
		out.floor, out.use = append(out.floor, floor), append(out.use, use)
	}
	return out
}

// options is how many are left in all lines.
func (r *relaxation) options() int {
	n := 0
	for _, options := range r.kept {
		n += len(options)
	}
	return n
}
