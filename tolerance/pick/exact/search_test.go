package exact

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// randomShape varies everything a small problem can be.
func randomShape(seed uint64) shape {
	r := rand.New(rand.NewPCG(seed, 3))
	return shape{
		lines: 2 + r.IntN(5), options: 1 + r.IntN(6), demands: 1 + r.IntN(3),
		merge: []float64{0, 0.3, 0.8}[r.IntN(3)], rho: []float64{0, 0.6}[r.IntN(2)],
		refuse: []float64{0, 0, 0.5, 0.95, 1}[r.IntN(5)], tight: 1.8 * r.Float64(),
		whole: []int64{1, 20}[r.IntN(2)], mixed: r.IntN(2) == 0,
	}
}

func TestCheapestEqualsBruteForce(t *testing.T) {
	found, refused, hopeless := 0, 0, 0
	for seed := range uint64(600) {
		m := newMarket(seed, randomShape(seed))
		want := m.brute()
		got, err := m.Cheapest(context.Background(), Limits{})
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if !got.Proved || !slices.Equal(got.Choice, want.choice) || got.Cost != want.cost {
			t.Fatalf("seed %d: got %v at %d (proved %v), want %v at %d\n%+v", seed, got.Choice, got.Cost, got.Proved, want.choice, want.cost, got)
		}
		checkOrder(t, seed, m)
		if want.choice != nil {
			found++
			if got.Bound != got.Cost {
				t.Errorf("seed %d: bound %d, cost %d", seed, got.Bound, got.Cost)
			}
			if got.Simulated > 1 {
				refused++
			}
			continue
		}
		hopeless++
		if !got.NearestExact || !slices.Equal(got.Nearest, want.nearest) || cmp.Diff(got.NearestVerdict, want.verdict) != "" {
			t.Fatalf("seed %d: nearest %v %+v, want %v %+v", seed, got.Nearest, got.NearestVerdict, want.nearest, want.verdict)
		}
	}
	t.Logf("%d found, %d of them after a refusal, %d without a choice", found, refused, hopeless)
	if found < 250 || refused < 50 || hopeless < 100 {
		t.Errorf("%d found, %d after refusals, %d hopeless: the draw no longer covers all cases", found, refused, hopeless)
	}
}

// checkOrder asserts that Confirm was asked once per choice, in the order of
// cost and then of choice, and only about what Judge passes.
func checkOrder(t *testing.T, seed uint64, m *market) {
	t.Helper()
	var last known
	for n, c := range m.asked {
		k := known{c, m.cost(c)}
		if n > 0 && last.compare(k) >= 0 {
			t.Fatalf("seed %d: asked about %v after %v", seed, k, last)
		}
		if !m.judge(c).Meets {
			t.Fatalf("seed %d: asked about %v, which is judged not to meet", seed, c)
		}
		last = k
	}
}

func TestCheapestTwiceTheSame(t *testing.T) {
	for seed := range uint64(40) {
		s := randomShape(seed)
		a, errA := newMarket(seed, s).Cheapest(context.Background(), Limits{})
		b, errB := newMarket(seed, s).Cheapest(context.Background(), Limits{})
		if diff := cmp.Diff(a, b); diff != "" || errA != nil || errB != nil {
			t.Fatalf("seed %d: %v %v %s", seed, errA, errB, diff)
		}
	}
}

func TestLooserDemandsNeverCostMore(t *testing.T) {
	loosen := map[string]func(d *Demand, by float64){
		"wider":       func(d *Demand, by float64) { d.Low, d.High = d.Low-by, d.High+by },
		"lower share": func(d *Demand, by float64) { d.Share = max(0, d.Share-by/4) },
	}
	for kind, change := range loosen {
		t.Run(kind, func(t *testing.T) {
			cheaper := 0
			for seed := range uint64(150) {
				s := randomShape(seed)
				s.refuse = 0
				m := newMarket(seed, s)
				last, have := int64(0), false
				for step := range 4 {
					out, err := m.Cheapest(context.Background(), Limits{})
					if err != nil {
						t.Fatal(err)
					}
					if have && (out.Choice == nil || out.Cost > last) {
						t.Fatalf("seed %d, step %d: cost %d, %v, before loosening %d", seed, step, out.Cost, out.Choice, last)
					}
					if out.Choice != nil {
						if have && out.Cost < last {
							cheaper++
						}
						last, have = out.Cost, true
					}
					for q := range m.Demands {
						change(&m.Demands[q], 0.2)
					}
				}
			}
			if cheaper == 0 {
				t.Error("loosening never changed a price: the test tests nothing")
			}
		})
	}
}

