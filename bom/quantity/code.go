package quantity

import (
	"strconv"
	"strings"
)

// letter is a code letter that stands where the decimal mark would.
type letter struct {
	text  string
	power int
}

// The letters of IEC 60062 for resistors (R, K, M, G, T) and capacitors (p, n,
// µ, m, F), read in public summaries of the standard; lower-case k and u for µ
// are common practice. Volts (5V1) and microhenries written the same way are
// common practice too; R in an inductance is refused because it would mean
// microhenries to some and nothing to others.
var letters = map[string][]letter{
	Ohm.Symbol:   {{"R", 0}, {"K", 3}, {"k", 3}, {"M", 6}, {"G", 9}, {"T", 12}},
	Farad.Symbol: {{"p", -12}, {"n", -9}, {"\u00b5", -6}, {"\u03bc", -6}, {"u", -6}, {"m", -3}, {"F", 0}},
	Henry.Symbol: {{"n", -9}, {"\u00b5", -6}, {"\u03bc", -6}, {"u", -6}, {"m", -3}, {"H", 0}},
	Volt.Symbol:  {{"V", 0}},
}

// readCode reads a letter code in SI: "4k7", "R47", "150k", "4p7", "5V1". The
// unit may be repeated at the end: "2u2F".
func readCode(text string, want Unit) (float64, bool) {
	known, ok := letters[want.Symbol]
	if !ok {
		return 0, false
	}
	if v, ok := readLetter(text, known); ok {
		return v, true
	}
	if bare, ok := strings.CutSuffix(text, want.Symbol); ok && !strings.ContainsAny(bare, " ") {
		return readLetter(bare, known)
	}
	return 0, false
}

// readLetter reads digits, one letter, digits; one of the two runs may be
// empty. With a dot already in front of the letter ("4.7k") nothing may follow.
func readLetter(text string, known []letter) (float64, bool) {
	for _, l := range known {
		before, after, found := strings.Cut(text, l.text)
		if !found || before == "" && after == "" || !allDigits(after) {
			continue
		}
		whole, fraction, dotted := strings.Cut(before, ".")
		if !allDigits(whole) || !allDigits(fraction) || dotted && (after != "" || whole == "" || fraction == "") {
			continue
		}
		v, err := strconv.ParseFloat("0"+before+pointed(after, dotted)+"e"+strconv.Itoa(l.power), 64)
		return v, err == nil
	}
	return 0, false
}

func pointed(after string, dotted bool) string {
	if dotted || after == "" {
		return after
	}
	return "." + after
}

func allDigits(text string) bool {
	for i := range len(text) {
		if text[i] < '0' || text[i] > '9' {
			return false
		}
	}
	return true
}

// codeNoun names what a letter code is the code of, or "".
func codeNoun(text string) string {
	for _, u := range [...]Unit{Ohm, Farad, Volt} {
		if _, ok := readLetter(text, letters[u.Symbol]); ok {
			return describe(u).noun
		}
	}
	return ""
}
