package spread_test

import "testing"

// TestTrimsInOrder does two trims of which the second spoils the first. While
// the first is done the second trimmer stands in the middle: x + 5 kΩ = 7 kΩ
// puts x at a fifth of its travel, y = 8 kΩ at four fifths, and x + y ends at
// 10 kΩ. Each is left wrong by up to `within`.
func TestTrimsInOrder(t *testing.T) {
	r := analyse(t, `
build: two trimmers
units: 10
conditions: {bench: {temperature: 25 °C}}
stages:
  s:
    kind: formula
    parts:
      x: {ref: RV1, part: trimmer-resistor, value: 0..10 kΩ}
      y: {ref: RV2, part: trimmer-resistor, value: 0..10 kΩ}
    outputs:
      sum:  {expression: x + y, unit: Ω}
      late: {expression: y, unit: Ω}
trims:
  - {turn: s.x, output: s.sum,  to: 7 kΩ, within: 100 Ω}
  - {turn: s.y, output: s.late, to: 8 kΩ, within: 50 Ω}
`, 20_000)
	near(t, "first setting", r.Trims[0].Setting.Nominal, 0.2, 1e-12)
	near(t, "second setting", r.Trims[1].Setting.Nominal, 0.8, 1e-12)
	sum := find(t, r, "s.sum", "bench", "")
	near(t, "sum", sum.Nominal, 10_000, 1e-8)
	near(t, "sum, low", sum.WorstCase.Low, 9850, 1e-8)
	near(t, "sum, high", sum.WorstCase.High, 10_150, 1e-8)
	late := find(t, r, "s.late", "bench", "")
	near(t, "late, low", late.WorstCase.Low, 7950, 1e-8)
	// The error is uniform: u = within/√3.
	near(t, "late, u", late.RootSumSquare.StandardUncertainty, 28.8675134595, 1e-9)
	near(t, "late, simulated u", late.Simulated.StandardDeviation, 28.8675134595, 0.5)
}

// TestShort has a trimmer that reaches on just those units whose resistor is
// below a limit, and runs out at the top on the others: 0..1 kΩ must bring a
// uniform 1.5 kΩ ± 20 % to 2.6 kΩ, so those below 1.6 kΩ do not reach: the share
// (1.6 − 1.2)/(1.8 − 1.2).
func TestShort(t *testing.T) {
	r := analyse(t, `
build: short
units: 10
conditions: {bench: {temperature: 25 °C}}
stages:
  s:
    kind: formula
    parts:
      r: {ref: R1, value: 1.5 kΩ, tolerance: 20 %, shape: uniform}
      x: {ref: RV1, part: trimmer-resistor, value: 0..1 kΩ}
    outputs: {sum: {expression: r + x, unit: Ω}}
trims:
  - {turn: s.x, output: s.sum, to: 2.6 kΩ}
targets:
  - {name: reach, trim: s.x, share: 30 %}
  - {name: sum, output: s.sum, at: [bench], between: [2.5 kΩ, 2.7 kΩ], share: 30 %}
`, 20_000)
	near(t, "short at the top", r.Trims[0].ShortHigh, 2.0/3, 0.012)
	near(t, "short at the bottom", r.Trims[0].ShortLow, 0, 0)
	near(t, "reached", r.Trims[0].ReachedShare, 1.0/3, 0.012)
	// A unit that does not reach counts as missed, though its sum may be within.
	near(t, "reach", r.Targets[0].Share, 1.0/3, 0.012)
	near(t, "sum", r.Targets[1].Share, 1.0/3, 0.012)
	near(t, "sum's mean over those that reached", find(t, r, "s.sum", "bench", "").Simulated.Mean, 2600, 1e-6)
	near(t, "share over which it is taken", find(t, r, "s.sum", "bench", "").Simulated.ReachedShare, 1.0/3, 0.012)
}
