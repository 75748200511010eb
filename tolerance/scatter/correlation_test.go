package scatter

import (
	"math"
	"testing"

	"batchwright/bom/part"
)

// TestCorrelationReferences: numpy 1.24, double Gauss-Legendre integration of
// G(x)·G(ρx + √(1-ρ²)·w), panels split at the kinks; the same program gives
// the two closed forms to 3e-15.
func TestCorrelationReferences(t *testing.T) {
	for _, c := range []struct {
		shape     part.Shape
		rho, want float64
		tol       float64
	}{
		{part.Uniform, 0.3, 0.28756421862262127, 1e-14},
		{part.Uniform, 0.7, 0.6829105038240887, 1e-14},
		{part.Bimodal, 0.3, 0.2408532293039067, 1e-14},
		{part.Bimodal, 0.7, 0.5916689970149638, 1e-14},
		{part.Bimodal, 0.95, 0.8789011916850609, 1e-14},
		{part.Triangular, 0.3, 0.2979733099055436, 1e-11},
		{part.Triangular, 0.7, 0.697278314151471, 1e-11},
		{part.Triangular, 0.95, 0.9492462391190281, 1e-10},
		{part.Normal, 0.3, 0.29982996891031083, 1e-12},
		{part.Normal, 0.7, 0.6997523280485821, 1e-12},
		{part.Normal, 0.95, 0.9499279774855571, 1e-12},
		{"", 0.95, 0.9499279774855571, 1e-12},
	} {
		near(t, string(c.shape), Correlation(c.shape, c.rho), c.want, c.tol)
		near(t, string(c.shape)+" negative", Correlation(c.shape, -c.rho), -c.want, c.tol)
	}
}

func TestCorrelationEnds(t *testing.T) {
	for _, s := range shapes {
		near(t, "at 0", Correlation(s, 0), 0, 0)
		near(t, "at 1", Correlation(s, 1), 1, 1e-14)
		near(t, "at -1", Correlation(s, -1), -1, 1e-14)
		last := 0.0
		for rho := 0.01; rho < 1; rho += 0.01 {
			r := Correlation(s, rho)
			if !(r > last && r <= rho) {
				t.Errorf("%s: correlation at %v is %v, after %v", s, rho, r, last)
			}
			last = r
		}
		for _, rho := range []float64{1.0000001, -2, math.NaN()} {
			panics(t, "outside [-1, 1]", func() { Correlation(s, rho) })
		}
	}
}

// TestWeightsGiveTheClosedForms runs the expansion, which only normal and
// triangular need, on the shapes that have closed forms.
func TestWeightsGiveTheClosedForms(t *testing.T) {
	for _, s := range []part.Shape{part.Uniform, part.Bimodal} {
		w := weights(s)
		for _, rho := range []float64{0.1, 0.5, 0.8} {
			near(t, string(s), sum(w, rho), Correlation(s, rho), 1e-11)
		}
	}
	for _, s := range shapes {
		for j, share := range weights(s) {
			if !(share > -1e-15) {
				t.Errorf("%s: order %d has weight %v", s, 2*j+1, share)
			}
		}
	}
}
