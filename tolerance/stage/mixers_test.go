package stage

import (
	"maps"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"

	"batchwright/tolerance/tape"
)

// Circuits of plausible values (invented), each in its working range.
func init() {
	pair := map[string]float64{"carrier.level": 1, "carrier.frequency": 331e3, "carrier.tank_q": 80,
		"signal.level": 0.1, "signal.frequency": 330.2e3}
	add := func(kind string, changes map[string]float64) {
		examples[kind] = maps.Clone(pair)
		maps.Copy(examples[kind], changes)
	}
	add("gate-mixer", map[string]float64{"filter_r": 10e3, "filter_c": 10e-9, "supply": 5, "signal.frequency": 327e3})
	add("diode-ring", map[string]float64{"filter_c": 470e-9, "load": 1e3, "signal.source_resistance": 50})
}

// R. Blake, Electronic Communication Systems, Ex. 2.7, p. 76 (inputs read in an
// open archive of textbook examples): 11 MHz and 10 MHz differ by 1 MHz.
func TestSwitchedMixersOffset(t *testing.T) {
	for _, kind := range []string{"gate-mixer", "diode-ring"} {
		got := evaluate(t, kind, with(examples[kind], "carrier.frequency", 11e6, "signal.frequency", 10e6))
		near(t, kind+" offset", got["offset"], 1e6, 1e-12)
		near(t, kind+" carrier_level", got["carrier_level"], 0, 0)
		near(t, kind+" second_level", got["second_level"], 0, 0)
		back := evaluate(t, kind, with(examples[kind], "carrier.frequency", 10e6, "signal.frequency", 11e6))
		near(t, kind+" offset the other way", back["offset"], -1e6, 1e-12)
		near(t, kind+" beat", back["beat"], 1e6, 1e-12)
		near(t, kind+" lock_range", got["lock_range"], 11e6/160*1e-3*0.1/examples[kind]["carrier.level"], 1e-12)
	}
}

// The gate itself, sampled: two square waves of 64 and 63 cycles in one beat, at
// many instants between their edges. The first harmonic of what comes out is the
// triangle's fundamental, that of 127 cycles as strong, and of the carriers
// themselves there is nothing.
func TestGateAgainstSampledSquareWaves(t *testing.T) {
	const samples = 2 * 64 * 63 * 50
	high := func(cycles, k int) bool { return (2*cycles*(2*k+1)/(2*samples))%2 == 1 }
	harmonic := func(h int) float64 {
		var sum complex128
		for k := range samples {
			if high(64, k) != high(63, k) {
				sum += cmplx.Rect(1, -2*math.Pi*float64(h)*(float64(k)+0.5)/samples)
			}
		}
		return 5 * 2 * cmplx.Abs(sum) / samples
	}
	got := evaluate(t, "gate-mixer", examples["gate-mixer"])
	near(t, "fundamental", got["fundamental"], harmonic(1), 1e-3) // the triangle has 63 steps
	near(t, "sum", got["fundamental"], harmonic(127), 1e-3)
	near(t, "carrier", harmonic(64), 0, 1e-9)
	near(t, "second", harmonic(63), 0, 3e-3) // the triangle's own 63rd harmonic falls there
	near(t, "triangle", got["triangle"], 5, 0)
	near(t, "4/π²·5 V", got["fundamental"], 2.0264236728, 1e-10)
}

// The triangle behind the filter, by its Fourier series Σ 8A/(π²n²)·cos(nθ), odd n,
// each harmonic through the RC; the peak over a fine grid. From far below the corner
// to far above it.
func TestGateSwingAgainstFourier(t *testing.T) {
	c := newCircuit(t, "gate-mixer", 1)
	for _, ratio := range []float64{0.01, 0.1, 0.5, 1, 3, 20} {
		given := with(examples["gate-mixer"], "meter", 1e-6, "probe", 15e-12)
		corner := c.at(t, given)["corner"]
		given["signal.frequency"] = 331e3 - ratio*corner
		got := c.at(t, given)
		peak := 0.0
		for step := range 4000 {
			sum := 0.0
			for n := 1.0; n < 800; n += 2 {
				response := 1 / complex(1, n*ratio)
				sum += 8 / (math.Pi * math.Pi * n * n) * real(response*cmplx.Rect(1, n*math.Pi*float64(step)/4000))
			}
			peak = math.Max(peak, sum)
		}
		near(t, "swing", got["swing"], 2.5/1.01*peak, 1e-3) // what harmonics above 800 hold
	}
	still := c.at(t, with(examples["gate-mixer"], "signal.frequency", 331e3))
	near(t, "at a beat of nothing", still["swing"], 2.5, 1e-12)
	near(t, "tone", still["tone_level"], still["fundamental"], 0)
	values := c.fill(t, with(examples["gate-mixer"], "signal.frequency", 331e3))
	for i := range c.inputs {
		checkTangentExists(t, c, values, i)
	}
}

