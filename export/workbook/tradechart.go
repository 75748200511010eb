package workbook

import "github.com/xuri/excelize/v2"

// tradeChartRows are a little taller than the chart.
const tradeChartRows = 19

// tradeChart draws the half width against the order's money: a line in steps
// and a mark at each point, what it was to first order beside, and the limit
// dashed. The steps stand in the rows from first to last.
func (p *page) tradeChart(t *Trade, sc scale, first, last int) *excelize.Chart {
	small := excelize.Font{Family: font, Size: 9, Color: ink}
	words := func(s string) excelize.ChartTitle {
		return excelize.ChartTitle{Paragraph: []excelize.RichTextRun{{Text: s, Font: &small}}}
	}
	end := first + len(t.Points) - 1
	line := p.tradeSeries(tradeSteps, tradeSteps+1, first, last, ink)
	line.Line.Width = 1.5
	series := []excelize.ChartSeries{line}
	if finite(t.Limit) {
		limit := p.tradeSeries(tradeSteps, tradeSteps+2, first, last, copper)
		limit.Line.Width, limit.Line.Dash = 1.5, excelize.LineDashDash
		series = append(series, limit)
	}
	series = append(series, p.tradeMarks(tradeSimulated, first, end, "circle", ink), p.tradeMarks(tradePredicted, first, end, "x", "7A9CB8"))
	axis := excelize.ChartAxis{MajorGridLines: true, TickLabelPosition: excelize.ChartTickLabelLow, Font: small}
	x, y := axis, axis
	x.Title = words("Order " + p.currency())
	return &excelize.Chart{Type: excelize.Scatter, Series: series, Dimension: excelize.ChartDimension{Width: 1150, Height: 390},
		Legend: excelize.ChartLegend{Position: "bottom", Font: &small}, XAxis: x, YAxis: y, Title: words("Half width of " + clean(t.Target) + ", " + sc.symbol), Border: excelize.LineOptions{Type: excelize.LineNone},
		ShowBlanksAs: "gap", Format: excelize.GraphicOptions{AltText: clean(t.Target) + " against money", Positioning: "oneCell"}}
}

// tradeSeries draws one column against another. Its name is the heading.
func (p *page) tradeSeries(x, y, first, last int, color string) excelize.ChartSeries {
	return excelize.ChartSeries{Name: p.ref(y, first-1, first-1), Categories: p.ref(x, first, last), Values: p.ref(y, first, last), Marker: excelize.ChartMarker{Symbol: "none"},
		Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{color}}, Line: excelize.LineOptions{Type: excelize.LineSolid}}
}

// tradeMarks draws the points of a column of the table without a line.
func (p *page) tradeMarks(column, first, last int, symbol, color string) excelize.ChartSeries {
	s := p.tradeSeries(tradeMoney, column, first, last, color)
	s.Line.Type = excelize.LineNone
	fill := excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{color}}
	s.Marker = excelize.ChartMarker{Symbol: symbol, Size: 6, Fill: fill, Border: excelize.LineOptions{Type: excelize.LineSolid, Width: 0.75, Fill: fill}}
	return s
}
