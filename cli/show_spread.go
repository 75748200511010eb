package cli

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"unicode/utf8"

	"batchwright/export/plan"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// showSpread prints a report.
func (p *program) showSpread(b *build.Build, r *spread.Report) {
	p.line("%s: %s a batch, seed %d, %d batches simulated (%d units)", r.Build,
		count(b.Units, "unit"), r.Seed, r.Simulation.Batches, r.Simulation.Units)
	for _, s := range b.Stages {
		p.section(fmt.Sprintf("%s (%s)", s.Name, s.Kind.Name), outputHeader[:], outputRows(r.Outputs, s.Name))
	}
	p.showTrims(r.Trims)
	p.showTargets(r.Targets)
	p.paragraph("yield", plan.YieldSentence(r.Yield))
	p.showFindings(r)
}

// showFindings prints what happens in some unit and nobody may miss, how near
// each mixer's oscillators come to pulling into step, and what else to know.
func (p *program) showFindings(r *spread.Report) {
	p.paragraph("findings", strings.Join(plan.FindingSentences(r), "\n"))
	p.paragraph("lock range", strings.Join(plan.LockSentences(r), "\n"))
	p.paragraph("notes", strings.Join(r.Notes, "\n"))
}

var outputHeader = [...]string{"output", "at", "unit", "nominal", "worst low", "worst high", "std unc", "95 % from", "to", "mostly from"}

// outputRows are the outputs of a stage. Conditions at which an output's
// printed figures are the same share a row.
func outputRows(all []spread.OutputReport, stage string) [][]string {
	var rows [][]string
	for i, first := range all {
		name, found := strings.CutPrefix(first.Output, stage+".")
		if !found || slices.ContainsFunc(all[:i], func(o spread.OutputReport) bool { return sameOutput(o, first) }) {
			continue
		}
		own := len(rows)
		conditions := 0
		for _, o := range all[i:] {
			if sameOutput(o, first) {
				conditions++
				rows = addRow(rows, own, outputRow(o, name))
			}
		}
		if len(rows) == own+1 && conditions > 1 {
			rows[own][1] = "all conditions"
		}
	}
	return rows
}

// sameOutput says whether two reports are of one output, or of its change from
// one condition.
func sameOutput(a, b spread.OutputReport) bool {
	return a.Output == b.Output && a.ChangeFrom == b.ChangeFrom
}

// addRow adds a row, or its condition to the row from own on whose figures are
// the same.
func addRow(rows [][]string, own int, row []string) [][]string {
	for _, r := range rows[own:] {
		if slices.Equal(r[2:len(r)-1], row[2:len(row)-1]) {
			r[1] += ", " + row[1]
			return rows
		}
	}
	return append(rows, row)
}

// outputRow is one output at one condition, its figures in one unit.
func outputRow(o spread.OutputReport, name string) []string {
	at := o.Condition
	if o.ChangeFrom != "" {
		at += " from " + o.ChangeFrom
		name = "change of " + name
	}
	low, high := spread.Figure(math.NaN()), spread.Figure(math.NaN())
	if o.WorstCase != nil {
		low, high = o.WorstCase.Low, o.WorstCase.High
	}
	u := o.RootSumSquare.StandardUncertainty
	from, to := o.Simulated.Quantiles["0.025"], o.Simulated.Quantiles["0.975"]
	r := newRow(o.Unit, max(float64(u), float64(o.Simulated.StandardDeviation)),
		float64(o.Nominal), float64(low), float64(high), float64(from), float64(to))
	return []string{
		name, at, r.symbol, r.text(o.Nominal), r.text(low), r.text(high),
		r.text(u), r.text(from), r.text(to), sources(o),
	}
}

// sources names the two largest contributors where they fit a line of the
// narrowest column, or the largest.
func sources(o spread.OutputReport) string {
	if text := plan.Contributors(o, 2); utf8.RuneCountInString(text) <= narrowest {
		return text
	}
	return plan.Contributors(o, 1)
}

// showTrims prints where the trimmers end.
func (p *program) showTrims(trims []spread.TrimReport) {
	var rows [][]string
	for _, t := range trims {
		rows = append(rows, []string{
			t.Turn, plan.Share(t.ReachedShare), plan.Share(t.ShortLow), plan.Share(t.ShortHigh),
			travel(t.Setting.Nominal), travel(t.Setting.P01) + " to " + travel(t.Setting.P99),
		})
	}
	p.section("trims", []string{"turn", "reached", "short at 0", "short at 1", "nominal", "98 % of units end at"}, rows)
}

// travel is a trimmer's setting as a share of its travel.
func travel(f spread.Figure) string {
	if math.IsNaN(float64(f)) {
		return "–"
	}
	return fmt.Sprintf("%.0f %%", 100*float64(f))
}

// showTargets prints the verdicts.
func (p *program) showTargets(targets []spread.TargetReport) {
	var rows [][]string
	for _, t := range targets {
		verdict := "missed"
		if t.Met {
			verdict = "met"
		}
		asked := t.Asked
		if t.Why != "" {
			asked += "; " + t.Why
		}
		rows = append(rows, []string{
			t.Name, verdict, plan.Share(t.Share),
			intervalText(t.ShareInterval), asked,
		})
	}
	p.section("targets", []string{"name", "verdict", "share", "95 % interval", "asked"}, rows)
}

// intervalText is an interval of shares, or a dash.
func intervalText(i [2]spread.Figure) string {
	if math.IsNaN(float64(i[0])) {
		return "–"
	}
	return plan.Share(i[0]) + " to " + plan.Share(i[1])
}

// showCheck prints what is in a build.
func (p *program) showCheck(b *build.Build) {
	t := summarise(b)
	parts := 0
	var rows [][]string
	for _, s := range t.Stages {
		parts += len(s.Refs)
		rows = append(rows, []string{s.Stage, s.Kind, strings.Join(s.Refs, ", ")})
	}
	p.line("%s: %s, %s, %s; nothing wrong", b.Title, count(b.Units, "unit"), count(len(b.Stages), "stage"), count(parts, "part"))
	p.paragraph("conditions", strings.Join(t.Conditions, ", "))
	p.section("stages", []string{"stage", "kind", "parts"}, rows)
	rows = nil
	for _, trim := range t.Trims {
		rows = append(rows, []string{trim.Turn, trim.Output})
	}
	p.section("trims", []string{"turn", "watching"}, rows)
	rows = nil
	for _, target := range t.Targets {
		rows = append(rows, []string{target.Name, target.Asked})
	}
	p.section("targets", []string{"name", "asked"}, rows)
	rows = nil
	for _, o := range t.Open {
		rows = append(rows, []string{strings.Join(o.Positions, ", "), fmt.Sprint(o.Choices), strings.Join(slices.Clone(o.Families), ", ")})
	}
	p.section("still open", []string{"positions", "choices", "families"}, rows)
}
