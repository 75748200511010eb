package pick

import (
	"context"
	"maps"
	"slices"
	"time"

	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
)

// Options say how a build's openings are chosen.
type Options struct {
	Seed       uint64            // of the simulation that confirms
	Units      int               // that it simulates at least
	SearchFor  time.Duration     // after which the best found so far is taken; 0: as long as it takes
	Alternates int               // of each line that are looked for at most
	Progress   func(text string) // nil: not called

	limits exact.Limits // smaller ones, for tests
	few    int          // combinations up to which none is bounded by effects that add up; 0: manyChoices
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
	c, err := newChooser(ctx, b, o)
	if err != nil {
		return nil, nil, err
	}
	if r, fitted, err := c.withoutSearch(); r != nil || err != nil {
		return r, fitted, err
	}
	found, err := c.cheapest()
	if err != nil {
		return nil, nil, err
	}
	r, fitted, err := c.result(found)
	if err != nil || found.Choice == nil || !found.Proved { // what there was time for is used up
		return r, fitted, err
	}
	aside := c.aside()
	if err := aside.addAlternates(r, found.Choice); err != nil {
		return nil, nil, err
	}
	return r, fitted, aside.addBinding(r, found.Choice)
}

// chooser turns a build's openings into a problem.
type chooser struct {
	Options
	*pictures
	context  context.Context
	end      time.Time // of the search; zero: none
	floors   [][]int64 // of each opening's fittings
	worse    [][]bool  // those that another one stands in for
	trials   []*trial
	answers  map[string]string // of choices simulated: "" where confirmed, else why not
	refusals int
}

func newChooser(ctx context.Context, b *build.Build, o Options) (*chooser, error) {
	c := &chooser{Options: o, context: ctx, answers: map[string]string{}}
	if o.SearchFor > 0 {
		c.end = time.Now().Add(o.SearchFor)
	}
	m, err := newMarket(b)
	if err != nil {
		return nil, err
	}
	if m.unsold() >= 0 || len(b.Openings) == 0 {
		c.pictures = &pictures{market: m}
		return c, nil
	}
	if c.pictures, err = newPictures(m); err != nil {
		return nil, err
	}
	base, err := b.CompileTargets()
	if err != nil {
		return nil, err
	}
	c.makeTrials(base)
	c.worse = c.dominated()
	for i := range c.fittings {
		var floors []int64
		for j := range c.fittings[i] {
			floors = append(floors, c.floor(i, j))
		}
		c.floors = append(c.floors, floors)
	}
	return c, nil
}

// AsideUnits is how many units at most confirm what is said beside a choice:
// alternates, and the price of a tighter target.
const AsideUnits = 6_000

// aside is the chooser for questions beside the choice itself, of which there
// are many: what it simulates, it simulates with fewer units. What is known
// already stands.
func (c *chooser) aside() *chooser {
	own := *c
	own.Units = min(c.Units, AsideUnits)
	own.answers = maps.Clone(c.answers)
	own.trials = nil
	for _, t := range c.trials {
		fresh := *t
		fresh.seen = maps.Clone(t.seen)
		own.trials = append(own.trials, &fresh)
	}
	return &own
}

// withoutSearch is the result where there is nothing to search: no opening, or
// one that nothing offered may fill. The build is then fitted with what stands
// first.
func (c *chooser) withoutSearch() (*Result, *build.Build, error) {
	if len(c.build.Openings) == 0 {
		r, o := emptyResult(), c.order(c.build.Parts())
		r.ProvedCheapest, r.Candidates, r.CostPerUnit, r.Total, r.Bound = true, 1, o.PerUnit, o.Total, o.Total
		return r, c.build, nil
	}
	i := c.unsold()
	if i < 0 {
		return nil, nil, nil
	}
	var first []build.Fitting
	for k, o := range c.build.Openings {
		if len(c.fittings[k]) > 0 {
			first = append(first, c.fittings[k][0])
			continue
		}
		first = append(first, c.build.Fittings(o)[0])
	}
	fitted, err := c.build.Fit(first)
	r := emptyResult()
	r.Why = "the price book offers nothing that may fill " + c.build.Openings[i].Positions[0]
	return r, fitted, err
}

