package pick

import (
	"context"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
)

// warming is a resistor of 1 kΩ ±5 % and −500 ± 400 ppm/K that warms from 25 °C
// by 20 K or by 30 K (and cools by 10 K), in a product with an ideal 2.
//
// Its value is 1 kΩ·(1 + 0.05·z)·(1 + (−500 + 400·y)·1e-6·Δ), so that over Δ it
// changes by a mean of −0.5·Δ Ω, with half widths 0.4·|Δ| Ω by y and
// 0.05·0.5·|Δ| Ω by z.
const warming = `
build: warming
units: 10
conditions:
  bench: {temperature: 25 °C}
  warm:  {temperature: 45 °C}
  hot:   {temperature: 55 °C}
  cold:  {temperature: 15 °C}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, value: 1 kΩ, temperature_coefficient: {value: -500 ppm/K, spread: 400 ppm/K}, choose: {families: [metal-film-100], tolerances: [5 %]}}
    outputs: {x: {expression: 2*a, unit: Ω}}
targets:
  - {name: one, output: s.x, change_from: bench, at: [warm], limit: 100 Ω, share: 90 %}
  - {name: widest, output: s.x, change_from: bench, at: [cold, hot, warm], limit: 100 Ω, share: 75 %}
  - {name: corner, output: s.x, change_from: bench, at: [warm], limit: 100 Ω, by: worst-case}
  - {name: value, output: s.x, between: [1 kΩ, 3 kΩ], share: 50 %}
`

// TestSteadinessByHand solves Φ((w−m)/s) − Φ((−w−m)/s) = share with another
// library's normal distribution.
func TestSteadinessByHand(t *testing.T) {
	c := chooserOf(t, read(t, warming), Options{})
	if got := c.changes(); !slices.Equal(got, []int{0, 1, 2}) {
		t.Errorf("the targets on changes are %v", got)
	}
	normal := scatter.Variance("normal")
	for target, v := range map[int]struct{ share, kelvin float64 }{0: {0.90, 20}, 1: {0.75, 30}} {
		m := 2 * -0.5 * v.kelvin
		s := 2 * v.kelvin * math.Sqrt(normal*(0.4*0.4+0.025*0.025))
		n := distuv.Normal{Mu: m, Sigma: s}
		w := c.steadiness([]int{0}, target)
		if inside := n.CDF(w) - n.CDF(-w); !(math.Abs(inside-v.share) < 1e-9) {
			t.Errorf("target %d: %v of the units stay within %v, want %v", target, inside, w, v.share)
		}
	}
	if w := c.steadiness([]int{0}, 2); !near(w, 2*20*(0.5+0.4+0.025)) {
		t.Errorf("worst case %v, want %v", w, 2*20*(0.5+0.4+0.025))
	}
}

// TestRemainsIsTheAnalysis compares what remains of every change with nominal
// value, root sum square and contributions of the fitted build.
func TestRemainsIsTheAnalysis(t *testing.T) {
	compared := 0
	for name, text := range tradeBuilds {
		b := read(t, text)
		r, fitted, err := Choose(context.Background(), b, Options{Seed: 1, Units: 400})
		if err != nil {
			t.Fatal(err)
		}
		m, err := fitted.Compile()
		if err != nil {
			t.Fatal(err)
		}
		a, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 1, Units: 400})
		if err != nil {
			t.Fatal(err)
		}
		for _, left := range r.Remains {
			i := slices.IndexFunc(a.Outputs, func(o spread.OutputReport) bool {
				return o.Output == fitted.Targets[0].Output.Stage+"."+fitted.Targets[0].Output.Output && o.Condition == left.Condition && o.ChangeFrom == "bench"
			})
			if i < 0 {
				t.Fatalf("%s: no %s", name, left.Condition)
			}
			compareRemains(t, name, left, a.Outputs[i])
			compared++
		}
	}
	if compared != len(tradeBuilds)+1 { // one has two conditions
		t.Errorf("%d changes compared", compared)
	}
}

func compareRemains(t *testing.T, name string, got Remains, want spread.OutputReport) {
	t.Helper()
	same := func(what string, got, want spread.Figure) {
		if !(math.Abs(float64(got-want)) <= 1e-6*math.Abs(float64(want))) {
			t.Errorf("%s: %s %v, want %v", name, what, got, want)
		}
	}
	same("mean", got.Mean, want.Nominal)
	same("standard deviation", got.Deviation, want.RootSumSquare.StandardUncertainty)
	shares := slices.Clone(want.Contributions)
	slices.SortStableFunc(shares, func(a, b spread.Contribution) int { return compareFloats(float64(b.Share), float64(a.Share)) })
	if len(got.Sources) != mostSources {
		t.Fatalf("%s: %d sources", name, len(got.Sources))
	}
	for k, s := range got.Sources {
		same("share", s.Share, shares[k].Share)
		own := slices.IndexFunc(shares, func(c spread.Contribution) bool { return c.Ref == s.Ref && c.Parameter == s.Parameter })
		if own < 0 {
			t.Fatalf("%s: %s %s contributes nothing", name, s.Ref, s.Parameter)
		}
		same(s.Ref+" "+s.Parameter, s.Share, shares[own].Share)
	}
}

