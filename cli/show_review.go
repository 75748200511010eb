package cli

import (
	"fmt"
	"strconv"
	"strings"

	"batchwright/export/plan"
	"batchwright/export/workbook"
	"batchwright/tolerance/bench/explain"
)

// mostFindings is how many findings are printed; --json has them all.
const mostFindings = 60

// showReview prints a review: first what is odd about the sheet, then the units
// that are not as they should be, then the batch, then what was not read.
func (p *program) showReview(r *reviewed) {
	p.line("%s: %s, %d read from %s: %s", r.review.Build, count(r.work.Build.Units, "unit"), len(r.review.Units), r.file, tallied(r.review.Units))
	p.showFindingsByCell(r.review.Workbook)
	for _, u := range r.review.Units {
		p.showUnit(r, u)
	}
	p.showBatch(r)
	p.paragraph("not read", strings.Join(unreadLines(r.review), "\n"))
	p.showTyped(r.review.Workbook)
	if len(r.review.Files) > 0 {
		p.line("\nwrote %s", strings.Join(r.review.Files, ", "))
	}
}

// tallied counts the verdicts.
func tallied(units []plan.ReviewUnit) string {
	var words []string
	for _, verdict := range []explain.Verdict{explain.Inside, explain.Outside, explain.Improbable, explain.Misses, explain.Incomplete} {
		n := 0
		for _, u := range units {
			if u.Verdict == verdict {
				n++
			}
		}
		if n > 0 {
			words = append(words, fmt.Sprintf("%d %s", n, plan.VerdictWords(verdict)))
		}
	}
	return strings.Join(words, ", ")
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
