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

// measured reads the box with its targets replaced and other text changed.
func measured(t *testing.T, units int, targets string, changes ...string) bench.Sheet {
	t.Helper()
	text := box[:strings.Index(box, "targets:")] + "targets:\n" + targets
	for i := 0; i < len(changes); i += 2 {
		if !strings.Contains(text, changes[i]) {
			t.Fatalf("no %q to change", changes[i])
		}
		text = strings.ReplaceAll(text, changes[i], changes[i+1])
	}
	b, err := build.Read("box.yaml", []byte(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 1, Units: units})
	if err != nil {
		t.Fatal(err)
	}
	return bench.NewSheet(m, r)
}

const rooms = `conditions:
  bench: {temperature: 25 °C, supply: 12 V, hand: 0 pF}
  mild: {temperature: 30 °C}
  hall: {temperature: 33 °C}
  damp: {humidity: 80 %}
  old: {age: 1000 h}
  hand near: {hand: 10 pF}
  low: {supply: 11 V}`

const benchLine = "conditions: {bench: {temperature: 25 °C, supply: 12 V}}"

// Which conditions are easy, and 1 unit in how many is tested where they are
// not: of 10 units ⌈√10⌉ + 1 = 5, 1 in 2.
func TestSampleConditions(t *testing.T) {
	s := measured(t, 100, "  - {name: half, output: half.voltage, at: [bench, mild, hall, damp, old, hand near, low], between: [5 V, 7 V]}\n", benchLine, rooms)
	want := map[string]string{"mild": "", "hall": "33 °C, 8 K warmer than the bench", "damp": "80 % relative humidity", "old": "an age of 1000 h", "hand near": "", "low": ""}
	if len(s.Samples) != len(want) {
		t.Fatalf("%d samples, want %d: %+v", len(s.Samples), len(want), s.Samples)
	}
	for _, x := range s.Samples {
		every := 1
		if want[x.Condition] != "" {
			every = 2
		}
		if x.Needs != want[x.Condition] || x.Every != every {
			t.Errorf("%s needs %q, 1 unit in %d; want %q, %d", x.Condition, x.Needs, x.Every, want[x.Condition], every)
		}
		if x.Instrument != "dmm" || x.At != "tap of R1 (upper) and R2 (lower), to ground" || x.Unit != "V" {
			t.Errorf("%s is read with %q at %q in %q", x.Condition, x.Instrument, x.At, x.Unit)
		}
	}
}

// The divider's samples. At 11 V it shows 11·10/21 V, and the window of the
// target 5 to 6 V is 20/21 of that, as on the bench. The change from 12 V is
// −10/21 V, of U = 2·(0.5 %·10/21 V + √2·2 mV)/√3.
func TestSampleFigures(t *testing.T) {
	s := measured(t, 20_000, "  - {name: half, output: half.voltage, at: [low], between: [5 V, 6 V]}\n"+
		"  - {name: sag, output: half.voltage, change_from: bench, at: [low], between: [-0.6 V, -0.4 V]}\n", benchLine, rooms)
	low, sag := s.Samples[0], s.Samples[1]
	near(t, "nominal", low.Nominal, 11*10/21.0, 1e-9)
	near(t, "without the meter", low.Unloaded, 5.5, 1e-12)
	left := 11.0 / 12 * 60 / 441 * math.Sqrt2 * 0.01 / math.Sqrt(3) // as on the bench, see TestWindows
	guard := func(v float64) float64 { return math.Hypot(2*(0.005*v+0.002)/math.Sqrt(3), 2*left) }
	near(t, "accept", low.Accept.Low, 5*20/21.0+guard(5*20/21.0), 1e-9)

	near(t, "change", sag.Nominal, -10/21.0, 1e-9)
	u := func(v float64) float64 { return 2 * (0.005*math.Abs(v) + math.Sqrt2*0.002) / math.Sqrt(3) }
	near(t, "U of the change", sag.Uncertainty, u(10/21.0), 1e-12)
	// triangular with a half width of a twelfth of the reading's at 12 V, as in TestWindows
	reading := func(r1, r2 float64) float64 { return -1 / r1 / (1/r1 + 1/r2 + 0.1) }
	lo, hi := reading(0.99, 1.01), reading(1.01, 0.99)
	middle, a := (lo+hi)/2, (hi-lo)/2*(1-math.Sqrt(0.0027))
	near(t, "expected low", sag.Expected.Low, middle-a-u(middle-a), 1.5e-4)
	near(t, "expected high", sag.Expected.High, middle+a+u(middle+a), 1.5e-4)
	if sag.ChangeFrom != "bench" || low.ChangeFrom != "" {
		t.Errorf("changes from %q and %q", sag.ChangeFrom, low.ChangeFrom)
	}
}

