package cli

import (
	"bytes"
	"fmt"
	"strings"
	"unicode"

	"github.com/jedib0t/go-pretty/v6/text"

	"batchwright/export/table"
)

// width is how many columns of a terminal the text takes.
const width = 112

// narrowest is how far the last column of a table is squeezed.
const narrowest = 24

// line prints a line of text, or several.
func (p *program) line(format string, args ...any) {
	fmt.Fprintln(&p.out, harmless(fmt.Sprintf(format, args...)))
}

// harmless takes out what could move a terminal's cursor: titles and names
// come from files.
func harmless(s string) string {
	return strings.Map(func(r rune) rune {
		if r != '\n' && (unicode.IsControl(r) || unicode.Is(unicode.Bidi_Control, r)) {
			return -1
		}
		return r
	}, s)
}

// paragraph prints a text under its title, or nothing where there is none.
func (p *program) paragraph(title, body string) {
	if body == "" {
		return
	}
	p.line("\n%s", title)
	for _, line := range wrapped(body, width-2) {
		p.line("  %s", line)
	}
}

// verbatim prints lines as they stand under their title.
func (p *program) verbatim(title, body string) {
	if body == "" {
		return
	}
	p.line("\n%s", title)
	for line := range strings.Lines(body) {
		p.line("  %s", strings.TrimRight(line, "\n"))
	}
}

// section prints a table under its title, or nothing where it has no rows.
func (p *program) section(title string, head []string, rows [][]string) {
	if len(rows) == 0 {
		return
	}
	p.line("\n%s", title)
	p.table("  ", head, rows)
}

// table prints rows under a heading. The last column takes what width is left
// and goes on over further lines.
func (p *program) table(indent string, head []string, rows [][]string) {
	last := len(head) - 1
	left := width - len(indent)
	for i := range last {
		left -= widest(head[i], rows, i) + 2
	}
	t := table.Table{Head: head}
	for _, r := range rows {
		for i, line := range wrapped(r[last], max(left, narrowest)) {
			row := make([]string, len(head))
			if i == 0 {
				copy(row, r)
			}
			row[last] = line
			t.Rows = append(t.Rows, row)
		}
	}
	var b bytes.Buffer
	if err := t.Text(&b); err != nil {
		panic("cli: " + err.Error()) // a buffer takes everything
	}
	for line := range strings.Lines(b.String()) {
		p.out.WriteString(indent + line)
	}
}

// wrapped breaks a text into lines no wider than width, one at least.
func wrapped(body string, width int) []string {
	var lines []string
	for _, whole := range strings.Split(strings.TrimRight(body, "\n"), "\n") {
		for _, line := range strings.Split(text.WrapSoft(whole, width), "\n") {
			lines = append(lines, strings.TrimRight(line, " "))
		}
	}
	return lines
}

func widest(head string, rows [][]string, column int) int {
	w := text.RuneWidthWithoutEscSequences(head)
	for _, r := range rows {
		w = max(w, text.RuneWidthWithoutEscSequences(r[column]))
	}
	return w
}
