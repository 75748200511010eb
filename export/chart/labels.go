package chart

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// pointLabels writes labels at points where nothing else is drawn.
type pointLabels struct {
	style     text.Style
	points    plotter.XYs
	words     []string
	line      plotter.XYs // corners of a line of upright and level pieces
	marks     plotter.XYs // besides those at the points
	limit     float64     // of a line across; NaN: none
	limitText string
}

func (l *pointLabels) add(at plotter.XY, words string) {
	l.points, l.words = append(l.points, at), append(l.words, words)
}

// placed is a text and the room it takes.
type placed struct {
	words string
	box   vg.Rectangle
}

// The distance of a label from its point, and the room kept about a mark and
// about a line.
const (
	gap      = vg.Length(4)
	markRoom = vg.Length(3.5)
	lineRoom = vg.Length(1)
)

// Plot writes the labels.
func (l *pointLabels) Plot(c draw.Canvas, p *plot.Plot) {
	for _, t := range l.arrange(c, p) {
		c.FillText(l.style, t.box.Min, t.words)
	}
}

// arrange gives each label the first of its places that is free, and leaves
// out one that has none.
func (l *pointLabels) arrange(c draw.Canvas, p *plot.Plot) []placed {
	toX, toY := p.Transforms(&c)
	at := func(xy plotter.XY) vg.Point { return vg.Point{X: toX(xy.X), Y: toY(xy.Y)} }
	taken := l.drawn(at)
	var list []placed
	put := func(t placed) { list, taken = append(list, t), append(taken, t.box) }
	if !math.IsNaN(l.limit) {
		y := toY(l.limit)
		put(placed{l.limitText, l.box(l.limitText, vg.Point{X: c.Max.X - gap - l.style.Width(l.limitText), Y: y + lineRoom + 1})})
		taken = append(taken, around(vg.Point{X: c.Min.X, Y: y}, vg.Point{X: c.Max.X, Y: y}, lineRoom))
	}
	for i, words := range l.words {
		for _, box := range l.places(at(l.points[i]), words) {
			if free(box, taken) && within(box, c.Rectangle) {
				put(placed{words, box})
				break
			}
		}
	}
	return list
}

// drawn is the room that line and marks take.
func (l *pointLabels) drawn(at func(plotter.XY) vg.Point) []vg.Rectangle {
	var list []vg.Rectangle
	for _, marks := range []plotter.XYs{l.points, l.marks} {
		for _, xy := range marks {
			list = append(list, around(at(xy), at(xy), markRoom))
		}
	}
	for i := 1; i < len(l.line); i++ {
		list = append(list, around(at(l.line[i-1]), at(l.line[i]), lineRoom))
	}
	return list
}

// places are where a label may stand, the best first: to the right above its
// point, below, to the left, and then farther off.
func (l *pointLabels) places(at vg.Point, words string) []vg.Rectangle {
	width, height := l.style.Width(words), l.style.Height(words)
	right, left := at.X+gap, at.X-gap-width
	above, below := at.Y+gap, at.Y-gap-height
	var list []vg.Rectangle
	for _, corner := range []vg.Point{
		{X: right, Y: above}, {X: right, Y: below}, {X: left, Y: below}, {X: left, Y: above},
		{X: right, Y: above + height}, {X: right, Y: below - height}, {X: left, Y: below - height}, {X: left, Y: below - 2*height},
	} {
		list = append(list, l.box(words, corner))
	}
	return list
}

// box is the room of a text whose lower left corner is given.
func (l *pointLabels) box(words string, corner vg.Point) vg.Rectangle {
	return vg.Rectangle{Min: corner, Max: corner.Add(vg.Point{X: l.style.Width(words), Y: l.style.Height(words)})}
}

// around is a rectangle from one point to another and some room about it.
func around(a, b vg.Point, room vg.Length) vg.Rectangle {
	return vg.Rectangle{
		Min: vg.Point{X: min(a.X, b.X) - room, Y: min(a.Y, b.Y) - room},
		Max: vg.Point{X: max(a.X, b.X) + room, Y: max(a.Y, b.Y) + room},
	}
}

// free says whether a box overlaps none of those taken.
func free(box vg.Rectangle, taken []vg.Rectangle) bool {
	for _, t := range taken {
		if box.Min.X < t.Max.X && t.Min.X < box.Max.X && box.Min.Y < t.Max.Y && t.Min.Y < box.Max.Y {
			return false
		}
	}
	return true
}

func within(box, room vg.Rectangle) bool {
	return box.Min.X >= room.Min.X && box.Max.X <= room.Max.X && box.Min.Y >= room.Min.Y && box.Max.Y <= room.Max.Y
}
