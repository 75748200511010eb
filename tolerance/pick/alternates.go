package pick

import (
	"slices"
	"sort"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/tolerance/spread"
)

// addAlternates finds, for every buying line of a choice that was open, the
// cheapest choices that do without it, and notes those that meet every target.
func (c *chooser) addAlternates(r *Result, choice []int) error {
	r.Alternates = []Alternate{}
	seen := map[int]bool{}
	for i, j := range choice {
		for _, p := range c.buys[i][j] {
			if seen[p.line] {
				continue
			}
			seen[p.line] = true
			if err := c.addAlternatesOf(r, choice, p.line); err != nil {
				return err
			}
		}
	}
	return nil
}

// addAlternatesOf finds the choices that do without one line: the cheapest, and
// then the cheapest without what that one takes in its place either.
func (c *chooser) addAlternatesOf(r *Result, choice []int, id int) error {
	out := map[int]bool{id: true}
	for range c.Alternates {
		found, err := c.search(c.asked(), out)
		if err != nil {
			return err
		}
		if found.Choice == nil {
			return nil
		}
		r.Alternates = append(r.Alternates, c.alternate(choice, found.Choice, id, found.Cost))
		for i, j := range found.Choice {
			for _, p := range c.buys[i][j] {
				if !c.takesFrom(choice, p.line) {
					out[p.line] = true
				}
			}
		}
	}
	return nil
}

// takesFrom says whether a choice buys on a line.
func (c *chooser) takesFrom(choice []int, id int) bool {
	for i, j := range choice {
		if slices.ContainsFunc(c.buys[i][j], func(p purchase) bool { return p.line == id }) {
			return true
		}
	}
	return false
}

// alternate compares another choice with the one made.
func (c *chooser) alternate(choice, other []int, id int, cost int64) Alternate {
	a := Alternate{More: offer.Money(cost - c.money(choice)), Line: c.bought(id), Instead: []Choice{}, Drifts: []Moved{}}
	for i, j := range choice {
		a.Refs = append(a.Refs, c.refsOn(i, j, id)...)
		if other[i] != j {
			a.Instead = append(a.Instead, c.describe(i, other[i]))
		}
	}
	sort.Slice(a.Refs, func(x, y int) bool { return order.Less(a.Refs[x], a.Refs[y]) })
	for _, t := range c.changes() {
		target := c.build.Targets[t]
		a.Drifts = append(a.Drifts, Moved{target.Name, target.Unit.Symbol, spread.Figure(c.steadiness(choice, t)), spread.Figure(c.steadiness(other, t))})
	}
	return a
}
