package exact

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"
)

// A traded market has a figure for each option besides; a choice measures their
// sum. Options marked as dominated have a greater one than any other.
type traded struct {
	*market
	figures [][]float64
	known   bool // the measure is among the demands, so options may be Alone
}

func newTraded(seed uint64, s shape) *traded {
	t := &traded{market: newMarket(seed, s), known: seed%2 == 0}
	h := seed
	for _, l := range t.Lines {
		var figures []float64
		for _, o := range l.Options {
			h = (h ^ 0x51) * 0x9e3779b97f4a7c15
			h ^= h >> 29
			figure := float64(h >> 40 % 8)
			if o.Dominated {
				figure += 8
			}
			figures = append(figures, figure)
		}
		t.figures = append(t.figures, figures)
	}
	return t
}

func (t *traded) measure(choice []int) float64 {
	sum := 0.0
	for i, j := range choice {
		sum += t.figures[i][j]
	}
	return sum
}

func (t *traded) problem(below float64) *Problem {
	p := t.Problem
	p.Judge = func(choice []int) Verdict {
		v := t.judge(choice)
		if over := t.measure(choice) - below; over >= 0 {
			v = Verdict{Shortfall: v.Shortfall + 1 + over}
		}
		return v
	}
	p.Lines = slices.Clone(t.Lines)
	for i := range p.Lines {
		p.Lines[i].Options = slices.Clone(p.Lines[i].Options)
		for j := range p.Lines[i].Options {
			o := &p.Lines[i].Options[j]
			if t.known {
				o.Effects = append(slices.Clone(o.Effects), Effect{Mean: t.figures[i][j]})
			} else {
				o.Alone = false
			}
		}
	}
	if t.known {
		p.Demands = append(slices.Clone(p.Demands), Demand{Low: math.Inf(-1), High: below, WorstCase: true})
	}
	return &p
}

// frontier looks at every choice.
func (t *traded) frontier(most int64) []Point {
	var all, out []Point
	choice := make([]int, len(t.Lines))
	for {
		if cost := t.cost(choice); cost < Unavailable && cost <= most && t.meets(choice) && t.willing(choice) {
			all = append(all, Point{slices.Clone(choice), cost, t.measure(choice)})
		}
		if !t.next(choice) {
			break
		}
	}
	for _, p := range all {
		beaten := slices.ContainsFunc(all, func(o Point) bool {
			return o.Cost <= p.Cost && o.Measure <= p.Measure && (o.Cost < p.Cost || o.Measure < p.Measure)
		})
		alike := slices.ContainsFunc(out, func(o Point) bool { return o.Cost == p.Cost && o.Measure == p.Measure })
		if !beaten && !alike {
			out = append(out, p)
		}
	}
	slices.SortFunc(out, func(a, b Point) int { return int(a.Cost - b.Cost) })
	return out
}

// checkPoints asserts that points are choices, and which of the frontier's.
func (t *traded) checkPoints(test *testing.T, seed uint64, got, want []Point) {
	test.Helper()
	if len(got) != len(want) {
		test.Fatalf("seed %d: %d points %v, want %d: %v", seed, len(got), got, len(want), want)
	}
	for n, p := range got {
		if p.Cost != want[n].Cost || p.Measure != want[n].Measure {
			test.Fatalf("seed %d: point %d is %v, want %v", seed, n, p, want[n])
		}
		if t.cost(p.Choice) != p.Cost || t.measure(p.Choice) != p.Measure || !t.meets(p.Choice) || !t.willing(p.Choice) {
			test.Fatalf("seed %d: %v is no answer", seed, p)
		}
	}
}

func (t *traded) checkAskedOnce(test *testing.T, seed uint64, simulated int) {
	test.Helper()
	seen := map[string]bool{}
	for _, c := range t.asked {
		if seen[name(c)] {
			test.Fatalf("seed %d: asked about %v twice", seed, c)
		}
		seen[name(c)] = true
	}
	if simulated != len(t.asked) {
		test.Fatalf("seed %d: %d simulated, asked %d times", seed, simulated, len(t.asked))
	}
}

