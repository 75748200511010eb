package compare

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"batchwright/tolerance/spread"
)

// Difference is that of a share of units from the base's, and its confidence
// interval. Shown says that the interval leaves out zero: less than that is no
// difference that the simulated units can show.
type Difference struct {
	Share    spread.Figure    `json:"share"`
	Interval [2]spread.Figure `json:"interval"`
	Shown    bool             `json:"shown"`
}

// Paired is the mean difference of two counts of units, batch by batch, with
// Student's interval for paired samples:
//
//	d ± t·s/√B,  d_b = (counts[b] − base[b])/units
//
// B batches, s the standard deviation of the d_b (divisor B − 1), t Student's
// quantile for B − 1 degrees of freedom at spread.Confidence. Batches of the
// same draws resemble each other, which is why their differences scatter less
// than either count. A single batch has no interval.
func Paired(counts, base []int, units int) Difference {
	n := float64(len(counts))
	var sum, squares float64
	for b := range counts {
		sum += float64(counts[b]-base[b]) / float64(units)
	}
	mean := sum / n
	for b := range counts {
		d := float64(counts[b]-base[b])/float64(units) - mean
		squares += d * d
	}
	if !(n > 1) {
		nan := spread.Figure(math.NaN())
		return Difference{Share: spread.Figure(mean), Interval: [2]spread.Figure{nan, nan}}
	}
	t := distuv.StudentsT{Sigma: 1, Nu: n - 1}.Quantile(1 - (1-spread.Confidence)/2)
	half := t * math.Sqrt(squares/(n-1)/n)
	low, high := mean-half, mean+half
	return Difference{
		Share: spread.Figure(mean), Interval: [2]spread.Figure{spread.Figure(low), spread.Figure(high)},
		Shown: low > 0 || high < 0,
	}
}
