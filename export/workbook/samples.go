package workbook

import (
	"fmt"

	"github.com/xuri/excelize/v2"

	"batchwright/tolerance/bench"
)

// samplePlaces is how many readings a row of the sample tests has room for.
const samplePlaces = 5

// samples writes the tests at other conditions than the bench's: those that a
// bench can make at once, and those that are done on some of the units.
func (b *book) samples() {
	if len(b.plan.Samples) == 0 {
		return
	}
	s := setup{landscape: true, headRow: 5}
	widths := []float64{16, 20, 27, 22, 36, 5, 8.5, 8.5, 8.5, 8.5, 8.5}
	for range samplePlaces {
		widths = append(widths, 9)
	}
	p := b.open(samplesSheet, widths, s)
	p.heading(samplesSheet, "The targets away from the bench's own condition, trims left as they are. Write the unit's number above, its reading below.")
	p.sampleGroups()
	head := p.heads("llliirrrrrr", "Target", "Read", "Condition", "Units", "Hold the probe at", "Unit", "Nominal", "at least", "at most", "at least", "at most")
	for _, x := range b.plan.Samples {
		p.sample(x)
	}
	p.put(10)
	notes := map[string]bool{}
	for _, x := range b.plan.Samples {
		if why := sampleRow(x).why; why != "" && !notes[why] {
			notes[why] = true
			p.paragraph(x.Target+": "+why+".", 1, len(widths), look{size: 9, ink: faded})
		}
	}
	p.paragraph("Sample: a condition that a bench does not easily make, so that only some units are tested: more than 5 K from the bench's temperature, another humidity, age. Of n units ⌈√n⌉ + 1 are (common practice, no source).", 1, len(widths), look{size: 9, ink: faded})
	p.close(s, head)
}

// sampleGroups names the groups of columns.
func (p *page) sampleGroups() {
	over := look{size: 9, bold: true, ink: copper, across: "center", bottom: rule}
	cells := row(len(p.widths))
	for i := 7; i < len(cells); i++ {
		cells[i] = p.text("", over)
	}
	cells[7], cells[9], cells[11] = p.text("A good unit shows", over), p.text("Proves the target", over), p.text("Unit, and what it reads", over)
	p.put(16, cells...)
	p.merge(8, 9)
	p.merge(10, 11)
	p.merge(12, len(p.widths))
}

// sample writes one target at one condition, two rows high.
func (p *page) sample(x bench.Sample) {
	r := sampleRow(x)
	read := r.name
	if x.Instrument != "" {
		read += ", " + x.Instrument
	}
	text, figure := look{wrap: true, bottom: hairline}, look{bottom: hairline}
	condition := p.plan.conditionWords(x)
	cells := []excelize.Cell{
		p.text(x.Target, bolder(text)), p.text(read, text), p.text(condition, text), p.text(p.plan.whichUnits(x), indentedIf(true, text)), p.text(r.at, indentedIf(true, text)), p.text(r.symbol, rightward(text)),
		p.number(r.nominal, r.format(), bolder(figure)), p.number(r.low, r.format(), figure), p.number(r.high, r.format(), figure),
		p.number(r.acceptLow, r.format(), figure), p.number(r.acceptHigh, r.format(), figure),
	}
	n := max(p.tallest(10, x.Target, read, condition), lines(p.plan.whichUnits(x), p.widths[3]-indented, 10, false), lines(clean(r.at), p.widths[4]-indented, 10, false))
	number := look{fill: sky, open: true, left: hairline, bottom: hairline, across: "center", size: 9}
	value := look{fill: sky, open: true, left: hairline, bottom: rule, across: "right", format: r.format()}
	under := append(row(11), repeated(p.text("", value), samplePlaces)...)
	for i := range 11 {
		under[i] = p.text("", look{bottom: hairline})
	}
	half := max(19, lineHeight(10, n)/2)
	p.put(half, append(cells, repeated(p.text("", number), samplePlaces)...)...)
	p.put(half, under...)
	for c := 1; c <= 11; c++ {
		p.mergeRows(c, p.last-1, p.last)
	}
}

// repeated is a cell n times.
func repeated(c excelize.Cell, n int) []excelize.Cell {
	cells := make([]excelize.Cell, n)
	for i := range cells {
		cells[i] = c
	}
	return cells
}

// conditionWords says where a sample is read.
func (p Plan) conditionWords(x bench.Sample) string {
	words := x.Condition
	for _, c := range p.Conditions {
		if c.Name == x.Condition && c.Text != "" {
			words += ": " + c.Text
		}
	}
	if x.ChangeFrom != "" {
		words += "; less what was read at " + x.ChangeFrom
	}
	return words
}

// whichUnits says on which units a sample is read, and why not on all.
func (p Plan) whichUnits(x bench.Sample) string {
	if x.Every <= 1 && x.Needs == "" {
		return "every unit"
	}
	return fmt.Sprintf("sample: 1 unit in %d (%s)", max(1, x.Every), x.Needs)
}