// A mixer's beat is counted at its note's point; a corner is read by nothing.
func TestSampleInstruments(t *testing.T) {
	s := measured(t, 100, "  - {name: note, output: mix.offset, change_from: bench, at: [low], limit: 40 Hz}\n"+
		"  - {name: divided, output: half.current, at: [low], between: [1 uA, 9 uA]}\n", benchLine, rooms)
	if x := s.Samples[0]; x.Instrument != "counter" || !strings.HasPrefix(x.At, "output of the multiplier, to ground; a counter shows no sign") {
		t.Errorf("the beat is read with %q at %q", x.Instrument, x.At)
	}
	if x := s.Samples[1]; x.Instrument != "" || !strings.HasPrefix(x.Why, "no test point reads this") || float64(x.Accept.Low) != 1e-6 {
		t.Errorf("the current is read with %q, accepted from %g, %q", x.Instrument, float64(x.Accept.Low), x.Why)
	}
}

// What the instrument does to a reading, in words: 15 pF across 170 pF, and a
// level below what the counter needs. A level of 101 mV ± 10 % is enough on a
// nominal unit; a normal shape of ⅓ cut off at 1 has its 0.135 % quantile at
// −0.9685 (of Φ renormalised), 91.2 mV.
func TestNotes(t *testing.T) {
	target := "  - {name: half, output: half.voltage, at: [bench], between: [5 V, 7 V]}\n"
	s := measured(t, 20_000, target)
	if got, want := find(t, s, "b.frequency").Note, "the counter itself moves this: a nominal unit has 386.008 kHz, it shows 370.028 kHz"; !strings.HasPrefix(got, want[:30]) || !strings.Contains(got, "386.0") || !strings.Contains(got, "370.0") {
		t.Errorf("got %q, want %q", got, want)
	}
	// 6 V from 500 kΩ into 10 MΩ, 5.714 V, with U of 35 mV; from 5 kΩ 5.997 V
	if got, want := find(t, s, "half.voltage").Note, "the dmm itself moves this: a nominal unit has 6.000 V, it shows 5.714 V"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	if got := find(t, measured(t, 100, target, "value: 1 MΩ", "value: 10 kΩ"), "half.voltage").Note; got != "" {
		t.Errorf("3 mV are said to matter: %q", got)
	}
	if got := find(t, s, "b.level").Note; got != "" {
		t.Errorf("the level is said to move: %q", got)
	}
	tank := "    kind: tuned-tank\n    parts:\n      coil: {ref: L2"
	weak := func(level string) []string {
		return []string{tank, "    kind: tuned-tank\n    settings: {level: " + level + "}\n    parts:\n      coil: {ref: L2"}
	}
	s = measured(t, 20_000, target, weak("{value: 101 mV, tolerance: 10 %}")...)
	if got := find(t, s, "b.frequency").Note; !strings.Contains(got, "the counter needs a peak of 100 mV, and a weak unit has as little as 91.") {
		t.Errorf("got %q", got)
	}
	s = measured(t, 1000, target, weak("15 mV")...)
	if got := find(t, s, "b.frequency").Note; !strings.Contains(got, "the counter needs a peak of 100 mV, and a nominal unit has 15.0 mV here") {
		t.Errorf("got %q", got)
	}
	if got := find(t, s, "b.level").Note; !strings.Contains(got, "the scope needs a peak of 20 mV, and a nominal unit has 15.0 mV here") {
		t.Errorf("got %q", got)
	}
}

// An emitter follower after the tank is offered to the counter.
func TestBufferedPoint(t *testing.T) {
	follower := `  buf:
    kind: emitter-follower
    in: b
    settings: {positive: supply}
    parts:
      base_upper: {ref: R3, value: 100 kΩ}
      base_lower: {ref: R4, value: 150 kΩ}
      emitter:    {ref: R5, value: 4.7 kΩ}
      transistor: {ref: Q1, family: small-signal-npn}
      couple:     {ref: C3, value: 100 nF}
trims:`
	s := measured(t, 1000, "  - {name: half, output: half.voltage, at: [bench], between: [5 V, 7 V]}\n", "trims:", follower)
	if got := find(t, s, "b.frequency").Note; !strings.HasSuffix(got, "; at the end of R5 (emitter) at Q1 (transistor), to ground, AC coupled (buf) it shows the frequency without pulling it") {
		t.Errorf("got %q", got)
	}
	if got := find(t, s, "a.frequency").Note; strings.Contains(got, "without pulling") {
		t.Errorf("a buffer of another tank is offered: %q", got)
	}
}

// A reading's risks: the divider's lower limit cuts through the units, and the
// specific risk at an edge is Φ(−2).
func TestReadingRisks(t *testing.T) {
	s := measured(t, 20_000, "  - {name: half, output: half.voltage, at: [bench], between: [5.97 V, 6.2 V]}\n")
	r := find(t, s, "half.voltage")
	if r.Accept == nil || !(r.ConsumerRisk > 0 && r.ConsumerRisk < 0.05) || !(r.ProducerRisk > 0.1 && r.ProducerRisk < 1) {
		t.Errorf("accept %+v, risks %g and %g", r.Accept, float64(r.ConsumerRisk), float64(r.ProducerRisk))
	}
	near(t, "specific risk", r.SpecificRisk, 0.022750132, 1e-6)
	if b := find(t, s, "b.level"); !math.IsNaN(float64(b.ConsumerRisk)) {
		t.Errorf("a risk of a window that there is none of: %g", float64(b.ConsumerRisk))
	}
}
