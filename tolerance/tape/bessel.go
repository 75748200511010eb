package tape

import "math"

// The modified Bessel functions I₀ and I₁, times e^−|x| so that they do not
// overflow. Below besselJoin the power series (Abramowitz & Stegun 9.6.10)
//
//	I_ν(x) = (x/2)^ν · Σ q^k/(k!·(k+ν)!),  q = x²/4
//
// has positive terms only, so that its relative error stays at a few roundings;
// from there on the asymptotic series (9.7.1)
//
//	√(2πx)·e^−x·I_ν(x) ~ Σ a_k/x^k,  a_k = Π_{j≤k} ((2j−1)² − 4ν²)/(8j)
//
// is exact to e^−2x. Both are cut where terms fall below besselCut of the sum.
// The relative error is below 1e-14 everywhere.
const (
	besselJoin  = 25
	besselCut   = 1e-18
	besselTerms = 64
)

// The largest value of e^−x·I₁(x), and where; the zero of the derivative
// I₀ − I₁·(1 + 1/x), solved with scipy 1.10 (optimize.brentq over
// special.i0e and i1e).
const (
	besselCrest      = 1.5451272579925421
	besselCrestValue = 0.219091974950531
)

// besselSeries holds the coefficients of one order ν and how many of them
// matter at each size of the argument.
type besselSeries struct {
	power      [besselTerms]float64     // 1/(k!·(k+ν)!)
	powerCount [besselJoin]int          // for x < i+1
	tail       [besselTerms]float64     // a_k
	tailCount  [len(besselTailFrom)]int // for x ≥ besselTailFrom[i]
}

var besselTailFrom = [...]float64{besselJoin, 40, 100, 400}

// Never written after start.
var bessel0, bessel1 = newBesselSeries(0), newBesselSeries(1)

func newBesselSeries(order float64) *besselSeries {
	s := &besselSeries{}
	p, t := 1.0, 1.0
	for k := range besselTerms {
		if k > 0 {
			j := float64(k)
			p /= j * (j + order)
			t *= ((2*j-1)*(2*j-1) - 4*order*order) / (8 * j)
		}
		s.power[k], s.tail[k] = p, t
	}
	for i := range s.powerCount {
		q := float64(i+1) * float64(i+1) / 4
		s.powerCount[i] = termsAbove(s.power[:], q)
	}
	for i, x := range besselTailFrom {
		s.tailCount[i] = termsAbove(s.tail[:], 1/x)
	}
	return s
}

// termsAbove counts the leading terms c[k]·x^k until they are negligible.
func termsAbove(c []float64, x float64) int {
	sum, power := 0.0, 1.0
	for k, v := range c {
		term := v * power
		sum += term
		if math.Abs(term) < besselCut*math.Abs(sum) {
			return k
		}
		power *= x
	}
	return len(c)
}

// polynomial is Σ c[k]·x^k. Even and odd terms are summed apart, two chains of
// arithmetic that the processor overlaps.
func polynomial(c []float64, x float64) float64 {
	s := x * x
	n := len(c) &^ 1
	even, odd := 0.0, 0.0
	if n < len(c) {
		even = c[n]
	}
	for k := n - 2; k >= 0; k -= 2 {
		even = float64(even*s) + c[k]
		odd = float64(odd*s) + c[k+1]
	}
	return even + float64(odd*x)
}

// small is (x/2)^−ν·e^−x·I_ν(x) for 0 ≤ x < besselJoin.
func (s *besselSeries) small(x float64) float64 {
	return polynomial(s.power[:s.powerCount[int(x)]], 0.25*x*x) * math.Exp(-x)
}

// large is e^−x·I_ν(x) for x ≥ besselJoin.
func (s *besselSeries) large(x float64) float64 {
	i := 0
	for i+1 < len(besselTailFrom) && x >= besselTailFrom[i+1] {
		i++
	}
	return polynomial(s.tail[:s.tailCount[i]], 1/x) / math.Sqrt(2*math.Pi*x)
}

// besselI0Scaled is e^−|x|·I₀(x).
func besselI0Scaled(x float64) float64 {
	x = math.Abs(x)
	if x < besselJoin {
		return bessel0.small(x)
	}
	return bessel0.large(x) // NaN too
}

// besselI1Scaled is e^−|x|·I₁(x).
func besselI1Scaled(x float64) float64 {
	size := math.Abs(x)
	if size < besselJoin {
		return 0.5 * x * bessel1.small(size)
	}
	return math.Copysign(bessel1.large(size), x)
}

func besselI0Value(dst, a, _, _ []float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = besselI0Scaled(a[i])
	}
}

func besselI1Value(dst, a, _, _ []float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = besselI1Scaled(a[i])
	}
}
