package cli

import (
	"fmt"
	"strings"

	"batchwright/export/plan"
	"batchwright/tolerance/bench/explain"
)

// showUnit prints a unit that is not as it should be: what is outside, what is
// probably wrong, and what to read next.
func (p *program) showUnit(r *reviewed, u plan.ReviewUnit) {
	if u.Good() || u.Verdict == explain.Incomplete && !u.Accused {
		return // what was not read is said together
	}
	p.line("")
	for _, line := range wrapped(fmt.Sprintf("unit %d: %s", u.Unit, plan.VerdictText(u)), width) {
		p.line("%s", line)
	}
	p.showOdds(plan.Odds(r.work.Sheet, u))
	if text := plan.HealthyText(u); text != "" && len(u.Suspects) > 0 {
		p.suspect(plan.Likelihood(u.Healthy), text)
	}
	for _, g := range plan.SuspectGroups(u) {
		p.suspect(plan.Likelihood(g.Probability), g.Text())
	}
	for _, text := range plan.FurtherTexts(u) {
		p.suspect("next", text)
	}
}

// suspect prints a text with a word before it.
func (p *program) suspect(word, text string) {
	const before = 8
	for _, line := range wrapped(text, width-before-2) {
		p.line("%*s  %s", before, word, line)
		word = ""
	}
}

// showOdds prints readings outside a window. Columns that say nothing are left
// out.
func (p *program) showOdds(odds []plan.Odd) {
	if len(odds) == 0 {
		return
	}
	head := []string{"point", "reading", "unit", "a good unit shows", "proves the target", "suspect reads", "verdict"}
	var rows [][]string
	for _, o := range odds {
		rows = append(rows, []string{o.Point, o.Reading, o.Symbol, o.Shows, o.Proves, o.Predicted, o.Side})
	}
	head, rows = saying(head, rows)
	p.table("  ", head, rows)
}

// saying leaves out columns that are empty in every row.
func saying(head []string, rows [][]string) ([]string, [][]string) {
	var heads []string
	out := make([][]string, len(rows))
	for i, h := range head {
		words := ""
		for _, r := range rows {
			words += r[i]
		}
		if words == "" {
			continue
		}
		heads = append(heads, h)
		for k, r := range rows {
			out[k] = append(out[k], r[i])
		}
	}
	return heads, out
}

// showBatch prints what the units say together.
func (p *program) showBatch(r *reviewed) {
	b := r.review.Batch
	p.paragraph("the batch", strings.Join(plan.BatchSentences(r.review), "\n"))
	var rows [][]string
	for _, o := range plan.BatchOdds(r.work.Sheet, b) {
		rows = append(rows, []string{o.Point, o.Mean, o.Expected, o.Symbol, o.What})
	}
	p.section("away from prediction", []string{"point", "mean", "expected", "unit", "what"}, rows)
	p.paragraph("lots off their centre", strings.Join(plan.LotSentences(b), "\n"))
	p.paragraph("the rest", strings.Join(plan.RestSentences(b), "\n"))
}
