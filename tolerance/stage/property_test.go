package stage

import (
	"math"
	"strings"
	"testing"
)

// Doubling every capacitor halves an RC corner; every resistor likewise. A tank
// of four times the coil, or of coil and capacitors twice, falls to half.
func TestScalingLaws(t *testing.T) {
	tests := map[string]struct {
		kind, output, names string
		by, factor          float64
	}{
		"lowpass, capacitor":       {"rc-lowpass", "corner", "shunt", 2, 0.5},
		"lowpass, resistors":       {"rc-lowpass", "corner", "series load in.source_resistance", 2, 0.5},
		"coupling, capacitor":      {"coupling", "corner", "capacitor", 2, 0.5},
		"coupling, resistors":      {"coupling", "corner", "load in.source_resistance", 2, 0.5},
		"highpass, capacitor":      {"rc-highpass", "corner", "series", 2, 0.5},
		"highpass, resistors":      {"rc-highpass", "corner", "shunt load in.source_resistance", 2, 0.5},
		"sallen-key, capacitors":   {"sallen-key-lowpass", "corner", "c1 c2", 2, 0.5},
		"sallen-key, resistors":    {"sallen-key-lowpass", "corner", "r1 r2 in.source_resistance", 2, 0.5},
		"sallen-key, Q":            {"sallen-key-lowpass", "q", "c1 c2 r1 r2 in.source_resistance", 2, 1},
		"sallen-key, Q by c1":      {"sallen-key-lowpass", "q", "c1", 4, 2},
		"lc, both":                 {"lc-lowpass", "corner", "coil shunt", 2, 0.5},
		"level tank, both":         {"level-tank", "f0", "coil tank tuner stray", 2, 0.5},
		"level tank, Q":            {"level-tank", "q", "damping load in.source_resistance", 2, 2},
		"zener, volts and amperes": {"shunt-zener", "zener_current", "input zener.voltage zener.voltage_slope load_current test_current", 2, 2},
		"decoupling, capacitor":    {"rail-decoupling", "corner", "capacitor", 2, 0.5},
		"detector, capacitor":      {"envelope-detector", "corner", "hold", 2, 0.5},
		"detector, clipping":       {"envelope-detector", "clip_frequency", "hold", 2, 0.5},
		"detector, ripple":         {"envelope-detector", "ripple", "hold", 2, 0.5},
		"colpitts, coil":           {"colpitts", "frequency", "coil", 4, 0.5},
		"colpitts, capacitors":     {"colpitts", "frequency", "upper lower tuner stray", 4, 0.5},
		"colpitts, both twice":     {"colpitts", "frequency", "coil upper lower tuner stray", 2, 0.5},
		"tuned tank, capacitors":   {"tuned-tank", "frequency", "tank tuner stray", 4, 0.5},
		"divider, resistors":       {"divider", "voltage", "upper lower load", 3, 1},
		"divider, current":         {"divider", "current", "upper lower load", 4, 0.25},
		"op-amp, resistors":        {"opamp-noninverting", "gain", "feedback ground gain_trim", 2, 1},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			c := newCircuit(t, tt.kind, 1)
			given := with(examples[tt.kind])
			first := c.at(t, given)[tt.output]
			second := c.at(t, scaled(given, tt.by, strings.Fields(tt.names)...))[tt.output]
			near(t, tt.output, second/first, tt.factor, 1e-12)
		})
	}
}

