package exact

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// A tableau is the linear relaxation with its options free to be mixed,
//
//	least sum floor*x,  sum of x = 1 in each line,  sum use*x + slack = limit in each row,  x, slack >= 0,
//
// kept as a dense simplex tableau whose reduced costs are never negative (dual
// simplex, Lemke 1954). Its rows' prices serve the Lagrangian bound, which is
// valid for any prices, so a digit lost here makes a bound weaker and never
// wrong.
type tableau struct {
	rows, width int // width: columns and the right side, which is last
	cell        []float64
	cost        []float64 // reduced costs; last: minus the objective
	basic       []int32   // by row: its basic column
	line, on    []int32   // by column: line and option as kept in the problem's indexes; -1 and the row for a slack
	dead        []bool    // by column: an option left out, which must leave the basis
	pivots      int
}

// Entries smaller than these count as zero.
const (
	pivotZero = 1e-9
	valueZero = 1e-9
)

// newTableau starts with the option of least floor in each line.
func newTableau(r *relaxation) *tableau {
	t := &tableau{rows: len(r.kept) + len(r.limit)}
	for i, options := range r.kept {
		for _, j := range options {
			t.line, t.on = append(t.line, int32(i)), append(t.on, int32(j))
		}
	}
	for k := range r.limit {
		t.line, t.on = append(t.line, -1), append(t.on, int32(k))
	}
	t.width = len(t.line) + 1
	t.dead = make([]bool, len(t.line))
	t.cell, t.cost = make([]float64, t.rows*t.width), make([]float64, t.width)
	t.basic = make([]int32, t.rows)
	t.fill(r)
	return t
}

func (t *tableau) row(n int) []float64 { return t.cell[n*t.width : (n+1)*t.width] }

func (t *tableau) fill(r *relaxation) {
	last, column := t.width-1, 0
	t.cost[last] = -float64(r.p.Base)
	for k, limit := range r.limit {
		row, slack := t.row(len(r.kept)+k), last-len(r.limit)+k
		row[last], row[slack], t.basic[len(r.kept)+k] = limit, 1, int32(slack)
	}
	for i, floors := range r.floor {
		least := 0
		for o := range floors {
			if floors[o] < floors[least] {
				least = o
			}
		}
		t.row(i)[last], t.basic[i] = 1, int32(column+least)
		t.cost[last] -= floors[least]
		for k := range r.limit {
			t.row(len(r.kept) + k)[last] -= r.takes(i, least)[k]
		}
		for o := range floors {
			t.row(i)[column] = 1
			t.cost[column] = floors[o] - floors[least]
			for k := range r.limit {
				t.row(len(r.kept) + k)[column] = r.takes(i, o)[k] - r.takes(i, least)[k]
			}
			column++
		}
	}
}

// solve makes dual simplex steps until the mixture obeys all rows, the
// objective is above the target, nothing obeys them (the prices then grow along
// the direction that shows it), or most steps are made.
func (t *tableau) solve(target float64, most int) {
	last := t.width - 1
	for range most {
		if -t.cost[last] > target {
			return
		}
		out, sign := t.leaving()
		if out < 0 {
			return
		}
		in := t.entering(out, sign)
		if in < 0 {
			t.grow(out, sign, target)
			return
		}
		t.pivot(out, in)
	}
}

// leaving is the row whose basic value breaks its bounds most: below zero
// (sign 1), or above zero where the option is dead (sign -1). It is -1 when
// none does.
func (t *tableau) leaving() (out int, sign float64) {
	last, most := t.width-1, valueZero
	out = -1
	for n, column := range t.basic {
		value := t.cell[n*t.width+last]
		if -value > most {
			out, sign, most = n, 1, -value
		} else if t.dead[column] && value > most {
			out, sign, most = n, -1, value
		}
	}
	return out, sign
}

// entering is the column with the least ratio of reduced cost to how much it
// mends the row, -1 when none mends it.
func (t *tableau) entering(out int, sign float64) int {
	row := t.row(out)
	in, least := -1, math.Inf(1)
	for c := range t.line {
		if a := -sign * row[c]; a > pivotZero && !t.dead[c] && int32(c) != t.basic[out] {
			if ratio := t.cost[c] / a; ratio < least || ratio == least && a > math.Abs(row[in]) {
				in, least = c, ratio
			}
		}
	}
	return in
}

func (t *tableau) pivot(out, in int) {
	t.pivots++
	row := t.row(out)
	floats.Scale(1/row[in], row)
	row[in] = 1
	for n := range t.rows {
		if other := t.row(n); n != out && other[in] != 0 {
			floats.AddScaled(other, -other[in], row)
			other[in] = 0
		}
	}
	floats.AddScaled(t.cost, -t.cost[in], row)
	t.cost[in] = 0
	t.basic[out] = int32(in)
}

// grow raises the prices along a row that nothing can mend until the objective
// is above the target.
func (t *tableau) grow(out int, sign float64, target float64) {
	last, row := t.width-1, t.row(out)
	lack := -sign * row[last]
	if by := (target + t.cost[last] + 1 + 1e-6*math.Abs(target)) / lack; by > 0 && finite(by) {
		floats.AddScaled(t.cost, sign*by, row)
	}
}

// prices writes what the rows cost at the current basis.
func (t *tableau) prices(dst []float64) {
	slacks := len(t.line) - len(dst)
	for k := range dst {
		dst[k] = max(0, t.cost[slacks+k])
	}
}

// narrow copies a tableau to dst, without the options that are not kept.
func (t *tableau) narrow(dst *tableau, kept [][]int) {
	in := make([]bool, len(t.line))
	for _, column := range t.basic {
		in[column] = true
	}
	var columns []int32
	dst.line, dst.on, dst.dead = dst.line[:0], dst.on[:0], dst.dead[:0]
	place := make([]int32, len(t.line))
	line, at := int32(-1), 0
	for c, i := range t.line {
		if i != line {
			line, at = i, 0
		}
		stays := i < 0
		if i >= 0 {
			for at < len(kept[i]) && kept[i][at] < int(t.on[c]) {
				at++
			}
			stays = at < len(kept[i]) && kept[i][at] == int(t.on[c])
		}
		if !stays && !in[c] {
			continue
		}
		place[c] = int32(len(columns))
		columns = append(columns, int32(c))
		dst.line, dst.on, dst.dead = append(dst.line, i), append(dst.on, t.on[c]), append(dst.dead, !stays)
	}
	columns = append(columns, int32(t.width-1))
	dst.rows, dst.width, dst.pivots = t.rows, len(columns), 0
	dst.cell, dst.cost, dst.basic = sized(dst.cell, t.rows*len(columns)), sized(dst.cost, len(columns)), dst.basic[:0]
	for n := range t.rows {
		from, to := t.row(n), dst.row(n)
		for c, column := range columns {
			to[c] = from[column]
		}
	}
	for c, column := range columns {
		dst.cost[c] = t.cost[column]
	}
	for _, column := range t.basic {
		dst.basic = append(dst.basic, place[column])
	}
}

// sized is a slice of n numbers, the given one if it is large enough.
func sized(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n+n/4)[:n]
	}
	return s[:n]
}

// weights are the options in the mixture, by line and option.
func (t *tableau) weights() map[[2]int32]float64 {
	out := make(map[[2]int32]float64, t.rows)
	for n, c := range t.basic {
		if t.line[c] >= 0 && !t.dead[c] {
			out[[2]int32{t.line[c], t.on[c]}] = min(max(t.cell[n*t.width+t.width-1], 0), 1)
		}
	}
	return out
}
