package scatter

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/stat/distuv"

	"batchwright/bom/part"
)

var shapes = []part.Shape{part.Normal, part.Uniform, part.Triangular, part.Bimodal}

// near fails t unless got is within tol of want, absolutely.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.17g, want %.17g (within %g)", what, got, want, tol)
	}
}

// panics fails t unless f panics.
func panics(t *testing.T, what string, f func()) {
	t.Helper()
	defer func() {
		if recover() == nil {
			t.Errorf("%s: no panic", what)
		}
	}()
	f()
}

func TestVarianceIsTheStandardsDivisor(t *testing.T) {
	// JCGM 100:2008, 4.3.7 (a/√3) and 4.3.9 (a/√6).
	near(t, "uniform divisor", 1/math.Sqrt(Variance(part.Uniform)), 1.7320508075688772, 1e-12)
	near(t, "triangular divisor", 1/math.Sqrt(Variance(part.Triangular)), 2.449489742783178, 1e-12)
	// scipy 1.10.1: truncnorm.var(-3, 3)/9.
	near(t, "normal variance", Variance(part.Normal), 0.10814854718472683, 1e-13)
	near(t, "zero value of shape", Variance(""), Variance(part.Normal), 0)
}

func TestNormalAgainstScipy(t *testing.T) {
	// scipy 1.10.1: truncnorm.ppf(p, -3, 3)/3; it is good to about 1e-12.
	for p, want := range map[float64]float64{
		1e-6: -0.9999250152053237, 0.001: -0.9424296119570384, 0.025: -0.6461596780990181,
		0.25: -0.22412243168768617, 0.4: -0.08421611867215771,
	} {
		near(t, "Quantile", Quantile(part.Normal, p), want, 1e-12)
	}
	// scipy 1.10.1: truncnorm.cdf(3z, -3, 3).
	for z, want := range map[float64]float64{
		-0.9: 0.0021228069171686055, -1.0 / 3: 0.1577311979671519, -0.01: 0.4880011320895389,
	} {
		near(t, "CDF", CDF(part.Normal, z), want, 1e-14)
	}
}

// TestAgainstGonum compares with the same distributions of another author.
func TestAgainstGonum(t *testing.T) {
	triangle := distuv.NewTriangle(-1, 1, 0, nil)
	uniform := distuv.Uniform{Min: -1, Max: 1}
	for _, p := range grid(999) {
		near(t, "triangular", Quantile(part.Triangular, p), triangle.Quantile(p), 1e-14)
		near(t, "uniform", Quantile(part.Uniform, p), uniform.Quantile(p), 1e-15)
	}
}

// TestCoherence holds each shape against itself.
func TestCoherence(t *testing.T) {
	for _, s := range shapes {
		t.Run(string(s), func(t *testing.T) {
			near(t, "least", Quantile(s, 0), -1, 0)
			near(t, "largest", Quantile(s, 1), 1, 0)
			last := -1.0
			for _, p := range grid(1023) { // 1/1024 …: 1-p is exact
				z := Quantile(s, p)
				near(t, "CDF(Quantile(p))", CDF(s, z), p, 2e-15)
				if p != 0.5 { // the bimodal quantile jumps there
					near(t, "Quantile(1-p)", Quantile(s, 1-p), -z, 0)
				}
				near(t, "CDF(-z) + CDF(z)", CDF(s, -z)+CDF(s, z), 1, 2e-16)
				if !(z > last) {
					t.Errorf("Quantile(%v) = %v is not above %v", p, z, last)
				}
				last = z
			}
			near(t, "mean", mean(s), 0, 1e-13)
			near(t, "variance", variance(s), Variance(s), 1e-13)
		})
	}
}

// grid returns n probabilities k/(n+1), k = 1..n.
func grid(n int) []float64 {
	p := make([]float64, n)
	for i := range p {
		p[i] = float64(i+1) / float64(n+1)
	}
	return p
}

// halves integrates f over [-1, 1] by pieces on which every shape is smooth.
func halves(f func(z float64) float64) (sum float64) {
	for low := -1.0; low < 1; low += 0.5 {
		sum += quad.Fixed(f, low, low+0.5, 40, quad.Legendre{}, 0)
	}
	return sum
}

// mean is ∫ z dF = 1 - ∫ F, by parts.
func mean(s part.Shape) float64 {
	return 1 - halves(func(z float64) float64 { return CDF(s, z) })
}

// variance is ∫ z² dF = 1 - ∫ 2z·F, by parts.
func variance(s part.Shape) float64 {
	return 1 - halves(func(z float64) float64 { return 2 * z * CDF(s, z) })
}

func TestBimodalHasNoMiddle(t *testing.T) {
	near(t, "just below the middle", Quantile(part.Bimodal, 0.4999), -0.5001, 1e-15)
	near(t, "at the middle", Quantile(part.Bimodal, 0.5), -0.5, 0)
	near(t, "just above the middle", Quantile(part.Bimodal, 0.5001), 0.5001, 1e-15)
	for _, z := range []float64{-0.5, -0.2, 0, 0.5} {
		near(t, "CDF in the middle", CDF(part.Bimodal, z), 0.5, 0)
	}
}

func TestOutside(t *testing.T) {
	for _, s := range shapes {
		near(t, "CDF(-2)", CDF(s, -2), 0, 0)
		near(t, "CDF(-1)", CDF(s, -1), 0, 0)
		near(t, "CDF(1)", CDF(s, 1), 1, 0)
		near(t, "CDF(+Inf)", CDF(s, math.Inf(1)), 1, 0)
		if got := CDF(s, math.NaN()); !math.IsNaN(got) {
			t.Errorf("CDF(NaN) = %v", got)
		}
		for _, p := range []float64{-1e-300, math.Nextafter(1, 2), math.NaN()} {
			panics(t, "Quantile outside [0, 1]", func() { Quantile(s, p) })
		}
	}
	const unheard = part.Shape("lopsided")
	panics(t, "Quantile", func() { Quantile(unheard, 0.3) })
	panics(t, "CDF", func() { CDF(unheard, 0.3) })
	panics(t, "Variance", func() { Variance(unheard) })
	panics(t, "Correlation", func() { Correlation(unheard, 0.3) })
}
