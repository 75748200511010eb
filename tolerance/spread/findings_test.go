package spread_test

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/tolerance/spread"
)

// faulty has a stage for each way to go wrong, and a figure that is uniform
// for each, so that the share of units in which it happens follows by hand.
const faulty = `
build: five ways to go wrong
units: 24
conditions:
  bench: {temperature: 25 °C, supply: 14 V}
  weak:  {supply: 12 V}
  off:   {supply: 11 V}
stages:
  rail:       # 12 V and 1.86 V of dropout, off a supply of a nominal 14 V
    kind: fixed-regulator
    settings: {input: mains.voltage}
    parts:
      regulator: {ref: U1, value: 12 V, parameters: {dropout: 1.86 V}}
      input_c:   {ref: C1, value: 330 nF}
      output_c:  {ref: C2, value: 100 nF}
  mains:
    kind: formula
    settings: {ratio: {value: 1, tolerance: 10 %, shape: uniform}, at: supply}
    outputs: {voltage: {expression: ratio*at, unit: V}}
  source:
    kind: tuned-tank
    settings: {level: {value: 1 V, tolerance: 20 %, shape: uniform}}
    parts:
      coil: {ref: L1, value: 1 mH}
      tank: {ref: C3, value: 220 pF}
  amp:
    kind: opamp-noninverting
    in: source
    settings: {positive: 10 V, negative: -10 V}
    parts:
      feedback:  {ref: R1, value: 10 kΩ, tolerance: 50 %, shape: uniform}
      ground:    {ref: R2, value: 1 kΩ}
      gain_trim: {ref: RV1, value: 0..1 kΩ}
      opamp:     {ref: U2, parameters: {gbw: 1 GHz, slew: SLEW, offset: 0 V, headroom: 2 V}}
  weak_detector:
    kind: envelope-detector
    in: source
    parts:
      diode: {ref: D1, parameters: {drop: 0.9 V, drop_slope: 0 V/K, ideality: 1.5}}
      load:  {ref: R3, value: 900 Ω}
      hold:  {ref: C4, value: 1 nF}
  pair:
    kind: formula
    settings: {note: {value: 10 kHz, tolerance: 40 %, shape: uniform}}
    outputs:
      frequency:      {expression: 300000*hertz, unit: Hz}
      level:          {expression: 5*volt, unit: V}
      second_level:   {expression: 3*volt, unit: V}
      tone_frequency: {expression: note, unit: Hz}
  slow_detector:
    kind: envelope-detector
    in: pair
    parts:
      diode: {ref: D2, parameters: {drop: 0.5 V, drop_slope: 0 V/K, ideality: 1.5}}
      load:  {ref: R4, value: 10 kΩ}
      hold:  {ref: C5, value: 2.2 nF}
  silence:
    kind: formula
    outputs: {frequency: {expression: 300000*hertz, unit: Hz}}
  mixer:
    kind: junction-mixer
    in: {carrier: silence, signal: silence}
    settings: {positive: 12 V}
    parts:
      base_upper:     {ref: R5, value: 100 kΩ}
      base_lower:     {ref: R6, value: 27 kΩ}
      emitter:        {ref: R7, value: 2.2 kΩ}
      load:           {ref: R8, value: 12 kΩ, tolerance: 30 %, shape: uniform}
      transistor:     {ref: Q1, parameters: {beta: 200, vbe: 0.6 V, vbe_slope: 0 V/K}}
      couple_carrier: {ref: C6, value: 0.1 pF}
      couple_signal:  {ref: C7, value: 0.1 pF}
trims:
  - {turn: amp.gain_trim, output: amp.gain, to: 8}
`

// slewing is the slew rate at which the faulty amplifier slews above a level of
// 1.1 V: 2π·f·8·1.1 V, in words that a build file takes.
func slewing() string {
	f := 1 / (2 * math.Pi * math.Sqrt(1e-3*220e-12))
	return fmt.Sprintf("%.9g V/s", 2*math.Pi*f*8*1.1)
}

