package workbook

import (
	"fmt"

	"github.com/xuri/excelize/v2"
)

// compareCharts hangs the charts below the tables: good units, and half widths
// against their limits.
func (p *page) compareCharts(c *Compare, yield cellSpan, widths []cellSpan, limit cellSpan) {
	p.put(9)
	top := p.last + 1
	p.keep(p.file.AddChart(p.name, at(1, top), p.columnChart("Good units", []cellSpan{yield}, 700, "0.0 %")))
	var shown []cellSpan
	for _, w := range widths {
		if w.column > 0 {
			shown = append(shown, w)
		}
	}
	if len(shown) > 0 {
		bars := p.columnChart("Half width as a share of its limit", shown, 700, "0 %")
		bars.YAxis.Maximum, bars.Legend.Position = nil, "bottom"
		line := &excelize.Chart{Type: excelize.Line, Series: []excelize.ChartSeries{p.limitLine(limit)}, XAxis: bars.XAxis, YAxis: bars.YAxis}
		p.keep(p.file.AddChart(p.name, at(7, top), bars, line))
	}
	for range compareChartRows {
		p.put(0)
	}
}

// compareChartRows are as tall as a chart.
const compareChartRows = 15

// mostLabels is how many bars of a chart have their figure written on them:
// more would run into each other.
const mostLabels = 12

// greys are the bars' fills, told apart in print: dark, light, middle.
var greys = [...]string{"4A4540", "D9D0C6", "9A8F84"}

// ref names cells of this sheet.
func (p *page) ref(column, first, last int) string {
	if first == last {
		return fmt.Sprintf("'%s'!$%s$%d", p.name, letters(column), first)
	}
	return fmt.Sprintf("'%s'!$%s$%d:$%s$%d", p.name, letters(column), first, letters(column), last)
}

// columnChart draws columns of shares, one group a case, with their figures.
func (p *page) columnChart(title string, spans []cellSpan, width uint, figures string) *excelize.Chart {
	small := excelize.Font{Family: font, Size: 9, Color: ink}
	top := 1.0
	var series []excelize.ChartSeries
	for i, s := range spans {
		series = append(series, excelize.ChartSeries{
			Name: p.ref(s.column, s.first-1, s.first-1), Categories: p.ref(1, s.first, s.last), Values: p.ref(s.column, s.first, s.last),
			Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{greys[i%len(greys)]}},
			Line: excelize.LineOptions{Type: excelize.LineSolid, Width: 0.75},
		})
	}
	gap, vary := uint(60), false
	return &excelize.Chart{
		Type: excelize.Col, Series: series, Dimension: excelize.ChartDimension{Width: width, Height: 320}, GapWidth: &gap, VaryColors: &vary,
		Legend: excelize.ChartLegend{Position: "none", Font: &small},
		XAxis:  excelize.ChartAxis{Font: small}, YAxis: excelize.ChartAxis{MajorGridLines: true, Font: small, Minimum: new(float64), Maximum: &top, NumFmt: excelize.ChartNumFmt{CustomNumFmt: "0 %"}},
		Title:    excelize.ChartTitle{Paragraph: []excelize.RichTextRun{{Text: title, Font: &small}}},
		PlotArea: excelize.ChartPlotArea{ShowVal: len(spans)*(spans[0].last-spans[0].first+1) <= mostLabels, NumFmt: excelize.ChartNumFmt{CustomNumFmt: figures}},
		Border:   excelize.LineOptions{Type: excelize.LineNone}, ShowBlanksAs: "gap",
		Format: excelize.GraphicOptions{AltText: title, Positioning: "oneCell"},
	}
}

// limitLine is the dashed line at the limit.
func (p *page) limitLine(s cellSpan) excelize.ChartSeries {
	return excelize.ChartSeries{
		Name: p.ref(s.column, s.first-1, s.first-1), Categories: p.ref(1, s.first, s.last), Values: p.ref(s.column, s.first, s.last),
		Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{copper}}, Marker: excelize.ChartMarker{Symbol: "none"},
		Line: excelize.LineOptions{Type: excelize.LineSolid, Width: 2, Dash: excelize.LineDashDash},
	}
}
