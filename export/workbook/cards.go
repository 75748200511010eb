package workbook

import (
	"fmt"
	"math"

	"github.com/xuri/excelize/v2"

	"batchwright/tolerance/bench"
)

// What a card may take of a page: 7.77 in by 9.95 in between the margins is
// what A4 and Letter have in common.
const (
	cardTall    = 9.95 * 72 // points
	cardWide    = 7.77 * 96 // pixels
	cardLargest = 92        // percent
	cardLeast   = 50        // percent; figures of 5 points
	cardSpread  = 75        // percent where a card takes more than a page
)

// cardWidths are the columns of a card printed at some percent: step, point,
// where, read, unit, four limits, reading, setting, done. What the page has
// left over goes to those with words in them.
func cardWidths(percent uint) []float64 {
	widths := []float64{4.5, 17, 22, 13.5, 5, 8, 8, 8, 8, 10.5, 8, 5}
	pixels := 0.0
	for _, w := range widths {
		pixels += 7*w + 5
	}
	spare := math.Max(0, (0.975*cardWide*100/float64(percent)-pixels)/7)
	widths[1] += 0.1 * spare
	widths[2] += 0.55 * spare
	widths[3] += 0.15 * spare
	widths[9] += 0.2 * spare
	return widths
}

// cards writes a page for every unit, to be filled in by hand.
func (b *book) cards() {
	if !b.plan.Cards {
		return
	}
	rows := b.plan.benchRows()
	s := setup{percent: b.cardPercent(rows)}
	p := b.open(cardsSheet, cardWidths(s.percent), s)
	for unit := 1; unit <= b.plan.Units; unit++ {
		p.card(unit, rows)
		if unit < b.plan.Units && p.out != nil {
			p.keep(p.out.InsertPageBreak(at(1, p.last+1)))
		}
	}
	p.close(s, 0)
}

// cardPercent is the largest at which a card with every row fills no more than
// a page, or what reads well where it must take more. A dry run says how high
// a card is.
func (b *book) cardPercent(rows []benchRow) uint {
	for percent := uint(cardLargest); percent >= cardLeast; percent-- {
		dry := &page{book: b, name: cardsSheet, widths: cardWidths(percent)}
		dry.card(0, rows) // 0 is one of every so many
		if dry.tall*float64(percent)/100 <= 0.985*cardTall {
			return percent
		}
	}
	return cardSpread
}

// card writes one unit's page.
func (p *page) card(unit int, rows []benchRow) {
	n := len(p.widths)
	p.span(30, 1, n, p.text(fmt.Sprintf("%s · unit %d of %d", cut(clean(p.plan.Title), 60), unit, p.plan.Units), look{size: 18, bold: true, down: "bottom"}), look{})
	p.span(16, 1, n, p.text("plan "+p.plan.short()+" · write what the meter shows, in the row's unit, and tick what is done", look{size: 9, ink: faded, bottom: heavy}), look{bottom: heavy})
	p.put(5)
	p.cardFields("Tested by", "Date")
	p.cardFields("Instruments (serial)", "Room, °C")
	p.cardFields("Serial number of the unit", "Verdict")
	p.put(6)
	p.cardHeads()
	for i, r := range rows {
		if begins(rows, i) {
			p.cardBand(r)
		}
		p.cardRow(r)
	}
	p.cardSamples(unit)
	p.cardFoot(whys(rows))
}

// box is a place to write in that a black and white printer shows.
var box = look{open: true, top: rule, bottom: rule, left: rule, right: rule}

// cardFields writes two labelled places.
func (p *page) cardFields(left, right string) {
	label, place := look{size: 9, ink: faded}, look{open: true, bottom: rule}
	cells := row(len(p.widths))
	cells[0], cells[1] = p.text(left, label), p.text("", label)
	cells[2], cells[3] = p.text("", place), p.text("", place)
	for i := 5; i < 8; i++ {
		cells[i] = p.text("", label)
	}
	cells[5] = p.text(right, label)
	for i := 8; i < len(cells); i++ {
		cells[i] = p.text("", place)
	}
	p.put(20, cells...)
	p.merge(1, 2)
	p.merge(3, 4)
	p.merge(6, 8)
	p.merge(9, len(cells))
}

