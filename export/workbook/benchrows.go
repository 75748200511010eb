package workbook

import (
	"fmt"
	"math"
	"slices"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// benchRow is one row of the test sheet: a reading, or an adjustment whose
// final reading is written down. Figures are in the row's unit, rounded as the
// sheet shows them; NaN where there is none.
type benchRow struct {
	step      int
	turn      bool
	name, at  string
	read      string // "dc voltage, dmm"
	condition string
	scale
	nominal, low, high, acceptLow, acceptHigh float64
	why, note                                 string
}

// benchRows interleaves adjustments and readings by step.
func (p Plan) benchRows() []benchRow {
	var rows []benchRow
	for _, t := range p.Turns {
		rows = append(rows, p.turnRow(t))
	}
	for _, r := range p.Readings {
		rows = append(rows, readingRow(r))
	}
	slices.SortStableFunc(rows, func(a, b benchRow) int { return a.step - b.step })
	return rows
}

// readingRow rounds a reading's limits: expected outward, accept inward.
func readingRow(r bench.Reading) benchRow {
	accept := spread.Limits{Low: spread.Figure(math.NaN()), High: spread.Figure(math.NaN())}
	why := clean(r.Why)
	if r.Accept != nil {
		accept = *r.Accept
	}
	sc := readingScale(r.Unit, float64(r.Uncertainty), largestOf(r.Nominal, r.Expected.Low, r.Expected.High),
		float64(r.Expected.High-r.Expected.Low), float64(accept.High-accept.Low))
	row := benchRow{
		step: r.Step, name: r.Point, at: r.At, read: joined(r.Reading, r.Instrument), condition: r.Condition, scale: sc, why: why, note: clean(r.Note),
		nominal: sc.nearest(float64(r.Nominal)),
		low:     sc.below(float64(r.Expected.Low)), high: sc.above(float64(r.Expected.High)),
		acceptLow: sc.above(float64(accept.Low)), acceptHigh: sc.below(float64(accept.High)),
	}
	if row.acceptLow > row.acceptHigh {
		row.acceptLow, row.acceptHigh = math.NaN(), math.NaN()
		row.why = sentence(why, "No reading can prove the target: the instrument's uncertainty takes up the whole of it.")
	}
	if !finite(row.nominal) && why == "" {
		row.why = sentence(row.why, "No nominal reading exists here.")
	}
	if !finite(row.low) && !finite(row.high) && why == "" {
		row.why = sentence(row.why, "No limits could be worked out: write the reading down for the record.")
	}
	return row
}

// sampleRow is the like of a target at another condition.
func sampleRow(s bench.Sample) benchRow {
	row := readingRow(bench.Reading{Point: s.Output, Reading: s.Target, Instrument: s.Instrument, Condition: s.Condition, Unit: s.Unit,
		Nominal: s.Nominal, Unloaded: s.Unloaded, Expected: s.Expected, Accept: s.Accept, Uncertainty: s.Uncertainty, At: s.At, Why: s.Why})
	if s.ChangeFrom != "" {
		row.name = "change of " + s.Output
	}
	return row
}

// turnRow asks for the reading at which the adjustment was left. The limits
// are the adjustment's own, rounded inward: they are to be kept, not expected.
func (p Plan) turnRow(t bench.Turn) benchRow {
	low, high := t.To-t.Within, t.To+t.Within
	sc := windowScale(t.Unit, t.Within/2, largestOf(spread.Figure(t.To), spread.Figure(t.Within)), 2*t.Within)
	none := math.NaN()
	row := benchRow{step: t.Step, turn: true, name: t.Turn, condition: t.Condition, scale: sc,
		at: "turn " + t.Ref + " until right; " + t.At, nominal: sc.nearest(t.To), low: sc.above(low), high: sc.below(high), acceptLow: none, acceptHigh: none}
	for _, r := range p.Readings {
		if r.Point == t.Watch {
			row.read = joined(r.Reading, r.Instrument)
			break
		}
	}
	if row.read == "" {
		row.read = t.Watch
	}
	return row
}

func joined(reading, instrument string) string {
	if reading == "" || instrument == "" {
		return reading + instrument
	}
	return fmt.Sprintf("%s, %s", reading, instrument)
}

// sentence adds a sentence to a text.
func sentence(text, more string) string {
	if text == "" {
		return more
	}
	return text + " " + more
}
