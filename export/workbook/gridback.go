package workbook

import (
	"maps"
	"slices"
	"strconv"
	"strings"
)

// fields are where the readings of a test sheet stand: its columns of steps and
// points, its rows of unit numbers and serials, and the block of readings.
type fields struct {
	sheet          *sheetCells
	steps, points  int // columns
	units, serials int // rows
	readings       area
}

// fields finds the grid by the names that were given to it.
func (r *Returned) fields() (fields, bool) {
	points, ok := readArea(r.names["plan_points"])
	f := fields{sheet: r.sheet(points.sheet), points: points.first.col}
	if !ok || f.sheet == nil {
		return fields{}, false
	}
	for _, x := range []struct {
		name string
		into *int
		is   func(place) int
	}{
		{"plan_steps", &f.steps, func(p place) int { return p.col }},
		{"plan_units", &f.units, func(p place) int { return p.row }}, {"plan_serials", &f.serials, func(p place) int { return p.row }},
	} {
		a, ok := readArea(r.names[x.name])
		if !ok || !strings.EqualFold(a.sheet, points.sheet) {
			return fields{}, false
		}
		*x.into = x.is(a.first)
	}
	f.readings, ok = readArea(r.names["plan_readings"])
	return f, ok && strings.EqualFold(f.readings.sheet, points.sheet)
}

// hold says whether one of the fresh grid's points stands where the points of
// this one are to be.
func (f fields) hold(fresh fields) bool {
	points := map[string]bool{}
	for _, row := range fresh.freshRows() {
		points[fresh.sheet.at(row, fresh.points).key()] = true
	}
	for row := 1; row <= f.sheet.rows; row++ {
		if points[f.sheet.at(row, f.points).key()] {
			return true
		}
	}
	return len(points) == 0
}

// moved is where the fields of a fresh sheet went, for a workbook that has lost
// the names.
func (f fields) moved(a *alignment) (fields, bool) {
	col := func(c int) int { return a.cols[min(c, len(a.cols)-1)] }
	row := func(r int) int { return a.rows[min(r, len(a.rows)-1)] }
	g := fields{sheet: a.back, steps: col(f.steps), points: col(f.points), units: row(f.units), serials: row(f.serials)}
	first, ok1 := a.to(f.readings.first)
	last, ok2 := a.to(place{f.readings.last.row, f.readings.last.col})
	g.readings = area{a.back.name, first, last}
	return g, ok1 && ok2 && g.points > 0 && g.units > 0
}

// tracks are where each row and each unit of the fresh grid stand in the sheet
// that came back, and the rows and columns that bear a name a second time.
type tracks struct {
	rows, cols           map[int]int // fresh row to row, unit to column
	twiceRows, twiceCols map[int]int // row to fresh row, column to unit
}

// follow matches the point in each row and the number above each column,
// wherever they stand. Where a row's name was written over, its step tells it,
// then its place among its neighbours.
func follow(fresh, back fields, a *alignment) tracks {
	t := tracks{map[int]int{}, map[int]int{}, map[int]int{}, map[int]int{}}
	t.followRows(fresh, back, a)
	t.followCols(fresh, back, a)
	return t
}

// freshRows are the rows of the grid that a reading belongs to.
func (f fields) freshRows() []int {
	var rows []int
	for row := f.readings.first.row; row <= f.readings.last.row; row++ {
		if f.isRow(row) {
			rows = append(rows, row)
		}
	}
	return rows
}

// isRow tells a row of readings from one that begins a condition.
func (f fields) isRow(row int) bool {
	return !f.sheet.at(row, f.steps).empty() && !f.sheet.at(row, f.points).empty()
}

func (t *tracks) followRows(fresh, back fields, a *alignment) {
	names, steps := fresh.column(fresh.points), fresh.column(fresh.steps)
	backNames, backSteps := back.column(back.points), back.column(back.steps)
	rows, order := fresh.freshRows(), back.order()
	taken := map[int]bool{}
	take := func(same func(row, to int) bool) {
		for _, row := range rows {
			for _, to := range order {
				if t.rows[row] == 0 && !taken[to] && same(row, to) {
					t.rows[row], taken[to] = to, true
				}
			}
		}
	}
	sameName := func(row, to int) bool { return names[row] == backNames[to] }
	sameStep := func(row, to int) bool { return steps[row] == backSteps[to] }
	take(func(row, to int) bool { return sameName(row, to) && sameStep(row, to) })
	take(sameName)
	take(sameStep)
	take(func(row, to int) bool { return row < len(a.rows) && a.rows[row] == to })
	for _, to := range order {
		for _, row := range rows {
			if !taken[to] && sameName(row, to) {
				t.twiceRows[to] = row
			}
		}
	}
}

// column is what stands in each row of a column, to tell rows by.
func (f fields) column(col int) []string {
	keys := make([]string, f.sheet.rows+1)
	for row := range keys {
		keys[row] = f.sheet.at(row, col).key()
	}
	return keys
}

// order are all rows of the sheet, those of the block of readings first.
func (f fields) order() []int {
	return outward(f.readings.first.row, f.readings.last.row, f.sheet.rows)
}

func outward(first, last, all int) []int {
	var list []int
	for i := max(1, first); i <= min(last, all); i++ {
		list = append(list, i)
	}
	for i := 1; i <= all; i++ {
		if i < first || i > last {
			list = append(list, i)
		}
	}
	return list
}

func (t *tracks) followCols(fresh, back fields, a *alignment) {
	taken := map[int]bool{}
	units := fresh.freshUnits()
	numbers := slices.Sorted(maps.Values(units))
	order := outward(back.readings.first.col, back.readings.last.col, back.sheet.cols)
	take := func(same func(u, to int) bool) {
		for _, u := range numbers {
			for _, to := range order {
				if t.cols[u] == 0 && !taken[to] && same(u, to) {
					t.cols[u], taken[to] = to, true
				}
			}
		}
	}
	number := make([]int, back.sheet.cols+1)
	for _, to := range order {
		number[to] = units[back.sheet.at(back.units, to).key()]
	}
	sameNumber := func(u, to int) bool { return number[to] == u }
	samePlace := func(u, to int) bool {
		col := fresh.readings.first.col + u - 1
		return col < len(a.cols) && a.cols[col] == to
	}
	take(func(u, to int) bool { return sameNumber(u, to) && samePlace(u, to) })
	take(sameNumber)
	take(samePlace) // whose number was written over
	for _, to := range order {
		if u := number[to]; u > 0 && !taken[to] {
			t.twiceCols[to] = u
		}
	}
}

// freshUnits are the numbers above the columns, as text.
func (f fields) freshUnits() map[string]int {
	units := map[string]int{}
	for col := f.readings.first.col; col <= f.readings.last.col; col++ {
		key := f.sheet.at(f.units, col).key()
		if n, err := strconv.Atoi(key); err == nil {
			units[key] = n
		}
	}
	return units
}

// settle puts the tracks into the alignment, so that what moved is compared
// with what it was, and forgets what another row or column was taken for.
func (t tracks) settle(a *alignment, fresh fields) {
	cols := map[int]int{}
	for u, col := range t.cols {
		cols[fresh.readings.first.col+u-1] = col
	}
	settle(a.rows, t.rows)
	settle(a.cols, cols)
}

func settle(list []int, known map[int]int) {
	used := map[int]bool{}
	for _, to := range known {
		used[to] = true
	}
	for i := range list {
		if to, ok := known[i]; ok {
			list[i] = to
		} else if used[list[i]] {
			list[i] = 0
		}
	}
}
