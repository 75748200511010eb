package stage

import (
	"math"
	"testing"
)

// Printed worked examples. "Archive" is an open archive of textbook examples in
// which inputs and method were read; the figures are recomputed to ten digits.

func TestTankExamples(t *testing.T) {
	tests := map[string]struct {
		kind  string
		given map[string]float64
		want  float64
	}{
		// R. Blake, Electronic Communication Systems, Ex. 2.1, p. 50 (archive).
		"25 uH with 50 pF": {"tuned-tank", map[string]float64{"coil": 25e-6, "tank": 50e-12}, 4501581.581},
		// From the definition: C = 1/((2π·200 kHz)²·1 mH).
		"1 mH at 200 kHz": {"tuned-tank", map[string]float64{"coil": 1e-3, "tank": 6.332573978e-10}, 200e3},
		// D. Roddy, J. Coolen, Electronic Communications, Ex. 6.4.1, p. 205 (archive).
		"colpitts 400 uH": {"colpitts", map[string]float64{"coil": 400e-6, "upper": 100e-12, "lower": 300e-12}, 918881.4924},
		// T. L. Floyd, Electronic Devices, Ex. 16.3, high-Q value (archive).
		"colpitts 50 mH": {"colpitts", map[string]float64{"coil": 50e-3, "upper": 100e-9, "lower": 10e-9}, 7465.028533},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			near(t, "frequency", evaluate(t, tt.kind, tt.given)["frequency"], tt.want, 1e-9)
		})
	}
}

// R. Blake, Electronic Communication Systems, Ex. 2.7, p. 76 (archive): 11 MHz
// and 10 MHz; the product of two sines holds half their levels' product.
func TestMultiplierExample(t *testing.T) {
	got := evaluate(t, "multiplier", map[string]float64{"carrier.frequency": 11e6, "carrier.level": 3,
		"signal.frequency": 10e6, "signal.level": 2})
	near(t, "offset", got["offset"], 1e6, 1e-12)
	near(t, "tone_level", got["tone_level"], 3*2/20.0, 1e-15)
	near(t, "carrier_level", got["carrier_level"], 0, 0)
	near(t, "second_level", got["second_level"], 0, 0)
	back := evaluate(t, "multiplier", map[string]float64{"carrier.frequency": 10e6, "signal.frequency": 11e6})
	near(t, "offset the other way", back["offset"], -1e6, 1e-12)
	near(t, "beat the other way", back["beat"], 1e6, 1e-12)
}

// By Adler's formula: 330 kHz, Q 80, equal levels, 60 dB: 330e3/160·1e-3.
func TestLockRange(t *testing.T) {
	given := with(examples["multiplier"], "carrier.frequency", 330e3, "signal.level", 1)
	near(t, "equal levels", evaluate(t, "multiplier", given)["lock_range"], 2.0625, 1e-12)
	near(t, "half the level, 40 dB", evaluate(t, "multiplier", with(given, "signal.level", 0.5, "isolation", 40))["lock_range"], 10.3125, 1e-12)
	near(t, "no tank", evaluate(t, "multiplier", with(given, "carrier.tank_q", 0))["lock_range"], 330, 1e-12)
	near(t, "no carrier", evaluate(t, "multiplier", with(given, "carrier.level", 0))["lock_range"], 0, 0)
}

// kT/q with the exact SI constants (CODATA 2018).
func TestThermalVoltage(t *testing.T) {
	for kelvin, want := range map[float64]float64{290: 0.02499026646, 298.15: 0.02569257912, 300: 0.02585199979} {
		got := evaluate(t, "junction-mixer", with(examples["junction-mixer"], "temperature", kelvin))
		near(t, "thermal", got["thermal"], want, 1e-9)
	}
}

// e^-x·I0(x) and e^-x·I1(x): Abramowitz and Stegun, table 9.8, ten digits.
func TestJunctionHarmonicsFromTables(t *testing.T) {
	table := []struct{ x, i0, i1 float64 }{
		{0.5, 0.6450352704, 0.1564208032},
		{1, 0.4657596076, 0.2079104153},
		{2, 0.3085083226, 0.2152692892},
		{5, 0.1835408126, 0.1639722669},
		{10, 0.1278333372, 0.1212626814},
	}
	c := newCircuit(t, "junction-mixer", 1)
	given := with(examples["junction-mixer"], "emitter", 100, "base_upper", 560e3, "base_lower", 56e3, "load", 200)
	unit := c.at(t, given)
	for _, row := range table {
		// x is proportional to the level that comes in.
		first := c.at(t, scaled(given, row.x/unit["carrier_x"], "carrier.level"))
		near(t, "carrier_x", first["carrier_x"], row.x, 1e-12)
		near(t, "carrier_level", first["carrier_level"], 2*first["current"]*200*row.i1/row.i0, 1e-9)
		both := c.at(t, scaled(scaled(given, row.x/unit["carrier_x"], "carrier.level"), 1/unit["signal_x"], "signal.level"))
		near(t, "second_level", both["second_level"], 2*both["current"]*200*0.2079104153/0.4657596076, 1e-9)
		near(t, "tone_level", both["tone_level"],
			2*both["current"]*200*row.i1/row.i0*0.2079104153/0.4657596076, 1e-9)
		near(t, "swing", both["swing"], both["current"]*200*(1/(row.i0*0.4657596076)-1), 1e-8)
	}
}

