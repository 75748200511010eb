package pick

import (
	"fmt"
	"math"
	"slices"

	"batchwright/bom/offer"
	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
)

// addBinding finds the target that costs most and what a tighter one would
// cost. Which one binds is asked of the linear picture alone: the order's money
// without each target in turn. The price of the tighter one is that of a choice
// that the simulation confirms. Where its search ended early that is said.
func (c *chooser) addBinding(r *Result, choice []int) error {
	all, err := c.pictured(c.asked())
	if err != nil || all.Choice == nil || !all.Proved {
		return err
	}
	binding, saving := -1, int64(0)
	for t := range c.build.Targets {
		found, err := c.pictured(c.without(t))
		if err != nil {
			return err
		}
		if !found.Proved || found.Choice == nil {
			return nil // the search ended early: what was found says nothing of what a target costs
		}
		if less := all.Cost - found.Cost; less > saving {
			binding, saving = t, less
		}
	}
	if binding < 0 {
		return nil
	}
	tight := tighter(c.build.Targets[binding])
	varied := c.varied(binding, tight)
	found, err := varied.search(varied.asked(), nil)
	if err != nil {
		return err
	}
	r.Binding = &Binding{
		Target: c.build.Targets[binding].Name, Saving: offer.Money(saving), Tighter: tightText(tight),
		Total: offer.Money(found.Cost), Out: found.Choice == nil && found.Proved, Unknown: !found.Proved,
	}
	return nil
}

// pictured is the cheapest choice by the linear picture alone.
func (c *chooser) pictured(a asking) (exact.Outcome, error) {
	s := c.newSearch(a, nil)
	s.problem.Confirm = nil
	return s.cheapest()
}

// without are the demands but for a target's.
func (c *chooser) without(target int) asking {
	a := c.asked()
	for k, d := range c.pictures.demands {
		if d.target == target {
			a.demands[k] = exact.Demand{Low: math.Inf(-1), High: math.Inf(1)}
		}
	}
	return a
}

// tightening is how much closer a target's limits are drawn.
const tightening = 0.1

// tighter is a target with its window a tenth narrower about its middle, an
// only limit a tenth of itself further in, or, of a trim's reach, a tenth fewer
// units that may miss.
func tighter(t build.Target) build.Target {
	switch low, high := !math.IsInf(t.Low, 0), !math.IsInf(t.High, 0); {
	case t.Trim >= 0:
		t.Share = 1 - (1-t.Share)*(1-tightening)
	case low && high:
		m, half := t.Low/2+t.High/2, (t.High/2-t.Low/2)*(1-tightening)
		t.Low, t.High = m-half, m+half
	case low:
		t.Low += tightening * math.Abs(t.Low)
	case high:
		t.High -= tightening * math.Abs(t.High)
	}
	return t
}

// tightText says what a tightened target asks.
func tightText(t build.Target) string {
	low, high := part.Text(t.Low, t.Unit), part.Text(t.High, t.Unit)
	switch {
	case t.Trim >= 0:
		return fmt.Sprintf("on %.4g %% of the units", 100*t.Share)
	case t.Low == -t.High:
		return "±" + high
	case math.IsInf(t.Low, 0):
		return "at most " + high
	case math.IsInf(t.High, 0):
		return "at least " + low
	}
	return low + " to " + high
}

// varied is the chooser with another target in place of one. Pictures do not
// follow from limits and are shared; what was simulated is not.
func (c *chooser) varied(target int, t build.Target) *chooser {
	b := *c.build
	b.Targets = slices.Clone(b.Targets)
	b.Targets[target] = t
	own, pictures, market := *c, *c.pictures, *c.market
	market.build = &b
	pictures.market = &market
	pictures.demands = slices.Clone(pictures.demands)
	for k, d := range pictures.demands {
		if d.target == target {
			pictures.demands[k].Demand = limits(t)
		}
	}
	own.pictures, own.answers, own.refusals = &pictures, map[string]string{}, 0
	own.trials = nil
	for _, old := range c.trials {
		fresh := *old
		if slices.Contains(fresh.targets, target) {
			fresh.seen = map[string]outcome{}
		}
		own.trials = append(own.trials, &fresh)
	}
	return &own
}
