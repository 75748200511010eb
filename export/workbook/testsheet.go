package workbook

import (
	"fmt"
	"strings"

	"github.com/xuri/excelize/v2"
)

// The test sheet's rows above the readings, and its fixed columns A to K.
const (
	unitRow     = 8 // column headings and unit numbers
	serialRow   = 9
	verdictRow  = 10
	fixedCols   = 11
	unitsAPage  = 10
	unitColumn  = 8.3
	testPercent = 65 // the fixed columns and ten units fit the width of A4 and of Letter
)

// tally is where the summary finds the verdicts: "'Test sheet'!M10:AJ10".
type tally string

// test writes the sheet the readings are typed into.
func (b *book) test() tally {
	rows := b.plan.benchRows()
	g := grid{firstRow: verdictRow + 1, firstCol: fixedCols + 1, lastCol: fixedCols + b.plan.Units}
	g.lastRow = g.firstRow + max(1, len(rows)+bands(rows)) - 1
	widths := []float64{5, 20.3, 26.5, 18, 5.5, 8.6, 8.6, 8.6, 8.6, 8.6, 5}
	for range b.plan.Units {
		widths = append(widths, unitColumn)
	}
	s := setup{landscape: true, percent: testPercent, frozen: fixedCols, headRow: verdictRow}
	p := b.open(testSheet, widths, s)
	p.testHead(g)
	notes := p.testBody(rows, g)
	p.testFoot(notes)
	p.signals(g)
	verdicts := fmt.Sprintf("%s:%s", at(g.firstCol, verdictRow), at(g.lastCol, verdictRow))
	p.verdictSignals(verdicts, at(g.firstCol, verdictRow))
	p.numbersOnly(g)
	p.pageBreaks(g)
	p.names(g)
	p.scoped(printTitles, fmt.Sprintf("'%s'!$A:$%s,'%s'!$1:$%d", p.name, letters(fixedCols), p.name, verdictRow))
	p.close(s, 0)
	return tally(fmt.Sprintf("'%s'!%s", testSheet, strings.ReplaceAll("$"+letters(g.firstCol)+"$#:$"+letters(g.lastCol)+"$#", "#", fmt.Sprint(verdictRow))))
}

// testHead writes title, fields, legend and column headings. Titles stay
// within the fixed columns: printed pages cut them off there.
func (p *page) testHead(g grid) {
	p.span(27, 1, fixedCols, p.text(cut(clean(p.plan.Title), 90), look{size: 17, bold: true, down: "bottom"}), look{})
	p.span(16, 1, fixedCols, p.text(fmt.Sprintf("Test sheet · %s · plan %s · type what the meter shows, in the row's unit", plural(p.plan.Units, "unit"), p.plan.short()), look{size: 9, ink: faded, bottom: heavy}), look{bottom: heavy})
	p.put(6)
	p.field("Tested by", "Date")
	p.field("Instruments, serial numbers", "Room, °C")
	p.span(18, 1, fixedCols, p.text("▼ ▲ below, above what a good unit shows: check its parts.   ▽ △ misses the proof of a target.   ? no number.   begun: readings are missing.", look{size: 9, ink: faded}), look{})
	p.groupHeads()
	p.unitHeads(g)
	p.serials(g)
	p.verdicts(g)
}

// field writes two labelled places to type into.
func (p *page) field(left, right string) {
	label, place := look{size: 9, ink: faded}, look{fill: sky, open: true, bottom: hairline}
	cells := make([]excelize.Cell, fixedCols)
	cells[0], cells[1] = p.text(left, label), p.text("", label)
	cells[2], cells[3] = p.text("", place), p.text("", place)
	cells[5] = p.text(right, label)
	for i := 6; i < 10; i++ {
		cells[i] = p.text("", place)
	}
	p.put(19, cells...)
	p.merge(1, 2)
	p.merge(3, 4)
	p.merge(7, 10)
}

func (p *page) groupHeads() {
	cells := make([]excelize.Cell, fixedCols)
	over := look{size: 9, bold: true, ink: copper, across: "center", bottom: rule}
	for i := range 4 {
		cells[6+i] = p.text("", over)
	}
	cells[6], cells[8] = p.text("A good unit shows", over), p.text("Proves the target", over)
	p.put(16, cells...)
	p.merge(7, 8)
	p.merge(9, 10)
}

