package workbook

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"batchwright/tolerance/spread"
)

// percent writes a fraction: 0.025 is "2.5 %". Up to four significant digits,
// fewer if they are zeros.
func percent(fraction float64) string {
	if !finite(fraction) {
		return "–"
	}
	return strconv.FormatFloat(fraction*100, 'g', 4, 64) + "\u00a0%"
}

// share writes how many of the simulated units something holds for. Nothing
// simulated is certain, so next to none and next to all are said as bounds.
func share(fraction spread.Figure) string {
	f := float64(fraction)
	switch {
	case !finite(f):
		return "–"
	case f == 0:
		return "none"
	case f < 0.0005:
		return "<\u00a00.1\u00a0%"
	case f == 1:
		return "all"
	case f > 0.9995:
		return ">\u00a099.9\u00a0%"
	}
	return strconv.FormatFloat(f*100, 'f', 1, 64) + "\u00a0%"
}

// interval writes the bounds of a share, rounded outward to a hundredth of a
// percent.
func interval(low, high spread.Figure) string {
	if !finite(float64(low)) || !finite(float64(high)) {
		return ""
	}
	one := func(f spread.Figure, to func(float64) float64) string {
		return strconv.FormatFloat(to(float64(f)*1e4)/100, 'g', -1, 64)
	}
	return one(low+1e-9, math.Floor) + "\u2009–\u2009" + one(high-1e-9, math.Ceil) + "\u00a0%"
}

// plural counts things: "1 unit", "24 units".
func plural(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return fmt.Sprintf("%d %ss", n, thing)
}

// whole writes a count with thin groups of three: 24 000.
func whole(n int) string {
	s := strconv.Itoa(n)
	for i := len(s) - 3; i > 0 && s[i-1] != '-'; i -= 3 {
		s = s[:i] + "\u00a0" + s[i:]
	}
	return s
}

// capital begins a sentence.
func capital(s string) string {
	r, n := utf8.DecodeRuneInString(s)
	if r == utf8.RuneError {
		return s
	}
	if word, _, _ := strings.Cut(s, " "); strings.ContainsAny(word, "._0123456789") {
		return s // a name from the build file
	}
	return string(unicode.ToUpper(r)) + s[n:]
}

// runs writes ascending numbers with their runs drawn together: 1–3, 5.
func runs(numbers []int) string {
	var parts []string
	for i := 0; i < len(numbers); {
		j := i
		for j+1 < len(numbers) && numbers[j+1] == numbers[j]+1 {
			j++
		}
		switch {
		case j == i:
			parts = append(parts, strconv.Itoa(numbers[i]))
		case j == i+1:
			parts = append(parts, strconv.Itoa(numbers[i]), strconv.Itoa(numbers[j]))
		default:
			parts = append(parts, fmt.Sprintf("%d–%d", numbers[i], numbers[j]))
		}
		i = j + 1
	}
	return strings.Join(parts, ", ")
}

// stageOf is the stage that a dotted name begins with.
func stageOf(name string) string {
	stage, _, _ := strings.Cut(name, ".")
	return stage
}
