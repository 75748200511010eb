package bench_test

import (
	"context"
	"math"
	"strings"
	"testing"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

const box = `
build: box
units: 10
instruments:
  dmm: {resistance: 10 MΩ, accuracy: 0.5 %, floor: 2 mV}
  scope: {resistance: 10 MΩ, capacitance: 15 pF, accuracy: 3 %, floor: 10 mV}
  counter: {through: scope, accuracy: 20 ppm, floor: 1 Hz}
conditions: {bench: {temperature: 25 °C, supply: 12 V}}
stages:
  half:
    kind: divider
    settings: {input: supply}
    parts:
      upper: {ref: R1, value: 1 MΩ, tolerance: 1 %, shape: uniform}
      lower: {ref: R2, value: 1 MΩ, tolerance: 1 %, shape: uniform}
  a:
    kind: tuned-tank
    parts:
      coil:  {ref: L1, value: 1 mH, tolerance: 2 %}
      tank:  {ref: C1, value: 150 pF}
      tuner: {ref: CT1, value: 0..40 pF}
  b:
    kind: tuned-tank
    parts:
      coil: {ref: L2, value: 1 mH, tolerance: 2 %}
      tank: {ref: C2, value: 170 pF}
  mix:
    kind: multiplier
    in: {carrier: a, signal: b}
trims:
  - {turn: a.tuner, output: mix.offset, to: 0 Hz}
targets:
  - {name: half, output: half.voltage, at: [bench], between: [5.8 V, 6.2 V]}
`

func sheet(t *testing.T) (bench.Sheet, *spread.Report) {
	t.Helper()
	b, err := build.Read("box.yaml", []byte(box), nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 1, Units: 20_000})
	if err != nil {
		t.Fatal(err)
	}
	return bench.NewSheet(m, r), r
}

func find(t *testing.T, s bench.Sheet, point string) bench.Reading {
	t.Helper()
	for _, r := range s.Readings {
		if r.Point == point {
			return r
		}
	}
	t.Fatalf("no reading %s in %+v", point, s.Readings)
	return bench.Reading{}
}

func near(t *testing.T, what string, got spread.Figure, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(float64(got)-want) <= tolerance) {
		t.Errorf("%s = %.9g, want %.9g ± %.2g", what, float64(got), want, tolerance)
	}
}

// TestLoading has a meter of 10 MΩ across a divider of 1 MΩ and 1 MΩ, whose
// 6 V from 500 kΩ it pulls down to 6·10/10.5 V, and a probe of 15 pF across a
// tank of 1 mH and 170 pF.
func TestLoading(t *testing.T) {
	s, _ := sheet(t)
	half := find(t, s, "half.voltage")
	near(t, "unloaded", half.Unloaded, 6, 1e-12)
	near(t, "reading", half.Nominal, 6*10/10.5, 1e-9)
	tank := find(t, s, "b.frequency")
	f := func(c float64) float64 { return 1 / (2 * math.Pi * math.Sqrt(1e-3*c)) }
	near(t, "unloaded tank", tank.Unloaded, f(170e-12), 1e-6)
	near(t, "loaded tank", tank.Nominal, f(185e-12), 1e-6)
}

