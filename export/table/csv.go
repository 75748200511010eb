package table

import (
	"encoding/csv"
	"io"
	"regexp"
	"strings"
)

// CSV writes heading and rows as comma-separated values, lines ending in a
// line feed; title and notes are left out. A text that a spreadsheet would take
// for a formula (it begins with = + - @, a tab or a carriage return) gets an
// apostrophe in front; figures, with or without a unit, are left alone.
func (t Table) CSV(w io.Writer) error {
	out := csv.NewWriter(w)
	for _, r := range append([][]string{t.Head}, t.Rows...) {
		cells := make([]string, len(t.Head))
		for i := range cells {
			if i < len(r) {
				cells[i] = guarded(r[i])
			}
		}
		if err := out.Write(cells); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}

// plain is a number with at most a unit after it: nothing to execute.
var plain = regexp.MustCompile(`^[-+]?[0-9]+(\.[0-9]+)?([eE][-+]?[0-9]+)?( ?[\pL%°µΩ][\pL%°µΩ/²³·]*)?$`)

func guarded(s string) string {
	if s != "" && strings.ContainsRune("=+-@\t\r", rune(s[0])) && !plain.MatchString(s) {
		return "'" + s
	}
	return s
}
