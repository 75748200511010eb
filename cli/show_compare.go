package cli

import (
	"fmt"
	"math"
	"strings"

	"github.com/jedib0t/go-pretty/v6/text"

	"batchwright/bom/order"
	"batchwright/export/plan"
	"batchwright/tolerance/compare"
	"batchwright/tolerance/spread"
)

// showComparison prints the cases side by side: small tables, a row a case.
func (p *program) showComparison(r *compare.Result) {
	p.line("%s: %s a batch, seed %d, %s, each on the same %d batches (%d units)", r.Build.Title,
		count(r.Build.Units, "unit"), r.Seed, count(len(r.Cases), "case"), r.Simulation.Batches, r.Simulation.Units)
	p.paragraph("exchanged", strings.Join(lineSentences(r), "\n"))
	p.showDrifts(r)
	for t := range r.Build.Targets {
		p.showChanges(r, t)
	}
	p.showShares(r)
	p.showReach(r)
	p.showYields(r)
	p.showBodies(r)
	p.showWhy(r)
	p.showLeftOut(r)
	p.paragraph("notes", strings.Join(r.Notes, "\n"))
}

// lineSentences say which parts are exchanged, and which follow.
func lineSentences(r *compare.Result) []string {
	var list []string
	for _, l := range r.Lines {
		text := fmt.Sprintf("%s (%s)", l.Positions[0], order.Runs(l.Refs))
		if more := l.Positions[1:]; len(more) > 0 {
			text += "; " + strings.Join(more, ", ") + " on the same line take the same"
		}
		list = append(list, text)
	}
	return list
}

// marked is a case's label, that of the base marked.
func marked(c compare.Case) string {
	if c.Base {
		return c.Label + " (base)"
	}
	return c.Label
}

// showDrifts prints each output's drift per kelvin.
func (p *program) showDrifts(r *compare.Result) {
	for i, first := range r.Cases[0].Drifts {
		var figures []float64
		var most, least float64 = 0, math.Inf(1)
		for _, c := range r.Cases {
			d := c.Drifts[i]
			figures = append(figures, float64(d.Mean), float64(d.LotToLot), float64(d.UnitToUnit))
			for _, s := range []float64{float64(d.LotToLot), float64(d.UnitToUnit)} {
				if s > 0 {
					most, least = math.Max(most, s), math.Min(least, s)
				}
			}
		}
		if most == 0 {
			least = 0
		}
		row := newRow(first.Unit, math.Max(least, most/20), figures...)
		var rows [][]string
		for _, c := range r.Cases {
			d := c.Drifts[i]
			rows = append(rows, []string{marked(c), row.text(d.Mean), row.text(d.LotToLot), row.text(d.UnitToUnit)})
		}
		title := fmt.Sprintf("drift of %s at %s, %s for each kelvin", first.Output, r.Build.Conditions[0].Name, strings.TrimSpace(row.symbol+" "))
		p.section(title, []string{"case", "mean", "lot to lot ±", "unit to unit ±"}, rows)
	}
}

// showChanges prints how far a target's output moves to each of its conditions.
func (p *program) showChanges(r *compare.Result, t int) {
	target := r.Build.Targets[t]
	var figures []float64
	for _, c := range r.Cases {
		for _, x := range c.Judgement.Targets[t].Changes {
			figures = append(figures, float64(x.HalfWidth))
		}
	}
	if len(figures) == 0 {
		return
	}
	row := newRow(target.Unit.Symbol, target.High/20, figures...)
	share := plan.Share(spread.Figure(target.Share)) + " stay within"
	if target.WorstCase {
		share = "corners stay within"
	}
	var rows [][]string
	for _, c := range r.Cases {
		judged := c.Judgement.Targets[t]
		for i, x := range judged.Changes {
			cells := []string{"", x.Condition, "±" + row.text(x.HalfWidth) + " " + row.symbol, plan.Share(x.Share), interval(x.ShareInterval), verdictWord(x.Met), ""}
			if i == 0 {
				cells[0], cells[6] = marked(c), differenceText(c, c.Targets[t])
			}
			rows = append(rows, cells)
		}
	}
	p.section(target.Name+": "+target.Asked, []string{"case", "at", share, "share", "95 % interval", "verdict", "points from base"}, rows)
}

func verdictWord(met bool) string {
	if met {
		return "met"
	}
	return "missed"
}

func interval(f [2]spread.Figure) string { return plan.Share(f[0]) + " to " + plan.Share(f[1]) }

// differenceText is a difference from the base in points of a per cent, or that
// there is none to be shown.
func differenceText(c compare.Case, d compare.Difference) string {
	switch {
	case c.Base:
		return "–"
	case !d.Shown:
		return "none shown"
	}
	return fmt.Sprintf("%+.3g (%+.3g to %+.3g)", 100*float64(d.Share), 100*float64(d.Interval[0]), 100*float64(d.Interval[1]))
}

