package workbook

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"

	"github.com/xuri/excelize/v2"
)

// The sheet of distributions: two charts side by side, three rows to a page.
const (
	chartColumns = 8
	chartAcross  = 12.0 // of a column
	blockRows    = 12   // as tall as a chart and its margin
	chartsDown   = 3    // a page
	chartBins    = 24
)

// distributions writes a chart for every test point: what good units were
// expected to read, with what was read on it.
func (b *book) distributions(r Reviewed) {
	figures := b.open(figuresSheet, []float64{28, 16, 14, 14}, setup{onePage: 1})
	figures.heads("llrr", "Test point", "Series", "Reading", "Units")
	var charts []*excelize.Chart
	read := byUnit(r.Filled)
	for _, x := range r.Readings {
		if c := figures.distribution(x, r.Good[x.Point], r.Units, read); c != nil {
			charts = append(charts, c)
		}
	}
	figures.protect()
	if figures.out != nil { // no print area: a hidden sheet that has one is printed
		b.keep(figures.out.Flush())
	}
	s := setup{percent: 100}
	var widths []float64
	for range chartColumns {
		widths = append(widths, chartAcross)
	}
	p := b.open(chartsSheet, widths, s)
	p.heading(chartsSheet, "What good units were expected to read, and what was read")
	p.paragraph("Line: how many of the units read were expected at each reading. ● a unit inside what a good unit shows, ▲ a unit outside, at the edge where it is off the scale. "+
		"Upright lines: what a good unit shows; dashed: what proves the target.", 1, chartColumns, look{size: 9, ink: faded})
	if len(charts) == 0 {
		p.nothing("Nothing was read that could be drawn.")
	}
	p.hang(charts)
	p.close(s, 0)
}

// hang places charts, with a new page after so many.
func (p *page) hang(charts []*excelize.Chart) {
	for i, c := range charts {
		if i%2 == 0 {
			if i > 0 && i%(2*chartsDown) == 0 && p.out != nil {
				p.keep(p.out.InsertPageBreak(at(1, p.last+1)))
			}
			p.keep(p.file.AddChart(p.name, at(1, p.last+1), c))
			for range blockRows {
				p.put(0)
			}
			continue
		}
		p.keep(p.file.AddChart(p.name, at(1+chartColumns/2, p.last+1-blockRows), c))
	}
}

// drawn is one test point's chart in figures, in the row's unit.
type drawn struct {
	row       benchRow
	low, high float64 // the axis
	step      float64 // of the axis
	tall      float64
}

// distribution writes a chart's figures and returns the chart; nil where nothing
// can be drawn.
func (p *page) distribution(x bench.Reading, good []float64, units []ReviewedUnit, read map[int]map[string]float64) *excelize.Chart {
	row := readingRow(x)
	var numbers []int
	var values []float64
	for _, u := range units {
		if v, there := read[u.Unit][x.Point]; there && finite(v) {
			numbers, values = append(numbers, u.Unit), append(values, row.typed(v))
		}
	}
	if len(values) == 0 {
		return nil
	}
	good = shownGood(good, row)
	d := drawn{row: row}
	d.span(good, values)
	counts := d.counts(good, float64(len(values)))
	heights := d.stacks(values)
	d.tall = math.Ceil(max(slices.Max(counts), slices.Max(heights))*1.08 + 0.3)
	var series []excelize.ChartSeries
	if len(good) > 0 {
		series = append(series, p.curve(d, counts))
	}
	series = append(series, p.uprights(d)...)
	inside, outside, off := d.sorted(numbers, values, heights)
	series = append(series, p.marks(d, "inside", "circle", ink, inside)...)
	series = append(series, p.marks(d, "outside", "triangle", brick, outside)...)
	return p.distributionChart(d, series, off)
}

// shownGood are the finite ones in the row's unit, rising.
func shownGood(good []float64, row benchRow) []float64 {
	var list []float64
	for _, v := range good {
		if finite(v) {
			list = append(list, v/row.by)
		}
	}
	slices.Sort(list)
	return list
}

// span makes the axis as wide as nearly all good units and the windows; of
// readings only those near them have a place on it.
func (d *drawn) span(good, values []float64) {
	d.low, d.high = math.Inf(1), math.Inf(-1)
	take := func(v float64) {
		if finite(v) {
			d.low, d.high = math.Min(d.low, v), math.Max(d.high, v)
		}
	}
	if n := len(good); n > 0 {
		take(good[n/1000])
		take(good[n-1-n/1000])
	}
	take(d.row.low)
	take(d.row.high)
	near := d.high - d.low
	for _, v := range append([]float64{d.row.acceptLow, d.row.acceptHigh}, values...) {
		if !finite(near) || near <= 0 || v >= d.low-near/2 && v <= d.high+near/2 {
			take(v)
		}
	}
	room := (d.high - d.low) * 0.04
	if !(room > 0) {
		room = max(math.Abs(d.low)*0.05, 1e-9)
	}
	d.step = niceStep((d.high - d.low + 2*room) / 5)
	d.low, d.high = math.Floor((d.low-room)/d.step)*d.step, math.Ceil((d.high+room)/d.step)*d.step
}

// niceStep is 1, 2 or 5 times a power of ten, not below x.
func niceStep(x float64) float64 {
	power := powerBelow(x)
	for _, by := range []float64{1, 2, 5} {
		if by*power >= x*(1-1e-9) {
			return by * power
		}
	}
	return 10 * power
}

// bin is where on the axis a value falls; values off it fall at its ends.
func (d drawn) bin(v float64) int {
	return int(min(chartBins-1, max(0, math.Floor((v-d.low)/(d.high-d.low)*chartBins))))
}