func TestNodeLimitIsHonest(t *testing.T) {
	stopped, gaps := 0, 0
	for seed := range uint64(400) {
		s := randomShape(seed)
		s.lines, s.options = 4+int(seed%3), 5
		m := newMarket(seed, s)
		want := m.brute()
		out, err := m.Cheapest(context.Background(), Limits{Nodes: 12, Steps: []int{30, 200, 600}[seed%3], leaf: []int{0, 1, 6}[seed/3%3]})
		if err != nil {
			t.Fatal(err)
		}
		if out.Proved {
			checkProof(t, seed, m, out, want)
			continue
		}
		stopped++
		if want.choice != nil && out.Bound > want.cost {
			t.Fatalf("seed %d: bound %d above the cheapest, %d", seed, out.Bound, want.cost)
		}
		if out.Choice == nil {
			continue
		}
		if !m.judge(out.Choice).Meets || !m.willing(out.Choice) || m.cost(out.Choice) != out.Cost {
			t.Fatalf("seed %d: %v is no answer", seed, out.Choice)
		}
		if out.Cost < want.cost {
			t.Fatalf("seed %d: found %d, below the cheapest, %d", seed, out.Cost, want.cost)
		}
		if out.Gap() > 0 {
			gaps++
		}
	}
	if stopped < 40 || gaps < 10 {
		t.Errorf("%d stopped, %d with a gap: the limit was hardly tested", stopped, gaps)
	}
}

// checkProof asserts that a proved outcome of a search short of memory is one
// of the cheapest; which of them it need not say.
func checkProof(t *testing.T, seed uint64, m *market, out Outcome, want brute) {
	t.Helper()
	if (out.Choice == nil) != (want.choice == nil) || out.Cost != want.cost {
		t.Fatalf("seed %d: proved %v at %d, want %v at %d", seed, out.Choice, out.Cost, want.choice, want.cost)
	}
	if out.Choice != nil && !(m.judge(out.Choice).Meets && m.willing(out.Choice) && m.cost(out.Choice) == out.Cost) {
		t.Fatalf("seed %d: %v is no answer", seed, out.Choice)
	}
}

// Without memory for a frontier the search dives; with a dive of a few steps
// only it splits again and again.
func TestDivesEqualBruteForce(t *testing.T) {
	for name, limits := range map[string]Limits{
		"whole":  {Nodes: 1},
		"split":  {Nodes: 1, leaf: 4},
		"midway": {Nodes: 25, leaf: 1},
	} {
		t.Run(name, func(t *testing.T) {
			found := 0
			for seed := range uint64(120) {
				s := randomShape(seed)
				s.lines = min(s.lines, 5)
				m := newMarket(seed, s)
				out, err := m.Cheapest(context.Background(), limits)
				if err != nil {
					t.Fatal(err)
				}
				if !out.Proved {
					t.Fatalf("seed %d: not proved: %+v", seed, out)
				}
				checkProof(t, seed, m, out, m.brute())
				if out.Choice != nil {
					found++
				}
			}
			if found < 40 {
				t.Errorf("%d found: hardly tested", found)
			}
		})
	}
}

func TestSimulationLimit(t *testing.T) {
	p := flat(3, 4)
	p.Confirm = func([]int) (bool, error) { return false, nil }
	out, err := p.Cheapest(context.Background(), Limits{Simulations: 5})
	if err != nil {
		t.Fatal(err)
	}
	if out.Proved || out.Choice != nil || out.Simulated != 5 {
		t.Errorf("got %+v, want an open end after 5 simulations", out)
	}
	if diff := cmp.Diff([]int{0, 0, 0}, out.Nearest); diff != "" || !out.NearestVerdict.Meets {
		t.Errorf("nearest %v %+v, want the cheapest that Judge passes", out.Nearest, out.NearestVerdict)
	}
}

// flat is a problem whose options all cost 7 and demand nothing.
func flat(lines, options int) *Problem {
	p := &Problem{}
	for range lines {
		var l Line
		for range options {
			l.Options = append(l.Options, Option{Floor: 7, Effects: []Effect{}})
		}
		p.Lines = append(p.Lines, l)
	}
	return p
}

func TestTiesGoToTheFirst(t *testing.T) {
	for _, lines := range []int{1, 5, 30} {
		p := flat(lines, 6)
		out, err := p.Cheapest(context.Background(), Limits{})
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(make([]int, lines), out.Choice); diff != "" || !out.Proved || out.Cost != int64(7*lines) {
			t.Errorf("%d lines: %+v", lines, out)
		}
	}
}

