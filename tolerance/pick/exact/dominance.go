package exact

import "math"

// undominated leaves out every option that another one of its line can stand
// in for in any choice: not dearer, and each demand met with it wherever it
// was met without. The least cost that passes Judge is the same afterwards,
// and so is the first of the cheapest choices, because of two equally cheap
// options only the later can go. It says nothing about Confirm.
func (p *Problem) undominated() (kept [][]int, dropped int) {
	kept = make([][]int, len(p.Lines))
	most := p.mostVariance()
	for i, l := range p.Lines {
		for j, o := range l.Options {
			if o.Floor >= Unavailable {
				continue
			}
			if p.replaceable(i, j, most) {
				dropped++
				continue
			}
			kept[i] = append(kept[i], j)
		}
	}
	return kept, dropped
}

// replaceable says whether some option stands in for option j of line i.
// Standing in is transitive and never mutual (the order of cost and index is
// strict), so a chain of replacements ends at a kept option: one that is not
// marked as dominated.
func (p *Problem) replaceable(i, j int, variance []float64) bool {
	b := &p.Lines[i].Options[j]
	if b.Dominated {
		return true
	}
	if !b.Alone {
		return false
	}
	for k := range p.Lines[i].Options {
		a := &p.Lines[i].Options[k]
		if !a.Alone || a.Dominated || a.Floor > b.Floor || a.Floor == b.Floor && k >= j {
			continue
		}
		if p.noWorse(a, b, variance) {
			return true
		}
	}
	return false
}

// mostVariance is the greatest total variance of each demand, +Inf where
// options in company may count for more than their effects say.
func (p *Problem) mostVariance() []float64 {
	most, kept := make([]float64, len(p.Demands)), p.all()
	for q := range most {
		most[q] = p.spans(q, kept).varianceHigh
	}
	for _, l := range p.Lines {
		for _, o := range l.Options {
			if !o.Alone {
				for q := range most {
					most[q] = math.Inf(1)
				}
				return most
			}
		}
	}
	return most
}

func (p *Problem) noWorse(a, b *Option, variance []float64) bool {
	for q := range p.Demands {
		if !p.Demands[q].noWorse(a.Effects[q], b.Effects[q], variance[q]) {
			return false
		}
	}
	return true
}

// noWorse says that the demand holds with effect a wherever it holds with b;
// most is the greatest total variance.
//
// In the worst case a's interval must lie within b's on each side that has a
// limit. For a share above one half the allowed deviation S(m) has a slope of
// at most 1/z in size (z the one-sided deviations of the share; see rows), so
// a mean moved toward a limit is paid for when the deviation shrinks by the
// move over z; with all else unknown it shrinks least at the greatest variance
// with which the demand can hold. A move must be paid for with a margin above
// rounding.
func (d *Demand) noWorse(a, b Effect, most float64) bool {
	moved := d.moved(a.Mean, b.Mean)
	margin := forgive * (abs(d.Low) + abs(d.High))
	switch {
	case d.WorstCase && moved == 0:
		return a.Half <= b.Half
	case d.WorstCase:
		return a.Half+moved+margin <= b.Half
	case d.Share <= 0.5:
		return a.Mean == b.Mean && a.Variance == b.Variance
	case moved == 0:
		return a.Variance <= b.Variance
	}
	if widest := d.widest(); !math.IsInf(widest, 1) {
		most = min(most, widest*widest)
	}
	shrinks := (b.Variance - a.Variance) / (2 * math.Sqrt(most))
	return moved*(1+forgive)+margin <= shrinks*quantile(d.rest())
}

// moved is how far a mean at a lies nearer to a limit than one at b.
func (d *Demand) moved(a, b float64) float64 {
	moved := 0.0
	if !math.IsInf(d.High, 1) {
		moved = max(moved, a-b)
	}
	if !math.IsInf(d.Low, -1) {
		moved = max(moved, b-a)
	}
	return moved
}

// abs is the size of a limit, 0 when there is none.
func abs(limit float64) float64 {
	if math.IsInf(limit, 0) {
		return 0
	}
	return math.Abs(limit)
}
