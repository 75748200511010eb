package workbook

import (
	"batchwright/tolerance/spread"

	"github.com/xuri/excelize/v2"
)

// Trade is every efficient trade between the order's money and how far an
// output's change stays from none.
type Trade struct {
	Target string // on the change
	Unit   string // a symbol package quantity knows
	Asked  string
	Limit  float64 // the largest change that the target allows to either side
	Points []TradePoint
	Notes  []string
}

// TradePoint is one efficient choice, the cheapest first.
type TradePoint struct {
	Order, Unit          float64       // money
	Predicted, Simulated spread.Figure // half widths: to first order, and in simulation
	Complying            spread.Figure // share of the units within the target's limits
	Met                  bool
	Parts                string
}

// The columns of the trade. Those that the chart draws its steps from stand
// beside the printed ones.
const (
	tradeMoney     = 1
	tradePredicted = 3
	tradeSimulated = 4
	tradeWide      = 7
	tradeSteps     = tradeWide + 2
)

// trade writes the trade as a table with a chart below.
func (b *book) trade() {
	t := b.plan.Trade
	if t == nil {
		return
	}
	s := setup{landscape: true, onePage: 1000}
	p := b.open(tradeSheet, []float64{12, 12, 13, 13, 12, 10, 92}, s)
	p.heading(tradeSheet, "What a steadier "+clean(t.Target)+" would cost. Asked: "+clean(t.Asked))
	if len(t.Points) == 0 {
		p.nothing("There is no choice to trade between.")
	} else {
		p.tradeTable(t)
	}
	p.put(6)
	for _, n := range t.Notes {
		p.paragraph(n, 1, tradeWide, look{size: 9, ink: faded})
	}
	if b.plan.PriceNote != "" {
		p.paragraph("Money: "+b.plan.PriceNote+".", 1, tradeWide, look{size: 9, ink: faded})
	}
	p.close(s, 0)
}

// tradeTable writes the points, the chart's steps beside them, and the chart.
func (p *page) tradeTable(t *Trade) {
	sc, steps := t.scale(), t.steps()
	first := p.tradeHeads(t, sc) + 1
	for i, corner := range steps { // no fewer than points
		height, cells := 0.0, make([]excelize.Cell, tradeWide)
		if i < len(t.Points) {
			height, cells = p.tradeRow(t.Points[i], sc)
		}
		p.put(height, append(cells, p.tradeStep(corner, t, sc)...)...)
	}
	below := first + len(t.Points)
	p.keep(p.file.AddChart(p.name, at(1, below+1), p.tradeChart(t, sc, first, first+len(steps)-1)))
	for p.last < below+tradeChartRows {
		p.put(0)
	}
}

// tradeHeads writes the headings and returns their row.
func (p *page) tradeHeads(t *Trade, sc scale) int {
	money, limit := p.currency(), ""
	if finite(t.Limit) {
		limit = "limit ±" + sc.text(t.Limit) + " " + sc.symbol
	}
	return p.heads("rrrrrii", "Order "+money, "One unit "+money, "Within ±"+sc.symbol+", first order", "Within ±"+sc.symbol+", simulated",
		"Units that comply", "Target", "Parts (below the first: what differs from the row above)",
		"", "The chart's steps: order", "simulated, in steps", limit)
}

// tradeRow is a point's height and cells.
func (p *page) tradeRow(x TradePoint, sc scale) (float64, []excelize.Cell) {
	l := look{bottom: hairline, wrap: true}
	padded, verdict, word := l, look{bottom: hairline, bold: true, ink: moss, indent: 1}, "met"
	padded.indent = 1
	if !x.Met {
		verdict.ink, verdict.fill, word = brick, rose, "MISSED"
	}
	complying, format := shareFigure(x.Complying)
	n := lines(clean(x.Parts), p.widths[tradeWide-1]-indented, 10, false)
	return lineHeight(10, n), []excelize.Cell{
		p.number(x.Order, moneyFormat, bolder(l)), p.number(x.Unit, moneyFormat, l),
		p.number(sc.nearest(float64(x.Predicted)), sc.format(), l), p.number(sc.nearest(float64(x.Simulated)), sc.format(), bolder(l)),
		p.number(complying, format+"_)", l), p.text(word, verdict), p.text(x.Parts, padded),
	}
}

// scale fits all half widths and the limit.
func (t *Trade) scale() scale {
	all := []spread.Figure{spread.Figure(t.Limit)}
	for _, x := range t.Points {
		all = append(all, x.Predicted, x.Simulated)
	}
	return scaleOf(t.Unit, largestOf(all...), powerBelow(largestOf(all...)/200))
}

// tradeCorner is a corner of the line that the chart draws.
type tradeCorner struct{ money, width float64 }

// steps are the corners: more money buys nothing before the next point.
func (t *Trade) steps() []tradeCorner {
	var list []tradeCorner
	for i, x := range t.Points {
		if i > 0 {
			list = append(list, tradeCorner{x.Order, float64(t.Points[i-1].Simulated)})
		}
		list = append(list, tradeCorner{x.Order, float64(x.Simulated)})
	}
	return list
}

// tradeStep is a corner's cells, beside the printed columns.
func (p *page) tradeStep(c tradeCorner, t *Trade, sc scale) []excelize.Cell {
	l := look{size: 8, ink: faded}
	return []excelize.Cell{{}, p.limit(c.money, moneyFormat, l), p.limit(sc.nearest(c.width), sc.format(), l), p.limit(sc.nearest(t.Limit), sc.format(), l)}
}
