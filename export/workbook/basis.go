package workbook

import (
	"fmt"

	"github.com/xuri/excelize/v2"
)

// basis writes what the figures rest on.
func (b *book) basis() {
	s := setup{}
	p := b.open(basisSheet, []float64{22, 58, 30}, s)
	p.heading(basisSheet, "What the figures rest on, and how to make them again")
	p.section("Made from")
	for _, f := range [][2]string{
		{"Build file", b.plan.File}, {"Plan", or(b.plan.Digest, "no digest")}, {"Program", "batchwright " + b.plan.Version}, {"Seed", fmt.Sprint(b.plan.Seed)},
		{"Simulated", fmt.Sprintf("%s units in %s batches", whole(b.plan.Spread.Simulation.Units), whole(b.plan.Spread.Simulation.Batches))}, {"Prices", b.priceWords()},
	} {
		p.fact(f[0], f[1], "")
	}
	p.conditions()
	p.section("How the limits on the test sheet are made")
	for _, f := range windowWords {
		p.fact(f[0], f[1], f[2])
	}
	if len(b.plan.Samples) > 0 {
		p.fact("At other conditions", "As above, read at that condition. Of a change U is 2·(accuracy·|change| + √2·floor)/√3: what is wrong in proportion is alike in both readings of one meter.", "")
	}
	p.risks()
	if len(b.plan.Basis) > 0 {
		p.section("Assumptions and sources")
		for _, e := range b.plan.Basis {
			p.fact(e.Heading, e.Text, e.Source)
		}
	}
	if len(b.plan.Cautions) > 0 {
		p.section("Cautions")
		for _, c := range b.plan.Cautions {
			p.paragraph("• "+c, 1, 3, look{})
		}
	}
	p.close(s, 0)
}

// windowWords says how expected and accept limits come about; package bench
// works them out, scale.go rounds them.
var windowWords = [][3]string{
	{"A good unit shows", "The middle 99.73 % of the simulated good units' readings, with the meter's own loading, widened by its expanded uncertainty U = 2·(accuracy·|reading| + floor)/√3. Outside it something is built wrong. Rounded outward.", "k = 2, rectangular: JCGM 100:2008, 4.3.7"},
	{"Proves the target", "The target's limits, as the loaded meter would show them, drawn in by U. Inside it the target is met in spite of the meter. Rounded inward.", "Guard band w = U: JCGM 106:2012, 8.3.2"},
	{"The meter's loading", "A target's limits become readings by the straight line that fits what units scatter best; by how much they differ from it, times two, joins U as a root sum of squares.", "JCGM 100:2008, 5.2.2"},
	{"Digits", "The last digit is the first power of ten not below a tenth of U, or one below a thousandth of the narrowest window if coarser; never over a twentieth of it.", ""},
	{"Adjustments", "The limits of a row that says turn are its own: leave the trimmer inside them.", ""},
}

func (p *page) conditions() {
	if len(p.plan.Conditions) == 0 {
		return
	}
	p.section("Conditions")
	for _, c := range p.plan.Conditions {
		p.fact(c.Name, c.Text, "")
	}
}

// fact writes a heading, what it says, and where that comes from: beside it,
// or below where it is long.
func (p *page) fact(heading, text, source string) {
	heading, text, source = clean(heading), clean(text), clean(source)
	l := look{wrap: true, bottom: hairline}
	quiet := look{wrap: true, bottom: hairline, size: 9, ink: faded}
	n := lines(heading, p.widths[0], 10, true)
	if beside := lines(source, p.widths[2], 9, false); source != "" && beside <= 2 {
		n = max(n, lines(text, p.widths[1], 10, false), beside)
		p.put(lineHeight(10, n), p.text(heading, bolder(l)), p.text(text, l), p.text(source, quiet))
		return
	}
	n = max(n, lines(text, p.wide(2, 3), 10, false))
	if source == "" {
		p.put(lineHeight(10, n), p.text(heading, bolder(l)), p.text(text, l), p.text("", l))
		p.merge(2, 3)
		return
	}
	p.put(lineHeight(10, n), p.text(heading, look{bold: true, wrap: true}), p.text(text, look{wrap: true}), excelize.Cell{})
	p.merge(2, 3)
	p.put(lineHeight(9, lines(source, p.wide(2, 3), 9, false)), p.text("", l), p.text(source, quiet), p.text("", l))
	p.merge(2, 3)
}

// row is n cells that are not there.
func row(n int) []excelize.Cell { return make([]excelize.Cell, n) }
