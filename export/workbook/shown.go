package workbook

import (
	"math"

	"batchwright/bom/quantity"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// Shown is a reading with the windows that the test sheet shows: expected
// rounded outward to the digits that are written down, accept inward. Readings
// are judged by these, so that the sheet and whoever reads it back agree on
// every last digit. A limit that does not exist is NaN.
func Shown(r bench.Reading) bench.Reading {
	row := rowInUnit(readingRow(r), r.Unit)
	r.Expected = row.limits(row.low, row.high)
	if r.Accept != nil {
		accept := row.limits(row.acceptLow, row.acceptHigh)
		r.Accept = &accept
	}
	return r
}

// ShownTurn is between what the test sheet asks a trim to be left.
func ShownTurn(t bench.Turn) spread.Limits {
	row := rowInUnit(Plan{}.turnRow(t), t.Unit)
	return row.limits(row.low, row.high)
}

func rowInUnit(b benchRow, symbol string) readRow {
	r := readRow{benchRow: b, label: b.name}
	r.unit, r.known = quantity.Find(symbol)
	return r
}

// limits are figures of the row in SI.
func (r readRow) limits(low, high float64) spread.Limits {
	si := func(v float64) spread.Figure {
		if !finite(v) {
			return spread.Figure(math.NaN())
		}
		return spread.Figure(r.si(v))
	}
	return spread.Limits{Low: si(low), High: si(high)}
}
