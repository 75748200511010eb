package workbook

import (
	"math"
	"strconv"

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

// ShownSheet is a sheet whose readings have the windows that it shows.
func ShownSheet(s bench.Sheet) bench.Sheet {
	readings := make([]bench.Reading, len(s.Readings))
	for i, r := range s.Readings {
		readings[i] = Shown(r)
	}
	s.Readings = readings
	return s
}

// Digits writes figures of one line of the test sheet as it does: in the line's
// unit, with the line's digits.
type Digits struct{ scale }

// DigitsOf are those of a reading.
func DigitsOf(r bench.Reading) Digits { return Digits{readingRow(r).scale} }

// TurnDigits are those of what a trim is set to.
func TurnDigits(t bench.Turn) Digits { return Digits{Plan{}.turnRow(t).scale} }

// Finer has a digit more: a mean is known better than a reading.
func (d Digits) Finer() Digits {
	d.decimals = min(6, d.decimals+1)
	return d
}

// Symbol is the unit; "" for a plain ratio.
func (d Digits) Symbol() string { return d.symbol }

// Text is a figure in SI without the unit; a dash where there is none. What is
// absurdly far from the line's figures is written with a power of ten.
func (d Digits) Text(v spread.Figure) string {
	const longest = 14
	if text := d.text(float64(v)); len(text) <= longest {
		return text
	}
	return strconv.FormatFloat(float64(v)/d.by, 'g', 4, 64)
}

// Between is a window without the unit.
func (d Digits) Between(l spread.Limits) string { return d.Text(l.Low) + " to " + d.Text(l.High) }

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