// cheapest searches for the cheapest choice that meets the targets, or else for
// the one that comes nearest.
func (c *chooser) cheapest() (exact.Outcome, error) {
	found, err := c.search(c.asked(), nil)
	if err != nil || found.Choice != nil || c.refusals > 0 {
		return found, err
	}
	// What comes nearest needs every demand.
	s := c.newSearch(c.asked(), nil)
	s.problem.Judge = func(choice []int) exact.Verdict { return s.ask.wholly(s.full(choice)) }
	return s.cheapest()
}

// search looks for the cheapest choice that meets what is asked, without the
// buying lines that are out of stock.
func (c *chooser) search(ask asking, out map[int]bool) (exact.Outcome, error) {
	return c.newSearch(ask, out).cheapest()
}

// limit is the time and work left for a search.
func (c *chooser) limit() exact.Limits {
	l := c.limits
	if !c.end.IsZero() {
		l.For = max(time.Until(c.end), time.Millisecond)
	}
	return l
}

// A searching is one search over some of the fittings.
type searching struct {
	*chooser
	ask     asking
	kept    [][]int // of each opening: its fittings that may be taken
	problem *exact.Problem
}

// newSearch sets a search up over all fittings that take nothing from the
// lines that are out of stock.
func (c *chooser) newSearch(ask asking, out map[int]bool) *searching {
	s := &searching{chooser: c, ask: ask}
	s.problem = &exact.Problem{
		Base:    c.rest,
		Cost:    func(choice []int) int64 { return c.money(s.full(choice)) },
		Judge:   func(choice []int) exact.Verdict { return ask.quickly(s.full(choice)) },
		Confirm: func(choice []int) (bool, error) { return c.confirm(s.full(choice)) },
	}
	worse := c.worse
	if len(out) > 0 { // what stands in for another may be out itself
		worse = none(c.worse)
	}
	for i := range c.fittings {
		var kept []int
		var l exact.Line
		for j := range c.fittings[i] {
			if !slices.ContainsFunc(c.buys[i][j], func(p purchase) bool { return out[p.line] }) {
				kept = append(kept, j)
				l.Options = append(l.Options, exact.Option{Floor: c.floors[i][j], Dominated: worse[i][j]})
			}
		}
		s.kept = append(s.kept, kept)
		s.problem.Lines = append(s.problem.Lines, l)
	}
	return s
}

// none marks nothing.
func none(marks [][]bool) [][]bool {
	var list [][]bool
	for _, m := range marks {
		list = append(list, make([]bool, len(m)))
	}
	return list
}

// full is a choice among the fittings kept, as one among all.
func (s *searching) full(choice []int) []int {
	all := make([]int, len(choice))
	for i, j := range choice {
		all[i] = s.kept[i][j]
	}
	return all
}

// cheapest runs the search.
func (s *searching) cheapest() (exact.Outcome, error) {
	if slices.ContainsFunc(s.kept, func(kept []int) bool { return len(kept) == 0 }) {
		return exact.Outcome{Proved: true}, nil // an opening has nothing left
	}
	found, err := s.run()
	if found.Choice != nil {
		found.Choice = s.full(found.Choice)
	}
	if found.Nearest != nil {
		found.Nearest = s.full(found.Nearest)
	}
	return found, err
}

// run searches by the choices' own pictures alone, or, where there are too many
// of them, with effects that add up to bound by.
func (s *searching) run() (exact.Outcome, error) {
	if s.few() {
		return s.problem.Cheapest(s.context, s.limit())
	}
	a, err := s.addEffects()
	if err != nil {
		return exact.Outcome{}, err
	}
	return a.cheapest()
}

// few says whether every combination could be judged by its own picture.
func (s *searching) few() bool {
	most := s.Options.few
	if most == 0 {
		most = manyChoices
	}
	n := 1
	for _, kept := range s.kept {
		if n *= len(kept); n > most {
			return false
		}
	}
	return true
}

// money is what a choice costs.
func (c *chooser) money(choice []int) int64 {
	if cost, ok := c.cost(choice); ok {
		return cost
	}
	return exact.Unavailable
}
