package pick

import (
	"context"
	"fmt"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// tanks is two trimmed tanks with two open lines; limit is the drift allowed.
func tanks(limit string) string {
	return `
build: two tanks
units: 12
conditions:
  bench: {temperature: 25 °C, warmup: 0}
  warm:  {warmup: 1}
stages:
  a:
    kind: tuned-tank
    settings: {rise: 6 K}
    parts:
      coil:  {ref: L1, value: 1 mH, choose: {families: [drum-choke, powdered-iron-toroid, ferrite-pot], tolerances: [5 %, 10 %]}}
      tank:  {ref: C1, value: 220 pF, choose: {families: [c0g, polystyrene, polypropylene], tolerances: [1 %, 5 %]}}
      tuner: {ref: CT1, value: 4..34 pF, family: film-trimmer}
  b:
    kind: tuned-tank
    settings: {rise: 5 K, stray: 16 pF}
    parts:
      coil: {ref: L2, same_as: a.coil}
      tank: {ref: C2, same_as: a.tank}
  mix: {kind: multiplier, in: {carrier: a, signal: b}}
trims:
  - {turn: a.tuner, output: mix.offset, to: 0 Hz, within: 1 Hz}
targets:
  - {name: drift, output: mix.offset, change_from: bench, at: [warm], limit: ` + limit + `, share: 95 %}
  - {name: reach, trim: a.tuner, share: 90 %}
`
}

func read(t testing.TB, text string) *build.Build {
	t.Helper()
	b, err := build.Read("test.yaml", []byte(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// everyChoice lists every combination of options.
func everyChoice(c *chooser) [][]int {
	list := [][]int{nil}
	for _, options := range c.fittings {
		var longer [][]int
		for _, choice := range list {
			for j := range options {
				longer = append(longer, append(slices.Clone(choice), j))
			}
		}
		list = longer
	}
	return list
}

// TestCheapestByBruteForce compares with simulating every combination: the
// cheapest whose simulation meets every target, whatever a linear picture says.
func TestCheapestByBruteForce(t *testing.T) {
	o := Options{Seed: 1, Units: 2400}
	for _, limit := range []string{"300 Hz", "150 Hz", "80 Hz", "60 Hz", "40 Hz"} {
		t.Run(limit, func(t *testing.T) {
			b := read(t, tanks(limit))
			r, fitted, err := Choose(context.Background(), b, o)
			if err != nil {
				t.Fatal(err)
			}
			c, err := newChooser(context.Background(), b, o)
			if err != nil {
				t.Fatal(err)
			}
			best, cost := "", int64(-1)
			for _, choice := range everyChoice(c) {
				if money := c.money(choice); (cost < 0 || money < cost) && meets(t, c, choice, o) {
					best, cost = fmt.Sprint(c.name(0, choice[0]), ", ", c.name(1, choice[1])), money
				}
			}
			if best == "" {
				t.Fatalf("nothing meets %s: the test proves nothing", limit)
			}
			got := fmt.Sprint(text(r.Choices[0]), ", ", text(r.Choices[1]))
			if money := int64(c.order(fitted.Parts()).Total); money != cost || !r.ProvedCheapest {
				t.Errorf("chose %s for %d (proved %v), want %s for %d", got, money, r.ProvedCheapest, best, cost)
			}
		})
	}
}

func text(c Choice) string { return fmt.Sprintf("%s %g", c.Family, c.Tolerance) }

// meets simulates a choice in full.
func meets(t *testing.T, c *chooser, choice []int, o Options) bool {
	t.Helper()
	b, err := c.fit(choice)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.CompileTargets()
	if err != nil {
		t.Fatal(err)
	}
	reports, err := spread.JudgeShares(context.Background(), m, []int{0, 1}, spread.Options{Seed: o.Seed, Units: o.Units})
	if err != nil {
		t.Fatal(err)
	}
	return !slices.ContainsFunc(reports, func(r spread.TargetReport) bool { return !r.Met })
}

// TestOutOfReach asks for what nothing can do.
func TestOutOfReach(t *testing.T) {
	r, fitted, err := Choose(context.Background(), read(t, tanks("0.01 Hz")), Options{Seed: 1, Units: 1200})
	if err != nil {
		t.Fatal(err)
	}
	if r.ProvedCheapest || !strings.Contains(r.Why, `"drift"`) || !strings.Contains(r.Why, "%") {
		t.Errorf("proved %v: %s", r.ProvedCheapest, r.Why)
	}
	if len(r.Choices) != 2 || len(fitted.Openings) != 0 {
		t.Errorf("the nearest is not fitted: %d choices, %d openings left", len(r.Choices), len(fitted.Openings))
	}
}

// TestNothingOffered has an opening that the price book sells nothing for.
func TestNothingOffered(t *testing.T) {
	text := strings.Replace(tanks("60 Hz"), "ref: C1, value: 220 pF", "ref: C1, value: 221 pF", 1)
	r, _, err := Choose(context.Background(), read(t, text), Options{Seed: 1, Units: 1200})
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(r.Why, "a.tank") || r.ProvedCheapest {
		t.Errorf("got %q", r.Why)
	}
}

// TestNoOpenings leaves a finished build alone.
func TestNoOpenings(t *testing.T) {
	b := read(t, tanks("60 Hz"))
	_, fitted, err := Choose(context.Background(), b, Options{Seed: 1, Units: 1200})
	if err != nil {
		t.Fatal(err)
	}
	r, same, err := Choose(context.Background(), fitted, Options{Seed: 1, Units: 1200})
	if err != nil || same != fitted || !r.ProvedCheapest || len(r.Choices) != 0 {
		t.Errorf("%+v, %v", r, err)
	}
}

// TestSameAsIsDecidedOnce asks for both positions of a line in its choice, and
// for the same part in both.
func TestSameAsIsDecidedOnce(t *testing.T) {
	r, fitted, err := Choose(context.Background(), read(t, tanks("60 Hz")), Options{Seed: 1, Units: 1200})
	if err != nil {
		t.Fatal(err)
	}
	if got := strings.Join(r.Choices[0].Refs, " ") + " " + strings.Join(r.Choices[1].Positions, " "); got != "L1 L2 a.tank b.tank" {
		t.Errorf("got %q", got)
	}
	one, other := fitted.Place("a.coil").Part, fitted.Place("b.coil").Part
	if one.Ref != "L1" || other.Ref != "L2" || one.Family != other.Family || one.Grade() != other.Grade() {
		t.Errorf("%+v and %+v", one, other)
	}
}

// TestCostIsTheOrder compares the search's money with the order's, for random
// choices of the embedded example, of a build whose lines can merge, and of one
// whose options may join a line that is bought anyway.
func TestCostIsTheOrder(t *testing.T) {
	example, err := data.Examples.ReadFile("examples/lantern.yaml")
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(1, 1))
	for name, text := range map[string]string{"example": string(example), "merging": merging(), "joining": joining()} {
		c, err := newChooser(context.Background(), read(t, text), Options{})
		if err != nil {
			t.Fatal(err)
		}
		for range 60 {
			var choice []int
			floor := c.rest
			for i, options := range c.fittings {
				j := rng.IntN(len(options))
				choice = append(choice, j)
				floor += c.floor(i, j)
			}
			b, err := c.fit(choice)
			if err != nil {
				t.Fatal(err)
			}
			want := int64(c.order(b.Parts()).Total)
			if got := c.money(choice); got != want || floor > want {
				t.Errorf("%s %v: cost %d and floor %d, the order is %d", name, choice, got, floor, want)
			}
		}
	}
}

// TestPictureIsTheModel compares the linear picture that the search uses with
// one made of the choice compiled afresh.
func TestPictureIsTheModel(t *testing.T) {
	for name, text := range map[string]string{"two lines": tanks("60 Hz"), "lines that may merge": merging()} {
		t.Run(name, func(t *testing.T) { comparePictures(t, chooserOf(t, read(t, text), Options{})) })
	}
}

// merging is the two tanks with an opening for each tank's capacitor: where
// both take the same, they are one line and one lot.
func merging() string {
	return strings.Replace(tanks("60 Hz"), "C2, same_as: a.tank", "C2, value: 220 pF, choose: {families: [c0g, polystyrene], tolerances: [1 %, 5 %]}", 1)
}

// joining is the two tanks with a fixed capacitor that some of the options are
// bought together with.
func joining() string {
	return strings.Replace(tanks("60 Hz"), "  mix: {", `  spare:
    kind: formula
    parts: {c: {ref: C9, value: 220 pF, family: c0g, tolerance: 5 %}}
    outputs: {c9: {expression: c, unit: F}}
  mix: {`, 1)
}

func comparePictures(t *testing.T, c *chooser) {
	p := c.pictures
	for _, choice := range everyChoice(c) {
		b, err := c.fit(choice)
		if err != nil {
			t.Fatal(err)
		}
		m, err := b.CompileTargets()
		if err != nil {
			t.Fatal(err)
		}
		for k, d := range p.demands {
			want := judge(spread.Linearise(m, d.node(m)), 0)
			got, ok := p.demand(choice, k)
			if !ok || !near(got.Mean, want.Mean) || !near(got.Variance, want.Variance) || !near(got.Half, want.Half) || !near(got.slack, want.slack) {
				t.Errorf("%v, demand %d: %+v, want %+v", choice, k, got, want)
			}
		}
	}
}

// TestNextCheaper asks for the dearest of the options that are cheaper.
func TestNextCheaper(t *testing.T) {
	c, err := newChooser(context.Background(), read(t, tanks("60 Hz")), Options{})
	if err != nil {
		t.Fatal(err)
	}
	choice := []int{0, 0}
	var costs []int64
	for j := range c.fittings[0] {
		costs = append(costs, c.money([]int{j, 0}))
	}
	for j := range c.fittings[0] {
		choice[0] = j
		want := -1
		for k, cost := range costs {
			if cost < costs[j] && (want < 0 || cost > costs[want]) {
				want = k
			}
		}
		if got, _ := c.nextCheaper(choice, 0, j); got != want {
			t.Errorf("below option %d at %d comes %d, want %d of %v", j, costs[j], got, want, costs)
		}
	}
}

func near(a, b float64) bool { d := a - b; return d*d <= 1e-18*(a*a+b*b) }
