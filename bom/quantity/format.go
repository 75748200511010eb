package quantity

import (
	"math"
	"strconv"
	"strings"
)

// Format prints v, in the unit that Quantity.Value has for u, to so many
// significant digits with the prefix of engineering practice: "220 pF",
// "4.70 kΩ", "-12.0 V", "1.25 %". With digits of zero or less it prints the
// fewest that read back as the same number. Digits before the decimal mark are
// all printed. NaN is "–".
func Format(v float64, u Unit, digits int) string {
	if math.IsNaN(v) {
		return "–"
	}
	scale, symbol := 1.0, u.Symbol
	if sortOf(u) == plain || sortOf(u) == humidity {
		scale, symbol = prefixFor(v, u, digits)
	}
	text := number(v, scale, digits)
	if u == One {
		return text
	}
	return text + " " + symbol
}

// FormatRange prints a range in the unit of its high end: "4..34 pF".
func FormatRange(low, high float64, u Unit, digits int) string {
	scale, symbol := Prefixed(high, u)
	text := number(low, scale, digits) + ".." + number(high, scale, digits)
	if u == One {
		return text
	}
	return text + " " + symbol
}

// Prefixed chooses the one unit in which to print figures of about the size of
// v: 332.1e3 Hz is 332.1 of 1e3, "kHz". The figure to print is v/scale.
func Prefixed(v float64, u Unit) (scale float64, symbol string) {
	if s := sortOf(u); s != plain && s != humidity {
		return 1, u.Symbol
	}
	return prefixFor(v, u, 0)
}

// prefixFor is Prefixed for a figure that will be rounded to so many digits:
// 999.96 Ω to four digits is 1.000 kΩ.
func prefixFor(v float64, u Unit, digits int) (scale float64, symbol string) {
	steps := describe(u).steps
	if len(steps) == 0 || u.Scale != 1 {
		return u.Scale, u.Symbol
	}
	if v == 0 || math.IsNaN(v) || math.IsInf(v, 0) {
		return 1, u.Symbol
	}
	_, exponent := decimal(v, digits)
	chosen := steps[0]
	for _, s := range steps {
		if s.power <= exponent {
			chosen = s
		}
	}
	return powerOfTen(chosen.power), chosen.symbol
}

// decimal is v rounded to so many significant digits: its digits and the power
// of ten of the first of them.
func decimal(v float64, digits int) (text string, exponent int) {
	precision := digits - 1
	if digits <= 0 {
		precision = -1
	}
	mantissa, e, _ := strings.Cut(strconv.FormatFloat(math.Abs(v), 'e', precision, 64), "e")
	exponent, _ = strconv.Atoi(e)
	return strings.Replace(mantissa, ".", "", 1), exponent
}

// number prints v/scale. A power of ten is taken out by moving the decimal
// mark, which is exact where a division would not be.
func number(v, scale float64, digits int) string {
	switch {
	case math.IsNaN(v):
		return "–"
	case math.IsInf(v, 1):
		return "∞"
	case math.IsInf(v, -1):
		return "-∞"
	case v == 0:
		return "0"
	}
	power := int(math.Round(math.Log10(scale)))
	if powerOfTen(power) != scale {
		v, power = v/scale, 0
	}
	text, exponent := decimal(v, digits)
	if digits > 0 && exponent-power >= digits && exponent-power <= 15 {
		text, exponent = decimal(v, exponent-power+1)
	}
	exponent -= power
	if exponent < -6 || exponent > 15 {
		text = mantissaPoint(text) + "e" + strconv.Itoa(exponent)
	} else {
		text = placePoint(text, exponent)
	}
	if v < 0 {
		return "-" + text
	}
	return text
}

func mantissaPoint(digits string) string {
	if len(digits) == 1 {
		return digits
	}
	return digits[:1] + "." + digits[1:]
}

// placePoint writes digits whose first stands for 10^exponent.
func placePoint(digits string, exponent int) string {
	switch {
	case exponent < 0:
		return "0." + strings.Repeat("0", -exponent-1) + digits
	case exponent >= len(digits)-1:
		return digits + strings.Repeat("0", exponent-len(digits)+1)
	}
	return digits[:exponent+1] + "." + digits[exponent+1:]
}
