package workbook

import (
	"math"
	"strconv"
	"strings"

	"batchwright/bom/quantity"
	"batchwright/tolerance/spread"
)

// scale is how one row shows its figures: one unit and one number of decimals
// for all of them, so that a column of readings can be compared by eye.
type scale struct {
	by       float64 // SI = shown × by
	symbol   string
	decimals int
}

// scaleOf picks the unit in which largest is easy to read and the decimals
// that show step. The unit is the SI symbol of the figures.
func scaleOf(unit string, largest, step float64) scale {
	s := scale{by: 1, symbol: unit}
	if u, ok := quantity.Find(unit); ok && finite(largest) {
		s.by, s.symbol = quantity.Prefixed(largest, u)
	}
	if !(s.by > 0) {
		s.by = 1
	}
	if s.symbol == "1" {
		s.symbol = "" // a plain ratio
	}
	if step > 0 {
		s.decimals = min(6, max(0, int(math.Ceil(-math.Log10(step/s.by)-1e-9))))
	}
	return s
}

// windowScale is the rule by which the test sheet picks a row's decimals. The
// last digit shown is the largest power of ten that is
//
//	≤ U/5, a fifth of the instrument's expanded uncertainty, or
//	≤ W/1000, a thousandth of the narrowest window, if that is coarser,
//
// and always ≤ W/20, so that rounding never moves a limit by more than a
// twentieth of its window. Digits beyond that say nothing about a unit and are
// not worth writing down. With neither known it shows four significant digits.
func windowScale(unit string, u, largest float64, windows ...float64) scale {
	narrowest := math.Inf(1)
	for _, w := range windows {
		if w > 0 {
			narrowest = math.Min(narrowest, w)
		}
	}
	step := 0.0
	if u > 0 && finite(u) {
		step = u / 5
	}
	if finite(narrowest) {
		step = math.Min(math.Max(step, narrowest/1000), narrowest/20)
	}
	if step == 0 {
		step = math.Abs(largest) / 1000
	}
	return scaleOf(unit, largest, powerBelow(step))
}

// readingScale is the rule for what an instrument reads: as windowScale, with
// the last digit the smallest power of ten that is
//
//	≥ U/10, a tenth of the instrument's expanded uncertainty,
//
// where the windows do not ask for another: an instrument has no finer digit
// that means anything.
func readingScale(unit string, u, largest float64, windows ...float64) scale {
	digit := powerBelow(u / 10)
	if digit < u/10*(1-1e-9) {
		digit *= 10
	}
	return windowScale(unit, 5*digit, largest, windows...)
}

// powerBelow is the largest power of ten not above x; 0 for x that has none.
func powerBelow(x float64) float64 {
	if !(x > 0) || math.IsInf(x, 1) {
		return 0
	}
	return math.Pow(10, math.Floor(math.Log10(x)+1e-9))
}

// nearest is v as the row shows it, rounded to the nearest.
func (s scale) nearest(v float64) float64 { return s.round(v, math.Round) }

// below and above round down and up. Expected limits are rounded outward: a
// good unit must never fall outside by rounding. Accept limits are rounded
// inward: what is accepted must meet the target.
func (s scale) below(v float64) float64 { return s.round(v, math.Floor) }
func (s scale) above(v float64) float64 { return s.round(v, math.Ceil) }

// round gives v/by as a decimal with s.decimals digits after the point, the
// very number that the printed digits read back as. A value within a millionth
// of a digit of one is that digit: it stands there but for binary fractions.
func (s scale) round(v float64, to func(float64) float64) float64 {
	if !finite(v) {
		return math.NaN()
	}
	x := v / s.by * math.Pow(10, float64(s.decimals))
	if near := math.Round(x); math.Abs(x-near) < 1e-6 {
		x = near
	} else {
		x = to(x)
	}
	shown := strconv.FormatFloat(x*math.Pow(10, -float64(s.decimals)), 'f', s.decimals, 64)
	decimal, err := strconv.ParseFloat(shown, 64)
	if err != nil || decimal == 0 { // also turns -0 into 0
		return 0
	}
	return decimal
}

// format is the number format of the row, padded on the right by a bracket's
// width (an indent on the right is lost on later printed pages).
func (s scale) format() string {
	digits := "0"
	if s.decimals > 0 {
		digits += "." + strings.Repeat("0", s.decimals)
	}
	return digits + "_)"
}

// text is v as the row shows it, without the unit.
func (s scale) text(v float64) string {
	if !finite(v) {
		return "–"
	}
	return strconv.FormatFloat(s.nearest(v), 'f', s.decimals, 64)
}

// largestOf is the largest magnitude among those that are numbers, or NaN.
func largestOf(figures ...spread.Figure) float64 {
	largest := math.NaN()
	for _, f := range figures {
		if v := math.Abs(float64(f)); finite(v) && !(v <= largest) {
			largest = v
		}
	}
	return largest
}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
