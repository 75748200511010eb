package pick

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"batchwright/tolerance/pick/exact"
)

// randomFormula is a formula stage of four open resistors, of which two may buy
// on one line, with an expression drawn and a window for each of its targets.
func randomFormula(r *rand.Rand, low, high [2]float64) string {
	x := []string{"a*b/(c+d)/1000", "(a-b)/(a+b)+c/d", "sqrt(a*b)/(c+d)", "a/(b+c*d/(c+d))", "ln(a/b)+c/d"}[r.IntN(5)]
	if strings.HasPrefix(x, "a*") {
		x = "a*b/(c+d)/(1000*ohm)"
	}
	families := []string{"metal-film-100, carbon-film", "metal-film-25, metal-film-100", "metal-film-100"}
	return fmt.Sprintf(`
build: random
units: 8
conditions:
  bench: {temperature: 25 °C}
  warm:  {temperature: 55 °C}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, choose: {families: [%s], tolerances: [1 %%, 5 %%], values: [1 kΩ, 1.2 kΩ, 1.5 kΩ]}}
      b: {part: resistor, ref: R2, choose: {families: [%s], tolerances: [1 %%, 5 %%], values: [1 kΩ, 1.8 kΩ]}}
      c: {part: resistor, ref: R3, choose: {families: [%s], tolerances: [1 %%, 5 %%], values: [680 Ω, 820 Ω]}}
      d: {part: resistor, ref: R4, choose: {families: [%s], tolerances: [1 %%, 5 %%], values: [820 Ω, 1 kΩ]}}
    outputs: {x: {expression: "%s"}, y: {expression: a-c+b, unit: Ω}}
targets:
  - {name: x, output: s.x, between: ["%.9g", "%.9g"], share: 90 %%}
  - {name: drift, output: s.x, change_from: bench, at: [warm], limit: "%.9g", share: 90 %%}
  - {name: y, output: s.y, between: ["%.9g Ω", "%.9g Ω"], by: worst-case}
`, families[r.IntN(3)], families[r.IntN(3)], families[r.IntN(3)], families[r.IntN(3)], x, low[0], high[0], 0.001+0.02*r.Float64(), low[1], high[1])
}

// windows are limits about what a random choice of a build comes to.
func windows(t *testing.T, seed uint64) string {
	t.Helper()
	wide := chooserOf(t, read(t, randomFormula(rand.New(rand.NewPCG(seed, 1)), [2]float64{-100, -1e6}, [2]float64{100, 1e6})), Options{})
	r := rand.New(rand.NewPCG(seed, 2))
	var choice []int
	for _, list := range wide.fittings {
		choice = append(choice, r.IntN(len(list)))
	}
	var low, high [2]float64
	for n, q := range []int{0, 2} {
		j, ok := wide.demand(choice, q)
		if !ok {
			t.Fatal("no picture")
		}
		half := []float64{(1 + r.Float64()) * math.Sqrt(j.Variance), j.Half / halfSlack * (0.8 + r.Float64())}[n]
		low[n], high[n] = j.Mean-2*half, j.Mean+half
	}
	return randomFormula(rand.New(rand.NewPCG(seed, 1)), low, high)
}

// cancelling is two tanks whose offset is taken: where both take a part from
// one line, what that lot has in common cancels.
func cancelling(seed uint64) string {
	r := rand.New(rand.NewPCG(seed, 3))
	text := tanks(fmt.Sprintf("%d Hz", 40+r.IntN(200)))
	text = strings.Replace(text, "C2, same_as: a.tank", "C2, value: 220 pF, choose: {families: [c0g, polystyrene, polypropylene], tolerances: [1 %, 5 %]}", 1)
	if r.IntN(2) == 0 {
		text = strings.Replace(text, "L2, same_as: a.coil", "L2, value: 1 mH, choose: {families: [drum-choke, powdered-iron-toroid, ferrite-pot], tolerances: [5 %, 10 %]}", 1)
	}
	return strings.Replace(text, "share: 90 %", fmt.Sprintf("share: %d %%", 50+r.IntN(45)), 1)
}

