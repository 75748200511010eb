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

// between interpolates a law's limits.
func between(law []LawPoint, celsius float64) (low, high float64) {
	if celsius <= law[0].Celsius {
		return law[0].Low, law[0].High
	}
	for i := 1; i < len(law); i++ {
		a, b := law[i-1], law[i]
		if celsius <= b.Celsius {
			w := (celsius - a.Celsius) / (b.Celsius - a.Celsius)
			return a.Low + w*(b.Low-a.Low), a.High + w*(b.High-a.High)
		}
	}
	last := law[len(law)-1]
	return last.Low, last.High
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
