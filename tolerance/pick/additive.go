package pick

import (
	"cmp"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"batchwright/tolerance/pick/exact"
	"batchwright/tolerance/spread"
)

// Up to manyChoices combinations are searched by their own pictures alone.
// Beyond that the search bounds what it has not looked at by effects that add
// up, each taken about one choice. They do not quite: how far they are off is
// measured on sampled choices, and the limits are widened by more than that.
// A choice found further off than this widens them again, and the search is
// begun anew.
const (
	manyChoices = 1 << 14
	samples     = 200
	widening    = 1.5 // of the largest departure among the samples
	widenings   = 4   // at most
)

// additive is the linear picture taken apart by openings.
type additive struct {
	*searching
	base    []int              // the choice about which effects are taken, among those kept
	rest    []exact.Effect     // of each demand: what is not open
	effects [][][]exact.Effect // [opening][kept fitting][demand]
	margins []margin           // of each demand
	loose   []bool             // demands that nothing is known of where effects add up
	beyond  bool               // a choice was judged whose picture lies outside the margins
}

// margin is how far the sum of effects may be from a choice's own picture.
type margin struct {
	mean           float64 // that far to either side
	variance, half float64 // the picture's is at least that share of the sum's
	slack          float64 // of the share, at most
	over           float64 // the picture's variance is at most that many times the sum's
}

// provided is what a proof by effects that add up rests on.
var provided = fmt.Sprintf("the proof takes the effects of parts to add up, off by no more than half as much again as was measured on %d random combinations and on every one judged", samples)

// addEffects gives a search's problem effects to bound by.
func (s *searching) addEffects() (*additive, error) {
	a := &additive{searching: s, base: make([]int, len(s.kept)), margins: make([]margin, len(s.pictures.demands))}
	for q := range a.margins {
		a.margins[q] = margin{variance: 1, half: 1, slack: shareSlack, over: 1}
	}
	if err := a.takeApart(); err != nil {
		return nil, err
	}
	a.loosen()
	r := rand.New(rand.NewPCG(s.Seed, samples))
	choice := make([]int, len(s.kept))
	for range samples {
		for i := range choice {
			choice[i] = r.IntN(len(s.kept[i]))
		}
		a.learn(choice)
	}
	a.beyond = false
	a.watch()
	return a, nil
}

// watch has every choice that the problem judges held against the margins.
func (a *additive) watch() {
	judge := a.problem.Judge
	a.problem.Judge = func(choice []int) exact.Verdict {
		a.learn(choice)
		return judge(choice)
	}
}

// safely gives the problem demands that a choice meets with room to spare: as
// asked, with the variance that lots in common may bring.
func (a *additive) safely() {
	var safe []margin
	for _, m := range a.margins {
		safe = append(safe, margin{variance: m.over, half: 1})
	}
	a.demand(safe)
}

// takeApart finds each fitting's effects, the others being as in the base and
// from other lots: what lots in common change is part of the margins.
func (a *additive) takeApart() error {
	n := len(a.pictures.demands)
	a.rest = make([]exact.Effect, n)
	for i, kept := range a.kept {
		a.effects = append(a.effects, make([][]exact.Effect, len(kept)))
		for j := range kept {
			a.effects[i][j] = make([]exact.Effect, n)
		}
	}
	for _, g := range a.groups {
		base, err := a.apart(g, a.full(a.base))
		if err != nil {
			return err
		}
		for node, q := range g.demands {
			a.rest[q] = a.share(g, base, node, -1)
			a.rest[q].Mean = base.Values[node]
		}
		for _, i := range g.lines {
			if err := a.takeApartLine(g, base, i); err != nil {
				return err
			}
		}
	}
	return nil
}

// loosen gives up bounding demands of which some effect is no number, as where
// a square root has none: only a choice's own picture then judges them.
func (a *additive) loosen() {
	a.loose = make([]bool, len(a.rest))
	for q := range a.rest {
		a.loose[q] = !finite(a.rest[q])
		for _, options := range a.effects {
			a.loose[q] = a.loose[q] || slices.ContainsFunc(options, func(e []exact.Effect) bool { return !finite(e[q]) })
		}
		if !a.loose[q] {
			continue
		}
		a.rest[q] = exact.Effect{}
		for _, options := range a.effects {
			for j := range options {
				options[j][q] = exact.Effect{}
			}
		}
	}
}

// finite says whether an effect is all numbers.
func finite(e exact.Effect) bool {
	sum := math.Abs(e.Mean) + math.Abs(e.Variance) + math.Abs(e.Half)
	return !math.IsNaN(sum) && !math.IsInf(sum, 0)
}

// takeApartLine finds the effects of an opening's fittings on a group.
func (a *additive) takeApartLine(g *group, base *spread.Linear, i int) error {
	choice := slices.Clone(a.base)
	for j := range a.kept[i] {
		choice[i] = j
		l, err := a.apart(g, a.full(choice))
		if err != nil {
			return err
		}
		for node, q := range g.demands {
			e := a.share(g, l, node, i)
			e.Mean = l.Values[node] - base.Values[node]
			a.effects[i][j][q] = e
		}
	}
	return nil
}

