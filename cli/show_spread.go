package cli

import (
	"fmt"
	"math"
	"slices"
	"strings"

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
	p.paragraph("notes", strings.Join(r.Notes, "\n"))
}

var outputHeader = [...]string{"output", "at", "unit", "nominal", "worst low", "worst high", "std unc", "95 % from", "to", "mostly from"}

// outputRows are the outputs of a stage, one row a condition. Conditions that
// make no difference share a row.
func outputRows(all []spread.OutputReport, stage string) [][]string {
	var rows [][]string
	for i := 0; i < len(all); i++ {
		o := all[i]
		name, found := strings.CutPrefix(o.Output, stage+".")
		if !found {
			continue
		}
		at := []string{o.Condition}
		for i+1 < len(all) && sameFigures(o, all[i+1]) {
			i++
			at = append(at, all[i].Condition)
		}
		rows = append(rows, outputRow(o, name, at, sameOutput(all, o)))
	}
	return rows
}

// sameOutput counts the conditions that a report has for an output.
func sameOutput(all []spread.OutputReport, o spread.OutputReport) int {
	n := 0
	for _, other := range all {
		if other.Output == o.Output && other.ChangeFrom == o.ChangeFrom {
			n++
		}
	}
	return n
}

// sameFigures says whether two reports are of one output and tell the same.
func sameFigures(a, b spread.OutputReport) bool {
	same := func(x, y spread.Figure) bool {
		return x == y || math.IsNaN(float64(x)) && math.IsNaN(float64(y)) ||
			math.Abs(float64(x-y)) <= 1e-12*math.Abs(float64(x))
	}
	return a.Output == b.Output && a.ChangeFrom == b.ChangeFrom && same(a.Nominal, b.Nominal) &&
		same(a.RootSumSquare.StandardUncertainty, b.RootSumSquare.StandardUncertainty) &&
		same(a.Simulated.Mean, b.Simulated.Mean) && same(a.Simulated.StandardDeviation, b.Simulated.StandardDeviation)
}

// outputRow is one output at some conditions, its figures in one unit.
func outputRow(o spread.OutputReport, name string, at []string, conditions int) []string {
	where := strings.Join(at, ", ")
	if len(at) == conditions && len(at) > 1 {
		where = "all conditions"
	}
	if o.ChangeFrom != "" {
		name = "change of " + name
		where += " from " + o.ChangeFrom
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
		name, where, r.symbol, r.text(o.Nominal), r.text(low), r.text(high),
		r.text(u), r.text(from), r.text(to), plan.Contributors(o, 2),
	}
}

// showTrims prints where the trimmers end.
func (p *program) showTrims(trims []spread.TrimReport) {
	travel := func(f spread.Figure) string { return fmt.Sprintf("%.0f %%", 100*float64(f)) }
	var rows [][]string
	for _, t := range trims {
		rows = append(rows, []string{
			t.Turn, plan.Share(t.ReachedShare), plan.Share(t.ShortLow), plan.Share(t.ShortHigh),
			travel(t.Setting.Nominal), travel(t.Setting.P01) + " to " + travel(t.Setting.P99),
		})
	}
	p.section("trims", []string{"turn", "reached", "short at 0", "short at 1", "nominal", "98 % of units end at"}, rows)
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
		if !t.Met && t.Why != "" {
			asked += "; " + t.Why
		}
		rows = append(rows, []string{
			t.Name, verdict, plan.Share(t.Share),
			plan.Share(t.ShareInterval[0]) + " to " + plan.Share(t.ShareInterval[1]), asked,
		})
	}
	p.section("targets", []string{"name", "verdict", "share", "95 % interval", "asked"}, rows)
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
