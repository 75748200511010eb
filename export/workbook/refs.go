package workbook

import (
	"strings"

	"github.com/xuri/excelize/v2"
)

// canonical writes a formula so that two spellings of one can be compared: no
// spaces, no $, capitals, every reference put through move. Texts in quotes
// stay. ok is false if move knows no place for a reference.
func canonical(formula, sheet string, move func(sheet string, p place) (string, place, bool)) (text string, ok bool) {
	var b strings.Builder
	rest := strings.TrimPrefix(formula, "=")
	on, named := sheet, false
	for rest != "" {
		switch c := rest[0]; {
		case c == '"':
			n := closing(rest, '"')
			b.WriteString(rest[:n])
			rest = rest[n:]
		case c == '\'':
			n := closing(rest, '\'')
			on, named = strings.ReplaceAll(strings.Trim(rest[:n], "'"), "''", "'"), true
			rest = strings.TrimPrefix(rest[n:], "!")
		case c == ' ' || c == '$':
			rest = rest[1:]
		case wordByte(c):
			n := 0
			for n < len(rest) && wordByte(rest[n]) {
				n++
			}
			word := rest[:n]
			rest = rest[n:]
			if strings.HasPrefix(rest, "!") {
				on, named = word, true
				rest = rest[1:]
				continue
			}
			p, isRef := reference(word)
			if !isRef || strings.HasPrefix(rest, "(") {
				b.WriteString(strings.TrimPrefix(strings.ToUpper(word), "_XLFN."))
				continue
			}
			s, q, found := move(on, p)
			if !found {
				return "", false
			}
			if named {
				b.WriteString(s + "!")
			}
			b.WriteString(q.String())
			if !strings.HasPrefix(rest, ":") { // the end of a range is on the sheet of its start
				on, named = sheet, false
			}
		default:
			b.WriteByte(c)
			rest = rest[1:]
			if c != ':' {
				on, named = sheet, false
			}
		}
	}
	return b.String(), true
}

// stay moves nothing.
func stay(sheet string, p place) (string, place, bool) { return strings.ToUpper(sheet), p, true }

// closing is the length of what quotes enclose at the front of a text; doubled
// ones are inside.
func closing(text string, quote byte) int {
	for i := 1; i < len(text); i++ {
		if text[i] != quote {
			continue
		}
		if i+1 < len(text) && text[i+1] == quote {
			i++
			continue
		}
		return i + 1
	}
	return len(text)
}

func wordByte(c byte) bool {
	return c >= 'A' && c <= 'Z' || c >= 'a' && c <= 'z' || c >= '0' && c <= '9' || c == '_' || c == '.' || c == '$' || c >= 0x80
}

// reference reads "$L$11".
func reference(word string) (place, bool) {
	col, row, err := excelize.CellNameToCoordinates(strings.ReplaceAll(word, "$", ""))
	return place{row, col}, err == nil
}

// area is a block of cells on a sheet, as a name refers to it.
type area struct {
	sheet       string
	first, last place
}

// readArea reads "'Test sheet'!$L$11:$AI$28".
func readArea(refers string) (area, bool) {
	sheet, cells, ok := cutLast(strings.TrimPrefix(refers, "="), "!")
	if !ok {
		return area{}, false
	}
	sheet = strings.ReplaceAll(strings.Trim(strings.TrimPrefix(sheet, "$"), "'"), "''", "'")
	from, to, two := strings.Cut(cells, ":")
	if !two {
		to = from
	}
	first, ok1 := reference(from)
	last, ok2 := reference(to)
	return area{sheet, first, last}, ok1 && ok2 && first.row <= last.row && first.col <= last.col
}

func cutLast(s, separator string) (before, after string, found bool) {
	i := strings.LastIndex(s, separator)
	if i < 0 {
		return s, "", false
	}
	return s[:i], s[i+len(separator):], true
}
