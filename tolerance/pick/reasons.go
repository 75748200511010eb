package pick

import (
	"fmt"
	"math"
	"slices"

	"batchwright/bom/offer"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
)

// result puts what the search found into the build's terms.
func (c *chooser) result(found exact.Outcome) (*Result, *build.Build, error) {
	r := &Result{
		Choices: []Choice{}, ProvedCheapest: found.Proved && found.Choice != nil,
		Candidates: found.Candidates, Examined: found.Examined, Simulated: found.Simulated,
	}
	choice := found.Choice
	switch {
	case choice == nil:
		choice = found.Nearest
		r.Why = c.outOfReach(found)
	case !found.Proved:
		r.Why = fmt.Sprintf("the search ended early; nothing cheaper than %v exists, %.2g %% below this", offer.Money(found.Bound), 100*found.Gap())
	}
	if choice == nil {
		choice = make([]int, len(c.fittings))
	}
	fitted, err := c.fit(choice)
	if err != nil {
		return nil, nil, err
	}
	for i, j := range choice {
		r.Choices = append(r.Choices, c.choice(choice, i, j))
	}
	r.CostPerUnit = c.order(fitted.Parts()).PerUnit
	return r, fitted, nil
}

// outOfReach says which target no choice meets, and how near the best comes.
func (c *chooser) outOfReach(found exact.Outcome) string {
	if found.Nearest == nil {
		return "the search ended before any choice was judged"
	}
	if text, ok := c.refused[fmt.Sprint(found.Nearest)]; ok {
		return "no choice meets every target in simulation; the one nearest meets " + text
	}
	worst := found.NearestVerdict.Worst
	t := c.build.Targets[c.pictures.demands[worst].target]
	text := fmt.Sprintf("no choice meets the target %q (%s)", t.Name, t.Asked)
	if !found.NearestVerdict.Meets {
		text += "; the nearest, to first order, " + c.predicted(found.Nearest, worst)
	}
	return text
}

// predicted says what the linear picture makes of a demand.
func (c *chooser) predicted(choice []int, k int) string {
	j, ok := c.pictures.demand(choice, k)
	if !ok {
		return "cannot be compiled"
	}
	d := c.pictures.demands[k]
	if d.WorstCase {
		unit := c.build.Targets[d.target].Unit
		full := j.Half / halfSlack
		return fmt.Sprintf("runs from %s to %s", part.Text(j.Mean-full, unit), part.Text(j.Mean+full, unit))
	}
	return fmt.Sprintf("meets it on some %.3g %% of the units", 100*exact.ShareOfNormal(j.Mean, j.Variance, d.Low, d.High))
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

// choice describes what was picked for one opening, and why.
func (c *chooser) choice(choice []int, i, j int) Choice {
	o, f := c.build.Openings[i], c.fittings[i][j]
	cost := c.unitCost(f.Part, len(o.Positions))
	out := Choice{
		Positions: o.Positions, Refs: c.refs(i), Family: f.Family, Tolerance: f.Tolerance, Value: f.High,
		Text: f.Text, Combine: "single", UnitCost: cost,
		Parts: []Piece{{f.Family, f.High, f.Tolerance}},
	}
	out.Why = c.why(choice, i, j)
	return out
}

// unitCost is what one unit's pieces cost at the batch's price.
func (c *chooser) unitCost(p part.Part, perUnit int) offer.Money {
	parts := make([]part.Part, perUnit)
	for i := range parts {
		parts[i] = p
		parts[i].Ref = fmt.Sprintf("X%d", i+1)
	}
	return c.order(parts).PerUnit
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
	saving := offer.Money(c.cost(choice) - cost)
	if text, ok := c.refused[fmt.Sprint(other)]; ok {
		return fmt.Sprintf("%s would save %v, but meets %s", name, saving, text)
	}
	if v := c.pictures.wholly(other); !v.Meets {
		t := c.build.Targets[c.pictures.demands[v.Worst].target]
		return fmt.Sprintf("%s would save %v, but on %q, to first order, %s", name, saving, t.Name, c.predicted(other, v.Worst))
	}
	return fmt.Sprintf("%s would save %v here, but not with the other choices", name, saving)
}

// nextCheaper is the dearest option that makes the order cheaper, and the
// order's money with it; -1 where there is none.
func (c *chooser) nextCheaper(choice []int, i, j int) (int, int64) {
	best, money := -1, int64(math.MinInt64)
	own := c.cost(choice)
	other := append([]int(nil), choice...)
	for k := range c.fittings[i] {
		other[i] = k
		if cost := c.cost(other); k != j && cost < own && cost > money {
			best, money = k, cost
		}
	}
	return best, money
}

// name is an option as people call it.
func (c *chooser) name(i, j int) string {
	f := c.fittings[i][j]
	text := f.Family
	if f.Tolerance > 0 {
		text += " " + quantity.Format(f.Tolerance, quantity.Percent, 0)
	}
	if o := c.build.Openings[i]; len(o.Values) > 0 {
		text += " " + f.Text
	}
	return text
}
