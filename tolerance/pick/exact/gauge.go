package exact

import "math"

// A gauge has a demand's deviations at hand to judge it quickly. Of a share
// demand above one half: z is how many deviations the mean must at least lie
// within each limit, half how many are enough (half the misses on each side).
type gauge struct {
	*Demand
	z, half, widest, scale float64
}

func newGauge(d *Demand) gauge {
	g := gauge{Demand: d, scale: d.Scale(), widest: d.widest()}
	if !d.WorstCase && d.Share > 0.5 {
		g.z, g.half = quantile(d.rest()), quantile(d.rest()/2)
	}
	return g
}

// miss is 0 where the demand holds; else it grows with the distance, in
// the demand's scale. It need only point the way.
func (g *gauge) miss(t Effect) float64 {
	if g.WorstCase {
		return max(0, g.Low-(t.Mean-t.Half), t.Mean+t.Half-g.High) / g.scale
	}
	if g.Share > 0.5 {
		s := math.Sqrt(t.Variance)
		far := max(s*g.z-(t.Mean-g.Low), s*g.z-(g.High-t.Mean), s-g.widest)
		if far > 0 {
			return far / g.scale
		}
	}
	return max(0, g.Share-ShareOfNormal(t.Mean, t.Variance, g.Low, g.High))
}

// A reach is what the totals of a demand can still come to: a mean between Low
// and High, a variance and a half width of at least these.
type reach struct {
	low, high, variance, half float64
	size                      float64 // greatest absolute sum of means, for rounding
}

// beyond says that no totals within the reach can meet the demand.
func (g *gauge) beyond(r *reach) bool {
	d := g.Demand
	if d.WorstCase {
		slack := forgive * (r.size + r.half)
		return r.low+r.half > d.High+slack || r.high-r.half < d.Low-slack ||
			2*r.half > d.High-d.Low+2*slack
	}
	// The mean's own rounding is forgiven by letting it reach a little wider.
	slack := forgive * r.size
	low, high := r.low-slack, r.high+slack
	least := r.variance * (1 - forgive)
	if d.Share <= 0.5 {
		return bestShare(d.Low, d.High, low, high, least) < d.Share*(1-forgive)
	}
	m := nearestMean(d.Low, d.High, low, high)
	near, s := min(m-d.Low, d.High-m), math.Sqrt(least)
	switch {
	case near > s*g.half*(1+forgive):
		return false
	case near < s*g.z*(1-forgive):
		return true
	}
	return outsideNormal(m, least, d.Low, d.High) > d.rest()
}