func (d drawn) centre(bin int) float64 {
	return d.low + (float64(bin)+0.5)*(d.high-d.low)/chartBins
}

// counts are how many of n units are expected in each bin.
func (d drawn) counts(good []float64, n float64) []float64 {
	list := make([]float64, chartBins)
	for _, v := range good {
		if v >= d.low && v <= d.high {
			list[d.bin(v)] += n / float64(len(good))
		}
	}
	return list
}

// stacks put each reading upon those of its bin that came before.
func (d drawn) stacks(values []float64) []float64 {
	seen := make([]float64, chartBins)
	heights := make([]float64, len(values))
	for i, v := range values {
		k := d.bin(v)
		seen[k]++
		heights[i] = seen[k] - 0.5
	}
	return heights
}

// mark is a place on a chart.
type mark struct{ x, y float64 }

// sorted tells readings inside from those outside; off says which are off the
// scale, and are drawn at its edge.
func (d drawn) sorted(numbers []int, values, heights []float64) (inside, outside []mark, off string) {
	const most = 3
	var words []string
	for i, v := range values {
		m := mark{min(d.high, max(d.low, v)), heights[i]}
		if m.x != v {
			words = append(words, fmt.Sprintf("unit %d at %s", numbers[i], Digits{d.row.scale}.Text(spread.Figure(v*d.row.by))))
		}
		if s := d.row.side(v); s == "▼" || s == "▲" {
			outside = append(outside, m)
		} else {
			inside = append(inside, m)
		}
	}
	if more := len(words) - most; more > 0 {
		words = append(words[:most], fmt.Sprintf("%d more", more))
	}
	return inside, outside, strings.Join(words, ", ")
}

// series writes places into the figures and returns a series that joins them.
func (p *page) series(d drawn, name, color string, places []mark) excelize.ChartSeries {
	first := p.last + 1
	for _, m := range places {
		p.put(0, p.text(d.row.name, look{}), p.text(name, look{}), p.number(m.x, "0.######", look{}), p.number(m.y, "0.###", look{}))
	}
	return excelize.ChartSeries{
		Categories: p.ref(3, first, p.last), Values: p.ref(4, first, p.last), Marker: excelize.ChartMarker{Symbol: "none"},
		Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{color}}, Line: excelize.LineOptions{Type: excelize.LineSolid, Width: 1.5},
	}
}

func (p *page) curve(d drawn, counts []float64) excelize.ChartSeries {
	var places []mark
	for i, y := range counts {
		places = append(places, mark{d.centre(i), y})
	}
	return p.series(d, "expected", "9A8F84", places)
}

// uprights are the limits of the windows.
func (p *page) uprights(d drawn) []excelize.ChartSeries {
	var list []excelize.ChartSeries
	for _, limit := range []struct {
		at     float64
		name   string
		dashed bool
	}{
		{d.row.low, "shows at least", false}, {d.row.high, "shows at most", false},
		{d.row.acceptLow, "proves at least", true}, {d.row.acceptHigh, "proves at most", true},
	} {
		if !(limit.at >= d.low && limit.at <= d.high) {
			continue
		}
		s := p.series(d, limit.name, copper, []mark{{limit.at, 0}, {limit.at, d.tall}})
		if limit.dashed {
			s.Line.Dash = excelize.LineDashDash
		}
		list = append(list, s)
	}
	return list
}

// marks are readings, without a line.
func (p *page) marks(d drawn, name, symbol, color string, places []mark) []excelize.ChartSeries {
	if len(places) == 0 {
		return nil
	}
	s := p.series(d, name, color, places)
	s.Line.Type = excelize.LineNone
	fill := excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{color}}
	s.Marker = excelize.ChartMarker{Symbol: symbol, Size: 6, Fill: fill, Border: excelize.LineOptions{Type: excelize.LineSolid, Width: 0.75, Fill: fill}}
	return []excelize.ChartSeries{s}
}

func (p *page) distributionChart(d drawn, series []excelize.ChartSeries, off string) *excelize.Chart {
	small := excelize.Font{Family: font, Size: 8, Color: ink}
	title := cut(clean(d.row.name), 60)
	if d.row.symbol != "" {
		title += ", " + cut(clean(d.row.symbol), 12)
	}
	runs := []excelize.RichTextRun{{Text: title, Font: &excelize.Font{Family: font, Size: 9, Bold: true, Color: ink}}}
	if off != "" {
		runs = append(runs, excelize.RichTextRun{Text: "   off the scale: " + off, Font: &excelize.Font{Family: font, Size: 8, Color: brick}})
	}
	axis := excelize.ChartAxis{TickLabelPosition: excelize.ChartTickLabelLow, Font: small}
	x, y := axis, axis
	format := scale{by: 1, decimals: min(6, max(0, int(math.Ceil(-math.Log10(d.step)-1e-9))))}
	x.Minimum, x.Maximum, x.NumFmt = &d.low, &d.high, excelize.ChartNumFmt{CustomNumFmt: strings.TrimSuffix(format.format(), "_)")}
	y.Minimum, y.Maximum, y.MajorGridLines, y.NumFmt = new(float64), &d.tall, true, excelize.ChartNumFmt{CustomNumFmt: "0"}
	if d.tall <= 10 {
		y.MajorUnit = 1
	}
	return &excelize.Chart{
		Type: excelize.Scatter, Series: series, Dimension: excelize.ChartDimension{Width: 350, Height: 264}, Legend: excelize.ChartLegend{Position: "none", Font: &small},
		XAxis: x, YAxis: y, Title: excelize.ChartTitle{Paragraph: runs}, Border: excelize.LineOptions{Type: excelize.LineNone}, ShowBlanksAs: "gap",
		Format: excelize.GraphicOptions{AltText: title, Positioning: "oneCell"},
	}
}
