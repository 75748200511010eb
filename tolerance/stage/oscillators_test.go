package stage

import (
	"math"
	"strings"
	"testing"
)

// Printed worked examples and definitions. "Archive" is an open archive of
// textbook examples in which inputs and method were read; the figures are
// recomputed to ten digits.
func TestOscillatorExamples(t *testing.T) {
	tests := map[string]struct {
		kind   string
		given  map[string]float64
		output string
		want   float64
	}{
		// R. Blake, Electronic Communication Systems, Ex. 2.2, p. 62 (archive): 10 µH in all.
		"hartley": {"hartley", map[string]float64{"coil_a": 4e-6, "coil_b": 6e-6, "tank": 100e-12}, "frequency", 5032921.21},
		// From the definition: 1/(1/100 + 1/300 + 1/150) = 50 pF with 25 µH, as R. Blake, Ex. 2.1, p. 50 (archive).
		"clapp": {"clapp", map[string]float64{"coil": 25e-6, "upper": 100e-12, "lower": 300e-12, "series": 150e-12}, "frequency", 4501581.581},
		// T. L. Floyd, Electronic Devices, Ex. 16.1 (archive): 10 kΩ, 10 nF, gain 3.
		"wien":      {"wien-bridge", equalArms(10e3, 10e-9), "frequency", 1591.549431},
		"wien gain": {"wien-bridge", equalArms(10e3, 10e-9), "needed_gain", 3},
		// M. S. Sivakumar, Linear Integrated Circuit, Ex. 13.3 (archive).
		"wien 2.4 nF": {"wien-bridge", equalArms(10e3, 2.4e-9), "frequency", 6631.455962},
		// Circuit analysis: 1/(2π√(R1R2C1C2)) and 1 + R1/R2 + C2/C1.
		"wien unequal":      {"wien-bridge", with(examples["wien-bridge"], "stray", 0), "frequency", 1604.436681},
		"wien unequal gain": {"wien-bridge", with(examples["wien-bridge"], "stray", 0), "needed_gain", 2.653333333},
		// T. L. Floyd, Electronic Devices, Ex. 16.2 (archive): 10 kΩ, 1 nF.
		"phase shift":      {"phase-shift", ladder(10e3, 1e-9, 1), "frequency", 6497.473344},
		"phase shift gain": {"phase-shift", ladder(10e3, 1e-9, 1), "needed_gain", 29},
		// T. L. Floyd, Electronic Devices, Ex. 16.6 (archive), with 1/ln 2 in full.
		"timer":      {"timer-astable", timer(2.2e3, 4.7e3, 22e-9), "frequency", 5653.193734},
		"timer duty": {"timer-astable", timer(2.2e3, 4.7e3, 22e-9), "duty", 0.5948275862},
		// S. Franco, Design with Operational Amplifiers, Ex. 10.3 (archive): 50 kHz
		// and 75 % by 1.44/((Ra+2Rb)·C), so 1.44·ln 2 too high.
		"timer designed":      {"timer-astable", timer(14.4e3, 7.2e3, 1e-9), "frequency", 50e3 / (1.44 * math.Ln2)},
		"timer designed duty": {"timer-astable", timer(14.4e3, 7.2e3, 1e-9), "duty", 0.75},
		// M. S. Sivakumar, Linear Integrated Circuit, Ex. 13.7 (archive): a comparator
		// between ±V, R1/R2 = 0.3043478261, 10.51693476 kΩ and 10 nF: 10 kHz.
		"comparator":      {"schmitt-rc", comparator(0.3043478261), "frequency", 10e3},
		"comparator duty": {"schmitt-rc", comparator(0.3043478261), "duty", 0.5},
		// Definitions of IEC 60122-1: 14 fF, 3.5 pF and 20 pF raise 10 MHz by
		// 297.8723404 ppm in the first order.
		"crystal": {"crystal", stone(40e-12), "pull", 297.8723404e-6},
		"loaded":  {"crystal", stone(40e-12), "frequency", 10e6 * (1 + 297.8723404e-6)},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			near(t, tt.output, evaluate(t, tt.kind, tt.given)[tt.output], tt.want, 1e-9)
		})
	}
}

