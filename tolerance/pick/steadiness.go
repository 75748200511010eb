package pick

import (
	"math"

	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
)

// steadiness is how far, to first order, the share of the units that a target
// asks for stays from the middle of its limits, or half its worst case's width:
// the smaller the steadier. Of several conditions it is the worst.
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
		m := middle(p.build.Targets[target])
		at := exact.Demand{Low: m, High: m, Share: d.Share, WorstCase: d.WorstCase}
		half := j.Half / halfSlack
		if w := at.Miss(j.Mean, j.Variance, half); !(w <= widest) {
			widest = w
		}
	}
	return widest
}

// middle is the place from which a target's limits are counted: halfway between
// them, or nothing where one of them is open.
func middle(t build.Target) float64 {
	if m := t.Low/2 + t.High/2; !math.IsInf(m, 0) && !math.IsNaN(m) {
		return m
	}
	return 0
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