// With 30 lines of 40 options the packed start of a choice holds ten lines
// only; the tie here is decided by the last two.
func TestTiesBeyondThePackedStart(t *testing.T) {
	p := flat(30, 40)
	p.Judge = func(c []int) Verdict {
		if c[28]+c[29] == 3 {
			return Verdict{Meets: true}
		}
		return Verdict{Shortfall: 1}
	}
	out, err := p.Cheapest(context.Background(), Limits{})
	if err != nil {
		t.Fatal(err)
	}
	want := make([]int, 30)
	want[29] = 3
	if diff := cmp.Diff(want, out.Choice); diff != "" || !out.Proved {
		t.Errorf("proved %v: %s", out.Proved, diff)
	}
}

func TestNoLines(t *testing.T) {
	p := &Problem{Base: 12}
	out, err := p.Cheapest(context.Background(), Limits{})
	want := Outcome{Choice: []int{}, Cost: 12, Bound: 12, Proved: true, Candidates: 1, Examined: 1}
	if diff := cmp.Diff(want, out); diff != "" || err != nil {
		t.Errorf("%v %s", err, diff)
	}
}

func TestCandidatesSaturate(t *testing.T) {
	if n := flat(40, 10).candidates(); n != math.MaxInt {
		t.Errorf("10^40 choices counted as %d", n)
	}
	if n := flat(5, 10).candidates(); n != 100000 {
		t.Errorf("10^5 choices counted as %d", n)
	}
}

func TestCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	p := flat(12, 30)
	asked := 0
	p.Confirm = func([]int) (bool, error) {
		if asked++; asked == 3 {
			cancel()
		}
		return false, nil
	}
	out, err := p.Cheapest(ctx, Limits{})
	if !errors.Is(err, context.Canceled) || out.Proved || asked != 3 {
		t.Errorf("error %v, proved %v, asked %d times; want cancelled after 3", err, out.Proved, asked)
	}
	if _, err := flat(2, 2).Cheapest(ctx, Limits{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled before the start: error %v", err)
	}
}

func TestConfirmError(t *testing.T) {
	broken := errors.New("no meter")
	p := flat(2, 2)
	p.Confirm = func([]int) (bool, error) { return false, broken }
	if _, err := p.Cheapest(context.Background(), Limits{}); !errors.Is(err, broken) {
		t.Errorf("error %v, want it to be %v", err, broken)
	}
}

func TestBrokenPromiseOfFloors(t *testing.T) {
	p := flat(2, 2)
	p.Cost = func([]int) int64 { return 13 }
	_, err := p.Cheapest(context.Background(), Limits{})
	want := "exact: choice [0 0] costs 13, expected at least the sum of its floors, 14"
	if fmt.Sprint(err) != want {
		t.Errorf("error %q, want %q", err, want)
	}
}

func TestFaultyProblems(t *testing.T) {
	nan := math.NaN()
	one := func(o Option, d ...Demand) Problem { return Problem{Lines: []Line{{Options: []Option{o}}}, Demands: d} }
	cases := map[string]struct {
		p    Problem
		want string
	}{
		"line without options": {Problem{Lines: []Line{{}}}, "exact: line 0: no options"},
		"effects missing":      {one(Option{}, Demand{Share: 0.9}), "exact: line 0, option 0: 0 effects, expected one for each of the 1 demands"},
		"negative variance": {one(Option{Effects: []Effect{{0, -1, 0}}}, Demand{Share: 0.9}),
			"exact: line 0, option 0: effect 0 is {0 -1 0}, expected finite numbers, variance and half width not negative"},
		"mean not a number": {one(Option{Effects: []Effect{{nan, 1, 0}}}, Demand{Share: 0.9}),
			"exact: line 0, option 0: effect 0 is {NaN 1 0}, expected finite numbers, variance and half width not negative"},
		"limits swapped":      {one(Option{}, Demand{Low: 2, High: 1, Share: 0.9}), "exact: demand 0: limits 2 to 1, expected low <= high"},
		"limit not a number":  {one(Option{}, Demand{Low: nan, High: 1, Share: 0.9}), "exact: demand 0: limits NaN to 1, expected low <= high"},
		"share above one":     {one(Option{}, Demand{Share: 1.5}), "exact: demand 0: share 1.5, expected 0 to 1"},
		"share not a number":  {one(Option{}, Demand{Share: nan}), "exact: demand 0: share NaN, expected 0 to 1"},
		"base not a number":   {one(Option{}, Demand{BaseHalf: nan}), "exact: demand 0: base mean 0, variance 0, half width NaN, expected finite numbers, the last two not negative"},
		"base variance below": {one(Option{}, Demand{BaseVariance: -1}), "exact: demand 0: base mean 0, variance -1, half width 0, expected finite numbers, the last two not negative"},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			_, err := c.p.Cheapest(context.Background(), Limits{})
			if fmt.Sprint(err) != c.want {
				t.Errorf("error %q, want %q", err, c.want)
			}
		})
	}
}
