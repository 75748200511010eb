package workbook

import (
	"io"
	"strings"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"

	"github.com/xuri/excelize/v2"
)

// The sheets of a reviewed batch, in the order of their tabs.
const (
	reviewSheet   = "Review"
	readingsSheet = "Readings"
	batchSheet    = "Batch"
	chartsSheet   = "Distributions"
	figuresSheet  = "Chart figures" // hidden: only charts look at it
)

// Reviewed is everything that the workbook of a reviewed batch shows, as plain
// data. Quantities are SI base units.
type Reviewed struct {
	Title   string // the build's
	Digest  string // of the plan, hexadecimal
	Version string // of this program
	From    string // the file that was read
	Paper   Paper

	Summary  []string // sentences for the first page
	Units    []ReviewedUnit
	Turns    []bench.Turn
	Readings []bench.Reading
	Filled   bench.Filled // what was read
	Turned   bench.Filled // where trims were left
	Batch    []string     // sentences on the batch
	Points   []ReviewedPoint
	Lots     []string // sentences
	Rest     []string // sentences on the units not read yet

	// Good are readings of simulated good units, by point.
	Good map[string][]float64
}

// ReviewedUnit is the verdict on one unit, in words.
type ReviewedUnit struct {
	Unit     int
	Verdict  string
	Word     string // the verdict in a word or two, above the unit's readings
	Grade    Grade
	Outside  []string
	Suspects []string // with their probabilities, the first first
	Next     []string // what to read or measure
}

// Grade is how a verdict is marked.
type Grade int

// The grades.
const (
	GradeUnread  Grade = iota // nothing to judge
	GradeGood                 // as it should be
	GradeOpen                 // nothing wrong so far, or a target not proved
	GradeFaulted              // outside, unlikely or accused
)

// ReviewedPoint is one test point over the batch, as Reviewed.Readings. What is
// not known is NaN.
type ReviewedPoint struct {
	Units                 int
	Mean, Expected, Shift spread.Figure
	Ratio                 spread.Figure // of the spread to that expected
	Slope                 spread.Figure // per unit number
	Remark                string        // "" where nothing is odd
}

// WriteReviewed lays out a reviewed batch and writes it as an .xlsx file.
// Nothing is written to w unless the whole workbook could be made. The same
// Reviewed gives the same bytes.
func WriteReviewed(w io.Writer, r Reviewed) error {
	p := Plan{Title: r.Title, Digest: r.Digest, Version: r.Version, Paper: r.Paper, Turns: r.Turns, Readings: r.Readings, Units: len(r.Units)}
	if p.Units > 0 { // none is a batch of which nothing is known
		if err := p.valid(); err != nil {
			return err
		}
	}
	b := newBook(p, []string{reviewSheet, readingsSheet, batchSheet, chartsSheet, figuresSheet})
	defer b.file.Close()
	b.keep(b.file.SetSheetVisible(figuresSheet, false))
	b.properties("Reviewed batch")
	b.reviewedUnits(r)
	b.reviewedReadings(r)
	b.reviewedBatch(r)
	b.distributions(r)
	return b.write(w)
}

// look of a grade, on a cell's own.
func (g Grade) look(l look) look {
	switch g {
	case GradeGood:
		l.ink = moss
	case GradeOpen:
		l.fill, l.ink, l.bold = straw, umber, true
	case GradeFaulted:
		l.fill, l.ink, l.bold = rose, brick, true
	default:
		l.ink = faded
	}
	return l
}

// mark stands before a verdict, so that it survives a printer without colours.
func (g Grade) mark() string {
	return [...]string{"", "✓ ", "△ ", "✗ "}[g]
}

