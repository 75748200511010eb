package pick

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
	"batchwright/tolerance/spread"
	"batchwright/tolerance/tape"
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
		d := demandNode{target: t, Demand: limits(target)}
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

// limits are what a target asks of one condition.
func limits(t build.Target) exact.Demand {
	return exact.Demand{Low: t.Low, High: t.High, WorstCase: t.WorstCase, Share: t.Share}
}

// pictures make the linear picture of any choice. A demand's picture follows
// from the choices on the lines that it depends on, and is made once for each.
// Choices whose equations are alike share a graph: other values, coefficients
// and tolerances are other inputs of it, so that a picture costs one
// differentiation.
type pictures struct {
	*market
	demands []demandNode
	groups  []*group
	lineOf  map[string]place             // what an open reference belongs to
	open    map[string]bool              // every open reference
	given   map[string]build.Input       // the inputs of fixed parts, by name
	options [][][]map[string]build.Input // [opening][fitting][piece], by parameter
	signs   [][]string                   // what a fitting's equations follow from
}

// place is an opening and which of its pieces a reference is: 0 or 1.
type place struct{ line, piece int }

// group is the demands that depend on the same lines.
type group struct {
	lines   []int
	demands []int
	graphs  map[string]*graph
	seen    map[string][]judged // by the choices on its lines
}

// graph is a compiled choice that stands for all with its equations.
type graph struct {
	inputs []build.Input
	from   []place // where each comes from; line -1: as it stands
	slopes *spread.Differentiator
}

func inputName(x build.Input) string { return x.Ref + "|" + x.Parameter }

// newPictures finds out what depends on what.
func newPictures(m *market) (*pictures, error) {
	p := &pictures{market: m, lineOf: map[string]place{}, open: map[string]bool{}, given: map[string]build.Input{}}
	p.noteReferences()
	for _, list := range m.fittings {
		var options [][]map[string]build.Input
		var signs []string
		for _, f := range list {
			options = append(options, inputsOf(f))
			signs = append(signs, sign(f))
		}
		p.options, p.signs = append(p.options, options), append(p.signs, signs)
	}
	base, err := p.compile(make([]int, len(m.fittings)))
	if err != nil {
		return nil, err
	}
	p.demands = listDemands(base)
	p.makeGroups(base)
	return p, nil
}

// noteReferences notes which opening and piece a reference stands for, and the
// inputs of those that are not open.
func (p *pictures) noteReferences() {
	for i, o := range p.build.Openings {
		for _, position := range o.Positions {
			ref := p.build.Place(position).Part.Ref
			for name, piece := range map[string]int{ref: 0, ref + "A": 0, ref + "B": 1} {
				p.lineOf[name], p.open[name] = place{i, piece}, true
			}
		}
	}
	for _, q := range p.fixedParts() {
		for parameter, x := range build.PieceInputs(q) {
			p.given[q.Ref+"|"+parameter] = x
		}
	}
}

// inputsOf are the inputs that a fitting's pieces bring.
func inputsOf(f build.Fitting) []map[string]build.Input {
	var list []map[string]build.Input
	for _, q := range f.Pieces {
		list = append(list, build.PieceInputs(q.Part))
	}
	return list
}

// sign names what a fitting's equations follow from: how many pieces, and the
// laws of each that are no plain coefficients.
func sign(f build.Fitting) string {
	var b strings.Builder
	b.WriteString(string(f.Combine))
	for _, piece := range f.Pieces {
		for _, q := range piece.Part.Parameters {
			fmt.Fprintf(&b, ";%s %v %t", q.Name, q.Law, q.Ageing.Per == part.PerThousandHours)
			if len(q.Bias) > 0 {
				fmt.Fprintf(&b, " %v of %g", q.Bias, piece.Part.Rated)
			}
		}
	}
	return b.String() + "|"
}

// makeGroups finds the lines that each demand depends on.
func (p *pictures) makeGroups(m *build.Model) {
	by := map[string]*group{}
	for k, d := range p.demands {
		lines := p.linesOf(m, d.node(m))
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
	for _, k := range m.Graph.Program(node).Inputs() {
		if at, open := p.lineOf[m.Inputs[k].Ref]; open {
			lines = append(lines, at.line)
		}
	}
	slices.Sort(lines)
	return slices.Compact(lines)
}

// compile fits a choice and compiles it as a picture wants it.
func (p *pictures) compile(choice []int) (*build.Model, error) {
	b, err := p.fit(choice)
	if err != nil {
		return nil, err
	}
	return b.CompileOpen(p.open)
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
	made, inputs, err := p.inputs(g, choice)
	if err != nil {
		return nil, err
	}
	return made.slopes.At(inputs), nil
}

// apart is linear with a lot of its own for each opening, whatever else is
// bought on its lines.
func (p *pictures) apart(g *group, choice []int) (*spread.Linear, error) {
	made, inputs, err := p.inputs(g, choice)
	if err != nil {
		return nil, err
	}
	for k, at := range made.from {
		if at.line >= 0 && inputs[k].Lot >= 0 {
			inputs[k].Lot ^= (at.line + 1) << 40
		}
	}
	return made.slopes.At(inputs), nil
}

// inputs are a choice's graph and what it brings to it.
func (p *pictures) inputs(g *group, choice []int) (*graph, []build.Input, error) {
	made, err := p.graph(g, choice)
	if err != nil {
		return nil, nil, err
	}
	inputs := slices.Clone(made.inputs)
	for k, at := range made.from {
		if at.line < 0 {
			continue
		}
		x, ok := p.options[at.line][choice[at.line]][at.piece][inputs[k].Parameter]
		if !ok {
			return nil, nil, fmt.Errorf("pick: %s has no %s", inputs[k].Ref, inputs[k].Parameter)
		}
		x.Ref = inputs[k].Ref
		inputs[k] = x
	}
	return made, inputs, nil
}

// graph is the compiled choice whose equations are those of a choice, as far
// as a group depends on them.
func (p *pictures) graph(g *group, choice []int) (*graph, error) {
	var name strings.Builder
	for _, i := range g.lines {
		name.WriteString(p.signs[i][choice[i]])
	}
	if made, ok := g.graphs[name.String()]; ok {
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
	made := &graph{inputs: slices.Clone(m.Inputs), slopes: spread.NewDifferentiator(m, refs...)}
	for k, x := range made.inputs {
		at, open := p.lineOf[x.Ref]
		switch {
		case open && x.Parameter != settingError:
			made.from = append(made.from, at)
			continue
		case !open:
			if given, ok := p.given[inputName(x)]; ok {
				made.inputs[k] = given
			}
		}
		made.from = append(made.from, place{line: -1})
	}
	g.graphs[name.String()] = made
	return made, nil
}

// settingError is the input of a trim's own error, which no part brings.
const settingError = "setting error"

// on names a choice's options on some lines.
func on(lines, choice []int) string {
	b := make([]byte, 0, 3*len(lines))
	for _, i := range lines {
		b = append(b, byte(choice[i]), byte(choice[i]>>8), byte(choice[i]>>16))
	}
	return string(b)
}

// demand is what one demand is judged by.
func (p *pictures) demand(choice []int, k int) (judged, bool) {
	for _, g := range p.groups {
		if n := slices.Index(g.demands, k); n >= 0 {
			list, err := p.of(g, choice)
			if err != nil {
				return judged{}, false
			}
			return list[n], true
		}
	}
	return judged{}, false
}
