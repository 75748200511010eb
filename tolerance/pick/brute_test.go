package pick

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"testing"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// passes simulates a choice in full and says whether every target but those
// skipped is met, those by worst case by the worst case.
func passes(t testing.TB, c *chooser, choice []int, skip ...int) bool {
	t.Helper()
	b, err := c.fit(choice)
	if err != nil {
		t.Fatal(err)
	}
	return buildPasses(t, b, c.Options, skip...)
}

func buildPasses(t testing.TB, b *build.Build, o Options, skip ...int) bool {
	t.Helper()
	m, err := b.CompileTargets()
	if err != nil {
		t.Fatal(err)
	}
	var shares []int
	worst := false
	for i, target := range b.Targets {
		switch {
		case slices.Contains(skip, i):
		case target.WorstCase:
			worst = true
		default:
			shares = append(shares, i)
		}
	}
	reports, err := spread.JudgeShares(context.Background(), m, shares, spread.Options{Seed: o.Seed, Units: o.Units})
	if err != nil {
		t.Fatal(err)
	}
	if slices.ContainsFunc(reports, func(r spread.TargetReport) bool { return !r.Met }) {
		return false
	}
	return !worst || !slices.ContainsFunc(spread.JudgeWorstCases(m), func(r spread.TargetReport) bool { return !r.Met })
}

// byMoney lists every choice that can be bought, cheapest first, and of one
// price the first in order.
func byMoney(t testing.TB, c *chooser) [][]int {
	t.Helper()
	var list [][]int
	cost := map[string]int64{}
	for _, choice := range everyChoice(c) {
		b, err := c.fit(choice)
		if err != nil {
			t.Fatal(err)
		}
		if money, ok := orderOf(c, b); ok {
			cost[fmt.Sprint(choice)] = money
			list = append(list, choice)
		}
	}
	slices.SortStableFunc(list, func(x, y []int) int {
		return cmp.Or(cmp.Compare(cost[fmt.Sprint(x)], cost[fmt.Sprint(y)]), slices.Compare(x, y))
	})
	return list
}

// orderOf is what a fitted build's order costs; not ok where a part is lacking.
func orderOf(c *chooser, b *build.Build) (int64, bool) {
	o := c.order(b.Parts())
	return int64(o.Total), len(o.Unoffered) == 0
}

// cheapestOf is the first of some choices that passes.
func cheapestOf(t testing.TB, c *chooser, list [][]int, good func([]int) bool) []int {
	for _, choice := range list {
		if good(choice) {
			return choice
		}
	}
	return nil
}

// chosenIn finds the choice that a result made.
func chosenIn(t testing.TB, c *chooser, r *Result) []int {
	t.Helper()
	var choice []int
	for i, f := range r.Fittings {
		j := slices.IndexFunc(c.fittings[i], func(g build.Fitting) bool { return fmt.Sprintf("%+v", f) == fmt.Sprintf("%+v", g) })
		if j < 0 {
			t.Fatalf("opening %d is filled with %+v, which is none of its fittings", i, f)
		}
		choice = append(choice, j)
	}
	return choice
}

// A bruteBuild is small enough for every choice to be simulated, with each of
// the limits that are put in.
type bruteBuild struct {
	name, text, prices string
	limits             []string
}

