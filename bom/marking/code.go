package marking

import (
	"fmt"
	"strings"

	"batchwright/bom/part"
)

// multiplier is a code letter that stands where the decimal mark would.
type multiplier struct {
	letter string
	power  int
}

// The letters of IEC 60062:2016, as read in a public summary of the standard.
var (
	ohmLetters   = []multiplier{{"R", 0}, {"K", 3}, {"M", 6}, {"G", 9}, {"T", 12}}
	faradLetters = []multiplier{{"p", -12}, {"n", -9}, {"µ", -6}, {"m", -3}, {"F", 0}}
)

// codeFigures is how many digits a letter code can have: "59R04".
const codeFigures = 4

// Code is the letter code of IEC 60062 for a resistance or capacitance in SI
// with its tolerance (a fraction): "4K7F", "220pJ". A tolerance that has no
// undisputed letter, or of 0, adds none. The code is "" for other types, and
// for a value of more than four digits or beyond the letters.
func Code(t part.Type, value, tolerance float64) string {
	switch t {
	case part.Resistor, part.TrimmerResistor:
		if code := letterCode(value, ohmLetters); code != "" {
			return code + toleranceLetter(tolerance)
		}
	case part.Capacitor, part.TrimmerCapacitor:
		if code := letterCode(value, faradLetters); code != "" && value < 100 {
			return code + capacitorLetter(value, tolerance)
		}
	}
	return ""
}

// letterCode writes one to three digits before the letter; below the first
// letter's unit, none: "R47".
func letterCode(value float64, letters []multiplier) string {
	digits, exponent, ok := figures(value, codeFigures)
	if !ok {
		return ""
	}
	chosen := letters[0]
	for _, l := range letters {
		if l.power <= exponent {
			chosen = l
		}
	}
	point := exponent - chosen.power + 1 // digits before the letter
	switch {
	case point > 3 || point < -1:
		return ""
	case point <= 0:
		return chosen.letter + strings.Repeat("0", -point) + digits
	}
	for len(digits) < point {
		digits += "0"
	}
	after := digits[point:]
	if point == 1 && after == "" {
		after = "0" // "1K0", as the standard prints it
	}
	return digits[:point] + chosen.letter + after
}

// ReadResistance reads a resistor's letter code ("4K7F", "R47"; lower-case k is
// common practice) or its three or four digits ("472", "4991", "0R05"), in ohms.
func ReadResistance(code string) (Reading, error) {
	text := strings.ReplaceAll(code, "k", "K")
	return readCode(code, text, "a resistor's code, such as 4K7F or 472", func(body string) (float64, bool) {
		if v, ok := readLetter(body, ohmLetters); ok {
			return v, true
		}
		if len(body) == 3 || len(body) == 4 {
			return readDigits(body, 0)
		}
		return 0, false
	}, false)
}

// ReadCapacitance reads a capacitor's letter code ("4p7", "220pJ") or its three
// digits in picofarads ("221J", "4R7"), in farads. "100" is 10 pF.
func ReadCapacitance(code string) (Reading, error) {
	text := strings.NewReplacer("u", "µ", "\u03bc", "µ").Replace(code)
	return readCode(code, text, "a capacitor's code, such as 220pJ or 221J", func(body string) (float64, bool) {
		if len(body) == 4 && body[3] == 'F' && onlyDigits(body[:3]) {
			return 0, false // "221F" is 220 pF ±1 %, not 221 farads
		}
		if v, ok := readLetter(body, faradLetters); ok {
			return v, true
		}
		if v, ok := readLetter(body, []multiplier{{"R", -12}}); ok {
			return v, true
		}
		if len(body) == 3 {
			return readDigits(body, -12)
		}
		return 0, false
	}, true)
}

// ReadInductance reads a coil's digits in microhenries ("471", "4R7", "R47") as
// makers mark them: common practice, in no standard.
func ReadInductance(code string) (Reading, error) {
	return readCode(code, code, "a coil's code, such as 471K or 4R7", func(body string) (float64, bool) {
		if v, ok := readLetter(body, []multiplier{{"R", -6}}); ok {
			return v, true
		}
		if len(body) == 3 {
			return readDigits(body, -6)
		}
		return 0, false
	}, false)
}

// readCode reads a value, or a value and a tolerance letter.
func readCode(code, text, expected string, value func(string) (float64, bool), capacitor bool) (Reading, error) {
	if v, ok := value(text); ok {
		return Reading{Value: v}, nil
	}
	if len(text) > 1 {
		body, letter := text[:len(text)-1], text[len(text)-1:]
		if v, ok := value(body); ok {
			if r, ok := withTolerance(v, letter, capacitor); ok {
				return r, nil
			}
			return Reading{}, fmt.Errorf("unknown or disputed tolerance letter: found %q in %q", letter, code)
		}
	}
	return Reading{}, fmt.Errorf("unreadable code: found %q, expected %s", code, expected)
}

// readLetter reads digits, a letter, digits; one run of digits may be empty.
func readLetter(text string, letters []multiplier) (float64, bool) {
	for _, l := range letters {
		before, after, found := strings.Cut(text, l.letter)
		if found && before+after != "" && len(before+after) <= codeFigures+2 && onlyDigits(before) && onlyDigits(after) {
			return scaled(before+after, l.power-len(after)), true
		}
	}
	return 0, false
}

// readDigits reads digits whose last is the power of ten. Last digits 8 and 9
// stand for hundredths and tenths in some codes and are refused.
func readDigits(text string, power int) (float64, bool) {
	last := len(text) - 1
	if last < 1 || !onlyDigits(text) || text[last] > '7' {
		return 0, false
	}
	return scaled(text[:last], power+int(text[last]-'0')), true
}
