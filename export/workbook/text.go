package workbook

import (
	"math"
	"strings"
	"unicode"
	"unicode/utf8"
)

// longest is how many UTF-16 units of one text are shown. A cell could hold
// 32,767 (ECMA-376 18.18 as spreadsheet programs apply it); nobody reads that.
const longest = 2000

// clean makes text fit to stand in a cell: valid UTF-8, one line, no control
// characters, no marks that reverse the direction of what follows, and short
// enough. A text that begins with = stays as it is: cells are written as text,
// never as formulas, so it is shown and not run.
func clean(s string) string {
	var b strings.Builder
	size := 0
	for _, r := range strings.ToValidUTF8(s, "\ufffd") {
		switch {
		case r == '\n' || r == '\t' || r == '\r' || r == '\u2028' || r == '\u2029':
			r = ' '
		case unicode.IsControl(r) || direction(r) || r == '\ufffe' || r == '\uffff':
			continue
		}
		size++
		if r > 0xffff {
			size++
		}
		if size > longest {
			b.WriteRune('…')
			break
		}
		b.WriteRune(r)
	}
	return strings.TrimSpace(b.String())
}

// direction says whether r is one of Unicode's bidirectional controls
// (UAX 9, table 4) or a byte order mark.
func direction(r rune) bool {
	return r >= '\u202a' && r <= '\u202e' || r >= '\u2066' && r <= '\u2069' ||
		r == '\u200e' || r == '\u200f' || r == '\u061c' || r == '\ufeff'
}

// cut shortens s to at most n characters, the last an ellipsis.
func cut(s string, n int) string {
	if utf8.RuneCountInString(s) <= n {
		return s
	}
	return strings.TrimSpace(string([]rune(s)[:n-1])) + "…"
}

// printed makes text fit for a page header or footer, where & starts a code.
func printed(s string) string {
	return strings.ReplaceAll(cut(clean(s), 60), "&", "&&")
}

// width estimates how wide s is, in widths of a digit at 11 points: the unit
// column widths are given in. Rounded up from looking at Carlito, the metric
// twin of Calibri; no measuring is needed for what only decides row heights.
func width(s string, size float64, bold bool) float64 {
	w := 0.0
	for _, r := range s {
		switch {
		case strings.ContainsRune("iljtfrI.,:;'|!()[]/ ", r):
			w += 0.62
		case strings.ContainsRune("mwMW@%—…→Ω", r):
			w += 1.6
		case unicode.IsUpper(r):
			w += 1.2
		case r > 0x2e80: // ideographs and the like are two columns wide
			w += 2.1
		default:
			w += 1.02
		}
	}
	if bold {
		w *= 1.06
	}
	return w * size / 11
}

// lines estimates how many lines s takes, wrapped at words into a column.
func lines(s string, column, size float64, bold bool) int {
	room := math.Max(1, column-0.8) // the cell's own padding
	n, used := 1, 0.0
	for _, word := range strings.Fields(s) {
		w := width(word, size, bold)
		gap := 0.0
		if used > 0 {
			gap = width(" ", size, bold)
		}
		if used+gap+w <= room {
			used += gap + w
			continue
		}
		if used > 0 {
			n++
		}
		broken := math.Ceil(w/room) - 1 // a word longer than the column is broken
		n += int(math.Max(0, broken))
		used = w - math.Max(0, broken)*room
	}
	return n
}
