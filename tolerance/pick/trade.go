package pick

import (
	"context"
	"fmt"
	"math"

	"batchwright/bom/offer"
	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick/exact"
	"batchwright/tolerance/spread"
)

// Trade is every efficient trade between the order's money and how far a
// change stays from none: no choice that meets the other targets is both as
// cheap and steadier, or cheaper and as steady, to first order. The target
// itself is not asked.
type Trade struct {
	Target   string       `json:"target"`
	Asked    string       `json:"asked"`
	Unit     string       `json:"unit"`
	Share    float64      `json:"share"` // of the units, whose change is meant; 0: every corner
	Points   []TradePoint `json:"points"`
	Complete bool         `json:"complete"` // proved: nothing efficient is left out
	Beaten   int          `json:"beaten"`   // points left out because another one is cheaper and, in simulation, as steady
	Examined int          `json:"examined"`
	Tried    int          `json:"simulated"` // combinations put through a simulation
	Searches int          `json:"searches"`
	Why      string       `json:"why,omitempty"`
	Provided string       `json:"provided,omitempty"` // what the proof rests on beside the picture
}

// TradePoint is one efficient choice.
type TradePoint struct {
	Choices   []Choice      `json:"picks"`
	Total     offer.Money   `json:"total"`
	PerUnit   offer.Money   `json:"cost_per_unit"`
	Predicted spread.Figure `json:"predicted"` // half width, to first order
	Simulated spread.Figure `json:"simulated"`
	Complying spread.Figure `json:"complying"` // share of the simulated units within the target's limits
	Met       bool          `json:"met"`
	choice    []int
}

// Changes are the names of the targets whose steadiness can be traded for
// money: those on changes.
func Changes(b *build.Build) []string {
	var names []string
	for _, t := range b.Targets {
		if t.Trim < 0 && t.ChangeFrom >= 0 {
			names = append(names, t.Name)
		}
	}
	return names
}

// Efficient walks the trade for a target, one of Changes, from the cheapest
// choice on as far as the money goes.
func Efficient(ctx context.Context, b *build.Build, target string, most offer.Money, o Options) (*Trade, error) {
	t, err := newTrader(ctx, b, target, o)
	if err != nil {
		return nil, err
	}
	return t.trade(most)
}

// trader walks one trade.
type trader struct {
	*chooser // with the target's limits left open
	asked    build.Target
	target   int
	sums     *additive // of a search too large to judge whole; nil before it is needed
	failed   error     // what kept it from being made
}

func newTrader(ctx context.Context, b *build.Build, target string, o Options) (*trader, error) {
	c, err := newChooser(ctx, b, o)
	if err != nil {
		return nil, err
	}
	if i := c.unsold(); i >= 0 {
		return nil, fmt.Errorf("the price book offers nothing that may fill %s", b.Openings[i].Positions[0])
	}
	for i, t := range b.Targets {
		if t.Name == target {
			open := t
			open.Low, open.High = math.Inf(-1), math.Inf(1)
			return &trader{chooser: c.varied(i, open), asked: t, target: i}, nil
		}
	}
	return nil, fmt.Errorf("pick: no target %q", target)
}