// mixing are builds of lots that the same choice may merge and part again.
func mixing(seed uint64) string {
	return strings.ReplaceAll(cancelling(seed), "tolerances: [1 %, 5 %]}", "tolerances: [1 %, 5 %], lots: [one, mixed]}")
}

// TestAddingUpGivesThePrice searches small random builds by effects that add up
// and by judging every choice whole, and asks for one price.
func TestAddingUpGivesThePrice(t *testing.T) {
	rounds, found := 3, 0
	if testing.Short() {
		rounds = 2
	}
	for seed := range uint64(rounds) {
		for name, text := range map[string]string{"formula": windows(t, seed), "tanks": cancelling(seed), "lots": mixing(seed)} {
			var r [2]*Result
			for n, few := range []int{math.MaxInt, 1} {
				var err error
				if r[n], _, err = Choose(context.Background(), read(t, text), Options{Seed: seed, Units: 240, few: few}); err != nil {
					t.Fatalf("%s %d: %v", name, seed, err)
				}
			}
			whole, added := r[0], r[1]
			if whole.ProvedCheapest != added.ProvedCheapest || whole.ProvedCheapest && (whole.Total != added.Total || added.Bound != added.Total) {
				t.Errorf("%s %d: judged whole %v (proved %v), added up %v (proved %v)", name, seed, whole.Total, whole.ProvedCheapest, added.Total, added.ProvedCheapest)
			}
			if whole.Provided != "" || added.Provided != provided {
				t.Errorf("%s %d: provided %q and %q", name, seed, whole.Provided, added.Provided)
			}
			if whole.ProvedCheapest {
				found++
			}
		}
	}
	if found < 2*rounds {
		t.Errorf("only %d of %d have an answer: the test proves little", found, 3*rounds)
	}
}

// TestMargins holds the margins, as widened, against every choice. One that
// lies outside is noticed when it is judged, and the margins then hold it.
func TestMargins(t *testing.T) {
	rounds := 4
	if testing.Short() {
		rounds = 2
	}
	choices, outside := 0, 0
	for seed := range uint64(rounds) {
		for name, text := range map[string]string{"formula": windows(t, seed), "tanks": cancelling(seed), "lots": mixing(seed)} {
			c := chooserOf(t, read(t, text), Options{Seed: seed})
			a, err := c.newSearch(c.asked(), nil).addEffects()
			if err != nil {
				t.Fatal(err)
			}
			a.widen()
			for _, choice := range everyChoice(c) {
				choices++
				a.beyond = false
				inside := a.holds(choice)
				a.problem.Judge(choice)
				if a.beyond == inside {
					t.Fatalf("%s %d, %v: inside the margins %v, noticed %v", name, seed, choice, inside, a.beyond)
				}
				if !inside {
					outside++
					if !a.holds(choice) {
						t.Fatalf("%s %d, %v: outside margins that were widened for it", name, seed, choice)
					}
				}
			}
		}
	}
	if choices < 500*rounds {
		t.Errorf("%d choices", choices)
	}
	if !testing.Short() && outside == 0 {
		t.Error("no choice lies outside the margins: that it is noticed is not tested")
	}
}

// holds says whether what a choice is judged by lies within the margins of the
// sum of its effects.
func (a *additive) holds(choice []int) bool {
	for q := range a.pictures.demands {
		j, ok := a.demandOf(choice, q)
		s, m := a.sum(choice, q), a.margins[q]
		if !ok || math.Abs(j.Mean-s.Mean) > m.mean || j.Variance < m.variance*s.Variance || j.Half < m.half*s.Half || j.slack > m.slack {
			return false
		}
	}
	return true
}

func (a *additive) demandOf(choice []int, q int) (judged, bool) {
	return a.pictures.demand(a.full(choice), q)
}