// TestFindings compares shares with those of uniform figures by hand.
//
//	rail     14 V·(1 ± 10 %) is below 13.86 V on (13.86 − 12.6)/2.8 of the units,
//	         12 V·(1 ± 10 %), up to 13.2 V, and 11 V·(1 ± 10 %) on all
//	amp      a gain of 1 + (10 kΩ ± 50 %)/(1..2 kΩ) is brought to 8 for 7 to 14 kΩ
//	         of 5 to 15, 70 %. The peak, 8 times 0.8 to 1.2 V, clips above
//	         10 V − 2 V, on half of these, and slews above 1.1 V, on a quarter
//	weak     the diode drops 0.9 V at 1 mA, which 0.9 V make in 900 Ω: a quarter of
//	         0.8 to 1.2 V does not open it
//	slow     √(1 − 0.6²)/(2π·10 kΩ·2.2 nF·0.6) = 9646 Hz, of 6 to 14 kHz
//	mixer    I·load > 12 V − emitter − 0.2 V, the load of 8.4 to 15.6 kΩ
func TestFindings(t *testing.T) {
	const units = 96_000
	r := analyse(t, strings.Replace(faulty, "SLEW", slewing(), 1), units)
	current := float64(find(t, r, "mixer.current", "bench", "").Nominal)
	emitter := float64(find(t, r, "mixer.emitter_voltage", "bench", "").Nominal)
	clip := math.Sqrt(1-0.36) / (2 * math.Pi * 22e-6 * 0.6)
	drops := (13.86 - 12.6) / 2.8
	everywhere := map[string]float64{
		"amp.clips": 0.7 * 0.5, "amp.slews": 0.7 * 0.25, "weak_detector.silent": 0.25,
		"slow_detector.lags": (14e3 - clip) / 8e3, "mixer.saturated": (15.6e3 - (12-emitter-0.2)/current) / 7.2e3,
	}
	want := map[string]float64{"rail.drops_out at bench": drops, "rail.drops_out at weak": 1, "rail.drops_out at off": 1}
	for name, share := range everywhere {
		for _, condition := range []string{"bench", "weak", "off"} {
			want[name+" at "+condition] = share
		}
	}
	for _, f := range r.Findings {
		name := f.Stage + "." + f.Finding + " at " + f.Condition
		p, there := want[name]
		if delete(want, name); !there {
			t.Errorf("unexpected: %+v", f)
			continue
		}
		near(t, name, f.Share, p, 4*math.Sqrt(p*(1-p)/units)) // four standard errors
		if !(f.Interval[0] <= f.Share && f.Share <= f.Interval[1]) || f.Text == "" {
			t.Errorf("%s: share %g, interval %g, text %q", name, f.Share, f.Interval, f.Text)
		}
		untrimmed := 0.0
		if f.Stage == "amp" {
			untrimmed = 0.3
		}
		near(t, name+", untrimmed", f.UntrimmedShare, untrimmed, 4*math.Sqrt(untrimmed*(1-untrimmed)/units))
	}
	for name, share := range want {
		t.Errorf("%s is not found, want %g", name, share)
	}
}

// Batches that run over from one job to the next, and the order of the jobs,
// change nothing.
func TestFindingsAreTheSameForAnyWorkers(t *testing.T) {
	m := compile(t, strings.Replace(faulty, "SLEW", slewing(), 1))
	var first []spread.Finding
	for _, workers := range []int{1, 3} {
		r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 2, Units: 20_000, Workers: workers})
		if err != nil {
			t.Fatal(err)
		}
		if first == nil {
			first = r.Findings
		}
		if diff := cmp.Diff(first, r.Findings); diff != "" || len(first) < 18 {
			t.Errorf("%d findings; one worker against %d:\n%s", len(first), workers, diff)
		}
	}
}

// The embedded example, its parts fitted, does nothing that must not be missed,
// and its lowest note, the 250 Hz that it is trimmed to at rest, is well
// outside its lock range.
func TestExampleFindsNothing(t *testing.T) {
	r, err := spread.Analyse(context.Background(), fitted(t), spread.Options{Seed: 1, Units: 4800})
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Findings) > 0 {
		t.Errorf("found %+v", r.Findings)
	}
	if len(r.LockRanges) != 4 {
		t.Errorf("%d lock ranges, want one for each of 4 conditions", len(r.LockRanges))
	}
	for _, l := range r.LockRanges {
		if l.LowestNote != 250 || l.Decibels != 0 || l.Why != "" || !(l.LockRange > 1.5 && l.LockRange < 3) {
			t.Errorf("lock range %+v", l)
		}
	}
}