func TestGateFilterAgainstNetwork(t *testing.T) {
	given := with(examples["gate-mixer"], "meter", 1e-6, "probe", 15e-12)
	got := evaluate(t, "gate-mixer", given)
	pass := func(f float64) float64 {
		n := newNetwork(1)
		n.drive(1, 1, conductance(10e3))
		n.join(1, 0, complex(1e-6, 0)+susceptance(f, 10e-9+15e-12))
		return cmplx.Abs(n.solve(t)[1])
	}
	near(t, "tone_level", got["tone_level"], got["fundamental"]*pass(4e3), 1e-12)
	near(t, "ripple", got["ripple"], got["fundamental"]*pass(658e3), 1e-12)
	near(t, "dc", got["dc"], 2.5*pass(0), 1e-12)
	near(t, "3 dB at the corner", pass(got["corner"])/pass(0), 1/math.Sqrt2, 1e-12)
	bare := evaluate(t, "gate-mixer", examples["gate-mixer"])
	near(t, "corner, by definition", bare["corner"], 1591.549431, 1e-9) // 10 kΩ, 10 nF
	near(t, "source_resistance", bare["source_resistance"], 10e3, 0)
}

// The signal times a square wave of ±1 at the carrier, sampled: 2/π at the
// difference and at the sum, nothing at either carrier.
func TestRingAgainstSampledProduct(t *testing.T) {
	const samples = 64 * 1000
	harmonic := func(h int) float64 {
		var sum complex128
		for k := range samples {
			v := math.Cos(2 * math.Pi * 63 * (float64(k) + 0.5) / samples)
			if (2*64*(2*k+1)/(2*samples))%2 == 1 {
				v = -v
			}
			sum += complex(v, 0) * cmplx.Rect(1, -2*math.Pi*float64(h)*(float64(k)+0.5)/samples)
		}
		return 2 * cmplx.Abs(sum) / samples
	}
	got := evaluate(t, "diode-ring", with(examples["diode-ring"], "ring_resistance", 0, "signal.source_resistance", 0))
	near(t, "conversion", got["conversion"], harmonic(1), 1e-5)
	near(t, "sum", got["conversion"], harmonic(127), 1e-5)
	near(t, "carrier", harmonic(64), 0, 1e-9)
	near(t, "second", harmonic(63), 0, 1e-9)
	near(t, "tone_level", got["tone_level"], 0.1*2/math.Pi, 1e-12)
	near(t, "loss in dB", -20*math.Log10(got["conversion"]), 3.9224, 1e-5) // 20·log10(π/2)
}

func TestRingLoadAgainstNetwork(t *testing.T) {
	given := with(examples["diode-ring"], "meter", 1e-7, "probe", 15e-9)
	got := evaluate(t, "diode-ring", given)
	pass := func(f float64) float64 {
		n := newNetwork(1)
		n.drive(1, 1, conductance(70))
		n.join(1, 0, conductance(1e3)+complex(1e-7, 0)+susceptance(f, 485e-9))
		return cmplx.Abs(n.solve(t)[1])
	}
	near(t, "tone_level", got["tone_level"], 0.1*2/math.Pi*pass(800), 1e-12)
	near(t, "ripple", got["ripple"], 0.1*2/math.Pi*pass(661.2e3), 1e-12)
	near(t, "3 dB at the corner", pass(got["corner"])/pass(0), 1/math.Sqrt2, 1e-12)
	near(t, "source_resistance", got["source_resistance"], 1/(1/70.0+1e-3+1e-7), 1e-12)
	matched := evaluate(t, "diode-ring", with(examples["diode-ring"], "load", 50))
	near(t, "between 50 Ω and 50 Ω, dB", -20*math.Log10(2*matched["conversion"]), 5.5060, 1e-5) // 20·log10(π/2·120/100)
}