// T. L. Floyd, Electronic Devices, Ex. 12.3 (archive): 100 kΩ and 4.7 kΩ; the
// bandwidth is that of 3 MHz by definition.
func TestOpampGainExample(t *testing.T) {
	given := map[string]float64{"feedback": 100e3, "ground": 4.7e3, "opamp.gbw": 3e6, "opamp.slew": 1e9,
		"opamp.headroom": 1, "opamp.offset": 0, "positive": 12, "negative": -12, "in.level": 0.01}
	near(t, "gain at 0 Hz", evaluate(t, "opamp-noninverting", given)["gain"], 22.27659574, 1e-9)
	got := evaluate(t, "opamp-noninverting", with(given, "in.frequency", 134670.4871))
	near(t, "gain at the bandwidth", got["gain"], 22.27659574/math.Sqrt2, 1e-9)
	near(t, "output level", got["output_level"], 0.2227659574/math.Sqrt2, 1e-9)
	offset := evaluate(t, "opamp-noninverting", with(given, "opamp.offset", 2e-3, "in.dc", 0.1))
	near(t, "dc", offset["dc"], 0.102*22.27659574, 1e-9)
}

// Full-power bandwidth: S. Sharma, Integrated Circuits, Ex. 2.18, 10 µA into
// 33 pF and 12 V; M. S. Sivakumar, Linear Integrated Circuit, Ex. 5.31,
// 0.51 V/µs and 10 V (archive).
func TestSlewLimitExamples(t *testing.T) {
	given := with(examples["opamp-noninverting"])
	first := evaluate(t, "opamp-noninverting", with(given, "opamp.slew", 303030.303, "in.frequency", 4019.064219))
	near(t, "12 V", first["slew_limit_level"], 12, 1e-9)
	second := evaluate(t, "opamp-noninverting", with(given, "opamp.slew", 510e3, "in.frequency", 8116.902098))
	near(t, "10 V", second["slew_limit_level"], 10, 1e-9)
}

// D. Chattopadhyay, P. C. Rakshit, Electronics Fundamentals and Applications,
// Ex. 12.9.6 (archive), with the exact √(1−m²): 200 kΩ, 150 pF, m = 0.5.
func TestDetectorClippingExample(t *testing.T) {
	got := evaluate(t, "envelope-detector", with(examples["envelope-detector"],
		"load", 200e3, "hold", 150e-12, "in.level", 2, "in.second_level", 1))
	near(t, "clip_frequency", got["clip_frequency"], 9188.814924, 1e-9)
	near(t, "corner", got["corner"], 1/(2*math.Pi*200e3*150e-12), 1e-12)
}

// Fundamental of √(A²+B²+2AB·cos θ) by its Fourier series, for B/A; the kind's
// second order leaves out −(B/A)⁵/64 and smaller.
func TestDetectorEnvelopeFundamental(t *testing.T) {
	for ratio, want := range map[float64]float64{0.01: 0.009999874998, 0.1: 0.09987484326, 0.3: 0.2965859192, 0.5: 0.4838437556} {
		got := evaluate(t, "envelope-detector", with(examples["envelope-detector"], "in.level", 3, "in.second_level", 3*ratio))
		if e := math.Abs(got["tone_level"]/3 - want); !(e <= math.Pow(ratio, 5)/50+1e-11) {
			t.Errorf("ratio %g: tone_level %g, want %g of 3 V", ratio, got["tone_level"], want)
		}
	}
}

// 10 kΩ and 10 nF by definition; 20·log10(√101) at ten times the corner.
func TestLowpassExample(t *testing.T) {
	given := map[string]float64{"series": 10e3, "shunt": 10e-9}
	got := evaluate(t, "rc-lowpass", given)
	near(t, "corner", got["corner"], 1591.549431, 1e-9)
	got = evaluate(t, "rc-lowpass", with(given, "in.tone_frequency", 15915.49431, "in.frequency", 1591.549431))
	near(t, "gain at ten corners in dB", 20*math.Log10(got["gain_at_tone"]), -20.04321374, 1e-9)
	near(t, "gain at the corner", got["gain_at_carrier"], 1/math.Sqrt2, 1e-9)
	// ±1 % and ±5 %: the corners of the tolerance box, by the definition.
	near(t, "low", evaluate(t, "rc-lowpass", map[string]float64{"series": 10.1e3, "shunt": 10.5e-9})["corner"], 1500.753825, 1e-9)
	near(t, "high", evaluate(t, "rc-lowpass", map[string]float64{"series": 9.9e3, "shunt": 9.5e-9})["corner"], 1692.237566, 1e-9)
}

