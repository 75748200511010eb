package workbook

import (
	"fmt"

	"github.com/xuri/excelize/v2"
)

// The verdicts on one unit. They are worked out by the sheet as readings are
// typed in; whoever reads a sheet back must work them out again.
const (
	untouched = ""       // nothing typed yet
	begun     = "begun"  // readings are missing
	good      = "good"   // every reading inside
	misses    = "misses" // built right, but a target is not proved
	check     = "check"  // a reading no good unit shows, or one that is no number
)

// grid is where the readings stand on the test sheet.
type grid struct {
	firstRow, lastRow int
	firstCol, lastCol int // the columns of unit 1 and of the last unit
}

// The columns that hold a row's limits.
const (
	lowCol, highCol             = "G", "H"
	acceptLowCol, acceptHighCol = "I", "J"
)

// verdict is the formula of a unit's verdict, its readings being in column c.
// Text counts as a reading nobody could judge. Empty cells are told apart with
// COUNTA and ISNUMBER, since an empty limit would otherwise compare as zero.
func (g grid) verdict(c int) string {
	r := g.down(letters(c))
	outside := func(low, high string) string {
		lo, hi := g.downFixed(low), g.downFixed(high)
		return fmt.Sprintf("SUMPRODUCT(ISNUMBER(%[1]s)*(ISNUMBER(%[2]s)*(%[1]s<%[2]s)+ISNUMBER(%[3]s)*(%[1]s>%[3]s)))", r, lo, hi)
	}
	asked := fmt.Sprintf("((ISNUMBER(%s)+ISNUMBER(%s)+ISNUMBER(%s)+ISNUMBER(%s))>0)", g.downFixed(lowCol), g.downFixed(highCol), g.downFixed(acceptLowCol), g.downFixed(acceptHighCol))
	return fmt.Sprintf(`IF(COUNTA(%[1]s)=0,"",IFERROR(IF(%[2]s+SUMPRODUCT(ISTEXT(%[1]s)*1)>0,"check",IF(%[3]s>0,"misses",IF(SUMPRODUCT(ISNUMBER(%[1]s)*%[4]s)<SUMPRODUCT(%[4]s*1),"begun","good"))),"check"))`,
		r, outside(lowCol, highCol), outside(acceptLowCol, acceptHighCol), asked)
}

// outsideCount is the formula of how many units read outside in one row.
func (g grid) outsideCount(row int) string {
	r := fmt.Sprintf("%s%d:%s%d", letters(g.firstCol), row, letters(g.lastCol), row)
	part := func(column, sign string) string {
		return fmt.Sprintf("ISNUMBER($%[1]s%[2]d)*(%[3]s%[4]s$%[1]s%[2]d)", column, row, r, sign)
	}
	return fmt.Sprintf(`IF(COUNTA(%[1]s)=0,"",SUMPRODUCT(ISNUMBER(%[1]s)*((%[2]s+%[3]s+%[4]s+%[5]s)>0))+SUMPRODUCT(ISTEXT(%[1]s)*1))`,
		r, part(lowCol, "<"), part(highCol, ">"), part(acceptLowCol, "<"), part(acceptHighCol, ">"))
}

func (g grid) down(column string) string {
	return fmt.Sprintf("%s$%d:%s$%d", column, g.firstRow, column, g.lastRow)
}

func (g grid) downFixed(column string) string {
	return g.down("$" + column)
}

// area is the block of all readings.
func (g grid) area() string {
	return fmt.Sprintf("%s:%s", at(g.firstCol, g.firstRow), at(g.lastCol, g.lastRow))
}

// signals marks readings as they are typed in. Direction and kind are shown by
// a mark before the figure, so that they survive a black and white printer.
func (p *page) signals(g grid) {
	cell := at(g.firstCol, g.firstRow)
	compare := func(sign, column string) string {
		limit := fmt.Sprintf("$%s%d", column, g.firstRow)
		return fmt.Sprintf("AND(ISNUMBER(%s),ISNUMBER(%s),%s%s%s)", cell, limit, cell, sign, limit)
	}
	p.signal(g.area(),
		p.mark("ISTEXT("+cell+")", straw, umber, true, `General;General;General;@" ?"_)`),
		p.mark(compare("<", lowCol), rose, brick, true, `"▼ "General_);"▼ "-General_);"▼ "0_)`),
		p.mark(compare(">", highCol), rose, brick, true, `"▲ "General_);"▲ "-General_);"▲ "0_)`),
		p.mark(compare("<", acceptLowCol), straw, umber, true, `"▽ "General_);"▽ "-General_);"▽ "0_)`),
		p.mark(compare(">", acceptHighCol), straw, umber, true, `"△ "General_);"△ "-General_);"△ "0_)`),
		p.mark("ISNUMBER("+cell+")", sage, moss, false, ""))
}

// verdictSignals colours the row of verdicts.
func (p *page) verdictSignals(verdicts, first string) {
	is := func(word string) string { return fmt.Sprintf(`%s="%s"`, first, word) }
	p.signal(verdicts,
		p.mark(is(check), rose, brick, true, ""), p.mark(is(misses), straw, umber, true, ""),
		p.mark(is(good), sage, moss, true, ""), p.mark(is(begun), "EFEBE6", ink, false, ""))
}

// mark is one rule: a formula, and how the cell looks where it holds.
func (p *page) mark(formula, fill, color string, bold bool, format string) excelize.ConditionalFormatOptions {
	s := &excelize.Style{Font: &excelize.Font{Color: color, Bold: bold}, Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{fill}}}
	if format != "" {
		s.CustomNumFmt = &format
	}
	id, err := p.file.NewConditionalStyle(s)
	p.keep(err)
	if dxf := p.file.Styles.Dxfs.Dxfs; err == nil && dxf[id].NumFmt != nil {
		// excelize numbers these formats from 164 on, like those of cells; apart
		// they cannot be taken for each other.
		dxf[id].NumFmt.NumFmtID = 1000 + id
	}
	return excelize.ConditionalFormatOptions{Type: "formula", Criteria: formula, Format: &id, StopIfTrue: true}
}

func (p *page) signal(area string, rules ...excelize.ConditionalFormatOptions) {
	p.keep(p.file.SetConditionalFormat(p.name, area, rules))
}
