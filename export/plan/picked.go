package plan

import (
	"fmt"
	"math"

	"batchwright/bom/order"
	"batchwright/export/workbook"
	"batchwright/tolerance/pick"
)

// picked puts how the parts were chosen in words for the workbook.
func picked(w Work) workbook.Picks {
	r := *w.Pick
	if len(r.Choices) == 0 {
		return workbook.Picks{}
	}
	k := workbook.Picks{Proof: ProofSentence(r), Binding: BindingSentence(r), Checks: CheckSentences(r), Alternates: alternates(w)}
	for _, c := range r.Choices {
		k.Choices = append(k.Choices, workbook.Picked{Refs: order.Runs(c.Refs), Part: ChoiceText(c), UnitCost: c.UnitCost.Float(), Why: c.Why})
	}
	if len(k.Alternates) > 0 {
		k.Note = AlternatesNote(w)
	}
	return k
}

// AlternatesNote says what the alternates rest on.
func AlternatesNote(w Work) string {
	text := fmt.Sprintf("What is named to take instead meets every target: it was simulated as the choice itself was, on %d units. "+
		"The money is by how much the whole order, spares included, would change; changes are half widths to first order.", min(w.Report.Simulation.Units, pick.AsideUnits))
	if note := PriceNote(w.Order); note != "" {
		text += " " + capital(note) + "."
	}
	return text
}

// alternates are what to buy where a line is out of stock: those found, and a
// word where there is none.
func alternates(w Work) []workbook.Alternate {
	var list []workbook.Alternate
	for _, a := range w.Pick.Alternates {
		list = append(list, workbook.Alternate{
			Refs: order.Runs(a.Refs), Line: a.Line, Instead: AlternateInstead(a), More: a.More.Float(), Drifts: AlternateDrifts(a),
		})
	}
	for _, l := range w.Pick.Irreplaceable {
		list = append(list, workbook.Alternate{Refs: order.Runs(l.Refs), Line: l.Line, Instead: "nothing: " + l.Why, More: math.NaN()})
	}
	return list
}
