package spread_test

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// The examples of JCGM 101:2008 (propagation of distributions by simulation)
// and JCGM 100:2008 (first-order propagation), run as formula stages through
// the whole engine: file, equations, draws, sums.

// gauss is an equation of the standard normal distribution from two uniform
// settings (Box and Muller 1958), since a part's normal shape is truncated.
func gauss(u, v string) string { return fmt.Sprintf("sqrt(-2*ln(%s))*cos(2*pi*%s)", u, v) }

// head is a build of one formula stage; unit settings follow.
func head(settings []string, expression string) string {
	return "build: guide\nunits: 10\nconditions: {bench: {}}\nstages:\n  y:\n    kind: formula\n    settings:\n      " +
		strings.Join(settings, "\n      ") + "\n    outputs: {value: {expression: \"" + expression + "\"}}\n"
}

// open is a setting uniform over (0, 1).
func open(name string) string {
	return name + ": {value: 0.5, tolerance: 100 %, shape: uniform}"
}

// TestFourNormal is 9.2.2, table 2: the sum of four N(0,1) has u = 2 and the
// 95 % interval ±3.92.
func TestFourNormal(t *testing.T) {
	var settings, terms []string
	for i := range 4 {
		u, v := fmt.Sprintf("u%d", i), fmt.Sprintf("v%d", i)
		settings = append(settings, open(u), open(v))
		terms = append(terms, gauss(u, v))
	}
	const n = 200_000
	y := find(t, analyse(t, head(settings, strings.Join(terms, " + ")), n), "y.value", "bench", "")
	// Four standard errors: of the mean 2/√n, of u 2/√(2n), of a quantile
	// √(0.025·0.975/n)/f(3.92) with f the density of N(0, 2) there, 0.0292.
	near(t, "mean", y.Simulated.Mean, 0, 4*2/math.Sqrt(n))
	near(t, "u", y.Simulated.StandardDeviation, 2, 4*2/math.Sqrt(2*n))
	near(t, "low", y.Simulated.Quantiles["0.025"], -3.91992797, 4*math.Sqrt(0.025*0.975/n)/0.0292)
	near(t, "high", y.Simulated.Quantiles["0.975"], 3.91992797, 4*math.Sqrt(0.025*0.975/n)/0.0292)
}

// rectangular is a setting about 0 with a standard uncertainty.
func rectangular(name string, u float64) string {
	// 0 ± a: the tolerance is absolute where it has no % (JCGM 101, 6.4.2: a = u·√3).
	return fmt.Sprintf("%s: {value: 0, tolerance: %.17g, shape: uniform}", name, u*math.Sqrt(3))
}

// TestFourRectangular is 9.2.3, table 3: u = 2 and ±3.88, exactly
// 2√3·(2 − (3/5)^¼), against ±3.92 of the first-order method.
func TestFourRectangular(t *testing.T) {
	settings := []string{rectangular("a", 1), rectangular("b", 1), rectangular("c", 1), rectangular("d", 1)}
	const n = 200_000
	y := find(t, analyse(t, head(settings, "a + b + c + d"), n), "y.value", "bench", "")
	near(t, "first-order u", y.RootSumSquare.StandardUncertainty, 2, 1e-12)
	near(t, "u", y.Simulated.StandardDeviation, 2, 4*2/math.Sqrt(2*n))
	exact := 2 * math.Sqrt(3) * (2 - math.Pow(3.0/5, 0.25))
	near(t, "closed form", 3.879406741, exact, 1e-9)
	near(t, "high", y.Simulated.Quantiles["0.975"], exact, 0.02)
	near(t, "low", y.Simulated.Quantiles["0.025"], -exact, 0.02)
	// Every corner: 4·√3.
	near(t, "worst high", y.WorstCase.High, 4*math.Sqrt(3), 1e-12)
	near(t, "worst low", y.WorstCase.Low, -4*math.Sqrt(3), 1e-12)
	near(t, "guaranteed high", y.WorstCase.Guaranteed.High, 4*math.Sqrt(3), 1e-12)
}

