package pick

import (
	"fmt"
	"slices"
	"strings"

	"batchwright/bom/part"
	"batchwright/tolerance/build"
)

// dominated marks, of each opening's fittings, those that another one stands
// in for whatever else is chosen: it differs in nothing but narrower
// tolerances, costs no more, and nobody else buys on the lines of either. The
// first-order scatter of anything then is no larger, for every variance rises
// with each half width, and on no less than half of the units no less of a
// target is met; where less is asked for, nothing is marked. That holds of the picture where every shape is normal;
// others change how generously it judges, so they are left alone.
func (p *pictures) dominated() [][]bool {
	var all [][]bool
	least := slices.ContainsFunc(p.demands, func(d demandNode) bool { return !d.WorstCase && d.Share < 0.5 })
	for i, list := range p.fittings {
		marks := make([]bool, len(list))
		if least {
			all = append(all, marks)
			continue
		}
		for _, alike := range p.alike(i) {
			for _, b := range alike {
				marks[b] = slices.ContainsFunc(alike, func(a int) bool { return a != b && p.standsIn(i, a, b) })
			}
		}
		all = append(all, marks)
	}
	return all
}

// alike gathers the fittings of an opening that differ in half widths alone, in
// the order in which they are listed.
func (p *pictures) alike(i int) [][]int {
	at := map[string]int{}
	var groups [][]int
	for j := range p.fittings[i] {
		name, ok := p.likeness(i, j)
		if !ok {
			continue
		}
		g, known := at[name]
		if !known {
			g = len(groups)
			at[name] = g
			groups = append(groups, nil)
		}
		groups[g] = append(groups[g], j)
	}
	return groups
}

// likeness names everything about a fitting but its half widths; not ok where
// something that scatters is not normal. Two pieces that come from one lot vary
// together, so whether they do is part of it.
func (p *pictures) likeness(i, j int) (string, bool) {
	var b strings.Builder
	fmt.Fprintf(&b, "%s%d ", p.signs[i][j], len(p.buys[i][j]))
	for k, inputs := range p.options[i][j] {
		for _, name := range names(inputs) {
			x := inputs[name]
			if x.HalfWidth > 0 && x.Shape != part.Normal && x.Shape != "" {
				return "", false
			}
			fmt.Fprintf(&b, "%d %s %g %g %t;", k, name, x.Centre, x.Rho, x.Lot >= 0)
		}
	}
	return b.String(), true
}

// standsIn says whether fitting a does for b of two that are alike: of two that
// are the same in everything the first.
func (p *pictures) standsIn(i, a, b int) bool {
	before, after := p.floor(i, a), p.floor(i, b)
	if before > after || before == after && a > b || !p.alone(i, a) || !p.alone(i, b) {
		return false
	}
	for k, inputs := range p.options[i][a] {
		for name, x := range inputs {
			if !(x.HalfWidth <= p.options[i][b][k][name].HalfWidth) {
				return false
			}
		}
	}
	return true
}

// alone says whether nothing else can be bought on a fitting's lines, so that
// its floor is its price.
func (m *market) alone(i, j int) bool {
	return !m.crowded && !slices.ContainsFunc(m.buys[i][j], func(p purchase) bool {
		return m.lines[p.line].fixed > 0 || len(m.company(i, p.line)) > 1
	})
}

// names lists the parameters of inputs in order.
func names(inputs map[string]build.Input) []string {
	var list []string
	for name := range inputs {
		list = append(list, name)
	}
	slices.Sort(list)
	return list
}
