package exact

import "math"

// Rounding that the bounds forgive, so that a choice which Judge passes by the
// last digit is never cut: relative to the sizes that were added up.
const forgive = 1e-9

// Holds says whether the demand is met by these totals (base included).
func (d *Demand) Holds(mean, variance, half float64) bool {
	if d.WorstCase {
		return mean-half >= d.Low && mean+half <= d.High
	}
	return ShareOfNormal(mean, variance, d.Low, d.High) >= d.Share
}

// Miss is by how much both limits would have to move outward for the demand to
// hold, in the demand's unit, 0 where it holds. A share of 1 with scatter is
// measured as if 1e-16 of the units could lie outside.
func (d *Demand) Miss(mean, variance, half float64) float64 {
	if d.Holds(mean, variance, half) {
		return 0
	}
	if d.WorstCase {
		return max(d.Low-(mean-half), mean+half-d.High)
	}
	near := min(mean-d.Low, d.High-mean)
	if variance == 0 {
		return max(0, -near)
	}
	return max(0, d.widening(mean, math.Sqrt(variance), near))
}

// widening solves for w by Newton steps kept within a bracket
//
//	P(Low-w <= N(mean, s^2) <= High+w) = Share.
//
// The nearer limit is a distance near away. It alone may lose 1-Share, so w is
// at least s z(1-Share) - near; with half of that on each side it is enough.
func (d *Demand) widening(mean, s, near float64) float64 {
	rest := max(1-d.Share, 1e-16)
	left := s*quantile(min(rest, 1-1e-16)) - near
	right := s*quantile(rest/2) - near
	w := left
	for range 60 {
		a, b := (mean-d.Low+w)/s, (d.High-mean+w)/s
		over := tail(a) + tail(b) - rest
		if over > 0 {
			left = w
		} else {
			right = w
		}
		next := w + s*over/(density(a)+density(b))
		if !(next > left && next < right) {
			next = left + (right-left)/2
		}
		if math.Abs(next-w) <= 1e-13*s {
			return next
		}
		w = next
	}
	return w
}

// Scale is what a miss is measured against to compare demands: half the width
// of the window, or the size of the only limit, or 1.
func (d *Demand) Scale() float64 {
	width := (d.High - d.Low) / 2
	switch {
	case finite(width) && width > 0:
		return width
	case finite(d.Low) && d.Low != 0:
		return math.Abs(d.Low)
	case finite(d.High) && d.High != 0:
		return math.Abs(d.High)
	}
	return 1
}

// totals adds a demand's base and the effects of a choice.
func (p *Problem) totals(q int, choice []int) Effect {
	d := &p.Demands[q]
	t := Effect{d.BaseMean, d.BaseVariance, d.BaseHalf}
	for i, j := range choice {
		t.add(p.Lines[i].Options[j].Effects[q])
	}
	return t
}

func (t *Effect) add(e Effect) {
	t.Mean += e.Mean
	t.Variance += e.Variance
	t.Half += e.Half
}

// judge is Judge, or the demands with all effects added up; the shortfall is
// then the greatest Miss/Scale.
func (p *Problem) judge(choice []int) Verdict {
	if p.Judge != nil {
		v := p.Judge(choice)
		if math.IsNaN(v.Shortfall) {
			v.Shortfall = math.Inf(1)
		}
		return v
	}
	v := Verdict{Meets: true}
	for q := range p.Demands {
		d := &p.Demands[q]
		t := p.totals(q, choice)
		if d.Holds(t.Mean, t.Variance, t.Half) {
			continue
		}
		miss := d.Miss(t.Mean, t.Variance, t.Half) / d.Scale()
		if v.Meets || miss > v.Shortfall {
			v = Verdict{Shortfall: miss, Worst: q}
		}
	}
	return v
}

// rest is the share of units that may lie outside, rounding forgiven.
func (d *Demand) rest() float64 { return (1-d.Share)*(1+forgive) + 1e-15 }
