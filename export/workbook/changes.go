package workbook

import (
	"cmp"
	"fmt"
	"maps"
	"math"
	"slices"
	"strconv"
	"strings"
)

// sameFigure is how far two figures may be apart, relative to the larger: other
// programs write fifteen digits.
const sameFigure = 1e-12

// sheets compares every sheet but the one that is never shown.
func (c *comparison) sheets() {
	for _, f := range c.fresh.sheets {
		a := c.pairs[f.name]
		switch {
		case f.name == carrierSheet:
		case a == nil:
			c.note(Finding{Kind: Gone, Sheet: f.name, Cell: "A1", What: "the sheet is gone", Expected: f.name})
		default:
			if a.back.name != f.name {
				c.note(Finding{Kind: Moved, Sheet: a.back.name, Cell: "A1", What: "the sheet was renamed", Found: a.back.name, Expected: f.name})
			}
			c.lines(a)
			c.changed(a)
			c.added(a)
		}
	}
	paired := map[*sheetCells]bool{}
	for _, a := range c.pairs {
		paired[a.back] = true
	}
	for _, b := range c.back.sheets {
		if !paired[b] && b.name != carrierSheet && !slices.Contains(c.back.Origin.sheets, b.name) {
			c.note(Finding{Kind: Added, Sheet: b.name, Cell: "A1", What: "a sheet that the plan does not have; it was not looked at"})
		}
	}
	c.inOrder()
}

// lines says which rows and columns were inserted, taken out or moved.
func (c *comparison) lines(a *alignment) {
	c.line(a, "row", a.rows, func(p place) int { return p.row }, func(i int) string { return at(1, i) })
	c.line(a, "column", a.cols, func(p place) int { return p.col }, func(i int) string { return at(i, 1) })
}

func (c *comparison) line(a *alignment, what string, to []int, which func(place) int, name func(int) string) {
	fresh, back := a.fresh.inLines(which), a.back.inLines(which)
	last, came, stayed := 0, map[int]bool{}, ascending(to)
	for i, b := range to {
		came[b] = true
		if b > 0 && !stayed[i] {
			c.note(Finding{Kind: Moved, Sheet: a.back.name, Cell: name(b), What: "the " + what + " was moved; it is read where it is", Found: shownAll(back[b])})
		}
		last = max(last, b)
		if b == 0 && len(fresh[i]) > 0 {
			c.note(Finding{Kind: Gone, Sheet: a.fresh.name, Cell: name(i), What: "the " + what + " is gone", Expected: shownAll(fresh[i])})
		}
	}
	for b := 1; b < last; b++ {
		if !came[b] {
			c.note(Finding{Kind: Moved, Sheet: a.back.name, Cell: name(b), What: "a " + what + " was inserted; what follows is read where it is", Found: shownAll(back[b])})
		}
	}
}

// ascending says which of the lines that went somewhere are in their order
// still: a longest ascending run of places (patience sorting). The others moved.
func ascending(to []int) []bool {
	var ends []int // of the best run of each length, the index of its last line
	before := make([]int, len(to))
	for i, b := range to {
		if b == 0 {
			continue
		}
		n, _ := slices.BinarySearchFunc(ends, b, func(end, b int) int { return cmp.Compare(to[end], b) })
		before[i] = -1
		if n > 0 {
			before[i] = ends[n-1]
		}
		ends = append(ends[:n], append([]int{i}, ends[min(n+1, len(ends)):]...)...)
	}
	in := make([]bool, len(to))
	if len(ends) > 0 {
		for i := ends[len(ends)-1]; i >= 0; i = before[i] {
			in[i] = true
		}
	}
	return in
}

// inLines are the cells of each row, or of each column, in order.
func (s *sheetCells) inLines(which func(place) int) map[int][]oneCell {
	lines := map[int][]oneCell{}
	for _, p := range s.places() {
		lines[which(p)] = append(lines[which(p)], s.cells[p])
	}
	return lines
}

// places are those that hold something, row by row.
func (s *sheetCells) places() []place {
	return slices.SortedFunc(maps.Keys(s.cells), func(a, b place) int {
		return cmp.Or(cmp.Compare(a.row, b.row), cmp.Compare(a.col, b.col))
	})
}

func shownAll(cells []oneCell) string {
	var words []string
	for _, c := range cells[:min(len(cells), 6)] {
		words = append(words, cut(c.shown(), 40))
	}
	return cut(strings.Join(words, " · "), longestShown)
}

// changed reports every cell that is not for typing and says something else
// than the plan.
func (c *comparison) changed(a *alignment) {
	for _, p := range a.fresh.places() {
		want := a.fresh.cells[p]
		to, ok := a.to(p)
		if !ok {
			continue // its row or column is gone, which was said
		}
		got := a.back.at(to.row, to.col)
		if c.agree(a, want, got) {
			continue
		}
		found := got.shown()
		if got.empty() {
			found = "nothing"
		}
		c.note(Finding{Kind: Changed, Sheet: a.back.name, Cell: to.String(), What: "changed", Found: found, Expected: want.shown()})
	}
}

// order notes whether rows and columns stand in their order still.
func (a *alignment) order() {
	a.ordered = slices.IsSorted(nonZero(a.rows)) && slices.IsSorted(nonZero(a.cols))
}

func nonZero(list []int) []int {
	return slices.DeleteFunc(slices.Clone(list), func(i int) bool { return i == 0 })
}

