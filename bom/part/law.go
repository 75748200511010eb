package part

import "math"

// ReferenceCelsius is the temperature at which a part has its nominal value
// (EIA-198; the IEC's 20 °C makes no difference worth counting, but for class
// 2 ceramics, where it may shift the stated change by about 1 %).
const ReferenceCelsius = 25

// Limits are the relative changes between which a figure lies at a
// temperature, counted from 25 °C.
//
//	without a law: (α ± spread)·(t − 25 °C)
//	with one:      straight lines between its points, held beyond its ends
func (s Scatter) Limits(celsius float64) (low, high float64) {
	if len(s.Law) > 0 {
		return between(s.Law, celsius)
	}
	d := celsius - ReferenceCelsius
	half := s.Temperature.Spread * math.Abs(d)
	return s.Temperature.Value*d - half, s.Temperature.Value*d + half
}

// Change is the relative change at a temperature of the piece whose deviation
// is z in [-1, 1]: the middle of the limits and z times half their distance.
func (s Scatter) Change(celsius, z float64) float64 {
	if len(s.Law) == 0 {
		return (s.Temperature.Value + s.Temperature.Spread*z) * (celsius - ReferenceCelsius)
	}
	low, high := between(s.Law, celsius)
	return (low+high)/2 + z*(high-low)/2
}

// point is a point of a law of straight lines: where it is, and the limits there.
type point interface {
	limits() (at, low, high float64)
}

func (p LawPoint) limits() (at, low, high float64) { return p.Celsius, p.Low, p.High }

// between interpolates a law's limits, which hold beyond its ends.
func between[P point](law []P, x float64) (low, high float64) {
	at, low, high := law[0].limits()
	for _, p := range law[1:] {
		if x <= at {
			return low, high
		}
		next, nextLow, nextHigh := p.limits()
		if x <= next {
			w := (x - at) / (next - at)
			return low + w*(nextLow-low), high + w*(nextHigh-high)
		}
		at, low, high = next, nextLow, nextHigh
	}
	return low, high
}

// Clock is g(h), by which an ageing coefficient is multiplied after h hours:
//
//	per decade: log10(h / 1 h) from one hour on, 0 before
//	per 1000 h: h / 1000 h
func (a Ageing) Clock(hours float64) float64 {
	if a.Per == PerThousandHours {
		return hours / 1000
	}
	if !(hours > 1) {
		return 0
	}
	return math.Log10(hours)
}
