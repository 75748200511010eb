package marking

import (
	"strconv"
	"strings"

	"batchwright/bom/series"
)

// Digits is the three-character code of a capacitor, two figures of picofarads
// and a power of ten: "221" is 220 pF, "100" is 10 pF, "4R7" is 4.7 pF. It is
// "" for a value of more figures than fit.
func Digits(farads float64) string { return digitCode(farads, -12, 2) }

// CoilDigits is the same in microhenries: common practice, in no standard.
func CoilDigits(henries float64) string { return digitCode(henries, -6, 2) }

// ChipDigits is the code on a resistor chip: of two figures and a power of ten,
// "472", where two say it all and it is no closer than 5 %, else of three,
// "4991".
func ChipDigits(ohms, tolerance float64) string {
	if ohms == 0 {
		return "000"
	}
	if tolerance >= 0.05 {
		if code := digitCode(ohms, 0, 2); code != "" {
			return code
		}
	}
	return digitCode(ohms, 0, 3)
}

// digitCode writes a value in units of 10^unit with so many figures.
func digitCode(value float64, unit, most int) string {
	digits, exponent, ok := figures(value, most)
	if !ok {
		return ""
	}
	exponent -= unit // of the first digit
	power := exponent - (most - 1)
	switch {
	case power > 7:
		return ""
	case power >= 0:
		for len(digits) < most {
			digits += "0"
		}
		return digits + strconv.Itoa(power)
	case exponent >= 0: // the letter between the figures, or after them
		for len(digits) < most {
			digits += "0"
		}
		return digits[:exponent+1] + "R" + digits[exponent+1:]
	}
	fraction := strings.Repeat("0", -exponent-1) + digits
	for len(fraction) < most {
		fraction += "0"
	}
	if len(fraction) > most {
		return ""
	}
	return "R" + fraction
}

// chipLetters are the powers of ten of the three-character code of chips of
// 1 %. The scheme is that of an annex of IEC 60062:2016; the letters are from
// memory.
var chipLetters = map[byte]int{'Z': -3, 'Y': -2, 'R': -2, 'X': -1, 'S': -1, 'A': 0, 'B': 1, 'H': 1, 'C': 2, 'D': 3, 'E': 4, 'F': 5}

// ReadChip96 reads the three-character code of chips of 1 % in ohms: two digits
// count along E96 from 01, which is 100, and a letter is the power of ten.
func ReadChip96(code string) (float64, bool) {
	if len(code) != 3 || !onlyDigits(code[:2]) {
		return 0, false
	}
	place, _ := strconv.Atoi(code[:2])
	power, ok := chipLetters[code[2]]
	values, _ := series.Values("E96")
	if !ok || place < 1 || place > len(values) {
		return 0, false
	}
	hundreds := strconv.Itoa(int(values[place-1]*100 + 0.5))
	return scaled(hundreds, power), true
}
