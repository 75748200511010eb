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

// advances are the widths of the characters from space to tilde in thousandths
// of the type size: the horizontal metrics of Carlito, which are Calibri's.
var advances = [...]int{
	226, 326, 401, 498, 507, 715, 682, 221, 303, 303, 498, 498, 250, 306, 252, 386,
	507, 507, 507, 507, 507, 507, 507, 507, 507, 507, 268, 268, 498, 498, 498, 463,
	894, 579, 544, 533, 615, 488, 459, 631, 623, 252, 319, 520, 420, 855, 646, 662,
	517, 673, 543, 459, 487, 642, 567, 890, 519, 487, 468, 307, 386, 307, 498, 498,
	291, 479, 525, 423, 525, 498, 305, 471, 525, 229, 239, 455, 229, 799, 525, 527,
	525, 525, 349, 391, 335, 525, 452, 715, 433, 453, 395, 314, 460, 314, 498,
}

// width is how wide s is about, in widths of a digit at 11 points: the unit
// that column widths are given in. Other scripts than Latin are guessed wide.
func width(s string, size float64, bold bool) float64 {
	total := 0
	for _, r := range s {
		switch {
		case r == '\u00a0':
			total += advances[0]
		case r >= ' ' && int(r-' ') < len(advances):
			total += advances[r-' ']
		case r > 0x2e80: // ideographs and the like fill the square
			total += 1000
		default:
			total += 620
		}
	}
	digits := float64(total) / 507 * size / 11
	if bold {
		digits *= 1.03 // Carlito Bold over Carlito, on English text
	}
	return digits
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
