package scatter

import (
	"math"
	"sync"

	"gonum.org/v1/gonum/integrate/quad"

	"batchwright/bom/part"
)

// Correlation returns the product-moment correlation of two deviations of
// shape s that a Gaussian copula of correlation rho joins, rho in [-1, 1].
// It is a little smaller in size than rho, odd in it, and equal to it at 0 and
// ±1:
//
//	uniform     (6/π)·asin(ρ/2)
//	bimodal     (6/7π)·(asin ρ + 2·asin(ρ/√2) + asin(ρ/2))
//	triangular  Σ w_k·ρ^k over odd k, see weights; within 1e-7, and within
//	normal      1e-10 for |ρ| <= 0.9
//
// The first is K. Pearson's of 1907 (W. H. Kruskal, "Ordinal measures of
// association", JASA 53 (1958), 814-861, gives it as Spearman's coefficient
// of a bivariate normal). The second follows from writing the bimodal z as
// (sign g + u)/2 with u uniform: for normals X, Y of correlation r,
// E[sign X·sign Y] = (2/π)·asin r (Sheppard), and E[sign X·u(Y)] is the same
// with r/√2, since u(Y) = 2Φ(Y)-1 is E[sign(Y-Z)] over a normal Z.
//
// Correlation panics if rho is not in [-1, 1].
func Correlation(s part.Shape, rho float64) float64 {
	if !(rho >= -1 && rho <= 1) {
		panic("scatter: correlation outside [-1, 1]")
	}
	switch s {
	case part.Normal, "":
		return sum(normalWeights(), rho)
	case part.Uniform:
		return 6 / math.Pi * math.Asin(rho/2)
	case part.Triangular:
		return sum(triangularWeights(), rho)
	case part.Bimodal:
		return 6 / (7 * math.Pi) * (math.Asin(rho) + 2*math.Asin(rho/math.Sqrt2) + math.Asin(rho/2))
	}
	panic("scatter: no such shape: " + string(s))
}

// sum returns Σ w[j]·ρ^(2j+1).
func sum(w []float64, rho float64) float64 {
	var total float64
	for j := len(w) - 1; j >= 0; j-- {
		total = total*rho*rho + w[j]
	}
	return total * rho
}

var (
	normalWeights     = sync.OnceValue(func() []float64 { return weights(part.Normal) })
	triangularWeights = sync.OnceValue(func() []float64 { return weights(part.Triangular) })
)

const (
	weightOrders = 100 // odd orders 1, 3, … 199
	weightReach  = 9   // φ(9) is 1e-18
	weightPanels = 30
	weightPoints = 40 // per panel
)

// weights returns the shares w_k of the variance of z = G(g), G = F⁻¹∘Φ, in
// the odd orders k = 1, 3, … of its expansion in Hermite polynomials
// orthonormal under the normal density φ:
//
//	a_k = ∫ G·h_k·φ        w_k = a_k²/Var z
//	h_0 = 1, h_1 = g, h_{k+1} = (g·h_k - √k·h_{k-1})/√(k+1)
//
// By Mehler's formula E[G(X)·G(Y)] = Σ a_k²·ρ^k (H. O. Lancaster, "Some
// properties of the bivariate normal distribution considered in the form of a
// contingency table", Biometrika 44 (1957), 289-292). Even orders vanish as G
// is odd. The w_k are not negative and sum to 1, so what the orders left out
// can do is at most their weight times |ρ|^201; it is given to the last order
// kept, which makes ρ = 1 exact.
func weights(s part.Shape) []float64 {
	a := make([]float64, weightOrders)
	x, w := make([]float64, weightPoints), make([]float64, weightPoints)
	for p := range weightPanels {
		low := float64(p) * weightReach / weightPanels
		quad.Legendre{}.FixedLocations(x, w, low, low+float64(weightReach)/weightPanels)
		for i, g := range x {
			// G is odd and so is h_k: twice the integral over g > 0.
			addOrders(a, g, 2*w[i]*density(g)*-lowerQuantile(s)(normalTail(g)))
		}
	}
	rest := 1.0
	for j := range a {
		a[j] *= a[j] / Variance(s)
		rest -= a[j]
	}
	a[len(a)-1] += rest
	return a
}

// addOrders adds y·h_k(g), k = 1, 3, …, to a.
func addOrders(a []float64, g, y float64) {
	before, h := 1.0, g // h_{k-1}, h_k
	for j := range a {
		a[j] += y * h
		for k := 2*j + 1; k < 2*j+3; k++ {
			before, h = h, (g*h-math.Sqrt(float64(k))*before)/math.Sqrt(float64(k+1))
		}
	}
}

// density is φ(g).
func density(g float64) float64 { return math.Exp(-g*g/2) / math.Sqrt(2*math.Pi) }