// The signs that a person at the bench would expect, of the switched mixers
// and the amplifiers beside the first.
func TestMonotoneDirectionsOfMixersAndAmplifiers(t *testing.T) {
	tests := []struct{ kind, output, rises, falls string }{
		{"gate-mixer", "tone_level", "supply", "filter_r filter_c meter probe carrier.frequency"},
		{"gate-mixer", "swing", "supply", "filter_r filter_c meter probe carrier.frequency"},
		{"gate-mixer", "corner", "meter", "filter_r filter_c probe"},
		{"gate-mixer", "ripple", "supply", "filter_c filter_r"},
		{"diode-ring", "tone_level", "signal.level load", "filter_c ring_resistance signal.source_resistance meter"},
		{"diode-ring", "corner", "", "filter_c load probe ring_resistance"},
		{"opamp-inverting", "gain", "feedback gain_trim opamp.gbw", "input in.source_resistance in.frequency"},
		{"opamp-inverting", "dc", "opamp.offset", "in.dc"},
		{"common-emitter", "gain", "load bypass couple base_lower", "in.source_resistance meter probe base_upper emitter"},
		{"common-emitter", "collector", "base_upper transistor.vbe emitter positive", "base_lower load temperature transistor.beta meter"},
		{"common-emitter", "bypass_corner", "base_lower", "bypass in.source_resistance"},
		{"common-emitter", "input_corner", "", "couple in.source_resistance transistor.beta"},
		{"emitter-follower", "gain", "couple transistor.beta", "in.source_resistance meter"},
		{"emitter-follower", "dc", "base_lower positive transistor.beta temperature", "base_upper transistor.vbe"},
		{"emitter-follower", "output_resistance", "in.source_resistance", "transistor.beta"},
		{"power-amp", "tone_level", "gain_a in.tone_level output_c speaker", "gain_b"},
		{"power-amp", "clip_power", "supply", "speaker headroom"},
		{"power-amp", "tone_power", "in.tone_level output_c", "gain_b"},
		{"power-amp", "corner", "", "speaker output_c"},
	}
	for _, tt := range tests {
		t.Run(tt.kind+" "+tt.output, func(t *testing.T) {
			c := newCircuit(t, tt.kind, 1)
			given := with(examples[tt.kind])
			before := c.at(t, given)[tt.output]
			for list, sign := range map[string]float64{tt.rises: 1, tt.falls: -1} {
				for _, name := range strings.Fields(list) {
					if after := c.at(t, nudge(c, t, given, name))[tt.output]; !((after-before)*sign > 0) {
						t.Errorf("with more %s it goes from %.12g to %.12g", name, before, after)
					}
				}
			}
		})
	}
}

// Resistors n times, or capacitors, what that makes of corners and gains.
func TestScalingLawsOfMixersAndAmplifiers(t *testing.T) {
	tests := map[string]struct {
		kind, output, names string
		by, factor          float64
	}{
		"gate, capacitor":      {"gate-mixer", "corner", "filter_c", 2, 0.5},
		"gate, supply":         {"gate-mixer", "tone_level", "supply", 3, 3},
		"ring, capacitor":      {"diode-ring", "corner", "filter_c", 2, 0.5},
		"ring, signal":         {"diode-ring", "tone_level", "signal.level", 3, 3},
		"inverting, resistors": {"opamp-inverting", "gain", "feedback input gain_trim in.source_resistance", 2, 1},
		"power, corner":        {"power-amp", "corner", "output_c speaker", 2, 0.25},
		"power, at clipping":   {"power-amp", "clip_power", "supply headroom", 2, 4},
		"power, of the note":   {"power-amp", "tone_power", "in.tone_level", 0.5, 0.25},
		"emitter, bypass":      {"common-emitter", "bypass_corner", "bypass", 2, 0.5},
		"emitter, couple":      {"common-emitter", "input_corner", "couple", 2, 0.5},
		"follower, couple":     {"emitter-follower", "input_corner", "couple", 2, 0.5},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			c := newCircuit(t, tt.kind, 1)
			given := with(examples[tt.kind])
			if tt.kind == "power-amp" {
				given["speaker"] = 8
			}
			first := c.at(t, given)[tt.output]
			second := c.at(t, scaled(given, tt.by, strings.Fields(tt.names)...))[tt.output]
			near(t, tt.output, second/first, tt.factor, 1e-12)
		})
	}
}

