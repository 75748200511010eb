package spread_test

import (
	"strings"
	"testing"
)

// leaky are two tanks at 339.3 kHz and some, Q 50, whose isolation of 20 dB
// gives each a tenth of the other's level, uniform over 1 V ± 50 %.
const leaky = `
build: leaky pair
units: 20
conditions:
  bench: {temperature: 25 °C}
  loud:  {}
stages:
  a:
    kind: tuned-tank
    settings: {q: 50, level: {value: 1 V, tolerance: 0 %}}
    parts: {coil: {ref: L1, value: 1 mH}, tank: {ref: C1, value: 220 pF}}
  b:
    kind: tuned-tank
    settings: {q: 50, level: {value: 1 V, tolerance: 50 %, shape: uniform}}
    parts: {coil: {ref: L2, value: 1 mH}, tank: {ref: C2, value: SECOND}}
  mix:
    kind: multiplier
    in: {carrier: a, signal: b}
    settings: {isolation: 20 dB}
targets: [TARGETS]
`

// TestLockRange: f = 1/(2π√(1 mH·220 pF)) = 339 319.4 Hz; at the 99.5 % quantile
// of the other's level, 0.5 + 0.995 = 1.495 V, the lock range is
// f/(2·50)·0.1·1.495 = 507.28 Hz. Decibels are 20·log10(507.28/note), rounded up.
func TestLockRange(t *testing.T) {
	tests := map[string]struct {
		second, targets string
		note            float64
		decibels        int
		why             bool
	}{
		"target inside":  {"221 pF", "{name: n, output: mix.beat, between: [100 Hz, 4 kHz]}", 100, 15, false},                                                                  // 14.10
		"a hair inside":  {"221 pF", "{name: n, output: mix.beat, between: [500 Hz, 4 kHz]}", 500, 1, false},                                                                   // 0.13
		"target outside": {"221 pF", "{name: n, output: mix.beat, between: [550 Hz, 4 kHz]}", 550, 0, false},                                                                   // −0.70
		"lowest of two":  {"221 pF", "{name: m, output: mix.beat, at: [loud], between: [50 Hz, 1 kHz]}, {name: n, output: mix.beat, between: [550 Hz, 4 kHz]}", 50, 21, false}, // 20.13
		"below zero":     {"221 pF", "{name: n, output: mix.offset, between: [-4 kHz, -200 Hz]}", 200, 9, false},                                                               // 8.08
		"around zero":    {"220 pF", "{name: n, output: mix.offset, limit: 3 Hz}", 0, 0, true},
		"nominal beat":   {"220.1 pF", "", 77.1, 17, false}, // f·(1 − √(220/220.1)) = 77.1 Hz, 16.36
		"no note":        {"220 pF", "", 0, 0, true},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			r := analyse(t, strings.NewReplacer("SECOND", tt.second, "TARGETS", tt.targets).Replace(leaky), 40_000)
			if len(r.LockRanges) != 2 {
				t.Fatalf("%d lock ranges, want one for each condition", len(r.LockRanges))
			}
			for _, l := range r.LockRanges {
				near(t, "lock range", l.LockRange, 507.28, 0.7) // the quantile's own error: √(0.995·0.005/40000) of 339 Hz is 0.12
				if l.Decibels != tt.decibels || (l.Why != "") != tt.why {
					t.Errorf("%+v, want %d dB, why %v", l, tt.decibels, tt.why)
				}
				if !tt.why {
					near(t, "note", l.LowestNote, tt.note, 0.05)
				}
			}
		})
	}
}

// A trim that leaves a note at rest asks for that note.
func TestTrimmedNoteIsWanted(t *testing.T) {
	text := strings.Replace(twoTanks, "to: 0 Hz", "to: 30 Hz", 1)
	for _, l := range analyse(t, text, 2000).LockRanges {
		// 1/(2π√(1 mH·120 pF))/(2·80)·10⁻³ = 2.87 Hz at equal levels, which are
		// 1 V ± 10 % each: 1.1/0.9 of it at most, and coils ± 5 %
		if l.LowestNote != 30 || l.Decibels != 0 || !(l.LockRange > 2.87 && l.LockRange < 3.6) {
			t.Errorf("%+v, want a note of 30 Hz", l)
		}
	}
}