// reviewedUnits writes the first sheet: a row for every unit.
func (b *book) reviewedUnits(r Reviewed) {
	s := setup{landscape: true, onePage: 720}
	p := b.open(reviewSheet, []float64{6, 24, 52, 44, 44}, s)
	n := len(p.widths)
	p.heading(cut(clean(r.Title), 90), "Reviewed test sheet · plan "+b.plan.short()+" · read from "+r.From)
	for _, text := range r.Summary {
		p.paragraph(text, 1, n, look{})
	}
	p.put(6)
	titles := p.heads("cllii", "Unit", "Verdict", "Outside", "Probably", "Read or measure next")
	for _, u := range r.Units {
		l := look{bottom: hairline, wrap: true}
		words := []string{u.Grade.mark() + clean(u.Verdict), joinedUp(u.Outside), joinedUp(u.Suspects), joinedUp(u.Next)}
		verdict := u.Grade.look(l)
		tall := lines(words[0], p.widths[1], 10, verdict.bold)
		cells := []excelize.Cell{p.number(float64(u.Unit), "0", look{bottom: hairline, bold: true, across: "center"}), p.text(words[0], verdict)}
		for i, word := range words[1:] {
			cells = append(cells, p.text(word, indentedIf(i > 0, l)))
			tall = max(tall, lines(word, p.widths[i+2]-indented, 10, false))
		}
		p.put(lineHeight(10, tall), cells...)
	}
	p.close(s, titles)
}

// joinedUp makes one text of several, each cleaned before.
func joinedUp(list []string) string {
	out := make([]string, len(list))
	for i, s := range list {
		out[i] = clean(s)
	}
	return strings.Join(out, "; ")
}

// reviewedBatch writes what the units say together.
func (b *book) reviewedBatch(r Reviewed) {
	s := setup{landscape: true, onePage: 600}
	p := b.open(batchSheet, []float64{26, 7, 7, 13, 13, 11, 11, 15, 50}, s)
	n := len(p.widths)
	p.heading(batchSheet, "What the units say together")
	for _, text := range r.Batch {
		p.paragraph(text, 1, n, look{})
	}
	p.section("Test points")
	p.heads("lrirrrrri", "Test point", "Units", "Unit", "Mean", "Expected", "Shift, standard deviations", "Spread, times expected", "Change from unit to unit", "Remark")
	for i, x := range r.Points {
		p.reviewedPoint(r.Readings[i], x)
	}
	p.sentences("Lots", r.Lots, "No lot is off its centre as far as the readings can tell.")
	p.sentences("The units not read yet", r.Rest, "Nothing is to be said of them: too little was read, or every unit was.")
	p.put(6)
	p.paragraph("The shift is the distance of the mean from what is expected of a batch, in standard deviations of such means, lots and the instrument's error of gain included. "+
		"A remark stands where, of batches in which nothing is wrong, one in twenty would have any of its kind. Means leave out units with a probable fault.", 1, n, look{size: 9, ink: faded})
	p.close(s, 0)
}

func (p *page) sentences(title string, list []string, none string) {
	p.section(title)
	if len(list) == 0 {
		p.nothing(none)
	}
	for _, text := range list {
		p.paragraph(text, 1, len(p.widths), look{})
	}
}

func (p *page) reviewedPoint(r bench.Reading, x ReviewedPoint) {
	row := readingRow(r)
	l, name := look{bottom: hairline}, look{bottom: hairline, bold: true, wrap: true}
	remark := look{bottom: hairline, indent: 1, wrap: true}
	text := clean(x.Remark)
	if text != "" {
		remark.fill, remark.ink, remark.bold = straw, umber, true
		text = "◆ " + text
	}
	finer := Digits{row.scale}.Finer()
	slope := scaleOf(r.Unit, largestOf(x.Slope), powerBelow(largestOf(x.Slope)/100))
	format := `+` + slope.format() + `;-` + slope.format() + `;` + slope.format()
	if symbol := cut(strings.ReplaceAll(clean(slope.symbol), `"`, ""), 12); symbol != "" {
		format = strings.ReplaceAll(format, "_)", ` "`+symbol+`"_)`)
	}
	n := max(lines(clean(r.Point), p.widths[0], 10, true), lines(text, p.widths[8]-indented, 10, true))
	p.put(lineHeight(10, n)+1, p.text(r.Point, name), p.number(float64(x.Units), "0_)", l), p.text(row.symbol, indentedIf(true, l)),
		p.number(finer.nearest(float64(x.Mean)), finer.format(), bolder(l)), p.number(finer.nearest(float64(x.Expected)), finer.format(), l),
		p.number(scale{by: 1, decimals: 1}.nearest(float64(x.Shift)), "+0.0_);-0.0_);0.0_)", l), p.number(float64(x.Ratio), "0.00_)", l),
		p.number(slope.nearest(float64(x.Slope)), format, l), p.text(text, remark))
}
