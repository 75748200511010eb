package spread_test

import (
	"math"
	"strings"
	"testing"
)

// one is a build whose output is the value of one part.
func one(part, conditions string) string {
	return "build: part\nunits: 10\nconditions:\n  " + conditions +
		"\nstages:\n  s:\n    kind: formula\n    settings: {rise: 4 K}\n    parts: {x: " + part +
		"}\n    outputs: {value: {expression: x, unit: UNIT}}\n"
}

// TestPartValue is the law of a part's value,
//
//	nominal·(1 + tol·z1)·(1 + α·Δ)·(1 + η·(H − 50 %))·(1 + a·g(h)),
//
// Δ = t + w·rise − 25 °C, with every z at its ends, worked out by hand.
func TestPartValue(t *testing.T) {
	const part = "{ref: R1, value: 1 kΩ, tolerance: 2 %, shape: uniform, temperature_coefficient: {value: 100 ppm/K, spread: 50 ppm/K}, " +
		"humidity_coefficient: {value: 30 ppm/% RH, spread: 10 ppm/% RH}, ageing: {value: 0.1 %, spread: 0.05 %, per: decade}}"
	r := analyse(t, strings.Replace(one(part, "hot: {temperature: 45 °C, warmup: 0.5, humidity: 80 %, age: 1000 h}"), "UNIT", "Ω", 1), 1000)
	y := find(t, r, "s.value", "hot", "")
	delta, wet, decades := 45+0.5*4-25.0, 30.0, 3.0
	value := func(z float64) float64 {
		return 1000 * (1 + 0.02*z) * (1 + (100+50*z)*1e-6*delta) * (1 + (30+10*z)*1e-6*wet) * (1 + (0.1+0.05*z)*0.01*decades)
	}
	near(t, "nominal", y.Nominal, value(0), 1e-9)
	near(t, "low", y.WorstCase.Low, value(-1), 1e-9)
	near(t, "high", y.WorstCase.High, value(1), 1e-9)
	if len(y.Contributions) != 4 {
		t.Errorf("%d contributions, want value, temperature, humidity and ageing", len(y.Contributions))
	}
	// Sensitivities are in SI: per Ω, per 1/K.
	for _, c := range y.Contributions {
		switch c.Parameter {
		case "value":
			near(t, "by value", c.Sensitivity, value(0)/1000, 1e-9)
		case "temperature":
			near(t, "by temperature coefficient", c.Sensitivity, value(0)/(1+100e-6*delta)*delta, 1e-6)
		}
	}
}

// TestAgeingClocks ages nothing before one hour, per decade after it, and
// evenly per 1000 h.
func TestAgeingClocks(t *testing.T) {
	for _, c := range []struct {
		per, age string
		want     float64
	}{
		{"decade", "0.5 h", 1}, {"decade", "1 h", 1}, {"decade", "1.5 h", 1 + 0.01*math.Log10(1.5)}, {"decade", "100 h", 1.02}, {"1000 h", "100 h", 1.001}, {"1000 h", "5000 h", 1.05},
	} {
		text := one("{ref: C1, value: 1 nF, ageing: {value: 1 %, per: "+c.per+"}}", "a: {temperature: 21 °C, age: "+c.age+"}")
		y := find(t, analyse(t, strings.Replace(text, "UNIT", "F", 1), 100), "s.value", "a", "")
		near(t, c.per+" at "+c.age, y.Nominal, 1e-9*c.want, 1e-21)
	}
}

