package workbook

import (
	"fmt"

	"github.com/xuri/excelize/v2"
)

// page is one sheet being written from the top down. What excelize wants
// before the first row, between rows and after the last is kept in order here;
// calls made at another time would be lost without an error.
type page struct {
	*book
	name   string
	widths []float64
	out    *excelize.StreamWriter
	last   int     // the last row written
	tall   float64 // all rows together, points
}

// setup is how a page prints and scrolls.
type setup struct {
	landscape bool
	percent   uint    // of full size; 0 fits the width to one page, and takes no page breaks
	onePage   float64 // with percent 0: rows less tall than this, in points, are drawn together on one page
	frozen    int     // columns that stay when scrolling
	headRow   int     // the row of column headings; rows down to it stay when scrolling
}

// open starts a sheet with the given column widths (in digits at 11 points).
func (b *book) open(name string, widths []float64, s setup) *page {
	p := &page{book: b, name: name, widths: widths}
	fit := s.percent == 0
	tab := copper
	b.keep(b.file.SetSheetProps(name, &excelize.SheetPropsOptions{FitToPage: &fit, TabColorRGB: &tab}))
	out, err := b.file.NewStreamWriter(name)
	b.keep(err)
	if err != nil {
		return p
	}
	p.out = out
	for i, w := range widths {
		p.keep(out.SetColWidth(i+1, i+1, w))
	}
	if s.headRow > 0 {
		pane := "bottomLeft"
		if s.frozen > 0 {
			pane = "bottomRight"
		}
		p.keep(out.SetPanes(&excelize.Panes{Freeze: true, XSplit: s.frozen, YSplit: s.headRow, TopLeftCell: at(s.frozen+1, s.headRow+1), ActivePane: pane}))
	}
	no, zoom := false, 100.0
	if s.frozen > 0 {
		zoom = 85 // leaves room beside the columns that stay
	}
	p.keep(b.file.SetSheetView(name, -1, &excelize.ViewOptions{ShowGridLines: &no, ZoomScale: &zoom}))
	return p
}

// put writes the next row and returns its number. A height of 0 is one line.
func (p *page) put(height float64, cells ...excelize.Cell) int {
	p.last++
	if height == 0 {
		height = 17
	}
	height = min(height, 409) // the highest a row can be
	p.tall += height
	if p.out == nil {
		return p.last
	}
	row := make([]any, len(cells))
	for i, c := range cells {
		if c.StyleID != 0 || c.Value != nil || c.Formula != "" {
			row[i] = c
		}
	}
	p.keep(p.out.SetRow(at(1, p.last), row, excelize.RowOpts{Height: height}))
	return p.last
}

// merge joins the cells of the last row from one column to another.
func (p *page) merge(from, to int) {
	if p.out != nil && to > from {
		p.keep(p.out.MergeCell(at(from, p.last), at(to, p.last)))
	}
}

// mergeRows joins the cells of a column from one row to another.
func (p *page) mergeRows(column, from, to int) {
	if p.out != nil && to > from {
		p.keep(p.out.MergeCell(at(column, from), at(column, to)))
	}
}

// wide is the width of the columns from one to another, together.
func (p *page) wide(from, to int) float64 {
	w := 0.0
	for _, c := range p.widths[from-1 : to] {
		w += c
	}
	return w
}

// heading writes the two title rows every sheet begins with.
func (p *page) heading(title, below string) {
	n := len(p.widths)
	p.span(27, 1, n, p.text(title, look{size: 17, bold: true, down: "bottom"}), look{})
	p.span(16, 1, n, p.text(below, look{size: 9, ink: faded, bottom: heavy}), look{bottom: heavy})
	p.put(8)
}

// span writes one cell over several columns, the rest drawn as given so that
// a border runs on under all of them.
func (p *page) span(height float64, from, to int, c excelize.Cell, rest look) int {
	cells := make([]excelize.Cell, to)
	for i := from; i < to; i++ {
		cells[i] = p.text("", rest)
	}
	cells[from-1] = c
	row := p.put(height, cells...)
	p.merge(from, to)
	return row
}

// section writes a heading within a sheet.
func (p *page) section(title string) int {
	p.put(9)
	return p.span(20, 1, len(p.widths), p.text(title, look{size: 12, bold: true, ink: copper, bottom: rule}), look{bottom: rule})
}

// paragraph writes text over columns, as many lines high as it needs.
func (p *page) paragraph(s string, from, to int, l look) int {
	l.wrap = true
	n := lines(clean(s), p.wide(from, to), l.points(), l.bold)
	return p.span(lineHeight(l.points(), n), from, to, p.text(s, l), look{})
}

// indentedIf sets a text off from what stands to its left.
func indentedIf(so bool, l look) look {
	if so {
		l.indent = 1
	}
	return l
}

// indented is how much narrower an indent of one makes a column.
const indented = 1.5

// lineHeight is the height of n lines of text with air above and below.
func lineHeight(points float64, n int) float64 {
	return float64(n)*points*1.28 + 4.2
}

