// Package chart draws as SVG what is better seen than read.
//
// The same figures give the same bytes: nothing is drawn from a clock, and
// letters are drawn as outlines, so that no font has to be there where a
// drawing is looked at. What it shows also stands in words in the drawing's
// title and description.
package chart

import (
	"errors"
	"fmt"
	"io"
	"math"
	"strings"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"batchwright/bom/quantity"
	"batchwright/tolerance/pick"
)

// Frame is what stands around a drawing.
type Frame struct {
	Title    string   // of the build
	Currency string   // of the money
	Limit    float64  // the largest change to either side that the target allows; NaN or infinite: none is drawn
	Notes    []string // sentences below, such as whose prices these are
}

// Trade draws a trade as steps: half width of the change, in the unit that
// people use for its size, against the whole order's money. Between two points
// more money buys nothing. It returns an error where there is no point, or one
// without a half width, and then writes nothing.
func Trade(w io.Writer, t pick.Trade, f Frame) error {
	if len(t.Points) == 0 {
		return errors.New("a trade without a point cannot be drawn")
	}
	for _, p := range t.Points {
		if !finite(float64(p.Simulated)) {
			return fmt.Errorf("the choice for %v has no simulated half width and cannot be drawn", p.Total)
		}
	}
	return newTradeDrawing(t, f).sheet().write(w)
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// tradeDrawing is a trade in the unit it is drawn in.
type tradeDrawing struct {
	trade     pick.Trade
	frame     Frame
	by        float64 // SI = drawn × by
	symbol    string
	simulated plotter.XYs // money, half width
	predicted plotter.XYs // those that are numbers
	limit     float64     // drawn; NaN: none
}

// farthest is how many times the largest half width a limit may be to be drawn:
// farther ones would leave the steps too flat to see.
const farthest = 2.5

func newTradeDrawing(t pick.Trade, f Frame) *tradeDrawing {
	d := &tradeDrawing{trade: t, frame: f, by: 1, symbol: plain(t.Unit), limit: math.NaN()}
	largest := 0.0
	for _, p := range t.Points {
		largest = math.Max(largest, float64(p.Simulated))
	}
	if unit, ok := quantity.Find(t.Unit); ok {
		d.by, d.symbol = quantity.Prefixed(largest, unit)
	}
	for _, p := range t.Points {
		d.simulated = append(d.simulated, plotter.XY{X: p.Total.Float(), Y: float64(p.Simulated) / d.by})
		if y := float64(p.Predicted); finite(y) {
			d.predicted = append(d.predicted, plotter.XY{X: p.Total.Float(), Y: y / d.by})
		}
	}
	if f.Limit > 0 && f.Limit <= farthest*largest {
		d.limit = f.Limit / d.by
	}
	return d
}

// steps are the corners of the line through the points.
func steps(points plotter.XYs) plotter.XYs {
	list := plotter.XYs{points[0]}
	for i := 1; i < len(points); i++ {
		list = append(list, plotter.XY{X: points[i].X, Y: points[i-1].Y}, points[i])
	}
	return list
}

// sheet is the drawing with all that stands around it.
func (d *tradeDrawing) sheet() *sheet {
	title := strings.TrimSpace(d.trade.Target + " against money")
	if d.frame.Title != "" {
		title = d.frame.Title + ": " + title
	}
	notes := []string{"Asked: " + d.trade.Asked + ".", d.legend()}
	return &sheet{title: plain(title), plot: d.plot(), notes: append(notes, d.frame.Notes...), description: d.description()}
}

// legend says what the marks are.
func (d *tradeDrawing) legend() string {
	text := "Dots and rings are choices as simulated, labelled by the order's money: a dot meets the target, a ring misses it. Crosses are the same choices to first order."
	switch {
	case finite(d.limit):
		text += " Dashed: the target's limit, " + d.limitText() + "."
	case d.frame.Limit > 0 && finite(d.frame.Limit):
		text += " The target's limit, " + d.limitText() + ", lies above the drawing."
	}
	return text
}

func (d *tradeDrawing) limitText() string {
	return strings.TrimSpace(fmt.Sprintf("±%.4g %s", d.frame.Limit/d.by, d.symbol))
}

// description is every point in words.
func (d *tradeDrawing) description() string {
	words := []string{d.legend()}
	for i, p := range d.trade.Points {
		words = append(words, strings.TrimSpace(fmt.Sprintf("%v: within ±%.4g %s", p.Total, d.simulated[i].Y, d.symbol))+".")
	}
	return strings.Join(words, " ")
}

// plot puts axes, steps, limit, marks and labels together.
func (d *tradeDrawing) plot() *plot.Plot {
	p := newPlot()
	p.X.Label.Text = plain("whole order, " + orNone(d.frame.Currency))
	p.Y.Label.Text = plain("half width of the change, " + d.symbol)
	d.ranges(p)
	grid := plotter.NewGrid()
	grid.Horizontal.Color, grid.Vertical.Color = pale, pale
	p.Add(grid)
	if finite(d.limit) {
		p.Add(&plotter.Line{XYs: plotter.XYs{{X: p.X.Min, Y: d.limit}, {X: p.X.Max, Y: d.limit}},
			LineStyle: draw.LineStyle{Color: black, Width: vg.Points(0.9), Dashes: []vg.Length{vg.Points(6), vg.Points(3)}}})
	}
	p.Add(&plotter.Line{XYs: steps(d.simulated), LineStyle: draw.LineStyle{Color: black, Width: vg.Points(1.3)}})
	for i, xy := range d.simulated {
		p.Add(mark(xy, d.trade.Points[i].Met)...)
	}
	if len(d.predicted) > 0 {
		p.Add(&plotter.Scatter{XYs: d.predicted, GlyphStyle: draw.GlyphStyle{Color: grey, Radius: vg.Points(3), Shape: draw.CrossGlyph{}}})
	}
	p.Add(d.labels())
	return p
}

// labels are the money at every point, and the limit.
func (d *tradeDrawing) labels() *pointLabels {
	l := &pointLabels{style: letters(8, false), line: steps(d.simulated), marks: d.predicted, limit: d.limit, limitText: "limit " + d.limitText()}
	for i, xy := range d.simulated {
		l.add(xy, d.trade.Points[i].Total.String())
	}
	return l
}

// mark is a dot, or a ring where the target is missed.
func mark(at plotter.XY, met bool) []plot.Plotter {
	one := func(radius float64, s draw.GlyphStyle) plot.Plotter {
		s.Radius, s.Shape = vg.Points(radius), draw.CircleGlyph{}
		return &plotter.Scatter{XYs: plotter.XYs{at}, GlyphStyle: s}
	}
	list := []plot.Plotter{one(3.2, draw.GlyphStyle{Color: black})}
	if !met {
		list = append(list, one(2.1, draw.GlyphStyle{Color: white}))
	}
	return list
}

// ranges span the points with room for labels; half widths start at none, so
// that heights can be compared.
func (d *tradeDrawing) ranges(p *plot.Plot) {
	first, last := d.simulated[0].X, d.simulated[len(d.simulated)-1].X
	room := 0.06 * (last - first)
	if !(room > 0) {
		room = math.Max(1, 0.05*math.Abs(first))
	}
	p.X.Min, p.X.Max = first-room, last+1.5*room
	p.Y.Min, p.Y.Max = 0, 0
	for _, xy := range append(append(plotter.XYs{}, d.simulated...), d.predicted...) {
		p.Y.Max = math.Max(p.Y.Max, xy.Y)
	}
	if d.limit > p.Y.Max {
		p.Y.Max = d.limit
	}
	if p.Y.Max *= 1.1; p.Y.Max == 0 {
		p.Y.Max = 1
	}
}

func orNone(currency string) string {
	if currency == "" {
		return "no currency"
	}
	return currency
}
