package spread_test

import (
	"math"
	"testing"
)

// box is a beat-frequency instrument with a rod: the hand is far away at rest,
// and two conditions lie a centimetre apart in the middle of the range.
const box = `build: playing range in centimetres
units: 12
conditions:
  rest:        {hand: 2 m}
  at 20 cm:    {hand: 20 cm}
  at 21 cm:    {hand: 21 cm}
stages:
  fixed:
    kind: tuned-tank
    parts:
      coil:  {ref: L1, winding: {turns: 150, diameter: 30 mm, length: 60 mm}}
      tank:  {ref: C1, value: 1 nF, tolerance: 1 %}
      tuner: {ref: CT1, value: 2..60 pF}
  moving:
    kind: tuned-tank
    settings:
      stray: 20 pF
      sensor: {rod: {length: 45 cm, diameter: 10 mm, gap: 5 cm, hand: hand}}
    parts:
      coil: {ref: L2, same_as: fixed.coil}
      tank: {ref: C2, value: 1 nF, tolerance: 1 %}
  mixer:
    kind: multiplier
    in: {carrier: fixed, signal: moving}
trims:
  - {turn: fixed.tuner, output: mixer.offset, to: 0 Hz, within: 1 Hz}
targets:
  - {name: playing range, output: mixer.beat, at: [at 20 cm], between: [40 Hz, 80 Hz]}
  - {name: cents per centimetre, output: mixer.offset, change_from: at 20 cm, at: [at 21 cm], limit: 300 cents, note: 55 Hz}
`

// TestCentsPerCentimetre asks for a playing range in centimetres, and for how
// many cents a centimetre is: two conditions a centimetre apart, and a limit in
// cents at a note. 300 cents above 55 Hz are 55·(2^(300/1200) − 1) = 10.406 Hz.
// The slope that is judged is held against the formula worked by hand:
//
//	df = f·dC/(2C),  C = 1.02·2πε0·l/(ln(4l/d) − 1 − p − b·m²·l/2) + 20 pF + 1 nF
func TestCentsPerCentimetre(t *testing.T) {
	r := analyse(t, box, 600)
	limits := compile(t, box).Build.Targets[1]
	for i, name := range []string{"playing range", "cents per centimetre"} {
		if got := r.Targets[i]; got.Name != name {
			t.Fatalf("target %d is %q", i, got.Name)
		} else if !got.Met || !(got.Share > 0.99) {
			t.Errorf("%s: met by %.4f of the units", name, got.Share)
		}
	}
	if !(math.Abs(limits.High-10.406) < 0.001) {
		t.Errorf("300 cents above 55 Hz are %.4f Hz", limits.High)
	}
	const l, p = 0.45, 0.474848 // of a gap of 5 cm: (ln 1 − 0.55·ln 0.55 + 0.05·ln 0.1)/0.45
	rod := func(hand float64) float64 {
		m := 2 / l * math.Asinh(l/2/hand)
		return 1.02 * 2 * math.Pi * 8.8541878188e-12 * l / (math.Log(4*l/0.01) - 1 - p - 0.05*m*m*l/2)
	}
	coil := 1e-6 / 0.0254 * 150 * 150 * 0.015 * 0.015 / (9*0.015 + 10*0.06)
	f := func(hand float64) float64 { return 1 / (2 * math.Pi * math.Sqrt(coil*(1.02e-9+rod(hand)))) }
	near(t, "beat at 20 cm", find(t, r, "mixer.beat", "at 20 cm", "").Nominal, f(2)-f(0.2), 0.01)
	near(t, "change in a centimetre", find(t, r, "mixer.offset", "at 21 cm", "at 20 cm").Nominal, f(0.2)-f(0.21), 0.001) // the hand lowers the moving one
}

// wound are two oscillators on coils wound alike, whose dimensions are exact:
// all that is unknown of them is how far the formula is off.
const wound = `build: formula off alike
units: 12
conditions: {bench: {}}
stages:
  one:
    kind: tuned-tank
    parts: {coil: {ref: L1, winding: {turns: 150, diameter: 30 mm, length: 60 mm}}, tank: {ref: C1, value: 1 nF}}
  two:
    kind: tuned-tank
    parts: {coil: {ref: L2, same_as: one.coil}, tank: {ref: C2, value: 1 nF}}
  mixer:
    kind: multiplier
    in: {carrier: one, signal: two}
`

// TestFormulaOffAlike: a formula that is off is off by the same on both coils.
// Each frequency is uncertain by f·1 %/(2·√3), the beat by nothing.
func TestFormulaOffAlike(t *testing.T) {
	r := analyse(t, wound, 600)
	f := find(t, r, "one.frequency", "bench", "")
	near(t, "uncertainty of one", f.RootSumSquare.StandardUncertainty, float64(f.Nominal)*0.01/2/math.Sqrt(3), 1e-4*float64(f.Nominal)*0.01)
	beat := find(t, r, "mixer.offset", "bench", "")
	near(t, "uncertainty of the beat", beat.RootSumSquare.StandardUncertainty, 0, 1e-6*float64(f.Nominal))
	near(t, "simulated beat", beat.Simulated.StandardDeviation, 0, 1e-6*float64(f.Nominal))
}