// What is merely handed on arrives unchanged.
func TestSignalsHandedOnByMixersAndAmplifiers(t *testing.T) {
	for _, kind := range []string{"opamp-inverting", "common-emitter", "emitter-follower", "power-amp"} {
		got := evaluate(t, kind, examples[kind])
		near(t, kind+" frequency", got["frequency"], 331e3, 0)
		near(t, kind+" second_frequency", got["second_frequency"], 330e3, 0)
		near(t, kind+" tone_frequency", got["tone_frequency"], examples[kind]["in.tone_frequency"], 0)
		near(t, kind+" tank_q", got["tank_q"], 70, 0)
		near(t, kind+" level", got["level"], got["output_level"], 0)
	}
	for _, kind := range []string{"gate-mixer", "diode-ring"} {
		got := evaluate(t, kind, examples[kind])
		near(t, kind+" frequency", got["frequency"], 331e3, 0)
		second := examples[kind]["signal.frequency"]
		near(t, kind+" second_frequency", got["second_frequency"], second, 0)
		near(t, kind+" tone_frequency", got["tone_frequency"], 331e3-second, 1e-12)
	}
	common := evaluate(t, "common-emitter", examples["common-emitter"])
	near(t, "common-emitter source_resistance", common["source_resistance"], 4.7e3, 0)
}

// Each finding at its threshold and not before, thresholds by hand.
func TestFindingsOfMixersAndAmplifiers(t *testing.T) {
	common := evaluate(t, "common-emitter", with(examples["common-emitter"], "in.second_level", 0, "in.tone_level", 0))
	follower := evaluate(t, "emitter-follower", with(examples["emitter-follower"], "in.second_level", 0, "in.tone_level", 0))
	tests := map[string]struct {
		kind, finding, moved string
		threshold            float64
		above                bool
	}{
		"ring overrun": {"diode-ring", "overrun", "signal.level", 1, true},
		// the nearer of cut-off and emitter + 0.2 V
		"collector": {"common-emitter", "clips", "in.level", math.Min(common["current"]*4.7e3,
			common["collector"]-common["emitter_voltage"]-0.2) / common["gain"], true},
		"follower": {"emitter-follower", "clips", "in.level", math.Min(11.8-follower["dc"], follower["dc"]+0.3) / follower["gain"], true},
		// 6 V − 1.2 V over 1 + 10/0.47
		"power amp": {"power-amp", "clips", "in.tone_level", 4.8 / (1 + 10/0.47), true},
		// Rf/Ri = 50/11.2; 10.5 V less the steady output
		"inverting": {"opamp-inverting", "clips", "in.tone_level",
			(10.5 - math.Abs(1e-3*(1+50/11.2)-0.05*50/11.2)) / (50 / 11.2), true},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			given := with(examples[tt.kind])
			for _, other := range []string{"in.level", "in.second_level", "in.tone_level"} {
				if _, ok := given[other]; ok {
					given[other] = 0
				}
			}
			if tt.moved == "in.tone_level" {
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
	for _, kind := range []string{"common-emitter", "emitter-follower"} {
		near(t, kind+" starved", evaluate(t, kind, with(examples[kind], "base_lower", 10))["starved"], 1, 0)
	}
}

// A seeded set of parts: every unit drawn from ±5 % about an example stays within
// the bounds that hold for all of them, which are finite though the beat's pass 0 Hz.
func TestBoundsHoldRandomUnits(t *testing.T) {
	random := rand.New(rand.NewPCG(19, 23))
	for _, kind := range []string{"gate-mixer", "diode-ring", "opamp-inverting", "common-emitter", "emitter-follower", "power-amp"} {
		c := newCircuit(t, kind, 1)
		values := c.fill(t, examples[kind])
		box := make([]tape.Interval, len(values))
		for i, v := range values {
			box[i] = tape.Interval{Low: v - 0.05*math.Abs(v), High: v + 0.05*math.Abs(v)}
		}
		bounds := c.program.Bounds(box)
		for o, b := range bounds {
			if math.IsInf(b.Low, 0) || math.IsInf(b.High, 0) {
				t.Errorf("%s %s: bounds %+v", kind, c.outputs[o], b)
			}
		}
		unit := make([]float64, len(values))
		for range 200 {
			for i, b := range box {
				unit[i] = b.Low + (b.High-b.Low)*random.Float64()
			}
			for o, v := range moved(c, unit, 0, 0) {
				if !(bounds[o].Low <= v && v <= bounds[o].High) {
					t.Fatalf("%s %s = %g outside %+v", kind, c.outputs[o], v, bounds[o])
				}
			}
		}
	}
}
