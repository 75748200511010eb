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
)

// problem compiles the openings into a search.
func (c *chooser) problem() (*Problem, error) {
	pictures, err := newPictures(c)
	if err != nil {
		return nil, err
	}
	c.pictures = pictures
	p := &Problem{Cost: c.cost, Judge: pictures.judge, Confirm: c.confirm, Base: c.fixedMoney()}
	for i := range c.fittings {
		var line Line
		for _, f := range c.fittings[i] {
			line.Options = append(line.Options, Option{Floor: c.floor(i, f)})
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

// fixedMoney is what the parts that are not open cost by themselves.
func (c *chooser) fixedMoney() int64 {
	open := c.openRefs()
	parts := c.build.Parts()
	fixed := parts[:0:0]
	for _, p := range parts {
		if !open[p.Ref] {
			fixed = append(fixed, p)
		}
	}
	return int64(c.order(fixed).Total)
}

// floor is the least that an option can add to the money: its own price where
// nothing else can be bought on its line; otherwise the least over every number
// of pieces that others may put there.
func (c *chooser) floor(i int, f build.Fitting) int64 {
	own := len(c.build.Openings[i].Positions)
	least := int64(math.MaxInt64)
	for others := range c.company(i, f) {
		with, _ := c.buying(f.Part, others+own)
		without, _ := c.buying(f.Part, others)
		least = min(least, int64(with-without))
	}
	return least
}

// company is every number of pieces a unit that others may put on a fitting's
// line.
func (c *chooser) company(i int, f build.Fitting) map[int]bool {
	key := order.Key(f.Part)
	counts := map[int]bool{c.fixedCount(key): true}
	for j, others := range c.fittings {
		if j == i || !slices.ContainsFunc(others, func(o build.Fitting) bool { return order.Key(o.Part) == key }) {
			continue
		}
		for _, n := range slices.Collect(maps.Keys(counts)) {
			counts[n+len(c.build.Openings[j].Positions)] = true
		}
	}
	return counts
}

// fixedCount is how many parts that are not open are bought on a line.
func (c *chooser) fixedCount(key string) int {
	open := c.openRefs()
	n := 0
	for _, p := range c.build.Parts() {
		if !open[p.Ref] && order.Key(p) == key {
			n++
		}
	}
	return n
}

// equations name what a choice's graph follows from: the nominal values and
// which terms its parts' scatter has. Where two lines buy the same piece they
// share a lot, so such a choice stands for itself alone.
func (p *pictures) equations(choice []int) string {
	var none part.Spread
	var b strings.Builder
	bought := map[string]bool{}
	for i, j := range choice {
		f := p.fittings[i][j]
		key := order.Key(f.Part)
		if bought[key] || p.fixedCount(key) > 0 {
			return "choice " + fmt.Sprint(choice)
		}
		bought[key] = true
		for _, q := range f.Part.Parameters {
			fmt.Fprintf(&b, "%g %v %v %v %v %v %v;", q.Value, q.Absolute, q.Law, q.Temperature == none,
				q.Humidity == none, q.Ageing.Spread == none, q.Ageing.Per)
		}
		b.WriteByte('|')
	}
	return b.String()
}
