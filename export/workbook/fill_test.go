package workbook

import (
	"math"
	"testing"

	"github.com/xuri/excelize/v2"
)

// fill types readings into a saved workbook as a person would. reading gives
// what stands in the cell for a row of the bench list and a unit from 1, nil
// to leave it empty.
func fill(t *testing.T, path string, p Plan, reading func(row benchRow, unit int) any) {
	t.Helper()
	f, err := excelize.OpenFile(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	at := places(p)
	for i, r := range p.benchRows() {
		for u := 1; u <= p.Units; u++ {
			if v := reading(r, u); v != nil {
				if err := f.SetCellValue(testSheet, cellOf(u, at[i]), v); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
	if err := f.Save(); err != nil {
		t.Fatal(err)
	}
}

// places are the sheet rows of the bench list, worked out here again: a band
// stands before the first row and wherever the condition changes.
func places(p Plan) []int {
	rows, n, was := []int{}, verdictRow, "\x00"
	for _, r := range p.benchRows() {
		if r.condition != was {
			n++
		}
		was = r.condition
		n++
		rows = append(rows, n)
	}
	return rows
}

func cellOf(unit, row int) string {
	name, _ := excelize.CoordinatesToCellName(fixedCols+unit, row)
	return name
}

// typical is a reading in the middle of a row's window, a little different on
// every unit, as the meter would show it.
func typical(r benchRow, unit int) any {
	low, high := r.low, r.high
	if finite(r.acceptLow) {
		low, high = math.Max(low, r.acceptLow), math.Min(high, r.acceptHigh)
	}
	if !finite(low) {
		return nil
	}
	part := 0.5 + 0.35*math.Sin(float64(7*unit+3*r.step))
	return r.nearest((low + (high-low)*part) * r.by)
}
