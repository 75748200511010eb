package pick

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/offer"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
	"batchwright/tolerance/spread"
)

// result puts what the search found into the build's terms.
func (c *chooser) result(found exact.Outcome) (*Result, *build.Build, error) {
	r := emptyResult()
	r.ProvedCheapest, r.Bound = found.Proved && found.Choice != nil, offer.Money(found.Bound)
	r.Candidates, r.Examined, r.Simulated = found.Candidates, found.Examined, found.Simulated
	r.CutByDominance, r.CutByBound = found.Dominated, found.CutByBound
	if found.Proved && !c.newSearch(c.asked(), nil).few() {
		r.Provided = provided
	}
	choice := found.Choice
	switch {
	case choice == nil:
		choice = found.Nearest
		r.Why = c.outOfReach(found)
	case !found.Proved:
		r.Why = fmt.Sprintf("the best of a search that ran out of %s; nothing cheaper than %v exists, %.2g %% below this",
			stopped(found), offer.Money(found.Bound), 100*found.Gap())
	}
	if choice == nil {
		choice = make([]int, len(c.fittings))
	}
	fitted, err := c.fit(choice)
	if err != nil {
		return nil, nil, err
	}
	for i, j := range choice {
		picked := c.describe(i, j)
		picked.Why = c.why(choice, i, j)
		r.Choices = append(r.Choices, picked)
		r.Fittings = append(r.Fittings, c.fittings[i][j])
	}
	if err := c.report(r, choice); err != nil {
		return nil, nil, err
	}
	o := c.order(fitted.Parts())
	r.CostPerUnit, r.Total = o.PerUnit, o.Total
	return r, fitted, nil
}

// stopped is what a search ran out of. One that was not stopped met choices that
// effects which add up did not foresee.
func stopped(found exact.Outcome) string {
	if found.Stopped == "" {
		return "certainty"
	}
	return string(found.Stopped)
}

// report says what the simulation makes of a choice, target by target, and what
// remains of the changes.
func (c *chooser) report(r *Result, choice []int) error {
	r.Targets = make([]spread.TargetReport, len(c.build.Targets))
	for _, t := range c.trials {
		reports, err := c.reports(t, choice)
		if err != nil {
			return err
		}
		for n, target := range t.targets {
			r.Targets[target] = reports[n]
			if !t.worst && c.build.Targets[target].Trim < 0 {
				r.Checks = append(r.Checks, Check{reports[n].Name, spread.Figure(c.shareOf(choice, target)), reports[n].Share})
			}
		}
	}
	var err error
	r.Remains, err = c.remains(choice)
	return err
}

// outOfReach says which target no choice meets, and how near the best comes.
func (c *chooser) outOfReach(found exact.Outcome) string {
	if found.Nearest == nil && !found.Proved {
		return "the search ended before any choice was judged"
	}
	if found.Nearest == nil {
		return "no combination can be bought: the price book has not enough for all the openings together"
	}
	early := ""
	if !found.Proved {
		early = "the search ended early; so far "
	}
	if text := c.answers[fmt.Sprint(found.Nearest)]; text != "" {
		return early + "no choice meets every target in simulation; the one nearest meets " + text
	}
	if found.NearestVerdict.Meets && !found.Proved {
		return "the search ended before any choice that meets the targets to first order was simulated"
	}
	worst := found.NearestVerdict.Worst
	t := c.build.Targets[c.demands[worst].target]
	text := fmt.Sprintf("%sno choice meets the target %q (%s)", early, t.Name, t.Asked)
	if !found.NearestVerdict.Meets {
		text += "; the nearest, to first order, " + c.predicted(found.Nearest, worst)
	}
	return text
}

// predicted says what the linear picture makes of a demand.
func (c *chooser) predicted(choice []int, k int) string {
	j, ok := c.demand(choice, k)
	if !ok {
		return "cannot be compiled"
	}
	d := c.demands[k]
	if d.WorstCase {
		unit := c.build.Targets[d.target].Unit
		full := j.Half / halfSlack
		return fmt.Sprintf("runs from %s to %s", part.Text(j.Mean-full, unit), part.Text(j.Mean+full, unit))
	}
	return fmt.Sprintf("meets it on some %.3g %% of the units", 100*exact.ShareOfNormal(j.Mean, j.Variance, d.Low, d.High))
}

