package pick

import (
	"context"
	"fmt"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
)

// Options say how a build's openings are chosen.
type Options struct {
	Seed     uint64 // of the simulation that confirms
	Units    int    // that it simulates at least
	Limits   exact.Limits
	Progress func(text string) // nil: not called
}

// Choose fills a build's openings with the cheapest parts by its price book
// that meet its targets. The search works on a linear picture that errs on the
// generous side; every choice that this picture lets pass is simulated, in
// order of price, and the first that the simulation confirms is returned with
// the build fitted with it.
//
// Where nothing meets the targets, Result.Choices is what comes nearest, and
// Result.Why says that.
func Choose(ctx context.Context, b *build.Build, o Options) (*Result, *build.Build, error) {
	c, err := newChooser(b, o)
	if err != nil {
		return nil, nil, err
	}
	c.context = ctx
	if len(b.Openings) == 0 {
		return &Result{Choices: []Choice{}, ProvedCheapest: true, Candidates: 1, CostPerUnit: c.order(b.Parts()).PerUnit}, b, nil
	}
	if r := c.unsold(); r != nil {
		fitted, err := b.Fit(c.base)
		return r, fitted, err
	}
	problem, err := c.problem()
	if err != nil {
		return nil, nil, err
	}
	found, err := problem.Cheapest(ctx, o.Limits)
	if err != nil {
		return nil, nil, err
	}
	if found.Choice == nil && len(c.refused) == 0 { // what comes nearest needs every demand
		problem.Judge = c.pictures.wholly
		if found, err = problem.Cheapest(ctx, o.Limits); err != nil {
			return nil, nil, err
		}
	}
	return c.result(found)
}

// chooser turns a build's openings into a problem.
type chooser struct {
	Options
	context  context.Context
	build    *build.Build
	fittings [][]build.Fitting // sold ones, of each opening
	keys     [][]string        // their buying lines
	base     []build.Fitting   // the first of each
	fixed    map[string]int    // parts that are not open, by buying line
	rest     int64             // the money for those
	prices   map[lineCount]int64
	pictures *pictures
	refused  map[string]string // choices that the simulation refused, and why
}

// newChooser lists what may fill each opening and is offered.
func newChooser(b *build.Build, o Options) (*chooser, error) {
	c := &chooser{Options: o, build: b, refused: map[string]string{}, prices: map[lineCount]int64{}}
	for _, opening := range b.Openings {
		var sold []build.Fitting
		all := b.Fittings(opening)
		for _, f := range all {
			if c.offered(f.Part, len(opening.Positions)) {
				sold = append(sold, f)
			}
		}
		if len(all) == 0 {
			return nil, fmt.Errorf("pick: nothing can fill %s", opening.Positions[0])
		}
		c.fittings = append(c.fittings, sold)
		keys := make([]string, len(sold))
		for j, f := range sold {
			keys[j] = order.Key(f.Part)
		}
		c.keys = append(c.keys, keys)
		if len(sold) > 0 {
			all = sold
		}
		c.base = append(c.base, all[0])
	}
	c.countFixed()
	c.rest = int64(c.order(c.fixedParts()).Total)
	return c, nil
}

// offered says whether the price book sells enough of a part.
func (c *chooser) offered(p part.Part, perUnit int) bool {
	_, ok := c.buying(p, perUnit)
	return ok
}

// buying is the money for a part in every unit, spares included.
func (c *chooser) buying(p part.Part, perUnit int) (offer.Money, bool) {
	parts := make([]part.Part, perUnit)
	for i := range parts {
		parts[i] = p
		parts[i].Ref = fmt.Sprintf("X%d", i+1)
	}
	o := c.order(parts)
	return o.Total, len(o.Unoffered) == 0
}

func (c *chooser) order(parts []part.Part) order.Order {
	return order.New(parts, c.build.Units, c.build.Spares, c.build.Book, c.build.Families)
}

// unsold is the result where an opening has nothing that is offered.
func (c *chooser) unsold() *Result {
	for i, sold := range c.fittings {
		if len(sold) == 0 {
			return &Result{Choices: []Choice{}, Why: fmt.Sprintf(
				"the price book offers nothing that may fill %s", c.build.Openings[i].Positions[0])}
		}
	}
	return nil
}

// fit is the build fitted with a choice.
func (c *chooser) fit(choice []int) (*build.Build, error) {
	fittings := make([]build.Fitting, len(choice))
	for i, j := range choice {
		fittings[i] = c.fittings[i][j]
	}
	return c.build.Fit(fittings)
}

// cost is the exact money of a choice: what is bought on each of its lines
// together with whatever else is bought there, and the rest of the order.
func (c *chooser) cost(choice []int) int64 {
	counts := make(map[string]int, len(choice))
	total := c.rest
	for i, j := range choice {
		key := c.keys[i][j]
		if _, there := counts[key]; !there {
			counts[key] = c.fixed[key]
			total -= c.price(c.fittings[i][j].Part, key, c.fixed[key])
		}
		counts[key] += len(c.build.Openings[i].Positions)
	}
	for i, j := range choice {
		if key := c.keys[i][j]; counts[key] > 0 {
			total += c.price(c.fittings[i][j].Part, key, counts[key])
			counts[key] = 0
		}
	}
	return total
}

// price is the money for some pieces a unit on one line.
func (c *chooser) price(p part.Part, key string, perUnit int) int64 {
	if perUnit == 0 {
		return 0
	}
	k := lineCount{key, perUnit}
	money, known := c.prices[k]
	if !known {
		bought, _ := c.buying(p, perUnit)
		money = int64(bought)
		c.prices[k] = money
	}
	return money
}

// lineCount is a buying line and how many of its pieces a unit takes.
type lineCount struct {
	key   string
	count int
}