// agree says whether a cell still says what it said. Formulas are compared
// with every reference moved to where its cell went; not those to a sheet whose
// rows changed places, for which programs bend ranges in ways of their own.
func (c *comparison) agree(a *alignment, want, got oneCell) bool {
	if want.formula == "" && got.formula == "" {
		return sameLiteral(want, got)
	}
	if want.formula == "" || got.formula == "" {
		return false
	}
	moved, ok := canonical(want.formula, a.fresh.name, c.move)
	if !ok {
		return true // it refers to what is gone or was moved, which was said
	}
	there, _ := canonical(got.formula, a.back.name, stay)
	return moved == there
}

// move is where a reference of a fresh formula went.
func (c *comparison) move(sheet string, p place) (string, place, bool) {
	for name, a := range c.pairs {
		if strings.EqualFold(name, sheet) {
			if !a.ordered {
				return "", p, false
			}
			q, ok := a.to(p)
			if !ok && (p.row > a.fresh.rows || p.col > a.fresh.cols) {
				q, ok = p, true // beside all that is written
			}
			return strings.ToUpper(a.back.name), q, ok
		}
	}
	return "", p, false
}

func sameLiteral(want, got oneCell) bool {
	if want.number() != got.number() {
		return false
	}
	x, err1 := strconv.ParseFloat(want.text, 64)
	y, err2 := strconv.ParseFloat(got.text, 64)
	if want.number() && err1 == nil && err2 == nil {
		return math.Abs(x-y) <= sameFigure*math.Max(math.Abs(x), math.Abs(y))
	}
	return strings.Join(strings.Fields(want.text), " ") == strings.Join(strings.Fields(got.text), " ")
}

// added keeps what was typed into the places that are meant for it, and reports
// what stands where nothing is to be typed.
func (c *comparison) added(a *alignment) {
	rows, cols := inverse(a.rows), inverse(a.cols)
	for _, p := range a.back.places() {
		from := place{rows[p.row], cols[p.col]}
		got := a.back.cells[p]
		switch {
		case !a.fresh.at(from.row, from.col).empty() || c.isReading(a, from):
		case c.second(a, p):
		case from.row == 0 || from.col == 0:
			if p.row > last(a.rows) || p.col > last(a.cols) { // beside all of the plan; inserted lines were said
				c.stray(a, p, got)
			}
		case open(a.fresh, from):
			c.keepTyped(a, p, from, got)
		default:
			c.stray(a, p, got)
		}
	}
}

func last(to []int) int { return slices.Max(append([]int{0}, to...)) }

func inverse(to []int) map[int]int {
	from := map[int]int{}
	for i, b := range to {
		if b > 0 {
			from[b] = i
		}
	}
	return from
}

// isReading says whether a place of the fresh workbook is one for a reading.
func (c *comparison) isReading(a *alignment, p place) bool {
	in := c.grid.readings
	return a.fresh == c.grid.sheet && p.row >= in.first.row && p.row <= in.last.row && p.col >= in.first.col && p.col <= in.last.col &&
		c.grid.isRow(p.row)
}

// second reports readings in a row or column that bears the name of another.
func (c *comparison) second(a *alignment, p place) bool {
	if a.back != c.there.sheet {
		return false
	}
	row, twiceRow := c.tracks.twiceRows[p.row]
	unit, twiceCol := c.tracks.twiceCols[p.col]
	if !twiceRow {
		row = inverse(a.rows)[p.row]
	}
	if !twiceCol {
		unit = inverseUnits(c.tracks.cols)[p.col]
	}
	if !(twiceRow || twiceCol) || unit == 0 || row < c.grid.readings.first.row || row > c.grid.readings.last.row {
		return false
	}
	what := "a second row of this point; the other one is read"
	if twiceCol {
		what = "a second column of this unit; the other one is read"
	}
	c.note(Finding{Kind: Unread, Sheet: a.back.name, Cell: p.String(), Point: c.grid.sheet.at(row, c.grid.points).shown(), Unit: unit, What: what, Found: a.back.cells[p].shown()})
	return true
}

func inverseUnits(cols map[int]int) map[int]int {
	units := map[int]int{}
	for u, col := range cols {
		units[col] = u
	}
	return units
}

// open says whether a cell is meant to be typed in.
func open(s *sheetCells, p place) bool {
	style := s.style(p)
	return style != nil && style.Protection != nil && !style.Protection.Locked
}

// stray reports what stands where nothing is to be typed.
func (c *comparison) stray(a *alignment, p place, got oneCell) {
	c.note(Finding{Kind: Added, Sheet: a.back.name, Cell: p.String(), What: "nothing is to be typed here; it was not read", Found: got.shown()})
}

// keepTyped keeps a text with what stands before its place.
func (c *comparison) keepTyped(a *alignment, p, from place, got oneCell) {
	t := Typed{Sheet: a.back.name, Cell: p.String(), Label: label(a.fresh, from), Text: got.shown()}
	if a.fresh == c.grid.sheet && from.row == c.grid.serials && from.col >= c.grid.readings.first.col {
		t.Unit = c.grid.freshUnits()[c.grid.sheet.at(c.grid.units, from.col).key()]
	}
	if v, err := strconv.ParseFloat(got.text, 64); err == nil && got.number() && v > 0 && v <= lastDay && (dated(a.back.style(p)) || t.Label == "Date") {
		t.Text = day(v)
	}
	c.typed = append(c.typed, t)
}

// label is the nearest text to the left of a place or, where its row has none,
// of the row above.
func label(s *sheetCells, p place) string {
	for row := p.row; row > max(0, p.row-4); row-- {
		for col := p.col - 1; col > 0; col-- {
			if c := s.at(row, col); !c.empty() {
				return c.shown()
			}
		}
	}
	return fmt.Sprintf("cell %s", p)
}
