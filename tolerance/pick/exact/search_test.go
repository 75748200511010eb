package exact

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
	"time"

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

// pairedShape is a randomShape with pairs, stocks and marked options, and fewer
// lines.
func pairedShape(seed uint64) shape {
	r, s := rand.New(rand.NewPCG(seed, 4)), randomShape(seed)
	s.lines, s.options = min(s.lines, 4), min(s.options, 5)
	s.pairs, s.scarce, s.marked = []float64{0.3, 0.7}[r.IntN(2)], r.IntN(4) > 0, 0.4*float64(r.IntN(2))
	if r.IntN(2) == 0 {
		s.tight = 1.8
	}
	return s
}

// draws is how many random problems a test looks at.
func draws(n uint64) uint64 {
	if testing.Short() {
		return n / 4
	}
	return n
}

func TestCheapestEqualsBruteForce(t *testing.T) {
	t.Run("plain", func(t *testing.T) { equalsBruteForce(t, draws(300), randomShape, false) })
	t.Run("pairs and stocks", func(t *testing.T) { equalsBruteForce(t, draws(5000), pairedShape, true) })
}

func equalsBruteForce(t *testing.T, seeds uint64, shape func(seed uint64) shape, paired bool) {
	found, refused, hopeless, unavailable, scarce := 0, 0, 0, 0, 0
	for seed := range seeds {
		m := newMarket(seed, shape(seed))
		want := m.brute()
		got, err := m.Cheapest(context.Background(), Limits{})
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		if !got.Proved || !slices.Equal(got.Choice, want.choice) || got.Cost != want.cost {
			t.Fatalf("seed %d: got %v at %d (proved %v), want %v at %d\n%+v", seed, got.Choice, got.Cost, got.Proved, want.choice, want.cost, got)
		}
		checkOrder(t, seed, m)
		if want.scarce {
			scarce++
		}
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
		if want.nearest == nil {
			unavailable++
		}
		if !got.NearestExact || !slices.Equal(got.Nearest, want.nearest) || cmp.Diff(got.NearestVerdict, want.verdict) != "" {
			t.Fatalf("seed %d: nearest %v %+v, want %v %+v", seed, got.Nearest, got.NearestVerdict, want.nearest, want.verdict)
		}
	}
	t.Logf("%d found, %d of them after a refusal, %d without a choice, %d with nothing to be bought, %d short of stock",
		found, refused, hopeless, unavailable, scarce)
	n := int(seeds)
	if found < n/3 || refused < n/15 || hopeless < n/10 || paired && (unavailable < n/200 || scarce < n/10) {
		t.Error("the draw no longer covers all cases")
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
			for seed := range draws(400) {
				s := pairedShape(seed)
				if seed%4 == 0 {
					s = randomShape(seed)
				}
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
	for seed := range uint64(360) {
		s := randomShape(seed)
		s.lines, s.options = 4+int(seed%2), 5
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
		"midway": {Nodes: 25, leaf: 25},
		"single": {Nodes: 1, leaf: 1},
	} {
		t.Run(name, func(t *testing.T) {
			found := 0
			for seed := range draws(240) {
				s := pairedShape(seed)
				if seed%4 == 0 {
					s = randomShape(seed)
					s.lines = min(s.lines, 5)
				}
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
			if found < 40 && !testing.Short() {
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

// Time that is over at once still leaves something near.
func TestNoTime(t *testing.T) {
	p := flat(6, 6)
	p.Judge = func([]int) Verdict { return Verdict{Shortfall: 1} }
	out, err := p.Cheapest(context.Background(), Limits{For: 1})
	if err != nil || out.Proved || out.Stopped != OutOfTime || out.Choice != nil || out.Bound != 42 {
		t.Errorf("%v, %+v; want out of time at the floors", err, out)
	}
	if diff := cmp.Diff(make([]int, 6), out.Nearest); diff != "" || out.Examined != 1 || out.NearestExact {
		t.Errorf("nearest %v after %d choices, want the first of all", out.Nearest, out.Examined)
	}
	if out, err = p.Cheapest(context.Background(), Limits{For: time.Hour}); err != nil || !out.Proved || out.Stopped != "" {
		t.Errorf("%v, %+v; want proved within an hour", err, out)
	}
}

// The first simulation takes more than the time: then only a few more follow.
func TestTimeOverInConfirm(t *testing.T) {
	for name, p := range map[string]*Problem{"one line": flat(1, 40), "graded": graded(1, 8, 10, 2, true)} {
		asked, end := 0, time.Now().Add(400*time.Millisecond)
		p.Confirm = func([]int) (bool, error) {
			asked++
			time.Sleep(time.Until(end))
			return false, nil
		}
		out, err := p.Cheapest(context.Background(), Limits{For: 200 * time.Millisecond})
		if err != nil || out.Proved || out.Stopped != OutOfTime || out.Choice != nil || out.Simulated != asked {
			t.Errorf("%s: %v, %+v; want out of time", name, err, out)
		}
		if asked < 2 || asked > 1+lateAnswers {
			t.Errorf("%s: asked %d times, want the first and at most %d more", name, asked, lateAnswers)
		}
	}
}

func TestStoppedSaysWhy(t *testing.T) {
	refuse := func([]int) (bool, error) { return false, nil }
	for want, limits := range map[Stop]Limits{OutOfSimulations: {Simulations: 2}, OutOfSteps: {Steps: 40}} {
		for _, nodes := range []int{0, 1} {
			p := graded(1, 8, 10, 2, true)
			p.Confirm, limits.Nodes = refuse, nodes
			if out, err := p.Cheapest(context.Background(), limits); err != nil || out.Proved || out.Stopped != want {
				t.Errorf("%v: %v, %+v", want, err, out)
			}
		}
	}
}

// Three lines want the one cheap piece, of which there is one. Judge and Confirm
// must not hear of choices that take two. Money is near the largest there is.
func TestUnavailable(t *testing.T) {
	const much = Unavailable/3 - 10
	p := &Problem{}
	for range 3 {
		p.Lines = append(p.Lines, Line{Options: []Option{{Floor: much - 9}, {Floor: much}, {Floor: Unavailable}, {Floor: math.MaxInt64}}})
	}
	ones := func(c []int) (n int) {
		for _, j := range c {
			if j == 0 {
				n++
			}
		}
		return n
	}
	p.Cost = func(c []int) int64 {
		if ones(c) > 1 {
			return math.MaxInt64
		}
		return p.floor(c)
	}
	p.Judge = func(c []int) Verdict {
		if ones(c) > 1 || slices.Max(c) > 1 {
			t.Errorf("judged %v, which cannot be bought", c)
		}
		return Verdict{Meets: c[1] == 0, Shortfall: float64(c[1])}
	}
	for name, limits := range map[string]Limits{"frontier": {}, "dive": {Nodes: 1}, "split": {Nodes: 1, leaf: 1}} {
		out, err := p.Cheapest(context.Background(), limits)
		if diff := cmp.Diff([]int{1, 0, 1}, out.Choice); err != nil || diff != "" || !out.Proved || out.Cost != 3*much-9 || out.Bound != out.Cost {
			t.Errorf("%s: %v, %+v", name, err, out)
		}
	}
	p.Cost = func([]int) int64 { return Unavailable }
	out, err := p.Cheapest(context.Background(), Limits{})
	if err != nil || !out.Proved || out.Choice != nil || out.Nearest != nil || !out.NearestExact {
		t.Errorf("nothing to be bought: %v, %+v", err, out)
	}
}

// What is nearest among too many choices to look at all: only few can be bought.
func TestNearestThatCanBeBought(t *testing.T) {
	p := flat(9, 9)
	p.Cost = func(c []int) int64 {
		if slices.Contains(c, 0) {
			return Unavailable
		}
		return p.floor(c)
	}
	p.Judge = func(c []int) Verdict {
		sum := 0
		for _, j := range c {
			sum += j
		}
		if slices.Contains(c, 0) {
			t.Errorf("judged %v, which cannot be bought", c)
		}
		return Verdict{Shortfall: float64(sum)}
	}
	p.Lines[0].Options = p.Lines[0].Options[:2]
	p.Demands = []Demand{{Low: 1, High: 1, WorstCase: true}} // out of reach, so that nothing is judged before
	for i := range p.Lines {
		for j := range p.Lines[i].Options {
			p.Lines[i].Options[j].Effects = []Effect{{}}
		}
	}
	out, err := p.Cheapest(context.Background(), Limits{})
	if diff := cmp.Diff([]int{1, 1, 1, 1, 1, 1, 1, 1, 1}, out.Nearest); err != nil || diff != "" || !out.Proved {
		t.Errorf("%v, %+v", err, out)
	}
}

func TestMarkedAsDominated(t *testing.T) {
	p := flat(3, 4)
	p.Lines[1].Options[1].Dominated, p.Lines[2].Options[3].Dominated = true, true
	out, err := p.Cheapest(context.Background(), Limits{})
	if err != nil || out.Dominated != 2 || !out.Proved {
		t.Errorf("%v, %+v; want two options dominated", err, out)
	}
	p.Confirm = func(c []int) (bool, error) { return c[1] == 1 && c[2] == 3, nil }
	out, err = p.Cheapest(context.Background(), Limits{})
	if diff := cmp.Diff([]int{0, 1, 3}, out.Choice); err != nil || diff != "" || !out.Proved {
		t.Errorf("%v, %+v; want them let in again after refusals", err, out)
	}
	broken := &Problem{Lines: []Line{{Options: []Option{{Floor: 5, Alone: true, Dominated: true}, {Floor: 7, Alone: true}}}}}
	if out, err = broken.Cheapest(context.Background(), Limits{}); err != nil || out.Cost != 7 {
		t.Errorf("broken promise: %v, %+v; want the option that is not marked", err, out)
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
	many := one(Option{Floor: Unavailable / 2})
	many.Lines = append(many.Lines, many.Lines[0])
	cases := map[string]struct {
		p    Problem
		want string
	}{
		"all dominated":        {one(Option{Dominated: true}), "exact: line 0: every option is dominated, expected one that stands in for the others"},
		"too much money":       {many, "exact: base and floors come to 1152921504606846976 or more in size, expected less"},
		"base too large":       {Problem{Base: math.MinInt64}, "exact: base and floors come to 1152921504606846976 or more in size, expected less"},
		"floor too low":        {one(Option{Floor: math.MinInt64}), "exact: base and floors come to 1152921504606846976 or more in size, expected less"},
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
