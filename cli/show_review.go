package cli

import (
	"fmt"
	"strconv"
	"strings"

	"batchwright/export/plan"
	"batchwright/export/workbook"
	"batchwright/tolerance/spread"
)

// mostFindings is how many findings are printed; --json has them all.
const mostFindings = 60

// showReview prints a review: first what is odd about the sheet, then the units
// that are not as they should be, then what was not read.
func (p *program) showReview(r *reviewed) {
	p.line("%s: %s, %d read from %s: %s", r.review.Build, count(r.work.Build.Units, "unit"), len(r.review.Units), r.file, tallied(r.review.Units))
	p.showFindingsByCell(r.review.Workbook)
	p.section("not inside", []string{"unit", "point", "reading", "unit", "a good unit shows", "proves the target", "verdict"}, outsideRows(r.review))
	p.paragraph("not read", strings.Join(unreadLines(r.review), "\n"))
	p.showTyped(r.review.Workbook)
}

// tallied counts the verdicts.
func tallied(units []plan.ReviewUnit) string {
	var words []string
	for _, verdict := range []string{plan.Inside, plan.Outside, plan.Misses, plan.Incomplete} {
		n := 0
		for _, u := range units {
			if u.Verdict == verdict {
				n++
			}
		}
		if n > 0 {
			words = append(words, fmt.Sprintf("%d %s", n, unitVerdict(verdict)))
		}
	}
	return strings.Join(words, ", ")
}

func unitVerdict(verdict string) string {
	switch verdict {
	case plan.Misses:
		return "not proved to meet a target"
	case plan.Incomplete:
		return "not read to the end"
	}
	return verdict
}

// showFindingsByCell prints what is odd about the sheet, by cell.
func (p *program) showFindingsByCell(w *plan.ReviewWorkbook) {
	if w == nil {
		return
	}
	var rows [][]string
	for _, f := range w.Findings[:min(len(w.Findings), mostFindings)] {
		of := f.Point
		if f.Unit > 0 {
			of += fmt.Sprintf(", unit %d", f.Unit)
		}
		rows = append(rows, []string{cellName(f.Sheet, f.Cell), of, f.What + foundExpected(f)})
	}
	if more := len(w.Findings) - len(rows); more > 0 {
		rows = append(rows, []string{"…", "", fmt.Sprintf("and %s more; --json lists them", count(more, "finding"))})
	}
	p.section("in the sheet", []string{"cell", "reading of", "what"}, rows)
	if len(w.Lost) > 0 {
		p.paragraph("marks of its plan that the workbook has lost", strings.Join(w.Lost, ", "))
	}
}

func foundExpected(f workbook.Finding) string {
	text := ""
	if f.Found != "" {
		text += ": found " + short(f.Found)
	}
	if f.Expected != "" {
		text += ", expected " + short(f.Expected)
	}
	if f.Found == "" && text != "" {
		text = ":" + text[1:]
	}
	return text
}

// short keeps a cell's text from filling the page.
func short(s string) string {
	const most = 70
	if r := []rune(s); len(r) > most {
		return string(r[:most]) + "…"
	}
	return s
}

// cellName names a cell as formulas do.
func cellName(sheet, cell string) string {
	sheet = strings.Join(strings.Fields(harmless(sheet)), " ")
	if strings.ContainsAny(sheet, " '!-") {
		return "'" + strings.ReplaceAll(sheet, "'", "''") + "'!" + cell
	}
	return sheet + "!" + cell
}

// outsideRows are the readings that are outside a window, unit by unit.
func outsideRows(r plan.Review) [][]string {
	var rows [][]string
	for _, u := range r.Units {
		for _, p := range u.Points {
			if p.Inside && p.Accepted {
				continue
			}
			verdict := side(p.Reading, p.Expected) + " what a good unit shows"
			if p.Inside {
				verdict = side(p.Reading, *p.Accept) + " what proves the target"
			}
			rows = append(rows, reviewRow(u.Unit, p.Point, p.Unit, p.Reading, p.Expected, p.Accept, verdict))
		}
		for _, t := range u.Trims {
			if !t.Inside {
				rows = append(rows, reviewRow(u.Unit, "turn "+t.Turn, t.Unit, t.Reading, t.Within, nil, side(t.Reading, t.Within)+" where the trim belongs"))
			}
		}
	}
	return rows
}

func reviewRow(unit int, point, symbol string, v spread.Figure, expected spread.Limits, accept *spread.Limits, verdict string) []string {
	// In the window's unit and digits, whatever the reading is.
	shown := newRow(symbol, float64(expected.High-expected.Low)/10, float64(expected.Low), float64(expected.High))
	row := []string{strconv.Itoa(unit), point, shown.text(v), shown.symbol, between(shown, expected), "", verdict}
	if accept != nil {
		row[5] = between(shown, *accept)
	}
	return row
}

func between(r row, l spread.Limits) string { return r.text(l.Low) + " to " + r.text(l.High) }

func side(v spread.Figure, l spread.Limits) string {
	if v < l.Low {
		return "below"
	}
	return "above"
}

// unreadLines say what was not read: units of which nothing was, then points.
func unreadLines(r plan.Review) []string {
	var lines []string
	if len(r.Unread) > 0 {
		lines = append(lines, unitRuns(r.Unread)+": nothing")
	}
	missing := map[string][]int{}
	var order []string
	for _, u := range r.Units {
		points := strings.Join(u.Missing(), ", ")
		if points == "" {
			continue
		}
		if missing[points] == nil {
			order = append(order, points)
		}
		missing[points] = append(missing[points], u.Unit)
	}
	for _, points := range order {
		lines = append(lines, unitRuns(missing[points])+": "+points)
	}
	return lines
}

// unitRuns writes units with their runs drawn together: "units 1, 4–9".
func unitRuns(units []int) string {
	var parts []string
	for i := 0; i < len(units); {
		j := i
		for j+1 < len(units) && units[j+1] == units[j]+1 {
			j++
		}
		text := strconv.Itoa(units[i])
		if j > i {
			text += "–" + strconv.Itoa(units[j])
		}
		parts = append(parts, text)
		i = j + 1
	}
	if len(units) == 1 {
		return "unit " + parts[0]
	}
	return "units " + strings.Join(parts, ", ")
}

// showTyped prints what was written beside the readings.
func (p *program) showTyped(w *plan.ReviewWorkbook) {
	if w == nil {
		return
	}
	var rows [][]string
	for _, t := range w.Typed {
		label := t.Label
		if t.Unit > 0 {
			label += fmt.Sprintf(", unit %d", t.Unit)
		}
		rows = append(rows, []string{cellName(t.Sheet, t.Cell), label, t.Text})
	}
	p.section("written beside the readings", []string{"cell", "for", "text"}, rows)
}