// The sign of each change that a person at the bench would expect.
func TestMonotoneDirections(t *testing.T) {
	tests := []struct {
		kind, output string
		rises        string // inputs with which the output rises
		falls        string
	}{
		{"colpitts", "frequency", "", "coil upper lower tuner stray sensor probe pad"},
		{"tuned-tank", "frequency", "", "coil tank tuner stray sensor probe pad"},
		{"junction-mixer", "collector", "base_upper transistor.vbe emitter", "base_lower bias load temperature transistor.beta"},
		{"junction-mixer", "base_voltage", "base_lower bias transistor.beta", "base_upper"},
		{"junction-mixer", "carrier_level", "couple_carrier carrier.level load", "couple_signal emitter meter probe"},
		{"junction-mixer", "tone_level", "carrier.level signal.level load", "emitter"},
		{"junction-mixer", "lock_range", "signal.level", "isolation carrier.level carrier.tank_q"},
		{"opamp-noninverting", "gain", "feedback opamp.gbw", "ground gain_trim in.frequency"},
		{"opamp-noninverting", "dc", "in.dc opamp.offset feedback", "ground"},
		{"envelope-detector", "dc", "in.level load temperature", "diode.drop meter"},
		{"envelope-detector", "ripple", "", "hold probe in.frequency"},
		{"rc-lowpass", "tone_level", "in.tone_level load", "series shunt meter probe in.tone_frequency"},
		{"coupling", "tone_level", "in.tone_level capacitor load in.tone_frequency", "in.source_resistance meter"},
		{"rc-highpass", "tone_level", "in.tone_level series shunt load in.tone_frequency", "in.source_resistance meter"},
		{"sallen-key-lowpass", "f0", "", "r1 r2 c1 c2 in.source_resistance"},
		{"sallen-key-lowpass", "q", "c1", "c2"},
		{"sallen-key-lowpass", "level", "in.level", "in.frequency r1 c1"},
		{"lc-lowpass", "f0", "in.source_resistance meter", "coil shunt load probe"},
		{"lc-lowpass", "dc", "in.dc load", "in.source_resistance meter"},
		{"level-tank", "f0", "", "coil tank tuner stray sensor probe"},
		{"level-tank", "level", "in.level", "meter sensor probe tuner in.frequency"},
		{"shunt-zener", "voltage", "input zener.voltage temperature", "load_current series test_current meter"},
		{"shunt-zener", "zener_dissipation", "input", "load_current series"},
		{"divider", "voltage", "input lower load", "upper meter"},
		{"adjustable-regulator", "voltage", "lower trim regulator.reference regulator.adjust_current", "upper temperature"},
		{"fixed-regulator", "dissipation", "input load_current", "regulator.output"},
		{"rail-decoupling", "attenuation", "series capacitor in.frequency", ""},
	}
	for _, tt := range tests {
		t.Run(tt.kind+" "+tt.output, func(t *testing.T) {
			c := newCircuit(t, tt.kind, 1)
			given := with(examples[tt.kind])
			before := c.at(t, given)[tt.output]
			check := func(list string, sign float64) {
				for _, name := range strings.Fields(list) {
					changed := nudge(c, t, given, name)
					if after := c.at(t, changed)[tt.output]; !((after-before)*sign > 0) {
						t.Errorf("with more %s it goes from %.12g to %.12g", name, before, after)
					}
				}
			}
			check(tt.rises, 1)
			check(tt.falls, -1)
		})
	}
}

// nudge raises one input by 1 %, or from nothing to a small part of its kind.
func nudge(c *circuit, t *testing.T, given map[string]float64, name string) map[string]float64 {
	values := c.fill(t, given)
	for i, n := range c.inputs {
		if n != name {
			continue
		}
		if values[i] != 0 {
			return with(given, name, values[i]*1.01)
		}
		small := map[string]float64{"meter": 1e-7, "probe": 15e-12, "sensor": 1e-12, "pad": 10e-12}
		return with(given, name, small[name])
	}
	t.Fatalf("%s has no input %s", c.kind.Name, name)
	return nil
}

// No stray, one capacitor alone: the plain tank's closed form; a colpitts of
// equal capacitors is a tank of half of one.
func TestTankLimits(t *testing.T) {
	bare := evaluate(t, "tuned-tank", map[string]float64{"coil": 1e-3, "tank": 110e-12})
	near(t, "no stray", bare["frequency"], 1/(2*math.Pi*math.Sqrt(1e-3*110e-12)), 1e-14)
	equal := evaluate(t, "colpitts", map[string]float64{"coil": 1e-3, "upper": 220e-12, "lower": 220e-12})
	near(t, "equal capacitors", equal["frequency"], bare["frequency"], 1e-14)
	near(t, "level handed on", bare["level"], 1, 0)
	near(t, "Q handed on", bare["tank_q"], 80, 0)
	// Every parallel capacitance is worth the same.
	for _, name := range []string{"pad", "tuner", "stray", "sensor", "probe"} {
		got := evaluate(t, "colpitts", map[string]float64{"coil": 1e-3, "upper": 220e-12, "lower": 220e-12, name: 90e-12})
		near(t, name, got["frequency"], 1/(2*math.Pi*math.Sqrt(1e-3*200e-12)), 1e-14)
	}
}