var bruteBuilds = []bruteBuild{
	{"pairs of capacitors", `
build: pairs
units: 12
conditions:
  bench: {temperature: 25 °C, warmup: 0}
  warm:  {warmup: 1}
stages:
  a:
    kind: tuned-tank
    settings: {rise: 8 K}
    parts:
      coil: {ref: L1, value: 1 mH, choose: {families: [powdered-iron-toroid, ferrite-pot], tolerances: [5 %%]}}
      tank: {ref: C1, choose: {families: [c0g, u2j], tolerances: [5 %%], values: [180 pF, 47 pF, 220 pF], combine: [single, parallel]}}
targets:
  - {name: drift, output: a.frequency, change_from: bench, at: [warm], limit: %s, share: 90 %%}
  - {name: pitch, output: a.frequency, between: [305 kHz, 380 kHz], share: 80 %%}
`, "", []string{"250 Hz", "120 Hz", "90 Hz"}},
	{"pairs of resistors", `
build: resistors
units: 10
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, value: 1.15 kΩ, choose: {families: [metal-film-100, carbon-film], tolerances: [1 %%, 5 %%], series: E12, within: 2 %%, combine: [series, parallel]}}
      b: {part: resistor, ref: R2, choose: {families: [metal-film-100, metal-film-25], tolerances: [1 %%, 2 %%], values: [2.2 kΩ, 2.4 kΩ]}}
    outputs: {ratio: {expression: a/b}, sum: {expression: a+b, unit: Ω}}
targets:
  - {name: ratio, output: s.ratio, between: [%s], share: 90 %%}
  - {name: sum, output: s.sum, between: [3.3 kΩ, 3.6 kΩ], share: 95 %%}
`, "", []string{"0.51, 0.535", "0.515, 0.53", "0.47, 0.49"}},
	{"a trimmer's range", `
build: trimmer
units: 12
conditions:
  bench: {temperature: 25 °C, warmup: 0}
  warm:  {warmup: 1}
stages:
  a:
    kind: tuned-tank
    settings: {rise: 6 K}
    parts:
      coil:  {ref: L1, value: 1 mH, family: drum-choke, tolerance: 5 %%}
      tank:  {ref: C1, value: 220 pF, choose: {families: [c0g, polystyrene], tolerances: [1 %%, 5 %%]}}
      tuner: {ref: CT1, choose: {families: [film-trimmer, ceramic-trimmer, air-trimmer], values: [4..20 pF, 4..34 pF, 5..60 pF]}}
  b:
    kind: tuned-tank
    settings: {rise: 5 K, stray: 24 pF}
    parts:
      coil: {ref: L2, same_as: a.coil}
      tank: {ref: C2, same_as: a.tank}
  mix: {kind: multiplier, in: {carrier: a, signal: b}}
trims:
  - {turn: a.tuner, output: mix.offset, to: 0 Hz, within: 1 Hz}
targets:
  - {name: reach, trim: a.tuner, share: %s}
  - {name: drift, output: mix.offset, change_from: bench, at: [warm], limit: 150 Hz, share: 80 %%}
`, "", []string{"60 %", "90 %", "97 %"}},
	{"lots", `
build: lots
units: 10
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, value: 10 kΩ, choose: {families: [metal-film-100, carbon-film], tolerances: [1 %%, 2 %%, 5 %%], lots: [mixed, one]}}
      b: {ref: R2, same_as: s.a}
      c: {part: resistor, ref: R3, value: 10 kΩ, choose: {families: [metal-film-100], tolerances: [1 %%, 5 %%], lots: [one, mixed]}}
    outputs: {ratio: {expression: a/b}, sum: {expression: (a+b+c)/3, unit: Ω}}
targets:
  - {name: ratio, output: s.ratio, between: [%s], share: 90 %%}
  - {name: sum, output: s.sum, between: [9.8 kΩ, 10.2 kΩ], share: 95 %%}
`, "", []string{"0.97, 1.03", "0.985, 1.015", "0.99, 1.01"}},
	{"stock that binds together, a worst case, values around one", `
build: stock
price_book: shop.csv
units: 8
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, choose: {families: [metal-film-100], tolerances: [1 %%, 2 %%, 5 %%], around: 1 kΩ, within: 10 %%, series: E24}}
      b: {part: resistor, ref: R2, choose: {families: [metal-film-100], tolerances: [1 %%, 2 %%, 5 %%], values: [1 kΩ, 1.1 kΩ]}}
      c: {part: resistor, ref: R3, choose: {families: [metal-film-100], tolerances: [1 %%, 2 %%], values: [1 kΩ]}}
    outputs: {sum: {expression: a+b+c, unit: Ω}, balance: {expression: a/(a+b)}}
targets:
  - {name: sum, output: s.sum, between: [%s], by: worst-case}
  - {name: balance, output: s.balance, between: [0.49, 0.51], share: 90 %%}
`, `metal-film-100,1 %,1 kΩ,1.1 kΩ,E24,1,0.09,,20
metal-film-100,1 %,910 Ω,910 Ω,,1,0.05,,
metal-film-100,2 %,910 Ω,1.1 kΩ,E24,1,0.05,,12
metal-film-100,2 %,910 Ω,1.1 kΩ,E24,2,0.07,,20
metal-film-100,5 %,910 Ω,1.1 kΩ,E24,1,0.02,,
metal-film-100,5 %,910 Ω,1.1 kΩ,E24,10,0.015,5,
`, []string{"2.85 kΩ, 3.15 kΩ", "2.9 kΩ, 3.1 kΩ", "2.95 kΩ, 3.05 kΩ"}},
}