// showShares prints the shares of the other targets.
func (p *program) showShares(r *compare.Result) {
	var head []string
	cells := make([][]string, len(r.Cases))
	for t, target := range r.Build.Targets {
		if target.ChangeFrom >= 0 {
			continue
		}
		head = append(head, target.Name)
		for i, c := range r.Cases {
			cells[i] = append(cells[i], otherShare(c, t, target.WorstCase))
		}
	}
	p.matrix(r, "other targets: units that comply; ▲ more or ▼ fewer than in the base by more than chance", head, cells)
}

// otherShare is a case's share on a target, marked where it differs.
func otherShare(c compare.Case, t int, byCorner bool) string {
	target := c.Judgement.Targets[t]
	text := plan.Share(target.Share)
	if byCorner {
		return text + ", corners " + verdictWord(target.Met)
	}
	if !target.Met {
		text += ", missed"
	}
	if d := c.Targets[t]; d.Shown && d.Share > 0 {
		text += " ▲"
	} else if d.Shown {
		text += " ▼"
	}
	return text
}

// showReach prints on how many units each trimmer reaches.
func (p *program) showReach(r *compare.Result) {
	var head []string
	for _, t := range r.Cases[0].Judgement.Trims {
		head = append(head, t.Turn)
	}
	cells := make([][]string, len(r.Cases))
	for i, c := range r.Cases {
		for _, t := range c.Judgement.Trims {
			text := plan.Share(t.ReachedShare)
			if t.ShortLow+t.ShortHigh > 0 {
				text += fmt.Sprintf(" (%s low, %s high)", plan.Share(t.ShortLow), plan.Share(t.ShortHigh))
			}
			cells[i] = append(cells[i], text)
		}
	}
	p.matrix(r, "trimmers that reach, and on which side the others run out", head, cells)
}

// matrix prints columns beside the cases, in as many tables as they need.
func (p *program) matrix(r *compare.Result, title string, head []string, cells [][]string) {
	label := text.RuneWidthWithoutEscSequences("case")
	for _, c := range r.Cases {
		label = max(label, text.RuneWidthWithoutEscSequences(marked(c)))
	}
	for from := 0; from < len(head); {
		to, left := from, width-2-label
		for to < len(head) && (to == from || left >= 0) {
			left -= widest(head[to], cells, to) + 2
			if left >= 0 || to == from {
				to++
			}
		}
		var rows [][]string
		for i, c := range r.Cases {
			rows = append(rows, append([]string{marked(c)}, cells[i][from:to]...))
		}
		p.section(title, append([]string{"case"}, head[from:to]...), rows)
		title, from = "and", to
	}
}

// showYields prints yield and money.
func (p *program) showYields(r *compare.Result) {
	title := "yield and price"
	o := r.Base().Order
	if note := plan.PriceNote(o); note != "" {
		title += " (" + note + ")"
	}
	var rows [][]string
	for _, c := range r.Cases {
		unit, batch := c.Order.PerUnit.String(), c.Order.Total.String()
		if c.NotOffered != "" {
			unit, batch = "not offered", "–"
		}
		y := c.Judgement.Yield
		rows = append(rows, []string{marked(c), plan.Share(y.UnitShare), interval(y.Interval), unit, batch, differenceText(c, c.Yield)})
	}
	currency := strings.TrimRight(", "+o.Currency, ", ")
	p.section(title, []string{"case", "good units", "95 % interval", "a unit" + currency, "the batch", "points from base"}, rows)
}

// showBodies prints sizes and rated temperatures.
func (p *program) showBodies(r *compare.Result) {
	var rows [][]string
	for _, c := range r.Cases {
		size := "–"
		if len(c.Sizes) > 0 {
			size = strings.Join(c.Sizes, "; ")
		}
		rows = append(rows, []string{marked(c), size, plan.Rated(c)})
	}
	p.section("size and rated temperature, typical of each class", []string{"case", "size", "temperature"}, rows)
}

// showWhy prints the verdicts.
func (p *program) showWhy(r *compare.Result) {
	var rows [][]string
	for _, c := range r.Cases {
		rows = append(rows, []string{marked(c), string(c.Verdict), c.Why})
	}
	p.section("against the base", []string{"case", "verdict", "why"}, rows)
}

// showLeftOut prints what cannot be had.
func (p *program) showLeftOut(r *compare.Result) {
	var rows [][]string
	for _, l := range r.LeftOut {
		rows = append(rows, []string{l.Label, l.Why})
	}
	p.section("left out", []string{"case", "why"}, rows)
}
