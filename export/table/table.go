// Package table writes small tables for people and programs: text for a
// terminal, CSV for a spreadsheet, and JSON.
package table

import (
	"io"
	"regexp"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"
)

// Table is a table in words: figures are already formatted, each with its unit
// or with the unit in the heading. A row may be shorter than the heading, never
// longer.
type Table struct {
	Title string
	Head  []string
	Rows  [][]string
	Notes []string // sentences under the table
}

// lines draws with characters that every terminal has: a rule under the
// heading, two spaces between columns, and nothing else.
var lines = table.Style{
	Name: "lines",
	Box: table.BoxStyle{MiddleHorizontal: "-", MiddleSeparator: "  ", MiddleVertical: "  ", PaddingLeft: "", PaddingRight: "",
		Left: "", Right: "", LeftSeparator: "", RightSeparator: ""},
	Format:  table.FormatOptions{Header: text.FormatDefault, Row: text.FormatDefault},
	Options: table.Options{SeparateHeader: true, SeparateColumns: true},
}

// Text writes the table for a terminal. Columns of figures are set flush
// right. There is no colour and no trailing space.
func (t Table) Text(w io.Writer) error {
	var b strings.Builder
	if t.Title != "" {
		b.WriteString(shown(t.Title) + "\n")
	}
	if len(t.Head) > 0 {
		b.WriteString(t.body())
	}
	for _, n := range t.Notes {
		b.WriteString(shown(n) + "\n")
	}
	_, err := io.WriteString(w, b.String())
	return err
}

// body is heading and rows.
func (t Table) body() string {
	out := table.NewWriter()
	out.SetStyle(lines)
	var columns []table.ColumnConfig
	for i := range t.Head {
		if t.figures(i) {
			columns = append(columns, table.ColumnConfig{Number: i + 1, Align: text.AlignRight, AlignHeader: text.AlignRight})
		}
	}
	out.SetColumnConfigs(columns)
	out.AppendHeader(row(t.Head, len(t.Head)))
	for _, r := range t.Rows {
		out.AppendRow(row(r, len(t.Head)))
	}
	var b strings.Builder
	for line := range strings.Lines(out.Render() + "\n") {
		b.WriteString(strings.TrimRight(line, " \n") + "\n")
	}
	return b.String()
}

// row is cells made fit for a terminal, as many as there are columns.
func row(cells []string, n int) table.Row {
	r := make(table.Row, n)
	for i := range r {
		r[i] = ""
		if i < len(cells) {
			r[i] = shown(cells[i])
		}
	}
	return r
}

// figure is a number, perhaps with a unit, a sign, or bounds: "12", "-4.7 kΩ",
// "±5 %", "< 0.1 %", "1.3..2.2 kHz".
var figure = regexp.MustCompile(`^[<>±~]?\s?[-+−]?[0-9][0-9.,\s]*([eE][-+]?[0-9]+)?(\s?(\.\.|–|…)\s?[-+−]?[0-9][0-9.]*)?(\s?[\pL%°µΩ][\pL%°µΩ/²³·]*)?$`)

// figures says whether a column holds figures: at least one, and nothing else
// but blanks and dashes.
func (t Table) figures(column int) bool {
	found := false
	for _, r := range t.Rows {
		if column >= len(r) {
			continue
		}
		switch c := strings.TrimSpace(r[column]); {
		case c == "" || c == "-" || c == "–":
		case figure.MatchString(c):
			found = true
		default:
			return false
		}
	}
	return found
}

// shown makes text fit for one line of a terminal: no control characters, so
// that a name in a file cannot move the cursor, and valid UTF-8.
func shown(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\t' || r == '\r':
			return ' '
		case r == utf8.RuneError:
			return '?'
		case unicode.IsControl(r) || unicode.Is(unicode.Bidi_Control, r):
			return -1
		}
		return r
	}, s)
}
