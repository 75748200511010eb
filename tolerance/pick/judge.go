package pick

import (
	"math"

	"batchwright/bom/part"
	"batchwright/tolerance/pick/exact"
	"batchwright/tolerance/spread"
)

// The linear picture is normal and first-order; the units are neither quite. A
// bounded shape lies within a limit more often than its normal stand-in: one
// bimodal part with its half width on the limit always, against 81 %. Mixed
// with others it soon looks normal. So a share is asked for with shareSlack
// less, and up to boundedSlack less the more of the variance one such source
// makes; a worst case's half width counts for halfSlack. What passes by mistake
// is refused by the simulation.
const (
	shareSlack   = 0.02
	boundedSlack = 0.18
	halfSlack    = 0.7
)

// judged is what a demand is judged by.
type judged struct {
	exact.Effect
	slack float64 // of the share that is asked for
}

// judge sums up a node: mean, variance, half width, and how far from normal
// its scatter may be: the square of the largest share of the variance that one
// source of a shape other than normal makes, the pieces of a lot being one.
func judge(l *spread.Linear, node int) judged {
	j := judged{Effect: exact.Effect{Mean: l.Values[node]}}
	lots := map[int]float64{}
	var largest float64
	for _, t := range l.Terms(node) {
		x := l.Inputs[t.Input]
		j.Variance += t.Variance
		j.Half += math.Abs(l.Slopes[node][t.Input]) * x.HalfWidth * halfSlack
		if x.Shape == part.Normal || x.Shape == "" {
			continue
		}
		source := t.Variance
		if x.Lot >= 0 {
			lots[x.Lot] += t.Variance
			source = lots[x.Lot]
		}
		largest = math.Max(largest, source)
	}
	j.slack = shareSlack
	if j.Variance > 0 {
		j.slack += boundedSlack * (largest / j.Variance) * (largest / j.Variance)
	}
	return j
}

// An asking is what a search asks of the demands: their limits as the targets
// have them, or others in their place, and perhaps one more thing.
type asking struct {
	*pictures
	demands []exact.Demand
	also    func(choice []int) bool // nil: nothing more
}

// asked are the demands as the targets have them.
func (p *pictures) asked() asking {
	a := asking{pictures: p}
	for _, d := range p.demands {
		a.demands = append(a.demands, d.Demand)
	}
	return a
}

// quickly judges a choice by one group of demands after the other and stops at
// the first that fails, which is all that a search needs.
func (a asking) quickly(choice []int) exact.Verdict { return a.verdict(choice, false) }

// wholly judges a choice by every demand, so that misses can be compared.
func (a asking) wholly(choice []int) exact.Verdict { return a.verdict(choice, true) }

func (a asking) verdict(choice []int, whole bool) exact.Verdict {
	v := exact.Verdict{Meets: true}
	for _, g := range a.groups {
		list, err := a.of(g, choice)
		if err != nil {
			return exact.Verdict{Shortfall: math.Inf(1)} // Confirm would say the same
		}
		for n, j := range list {
			k := g.demands[n]
			d := a.demands[k]
			d.Share = math.Max(0, d.Share-j.slack)
			if d.Holds(j.Mean, j.Variance, j.Half) {
				continue
			}
			miss := d.Miss(j.Mean, j.Variance, j.Half) / d.Scale()
			if v.Meets || !(miss <= v.Shortfall) {
				v = exact.Verdict{Shortfall: miss, Worst: k}
			}
		}
		if !v.Meets && !whole {
			return v
		}
	}
	if v.Meets && a.also != nil && !a.also(choice) {
		return exact.Verdict{Shortfall: math.Inf(1)}
	}
	return v
}
