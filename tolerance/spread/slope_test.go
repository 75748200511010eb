package spread

import (
	"context"
	"math"
	"testing"

	"batchwright/tolerance/build"
)

// tankOfLots is a tank whose two capacitors are pieces of one lot.
const tankOfLots = `
build: tank of lots
units: 20
conditions: {bench: {temperature: 25 °C}}
stages:
  a:
    kind: tuned-tank
    settings: {rise: 0 K}
    parts:
      coil: {ref: L1, value: 1 mH, shape: uniform, temperature_coefficient: {value: 300 ppm/K, spread: 100 ppm/K}, correlation: {temperature: 0.8}}
      tank: {ref: C1, value: 100 pF, shape: uniform, temperature_coefficient: {value: -100 ppm/K, spread: 60 ppm/K}, correlation: {temperature: 0.6}}
      pad:  {ref: C2, value: 100 pF, shape: uniform, temperature_coefficient: {value: -100 ppm/K, spread: 60 ppm/K}, correlation: {temperature: 0.6}}
`

func readBuild(t *testing.T, text string) *build.Build {
	t.Helper()
	b, err := build.Read("test.yaml", []byte(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

var tankFrequency = build.OutputName{Stage: "a", Output: "frequency"}

// TestDriftPerKelvinClosedForm holds the first-order drift of a tank against
//
//	df/dT = −f/2·(α_L + Σ p_i·α_i),  p_i = C_i/C
//
// at 25 °C, where every coefficient is counted from. A uniform α scatters by
// its half width over √3; two pieces of a lot resemble each other by
// 6/π·asin(ρ/2) (Pearson's correlation of uniform marginals under a Gaussian
// copula). p is ½ for each capacitor.
func TestDriftPerKelvinClosedForm(t *testing.T) {
	d, err := DriftPerKelvin(readBuild(t, tankOfLots), tankFrequency)
	if err != nil {
		t.Fatal(err)
	}
	f := 1 / (2 * math.Pi * math.Sqrt(1e-3*200e-12))
	common := func(rho float64) float64 { return 6 / math.Pi * math.Asin(rho/2) }
	ul, uc := 100e-6/math.Sqrt(3), 60e-6/math.Sqrt(3)
	shared := f / 2 * math.Sqrt(common(0.8)*ul*ul+common(0.6)*uc*uc)
	own := f / 2 * math.Sqrt((1-common(0.8))*ul*ul+(1-common(0.6))*(uc*uc/4+uc*uc/4))
	if d.Output != "a.frequency" || d.Unit != "Hz" || d.Why != "" {
		t.Errorf("%+v", d)
	}
	for _, c := range []struct {
		name      string
		got       Figure
		want, off float64
	}{
		// over half a kelvin the third derivative adds less than (α/2)² of it
		{"mean", d.Mean, -f / 2 * (300e-6 - 100e-6), 1e-6}, {"lot to lot", d.LotToLot, shared, 1e-6}, {"unit to unit", d.UnitToUnit, own, 1e-6},
	} {
		if !(math.Abs(float64(c.got)/c.want-1) <= c.off) {
			t.Errorf("%s %.9g Hz, want %.9g", c.name, float64(c.got), c.want)
		}
	}
}

// lots of parts in a trimmed pair of tanks: the first coil's value is trimmed
// away, and the drift of the offset comes of how unlike the two sides are.
const pairOfLots = `
build: pair of lots
units: 24
conditions: {bench: {temperature: 25 °C}}
stages:
  a:
    kind: tuned-tank
    parts:
      coil:  {ref: L1, value: 1 mH, tolerance: 3 %, temperature_coefficient: {value: 300 ppm/K, spread: 100 ppm/K}, correlation: {value: 0.5, temperature: 0.8}}
      tank:  {ref: C1, value: 100 pF, tolerance: 2 %, temperature_coefficient: {value: -100 ppm/K, spread: 60 ppm/K}, correlation: {value: 0.5, temperature: 0.6}}
      tuner: {ref: CT1, value: 0..60 pF, position: 0.4, temperature_coefficient: {value: -250 ppm/K, spread: 200 ppm/K}, correlation: {temperature: 0.7}}
  b:
    kind: tuned-tank
    parts:
      coil: {ref: L2, same_as: a.coil}
      tank: {ref: C2, same_as: a.tank}
      pad:  {ref: C3, value: 20 pF, tolerance: 5 %, temperature_coefficient: {value: 0 ppm/K, spread: 30 ppm/K}}
  mix:
    kind: multiplier
    in: {carrier: a, signal: b}
trims:
  - {turn: a.tuner, output: mix.offset, to: 300 Hz, within: 2 Hz}
`

// TestDriftPerKelvinParts holds the two parts of the scatter against those of a
// simulation: over batches of n, the variance of the batches' means is
// shared + own/n, and that within a batch own (one-way analysis of variance).
func TestDriftPerKelvinParts(t *testing.T) {
	b := readBuild(t, pairOfLots)
	offset := build.OutputName{Stage: "mix", Output: "offset"}
	d, err := DriftPerKelvin(b, offset)
	if err != nil {
		t.Fatal(err)
	}
	swept, err := b.Sweep(offset, build.Temperature, []float64{24.5, 25.5})
	if err != nil {
		t.Fatal(err)
	}
	m, err := swept.CompileTargets()
	if err != nil {
		t.Fatal(err)
	}
	n := newNodes(m, nil, []int{0}, false)
	from, to := n.columnOf[m.Targets[0].Outputs[0]], n.columnOf[m.Targets[0].Outputs[1]]
	n.kept = []int{from, to}
	s, err := simulate(context.Background(), n, Options{Seed: 5, Units: 24 * 8000})
	if err != nil {
		t.Fatal(err)
	}
	var all, within Moments
	var means Moments
	for batch := range s.batches {
		var one Moments
		x := make([]float64, 24)
		for i := range x {
			u := 24*batch + i
			x[i] = s.values[to][u] - s.values[from][u]
		}
		one.AddColumn(x, nil)
		all.AddColumn(x, nil)
		means.AddColumn([]float64{one.Mean()}, nil)
		v := one.StandardDeviation()
		within.AddColumn([]float64{v * v}, nil)
	}
	own := within.Mean()
	between := means.StandardDeviation()
	shared := between*between - own/24
	// 8000 batches: a variance of about normal means is good to √(2/8000) =
	// 1.6 %, its root to 0.8 %; three of those, and 1 % for the second order.
	for _, c := range []struct {
		name            string
		got, want, part float64
	}{
		{"mean", float64(d.Mean), all.Mean(), 0.01},
		{"lot to lot", float64(d.LotToLot), math.Sqrt(shared), 0.035},
		{"unit to unit", float64(d.UnitToUnit), math.Sqrt(own), 0.015},
	} {
		if !(math.Abs(c.got/c.want-1) <= c.part) {
			t.Errorf("%s %.6g Hz, simulated %.6g", c.name, c.got, c.want)
		}
	}
	if d.LotToLot == 0 || d.UnitToUnit == 0 || d.LotToLot == d.UnitToUnit {
		t.Errorf("nothing was compared: %+v", d)
	}
}

// An output that does not exist at the centre has no drift, and says so.
func TestDriftPerKelvinOfNothing(t *testing.T) {
	b := readBuild(t, `
build: nothing
units: 2
conditions: {bench: {temperature: 25 °C}}
stages:
  s:
    kind: formula
    parts: {r: {ref: R1, value: 1 kΩ, tolerance: 1 %}}
    outputs: {x: {expression: "sqrt(-1*ohm/r)"}}
`)
	d, err := DriftPerKelvin(b, build.OutputName{Stage: "s", Output: "x"})
	if err != nil || d.Why == "" {
		t.Errorf("%+v, %v", d, err)
	}
	if _, err := DriftPerKelvin(b, build.OutputName{Stage: "s", Output: "y"}); err == nil {
		t.Error("an unknown output has a drift")
	}
}
