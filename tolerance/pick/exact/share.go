package exact

import "math"

// ShareOfNormal is P(low <= X <= high) for X normal with the given mean and
// variance, with a small relative error also far out in a tail and for narrow
// windows. A zero variance gives 1 or 0. It is NaN when an argument is NaN,
// the variance negative or the mean infinite, and 0 when low > high.
func ShareOfNormal(mean, variance, low, high float64) float64 {
	a, b, ok := standardise(mean, variance, low, high)
	switch {
	case !ok:
		return math.NaN()
	case a > b || math.IsInf(a, 1) || math.IsInf(b, -1):
		return 0
	case a > 0:
		return between(a, b)
	case b < 0:
		return between(-b, -a)
	}
	if narrow(a, b) {
		return window(a, b)
	}
	return 1 - tail(-a) - tail(b)
}

// outsideNormal is 1 - ShareOfNormal without losing a small remainder.
func outsideNormal(mean, variance, low, high float64) float64 {
	a, b, ok := standardise(mean, variance, low, high)
	if !ok {
		return math.NaN()
	}
	if a > b {
		return 1
	}
	if a > 0 || b < 0 {
		return 1 - ShareOfNormal(mean, variance, low, high)
	}
	return tail(-a) + tail(b)
}

// standardise turns limits into standard deviations from the mean. Without
// variance a limit is infinitely far away on its side of the mean; a limit on
// the mean itself holds.
func standardise(mean, variance, low, high float64) (a, b float64, ok bool) {
	if !finite(mean) || !(variance >= 0) || math.IsNaN(low) || math.IsNaN(high) {
		return 0, 0, false
	}
	if low > high {
		return 1, 0, true
	}
	s := math.Sqrt(variance)
	return deviations(low-mean, s, -1), deviations(high-mean, s, 1), true
}

func deviations(distance, s float64, side float64) float64 {
	switch {
	case math.IsInf(distance, 0):
		return distance
	case s == 0 && distance == 0:
		return math.Inf(int(side))
	case s == 0:
		return math.Inf(int(math.Copysign(1, distance)))
	}
	return distance / s
}

// tail is P(Z > z).
func tail(z float64) float64 { return 0.5 * math.Erfc(z/math.Sqrt2) }

// density is the standard normal density.
func density(z float64) float64 { return math.Exp(-z*z/2) / math.Sqrt(2*math.Pi) }

// between is P(a <= Z <= b) for 0 < a <= b.
func between(a, b float64) float64 {
	if narrow(a, b) {
		return window(a, b)
	}
	return tail(a) - tail(b)
}

// narrow says that the difference of two tails would cancel more digits than
// the series of window leaves out.
func narrow(a, b float64) bool {
	return (b-a)*max(1, math.Abs(a), math.Abs(b)) < 1e-3
}

// window integrates the density over a narrow window by its expansion at the
// middle c, w wide:
//
//	phi(c) w (1 + (c^2-1) w^2/24 + ...)
//
// The next term is at most (c w)^4/1920, below 1e-15 where narrow holds.
func window(a, b float64) float64 {
	c, w := (a+b)/2, b-a
	return density(c) * w * (1 + (c*c-1)*w*w/24)
}

// bestShare is the greatest P(low <= N(m, v) <= high) over all m in
// [meanLow, meanHigh] and all v >= least, so no choice within them does
// better.
//
// For a given v the best m is the one nearest the middle of the window. With m
// inside the window less variance is always better. With m a distance d
// outside and the window w wide the share has its one maximum where its
// derivative in s vanishes,
//
//	s^2 = ((d+w)^2 - d^2) / (2 ln((d+w)/d)),
//
// and with an endless window it rises to 1/2 as s grows.
func bestShare(low, high, meanLow, meanHigh, least float64) float64 {
	m := nearestMean(low, high, meanLow, meanHigh)
	d := max(low-m, m-high)
	if d <= 0 {
		return ShareOfNormal(m, least, low, high)
	}
	w := high - low
	if math.IsInf(w, 1) {
		return 0.5
	}
	if w == 0 {
		return 0
	}
	best := w * (2*d + w) / (2 * math.Log1p(w/d))
	return ShareOfNormal(m, max(least, best), low, high)
}

// nearestMean is the mean within [meanLow, meanHigh] nearest the middle of the
// window; with one open side, the one farthest inside.
func nearestMean(low, high, meanLow, meanHigh float64) float64 {
	middle := low/2 + high/2
	switch {
	case math.IsInf(low, -1) && math.IsInf(high, 1):
		middle = meanLow
	case math.IsInf(low, -1):
		return meanLow
	case math.IsInf(high, 1):
		return meanHigh
	}
	return min(max(middle, meanLow), meanHigh)
}