// M. S. Sivakumar, Linear Integrated Circuit, Ex. 14.1 (archive): a reference
// of 2 V, 250 Ω and 2.5 kΩ, 0.1 mA: 22.25 V.
func TestAdjustableRegulatorExample(t *testing.T) {
	given := map[string]float64{"regulator.reference": 2, "regulator.adjust_current": 1e-4, "regulator.dropout": 2,
		"regulator.output_slope": 0, "upper": 250, "lower": 2500, "input": 30}
	near(t, "voltage", evaluate(t, "adjustable-regulator", given)["voltage"], 22.25, 1e-12)
	near(t, "headroom", evaluate(t, "adjustable-regulator", given)["headroom"], 30-22.25-2, 1e-12)
	split := evaluate(t, "adjustable-regulator", with(given, "lower", 2000, "trim", 500))
	near(t, "with a trimmer", split["voltage"], 22.25, 1e-12)
	minus := evaluate(t, "adjustable-regulator", with(given, "regulator.reference", -2, "input", -30))
	near(t, "negative", minus["voltage"], -22.25, 1e-12)
	near(t, "negative headroom", minus["headroom"], 30-22.25-2, 1e-12)
}

// Sensitivity 0.5 each: 5 V, 4.95 to 5.05 V with both 1 % apart; and a 750 Ω,
// 250 Ω divider at 2 %: 0.2425742574 to 0.2575757576 (closed forms).
func TestDividerExamples(t *testing.T) {
	tests := map[string]struct{ input, upper, lower, want float64 }{
		"nominal":      {10, 10e3, 10e3, 5},
		"least":        {10, 10.1e3, 9.9e3, 4.95},
		"most":         {10, 9.9e3, 10.1e3, 5.05},
		"quarter low":  {1, 765, 245, 0.2425742574},
		"quarter high": {1, 735, 255, 0.2575757576},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			got := evaluate(t, "divider", map[string]float64{"input": tt.input, "upper": tt.upper, "lower": tt.lower})
			near(t, "voltage", got["voltage"], tt.want, 1e-9)
			near(t, "current", got["current"], tt.input/(tt.upper+tt.lower), 1e-12)
		})
	}
}

// By definition: 100 Ω, 10 µF; 20 dB at √99 corners; 10 mA drop 1 V.
func TestRailDecoupling(t *testing.T) {
	corner := 1 / (2 * math.Pi * 100 * 10e-6)
	got := evaluate(t, "rail-decoupling", map[string]float64{"series": 100, "capacitor": 10e-6,
		"in.frequency": corner * math.Sqrt(99), "in.level": 0.5, "in.dc": 12})
	near(t, "corner", got["corner"], corner, 1e-12)
	near(t, "attenuation", got["attenuation"], 20, 1e-12)
	near(t, "level", got["level"], 0.05, 1e-12)
	near(t, "drop", got["drop"], 1, 1e-12)
	near(t, "dc", got["dc"], 11, 1e-12)
}

func TestFixedRegulator(t *testing.T) {
	given := map[string]float64{"regulator.output": 12, "regulator.dropout": 2, "regulator.output_slope": -1e-3,
		"input_c": 1e-7, "output_c": 1e-7, "input": 18, "load_current": 0.05}
	tests := map[string]struct {
		given                          map[string]float64
		voltage, headroom, dissipation float64
	}{
		"regulates":      {given, 12, 4, 0.3},
		"warm":           {with(given, "temperature", 318.15), 11.98, 4.02, 0.301},
		"drops out":      {with(given, "input", 13), 11, -1, 0.1},
		"input too low":  {with(given, "input", 1), 0, -13, 0.05},
		"negative":       {with(given, "regulator.output", -12, "input", -18), -12, 4, 0.3},
		"negative short": {with(given, "regulator.output", -12, "input", -13), -11, -1, 0.1},
		"wrong polarity": {with(given, "input", -18), 0, -32, -0.9},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			got := evaluate(t, "fixed-regulator", tt.given)
			near(t, "voltage", got["voltage"], tt.voltage, 1e-12)
			near(t, "headroom", got["headroom"], tt.headroom, 1e-12)
			near(t, "dissipation", got["dissipation"], tt.dissipation, 1e-9)
			near(t, "dc", got["dc"], tt.voltage, 1e-12)
		})
	}
}