func equalArms(r, c float64) map[string]float64 {
	return map[string]float64{"series_r": r, "series_c": c, "shunt_r": r, "shunt_c": c}
}

// ladder has three sections of one RC, each of a higher impedance than the last.
func ladder(r, c, step float64) map[string]float64 {
	return map[string]float64{"r1": r, "r2": r * step, "r3": r * step * step, "c1": c, "c2": c / step, "c3": c / step / step}
}

func timer(charge, discharge, farads float64) map[string]float64 {
	return map[string]float64{"charge_r": charge, "discharge_r": discharge, "timing_c": farads}
}

// comparator swings ±V and feeds R1/(R1+R2) of it back.
func comparator(ratio float64) map[string]float64 {
	share := ratio / (1 + ratio)
	return map[string]float64{"timing_r": 10516.93476, "timing_c": 10e-9, "supply": 8,
		"upper_threshold": (1 + share) / 2, "lower_threshold": (1 - share) / 2}
}

// stone is a 10 MHz crystal of 14 fF and 3.5 pF at 25 °C with two load capacitors.
func stone(load float64) map[string]float64 {
	return map[string]float64{"crystal.frequency": 10e6, "crystal.motional_c": 14e-15, "crystal.shunt_c": 3.5e-12,
		"load_a": load, "load_b": load}
}

// The pull p is the first term of √(1 + 2p), so that the exact frequency follows
// from it. With no load but C0 that is the parallel resonance: 9.996490 MHz,
// 10.017730 MHz and 27.1 fF have C0 = 6.370465688 pF (Circuit Cellar, EQ 67).
func TestCrystalPull(t *testing.T) {
	exact := func(g map[string]float64) float64 { return math.Sqrt(1+2*evaluate(t, "crystal", g)["pull"]) - 1 }
	near(t, "20 pF", exact(stone(40e-12)), 297.8279897e-6, 1e-9)
	step := evaluate(t, "crystal", stone(36e-12))["pull"] - evaluate(t, "crystal", stone(40e-12))["pull"]
	near(t, "18 pF against 20 pF", step, 27.70905492e-6, 1e-9)
	slope := evaluate(t, "crystal", stone(40.002e-12))["pull"] - evaluate(t, "crystal", stone(39.998e-12))["pull"]
	near(t, "per pF", slope/2e-3, -12.67541874e-6, 1e-6)
	unloaded := with(stone(1e-30), "crystal.frequency", 9996490, "crystal.motional_c", 27.1e-15, "crystal.shunt_c", 6.370465688e-12)
	near(t, "parallel resonance", 9996490*(1+exact(unloaded)), 10017730, 1e-9)
}

// The cubic about 25 °C, by hand: 20 K above, −0.2 ppm/K·20 K + 0.4e-9·400 +
// 0.11e-9·8000 = −4 ppm + 0.16 ppm + 0.88 ppm; 20 K below, 4 ppm + 0.16 − 0.88.
func TestCrystalTemperature(t *testing.T) {
	c := newCircuit(t, "crystal", 1)
	given := with(examples["crystal"], "temperature", 298.15)
	still := c.at(t, given)["frequency"]
	for kelvin, ppm := range map[float64]float64{20: -2.96, -20: 3.28} {
		got := c.at(t, with(given, "temperature", 298.15+kelvin))["frequency"]
		near(t, "drift in ppm", (got/still-1)*1e6, ppm, 1e-6)
	}
}

