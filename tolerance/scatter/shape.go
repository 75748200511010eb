// Package scatter turns the scatter of a parameter, which package part states
// as data, into numbers: the distribution of each shape, the correlation that
// a shared lot gives, and columns of simulated units.
//
// Everything is about the standardised deviation z in [-1, 1]; a value is
// centre + half width·z. Every shape is symmetric about 0, which the code
// uses throughout: a draw is a side and the probability v in (0, 1/2] beyond
// it on that side, so neither tail is ever found as 1 minus something.
package scatter

import (
	"math"

	"batchwright/bom/part"
)

const (
	// normalReach is how many standard deviations of the normal shape the
	// limits ±1 are away: its standard deviation is 1/3.
	normalReach = 3
	// normalOutside is Φ(-3), the probability cut off on each side, and
	// normalInside is 1 - 2·Φ(-3). Summed to 60 digits from the series for Φ,
	// Abramowitz and Stegun 26.2.11; any table has the 0.99730.
	normalOutside = 0.0013498980316300945266518147675949773778294
	normalInside  = 0.9973002039367398109466963704648100452443412
	// normalHeight is φ(3) = exp(-9/2)/√(2π).
	normalHeight = 0.0044318484119380071756023526961210112431687
)

// Quantile returns F⁻¹(p), the z that is not exceeded with probability p:
//
//	uniform     2p - 1
//	triangular  √(2p) - 1                          p <= 1/2
//	bimodal     p - 1                              p <= 1/2
//	normal      Φ⁻¹(Φ(-3) + p·(1 - 2Φ(-3)))/3
//
// and -F⁻¹(1-p) above 1/2. At p = 1/2 the bimodal shape returns the lower end
// of its empty middle, -1/2, the usual generalised inverse. Quantile panics
// if p is not in [0, 1]; 0 and 1 give -1 and 1.
func Quantile(s part.Shape, p float64) float64 {
	if !(p >= 0 && p <= 1) {
		panic("scatter: probability outside [0, 1]")
	}
	below := lowerQuantile(s)
	switch {
	case p == 0 || p == 1: // the table of the normal shape rounds here
		return 2*p - 1
	case p <= 0.5:
		return below(p)
	}
	return -below(1 - p) // 1-p is exact for p in [1/2, 1]
}

// lowerQuantile returns the function that maps v in [0, 1/2] to F⁻¹(v) in
// [-1, 0]. It panics on a shape that does not exist.
func lowerQuantile(s part.Shape) func(v float64) float64 {
	switch s {
	case part.Normal, "":
		return lowerNormal
	case part.Uniform:
		return lowerUniform
	case part.Triangular:
		return lowerTriangular
	case part.Bimodal:
		return lowerBimodal
	}
	panic("scatter: no such shape: " + string(s))
}

func lowerUniform(v float64) float64    { return float64(2*v) - 1 }
func lowerTriangular(v float64) float64 { return math.Sqrt(2*v) - 1 }
func lowerBimodal(v float64) float64    { return v - 1 }

func lowerNormal(v float64) float64 {
	z := normalTailQuantile(normalOutside+float64(normalInside*v)) * (1.0 / normalReach)
	if z < -1 { // rounding only
		return -1
	}
	return z
}

// CDF returns F(z), the probability that a deviation of shape s is at most z;
// 0 below -1, 1 above 1, NaN for NaN.
//
//	uniform     (1+z)/2
//	triangular  (1+z)²/2                           z <= 0
//	bimodal     1+z up to -1/2, then 1/2           z <= 0
//	normal      (Φ(3z) - Φ(-3))/(1 - 2Φ(-3))       z <= 0
//
// and 1 - F(-z) above 0.
func CDF(s part.Shape, z float64) float64 {
	lower := lowerCDF(s)
	switch {
	case math.IsNaN(z):
		return math.NaN()
	case z <= -1:
		return 0
	case z >= 1:
		return 1
	case z <= 0:
		return lower(z)
	}
	return 1 - lower(-z)
}

// lowerCDF returns F on [-1, 0].
func lowerCDF(s part.Shape) func(z float64) float64 {
	switch s {
	case part.Normal, "":
		return func(z float64) float64 {
			return (math.Erfc(-z*normalReach/math.Sqrt2)/2 - normalOutside) / normalInside
		}
	case part.Uniform:
		return func(z float64) float64 { return (1 + z) / 2 }
	case part.Triangular:
		return func(z float64) float64 { return (1 + z) * (1 + z) / 2 }
	case part.Bimodal:
		return func(z float64) float64 { return math.Min(1+z, 0.5) }
	}
	panic("scatter: no such shape: " + string(s))
}

// Variance returns the variance of z:
//
//	uniform     1/3                                 JCGM 100:2008, 4.3.7
//	triangular  1/6                                 JCGM 100:2008, 4.3.9
//	bimodal     2·∫ z² dz over [1/2, 1] = 7/12
//	normal      (1 - 6φ(3)/(1 - 2Φ(-3)))/9          integration by parts
func Variance(s part.Shape) float64 {
	switch s {
	case part.Normal, "":
		return (1 - 2*normalReach*normalHeight/normalInside) / (normalReach * normalReach)
	case part.Uniform:
		return 1.0 / 3
	case part.Triangular:
		return 1.0 / 6
	case part.Bimodal:
		return 7.0 / 12
	}
	panic("scatter: no such shape: " + string(s))
}
