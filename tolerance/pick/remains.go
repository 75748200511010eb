package pick

import (
	"cmp"
	"math"
	"slices"

	"batchwright/tolerance/spread"
)

// Remains is what is left of a change that a target limits, to first order:
// its mean, which parts whose slopes oppose each other can cancel, and its
// spread, which they cannot, with whose it is.
type Remains struct {
	Target    string        `json:"target"`
	Condition string        `json:"condition"`
	Unit      string        `json:"unit"`
	Mean      spread.Figure `json:"mean"`
	Deviation spread.Figure `json:"standard_deviation"`
	Sources   []Source      `json:"sources"` // the largest, largest first
}

// Source is one parameter's part in a spread.
type Source struct {
	Ref       string        `json:"ref"`
	Parameter string        `json:"parameter"`
	Share     spread.Figure `json:"share"` // of the variance
}

// mostSources is how many sources are named.
const mostSources = 3

// remains are what a choice leaves of every change.
func (p *pictures) remains(choice []int) ([]Remains, error) {
	list := []Remains{}
	for _, t := range p.changes() {
		target, condition := p.build.Targets[t], 0
		for k, d := range p.demands {
			if d.target != t {
				continue
			}
			l, node, err := p.lineariseDemand(choice, k)
			if err != nil {
				return nil, err
			}
			r := remaining(l, node)
			r.Target, r.Unit = target.Name, target.Unit.Symbol
			r.Condition = p.build.Conditions[target.At[condition]].Name
			condition++
			list = append(list, r)
		}
	}
	return list, nil
}

// lineariseDemand is the linear picture in which a demand is a node.
func (p *pictures) lineariseDemand(choice []int, k int) (*spread.Linear, int, error) {
	for _, g := range p.groups {
		if node := slices.Index(g.demands, k); node >= 0 {
			l, err := p.linear(g, choice)
			return l, node, err
		}
	}
	panic("pick: a demand of no group")
}

// remaining sums up a node.
func remaining(l *spread.Linear, node int) Remains {
	r := Remains{Mean: spread.Figure(l.Values[node]), Sources: []Source{}}
	var variance float64
	terms := l.Terms(node)
	for _, t := range terms {
		variance += t.Variance
	}
	r.Deviation = spread.Figure(math.Sqrt(math.Max(0, variance)))
	slices.SortStableFunc(terms, func(a, b spread.Term) int { return cmp.Compare(b.Variance, a.Variance) })
	for _, t := range terms[:min(len(terms), mostSources)] {
		x := l.Inputs[t.Input]
		r.Sources = append(r.Sources, Source{x.Ref, x.Parameter, spread.Figure(t.Variance / variance)})
	}
	return r
}