// Doubling every capacitor halves an RC frequency, every resistor likewise; a
// tank of four times either falls to half. The needed gain and the duty do not
// change with the size of the parts.
func TestOscillatorScalingLaws(t *testing.T) {
	tests := map[string]struct {
		kind, output, names string
		by, factor          float64
	}{
		"clapp, coil":          {"clapp", "frequency", "coil", 4, 0.5},
		"clapp, capacitors":    {"clapp", "frequency", "upper lower series tuner stray", 4, 0.5},
		"hartley, coils":       {"hartley", "frequency", "coil_a coil_b", 4, 0.5},
		"hartley, capacitors":  {"hartley", "frequency", "tank tuner stray", 4, 0.5},
		"wien, capacitors":     {"wien-bridge", "frequency", "series_c shunt_c stray", 2, 0.5},
		"wien, resistors":      {"wien-bridge", "frequency", "series_r shunt_r", 2, 0.5},
		"wien, gain":           {"wien-bridge", "needed_gain", "series_r shunt_r", 2, 1},
		"ladder, capacitors":   {"phase-shift", "frequency", "c1 c2 c3 stray", 2, 0.5},
		"ladder, resistors":    {"phase-shift", "frequency", "r1 r2 r3", 2, 0.5},
		"ladder, gain by C":    {"phase-shift", "needed_gain", "c1 c2 c3 stray", 2, 1},
		"ladder, gain by R":    {"phase-shift", "needed_gain", "r1 r2 r3", 2, 1},
		"schmitt, capacitors":  {"schmitt-rc", "frequency", "timing_c stray", 2, 0.5},
		"schmitt, resistor":    {"schmitt-rc", "frequency", "timing_r", 2, 0.5},
		"schmitt, supply":      {"schmitt-rc", "frequency", "supply", 2, 1},
		"schmitt, average":     {"schmitt-rc", "average", "supply", 2, 2},
		"timer, capacitors":    {"timer-astable", "frequency", "timing_c stray", 2, 0.5},
		"timer, resistors":     {"timer-astable", "frequency", "charge_r discharge_r", 2, 0.5},
		"timer, duty":          {"timer-astable", "duty", "charge_r discharge_r", 2, 1},
		"crystal, capacitors":  {"crystal", "pull", "crystal.shunt_c load_a load_b tuner stray", 2, 0.5},
		"crystal, frequency":   {"crystal", "frequency", "crystal.frequency", 2, 2},
		"crystal, motional C":  {"crystal", "pull", "crystal.motional_c", 2, 2},
		"crystal, all C alike": {"crystal", "frequency", "crystal.motional_c crystal.shunt_c load_a load_b tuner stray", 2, 1},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			c := newCircuit(t, tt.kind, 1)
			first := c.at(t, examples[tt.kind])[tt.output]
			second := c.at(t, scaled(examples[tt.kind], tt.by, strings.Fields(tt.names)...))[tt.output]
			near(t, tt.output, second/first, tt.factor, 1e-12)
		})
	}
}

// The sign of each change that a person at the bench would expect.
func TestOscillatorMonotoneDirections(t *testing.T) {
	tests := []struct{ kind, output, rises, falls string }{
		{"clapp", "frequency", "", "coil upper lower series tuner stray sensor probe pad"},
		{"hartley", "frequency", "", "coil_a coil_b coupling tank tuner stray sensor probe pad"},
		{"wien-bridge", "frequency", "", "series_r series_c shunt_r shunt_c stray sensor"},
		{"wien-bridge", "needed_gain", "series_r shunt_c stray sensor", "shunt_r series_c"},
		{"phase-shift", "frequency", "", "r1 r2 r3 c1 c2 c3 stray sensor"},
		{"phase-shift", "needed_gain", "stray sensor r1", "r3 c1"},
		{"schmitt-rc", "frequency", "lower_threshold", "timing_r timing_c stray sensor upper_threshold"},
		{"schmitt-rc", "average", "supply upper_threshold lower_threshold", ""},
		{"timer-astable", "frequency", "", "charge_r discharge_r timing_c stray sensor"},
		{"timer-astable", "duty", "charge_r", "discharge_r"},
		{"crystal", "frequency", "crystal.frequency crystal.motional_c",
			"crystal.shunt_c load_a load_b tuner stray sensor probe temperature"},
	}
	for _, tt := range tests {
		t.Run(tt.kind+" "+tt.output, func(t *testing.T) {
			c := newCircuit(t, tt.kind, 1)
			before := c.at(t, examples[tt.kind])[tt.output]
			for sign, list := range map[float64]string{1: tt.rises, -1: tt.falls} {
				for _, name := range strings.Fields(list) {
					after := c.at(t, nudge(c, t, examples[tt.kind], name))[tt.output]
					if !((after-before)*sign > 0) {
						t.Errorf("with more %s it goes from %.12g to %.12g", name, before, after)
					}
				}
			}
		})
	}
}