// TestDominantRectangular is 9.2.4, table 4: with one input ten times as wide
// the interval is ±17.0 where the first-order method says ±19.9. The exact
// 17.0158141 is by convolution; the printed figures are from memory.
func TestDominantRectangular(t *testing.T) {
	settings := []string{rectangular("a", 1), rectangular("b", 1), rectangular("c", 1), rectangular("d", 10)}
	const n = 200_000
	y := find(t, analyse(t, head(settings, "a + b + c + d"), n), "y.value", "bench", "")
	near(t, "first-order u", y.RootSumSquare.StandardUncertainty, 10.14889157, 1e-8)
	near(t, "u", y.Simulated.StandardDeviation, 10.14889157, 0.06)
	near(t, "high", y.Simulated.Quantiles["0.975"], 17.0158141, 0.06)
	near(t, "low", y.Simulated.Quantiles["0.025"], -17.0158141, 0.06)
}

// TestMassCalibration is 9.3: the air buoyancy term has no first-order part at
// the best estimates, so the first-order method gives 0.0539 mg where the
// truth is 0.0755 mg. Exact values by 60³-point quadrature; table 6 of the
// guide (from memory) prints 0.0754 and [1.0834, 1.3825] from its own
// simulation.
func TestMassCalibration(t *testing.T) {
	half := func(name string, value, half float64) string {
		return fmt.Sprintf("%s: {value: %g, tolerance: %.17g %%, shape: uniform}", name, value, 100*half/value)
	}
	density := []string{half("air", 1.2, 0.1), half("weight", 8000, 1000), half("reference", 8000, 50)}
	const model = "(100000 + rc + 1.234 + drc)*(1 + (air - 1.2)*(1/weight - 1/reference)) - 100000"

	const n = 400_000
	drawn := append([]string{open("u1"), open("v1"), open("u2"), open("v2")}, density...)
	text := strings.NewReplacer("drc", "0.020*"+gauss("u2", "v2"), "rc", "0.050*"+gauss("u1", "v1")).Replace(model)
	y := find(t, analyse(t, head(drawn, text), n), "y.value", "bench", "")
	near(t, "mean", y.Simulated.Mean, 1.234, 0.0005)
	near(t, "u", y.Simulated.StandardDeviation, 0.07547974, 0.0004)
	near(t, "low", y.Simulated.Quantiles["0.025"], 1.0844333, 0.002)
	near(t, "high", y.Simulated.Quantiles["0.975"], 1.38356673, 0.002)

	// First order needs the standard deviations only.
	first := append([]string{rectangular("rc", 0.050), rectangular("drc", 0.020)}, density...)
	y = find(t, analyse(t, head(first, model), 1000), "y.value", "bench", "")
	near(t, "first-order u", y.RootSumSquare.StandardUncertainty, 0.05385165, 1e-8)
}

// TestTenResistors is JCGM 100:2008, 5.2.2: ten resistors of 1000 Ω calibrated
// against one standard, u = 0.1 Ω each, in series. Fully correlated u = 1 Ω;
// uncorrelated it would be 0.32 Ω (from memory; both are exact sums).
func TestTenResistors(t *testing.T) {
	text := func(lots string) string {
		parts := []string{"r0: {ref: R1, value: 1000 Ω, tolerance: " + fmt.Sprintf("%.17g", 0.1*math.Sqrt(3)) +
			" Ω, shape: uniform, correlation: {value: 1}" + lots + "}"}
		sum := "r0"
		for i := 1; i < 10; i++ {
			parts = append(parts, fmt.Sprintf("r%d: {ref: R%d, same_as: y.r0}", i, i+1))
			sum += fmt.Sprintf(" + r%d", i)
		}
		return "build: guide\nunits: 10\nconditions: {bench: {}}\nstages:\n  y:\n    kind: formula\n    parts:\n      " +
			strings.Join(parts, "\n      ") + "\n    outputs: {value: {expression: " + sum + ", unit: Ω}}\n"
	}
	y := find(t, analyse(t, text(""), 20_000), "y.value", "bench", "")
	near(t, "correlated u", y.RootSumSquare.StandardUncertainty, 1, 1e-9)
	near(t, "correlated u, simulated", y.Simulated.StandardDeviation, 1, 0.06)
	near(t, "share of R1", y.Contributions[0].Share, 0.1, 1e-9)
	y = find(t, analyse(t, text(", lots: mixed"), 20_000), "y.value", "bench", "")
	near(t, "uncorrelated u", y.RootSumSquare.StandardUncertainty, 0.316227766, 1e-9)
	near(t, "uncorrelated u, simulated", y.Simulated.StandardDeviation, 0.316227766, 0.01)
}
