package stage

import (
	"math"
	"strings"
	"testing"

	"batchwright/bom/quantity"
)

// A finding is an equation of its kind, a plain 0 or 1, 0 on a circuit in its
// working range; its text says what happens and what to do.
func TestFindingsDescribeThemselves(t *testing.T) {
	count := 0
	for _, k := range fixedKinds() {
		t.Run(k.Name, func(t *testing.T) {
			seen := map[string]bool{}
			got := evaluate(t, k.Name, examples[k.Name])
			for _, f := range k.Findings {
				count++
				if v, ok := got[f.Equation]; !ok || v != 0 || seen[f.Equation] {
					t.Errorf("finding %s: an equation %v, worth %g on the example, seen before %v", f.Equation, ok, v, seen[f.Equation])
				}
				seen[f.Equation] = true
				if d, _ := k.Scope().Dimension(f.Equation); d != quantity.One.Dimension {
					t.Errorf("finding %s is in %v, want a plain number", f.Equation, d)
				}
				what, todo, ok := strings.Cut(f.Text, "; ")
				if !ok || what == "" || todo == "" || strings.ContainsAny(f.Text, "\n.") {
					t.Errorf("finding %s: %q, want what happens; what to do", f.Equation, f.Text)
				}
			}
		})
	}
	if count < 9 {
		t.Errorf("only %d findings seen", count)
	}
}

// Each finding appears at its threshold and not before: the examples with one
// value moved to either side of it. Thresholds by hand from the equations'
// own words, or by bisection where they stand on both sides.
func TestFindingsAppearAtTheirThreshold(t *testing.T) {
	detector := evaluate(t, "envelope-detector", examples["envelope-detector"])
	tests := map[string]struct {
		kind, finding, moved string
		threshold            float64
		above                bool // it happens above the threshold
	}{
		// 12 V out and 2 V of dropout
		"regulator": {"fixed-regulator", "drops_out", "input", 14, false},
		// 1.25 V·(1 + 2050/240) + 50 µA·2050 Ω + 2 V
		"adjustable": {"adjustable-regulator", "drops_out", "input", 1.25*(1+2050.0/240) + 50e-6*2050 + 2, false},
		// knee 9.1 V + 5 K·5 mV/K − 12 Ω·5 mA, and 330 Ω·5 mA
		"zener": {"shunt-zener", "unregulated", "input", 9.1 + 0.025 - 0.06 + 1.65, false},
		// A₀ = 1 + 47/11; rests at (50 mV + 1 mV)·A₀; the tone alone, at 1 Hz
		// next to no loss, may reach 12 V − 1.5 V less that
		"amplifier clips": {"opamp-noninverting", "clips", "in.tone_level", (10.5 - 0.051*58/11) / (58.0 / 11), true},
		// steady voltage: (dc + 1 mV)·A₀ = 10.5 V, nothing else
		"amplifier rests at its rail": {"opamp-noninverting", "clips", "in.dc", 10.5/(58.0/11) - 1e-3, true},
		// A₀·level/√(1 + (f·A₀/GBW)²)·2πf = 13 V/µs
		"amplifier slews": {"opamp-noninverting", "slews", "in.level",
			13e6 / (2 * math.Pi * 331e3) / (58.0 / 11) * math.Sqrt(1+math.Pow(331e3*58/11/3e6, 2)), true},
		// the coupling's high-pass of 10 pF and 1 MΩ lets x/√(1+x²) of 10 V in, x = 2πf·10 µs
		"multiplier": {"multiplier", "overdriven", "carrier.level", 10 * math.Sqrt(1+1/math.Pow(2*math.Pi*331e3*1e-5, 2)), true},
		// √(1−m²)/(2πRCm), m = 0.4, R = 100 kΩ, C = 330 pF
		"detector lags": {"envelope-detector", "lags", "in.tone_frequency", math.Sqrt(1-0.16) / (2 * math.Pi * 33e-6 * 0.4), true},
	}
	near(t, "clip_frequency", detector["clip_frequency"], tests["detector lags"].threshold, 1e-12)
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			given := with(examples[tt.kind])
			if tt.kind == "opamp-noninverting" {
				for _, other := range []string{"in.level", "in.second_level", "in.tone_level"} {
					given[other] = 0
				}
				given["in.tone_frequency"] = 1
			}
			for side, factor := range map[bool]float64{false: 1 - 1e-9, true: 1 + 1e-9} {
				got := evaluate(t, tt.kind, with(given, tt.moved, tt.threshold*factor))[tt.finding]
				if want := side == tt.above; (got == 1) != want {
					t.Errorf("%s at %s = %.12g: %g, want it %v", tt.finding, tt.moved, tt.threshold*factor, got, want)
				}
			}
		})
	}
}

// The mixer's findings, and the detector's silence, where they must be: a bias
// too high saturates, none starves, a strong drive clips, and 0.3 V does not
// open a diode that drops 0.6 V − 1.8·25.7 mV·ln(1 mA/3 µA) = 0.33 V at the
// current they would drive through 100 kΩ.
func TestFindingsOfCurrents(t *testing.T) {
	tests := map[string]struct {
		kind    string
		changes []any
		want    string
	}{
		"high bias":    {"junction-mixer", []any{"base_upper", 20e3}, "saturated"},
		"no bias":      {"junction-mixer", []any{"base_lower", 100.0, "bias", 0.0}, "starved"},
		"strong drive": {"junction-mixer", []any{"carrier.level", 60.0, "signal.level", 60.0}, "clips"},
		"weak carrier": {"envelope-detector", []any{"in.level", 0.3, "in.second_level", 0.1}, "silent"},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			k, _ := Find(tt.kind)
			got := evaluate(t, tt.kind, with(examples[tt.kind], tt.changes...))
			for _, f := range k.Findings {
				if (got[f.Equation] == 1) != (f.Equation == tt.want) {
					t.Errorf("%s = %g, want only %s", f.Equation, got[f.Equation], tt.want)
				}
			}
		})
	}
}
