package cli

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/order"
	"batchwright/bom/quantity"
	"batchwright/export/plan"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
)

// showPlan prints what a plan comes to, and where the workbook is.
func (p *program) showPlan(w plan.Work, path string) {
	p.line("%s: %s, seed %d, %d batches simulated (%d units)", w.Build.Title,
		count(w.Build.Units, "unit"), w.Seed, w.Report.Simulation.Batches, w.Report.Simulation.Units)
	p.showTargets(w.Report.Targets)
	p.paragraph("yield", plan.YieldSentence(w.Report.Yield))
	p.showPicks(w.Pick)
	p.showOrder(w.Order)
	p.showFindings(w.Report)
	p.paragraph("mind", strings.Join(plan.Cautions(), "\n"))
	p.line("\nwrote %s", path)
}

// showPicks prints the choices and how sure it is that nothing is cheaper.
func (p *program) showPicks(r *pick.Result) {
	var rows [][]string
	for _, c := range r.Choices {
		rows = append(rows, []string{order.Runs(c.Refs), choiceText(c), c.UnitCost.String(), c.Why})
	}
	p.section("picked", []string{"for", "part", "a unit", "because"}, rows)
	if len(rows) > 0 || r.Why != "" {
		p.paragraph("proof", proofText(r))
	}
}

// choiceText is what was picked: "polystyrene 220 pF ±2.5 %", of two pieces each,
// "c0g 180 pF ±5 % ∥ polystyrene 39 pF ±2.5 %", and whether it is from mixed lots.
func choiceText(c pick.Choice) string {
	pieces := []string{pieceText(c.Family, c.Text, c.Tolerance)}
	if len(c.Parts) > 1 {
		pieces = nil
		for _, p := range c.Parts {
			pieces = append(pieces, pieceText(p.Family, p.Text, p.Tolerance))
		}
	}
	text := strings.Join(pieces, build.Combine(c.Combine).Sign())
	if c.Lots == "mixed" {
		text += ", mixed lots"
	}
	return text
}

// pieceText is one part that is bought.
func pieceText(family, value string, tolerance float64) string {
	text := family
	if value != "" {
		text += " " + value
	}
	if tolerance > 0 {
		text += " ±" + quantity.Format(tolerance, quantity.Percent, 0)
	}
	return text
}

// proofText says how the picks were found.
func proofText(r *pick.Result) string {
	how := "Not proved to be the cheapest"
	if r.ProvedCheapest {
		how = "Proved: nothing cheaper meets the targets; every cheaper choice misses one, to first order with room to spare or in simulation"
	}
	if r.Why != "" {
		how = strings.ToUpper(r.Why[:1]) + r.Why[1:]
	}
	candidates := fmt.Sprint(r.Candidates)
	if r.Candidates == math.MaxInt {
		candidates = "countless"
	}
	return fmt.Sprintf("%s. %s combinations, %d judged, %d simulated.", how, candidates, r.Examined, r.Simulated)
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
