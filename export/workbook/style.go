package workbook

import "github.com/xuri/excelize/v2"

// The palette: ink on paper, copper for structure, three quiet signals. It was
// chosen to stay apart in grey print: only signals have darker fills, and each
// also has a word or a mark.
const (
	ink    = "33302C" // text
	faded  = "756E66" // what is there but seldom read
	copper = "A4602F" // rules and headings
	tint   = "F6EEE6" // heading rows
	hair   = "D9D0C6" // lines between rows
	sky    = "EAF2F8" // cells to type in
	sage   = "E6EFE3"
	rose   = "F6D8D3"
	straw  = "FBEBC2"
	brick  = "8E1F14" // text on rose
	umber  = "6B4A00" // text on straw
	moss   = "2F5230" // text on sage
)

const font = "Calibri" // LibreOffice draws it with its metric twin, Carlito

// edge is a cell's border: none, a hair line, or a copper rule.
type edge byte

const (
	bare edge = iota
	hairline
	rule
	heavy
)

// look is how a cell is drawn; the zero value is plain body text. It can be a
// map key, so that a style is made once.
type look struct {
	size         float64 // points; 0 is 10
	bold, italic bool
	ink, fill    string
	across, down string // alignment; "" is left, centre
	wrap, open   bool   // open cells can be typed in
	format       string // number format
	top, bottom  edge
	left, right  edge
	indent       int
}

// style makes the look known to the file, once.
func (b *book) style(l look) int {
	if id, ok := b.styles[l]; ok {
		return id
	}
	id, err := b.file.NewStyle(l.style())
	b.keep(err)
	b.styles[l] = id
	return id
}

func (l look) style() *excelize.Style {
	s := &excelize.Style{
		Font:       &excelize.Font{Family: font, Size: l.points(), Bold: l.bold, Italic: l.italic, Color: or(l.ink, ink)},
		Alignment:  &excelize.Alignment{Horizontal: or(l.across, "left"), Vertical: or(l.down, "center"), WrapText: l.wrap, Indent: l.indent},
		Protection: &excelize.Protection{Locked: !l.open},
	}
	if l.fill != "" {
		s.Fill = excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{l.fill}}
	}
	if l.format != "" {
		s.CustomNumFmt = &l.format
	}
	for _, e := range []struct {
		side string
		edge edge
	}{{"top", l.top}, {"bottom", l.bottom}, {"left", l.left}, {"right", l.right}} {
		if b, ok := e.edge.border(e.side); ok {
			s.Border = append(s.Border, b)
		}
	}
	return s
}

func (l look) points() float64 {
	if l.size == 0 {
		return 10
	}
	return l.size
}

// border is excelize's idea of the edge; its styles 1, 2 and 5 are thin,
// medium and thick.
func (e edge) border(side string) (excelize.Border, bool) {
	switch e {
	case hairline:
		return excelize.Border{Type: side, Color: hair, Style: 1}, true
	case rule:
		return excelize.Border{Type: side, Color: copper, Style: 1}, true
	case heavy:
		return excelize.Border{Type: side, Color: copper, Style: 2}, true
	}
	return excelize.Border{}, false
}

func or(s, otherwise string) string {
	if s == "" {
		return otherwise
	}
	return s
}