// heads writes a row of column headings, high enough for the tallest. across
// has a letter a column: l, r, c, or i for left with an indent.
func (p *page) heads(across string, titles ...string) int {
	cells := make([]excelize.Cell, len(titles))
	n := 1
	for i, t := range titles {
		if i >= len(p.widths) { // beside the page, where only charts look
			cells[i] = p.text(t, look{size: 8, ink: faded, down: "bottom"})
			continue
		}
		l := look{size: 9, bold: true, fill: tint, wrap: true, down: "bottom", top: rule, bottom: rule}
		if i < len(across) && across[i] == 'r' {
			l.across = "right"
		}
		if i < len(across) && across[i] == 'c' {
			l.across = "center"
		}
		if i < len(across) && across[i] == 'i' { // beside figures
			l.indent = 1
		}
		cells[i] = p.text(t, l)
		n = max(n, lines(t, p.widths[i], 9, true))
	}
	return p.put(lineHeight(9, n)+3, cells...)
}

// text is a cell of text, made fit to be one.
func (p *page) text(s string, l look) excelize.Cell {
	if s = clean(s); s == "" {
		return excelize.Cell{StyleID: p.style(l)}
	}
	return excelize.Cell{StyleID: p.style(l), Value: s}
}

// number is a cell with a figure; one that does not exist is a dash. Cells
// that formulas read must be empty instead: see limit.
func (p *page) number(v float64, format string, l look) excelize.Cell {
	l.across = or(l.across, "right")
	if !finite(v) {
		return excelize.Cell{StyleID: p.style(l), Value: "–"}
	}
	l.format = format
	return excelize.Cell{StyleID: p.style(l), Value: v}
}

// limit is a figure that formulas compare with; one that does not exist is an
// empty cell.
func (p *page) limit(v float64, format string, l look) excelize.Cell {
	c := p.number(v, format, l)
	if !finite(v) {
		c.Value = nil
	}
	return c
}

// live is a formula with its result, worked out here: excelize stores none,
// and programs that only show a file would show nothing.
func (p *page) live(formula string, result any, l look) excelize.Cell {
	return excelize.Cell{StyleID: p.style(l), Formula: formula, Value: result}
}

// close sets up printing and protection, and ends the sheet. titleRow is the
// row of column headings that every printed page repeats; 0 for none.
func (p *page) close(s setup, titleRow int) {
	if p.out == nil {
		return
	}
	if titleRow > 0 && s.frozen == 0 {
		p.scoped(printTitles, fmt.Sprintf("'%s'!$%d:$%d", p.name, titleRow, titleRow))
	}
	p.scoped(printArea, fmt.Sprintf("'%s'!$A$1:$%s$%d", p.name, letters(len(p.widths)), p.last))
	p.print(s)
	p.protect()
	p.keep(p.out.Flush())
}

// The names by which every spreadsheet program knows what to print.
const (
	printTitles = "_xlnm.Print_Titles"
	printArea   = "_xlnm.Print_Area"
)

// scoped defines a name that belongs to this sheet.
func (p *page) scoped(name, refers string) {
	p.keep(p.file.SetDefinedName(&excelize.DefinedName{Name: name, RefersTo: refers, Scope: p.name}))
}

// print sets paper, margins (inches) and footer.
func (p *page) print(s setup) {
	size, way, order, scale := 9, "portrait", "overThenDown", max(s.percent, 10)
	if p.plan.Paper == Letter {
		size = 1
	}
	if s.landscape {
		way = "landscape"
	}
	layout := excelize.PageLayoutOptions{Size: &size, Orientation: &way, PageOrder: &order}
	if s.percent > 0 {
		layout.AdjustTo = &scale
	} else {
		one, down := 1, 0
		if p.tall < s.onePage {
			down = 1
		}
		layout.FitToWidth, layout.FitToHeight = &one, &down
	}
	p.keep(p.file.SetPageLayout(p.name, &layout))
	side, top, bottom, edge := 0.25, 0.45, 0.6, 0.25
	p.keep(p.file.SetPageMargins(p.name, &excelize.PageLayoutMarginsOptions{Left: &side, Right: &side, Top: &top, Bottom: &bottom, Header: &edge, Footer: &edge}))
	p.keep(p.file.SetHeaderFooter(p.name, &excelize.HeaderFooterOptions{
		OddFooter: fmt.Sprintf("&L&8%s · plan %s&C&8%s&R&8Page &P of &N", printed(p.plan.Title), printed(p.plan.short()), p.name),
	}))
}

// protect locks what is not meant to be typed in. There is no password: it is
// a guard rail, not a lock.
func (p *page) protect() {
	p.keep(p.file.ProtectSheet(p.name, &excelize.SheetProtectionOptions{
		SelectLockedCells: true, SelectUnlockedCells: true, FormatColumns: true, FormatRows: true,
	}))
}

// short is the digest as people compare it by eye.
func (p Plan) short() string {
	if len(p.Digest) > 8 {
		return p.Digest[:8]
	}
	return or(p.Digest, "–")
}

// at names a cell: at(3, 7) is "C7". Coordinates are ours, never a user's.
func at(column, row int) string {
	name, err := excelize.CoordinatesToCellName(column, row)
	if err != nil {
		panic("workbook: " + err.Error())
	}
	return name
}

// letters names a column: letters(28) is "AB".
func letters(column int) string {
	name, err := excelize.ColumnNumberToName(column)
	if err != nil {
		panic("workbook: " + err.Error())
	}
	return name
}
