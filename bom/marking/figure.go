// Package marking says what is printed or painted on a part, and reads it
// back: the letter, digit and colour codes of IEC 60062, and the dielectric
// codes of EIA-198 and IEC 60384.
package marking

import (
	"math"
	"strconv"
	"strings"
)

// Reading is what a mark says. Low and High are the tolerance as fractions of
// the value, −0.05 and 0.05 for ±5 %; both are 0 where the mark has none.
type Reading struct {
	Value     float64 // SI
	Low, High float64
}

// symmetric completes a reading with a tolerance either way.
func symmetric(value, tolerance float64) Reading { return Reading{value, -tolerance, tolerance} }

// figures splits a positive value into its significant digits, without zeros
// at the end, and the power of ten of the first. It reports false for a value
// of more than most digits.
func figures(value float64, most int) (digits string, exponent int, ok bool) {
	if !(value > 0) || math.IsInf(value, 1) {
		return "", 0, false
	}
	text := strconv.FormatFloat(value, 'e', most-1, 64)
	if rounded, err := strconv.ParseFloat(text, 64); err != nil || math.Abs(rounded-value) > 1e-9*value {
		return "", 0, false
	}
	mantissa, power, _ := strings.Cut(text, "e")
	exponent, err := strconv.Atoi(power)
	if err != nil {
		panic("marking: " + text + " is no number")
	}
	return strings.TrimRight(strings.Replace(mantissa, ".", "", 1), "0"), exponent, true
}

// scaled is digits·10^power: the float64 nearest to the decimal figure.
func scaled(digits string, power int) float64 {
	v, _ := strconv.ParseFloat(digits+"e"+strconv.Itoa(power), 64)
	return v
}

// near reports whether two tolerances are the same.
func near(a, b float64) bool { return math.Abs(a-b) <= 1e-9*math.Abs(b) }

func onlyDigits(text string) bool {
	return strings.Trim(text, "0123456789") == ""
}
