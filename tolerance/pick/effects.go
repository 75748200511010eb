package pick

import (
	"math"
	"slices"

	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
	"batchwright/tolerance/tape"
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

// demandNode is a target at one condition: a node of the model and its limits.
type demandNode struct {
	Demand
	target int
	node   func(m *build.Model) tape.Ref
}

// listDemands makes a demand of every target at each of its conditions. Of a
// trim's reach it is the place between the trimmer's ends at which a straight
// line would meet the value wanted, which says how far out of reach a trimmer
// is where its setting cannot.
func listDemands(m *build.Model) []demandNode {
	var list []demandNode
	for t, target := range m.Build.Targets {
		d := demandNode{target: t, Demand: Demand{
			Low: target.Low, High: target.High, WorstCase: target.WorstCase, Share: target.Share,
		}}
		if target.Trim >= 0 {
			d.node = func(m *build.Model) tape.Ref {
				n, g := m.Trims[target.Trim], m.Graph
				return g.Div(n.AtLow, g.Sub(n.AtLow, n.AtHigh))
			}
			list = append(list, d)
			continue
		}
		for _, i := range m.Targets[t].Outputs {
			d.node = func(m *build.Model) tape.Ref { return m.Outputs[i].Node }
			list = append(list, d)
		}
	}
	return list
}

// pictures make the linear picture of any choice. Choices whose equations are
// alike but for their scatter share a graph, so that a picture costs one
// differentiation.
type pictures struct {
	*chooser
	demands []demandNode
	graphs  map[string]*graph
	options [][]map[string]build.Input // of each line and option: its inputs, by reference and parameter
	signs   [][]string                 // and what its equations follow from
}

// graph is a compiled choice that stands for all with its equations.
type graph struct {
	inputs []build.Input
	slopes *spread.Differentiator
}

func inputKey(x build.Input) string { return x.Ref + "|" + x.Parameter }

// newPictures compiles each option on its own, the other lines as in the base.
func newPictures(c *chooser) (*pictures, error) {
	p := &pictures{chooser: c, graphs: map[string]*graph{}}
	base := make([]int, len(c.fittings))
	m, err := c.compile(base)
	if err != nil {
		return nil, err
	}
	p.demands = listDemands(m)
	for i := range c.fittings {
		var list []map[string]build.Input
		var signs []string
		for j := range c.fittings[i] {
			choice := slices.Clone(base)
			choice[i] = j
			m, err := c.compile(choice)
			if err != nil {
				return nil, err
			}
			list = append(list, ofLine(m, c.refs(i)))
			signs = append(signs, sign(c.fittings[i][j]))
		}
		p.options, p.signs = append(p.options, list), append(p.signs, signs)
	}
	return p, nil
}

// ofLine are the inputs of a model that belong to some references.
func ofLine(m *build.Model, refs []string) map[string]build.Input {
	inputs := map[string]build.Input{}
	for _, x := range m.Inputs {
		if slices.Contains(refs, x.Ref) {
			inputs[inputKey(x)] = x
		}
	}
	return inputs
}

// compile fits a choice and compiles it.
func (c *chooser) compile(choice []int) (*build.Model, error) {
	b, err := c.fit(choice)
	if err != nil {
		return nil, err
	}
	return b.Compile()
}

// of is the linear picture of a choice.
func (p *pictures) of(choice []int) (*spread.Linear, error) {
	g, err := p.graph(choice)
	if err != nil {
		return nil, err
	}
	inputs := slices.Clone(g.inputs)
	for i := range choice {
		own := p.options[i][choice[i]]
		for k, x := range inputs {
			if y, ok := own[inputKey(x)]; ok {
				inputs[k] = y
			}
		}
	}
	return g.slopes.At(inputs), nil
}

// graph is the compiled choice whose equations are those of a choice.
func (p *pictures) graph(choice []int) (*graph, error) {
	k := p.equations(choice)
	if g, ok := p.graphs[k]; ok {
		return g, nil
	}
	m, err := p.compile(choice)
	if err != nil {
		return nil, err
	}
	var refs []tape.Ref
	for _, d := range p.demands {
		refs = append(refs, d.node(m))
	}
	g := &graph{m.Inputs, spread.NewDifferentiator(m, refs...)}
	p.graphs[k] = g
	return g, nil
}

// totals are what a demand is judged by.
func totals(l *spread.Linear, k int) Effect {
	t := Effect{Mean: l.Values[k]}
	t.Variance, _ = l.Variance(k)
	for i, x := range l.Inputs {
		t.Half += math.Abs(l.Slopes[k][i]) * x.HalfWidth * halfSlack
	}
	return t
}

// judge judges a choice against every demand.
func (p *pictures) judge(choice []int) Verdict {
	l, err := p.of(choice)
	if err != nil {
		return Verdict{Shortfall: math.Inf(1)} // Confirm would say the same
	}
	v := Verdict{Meets: true}
	for k := range p.demands {
		d, t := p.demands[k].Demand, totals(l, k)
		d.Share = math.Max(0, d.Share-shareSlack-boundedSlack*dominance(l, k, t.Variance))
		if d.Holds(t.Mean, t.Variance, t.Half) {
			continue
		}
		miss := d.Miss(t.Mean, t.Variance, t.Half) / d.Scale()
		if v.Meets || !(miss <= v.Shortfall) {
			v = Verdict{Shortfall: miss, Worst: k}
		}
	}
	return v
}

// dominance is the square of the largest share of a demand's variance that one
// source of a shape other than normal makes; the pieces of a lot are one.
func dominance(l *spread.Linear, k int, variance float64) float64 {
	_, terms := l.Variance(k)
	sources := map[int]float64{}
	var largest float64
	for _, t := range terms {
		x := l.Inputs[t.Input]
		if x.Shape == part.Normal || x.Shape == "" {
			continue
		}
		source := -1 - t.Input // its own
		if x.Lot >= 0 {
			source = x.Lot
		}
		sources[source] += t.Variance
		largest = math.Max(largest, sources[source])
	}
	if !(variance > 0) {
		return 1
	}
	return (largest / variance) * (largest / variance)
}
