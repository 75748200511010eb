package workbook

import (
	"fmt"
	"math"

	"batchwright/tolerance/spread"

	"github.com/xuri/excelize/v2"
)

// chartRows is how many rows of the drift sheet a chart stands beside.
const chartRows = 20

// drift writes how outputs move with temperature, each as a table with a chart.
func (b *book) drift() {
	s := setup{landscape: true, percent: 88}
	p := b.open(driftSheet, []float64{14, 11, 12, 11, 12, 11, 2, 11, 11, 11, 11, 11, 11, 11}, s)
	p.heading(driftSheet, "How the finished, adjusted instrument moves with temperature")
	if len(b.plan.Drifts) == 0 {
		p.nothing("No drift was worked out.")
	}
	for i, d := range b.plan.Drifts {
		p.driftBlock(d, i)
	}
	p.close(s, 0)
}

// driftBlock writes one table and hangs its chart beside it.
func (p *page) driftBlock(d Drift, index int) {
	if index > 0 && p.out != nil { // a page for each
		p.keep(p.out.InsertPageBreak(at(1, p.last+1)))
	}
	p.section(or(clean(d.Title), d.Output))
	p.paragraph(or(clean(d.Meaning), "Low and high are given without a meaning."), 1, 6, look{size: 9, ink: faded})
	sc := d.scale()
	heads := []string{"Temperature, °C", "Low, " + sc.symbol, "Nominal, " + sc.symbol, "High, " + sc.symbol}
	low, high := d.limits()
	if finite(low) || finite(high) {
		heads = append(heads, "Target from, "+sc.symbol, "Target to, "+sc.symbol)
	}
	first := p.heads("rrrrrr", heads...) + 1
	for _, r := range d.Rows {
		p.driftRow(r, d, sc)
	}
	if len(d.Rows) == 0 {
		p.nothing("No temperature was worked out.")
	} else {
		p.keep(p.file.AddChart(p.name, at(8, first-1), d.chart(p.name, first, p.last, sc)))
	}
	for p.last < first+chartRows-1 {
		p.put(0)
	}
}

// limits are the target's, or NaN where it has none on that side.
func (d Drift) limits() (low, high float64) {
	if d.Limits == nil {
		return math.NaN(), math.NaN()
	}
	return float64(d.Limits.Low), float64(d.Limits.High)
}

// scale fits all the figures of the drift, limits included: the last digit is
// the largest power of ten below a two-hundredth of all they span.
func (d Drift) scale() scale {
	low, high := d.limits()
	all := []spread.Figure{spread.Figure(low), spread.Figure(high)}
	for _, r := range d.Rows {
		all = append(all, r.Low, r.Nominal, r.High)
	}
	low, high = math.Inf(1), math.Inf(-1)
	for _, f := range all {
		if v := float64(f); finite(v) {
			low, high = math.Min(low, v), math.Max(high, v)
		}
	}
	return scaleOf(d.Unit, largestOf(all...), powerBelow((high-low)/200))
}

// driftRow writes one temperature. Target limits are rounded inward.
func (p *page) driftRow(r DriftRow, d Drift, sc scale) {
	l := look{bottom: hairline}
	f := sc.format()
	cells := []excelize.Cell{p.number(r.Celsius, "0.#_)", l), p.limit(sc.nearest(float64(r.Low)), f, l), p.limit(sc.nearest(float64(r.Nominal)), f, bolder(l)), p.limit(sc.nearest(float64(r.High)), f, l)}
	low, high := d.limits()
	if finite(low) || finite(high) {
		l.ink = copper
		cells = append(cells, p.limit(sc.above(low), f, l), p.limit(sc.below(high), f, l))
	}
	p.put(0, cells...)
}

// chart draws low, nominal and high against temperature, and the target's
// limits as dashed lines. A scatter chart's line takes its colour from the
// series' fill; LibreOffice and Excel both honour that.
func (d Drift) chart(sheet string, first, last int, sc scale) *excelize.Chart {
	column := func(c string) string { return fmt.Sprintf("'%s'!$%s$%d:$%s$%d", sheet, c, first, c, last) }
	line := func(c, name, color string, width float64, dash excelize.LineDashType) excelize.ChartSeries {
		return excelize.ChartSeries{Name: fmt.Sprintf("'%s'!$%s$%d", sheet, c, first-1), Categories: column("A"), Values: column(c),
			Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{color}}, Marker: excelize.ChartMarker{Symbol: "none"},
			Line: excelize.LineOptions{Type: excelize.LineSolid, Width: width, Dash: dash}}
	}
	series := []excelize.ChartSeries{line("B", "low", "7A9CB8", 1.5, excelize.LineDashSolid), line("C", "nominal", ink, 2.5, excelize.LineDashSolid), line("D", "high", "3F6D92", 1.5, excelize.LineDashSolid)}
	low, high := d.limits()
	if finite(low) {
		series = append(series, line("E", "from", copper, 1.5, excelize.LineDashDash))
	}
	if finite(high) {
		series = append(series, line("F", "to", copper, 1.5, excelize.LineDashDash))
	}
	small := excelize.Font{Family: font, Size: 9, Color: ink}
	axis := func() excelize.ChartAxis {
		return excelize.ChartAxis{MajorGridLines: true, TickLabelPosition: excelize.ChartTickLabelLow, Font: small}
	}
	words := func(s string) excelize.ChartTitle {
		return excelize.ChartTitle{Paragraph: []excelize.RichTextRun{{Text: s, Font: &small}}}
	}
	x, y := axis(), axis()
	x.Title = words("Temperature, °C")
	lowest, highest := d.span()
	x.Minimum, x.Maximum = &lowest, &highest
	return &excelize.Chart{Type: excelize.Scatter, Series: series, Dimension: excelize.ChartDimension{Width: 570, Height: 430},
		Legend: excelize.ChartLegend{Position: "bottom", Font: &small}, XAxis: x, YAxis: y,
		Title: words(clean(d.Output) + ", " + sc.symbol), Border: excelize.LineOptions{Type: excelize.LineNone}, ShowBlanksAs: "gap",
		Format: excelize.GraphicOptions{AltText: clean(d.Title), Positioning: "oneCell"}}
}

// span is the range of temperatures, as wide as the axis is to be.
func (d Drift) span() (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, r := range d.Rows {
		low, high = math.Min(low, r.Celsius), math.Max(high, r.Celsius)
	}
	if !(low < high) {
		return low - 1, low + 1
	}
	return low, high
}
