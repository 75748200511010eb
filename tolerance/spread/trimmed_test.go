package spread_test

import (
	"math"
	"testing"
)

// twoTanks are two tuned tanks whose offset is trimmed to zero by the only
// capacitor of the first.
const twoTanks = `
build: two tanks
units: 20
conditions:
  bench: {temperature: 25 °C, warmup: 0}
  warm:  {warmup: 1}
stages:
  a:
    kind: tuned-tank
    settings: {rise: 10 K}
    parts:
      coil:  {ref: L1, value: 1 mH, tolerance: 5 %, shape: uniform, temperature_coefficient: {value: 300 ppm/K, spread: 100 ppm/K}}
      tank:  {ref: C1, value: 100 pF}
      tuner: {ref: CT1, value: 0..40 pF}
  b:
    kind: tuned-tank
    settings: {rise: 10 K}
    parts:
      coil: {ref: L2, value: 1 mH, tolerance: 5 %, shape: uniform, temperature_coefficient: {value: 200 ppm/K, spread: 100 ppm/K}}
      tank: {ref: C2, value: 120 pF, temperature_coefficient: -50 ppm/K}
  mix:
    kind: multiplier
    in: {carrier: a, signal: b}
trims:
  - {turn: a.tuner, output: mix.offset, to: 0 Hz}
targets:
  - {name: drift, output: mix.offset, change_from: bench, at: [warm], limit: 1 kHz}
`

// TestTrimmedTanks compares with the closed form. After the trim L1·C1 = L2·C2
// at 25 °C, so both run at f = 1/(2π√(L2·C2)) and warmed by Δ they part by
//
//	f·((1+α1·Δ)^−½ − ((1+α2·Δ)(1+γ·Δ))^−½)
//
// in which the first coil's own value does not occur.
func TestTrimmedTanks(t *testing.T) {
	r := analyse(t, twoTanks, 100_000)
	y := find(t, r, "mix.offset", "warm", "bench")
	f := func(l2 float64) float64 { return 1 / (2 * math.Pi * math.Sqrt(l2*120e-12)) }
	drift := func(l2, a1, a2 float64) float64 {
		const delta = 10
		return f(l2) * (1/math.Sqrt(1+a1*delta) - 1/math.Sqrt((1+a2*delta)*(1-50e-6*delta)))
	}
	near(t, "nominal", y.Nominal, drift(1e-3, 300e-6, 200e-6), 1e-6)
	near(t, "worst low", y.WorstCase.Low, drift(0.95e-3, 400e-6, 100e-6), 1e-6)
	near(t, "worst high", y.WorstCase.High, drift(0.95e-3, 200e-6, 300e-6), 1e-6)

	// First order: u of each α is 100 ppm/K·√(variance of the shape); α's
	// shape is the part's own, uniform, so /√3. ∂drift/∂α = −½·f·Δ·(1+αΔ)^−3⁄2,
	// and by L2: −drift/(2·L2).
	u := 100e-6 / math.Sqrt(3)
	d1 := -0.5 * f(1e-3) * 10 * math.Pow(1+300e-6*10, -1.5) * u
	d2 := 0.5 * f(1e-3) * 10 * math.Pow(1+200e-6*10, -1.5) / math.Sqrt(1-50e-6*10) * u
	dl := -0.5 * drift(1e-3, 300e-6, 200e-6) * 0.05 / math.Sqrt(3)
	want := math.Sqrt(d1*d1 + d2*d2 + dl*dl)
	near(t, "first-order u", y.RootSumSquare.StandardUncertainty, want, 1e-6*want)
	near(t, "simulated u", y.Simulated.StandardDeviation, want, 0.01*want)

	// The tuner's setting: (L2·120 pF/L1 − 100 pF)/40 pF, ½ on a nominal unit.
	near(t, "setting", r.Trims[0].Setting.Nominal, 0.5, 1e-9)
	near(t, "reached", r.Trims[0].ReachedShare, 1, 0)
	near(t, "trimmed offset", find(t, r, "mix.offset", "bench", "").Simulated.StandardDeviation, 0, 1e-6)
}
