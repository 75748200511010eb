package workbook

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// Kind is what a finding is of.
type Kind string

// The kinds of findings on a workbook that came back.
const (
	Changed Kind = "changed" // a cell that is not for typing says something else than the plan
	Added   Kind = "added"   // something stands where the plan has nothing and nothing is to be typed
	Moved   Kind = "moved"   // rows, columns or sheets are at other places; they are read where they are
	Gone    Kind = "gone"    // a row, column or sheet of the plan is not there
	Taken   Kind = "taken"   // a reading that was typed as text and understood
	Unread  Kind = "unread"  // something typed for a reading that is none
	Scaled  Kind = "unit"    // a reading that fits only if it was typed in another unit; taken as typed
)

// Finding is something on a workbook that came back that whoever judges it
// should know, by the cell as it is there (of what is gone, as it was).
type Finding struct {
	Kind     Kind   `json:"kind"`
	Sheet    string `json:"sheet"`
	Cell     string `json:"cell"`
	Point    string `json:"point,omitempty"` // of readings: "mixer.collector", "turn fixed.tuner"
	Unit     int    `json:"unit,omitempty"`
	What     string `json:"what"`
	Found    string `json:"found,omitempty"`
	Expected string `json:"expected,omitempty"`
}

// Typed is what was typed into a place that is meant for it and is no reading:
// who tested, when, a serial number, a note.
type Typed struct {
	Sheet string `json:"sheet"`
	Cell  string `json:"cell"`
	Label string `json:"label"` // what stands before it: "Tested by"
	Unit  int    `json:"unit,omitempty"`
	Text  string `json:"text"`
}

// Back is a filled workbook as it was read.
type Back struct {
	bench.Filled              // the readings
	Turned       bench.Filled // what was written down at each trim, by bench.Turn.Turn
	Findings     []Finding    // in the order of sheets, rows and columns
	Typed        []Typed
	Lost         []string // carriers of the digest that are gone while others agree
}

// Read reads the readings of a plan off the workbook, wherever their rows and
// columns were moved to, and compares everything else with the workbook that
// the plan would be written as now. Verdicts in the file are not looked at.
func (r *Returned) Read(p Plan) (back *Back, err error) {
	defer rescue(&err)
	fresh, err := rewritten(p, r.Origin)
	if err != nil {
		return nil, err
	}
	defer fresh.Close()
	return r.against(p, fresh)
}

// against reads the workbook beside the one that the plan is written as.
func (r *Returned) against(p Plan, fresh *Returned) (*Back, error) {
	c, err := newComparison(p, fresh, r)
	if err != nil {
		return nil, err
	}
	back := &Back{}
	if len(r.Origin.found) > 0 {
		back.Lost = r.Origin.missing
	}
	c.sheets()
	back.Filled, back.Turned = c.readings()
	back.Findings, back.Typed = c.findings, c.typed
	return back, nil
}

// rewritten is the workbook as it was when it was handed out. What only the
// run knew that wrote it is taken from the workbook itself.
func rewritten(p Plan, o Origin) (*Returned, error) {
	// What was compared and traded is not known here: those sheets are only named.
	p.Compare, p.Trade, p.others = nil, nil, nil
	for _, name := range []string{compareSheet, tradeSheet} {
		if slices.Contains(o.sheets, name) {
			p.others = append(p.others, name)
		}
	}
	p.Cards = slices.Contains(o.sheets, cardsSheet)
	if o.File != "" {
		p.File = o.File
	}
	var b bytes.Buffer
	if err := Write(&b, p); err != nil {
		return nil, err
	}
	fresh, err := Open(b.Bytes())
	if err != nil {
		return nil, fmt.Errorf("a workbook of this plan could not be read: %w", err)
	}
	return fresh, nil
}

// comparison lays a workbook that came back over the fresh one.
type comparison struct {
	plan        Plan
	fresh, back *Returned
	pairs       map[string]*alignment // by the fresh sheet's name
	grid, there fields
	tracks      tracks

	findings []Finding
	typed    []Typed
}

func newComparison(p Plan, fresh, back *Returned) (*comparison, error) {
	c := &comparison{plan: p, fresh: fresh, back: back, pairs: map[string]*alignment{}}
	var ok bool
	if c.grid, ok = fresh.fields(); !ok {
		panic("workbook: our own names are missing")
	}
	there, named := back.fields()
	if named && !there.hold(c.grid) { // names that point somewhere else
		there, named = fields{}, false
	}
	for f, b := range pairSheets(fresh, back, c.grid.sheet, there.sheet) {
		c.pairs[f.name] = align(f, b)
	}
	a := c.pairs[c.grid.sheet.name]
	if !named && a != nil {
		there, named = c.grid.moved(a)
	}
	if !named {
		return nil, errors.New("no test sheet can be found in the workbook: neither the names of its parts nor its headings are there")
	}
	c.there = there
	c.tracks = follow(c.grid, there, a)
	c.tracks.settle(a, c.grid)
	for _, pair := range c.pairs {
		pair.order()
	}
	return c, nil
}