// TestWindows checks the divider's windows. Its loaded reading is
// 12·G1/(G1+G2+Gm), nearly the difference of two uniform parts and so nearly
// triangular. The meter's
// U = 2·(0.5 %·5.714 V + 2 mV)/√3 = 35.30 mV (JCGM 100, 4.3.7).
func TestWindows(t *testing.T) {
	s, _ := sheet(t)
	r := find(t, s, "half.voltage")
	u := func(v float64) float64 { return 2 * (0.005*v + 0.002) / math.Sqrt(3) }
	near(t, "U", r.Uncertainty, u(6*10/10.5), 1e-12)
	near(t, "U by hand", r.Uncertainty, 0.0353, 5e-5)

	// A triangular distribution of half width a holds its central 99.73 %
	// within a·(1 − √0.0027); a is half the range of the two corners.
	reading := func(r1, r2 float64) float64 { return 12 / r1 / (1/r1 + 1/r2 + 0.1) }
	low, high := reading(1.01, 0.99), reading(0.99, 1.01)
	middle, a := (low+high)/2, (high-low)/2*(1-math.Sqrt(0.0027))
	near(t, "expected low", r.Expected.Low, middle-a-u(middle-a), 1.5e-3)
	near(t, "expected high", r.Expected.High, middle+a+u(middle+a), 1.5e-3)

	if r.Accept == nil {
		t.Fatal("no window for the target")
	}
	// With R2' = R2 ∥ 10 MΩ = 10/11 MΩ the slopes of the loaded reading are
	// −12·R2'/(R1+R2')² = −1320/441 V/MΩ by R1 and 12·R1/(R1+R2')²·(10/11)² =
	// 1200/441 by R2, those of the bare one −3 and 3: the best scale is their
	// product over 18, 20/21, and what is left (3·20/21 − 1320/441 = −60/441) by
	// either, each of 1 %/√3.
	left := 60.0 / 441 * math.Sqrt2 * 0.01 / math.Sqrt(3)
	guard := func(v float64) float64 { return math.Hypot(u(v), 2*left) }
	k := 20.0 / 21
	near(t, "accept low", r.Accept.Low, 5.8*k+guard(5.8*k), 1e-9)
	near(t, "accept high", r.Accept.High, 6.2*k-guard(6.2*k), 1e-9)
	if b := find(t, s, "b.level"); b.Accept != nil {
		t.Error("a window for a target that there is none of")
	}
}

// TestOrder asks for signal order, with the first tank's frequency after the
// trim that moves it, though its stage comes before.
func TestOrder(t *testing.T) {
	s, _ := sheet(t)
	var order []string
	for step := 1; step <= len(s.Readings)+len(s.Turns); step++ {
		for _, r := range s.Readings {
			if r.Step == step {
				order = append(order, r.Point)
			}
		}
		for _, turn := range s.Turns {
			if turn.Step == step {
				order = append(order, "turn "+turn.Turn)
			}
		}
	}
	got := strings.Join(order, ", ")
	if !strings.HasPrefix(got, "half.voltage, a.level, b.frequency, b.level, turn a.tuner, a.frequency") {
		t.Errorf("got %s", got)
	}
	turn := s.Turns[0]
	if turn.Ref != "CT1" || turn.Rises || turn.Watch != "mix.offset" {
		t.Errorf("got %+v", turn)
	}
}

// TestLoadedTrim warns where the probe that a trim is watched by moves what it
// watches: 15 pF across 170 pF take 386 kHz to 370 kHz.
func TestLoadedTrim(t *testing.T) {
	text := strings.Replace(box, "output: mix.offset, to: 0 Hz", "output: a.frequency, to: 386 kHz, within: 100 Hz", 1)
	b, err := build.Read("box.yaml", []byte(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 1, Units: 1000})
	if err != nil {
		t.Fatal(err)
	}
	// 1/(2π·√(1 mH·C)) = 386 kHz is C = 170.006 pF; with 15 pF more, 370.02 kHz.
	at := bench.NewSheet(m, r).Turns[0].At
	if !strings.Contains(at, "the counter shows 370.02") || !strings.Contains(at, "set to 386") {
		t.Errorf("got %q", at)
	}
}

// TestPairAtThePoint names both pieces where two make up a part.
func TestPairAtThePoint(t *testing.T) {
	text := strings.NewReplacer(
		"{ref: R1, value: 1 MΩ, tolerance: 1 %, shape: uniform}", "{ref: R1, parallel: [{value: 2 MΩ}, {value: 2 MΩ}]}",
		"{ref: R2, value: 1 MΩ, tolerance: 1 %, shape: uniform}", "{ref: R2, series: [{value: 820 kΩ}, {value: 180 kΩ}]}",
		"{ref: L1, value: 1 mH, tolerance: 2 %}", "{ref: L1, series: [{value: 820 uH}, {value: 180 uH}]}",
	).Replace(box)
	b, err := build.Read("box.yaml", []byte(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 1, Units: 100})
	if err != nil {
		t.Fatal(err)
	}
	s := bench.NewSheet(m, r)
	for point, want := range map[string]string{
		"half.voltage": "tap of R1A ∥ R1B (upper) and R2A + R2B (lower), to ground",
		"a.frequency":  "live end of L1A + L1B (coil), to ground",
		"b.frequency":  "live end of L2 (coil), to ground",
	} {
		if got := find(t, s, point).At; got != want {
			t.Errorf("%s is read at %q, want %q", point, got, want)
		}
	}
}
