package spread_test

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// TestWorstDivider is the equal divider of 10 V with 1 % parts: 4.95 V to
// 5.05 V, root sum square half width 35.36 mV (sensitivity ½ each; rectangular
// parts: u = 20.41 mV).
func TestWorstDivider(t *testing.T) {
	r := analyse(t, `
build: divider
units: 10
conditions: {bench: {temperature: 25 °C}}
stages:
  d:
    kind: divider
    settings: {input: 10 V}
    parts:
      upper: {ref: R1, value: 10 kΩ, tolerance: 1 %, shape: uniform}
      lower: {ref: R2, value: 10 kΩ, tolerance: 1 %, shape: uniform}
`, 50_000)
	y := find(t, r, "d.voltage", "bench", "")
	near(t, "nominal", y.Nominal, 5, 1e-12)
	near(t, "low", y.WorstCase.Low, 4.95, 1e-12)
	near(t, "high", y.WorstCase.High, 5.05, 1e-12)
	near(t, "u", y.RootSumSquare.StandardUncertainty, 0.02041241452, 1e-10)
	near(t, "2.5 %", y.Simulated.Quantiles["0.025"], 4.961180005, 5e-4)
	near(t, "97.5 %", y.Simulated.Quantiles["0.975"], 5.038819998, 5e-4)
	for _, c := range y.WorstCase.AtHigh {
		want := map[string]float64{"R1": -1, "R2": 1}[c.Ref]
		if c.Parameter == "value" && float64(c.Z) != want {
			t.Errorf("%s at the highest output stands at %v, want %v", c.Ref, c.Z, want)
		}
	}
}

// TestWorstLimitingError is R = (P/Q)·S with 0.02 %, 0.02 % and 0.01 %:
// 229.885 Ω to 230.115 Ω by adding up (U. S. Shah, Electronics Instrumentation
// and Measurements, Ex. 7.5.8); the corners themselves are 1.4e-5 wider.
func TestWorstLimitingError(t *testing.T) {
	r := analyse(t, `
build: bridge
units: 10
conditions: {bench: {temperature: 25 °C}}
stages:
  b:
    kind: formula
    parts:
      p: {ref: R1, value: 100 Ω, tolerance: 0.02 %}
      q: {ref: R2, value: 100 Ω, tolerance: 0.02 %}
      s: {ref: R3, value: 230 Ω, tolerance: 0.01 %}
    outputs: {r: {expression: p/q*s, unit: Ω}}
`, 1000)
	y := find(t, r, "b.r", "bench", "")
	near(t, "low", y.WorstCase.Low, 230*0.9998/1.0002*0.9999, 1e-10)
	near(t, "high", y.WorstCase.High, 230*1.0002/0.9998*1.0001, 1e-10)
	near(t, "low, printed", y.WorstCase.Low, 229.885, 3e-5)
	near(t, "high, printed", y.WorstCase.High, 230.115, 3e-5)
}

// TestWorstTemperature is 1.2 kΩ ± 5 % at 500 ppm/K from 25 °C to 75 °C: at
// most 1.2915 kΩ (D. A. Bell, Electronic Instrumentation and Measurements,
// Ex. 2-1, p. 16).
func TestWorstTemperature(t *testing.T) {
	r := analyse(t, `
build: resistor
units: 10
conditions: {hot: {temperature: 75 °C}}
stages:
  r:
    kind: formula
    parts: {r: {ref: R1, value: 1.2 kΩ, tolerance: 5 %, temperature_coefficient: 500 ppm/K}}
    outputs: {value: {expression: r, unit: Ω}}
`, 1000)
	near(t, "high", find(t, r, "r.value", "hot", "").WorstCase.High, 1291.5, 1e-9)
}

// TestWorstManyInputs is a sum of random terms, some of them bent, with more
// inputs than every corner can be tried of: each term is monotone in its own
// input, so the extreme is the sum of the terms' own.
func TestWorstManyInputs(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 5 {
		var settings, terms []string
		var low, high float64
		for i := range 20 {
			a, k := rng.Float64()*4-2, 0.2+rng.Float64()
			settings = append(settings, fmt.Sprintf("x%d: {value: 0, tolerance: 1, shape: uniform}", i))
			terms = append(terms, fmt.Sprintf("(%.17g)*exp(%.17g*x%d)", a, k, i))
			low += min(a*math.Exp(k), a*math.Exp(-k))
			high += max(a*math.Exp(k), a*math.Exp(-k))
		}
		y := find(t, analyse(t, head(settings, strings.Join(terms, " + ")), 1000), "y.value", "bench", "")
		near(t, "low", y.WorstCase.Low, low, 1e-9)
		near(t, "high", y.WorstCase.High, high, 1e-9)
		if !strings.Contains(y.WorstCase.Searched, "not proved") {
			t.Errorf("claims more than it found: %s", y.WorstCase.Searched)
		}
	}
}

// example is the embedded tone box.
func example(t testing.TB) *build.Model {
	t.Helper()
	text, err := data.Examples.ReadFile("examples/lantern.yaml")
	if err != nil {
		t.Fatal(err)
	}
	return compile(t, string(text))
}

// TestWorstHoldsSimulated asks, of the embedded example, that no simulated
// unit lies beyond a worst case, and no worst case beyond what is guaranteed.
func TestWorstHoldsSimulated(t *testing.T) {
	r, err := spread.Analyse(context.Background(), example(t), spread.Options{Seed: 3, Units: 4800})
	if err != nil {
		t.Fatal(err)
	}
	for _, o := range r.Outputs {
		w, s := o.WorstCase, o.Simulated
		slack := 1e-9 * (math.Abs(float64(w.Low)) + math.Abs(float64(w.High)))
		name := o.Output + " at " + o.Condition + " from " + o.ChangeFrom
		if float64(s.Quantiles["0.005"]) < float64(w.Low)-slack || float64(s.Quantiles["0.995"]) > float64(w.High)+slack {
			t.Errorf("%s: simulated %v to %v, worst case %v to %v", name, s.Quantiles["0.005"], s.Quantiles["0.995"], w.Low, w.High)
		}
		if float64(w.Guaranteed.Low) > float64(w.Low)+slack || float64(w.Guaranteed.High) < float64(w.High)-slack {
			t.Errorf("%s: worst case %v to %v, guaranteed %v to %v", name, w.Low, w.High, w.Guaranteed.Low, w.Guaranteed.High)
		}
	}
}

// TestSameForAnyWorkers asks for the same report from one worker and from two.
func TestSameForAnyWorkers(t *testing.T) {
	m := example(t)
	var text [2]string
	for i, workers := range []int{1, 2} {
		r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 5, Units: 9600, Workers: workers})
		if err != nil {
			t.Fatal(err)
		}
		b, err := json.Marshal(r)
		if err != nil {
			t.Fatal(err)
		}
		text[i] = string(b)
	}
	if text[0] != text[1] {
		t.Error("one worker and two give different reports")
	}
}

func BenchmarkAnalyse(b *testing.B) {
	m := example(b)
	for b.Loop() {
		if _, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 1, Units: 24_000}); err != nil {
			b.Fatal(err)
		}
	}
}