// For a small drive I1/I0 goes to x/2: the carrier's level is that of a linear
// amplifier of transconductance I/(V_T + I·R_E), and so is the swing.
func TestJunctionSmallDrive(t *testing.T) {
	got := evaluate(t, "junction-mixer", with(examples["junction-mixer"], "carrier.level", 1e-3, "signal.level", 0))
	linear := got["carrier_drive"] * got["current"] / (got["thermal"] + got["current"]*4.7e3) * 10e3
	near(t, "carrier_level", got["carrier_level"], linear, 1e-8) // 1 - x²/8, x about 1e-4
	near(t, "swing", got["swing"], linear, 1e-3)                 // 1 - x/4 and smaller
	near(t, "second_level", got["second_level"], 0, 0)
	near(t, "tone_level", got["tone_level"], 0, 0)
}

// A large coupling capacitor shorts the other oscillator's share away: with one
// alone and large, the whole level arrives; with none, nothing.
func TestJunctionCouplingLimits(t *testing.T) {
	c := newCircuit(t, "junction-mixer", 1)
	whole := c.at(t, with(examples["junction-mixer"], "couple_carrier", 1, "couple_signal", 0))
	near(t, "carrier_drive", whole["carrier_drive"], 1, 1e-9)
	near(t, "signal_drive", whole["signal_drive"], 0, 0)
	near(t, "second_level", whole["second_level"], 0, 0)
}

func TestJunctionSaturates(t *testing.T) {
	g := with(examples["junction-mixer"], "load", 100e3)
	got := evaluate(t, "junction-mixer", g)
	near(t, "saturated", got["saturated"], 1, 0)
	near(t, "collector", got["collector"], got["emitter_voltage"]+0.2, 1e-12)
	near(t, "swing", got["swing"], 0, 0)
	near(t, "dc", got["dc"], got["collector"], 0)
}

// A capacitor not fitted is a wire, a large one passes the carrier whole but
// not the steady voltage, on which the carriers come through.
func TestMultiplierCoupling(t *testing.T) {
	direct := map[string]float64{"carrier.level": 1, "carrier.frequency": 331e3, "signal.level": 0.8,
		"signal.frequency": 330e3, "carrier.dc": 0.5, "signal.dc": -0.25}
	got := evaluate(t, "multiplier", direct)
	near(t, "tone_level", got["tone_level"], 0.04, 1e-15)
	near(t, "carrier_level", got["carrier_level"], 0.025, 1e-15)
	near(t, "second_level", got["second_level"], 0.04, 1e-15)
	near(t, "dc", got["dc"], -0.0125, 1e-15)
	got = evaluate(t, "multiplier", with(direct, "couple_carrier", 1e-3, "couple_signal", 1e-3))
	near(t, "tone_level through capacitors", got["tone_level"], 0.04, 1e-9)
	near(t, "carrier_level through capacitors", got["carrier_level"], 0, 0)
	near(t, "dc through capacitors", got["dc"], 0, 0)
}

// With one carrier the output is the smallest of gain·level, slew/(2πf) and
// what the rails leave beside the steady voltage.
func TestOpampLimitsOneCarrier(t *testing.T) {
	base := with(examples["opamp-noninverting"], "in.second_level", 0, "in.tone_level", 0, "in.dc", 0, "opamp.offset", 0)
	slewing := math.Min(0.2*evaluate(t, "opamp-noninverting", base)["gain"], 1e5/(2*math.Pi*331e3))
	tests := map[string]struct {
		given map[string]float64
		want  float64
	}{
		"free":                {base, 0.2 * evaluate(t, "opamp-noninverting", base)["gain"]},
		"slew":                {with(base, "opamp.slew", 1e5), slewing},
		"rails":               {with(base, "in.level", 20, "opamp.slew", 1e9), 10.5},
		"rails, off centre":   {with(base, "in.level", 20, "opamp.slew", 1e9, "in.dc", 1), 10.5 - (1 + 47.0/11)},
		"stuck at the top":    {with(base, "in.dc", 5), 0},
		"single supply, none": {with(base, "negative", 0), 0},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			near(t, "output_level", evaluate(t, "opamp-noninverting", tt.given)["output_level"], tt.want, 1e-12)
		})
	}
	near(t, "dc at the top", evaluate(t, "opamp-noninverting", with(base, "in.dc", 5))["dc"], 10.5, 1e-12)
	near(t, "dc at the bottom", evaluate(t, "opamp-noninverting", with(base, "in.dc", -5))["dc"], -10.5, 1e-12)
}