// cardHeads writes the two rows of headings.
func (p *page) cardHeads() {
	over := look{size: 9, bold: true, ink: copper, across: "center"}
	cells := row(len(p.widths))
	cells[5], cells[7] = p.text("A good unit shows", over), p.text("Proves the target", over)
	p.put(14, cells...)
	p.merge(6, 7)
	p.merge(8, 9)
	p.heads("lliilrrrrccc", "Step", "Test point", "Hold the probe at", "Read", "Unit", "at least", "at most", "at least", "at most", "Reading", "Setting, %", "Done")
}

// cardBand begins a condition.
func (p *page) cardBand(r benchRow) {
	words := p.plan.setUp(r.condition)
	l := look{bold: true, ink: copper, bottom: rule, wrap: true, down: "bottom"}
	n := lines(words, p.wide(1, len(p.widths)), 10, true)
	p.span(lineHeight(10, n)+2, 1, len(p.widths), p.text(words, l), l)
}

// cardRow writes a reading, or an adjustment with where it usually ends.
func (p *page) cardRow(r benchRow) {
	text := look{bottom: hairline, wrap: true}
	name, place := r.name, r.at
	done := look{bottom: hairline}
	if r.turn {
		name, done = "turn "+name, box
		place += "; usually ends at " + ends(p.plan.trimReport(r.name)) + " of its travel"
	}
	step := ""
	if r.step > 0 {
		step = fmt.Sprint(r.step)
	}
	cells := []excelize.Cell{
		p.text(step, look{bottom: hairline, bold: true}), p.text(name, bolder(text)), p.text(place, indentedIf(true, text)), p.text(r.read, indentedIf(true, text)), p.text(r.symbol, text),
	}
	for _, v := range []float64{r.low, r.high, r.acceptLow, r.acceptHigh} {
		cells = append(cells, p.limit(v, r.format(), look{bottom: hairline}))
	}
	cells = append(cells, p.text("", box), p.text("", done), p.text("", done))
	n := max(lines(clean(name), p.widths[1], 10, true), lines(clean(place), p.widths[2]-indented, 10, false), lines(clean(r.read), p.widths[3]-indented, 10, false))
	p.put(max(20, lineHeight(10, n)), cells...)
}

// cardSamples writes the tests at other conditions that are done on a unit.
func (p *page) cardSamples(unit int) {
	begun := false
	for _, x := range p.plan.Samples {
		if !sampledOn(x, unit) {
			continue
		}
		if !begun {
			begun = true
			l := look{bold: true, ink: copper, bottom: rule, down: "bottom"}
			p.span(20, 1, len(p.widths), p.text("At other conditions, trims left as they are", l), l)
		}
		r := sampleRow(x)
		r.at = p.plan.conditionWords(x) + "; " + r.at
		p.cardRow(r)
	}
}

// sampledOn says whether a unit is one of those a sample is taken of: the
// last of every so many.
func sampledOn(x bench.Sample, unit int) bool { return unit%max(1, x.Every) == 0 }

// cardFoot writes what to know of the rows, lines to write on and the cautions.
func (p *page) cardFoot(notes []string) {
	p.put(6)
	small := look{size: 9, ink: faded}
	for _, n := range notes {
		p.paragraph(n, 1, len(p.widths), small)
	}
	for _, label := range []string{"Notes", "", ""} {
		cells := row(len(p.widths))
		cells[0] = p.text(label, small)
		for i := 1; i < len(cells); i++ {
			cells[i] = p.text("", look{open: true, bottom: rule})
		}
		p.put(20, cells...)
		p.merge(2, len(cells))
	}
	if len(p.plan.Cautions) > 0 {
		p.put(5)
	}
	for _, c := range p.plan.Cautions {
		p.paragraph("• "+c, 1, len(p.widths), small)
	}
}
