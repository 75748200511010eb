package pick

import (
	"slices"
	"sort"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/tolerance/spread"
)

// addAlternates finds, for every buying line of a choice that was open, the
// cheapest choices that do without it and meet every target, and notes the
// lines for which there is none.
func (c *chooser) addAlternates(r *Result, choice []int) error {
	if c.Alternates <= 0 {
		return nil
	}
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
	if c.lines[id].fixed > 0 {
		c.addIrreplaceable(r, choice, id, "parts that are not open come from it too")
		return nil
	}
	out := map[int]bool{id: true}
	for n := range c.Alternates {
		found, err := c.search(c.asked(), out)
		switch {
		case err != nil:
			return err
		case found.Choice == nil && n == 0 && found.Proved:
			c.addIrreplaceable(r, choice, id, "no choice without it meets every target")
		case found.Choice == nil && n == 0:
			c.addIrreplaceable(r, choice, id, "the search ended before a choice without it was found")
		}
		if found.Choice == nil {
			return nil
		}
		r.Alternates = append(r.Alternates, c.alternate(choice, found.Choice, id, found.Cost))
		if !c.takeOut(out, choice, found.Choice) {
			return nil // the next would be the same again
		}
	}
	return nil
}

// takeOut adds the lines that another choice takes in the place of those of
// the choice made, and says whether there are any.
func (c *chooser) takeOut(out map[int]bool, choice, other []int) bool {
	found := false
	for i, j := range other {
		for _, p := range c.buys[i][j] {
			if !c.takesFrom(choice, p.line) {
				out[p.line], found = true, true
			}
		}
	}
	return found
}

// addIrreplaceable notes a line without an alternate.
func (c *chooser) addIrreplaceable(r *Result, choice []int, id int, why string) {
	r.Irreplaceable = append(r.Irreplaceable, Irreplaceable{c.refsOf(choice, id), c.bought(id), why})
}

// refsOf are the references that a choice puts on a line.
func (c *chooser) refsOf(choice []int, id int) []string {
	var refs []string
	for i, j := range choice {
		refs = append(refs, c.refsOn(i, j, id)...)
	}
	sort.Slice(refs, func(x, y int) bool { return order.Less(refs[x], refs[y]) })
	return refs
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
	a := Alternate{More: offer.Money(cost - c.money(choice)), Refs: c.refsOf(choice, id), Line: c.bought(id), Instead: []Choice{}, Drifts: []Moved{}}
	for i, j := range choice {
		if other[i] != j {
			a.Instead = append(a.Instead, c.describe(i, other[i]))
		}
	}
	for _, t := range c.changes() {
		target := c.build.Targets[t]
		a.Drifts = append(a.Drifts, Moved{target.Name, target.Unit.Symbol, spread.Figure(c.steadiness(choice, t)), spread.Figure(c.steadiness(other, t))})
	}
	return a
}