// shareOf is the share of the units that meet a target, to first order; of
// several conditions the least.
func (c *chooser) shareOf(choice []int, target int) float64 {
	least := 1.0
	for k, d := range c.demands {
		if j, ok := c.demand(choice, k); ok && d.target == target {
			least = math.Min(least, exact.ShareOfNormal(j.Mean, j.Variance, d.Low, d.High))
		}
	}
	return least
}

// describe is a fitting of an opening in words and figures.
func (c *chooser) describe(i, j int) Choice {
	o, f := c.build.Openings[i], c.fittings[i][j]
	out := Choice{
		Positions: o.Positions, Refs: c.refs(i), Value: f.High, Tolerance: f.Grade(o.Type),
		Text: f.Text, Combine: string(f.Combine), Lots: "one", UnitCost: c.unitCost(i, j), Parts: []Piece{},
	}
	if f.Mixed {
		out.Lots = "mixed"
	}
	var families []string
	for _, p := range f.Pieces {
		families = append(families, p.Family)
		out.Parts = append(out.Parts, Piece{p.Family, p.High, p.Tolerance, p.Text})
	}
	out.Family = strings.Join(families, " + ")
	return out
}

// refs are the references at an opening's positions.
func (m *market) refs(i int) []string {
	var refs []string
	for _, position := range m.build.Openings[i].Positions {
		refs = append(refs, m.build.Place(position).Part.Ref)
	}
	return refs
}

// refsOn are the references of an opening that a choice buys on a line.
func (m *market) refsOn(i, j, id int) []string {
	var refs []string
	for k, piece := range m.fittings[i][j].Pieces {
		if m.know(piece.Part) != id {
			continue
		}
		for _, ref := range m.refs(i) {
			if m.fittings[i][j].Combine != build.Single {
				ref += string(rune('A' + k))
			}
			refs = append(refs, ref)
		}
	}
	return refs
}

// bought is a buying line as one would ask for it.
func (m *market) bought(id int) string {
	p := m.lines[id].part
	words := []string{p.Family}
	if text := p.ValueText(); text != "" {
		words = append(words, text)
	}
	if g := p.Grade(); g > 0 {
		words = append(words, "±"+quantity.Format(g, quantity.Percent, 0))
	}
	return strings.Join(words, " ")
}

// why says what the next cheaper option fails, the others being as chosen.
func (c *chooser) why(choice []int, i, j int) string {
	next, cost := c.nextCheaper(choice, i, j)
	if next < 0 {
		return "the cheapest that is sold"
	}
	other := append([]int(nil), choice...)
	other[i] = next
	name := c.name(i, next)
	saving := offer.Money(c.money(choice) - cost)
	if text := c.misses(other); text != "" {
		return fmt.Sprintf("%s would save %v, but %s", name, saving, text)
	}
	return fmt.Sprintf("%s would save %v here, but not with the other choices", name, saving)
}

// misses says which target a choice fails and by how much; "" where none is
// known.
func (c *chooser) misses(choice []int) string {
	if text := c.answers[fmt.Sprint(choice)]; text != "" {
		return "meets " + text
	}
	if v := c.asked().wholly(choice); !v.Meets {
		t := c.build.Targets[c.demands[v.Worst].target]
		return fmt.Sprintf("on %q, to first order, %s", t.Name, c.predicted(choice, v.Worst))
	}
	return ""
}

// nextCheaper is the dearest option that makes the order cheaper, and the
// order's money with it; -1 where there is none.
func (c *chooser) nextCheaper(choice []int, i, j int) (int, int64) {
	best, money := -1, int64(math.MinInt64)
	own := c.money(choice)
	other := append([]int(nil), choice...)
	for k := range c.fittings[i] {
		other[i] = k
		if cost := c.money(other); k != j && cost < own && cost > money {
			best, money = k, cost
		}
	}
	return best, money
}

// name is an option as people call it.
func (c *chooser) name(i, j int) string {
	f, o := c.fittings[i][j], c.build.Openings[i]
	var words []string
	for _, p := range f.Pieces {
		text := p.Family
		if p.Tolerance > 0 {
			text += " " + quantity.Format(p.Tolerance, quantity.Percent, 0)
		}
		if len(o.Values) > 0 || len(f.Pieces) > 1 {
			text += " " + p.Text
		}
		words = append(words, text)
	}
	text := strings.Join(words, " and ")
	if f.Combine != build.Single {
		text += " in " + string(f.Combine)
	}
	if len(o.Lots) > 1 && f.Mixed {
		text += " from mixed lots"
	}
	return text
}
