package spread

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"
)

// ClopperPearson returns the exact central confidence interval of a
// probability from good successes in units independent trials:
//
//	low  = the α/2 quantile of Beta(good, units-good+1), 0 for good = 0
//	high = the 1-α/2 quantile of Beta(good+1, units-good), 1 for good = units
//
// α = 1 - confidence (C. J. Clopper, E. S. Pearson, "The use of confidence or
// fiducial limits illustrated in the case of the binomial", Biometrika 26
// (1934), 404-413). It covers at least with the stated confidence, mostly
// with more. It is 0..1 without units.
func ClopperPearson(good, units int, confidence float64) (low, high float64) {
	checkCount(good, units)
	alpha := 1 - checked(confidence)
	low, high = 0, 1
	if good > 0 {
		low = distuv.Beta{Alpha: float64(good), Beta: float64(units - good + 1)}.Quantile(alpha / 2)
	}
	if good < units {
		// The lower limit of the failures: no 1 - α/2, which would round.
		high = 1 - distuv.Beta{Alpha: float64(units - good), Beta: float64(good + 1)}.Quantile(alpha/2)
	}
	return low, high
}

// Wilson returns the score interval of a probability from good successes in
// units independent trials, without correction for continuity. With z the
// 1-α/2 quantile of the normal distribution, n = units and p = good/n it is
//
//	(p + z²/2n ± z·√(p(1-p)/n + z²/4n²)) / (1 + z²/n)
//
// (E. B. Wilson, "Probable inference, the law of succession, and statistical
// inference", JASA 22 (1927), 209-212). It is 0..1 without units.
func Wilson(good, units int, confidence float64) (low, high float64) {
	checkCount(good, units)
	return wilson(float64(good)/float64(units), float64(units), normalScore(confidence))
}

// wilson is Wilson for a share p of n trials, n not necessarily whole.
func wilson(p, n, z float64) (low, high float64) {
	if !(n > 0) {
		return 0, 1
	}
	w := z * z / n
	middle := (p + w/2) / (1 + w)
	half := math.Sqrt(p*(1-p)*w+w*w/4) / (1 + w)
	low, high = math.Max(middle-half, 0), math.Min(middle+half, 1)
	if p == 1 { // the terms may round to less; at 0 they are exactly equal
		high = 1
	}
	return low, high
}

// ShareInterval returns the share of good units over all batches and its
// confidence interval. good[b] is how many of the units in batch b are good.
//
// The units of a batch come from the same lots and resemble each other, so
// they count for less than as many independent ones. The interval is Wilson's
// for the effective number of units
//
//	n_e = n/deff · (z/t)²      deff = units · s² / (p(1-p)), at least 1
//
// with s² the variance of the batches' shares (divisor: batches - 1), p the
// share over all, n = batches·units: L. Kish, Survey Sampling (1965), 8.2, the
// design effect as the variance of a mean of equal clusters over that of a
// simple random sample, estimated from the clusters. z and t are the normal
// quantile and Student's for batches - 1 degrees of freedom, as s² is only an
// estimate (E. L. Korn, B. I. Graubard, "Confidence intervals for proportions
// with small expected number of positive counts estimated from survey data",
// Survey Methodology 24 (1998), 193-201). deff below 1 would claim that units
// of one batch avoid each other, which shared lots cannot bring about.
//
// Where all batches are equal (in particular all good, or a single batch)
// there is no variance to estimate deff from, and nothing rules out that the
// units of a batch stand or fall together; then deff = units, each batch
// counting as one unit. That is the most cautious choice, and makes an
// interval for no failures wider than one for a single failure.
//
// Without batches or units all three are NaN.
func ShareInterval(good []int, units int, confidence float64) (share, low, high float64) {
	z := normalScore(confidence)
	batches := len(good)
	if batches == 0 || units == 0 {
		return math.NaN(), math.NaN(), math.NaN()
	}
	total := 0
	for _, g := range good {
		checkCount(g, units)
		total += g
	}
	n := float64(batches) * float64(units)
	share = float64(total) / n
	low, high = wilson(share, effective(good, units, share, confidence), z)
	return share, low, high
}

// effective returns n_e of ShareInterval.
func effective(good []int, units int, share, confidence float64) float64 {
	batches, m := float64(len(good)), float64(units)
	if slices.Min(good) == slices.Max(good) {
		return batches
	}
	var squares float64
	for _, g := range good {
		d := float64(g)/m - share
		squares += d * d
	}
	deff := math.Max(m*squares/(batches-1)/(share*(1-share)), 1)
	t := distuv.StudentsT{Sigma: 1, Nu: batches - 1}.Quantile(1 - (1-confidence)/2)
	ratio := normalScore(confidence) / t
	return batches * m / deff * ratio * ratio
}

// BatchSummary returns the median and the 5 % point of the number of good
// units per batch, and the share of batches in which all are good. The two
// quantiles are Hyndman and Fan's definition 7, as Histogram.Quantile's, so
// they need not be whole. Without batches all three are NaN.
func BatchSummary(good []int, units int) (median, p05, allGood float64) {
	if len(good) == 0 {
		return math.NaN(), math.NaN(), math.NaN()
	}
	sorted := slices.Sorted(slices.Values(good))
	full := 0
	for _, g := range sorted {
		checkCount(g, units)
		if g == units {
			full++
		}
	}
	return sortedQuantile(sorted, 0.5), sortedQuantile(sorted, 0.05), float64(full) / float64(len(good))
}

// sortedQuantile is Histogram.Quantile of sorted whole numbers.
func sortedQuantile(sorted []int, p float64) float64 {
	place := float64(len(sorted)-1) * p
	j := int(place)
	if j+1 == len(sorted) {
		return float64(sorted[j])
	}
	f := place - float64(j)
	return float64(sorted[j]) + f*float64(sorted[j+1]-sorted[j])
}

// normalScore returns the two-sided normal quantile of a confidence.
func normalScore(confidence float64) float64 {
	return -distuv.UnitNormal.Quantile((1 - checked(confidence)) / 2)
}

// checked returns the confidence, or panics if it is not within (0, 1).
func checked(confidence float64) float64 {
	if !(confidence > 0 && confidence < 1) {
		panic("spread: confidence outside (0, 1)")
	}
	return confidence
}

// checkCount panics if good units of a number of units are impossible.
func checkCount(good, units int) {
	if !(0 <= good && good <= units) {
		panic("spread: more good units than units, or fewer than none")
	}
}