// compensated is a tank whose coil's inductance rises as it warms and whose
// capacitance is made up of two capacitors, of which some fall.
const compensated = `
build: compensated
units: 10
conditions:
  bench: {temperature: 25 °C}
  warm:  {temperature: 35 °C}
stages:
  a:
    kind: tuned-tank
    settings: {stray: 0 pF, rise: 0 K}
    parts:
      coil: {ref: L1, value: 1 mH, family: powdered-iron-toroid, tolerance: 5 %}
      tank: {ref: C1, value: 220 pF, choose: {families: [c0g, u2j, n330], tolerances: [5 %], combine: [parallel], series: E12, within: 3 %}}
targets:
  - {name: drift, output: a.frequency, change_from: bench, at: [warm], limit: 10 kHz, share: 90 %}
`

// TestCompensation finds the two capacitors whose falling slopes cancel the
// coil's rising one. By hand, with p = C_i/C the part each has in the whole,
//
//	Δf/f = −ΔT/2·(α_L + Σ p_i·α_i)
//	u²   = (f·ΔT/2)²·v·(s_L² + Σ p_i²·s_i² + 2·r·p_1·p_2·s_1·s_2)
//
// and r, what two pieces of one buying line share, 0 for two lines. Slopes and
// their spreads are those of the embedded families: coil 190 ± 60, c0g 0 ± 30,
// n330 −330 ± 60, u2j −750 ± 120 ppm/K. What tolerances add is of second
// order: 5 % of the drift.
func TestCompensation(t *testing.T) {
	b := read(t, compensated)
	o := Options{Seed: 1, Units: 400}
	r, _, err := Steadiest(context.Background(), b, "drift", math.MaxInt64, o)
	if err != nil || len(r.Choices) != 1 {
		t.Fatal(r, err)
	}
	c := chooserOf(t, b, o)
	chosen := chosenIn(t, c, r)[0]
	least, smallest, pairs := math.Inf(1), math.Inf(1), len(c.fittings[0])
	for _, f := range c.fittings[0] {
		mean, width := driftByHand(f)
		least, smallest = math.Min(least, width), math.Min(smallest, math.Abs(mean))
	}
	mean, width := driftByHand(c.fittings[0][chosen])
	if !(width <= 1.01*least) {
		t.Errorf("%s stays within %.4g Hz, another of %d pairs within %.4g Hz", c.name(0, chosen), width, pairs, least)
	}
	two := slices.IndexFunc(c.fittings[0], func(f build.Fitting) bool {
		return f.Pieces[0].Family == "c0g" && f.Pieces[1].Family == "c0g"
	})
	plain, _ := driftByHand(c.fittings[0][two])
	if !(math.Abs(mean) <= smallest+0.01*least) || !(math.Abs(mean) < 0.1*math.Abs(plain)) || pairs < 50 {
		t.Errorf("of %d pairs %s leaves a mean of %.4g Hz, the best %.4g Hz, two of c0g %.4g Hz", pairs, c.name(0, chosen), mean, smallest, plain)
	}
	left := r.Remains[0]
	if math.Abs(float64(left.Mean)-mean) > 0.01*math.Abs(plain) || left.Sources[0].Ref != "L1" || left.Sources[0].Parameter != "temperature" {
		t.Errorf("remains %+v, mean by hand %.4g Hz", left, mean)
	}
}

// driftByHand is the mean drift over 10 K and the half width that 90 % of the
// units stay within.
func driftByHand(f build.Fitting) (mean, width float64) {
	slope := map[string][2]float64{"c0g": {0, 30e-6}, "n330": {-330e-6, 60e-6}, "u2j": {-750e-6, 120e-6}}
	p := f.Pieces[0].High / (f.Pieces[0].High + f.Pieces[1].High)
	one, two := slope[f.Pieces[0].Family], slope[f.Pieces[1].Family]
	capacitance := f.Pieces[0].High + f.Pieces[1].High
	half := 10.0 / 2 / (2 * math.Pi * math.Sqrt(1e-3*capacitance))
	mean = -half * (190e-6 + p*one[0] + (1-p)*two[0])
	shared := 0.0
	if f.Pieces[0].Family == f.Pieces[1].Family && f.Pieces[0].High == f.Pieces[1].High {
		shared = 0.9 // the families' correlation of slopes, by ranks as good as that of values
	}
	a, b := p*one[1], (1-p)*two[1]
	s := half * math.Sqrt(scatter.Variance("normal")*(60e-6*60e-6+a*a+b*b+2*shared*a*b))
	n := distuv.Normal{Mu: mean, Sigma: s}
	low, high := 0.0, math.Abs(mean)+10*s
	for range 100 {
		if w := (low + high) / 2; n.CDF(w)-n.CDF(-w) < 0.9 {
			low = w
		} else {
			high = w
		}
	}
	return mean, high
}
