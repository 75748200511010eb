package cli

import (
	"fmt"
	"strings"

	"batchwright/bom/order"
	"batchwright/export/plan"
)

// showPlan prints what a plan comes to, and where the workbook is.
func (p *program) showPlan(w plan.Work, path string) {
	p.line("%s: %s, seed %d, %d batches simulated (%d units)", w.Build.Title,
		count(w.Build.Units, "unit"), w.Seed, w.Report.Simulation.Batches, w.Report.Simulation.Units)
	p.showTargets(w.Report.Targets)
	p.paragraph("yield", plan.YieldSentence(w.Report.Yield))
	p.showPicks(w.Pick, w.Order)
	p.showOrder(w.Order)
	if w.Compared != nil {
		p.showWhy(w.Compared)
	}
	p.showFindings(w.Report)
	p.paragraph("mind", strings.Join(plan.Cautions(), "\n"))
	p.line("\nwrote %s", path)
}

// showOrder prints what is to be bought and what it costs.
func (p *program) showOrder(o order.Order) {
	note := ""
	if n := plan.PriceNote(o); n != "" {
		note = " (" + n + ")"
	}
	currency := strings.TrimRight(" "+o.Currency, " ")
	p.paragraph("order", fmt.Sprintf("%s of parts for %s with %d %% spares: %s%s in all, %s%s of parts in a unit%s",
		count(len(o.Lines), "line"), count(o.Units, "unit"), o.SparesPercent, o.Total, currency, o.PerUnit, currency, note))
	var rows [][]string
	for _, l := range o.Unoffered {
		rows = append(rows, []string{order.Runs(l.Refs), strings.TrimSpace(l.Title + " " + l.Text), fmt.Sprint(l.Buy), l.Why})
	}
	p.section("not offered, and in no total", []string{"for", "part", "pieces", "why"}, rows)
}
