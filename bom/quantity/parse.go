package quantity

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Quantity is a figure with a unit, and the text it was read from.
//
// Value is in the SI unit of the dimension, so percent and ppm are fractions
// and hours are seconds; except that Celsius stays in degrees Celsius, Decibel
// in decibels and Cent in cents.
type Quantity struct {
	Value float64
	Unit  Unit
	Text  string
}

// Error says why a text is no quantity of the unit wanted.
type Error struct {
	Text     string // what was found
	Expected string // "a resistance, such as 4.7 kΩ"
	Reason   string // "wrong unit: Hz is for a frequency"
}

// Error is the reason, what was found and what was expected in one line.
func (e *Error) Error() string {
	return fmt.Sprintf("%s: found %q, expected %s", e.Reason, e.Text, e.Expected)
}

// longest is more than any quantity needs; longer text is refused unread.
const longest = 100

// Parse reads a quantity of the unit wanted: a number with a unit, a letter
// code of IEC 60062 where the unit has one, or a plain number where want is
// One. The error is always an *Error.
func Parse(text string, want Unit) (Quantity, error) {
	k := describe(want)
	trimmed := strings.TrimFunc(text, unicode.IsSpace)
	if reason := unreadable(trimmed); reason != "" {
		return Quantity{}, k.refuse(text, reason)
	}
	if v, ok := readCode(trimmed, want); ok {
		return k.within(v, trimmed)
	}
	number, unit, ok := splitNumber(trimmed)
	if !ok {
		return Quantity{}, k.refuse(text, k.noNumber(trimmed))
	}
	if unit == "" && want.Dimension == (Dimension{}) && want == One {
		unit = "1"
	}
	if unit == "" {
		return Quantity{}, k.bare(text, number)
	}
	m, ok := readSymbol(unit)
	if !ok {
		return Quantity{}, k.refuse(text, k.unknownUnit(trimmed, unit))
	}
	if m.dimension != want.Dimension || m.sort != sortOf(want) {
		return Quantity{}, k.refuse(text, wrongUnit(unit, m))
	}
	return k.within(m.value(number), trimmed)
}

// value is the number in SI. The power of ten goes into the decimal text, so
// that the result is the float64 nearest to what was written.
func (m measure) value(number string) float64 {
	mantissa, exponent, _ := strings.Cut(strings.ToLower(number), "e")
	e := 0
	if exponent != "" {
		var err error
		if e, err = strconv.Atoi(exponent); err != nil {
			e = 1e6 // the bounds refuse what this makes of it
			if exponent[0] == '-' {
				e = -1e6
			}
		}
	}
	v, _ := strconv.ParseFloat(mantissa+"e"+strconv.Itoa(e+m.power), 64)
	return v * m.factor
}

// within checks the magnitude.
func (k kind) within(v float64, text string) (Quantity, error) {
	size := math.Abs(v)
	if k.unit == Celsius {
		if !(v >= -Celsius.Offset && v <= k.high) {
			return Quantity{}, k.refuse(text, "below absolute zero or absurdly hot")
		}
		return Quantity{v, k.unit, text}, nil
	}
	switch {
	case size == 0 && !onlyZeros(text):
		return Quantity{}, k.refuse(text, "absurdly small")
	case size != 0 && size < k.low:
		return Quantity{}, k.refuse(text, "absurdly small")
	case !(size <= k.high):
		return Quantity{}, k.refuse(text, "absurdly large")
	case size == 0:
		v = 0 // not minus zero
	}
	return Quantity{v, k.unit, text}, nil
}

// onlyZeros tells "0e5 V" from "1e-400 V", which both come out as zero.
func onlyZeros(text string) bool {
	for _, c := range text {
		switch {
		case c >= '1' && c <= '9':
			return false
		case c == 'e' || c == 'E' || unicode.IsLetter(c) || c == '%':
			return true
		}
	}
	return true
}

// splitNumber takes the number off the front: an optional sign or ±, digits
// with at most one dot, an optional exponent. The sign ± is dropped.
func splitNumber(text string) (number, unit string, ok bool) {
	rest := strings.TrimLeftFunc(strings.TrimPrefix(text, "±"), unicode.IsSpace)
	signed := rest == text
	sign := ""
	for _, s := range [...]string{"-", "\u2212", "+"} {
		if after, found := strings.CutPrefix(rest, s); found && signed {
			rest = after
			if s != "+" {
				sign = "-"
			}
			break
		}
	}
	length, digits, dots := 0, 0, 0
	for length < len(rest) {
		c := rest[length]
		if c == '.' {
			dots++
		} else if c >= '0' && c <= '9' {
			digits++
		} else {
			break
		}
		length++
	}
	if digits == 0 || dots > 1 {
		return "", "", false
	}
	length += exponentLength(rest[length:])
	return sign + rest[:length], strings.TrimLeftFunc(rest[length:], unicode.IsSpace), true
}

// exponentLength is the length of "e-12" at the front of text, or 0.
func exponentLength(text string) int {
	if text == "" || text[0] != 'e' && text[0] != 'E' {
		return 0
	}
	n := 1
	if n < len(text) && (text[n] == '-' || text[n] == '+') {
		n++
	}
	start := n
	for n < len(text) && text[n] >= '0' && text[n] <= '9' {
		n++
	}
	if n == start {
		return 0
	}
	return n
}

// unreadable names what makes a text no quantity of any unit.
func unreadable(text string) string {
	switch {
	case text == "":
		return "nothing where a quantity is needed"
	case len(text) > longest:
		return "too long for a quantity"
	case !utf8.ValidString(text):
		return "not valid UTF-8"
	}
	bare := strings.ToLower(strings.TrimLeft(text, "+-±\u2212 "))
	for _, word := range [...]string{"nan", ".nan", "inf", ".inf", "infinity", "∞"} {
		if rest, ok := strings.CutPrefix(bare, word); ok && (rest == "" || rest[0] == ' ') {
			return "not a finite number"
		}
	}
	if i := strings.IndexByte(text, ','); i > 0 && text[i-1] >= '0' && text[i-1] <= '9' {
		return "a comma in a number; the decimal mark is a dot, and thousands are not marked"
	}
	return ""
}
