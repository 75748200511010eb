// Package compare puts parts side by side: the same build with one part after
// another in some positions, every case drawn alike, so that what differs is
// the parts and not the draw.
package compare

import (
	"context"

	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// Most is how many cases one comparison takes: more are not looked at.
const Most = 60

// Units are simulated for each case where nothing is said: a share near one
// half is then good to some 2 %, differences to less.
const Units = 4_800

// Options say what is put where. An empty list leaves that as the base has it.
type Options struct {
	At         []string // positions, of one type of part
	Families   []string
	Tolerances []float64 // empty: build.ClosestGrade of each family
	Values     []build.Worth
	Lots       []build.Lots
	Outputs    []build.OutputName // whose drift is told; empty: build.Drifting
}

// Result is what a comparison comes to.
type Result struct {
	Build      *build.Build
	Seed       uint64
	Simulation spread.Simulation
	Type       part.Type
	Lines      []Line
	Cases      []Case
	LeftOut    []LeftOut
	Notes      []string
	base       int
	outputs    []build.OutputName
}

// Line is a buying line whose parts are exchanged.
type Line struct {
	Positions []string // the first decides, the others take the same
	Refs      []string
}

// LeftOut is a combination that no family sells.
type LeftOut struct{ Label, Why string }

// Case is one choice of parts, and what it does.
type Case struct {
	Label        string
	Base         bool // what the build has now
	Families     []string
	Tolerances   []float64
	Values       []string // as people write them
	Lots         build.Lots
	Sizes        []string       // of the parts' bodies
	Temperatures *spread.Limits // °C, that all the parts stand; nil: unsaid
	Beyond       []string       // conditions whose ambient temperature is outside those

	Drifts     []spread.PerKelvin
	Judgement  *spread.Judgement
	Order      order.Order
	NotOffered string // why the parts cannot be bought; "" where they can

	Targets []Difference // from the base's share of complying units, as Judgement.Targets
	Yield   Difference   // from the base's share of good units
	Verdict Verdict
	Why     string // one clause, from the numbers

	build *build.Build
	parts []part.Part // of the lines, one each or the two of a pair
}

// Base is the case that the others are compared with.
func (r *Result) Base() *Case { return &r.Cases[r.base] }

// AnyMeetsAll says whether some case meets every target.
func (r *Result) AnyMeetsAll() bool {
	for _, c := range r.Cases {
		if c.missed() == 0 {
			return true
		}
	}
	return false
}

// missed is how many targets a case misses.
func (c *Case) missed() int {
	n := 0
	for _, t := range c.Judgement.Targets {
		if !t.Met {
			n++
		}
	}
	return n
}

// Run works out every case, one after the other. next, where not nil, is told
// of each before it begins.
func (r *Result) Run(ctx context.Context, o spread.Options, next func(label string)) error {
	r.Seed = o.Seed
	for i := range r.Cases {
		if next != nil {
			next(r.Cases[i].Label)
		}
		if err := r.work(ctx, &r.Cases[i], o); err != nil {
			return err
		}
	}
	base := r.Base()
	r.Simulation = base.Judgement.Simulation
	units := r.Build.Units
	for i := range r.Cases {
		c := &r.Cases[i]
		c.Yield = Paired(c.Judgement.Good, base.Judgement.Good, units)
		for t := range c.Judgement.Targets {
			c.Targets = append(c.Targets, Paired(c.Judgement.Targets[t].Complying, base.Judgement.Targets[t].Complying, units))
		}
	}
	for i := range r.Cases {
		r.explain(&r.Cases[i])
	}
	r.Notes = append(r.Notes, r.unoffered()...)
	return nil
}

// work simulates one case and orders its parts.
func (r *Result) work(ctx context.Context, c *Case, o spread.Options) error {
	m, err := c.build.CompileTargets()
	if err != nil {
		return err
	}
	if c.Judgement, err = spread.Judge(ctx, m, o); err != nil {
		return err
	}
	for _, output := range r.outputs {
		d, err := spread.DriftPerKelvin(c.build, output)
		if err != nil {
			return err
		}
		c.Drifts = append(c.Drifts, d)
	}
	b := c.build
	c.Order = order.New(b.Parts(), b.Units, b.Spares, b.Book, b.Families)
	for _, l := range c.Order.Unoffered {
		if r.exchanged(l) {
			c.NotOffered = l.Why
		}
	}
	return ctx.Err()
}