// trade walks and then simulates the points found.
func (t *trader) trade(most offer.Money) (*Trade, error) {
	out := &Trade{Target: t.asked.Name, Asked: t.asked.Asked, Unit: t.asked.Unit.Symbol, Share: t.asked.Share, Points: []TradePoint{}}
	if t.asked.WorstCase {
		out.Share = 0
	}
	walk, err := exact.Trade(t.context, t.limit(), int64(most), t.problem, func(choice []int) float64 { return t.steadiness(choice, t.target) })
	if t.failed != nil {
		return nil, t.failed
	}
	if err != nil {
		return nil, err
	}
	out.Complete, out.Examined, out.Tried, out.Searches = walk.Complete && !t.beyond(), walk.Examined, walk.Simulated, walk.Searches
	if out.Complete && t.sums != nil {
		out.Provided = provided
	}
	if !out.Complete {
		out.Why = "the search ended early; steadier choices may be missing"
	}
	if len(walk.Points) == 0 {
		out.Why = t.outOfReach(walk.Last)
	}
	for _, p := range walk.Points {
		if err := t.add(out, p); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// problem is the search for what is steadier than that.
func (t *trader) problem(below float64) *exact.Problem {
	ask := t.chooser.asked()
	if !math.IsInf(below, 1) {
		for k, d := range t.pictures.demands {
			if d.target == t.target {
				ask.demands[k].Low, ask.demands[k].High = -below, below
			}
		}
		ask.also = func(choice []int) bool { return t.steadiness(choice, t.target) < below }
	}
	s := t.newSearch(ask, nil)
	if s.few() {
		return s.problem
	}
	return t.bounded(s)
}

// bounded gives a search the effects, which are taken once, to bound by.
func (t *trader) bounded(s *searching) *exact.Problem {
	if t.sums == nil {
		a, err := s.addEffects()
		if err != nil {
			t.failed = err
			return s.problem
		}
		a.widen()
		t.sums = a
		return s.problem
	}
	t.sums.searching = s
	t.sums.watch()
	t.sums.demand(t.sums.margins)
	return s.problem
}

// beyond says whether a choice was met outside the margins.
func (t *trader) beyond() bool { return t.sums != nil && t.sums.beyond }

// add simulates a point and keeps it unless a cheaper one is as steady.
func (t *trader) add(out *Trade, p exact.Point) error {
	b, err := t.fit(p.Choice)
	if err != nil {
		return err
	}
	only := *b
	only.Targets = []build.Target{t.asked}
	m, err := only.CompileTargets()
	if err != nil {
		return err
	}
	j, err := spread.Judge(t.context, m, spread.Options{Seed: t.Seed, Units: t.Units})
	if err != nil {
		return err
	}
	o := t.order(b.Parts())
	point := TradePoint{
		Total: o.Total, PerUnit: o.PerUnit, Predicted: spread.Figure(p.Measure), choice: p.Choice,
		Complying: j.Targets[0].Share, Met: j.Targets[0].Met,
	}
	for _, c := range j.Targets[0].Changes {
		point.Simulated = max(point.Simulated, c.HalfWidth)
	}
	if n := len(out.Points); n > 0 && !(point.Simulated < out.Points[n-1].Simulated) {
		out.Beaten++
		return nil
	}
	for i, k := range p.Choice {
		point.Choices = append(point.Choices, t.describe(i, k))
	}
	out.Points = append(out.Points, point)
	return nil
}

// Steadiest is the choice with the steadiest change that a price allows, as
// Choose gives the cheapest.
func Steadiest(ctx context.Context, b *build.Build, target string, most offer.Money, o Options) (*Result, *build.Build, error) {
	t, err := newTrader(ctx, b, target, o)
	if err != nil {
		return nil, nil, err
	}
	found, err := t.trade(most)
	if err != nil {
		return nil, nil, err
	}
	if len(found.Points) == 0 {
		r := emptyResult()
		r.Why = fmt.Sprintf("nothing within %v: %s", most, found.Why)
		return r, b, nil
	}
	return t.steadiest(found, most)
}

// steadiest makes a result of the last point of a trade.
func (t *trader) steadiest(found *Trade, most offer.Money) (*Result, *build.Build, error) {
	p := found.Points[len(found.Points)-1]
	whole := t.varied(t.target, t.asked) // for its verdict
	r := emptyResult()
	r.Choices, r.Total, r.CostPerUnit, r.Bound = p.Choices, p.Total, p.PerUnit, p.Total
	r.Examined, r.Simulated, r.Searched = found.Examined, found.Tried, fmt.Sprintf("the steadiest %s within %v", found.Target, most)
	r.Candidates, r.Provided = t.candidates(), found.Provided
	if !found.Complete {
		r.Why = found.Why
	}
	for i := range r.Choices {
		r.Choices[i].Why = t.whySteadiest(p.choice, i, found)
		r.Fittings = append(r.Fittings, t.fittings[i][p.choice[i]])
	}
	if err := whole.report(r, p.choice); err != nil {
		return nil, nil, err
	}
	fitted, err := whole.fit(p.choice)
	return r, fitted, err
}

// whySteadiest says what the next cheaper option for an opening would do to the
// change, the others being as chosen.
func (t *trader) whySteadiest(choice []int, i int, found *Trade) string {
	next, cost := t.nextCheaper(choice, i, choice[i])
	if next < 0 {
		return "the cheapest that is sold"
	}
	other := append([]int(nil), choice...)
	other[i] = next
	unit, saving := t.asked.Unit, offer.Money(t.money(choice)-cost)
	if text := t.misses(other); text != "" {
		return fmt.Sprintf("%s would save %v, but %s", t.name(i, next), saving, text)
	}
	return fmt.Sprintf("%s would save %v, with %s within %s instead of %s to first order", t.name(i, next),
		saving, found.Target, quantity.Format(t.steadiness(other, t.target), unit, 3), quantity.Format(t.steadiness(choice, t.target), unit, 3))
}
