package workbook

import "batchwright/bom/order"

// byStage writes what goes where, with what to look for on each part.
func (b *book) byStage() {
	s := setup{landscape: true, headRow: 4}
	p := b.open(stagesSheet, []float64{10, 20, 13, 10, 30, 33, 33}, s)
	p.heading(stagesSheet, "One unit, in signal order. Read the marking on the part before it is soldered; a reel may be labelled wrong.")
	head := p.heads("", "Reference", "Place", "Value", "Tolerance", "Part", "Marked", "Note")
	if len(b.plan.Positions) == 0 {
		p.nothing("No part is placed in this build.")
	}
	text := look{bottom: hairline, wrap: true}
	for i, at := range b.plan.Positions {
		if i == 0 || at.Stage != b.plan.Positions[i-1].Stage {
			p.stageBand(at)
		}
		n := p.tallest(10, at.Ref, at.Role, at.Value, at.Tolerance, at.Family, at.Marking, at.Note)
		p.put(lineHeight(10, n), p.text(at.Ref, bolder(text)), p.text(at.Role, text), p.text(at.Value, bolder(text)), p.text(at.Tolerance, text),
			p.text(at.Family, text), p.text(at.Marking, text), p.text(at.Note, look{bottom: hairline, wrap: true, italic: true, ink: copper}))
	}
	p.put(10)
	p.paragraph("Marked: the letter code of IEC 60062 (4K7 is 4.7 kΩ) or the colour bands in the order they are read, the band that stands apart last; capacitors with two digits and a multiplier in picofarads (221 is 220 pF). Makers differ: where the part says something else, measure it.", 1, 7, look{size: 9, ink: faded})
	p.close(s, head)
}

// stageBand begins a stage.
func (p *page) stageBand(first Position) {
	refs := []string{}
	for _, q := range p.plan.Positions {
		if q.Stage == first.Stage {
			refs = append(refs, q.Ref)
		}
	}
	band := look{fill: tint, bold: true, size: 11}
	quiet := look{fill: tint, ink: faded, size: 9}
	p.put(19, p.text(first.Stage, band), p.text("", band), p.text(first.Kind, quiet), p.text("", band), p.text("", band), p.text(order.Runs(refs), quiet), p.text("", band))
	p.merge(1, 2)
}