// TestClassTwo has an X7R within ±15 % at −55 °C and at 125 °C, 0 at 25 °C,
// straight lines in between (EIA-198 gives the ends), and a Y5V whose limits
// are not alike.
func TestClassTwo(t *testing.T) {
	for _, c := range []struct {
		family    string
		celsius   string
		low, high float64
	}{
		{"x7r", "121 °C", -0.15, 0.15}, // 4 K of rise
		{"x7r", "-59 °C", -0.15, 0.15}, {"x7r", "71 °C", -0.075, 0.075}, {"x7r", "21 °C", 0, 0},
		{"y5v", "81 °C", -0.82, 0.22}, {"y5v", "51 °C", -0.41, 0.11},
	} {
		text := one("{ref: C1, value: 100 nF, family: "+c.family+", tolerance: 20 %}", "a: {temperature: "+c.celsius+"}")
		y := find(t, analyse(t, strings.Replace(text, "UNIT", "F", 1), 2000), "s.value", "a", "")
		near(t, c.family+" at "+c.celsius+", low", y.WorstCase.Low, 80e-9*(1+c.low), 1e-18)
		near(t, c.family+" at "+c.celsius+", high", y.WorstCase.High, 120e-9*(1+c.high), 1e-18)
	}
}

// TestTrimmerEnds has both ends of a trimmer with a tolerance of their own and
// the place a share of the way between them.
func TestTrimmerEnds(t *testing.T) {
	text := one("{ref: CT1, part: trimmer-capacitor, value: 5..25 pF, tolerance: 10 %, position: 0.25}", "a: {temperature: 21 °C}")
	y := find(t, analyse(t, strings.Replace(text, "UNIT", "F", 1), 2000), "s.value", "a", "")
	near(t, "nominal", y.Nominal, 10e-12, 1e-24)
	near(t, "low", y.WorstCase.Low, 0.9*10e-12, 1e-24)
	near(t, "high", y.WorstCase.High, 1.1*10e-12, 1e-24)
	near(t, "low end's share", y.Contributions[0].Share, math.Pow(0.25*25, 2)/(math.Pow(0.25*25, 2)+math.Pow(0.75*5, 2)), 1e-9)
}

// TestSeveralParameters has a diode of the user's own figures, one of them
// with an absolute tolerance.
func TestSeveralParameters(t *testing.T) {
	text := strings.Replace(one("{ref: D1, family: signal-diode, parameters: {drop: {value: 500 mV, tolerance: 20 mV, shape: uniform}}}", "a: {temperature: 21 °C}"),
		"expression: x, unit: UNIT", "expression: x.drop, unit: V", 1)
	y := find(t, analyse(t, text, 2000), "s.value", "a", "")
	near(t, "low", y.WorstCase.Low, 0.48, 1e-12)
	near(t, "high", y.WorstCase.High, 0.52, 1e-12)
	near(t, "u", y.RootSumSquare.StandardUncertainty, 0.02/math.Sqrt(3), 1e-12)
}

// TestLots measures, over batches, the correlation of two pieces of a line:
// that of a Gaussian copula for uniform shapes, 6/π·asin(ρ/2), and none where
// the lots are mixed or the grades differ.
func TestLots(t *testing.T) {
	text := func(second string) string {
		return strings.NewReplacer("{x: ", "{x: ", "expression: x, unit: UNIT", "expression: x - y, unit: Ω").Replace(
			one("{ref: R1, value: 1 kΩ, tolerance: 1 %, shape: uniform, correlation: {value: 0.6}}, y: "+second, "a: {temperature: 21 °C}"))
	}
	const own = 10 / 1.7320508075688772 // Ω, of each
	for _, c := range []struct {
		name, second string
		correlation  float64
	}{
		{"one lot", "{ref: R2, same_as: s.x}", 6 / math.Pi * math.Asin(0.3)},
		{"the same line without being told", "{ref: R2, value: 1 kΩ, tolerance: 1 %, shape: uniform, correlation: {value: 0.6}}", 6 / math.Pi * math.Asin(0.3)},
		{"mixed", "{ref: R2, value: 1 kΩ, tolerance: 1 %, shape: uniform, correlation: {value: 0.6}, lots: mixed}", 0},
	} {
		y := find(t, analyse(t, text(c.second), 40_000), "s.value", "a", "")
		want := own * math.Sqrt(2*(1-c.correlation))
		near(t, c.name+", first order", y.RootSumSquare.StandardUncertainty, want, 1e-9*want)
		near(t, c.name+", simulated", y.Simulated.StandardDeviation, want, 0.02*want)
	}
}