func (p *page) unitHeads(g grid) {
	head := look{size: 9, bold: true, fill: tint, wrap: true, top: rule, bottom: rule, down: "center"}
	right := head
	right.across = "right"
	var cells []excelize.Cell
	for _, t := range []string{"Step", "Test point", "Hold the probe at", "Read", "Unit"} {
		cells = append(cells, p.text(t, indentedIf(t == "Read", head)))
	}
	for _, t := range []string{"Nominal", "at least", "at most", "at least", "at most"} {
		cells = append(cells, p.text(t, right))
	}
	head.across = "center"
	cells = append(cells, p.text("Out", head))
	for u := 1; u <= p.plan.Units; u++ {
		l := head
		l.left = hairline
		l.format = `"unit "0`
		cells = append(cells, excelize.Cell{StyleID: p.style(l), Value: u})
	}
	p.put(21, cells...)
}

// serials is a row for what is written on the units.
func (p *page) serials(g grid) {
	cells := make([]excelize.Cell, g.lastCol)
	for i := range fixedCols {
		cells[i] = p.text("", look{})
	}
	cells[5] = p.text("Serial number, if it has one", look{size: 9, ink: faded, across: "right", indent: 1})
	for c := g.firstCol; c <= g.lastCol; c++ {
		cells[c-1] = p.text("", look{fill: sky, open: true, left: hairline, bottom: hairline, across: "center", size: 9})
	}
	p.put(17, cells...)
	p.merge(6, fixedCols)
}

func (p *page) verdicts(g grid) {
	cells := make([]excelize.Cell, g.lastCol)
	for i := range fixedCols {
		cells[i] = p.text("", look{bottom: rule})
	}
	cells[5] = p.text("Verdict", look{bold: true, across: "right", bottom: rule, indent: 1})
	for c := g.firstCol; c <= g.lastCol; c++ {
		cells[c-1] = p.live(g.verdict(c), untouched, look{bold: true, across: "center", bottom: rule, left: hairline})
	}
	p.put(19, cells...)
	p.merge(6, fixedCols)
}

// bands counts the rows that begin a condition.
func bands(rows []benchRow) int {
	n := 0
	for i := range rows {
		if begins(rows, i) {
			n++
		}
	}
	return n
}

func begins(rows []benchRow, i int) bool {
	return i == 0 || rows[i].condition != rows[i-1].condition
}

// testBody writes the rows in bench order and returns the notes on them.
func (p *page) testBody(rows []benchRow, g grid) []string {
	if len(rows) == 0 {
		p.span(20, 1, fixedCols, p.text("There is nothing to measure in this build.", look{italic: true, ink: faded}), look{})
	}
	for i, r := range rows {
		if begins(rows, i) {
			p.band(r)
		}
		p.benchRow(r, g)
	}
	if p.last != g.lastRow {
		p.keep(fmt.Errorf("the readings end in row %d, not %d", p.last, g.lastRow))
	}
	return whys(rows)
}

// whys are the reasons for what is missing and the notes on what is there, each
// once with the steps it is for.
func whys(rows []benchRow) []string {
	steps := map[string][]int{}
	var order []string
	for _, r := range rows {
		for _, said := range []string{r.why, r.note} {
			if said == "" {
				continue
			}
			if steps[said] == nil {
				order = append(order, said)
			}
			steps[said] = append(steps[said], r.step)
		}
	}
	var notes []string
	for _, why := range order {
		word := "Step "
		if len(steps[why]) > 1 {
			word = "Steps "
		}
		notes = append(notes, word+runs(steps[why])+": "+why)
	}
	return notes
}

// band begins a condition, with what to set up on the bench.
func (p *page) band(r benchRow) {
	words := p.plan.setUp(r.condition)
	l := look{bold: true, ink: copper, bottom: rule, down: "bottom", wrap: true}
	n := lines(words, p.wide(1, fixedCols), 10, true)
	p.span(max(22, lineHeight(10, n)+3), 1, fixedCols, p.text(words, l), l)
}

// setUp says what condition to make.
func (p Plan) setUp(condition string) string {
	words := "Condition: " + or(clean(condition), "as it comes")
	for _, c := range p.Conditions {
		if c.Name == condition && clean(c.Text) != "" {
			words += ". Set up: " + clean(c.Text)
		}
	}
	return words
}

