package spread

import "math"

// Moments keeps count, mean, variance and extremes of the values added. The
// zero value is empty.
//
// Floating-point sums depend on their order, so a simulation keeps one
// Moments for each fixed run of units and merges them in the order of the
// runs: the bits are then the same however many processors share the runs.
//
// A value that is not finite would make every figure NaN; such values are
// left out and counted in NonFinite, which the caller must look at.
type Moments struct {
	count          int
	nonFinite      int
	mean, squares  float64 // squares is Σ (x - mean)²
	least, largest float64
}

// AddColumn adds the values of x whose keep is true; a nil keep keeps all.
// It panics if keep is neither nil nor of x's length.
//
// The column is summed in two passes about its first value, with the
// correction for the rounding of the mean:
//
//	mean = x_0 + Σ(x - x_0)/n
//	Σ(x - mean)² - (Σ(x - mean))²/n
//
// (T. F. Chan, G. H. Golub, R. J. LeVeque, "Algorithms for computing the
// sample variance: analysis and recommendations", The American Statistician
// 37 (1983), 242-247), then merged.
func (m *Moments) AddColumn(x []float64, keep []bool) {
	if keep != nil && len(keep) != len(x) {
		panic("spread: keep is not as long as its column")
	}
	var run Moments
	var first, sum float64
	for i, v := range x {
		if keep != nil && !keep[i] {
			continue
		}
		if !finite(v) {
			run.nonFinite++
			continue
		}
		if run.count == 0 {
			first, run.least, run.largest = v, v, v
		}
		run.count++
		sum += v - first
		if v < run.least {
			run.least = v
		}
		if v > run.largest {
			run.largest = v
		}
	}
	if run.count > 0 {
		run.mean = first + sum/float64(run.count)
		run.squares = squaresAbout(run.mean, x, keep, run.count)
	}
	m.Merge(&run)
}

// squaresAbout returns the sum of squares about the true mean of the n finite
// kept values, given their mean to within rounding.
func squaresAbout(mean float64, x []float64, keep []bool, n int) float64 {
	var squares, slip float64
	for i, v := range x {
		if keep != nil && !keep[i] || !finite(v) {
			continue
		}
		d := v - mean
		squares += float64(d * d)
		slip += d
	}
	return squares - float64(slip*slip)/float64(n)
}

// finite reports whether v is neither NaN nor infinite.
func finite(v float64) bool { return v-v == 0 }

// Merge adds all that o has seen, by the pairwise formula of Chan, Golub and
// LeVeque:
//
//	mean = mean_a + δ·n_b/n            δ = mean_b - mean_a
//	squares = squares_a + squares_b + δ²·n_a·n_b/n
func (m *Moments) Merge(o *Moments) {
	m.nonFinite += o.nonFinite
	if o.count == 0 {
		return
	}
	if m.count == 0 {
		lost := m.nonFinite
		*m = *o
		m.nonFinite = lost
		return
	}
	a, b := float64(m.count), float64(o.count)
	delta := o.mean - m.mean
	m.mean += float64(delta * (b / (a + b)))
	m.squares += o.squares + float64(float64(delta*delta)*(a*(b/(a+b))))
	m.count += o.count
	m.least = min(m.least, o.least)
	m.largest = max(m.largest, o.largest)
}

// Count returns how many finite values were added.
func (m *Moments) Count() int { return m.count }

// NonFinite returns how many NaN and infinite values were left out.
func (m *Moments) NonFinite() int { return m.nonFinite }

// Mean returns the mean, NaN without values.
func (m *Moments) Mean() float64 { return given(m.count >= 1, m.mean) }

// Variance returns the variance with divisor n - 1, NaN for fewer than two
// values.
func (m *Moments) Variance() float64 {
	return given(m.count >= 2, m.squares/float64(m.count-1))
}

// StandardDeviation returns the square root of Variance.
func (m *Moments) StandardDeviation() float64 { return math.Sqrt(m.Variance()) }

// Min returns the least value, NaN without values.
func (m *Moments) Min() float64 { return given(m.count >= 1, m.least) }

// Max returns the largest value, NaN without values.
func (m *Moments) Max() float64 { return given(m.count >= 1, m.largest) }

// given returns v, or NaN where there is none.
func given(there bool, v float64) float64 {
	if !there {
		return math.NaN()
	}
	return v
}
