package cli

import (
	"fmt"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"
)

// width is how many columns of a terminal the text takes.
const width = 110

// line prints a line of text.
func (p *program) line(format string, args ...any) {
	fmt.Fprintf(&p.out, format+"\n", args...)
}

// section prints a table under its title, or nothing where it has no rows.
func (p *program) section(title string, header []string, rows [][]string) {
	if len(rows) == 0 {
		return
	}
	p.line("\n%s", title)
	p.table("  ", header, rows)
}

// paragraph prints a text under its title, or nothing where there is none.
func (p *program) paragraph(title, body string) {
	if body == "" {
		return
	}
	p.line("\n%s", title)
	for line := range strings.Lines(text.WrapSoft(body, width-2)) {
		p.line("  %s", strings.TrimRight(line, " \n"))
	}
}

// table prints rows under a header, columns two spaces apart. Columns of
// figures stand to the right; the last column takes what width is left.
func (p *program) table(indent string, header []string, rows [][]string) {
	t := table.NewWriter()
	style := table.Style{Name: "plain", Box: table.BoxStyle{PaddingRight: "  ", MiddleHorizontal: "-"}}
	style.Format = table.FormatOptions{Header: text.FormatDefault, Row: text.FormatDefault}
	style.Options = table.Options{SeparateHeader: true}
	t.SetStyle(style)
	used := len(indent)
	var columns []table.ColumnConfig
	for i := range header {
		c := table.ColumnConfig{Number: i + 1}
		if figures(rows, i) {
			c.Align, c.AlignHeader = text.AlignRight, text.AlignRight
		}
		if i == len(header)-1 {
			c.WidthMax, c.WidthMaxEnforcer = max(width-used, 24), text.WrapSoft
		}
		used += widest(header[i], rows, i) + 2
		columns = append(columns, c)
	}
	t.SetColumnConfigs(columns)
	t.AppendHeader(cells(header))
	for _, r := range rows {
		t.AppendRow(cells(r))
	}
	for line := range strings.Lines(t.Render()) {
		p.line("%s%s", indent, strings.TrimRight(line, " \n"))
	}
}

func cells(words []string) table.Row {
	row := make(table.Row, len(words))
	for i, w := range words {
		row[i] = w
	}
	return row
}

// figures says whether a column holds nothing but figures.
func figures(rows [][]string, column int) bool {
	for _, r := range rows {
		if strings.Trim(r[column], "-+.0123456789 %–∞") != "" {
			return false
		}
	}
	return true
}

func widest(header string, rows [][]string, column int) int {
	w := text.RuneWidthWithoutEscSequences(header)
	for _, r := range rows {
		w = max(w, text.RuneWidthWithoutEscSequences(r[column]))
	}
	return w
}