// benchRow writes one reading or adjustment.
func (p *page) benchRow(r benchRow, g grid) {
	text := look{bottom: hairline, wrap: true}
	strong, figure := bolder(text), look{bottom: hairline}
	fill := ""
	if r.turn {
		fill = tint
	}
	text.fill, strong.fill, figure.fill = fill, fill, fill
	nominal := bolder(figure)
	name := r.name
	if r.turn {
		name = "turn " + name
	}
	row := p.last + 1
	count := look{bottom: hairline, bold: true, across: "center", format: "0;;", fill: fill, ink: brick}
	cells := []excelize.Cell{
		p.number(float64(r.step), "0", look{bottom: hairline, across: "center", size: 9, ink: faded, fill: fill}), p.text(name, strong), p.text(r.at, text), p.text(r.read, indentedIf(true, text)), p.text(r.symbol, text),
		p.limit(r.nominal, r.format(), nominal), p.limit(r.low, r.format(), figure), p.limit(r.high, r.format(), figure),
		p.limit(r.acceptLow, r.format(), figure), p.limit(r.acceptHigh, r.format(), figure), p.live(g.outsideCount(row), "", count),
	}
	open := look{fill: sky, open: true, bottom: hairline, left: hairline, across: "right", format: r.format()}
	for range p.plan.Units {
		cells = append(cells, p.text("", open))
	}
	n := max(p.tallest(10, "", "", r.at), lines(clean(r.read), p.widths[3]-indented, 10, false), lines(clean(name), p.widths[1], 10, true))
	p.put(max(19, lineHeight(10, n)), cells...)
}

// testFoot writes the notes on rows and lines to write on.
func (p *page) testFoot(notes []string) {
	p.put(8)
	for _, n := range notes {
		p.paragraph(n, 1, fixedCols, look{size: 9, ink: faded})
	}
	place := look{fill: sky, open: true, bottom: hairline}
	for _, label := range []string{"Notes", "", ""} {
		cells := make([]excelize.Cell, fixedCols)
		cells[0] = p.text(label, look{size: 9, ink: faded})
		for i := 1; i < fixedCols; i++ {
			cells[i] = p.text("", place)
		}
		p.put(18, cells...)
		p.merge(2, fixedCols)
	}
}

// numbersOnly has the program ask before it takes something that is not a
// number. It can be insisted on: "O.L" is a reading too.
func (p *page) numbersOnly(g grid) {
	v := excelize.NewDataValidation(true)
	v.SetSqref(g.area())
	p.keep(v.SetRange(-1e9, 1e9, excelize.DataValidationTypeDecimal, excelize.DataValidationOperatorBetween))
	v.SetError(excelize.DataValidationErrorStyleWarning, "Not a number",
		"Type the figure alone, in the unit of the row and with the decimal mark your computer uses. Keep this only if the meter shows no number.")
	p.keep(p.file.AddDataValidation(p.name, v))
}

// pageBreaks puts the same number of units on every printed page.
func (p *page) pageBreaks(g grid) {
	for c := g.firstCol + unitsAPage; c <= g.lastCol && p.out != nil; c += unitsAPage {
		p.keep(p.out.InsertPageBreak(at(c, 1)))
	}
}

// names lets a reader find the grid again, wherever rows and columns were
// moved to: by name first, then by test point and unit number.
func (p *page) names(g grid) {
	fixed := func(column int) string {
		return fmt.Sprintf("'%s'!$%s$%d:$%s$%d", p.name, letters(column), g.firstRow, letters(column), g.lastRow)
	}
	across := func(row int) string {
		return fmt.Sprintf("'%s'!$%s$%d:$%s$%d", p.name, letters(g.firstCol), row, letters(g.lastCol), row)
	}
	for _, n := range []struct{ name, refers string }{
		{"plan_steps", fixed(1)}, {"plan_points", fixed(2)}, {"plan_symbols", fixed(5)},
		{"plan_units", across(unitRow)}, {"plan_serials", across(serialRow)}, {"plan_verdicts", across(verdictRow)},
		{"plan_readings", fmt.Sprintf("'%s'!$%s$%d:$%s$%d", p.name, letters(g.firstCol), g.firstRow, letters(g.lastCol), g.lastRow)},
	} {
		p.keep(p.file.SetDefinedName(&excelize.DefinedName{Name: n.name, RefersTo: n.refers}))
	}
}