// A clapp's series capacitor that is a wire leaves a colpitts; one much smaller
// than the pair is alone with the coil. Coils apart add, the same coils wound on
// each other double that.
func TestTappedTankLimits(t *testing.T) {
	colpitts := with(examples["colpitts"], "pad", 10e-12, "tuner", 0)
	wire := evaluate(t, "clapp", with(colpitts, "series", 1))["frequency"]
	near(t, "wire", wire, evaluate(t, "colpitts", colpitts)["frequency"], 1e-9)
	small := map[string]float64{"coil": 1e-3, "upper": 1e-3, "lower": 1e-3, "series": 60e-12, "tuner": 50e-12}
	near(t, "small", evaluate(t, "clapp", small)["frequency"], 1/(2*math.Pi*math.Sqrt(1e-3*110e-12)), 1e-6)
	coils := map[string]float64{"coil_a": 400e-6, "coil_b": 600e-6, "tank": 110e-12}
	near(t, "apart", evaluate(t, "hartley", coils)["frequency"], 1/(2*math.Pi*math.Sqrt(1e-3*110e-12)), 1e-12)
	equal := map[string]float64{"coil_a": 500e-6, "coil_b": 500e-6, "tank": 110e-12, "coupling": 1}
	near(t, "one coil", evaluate(t, "hartley", equal)["frequency"], 1/(2*math.Pi*math.Sqrt(2e-3*110e-12)), 1e-12)
	for _, name := range []string{"pad", "tuner", "stray", "sensor", "probe"} {
		got := evaluate(t, "hartley", with(coils, name, 90e-12))["frequency"]
		near(t, "hartley "+name, got, 1/(2*math.Pi*math.Sqrt(1e-3*200e-12)), 1e-12)
		if name != "tuner" { // which lies across the series capacitor
			got = evaluate(t, "clapp", with(small, "series", 110e-12, "tuner", 0, name, 90e-12))["frequency"]
			near(t, "clapp "+name, got, 1/(2*math.Pi*math.Sqrt(1e-3*200e-12)), 1e-6)
		}
	}
}

// Sections of ever higher impedance do not load each other: as with buffers,
// 1/(2π√3·RC) and 2³ (each section then turns 60° and halves). 10 kΩ, 10 nF:
// 918.8814924 Hz.
func TestLadderOfRisingImpedance(t *testing.T) {
	got := evaluate(t, "phase-shift", ladder(10e3, 10e-9, 1e7))
	near(t, "frequency", got["frequency"], 918.8814924, 1e-6)
	near(t, "needed_gain", got["needed_gain"], 8, 1e-6)
}

// Stray and sensor are the same capacitance.
func TestRCOscillatorStray(t *testing.T) {
	tests := map[string]string{"wien-bridge": "shunt_c", "schmitt-rc": "timing_c", "timer-astable": "timing_c"}
	for kind, across := range tests {
		c := newCircuit(t, kind, 1)
		bare := with(examples[kind], "stray", 0)
		whole := c.at(t, with(bare, across, bare[across]+100e-12))["frequency"]
		near(t, kind+" stray", c.at(t, with(bare, "stray", 100e-12))["frequency"], whole, 1e-12)
		near(t, kind+" sensor", c.at(t, with(bare, "sensor", 60e-12, "stray", 40e-12))["frequency"], whole, 1e-12)
	}
	c := newCircuit(t, "phase-shift", 1)
	near(t, "phase-shift", c.at(t, with(examples["phase-shift"], "sensor", 30e-12))["frequency"],
		c.at(t, with(examples["phase-shift"], "stray", 42e-12))["frequency"], 1e-12)
	c = newCircuit(t, "crystal", 1)
	near(t, "crystal", c.at(t, with(examples["crystal"], "sensor", 2e-12))["frequency"],
		c.at(t, with(examples["crystal"], "stray", 5e-12))["frequency"], 1e-15)
}