func TestTradeEqualsEnumeration(t *testing.T) {
	points, long, refused, within := 0, 0, 0, 0
	seeds := draws(1600)
	for seed := range seeds {
		s := pairedShape(seed)
		s.tight, s.pennies = max(s.tight, 1.2), seed%5 == 0
		m := newTraded(seed, s)
		limits := []Limits{{}, {Nodes: 1}, {Nodes: 20, leaf: 3}}[seed%3]
		most := int64(none)
		if all := m.frontier(none); seed%4 == 3 && len(all) > 1 {
			most = all[len(all)/2].Cost - int64(seed%2)
			within++
		}
		want := m.frontier(most)
		got, err := Trade(context.Background(), limits, most, m.problem, m.measure)
		if err != nil || !got.Complete {
			t.Fatalf("seed %d: %v, %+v", seed, err, got)
		}
		m.checkPoints(t, seed, got.Points, want)
		m.checkAskedOnce(t, seed, got.Simulated)
		points += len(want)
		if len(want) > 3 {
			long++
		}
		if got.Simulated > got.Searches {
			refused++
		}
	}
	t.Logf("%d points, %d walks of more than three, %d with many refusals, %d within a price", points, long, refused, within)
	if n := int(seeds); points < n/2 || long < n/12 || refused < n/20 || within < n/20 {
		t.Error("the draw no longer covers all cases")
	}
}

// A walk that a limit ends has the first points of the whole one, the last of
// them at least as cheap, and its bound is none too high.
func TestTradeStopped(t *testing.T) {
	stopped, some := 0, 0
	for seed := range draws(1200) {
		s := pairedShape(seed)
		s.tight, s.refuse = 1.8, 0.5
		m := newTraded(seed, s)
		want := m.frontier(none)
		limits := []Limits{{Simulations: 3}, {Steps: 150, Nodes: 8, leaf: 1}}[seed%2]
		got, err := Trade(context.Background(), limits, none, m.problem, m.measure)
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if got.Complete {
			m.checkPoints(t, seed, got.Points, want)
			continue
		}
		stopped++
		n := len(got.Points)
		if got.Last.Stopped != []Stop{OutOfSimulations, OutOfSteps}[seed%2] || n > len(want) {
			t.Fatalf("seed %d: %+v, want stopped in %v", seed, got, want)
		}
		if n > 0 {
			some++
			m.checkPoints(t, seed, got.Points[:n-1], want[:n-1])
			if got.Points[n-1].Cost != want[n-1].Cost {
				t.Fatalf("seed %d: last point %v, want the cost of %v", seed, got.Points[n-1], want[n-1])
			}
			if got.Points[n-1].Measure > want[n-1].Measure {
				n-- // another of the same cost would take its place
			}
		}
		if n < len(want) && got.Last.Bound > want[n].Cost {
			t.Fatalf("seed %d: bound %d, but the next point is %v", seed, got.Last.Bound, want[n])
		}
		if limits.Simulations > 0 && len(m.asked) > limits.Simulations {
			t.Fatalf("seed %d: asked %d times", seed, len(m.asked))
		}
	}
	if stopped < 100 || some < 30 {
		t.Errorf("%d stopped, %d with points: hardly tested", stopped, some)
	}
}

func TestTradeFaults(t *testing.T) {
	flat := func(float64) *Problem { return flat(2, 2) }
	_, err := Trade(context.Background(), Limits{}, none, flat, func([]int) float64 { return math.NaN() })
	if err == nil || err.Error() != "exact: choice [0 0] measures NaN, expected less than +Inf" {
		t.Errorf("error %v", err)
	}
	_, err = Trade(context.Background(), Limits{}, none, flat, func([]int) float64 { return 3 })
	if err == nil || err.Error() != "exact: choice [0 0] measures 3, expected less than 3" {
		t.Errorf("error %v", err)
	}
	_, err = Trade(context.Background(), Limits{}, none, func(float64) *Problem { return &Problem{Lines: []Line{{}}} }, nil)
	if err == nil || err.Error() != "exact: line 0: no options" {
		t.Errorf("error %v", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err = Trade(ctx, Limits{}, none, flat, nil); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v, want cancelled", err)
	}
}

// The limit of steps is for the whole walk.
func TestTradeCountsSteps(t *testing.T) {
	w := walker{limits: Limits{}.filled(), most: none, heard: map[string]bool{}}
	for last := 0; w.Searches < 3; last = w.steps {
		if _, err := w.step(context.Background(), graded(1, 6, 6, 2, true)); err != nil || w.steps <= last {
			t.Fatalf("%v; %d steps after %d searches, %d before", err, w.steps, w.Searches, last)
		}
	}
}