// share is the part of a node's variance and half width that the inputs of an
// opening bring, or, with -1, those of none.
func (a *additive) share(g *group, l *spread.Linear, node, line int) exact.Effect {
	var e exact.Effect
	for _, t := range l.Terms(node) {
		x := l.Inputs[t.Input]
		at, open := a.lineOf[x.Ref]
		if !open || x.Parameter == settingError {
			at.line = -1
		}
		if at.line == line {
			e.Variance += math.Max(0, t.Variance)
			e.Half += math.Abs(l.Slopes[node][t.Input]) * x.HalfWidth * halfSlack
		}
	}
	return e
}

// sum is what the effects of a choice come to.
func (a *additive) sum(choice []int, q int) exact.Effect {
	t := a.rest[q]
	for i, j := range choice {
		e := a.effects[i][j][q]
		t.Mean += e.Mean
		t.Variance += e.Variance
		t.Half += e.Half
	}
	return t
}

// learn widens the margins to hold a choice.
func (a *additive) learn(choice []int) {
	for _, g := range a.groups {
		list, err := a.of(g, a.full(choice))
		if err != nil {
			continue // no such choice is confirmed
		}
		for n, j := range list {
			if a.loose[g.demands[n]] || !finite(j.Effect) {
				continue // what is no number meets nothing
			}
			m, sum := &a.margins[g.demands[n]], a.sum(choice, g.demands[n])
			m.over = math.Max(m.over, 1/share(sum.Variance, j.Variance))
			before := *m
			m.mean = math.Max(m.mean, math.Abs(j.Mean-sum.Mean))
			m.variance = math.Min(m.variance, share(j.Variance, sum.Variance))
			m.half = math.Min(m.half, share(j.Half, sum.Half))
			m.slack = math.Max(m.slack, j.slack)
			a.beyond = a.beyond || *m != before
		}
	}
}

// share is a of b, from nothing to the whole.
func share(a, b float64) float64 {
	if !(b > 0) || !(a < b) {
		return 1
	}
	return math.Max(0, a/b)
}

// widen gives the margins room for what was not sampled, and the problem the
// demands that follow.
func (a *additive) widen() {
	for q := range a.margins {
		m := &a.margins[q]
		m.mean *= widening
		m.variance, m.half = math.Max(0, 1-widening*(1-m.variance)), math.Max(0, 1-widening*(1-m.half))
		m.slack = math.Min(1, shareSlack+widening*(m.slack-shareSlack))
	}
	a.demand(a.margins)
}

// demand gives the problem the demands and effects that follow from margins.
func (a *additive) demand(margins []margin) {
	a.problem.Demands = nil
	for q, d := range a.ask.demands {
		m := margins[q]
		d.Low, d.High = d.Low-m.mean, d.High+m.mean
		d.Share = math.Max(0, d.Share-m.slack)
		if a.loose[q] {
			d.Low, d.High = math.Inf(-1), math.Inf(1)
		}
		d.BaseMean, d.BaseVariance, d.BaseHalf = a.rest[q].Mean, a.rest[q].Variance*m.variance, a.rest[q].Half*m.half
		a.problem.Demands = append(a.problem.Demands, d)
	}
	for i := range a.problem.Lines {
		for j := range a.problem.Lines[i].Options {
			effects := slices.Clone(a.effects[i][j])
			for q := range effects {
				effects[q].Variance *= margins[q].variance
				effects[q].Half *= margins[q].half
			}
			a.problem.Lines[i].Options[j].Effects = effects
		}
	}
}

// A quick look for a good choice takes so many steps and no more than this part
// of the time there is.
const (
	quickSteps = 1 << 22
	quickPart  = 4
)

// cheapest looks for a choice that meets the demands with room to spare, which
// is soon found, and then for the cheapest of all; that again, with wider
// margins, as long as a choice was met outside them. Where this ends without a
// choice or with a dearer one, the first stands, with the bound that was proved.
func (a *additive) cheapest() (exact.Outcome, error) {
	first, err := a.first()
	if err != nil {
		return first, err
	}
	a.widen()
	for n := 0; ; n++ {
		a.beyond = false
		found, err := a.problem.Cheapest(a.context, a.limit())
		if err != nil || !a.beyond || n == widenings {
			if a.beyond {
				found.Proved, found.Bound = false, min(found.Bound, a.floor())
			}
			return better(found, first), err
		}
		a.widen()
	}
}

// floor is what any choice costs at least.
func (a *additive) floor() int64 {
	sum := a.problem.Base
	for _, l := range a.problem.Lines {
		least := slices.MinFunc(l.Options, func(x, y exact.Option) int { return cmp.Compare(x.Floor, y.Floor) })
		sum += least.Floor
	}
	return sum
}

// first is a choice that is soon found; none where no room would be enough.
func (a *additive) first() (exact.Outcome, error) {
	if slices.ContainsFunc(a.margins, func(m margin) bool { return math.IsInf(m.over, 1) }) {
		return exact.Outcome{}, nil
	}
	a.safely()
	limit := a.limit()
	limit.Steps, limit.For = quickSteps, limit.For/quickPart
	return a.problem.Cheapest(a.context, limit)
}

// better is what a search found, or, where another found something cheaper,
// that, with what the search proved of it.
func better(found, other exact.Outcome) exact.Outcome {
	found.Examined += other.Examined
	found.Simulated += other.Simulated
	if other.Choice != nil && (found.Choice == nil && !found.Proved || found.Choice != nil && other.Cost < found.Cost) {
		found.Choice, found.Cost, found.Nearest = other.Choice, other.Cost, nil
	}
	if found.Choice != nil { // what costs no more than the bound is the cheapest, whoever found it
		found.Proved = found.Cost <= found.Bound
	}
	return found
}
