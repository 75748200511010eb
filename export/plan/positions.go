package plan

import (
	"fmt"
	"strings"

	"batchwright/bom/marking"
	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/export/workbook"
	"batchwright/tolerance/build"
)

// positions lists every fitted part in its place, stage by stage; of a place
// that two pieces make up, both.
func positions(w Work) []workbook.Position {
	lots := lots(w.Build)
	var list []workbook.Position
	for _, s := range w.Build.Stages {
		for _, place := range s.Places {
			for i, piece := range place.Pieces() {
				at := workbook.Position{
					Stage: s.Name, Kind: s.Kind.Name, Ref: piece.Ref,
					Role:  strings.ReplaceAll(place.Role, "_", " "),
					Value: bought(w.Build, piece), Family: title(w.Build, piece.Family),
					Tolerance: grade(piece), Marking: marking.Text(piece),
					Note: note(w, s, place, i, lots),
				}
				if place.Geometry != nil {
					at.Value, at.Tolerance, at.Marking = place.Quantity, "", ""
					at.Family, at.Note = "wound, not bought", winding(place.Geometry)
				}
				list = append(list, at)
			}
		}
	}
	return list
}

// bought is what a part is bought as.
func bought(b *build.Build, p part.Part) string {
	f, _ := b.Families.Family(p.Family)
	return p.Bought(f)
}

// title is how shops call a family; a part of none is only what its value says.
func title(b *build.Build, family string) string {
	if f, ok := b.Families.Family(family); ok {
		return f.Title
	}
	return "no family given"
}

func grade(p part.Part) string {
	if g := p.Grade(); g > 0 {
		return "±" + quantity.Format(g, quantity.Percent, 0)
	}
	return ""
}

// lots gathers the references bought on one line, which come from one lot.
func lots(b *build.Build) map[string][]string {
	lots := map[string][]string{}
	for _, p := range b.Parts() {
		if p.Family != "" && !p.LotsMixed {
			lots[order.Key(p)] = append(lots[order.Key(p)], p.Ref)
		}
	}
	return lots
}

// note says how the i-th piece of a place is handled: what it is joined to, when
// a trimmer is turned, and what must come from one bag with it.
func note(w Work, s *build.Stage, place build.Place, i int, lots map[string][]string) string {
	var notes []string
	piece := place.Pieces()[i]
	if place.Paired() {
		notes = append(notes, fmt.Sprintf("in %s with %s, together %s", place.Combine, place.Refs()[1-i], place.Base()))
	}
	if place.Type.Trimmer() {
		notes = append(notes, trimmerNote(w, s.Name+"."+place.Role, place))
	}
	if refs := lots[order.Key(piece)]; len(refs) > 1 && !piece.LotsMixed && scattersByLot(piece) {
		notes = append(notes, "one lot for "+order.Runs(refs))
	}
	if piece.LotsMixed {
		notes = append(notes, "from mixed lots")
	}
	return strings.Join(notes, "; ")
}

func trimmerNote(w Work, position string, place build.Place) string {
	for _, t := range w.Sheet.Turns {
		if t.Turn == position {
			return fmt.Sprintf("trimmer, set in step %d", t.Step)
		}
	}
	return fmt.Sprintf("trimmer, left at %.0f %% of its travel", 100*place.Position)
}

// scattersByLot says whether pieces of a lot resemble each other.
func scattersByLot(p part.Part) bool {
	for _, q := range p.Parameters {
		if q.Correlation.Value != 0 || q.Correlation.Temperature != 0 {
			return true
		}
	}
	return false
}