// Charging and discharging followed by the exponential itself: the time at
// which the capacitor reaches each threshold is found by halving.
func TestSwitchingAgainstExponential(t *testing.T) {
	// reach is the time from one voltage to another on the way to a third.
	reach := func(from, to, aim, tau float64) float64 {
		return bisect(1e-12, 1, func(s float64) float64 {
			return math.Abs(to-from) - math.Abs((aim-from)*-math.Expm1(-s/tau))
		})
	}
	g := examples["schmitt-rc"]
	tau := g["timing_r"] * (g["timing_c"] + g["stray"])
	high, low := reach(0.37, 0.58, 1, tau), reach(0.58, 0.37, 0, tau)
	got := evaluate(t, "schmitt-rc", g)
	near(t, "gate", got["frequency"], 1/(high+low), 1e-12)
	near(t, "gate's duty", got["duty"], high/(high+low), 1e-12)
	near(t, "gate's average", got["average"], 5*high/(high+low), 1e-12)
	g = examples["timer-astable"]
	farads := g["timing_c"] + g["stray"]
	high = reach(1.0/3, 2.0/3, 1, (g["charge_r"]+g["discharge_r"])*farads)
	low = reach(2.0/3, 1.0/3, 0, g["discharge_r"]*farads)
	got = evaluate(t, "timer-astable", g)
	near(t, "timer", got["frequency"], 1/(high+low), 1e-12)
	near(t, "timer's duty", got["duty"], high/(high+low), 1e-12)
}

// A gate with the timer's thresholds is a timer that charges through the same
// resistor as it discharges.
func TestTimerLimits(t *testing.T) {
	gate := evaluate(t, "schmitt-rc", map[string]float64{"timing_r": 4.7e3, "timing_c": 22e-9, "supply": 5,
		"upper_threshold": 2.0 / 3, "lower_threshold": 1.0 / 3})
	got := evaluate(t, "timer-astable", timer(1e-9, 4.7e3, 22e-9))
	near(t, "frequency", got["frequency"], gate["frequency"], 1e-12)
	near(t, "duty", got["duty"], gate["duty"], 1e-12)
}

// Thresholds out of order, or outside the rails: at rest, and no NaN.
func TestSchmittAtRest(t *testing.T) {
	c := newCircuit(t, "schmitt-rc", 1)
	near(t, "at work", c.at(t, examples["schmitt-rc"])["at_rest"], 0, 0)
	for name, ends := range map[string][2]float64{"exchanged": {0.58, 0.37}, "equal": {0.5, 0.5}, "at ground": {0, 0.5},
		"below ground": {-0.1, 0.5}, "at the supply": {0.4, 1}, "above the supply": {0.4, 1.2}} {
		t.Run(name, func(t *testing.T) {
			got := c.at(t, with(examples["schmitt-rc"], "lower_threshold", ends[0], "upper_threshold", ends[1]))
			near(t, "at_rest", got["at_rest"], 1, 0)
			for _, output := range []string{"frequency", "duty", "average"} {
				near(t, output, got[output], 0, 0)
			}
		})
	}
}

// The level is the setting's; the Q that of the coil or the crystal, and with
// neither a mixer takes 1/2.
func TestOscillatorsHandOn(t *testing.T) {
	for kind, q := range map[string]float64{"clapp": 65, "hartley": 65, "crystal": 65,
		"wien-bridge": 0, "phase-shift": 0, "schmitt-rc": 0, "timer-astable": 0} {
		given := with(examples[kind], "level", 1.7)
		if q > 0 {
			given["q"] = q
		}
		got := evaluate(t, kind, given)
		near(t, kind+" level", got["level"], 1.7, 0)
		near(t, kind+" tank_q", got["tank_q"], q, 0)
	}
}
