package pick

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
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
	exact.Demand
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
		d := demandNode{target: t, Demand: exact.Demand{
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

// pictures make the linear picture of any choice. A demand's picture follows
// from the choices on the lines that it depends on, and is made once for each.
// Choices whose equations are alike but for their scatter share a graph, so
// that a picture costs one differentiation.
type pictures struct {
	*chooser
	demands []demandNode
	groups  []*group
	trials  []*trial
	options [][]map[string]build.Input // of each line and option: its inputs, by reference and parameter
	signs   [][]string                 // and what its equations follow from
}

// group is the demands that depend on the same lines.
type group struct {
	lines   []int
	demands []int
	graphs  map[string]*graph
	seen    map[string][]judged // by the choices on its lines
}

// judged is what a demand is judged by.
type judged struct {
	exact.Effect
	slack float64 // of the share that is asked for
}

// graph is a compiled choice that stands for all with its equations.
type graph struct {
	inputs []build.Input
	slopes *spread.Differentiator
	alone  bool // it stands for the choice it was compiled from only
}

func inputKey(x build.Input) string { return x.Ref + "|" + x.Parameter }

// newPictures compiles each option on its own, the other lines as in the base.
func newPictures(c *chooser) (*pictures, error) {
	p := &pictures{chooser: c}
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
			list = append(list, ofLine(m, c.refs(i), i))
			signs = append(signs, sign(c.fittings[i][j]))
		}
		p.options, p.signs = append(p.options, list), append(p.signs, signs)
	}
	p.makeGroups(m)
	p.makeTrials(m)
	return p, nil
}

// makeGroups finds the lines that each demand depends on.
func (p *pictures) makeGroups(m *build.Model) {
	by := map[string]*group{}
	for k, d := range p.demands {
		node := d.node(m)
		lines := p.linesOf(m, node)
		name := fmt.Sprint(lines)
		if by[name] == nil {
			by[name] = &group{lines: lines, graphs: map[string]*graph{}, seen: map[string][]judged{}}
			p.groups = append(p.groups, by[name])
		}
		by[name].demands = append(by[name].demands, k)
	}
	slices.SortStableFunc(p.groups, func(a, b *group) int { return cmp.Compare(len(a.lines), len(b.lines)) })
}

// linesOf lists the openings whose parts a node depends on.
func (p *pictures) linesOf(m *build.Model, node tape.Ref) []int {
	var lines []int
	read := m.Graph.Program(node).Inputs()
	for i := range p.fittings {
		refs := p.refs(i)
		if slices.ContainsFunc(read, func(k int) bool { return slices.Contains(refs, m.Inputs[k].Ref) }) {
			lines = append(lines, i)
		}
	}
	return lines
}

// ofLine are the inputs of a model that belong to an opening, in lots of its
// own: in the base another opening may buy the same piece and share its lot,
// where the choice that is judged has another there.
func ofLine(m *build.Model, refs []string, line int) map[string]build.Input {
	inputs := map[string]build.Input{}
	lots := map[string]int{} // by parameter
	for _, x := range m.Inputs {
		if !slices.Contains(refs, x.Ref) {
			continue
		}
		if x.Lot >= 0 {
			if _, known := lots[x.Parameter]; !known {
				lots[x.Parameter] = line<<16 + len(lots)
			}
			x.Lot = lots[x.Parameter]
		}
		inputs[inputKey(x)] = x
	}
	return inputs
}

// compile fits a choice and compiles it.
func (c *chooser) compile(choice []int) (*build.Model, error) {
	b, err := c.fit(choice)
	if err != nil {
		return nil, err
	}
	return b.CompileTargets()
}

// of is what each of a group's demands is judged by, for a choice.
func (p *pictures) of(g *group, choice []int) ([]judged, error) {
	key := on(g.lines, choice)
	if seen, ok := g.seen[key]; ok {
		return seen, nil
	}
	l, err := p.linear(g, choice)
	if err != nil {
		return nil, err
	}
	list := make([]judged, len(g.demands))
	for k := range list {
		list[k] = judge(l, k)
	}
	g.seen[key] = list
	return list, nil
}

// linear is the linear picture of a group's demands.
func (p *pictures) linear(g *group, choice []int) (*spread.Linear, error) {
	made, err := p.graph(g, choice)
	if err != nil {
		return nil, err
	}
	if made.alone {
		return made.slopes.At(made.inputs), nil
	}
	inputs := slices.Clone(made.inputs)
	for _, i := range g.lines {
		own := p.options[i][choice[i]]
		for k, x := range inputs {
			if y, ok := own[inputKey(x)]; ok {
				inputs[k] = y
			}
		}
	}
	return made.slopes.At(inputs), nil
}

// graph is the compiled choice whose equations are those of a choice, as far
// as a group depends on them.
func (p *pictures) graph(g *group, choice []int) (*graph, error) {
	key, alone := p.equations(g, choice)
	if made, ok := g.graphs[key]; ok {
		return made, nil
	}
	m, err := p.compile(choice)
	if err != nil {
		return nil, err
	}
	var refs []tape.Ref
	for _, k := range g.demands {
		refs = append(refs, p.demands[k].node(m))
	}
	made := &graph{m.Inputs, spread.NewDifferentiator(m, refs...), alone}
	g.graphs[key] = made
	return made, nil
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

// quickly judges a choice by one group of demands after the other and stops at
// the first that fails, which is all that a search needs.
func (p *pictures) quickly(choice []int) exact.Verdict { return p.verdict(choice, false) }

// wholly judges a choice by every demand, so that misses can be compared.
func (p *pictures) wholly(choice []int) exact.Verdict { return p.verdict(choice, true) }

func (p *pictures) verdict(choice []int, whole bool) exact.Verdict {
	v := exact.Verdict{Meets: true}
	for _, g := range p.groups {
		list, err := p.of(g, choice)
		if err != nil {
			return exact.Verdict{Shortfall: math.Inf(1)} // Confirm would say the same
		}
		for n, j := range list {
			k := g.demands[n]
			d := p.demands[k].Demand
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
	return v
}