// pairSheets finds for every fresh sheet the one that it became: the test sheet
// by its names, others by their own name if what stands in them agrees, those
// that were renamed by what stands in them.
func pairSheets(fresh, back *Returned, test, there *sheetCells) map[*sheetCells]*sheetCells {
	pairs := map[*sheetCells]*sheetCells{}
	taken := map[*sheetCells]bool{}
	pair := func(f, b *sheetCells) {
		if b != nil && !taken[b] && pairs[f] == nil {
			pairs[f], taken[b] = b, true
		}
	}
	pair(test, there)
	for _, f := range fresh.sheets {
		if b := back.sheet(f.name); b != nil && alike(f, b) > 0.5 {
			pair(f, b)
		}
	}
	for _, f := range fresh.sheets {
		var most *sheetCells
		best := 0.25
		for _, b := range back.sheets {
			if x := alike(f, b); x > best && !taken[b] {
				most, best = b, x
			}
		}
		pair(f, most)
	}
	for _, f := range fresh.sheets {
		pair(f, back.sheet(f.name))
	}
	return pairs
}

// alike is the share of texts that two sheets have in common (Dice, 1945).
// Figures do not count: readings are figures.
func alike(a, b *sheetCells) float64 {
	texts := func(s *sheetCells) map[string]int {
		return s.lines(0, func(place) int { return 0 }, func(_ place, c oneCell) string {
			if c.number() {
				return ""
			}
			return c.key()
		})[0]
	}
	x, y := texts(a), texts(b)
	return 2 * float64(shared(x, y)) / float64(total(x)+total(y)) // of none, NaN, which is alike to nothing
}

// note keeps a finding.
func (c *comparison) note(f Finding) { c.findings = append(c.findings, f) }

// readings reads the grid.
func (c *comparison) readings() (filled, turned bench.Filled) {
	rows := map[int]benchRow{}
	for _, r := range c.plan.benchRows() {
		rows[r.step] = r
	}
	read, turns := newFilling(), newFilling()
	for _, row := range c.grid.freshRows() {
		var step int
		if _, err := fmt.Sscan(c.grid.sheet.at(row, c.grid.steps).key(), &step); err != nil {
			continue
		}
		r, known := rows[step]
		if !known {
			continue
		}
		into := read
		if r.turn {
			into = turns
		}
		into.points = append(into.points, r.name)
		c.readRow(row, c.rowOf(r), into)
	}
	return read.filled(c.plan.Units), turns.filled(c.plan.Units)
}

// filling collects the values of each unit as the rows are read.
type filling struct {
	points []string
	values map[int]map[int]float64 // unit, then index of the point
}

func newFilling() *filling { return &filling{values: map[int]map[int]float64{}} }

// keep takes the value of the last point.
func (f *filling) keep(unit int, v float64) {
	if f.values[unit] == nil {
		f.values[unit] = map[int]float64{}
	}
	f.values[unit][len(f.points)-1] = v
}

func (f *filling) filled(units int) bench.Filled {
	out := bench.Filled{Points: append([]string{}, f.points...), Units: []bench.FilledUnit{}}
	for u := 1; u <= units; u++ {
		if f.values[u] == nil {
			continue
		}
		unit := bench.FilledUnit{Unit: u, Values: make([]spread.Figure, len(f.points))}
		for i := range unit.Values {
			v, ok := f.values[u][i]
			if !ok {
				v = math.NaN()
			}
			unit.Values[i] = spread.Figure(v)
		}
		out.Units = append(out.Units, unit)
	}
	return out
}

// byPlace sorts findings of one sheet by row and column.
func byPlace(a, b Finding) int {
	p, _ := reference(a.Cell)
	q, _ := reference(b.Cell)
	return cmp.Or(cmp.Compare(p.row, q.row), cmp.Compare(p.col, q.col))
}

// inOrder sorts all findings: sheets as they stand in the workbook.
func (c *comparison) inOrder() {
	index := map[string]int{}
	for i, s := range c.back.sheets {
		index[s.name] = i
	}
	slices.SortStableFunc(c.findings, func(a, b Finding) int {
		return cmp.Or(cmp.Compare(index[a.Sheet], index[b.Sheet]), byPlace(a, b))
	})
}
