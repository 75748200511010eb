package pick

import (
	"math"

	"batchwright/tolerance/pick/exact"
)

// steadiness is how far from none, to first order, a target's change stays on
// the share of the units that it asks for, or in its worst case: the smaller the
// steadier. Of several conditions it is the worst.
func (p *pictures) steadiness(choice []int, target int) float64 {
	widest := 0.0
	for k, d := range p.demands {
		if d.target != target {
			continue
		}
		j, ok := p.demand(choice, k)
		if !ok {
			return math.Inf(1)
		}
		at := exact.Demand{Share: d.Share, WorstCase: d.WorstCase} // a window without width at none
		half := j.Half / halfSlack
		if w := at.Miss(j.Mean, j.Variance, half); !(w <= widest) {
			widest = w
		}
	}
	return widest
}

// changes are the targets on changes, whose steadiness people ask about.
func (p *pictures) changes() []int {
	var list []int
	for t, target := range p.build.Targets {
		if target.Trim < 0 && target.ChangeFrom >= 0 {
			list = append(list, t)
		}
	}
	return list
}