// TestEffectsByHand takes a·b of two resistors apart about the first of each:
// with a = 1 kΩ ±1 % and b = 1 kΩ or 2 kΩ ±5 % (σ a third of that),
//
//	a·b = 1 or 2 MΩ², of b 0 or 1 MΩ²; u² = (b·a·0.01/3)² + (a·b·0.05/3)²
//
// of which b makes the second and a, about b = 1 kΩ, (1 MΩ²·0.01/3)².
func TestEffectsByHand(t *testing.T) {
	c := chooserOf(t, read(t, `
build: product
units: 8
conditions: {bench: {temperature: 25 °C}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, value: 1 kΩ, choose: {families: [metal-film-100], tolerances: [1 %, 2 %]}}
      b: {part: resistor, ref: R2, choose: {families: [metal-film-100], tolerances: [5 %], values: [1 kΩ, 2 kΩ]}}
    outputs: {x: {expression: a*b/(1000*ohm), unit: Ω}}
targets: [{name: x, output: s.x, between: [1 Ω, 9 kΩ]}]
`), Options{})
	a, err := c.newSearch(c.asked(), nil).addEffects()
	if err != nil {
		t.Fatal(err)
	}
	// in Ω; the shape's variance is that of a normal of σ ⅓ truncated to ±1
	v := a.effects[0][0][0].Variance / (10 * 10)
	if v < 0.9/9 || v > 1.0/9 {
		t.Errorf("a truncated normal's variance came out at %v of the half width squared", v)
	}
	for _, e := range []struct {
		what      string
		got, want exact.Effect
	}{
		{"a 1 %", a.effects[0][0][0], exact.Effect{Mean: 0, Variance: v * 10 * 10, Half: 10 * halfSlack}},
		{"a 2 %", a.effects[0][1][0], exact.Effect{Mean: 0, Variance: v * 20 * 20, Half: 20 * halfSlack}},
		{"b 1 kΩ", a.effects[1][0][0], exact.Effect{Mean: 0, Variance: v * 50 * 50, Half: 50 * halfSlack}},
		{"b 2 kΩ", a.effects[1][1][0], exact.Effect{Mean: 1000, Variance: v * 100 * 100, Half: 100 * halfSlack}},
		{"the rest", a.rest[0], exact.Effect{Mean: 1000}},
	} {
		if !near(e.got.Mean, e.want.Mean) || !near(e.got.Variance, e.want.Variance) || !near(e.got.Half, e.want.Half) {
			t.Errorf("%s: %+v, want %+v", e.what, e.got, e.want)
		}
	}
	// with b = 2 kΩ, a's 1 % is 20 Ω and not 10: the sum has (10² + 100²)·v, the
	// picture (20² + 100²)·v; of a = 2 %, 20² and 40²
	if m := a.margins[0]; m.variance != 1 || !near(m.over, (40.0*40+100*100)/(20*20+100*100)) || m.mean > 1e-9 {
		t.Errorf("margins %+v", m)
	}
}

// TestNoNumber has options with which a square root has none, which no sum of
// effects can say anything of: the answer is the same, and no error.
func TestNoNumber(t *testing.T) {
	text := `
build: root
units: 8
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, choose: {families: [metal-film-100], tolerances: [1 %, 5 %], values: [VALUES]}}
      b: {part: resistor, ref: R2, choose: {families: [metal-film-100], tolerances: [1 %], values: [1 kΩ, 2 kΩ]}}
    outputs: {x: {expression: "sqrt((a-b)/ohm)"}, y: {expression: a+b, unit: Ω}}
targets:
  - {name: x, output: s.x, between: [20, 40], share: 90 %}
  - {name: y, output: s.y, between: [2.5 kΩ, 5.5 kΩ], share: 90 %}
`
	for _, values := range []string{"2.7 kΩ, 1.5 kΩ, 3.3 kΩ", "1.5 kΩ, 2.7 kΩ, 3.3 kΩ", "510 Ω, 2.7 kΩ, 3.3 kΩ"} {
		for _, few := range []int{0, 1} {
			if !compareWithAll(t, read(t, strings.Replace(text, "VALUES", values, 1)), Options{Seed: 1, Units: 400, few: few}) {
				t.Error("nothing meets the targets: the test proves nothing")
			}
		}
	}
}
