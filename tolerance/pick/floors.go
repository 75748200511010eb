package pick

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"

	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
)

// problem compiles the openings into a search.
func (c *chooser) problem() (*exact.Problem, error) {
	pictures, err := newPictures(c)
	if err != nil {
		return nil, err
	}
	c.pictures = pictures
	p := &exact.Problem{Cost: c.cost, Judge: pictures.quickly, Confirm: c.confirm, Base: c.rest}
	for i := range c.fittings {
		var line exact.Line
		for j := range c.fittings[i] {
			line.Options = append(line.Options, exact.Option{Floor: c.floor(i, j)})
		}
		p.Lines = append(p.Lines, line)
	}
	return p, nil
}

// refs are the references at an opening's positions.
func (c *chooser) refs(i int) []string {
	var refs []string
	for _, position := range c.build.Openings[i].Positions {
		refs = append(refs, c.build.Place(position).Part.Ref)
	}
	return refs
}

// openRefs are the references of everything that is still to be chosen.
func (c *chooser) openRefs() map[string]bool {
	open := map[string]bool{}
	for i := range c.fittings {
		for _, ref := range c.refs(i) {
			open[ref] = true
		}
	}
	return open
}

// countFixed counts the parts that are not open on each buying line.
func (c *chooser) countFixed() {
	c.fixed = map[string]int{}
	for _, p := range c.fixedParts() {
		c.fixed[order.Key(p)]++
	}
}

// fixedParts are the parts that are not open.
func (c *chooser) fixedParts() []part.Part {
	open := c.openRefs()
	var fixed []part.Part
	for _, p := range c.build.Parts() {
		if !open[p.Ref] {
			fixed = append(fixed, p)
		}
	}
	return fixed
}

// floor is the least that an option can add to the money: its own price where
// nothing else can be bought on its line; otherwise the least over every number
// of pieces that others may put there.
func (c *chooser) floor(i, j int) int64 {
	f := c.fittings[i][j]
	own := len(c.build.Openings[i].Positions)
	least := int64(math.MaxInt64)
	for others := range c.company(i, j) {
		with, without := c.price(f.Part, c.keys[i][j], others+own), c.price(f.Part, c.keys[i][j], others)
		least = min(least, with-without)
	}
	return least
}

// company is every number of pieces a unit that others may put on a fitting's
// line.
func (c *chooser) company(i, j int) map[int]bool {
	key := c.keys[i][j]
	counts := map[int]bool{c.fixed[key]: true}
	for k, others := range c.keys {
		if k == i || !slices.Contains(others, key) {
			continue
		}
		for _, n := range slices.Collect(maps.Keys(counts)) {
			counts[n+len(c.build.Openings[k].Positions)] = true
		}
	}
	return counts
}

// equations name what a choice's graph follows from on a group's lines: the
// nominal values and which terms the parts' scatter has. Where two lines buy the
// same piece they share a lot, so such a choice stands for itself alone.
func (p *pictures) equations(g *group, choice []int) (name string, alone bool) {
	var b strings.Builder
	bought := map[string]bool{}
	for _, i := range g.lines {
		j := choice[i]
		key := p.keys[i][j]
		if bought[key] || p.fixed[key] > 0 {
			return "choice " + fmt.Sprint(choice), true
		}
		bought[key] = true
		b.WriteString(p.signs[i][j])
	}
	return b.String(), false
}

// sign names what a part's equations follow from.
func sign(f build.Fitting) string {
	var none part.Spread
	var b strings.Builder
	for _, q := range f.Part.Parameters {
		if len(q.Bias) > 0 {
			fmt.Fprintf(&b, "%v of %g;", q.Bias, f.Part.Rated)
		}
		fmt.Fprintf(&b, "%g %v %v %v %v %v %v;", q.Value, q.Absolute, q.Law, q.Temperature == none,
			q.Humidity == none, q.Ageing.Spread == none, q.Ageing.Per)
	}
	return b.String() + "|"
}
