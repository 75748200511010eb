package plan

import (
	"fmt"
	"math"
	"slices"

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
	text := fmt.Sprintf("What is named to take instead meets every target: it was put to the same simulation as the choice itself, of %d units. "+
		"The money is by how much the whole order, spares included, would change; changes are half widths to first order.", w.Report.Simulation.Units)
	if note := PriceNote(w.Order); note != "" {
		text += " " + capital(note) + "."
	}
	return text
}

// alternates are what to buy where a line is out of stock: those found, and a
// word where none was. Where none was found for any line, none may have been
// looked for.
func alternates(w Work) []workbook.Alternate {
	var list []workbook.Alternate
	found := map[string]bool{}
	for _, a := range w.Pick.Alternates {
		for _, ref := range a.Refs {
			found[ref] = true
		}
		list = append(list, workbook.Alternate{
			Refs: order.Runs(a.Refs), Line: a.Line, Instead: AlternateInstead(a), More: a.More.Float(), Drifts: AlternateDrifts(a),
		})
	}
	if len(list) == 0 {
		return nil
	}
	open := chosenRefs(w)
	for _, l := range w.Order.Lines {
		if slices.ContainsFunc(l.Refs, func(ref string) bool { return open[ref] }) && !slices.ContainsFunc(l.Refs, func(ref string) bool { return found[ref] }) {
			list = append(list, workbook.Alternate{Refs: order.Runs(l.Refs), Line: pieceText(pick.Piece{Family: l.Family, Text: l.Text, Tolerance: l.Tolerance}), Instead: "nothing else was found that meets every target", More: math.NaN()})
		}
	}
	return list
}

// chosenRefs are the references of all that was chosen, as an order has them.
func chosenRefs(w Work) map[string]bool {
	refs := map[string]bool{}
	for _, c := range w.Pick.Choices {
		for _, position := range c.Positions {
			for _, ref := range w.Build.Place(position).Refs() {
				refs[ref] = true
			}
		}
	}
	return refs
}
