package cli

import (
	"strings"

	"batchwright/bom/order"
	"batchwright/export/plan"
	"batchwright/tolerance/pick"
)

// showPick prints what was picked and all that is known about it.
func (p *program) showPick(r plan.Pick) {
	p.line("%s: %s, seed %d", r.Build, count(r.Order.Units, "unit"), r.Seed)
	if len(r.Picks) == 0 && r.Pick.Why == "" {
		p.line("nothing is left open, so there is nothing to choose; spread judges the targets")
	}
	p.showPicks(&r.Pick, r.Order)
	p.showTargets(r.Targets)
	p.paragraph("what remains of the changes, to first order", strings.Join(plan.RemainSentences(r.Pick), "\n"))
	p.showOrder(r.Order)
	if len(r.Files) > 0 {
		p.line("\nwrote %s", strings.Join(r.Files, ", "))
	}
}

// showPicks prints the choices, how sure it is that nothing is cheaper, what
// makes them cost what they do, and what to buy where a line is out of stock.
func (p *program) showPicks(r *pick.Result, o order.Order) {
	var rows [][]string
	for _, c := range r.Choices {
		rows = append(rows, []string{order.Runs(c.Refs), plan.ChoiceText(c), c.UnitCost.String(), c.Why})
	}
	p.section("picked", []string{"for", "part", "a unit", "because"}, rows)
	if len(rows) > 0 || r.Why != "" {
		p.paragraph("proof", plan.ProofSentence(*r))
	}
	p.paragraph("what binds", plan.BindingSentence(*r))
	p.paragraph("picture and simulation", strings.Join(plan.CheckSentences(*r), "\n"))
	p.showAlternates(r)
}

// showAlternates prints what to buy where a line is out of stock.
func (p *program) showAlternates(r *pick.Result) {
	var rows [][]string
	for _, a := range r.Alternates {
		rows = append(rows, []string{order.Runs(a.Refs), plan.AlternateInstead(a), plan.Signed(a.More), plan.AlternateDrifts(a)})
	}
	for _, l := range r.Irreplaceable {
		rows = append(rows, []string{order.Runs(l.Refs), "nothing", "–", l.Why})
	}
	p.section("if it is out of stock", []string{"for", "take", "order", "then, to first order"}, rows)
}