// TestChooseByBruteForce simulates every choice of each build, cheapest first,
// and asks for the price of the first that meets every target, whatever a
// linear picture says; and for the order's figures in the result.
func TestChooseByBruteForce(t *testing.T) {
	found := 0
	for _, v := range bruteBuilds {
		for _, limit := range v.limits {
			t.Run(v.name+" "+limit, func(t *testing.T) {
				for _, few := range []int{0, 1} {
					o := Options{Seed: 3, Units: 800, few: few}
					b := readAt(t, fmt.Sprintf(v.text, limit), v.prices)
					if compareWithAll(t, b, o) {
						found++
					}
				}
			})
		}
	}
	if found < 22 {
		t.Errorf("only %d of the limits can be met: the test proves little", found)
	}
}

// compareWithAll compares Choose with every choice, and says whether one passes.
func compareWithAll(t *testing.T, b *build.Build, o Options) bool {
	t.Helper()
	c := chooserOf(t, b, o)
	want := cheapestOf(t, c, byMoney(t, c), func(choice []int) bool { return passes(t, c, choice) })
	r, fitted, err := Choose(context.Background(), b, o)
	if err != nil {
		t.Fatal(err)
	}
	if want == nil {
		if r.ProvedCheapest || r.Why == "" {
			t.Errorf("nothing meets the targets; chose %v: %q", r.Choices, r.Why)
		}
		return false
	}
	wantBuild, err := c.fit(want)
	if err != nil {
		t.Fatal(err)
	}
	money, _ := orderOf(c, wantBuild)
	bought := c.order(fitted.Parts())
	if int64(r.Total) != money || !r.ProvedCheapest {
		t.Errorf("chose %v for %v, proved %v; want %v for %d", chosenIn(t, c, r), r.Total, r.ProvedCheapest, want, money)
	}
	if r.Total != bought.Total || r.CostPerUnit != bought.PerUnit || r.Bound != r.Total || len(bought.Unoffered) > 0 {
		t.Errorf("total %v, bound %v, a unit %v; the order has %v and %v", r.Total, r.Bound, r.CostPerUnit, bought.Total, bought.PerUnit)
	}
	if r.Candidates != len(everyChoice(c)) || !buildPasses(t, fitted, o) || slices.ContainsFunc(r.Targets, func(t spread.TargetReport) bool { return !t.Met }) {
		t.Errorf("%d candidates, %+v", r.Candidates, r.Targets)
	}
	return true
}

// TestPicturesOfPairs compares the linear picture of every choice of the same
// builds with one made of the choice compiled afresh.
func TestPicturesOfPairs(t *testing.T) {
	for _, v := range bruteBuilds {
		t.Run(v.name, func(t *testing.T) {
			comparePictures(t, chooserOf(t, readAt(t, fmt.Sprintf(v.text, v.limits[0]), v.prices), Options{}))
		})
	}
}
