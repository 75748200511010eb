package workbook

import (
	"fmt"
	"math"
	"strconv"

	"batchwright/tolerance/bench"

	"github.com/xuri/excelize/v2"
)

// The sheet of readings: fixed columns A to H, then the units.
const (
	reviewedFixed = 8
	reviewedUnits = 15 // a page; with the fixed columns they fit A4 and Letter
	reviewedHead  = 6  // the row of verdicts, the last of the headings
)

// reviewedReadings writes the grid: points by units, with their windows.
func (b *book) reviewedReadings(r Reviewed) {
	widths := []float64{5, 25, 6, 8.6, 8.6, 8.6, 8.6, 5}
	for range r.Units {
		widths = append(widths, unitColumn)
	}
	s := setup{landscape: true, percent: testPercent, frozen: reviewedFixed, headRow: reviewedHead}
	p := b.open(readingsSheet, widths, s)
	p.reviewedHeads(r)
	read, turned := byUnit(r.Filled), byUnit(r.Turned)
	for _, row := range b.plan.benchRows() {
		values := read
		if row.turn {
			values = turned
		}
		p.reviewedRow(row, r.Units, values)
	}
	for c := reviewedFixed + 1 + reviewedUnits; c <= len(widths) && p.out != nil; c += reviewedUnits {
		p.keep(p.out.InsertPageBreak(at(c, 1)))
	}
	p.scoped(printTitles, fmt.Sprintf("'%s'!$A:$%s,'%s'!$1:$%d", p.name, letters(reviewedFixed), p.name, reviewedHead))
	p.close(s, 0)
}

// byUnit are readings by unit and point.
func byUnit(f bench.Filled) map[int]map[string]float64 {
	out := map[int]map[string]float64{}
	for _, u := range f.Units {
		out[u.Unit] = map[string]float64{}
		for i, v := range u.Values {
			if i < len(f.Points) {
				out[u.Unit][f.Points[i]] = float64(v)
			}
		}
	}
	return out
}

// reviewedHeads writes title, legend, headings, units and their verdicts.
// Titles stay within the fixed columns: printed pages cut them off there.
func (p *page) reviewedHeads(r Reviewed) {
	p.span(27, 1, reviewedFixed, p.text(readingsSheet, look{size: 17, bold: true, down: "bottom"}), look{})
	p.span(28, 1, reviewedFixed, p.text("▼ ▲ below, above what a good unit shows.   ▽ △ does not prove a target.", look{size: 9, ink: faded, bottom: heavy, wrap: true}), look{bottom: heavy})
	p.put(6)
	over := look{size: 9, bold: true, ink: copper, across: "center", bottom: rule}
	cells := make([]excelize.Cell, reviewedFixed)
	for i := 3; i < 7; i++ {
		cells[i] = p.text("", over)
	}
	cells[3], cells[5] = p.text("A good unit shows", over), p.text("Proves the target", over)
	p.put(16, cells...)
	p.merge(4, 5)
	p.merge(6, 7)
	p.reviewedUnitHeads(r.Units)
}

func (p *page) reviewedUnitHeads(units []ReviewedUnit) {
	head := look{size: 9, bold: true, fill: tint, top: rule, bottom: rule, down: "center"}
	var cells, verdicts []excelize.Cell
	for i, t := range []string{"Step", "Test point", "Unit", "at least", "at most", "at least", "at most", "Out"} {
		l := head
		if i > 2 {
			l.across = "right"
		}
		cells = append(cells, p.text(t, l))
		verdicts = append(verdicts, p.text("", look{bottom: rule}))
	}
	verdicts[1] = p.text("Verdict", look{bold: true, bottom: rule})
	tall := 1
	for _, u := range units {
		l := head
		l.left, l.across, l.format = hairline, "center", `"unit "0`
		cells = append(cells, excelize.Cell{StyleID: p.style(l), Value: u.Unit})
		v := u.Grade.look(look{size: 9, across: "center", bottom: rule, left: hairline, wrap: true})
		verdicts = append(verdicts, p.text(u.Grade.mark()+clean(u.Word), v))
		tall = max(tall, lines(u.Grade.mark()+clean(u.Word), unitColumn, 9, true))
	}
	p.put(21, cells...)
	p.put(max(19, lineHeight(9, tall)), verdicts...)
}

// reviewedRow writes one point's or trim's readings.
func (p *page) reviewedRow(row benchRow, units []ReviewedUnit, values map[int]map[string]float64) {
	l, strong := look{bottom: hairline}, look{bottom: hairline, bold: true, wrap: true}
	name, fill := row.name, ""
	if row.turn {
		name, fill = "turn "+name, tint
	}
	l.fill, strong.fill = fill, fill
	var cells []excelize.Cell
	out := 0
	for _, u := range units {
		v, there := values[u.Unit][row.name]
		if !there || !finite(v) {
			cells = append(cells, p.text("", look{bottom: hairline, left: hairline, fill: fill}))
			continue
		}
		shown := row.typed(v)
		sign := row.side(shown)
		if sign != "" {
			out++
		}
		cells = append(cells, p.reading(shown, sign, row))
	}
	count := look{bottom: hairline, bold: true, across: "center", fill: fill, ink: brick}
	fixed := []excelize.Cell{
		p.number(float64(row.step), "0", look{bottom: hairline, across: "center", size: 9, ink: faded, fill: fill}), p.text(name, strong), p.text(row.symbol, l),
		p.limit(row.low, row.format(), l), p.limit(row.high, row.format(), l), p.limit(row.acceptLow, row.format(), l), p.limit(row.acceptHigh, row.format(), l),
		p.number(float64(out), "0;;", count),
	}
	p.put(max(19, lineHeight(10, lines(clean(name), p.widths[1], 10, true))), append(fixed, cells...)...)
}

// reading is one figure, marked where it is outside.
func (p *page) reading(v float64, sign string, row benchRow) excelize.Cell {
	l := look{bottom: hairline, left: hairline, across: "right", format: row.format()}
	switch sign {
	case "▼", "▲":
		l.fill, l.ink, l.bold = rose, brick, true
	case "▽", "△":
		l.fill, l.ink, l.bold = straw, umber, true
	}
	if sign != "" {
		f := row.format()
		l.format = fmt.Sprintf(`"%[1]s "%[2]s;"%[1]s "-%[2]s;"%[1]s "%[2]s`, sign, f)
	}
	return excelize.Cell{StyleID: p.style(l), Value: v}
}

// typed is a figure in the row's unit, the binary fraction's tail taken off and
// no larger than a cell can hold.
func (r benchRow) typed(v float64) float64 {
	x, err := strconv.ParseFloat(strconv.FormatFloat(v/r.by, 'g', 12, 64), 64)
	if err != nil {
		x = v / r.by
	}
	return math.Max(-math.MaxFloat64, math.Min(math.MaxFloat64, x))
}

// side is the mark of a figure in the row's unit; "" inside.
func (r benchRow) side(v float64) string {
	switch {
	case v < r.low:
		return "▼"
	case v > r.high:
		return "▲"
	case v < r.acceptLow:
		return "▽"
	case v > r.acceptHigh:
		return "△"
	}
	return ""
}