// Two carriers that together reach the rails shrink alike and just fit.
func TestOpampLimitsTwoCarriers(t *testing.T) {
	c := newCircuit(t, "opamp-noninverting", 1)
	free := c.at(t, examples["opamp-noninverting"])
	loud := scaled(examples["opamp-noninverting"], 30, "in.level", "in.second_level", "in.tone_level")
	railed := c.at(t, with(loud, "opamp.slew", 1e12, "in.dc", 0, "opamp.offset", 0))
	near(t, "swing", railed["swing"], 10.5, 1e-12)
	near(t, "sum", railed["level"]+railed["second_level"]+railed["tone_level"], 10.5, 1e-12)
	near(t, "ratio kept", railed["second_level"]/railed["level"], free["second_level"]/free["level"], 1e-12)
	slewed := c.at(t, with(examples["opamp-noninverting"], "opamp.slew", 1e5))
	slope := 2 * math.Pi * (331e3*slewed["level"] + 330e3*slewed["second_level"] + 1e3*slewed["tone_level"])
	near(t, "slope", slope, 1e5, 1e-12)
}

func TestDetectorThreshold(t *testing.T) {
	c := newCircuit(t, "envelope-detector", 1)
	for level, conducts := range map[float64]float64{0: 0, 1e-6: 0, 0.05: 0, 0.2: 0, 0.6: 1, 2: 1} {
		got := c.at(t, with(examples["envelope-detector"], "in.level", level, "in.second_level", level/4))
		near(t, "conducts", got["conducts"], conducts, 0)
		if conducts == 0 {
			near(t, "dc", got["dc"], 0, 0)
			near(t, "tone_level", got["tone_level"], 0, 0)
			near(t, "source_resistance", got["source_resistance"], 100e3, 1e-12)
		}
	}
	// dc + drop at that current is the carrier, and the drop is that of the law.
	got := c.at(t, examples["envelope-detector"])
	near(t, "drop", 2-got["dc"], 0.6+1.8*0.02569257912*math.Log(got["dc"]/100e3/1e-3), 1e-8)
	near(t, "ripple", got["ripple"], got["dc"]/(331e3*100e3*330e-12), 1e-12)
	near(t, "tone_level", got["tone_level"], 0.8*(1-0.16/8), 1e-12)
	// Which of two carriers is called the second does not matter.
	swapped := c.at(t, with(examples["envelope-detector"], "in.level", 0.8, "in.second_level", 2))
	near(t, "swapped dc", swapped["dc"], got["dc"], 1e-12)
	near(t, "swapped tone", swapped["tone_level"], got["tone_level"], 1e-12)
}

// No tone, no carrier: no gain at 0 Hz through a capacitor, all of it without.
func TestFiltersAtZeroHertz(t *testing.T) {
	got := evaluate(t, "coupling", with(examples["coupling"], "in.tone_frequency", 0))
	near(t, "coupling", got["gain_at_tone"], 0, 0)
	got = evaluate(t, "rc-lowpass", with(examples["rc-lowpass"], "in.tone_frequency", 0, "load", 0))
	near(t, "lowpass", got["gain_at_tone"], 1, 0)
	got = evaluate(t, "rail-decoupling", with(examples["rail-decoupling"], "in.frequency", 0))
	near(t, "decoupling", got["attenuation"], 0, 0)
}

// The threshold is where the carrier equals the drop at the current that the
// load would draw at the full carrier.
func TestDetectorOpensAtItsDrop(t *testing.T) {
	c := newCircuit(t, "envelope-detector", 1)
	opens := bisect(1e-3, 1, func(v float64) float64 {
		return 0.6 + 1.8*0.025692579121493725*math.Log(v/100e3/1e-3) - v
	})
	for factor, want := range map[float64]float64{1 - 1e-6: 0, 1 + 1e-6: 1} {
		got := c.at(t, with(examples["envelope-detector"], "in.level", opens*factor, "in.second_level", 0))
		near(t, "conducts", got["conducts"], want, 0)
	}
}
