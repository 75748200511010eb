package plan

import (
	"math"
	"slices"

	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// Review is what `review --json` prints: every unit of which something was
// read, judged by the windows of the test sheet, and the batch together.
type Review struct {
	Build  string       `json:"build"`
	Plan   string       `json:"plan"` // the digest
	Units  []ReviewUnit `json:"units"`
	Unread []int        `json:"unread_units"` // of which nothing was read
	Batch  ReviewBatch  `json:"batch"`

	Workbook *ReviewWorkbook `json:"workbook"` // null: the readings came as a table
}

// The verdicts on a unit.
const (
	Outside    = "outside"    // a reading is outside what a good unit shows, or a trim was not left where it belongs
	Misses     = "misses"     // as a good unit, but a reading does not prove its target
	Incomplete = "incomplete" // nothing wrong in what was read, and something was not
	Inside     = "inside"
)

// ReviewUnit is the verdict on one unit.
type ReviewUnit struct {
	Unit     int             `json:"unit"`
	Verdict  string          `json:"verdict"`
	Points   []ReviewPoint   `json:"points"`
	Trims    []ReviewTrim    `json:"trims"`
	Suspects []ReviewSuspect `json:"suspects"`
}

// ReviewPoint is one reading of a unit, in SI; null: not read. What was not
// read is not outside.
type ReviewPoint struct {
	Point    string         `json:"point"`
	Unit     string         `json:"unit"`
	Reading  spread.Figure  `json:"reading"`
	Inside   bool           `json:"inside"`   // of the expected window
	Accepted bool           `json:"accepted"` // not outside the window of the target
	Score    spread.Figure  `json:"score"`    // from the middle of the expected window, in thirds of its half width
	Expected spread.Limits  `json:"expected"`
	Accept   *spread.Limits `json:"accept"`
}

// ReviewTrim is where a trim was left; null: not written down.
type ReviewTrim struct {
	Turn    string        `json:"turn"`
	Unit    string        `json:"unit"`
	Reading spread.Figure `json:"reading"`
	Inside  bool          `json:"inside"`
	Within  spread.Limits `json:"within"`
}

// ReviewSuspect is something that may be wrong with a unit.
type ReviewSuspect struct {
	Ref         string        `json:"ref"`
	Fault       string        `json:"fault"`
	Probability spread.Figure `json:"probability"`
}

// ReviewBatch is what the units say together.
type ReviewBatch struct {
	Points []ReviewBatchPoint `json:"points"`
	Why    string             `json:"why,omitempty"` // why figures are null
}

// ReviewBatchPoint is one test point over the units read.
type ReviewBatchPoint struct {
	Point        string        `json:"point"`
	Units        int           `json:"units"` // read
	Mean         spread.Figure `json:"mean"`
	ExpectedMean spread.Figure `json:"expected_mean"` // the nominal reading
	ShiftScore   spread.Figure `json:"shift_score"`
}

// ReviewWorkbook is what the workbook said beside the readings.
type ReviewWorkbook struct {
	workbook.Origin
	Lost     []string           `json:"lost"` // marks of its plan that it has no more
	Findings []workbook.Finding `json:"findings"`
	Typed    []workbook.Typed   `json:"typed"`
}

// NewReview judges what was read of a plan. Verdicts are worked out from the
// readings; a workbook's own are never looked at.
func NewReview(w Work, filled, turned bench.Filled) Review {
	r := Review{
		Build: w.Build.Title, Plan: w.Digest(), Units: []ReviewUnit{}, Unread: []int{},
		Batch: reviewBatch(w.Sheet.Readings, filled),
	}
	for u := 1; u <= w.Build.Units; u++ {
		read, turns := valuesOf(filled, u), valuesOf(turned, u)
		if len(read)+len(turns) == 0 {
			r.Unread = append(r.Unread, u)
			continue
		}
		r.Units = append(r.Units, reviewUnit(u, w.Sheet, read, turns))
	}
	return r
}

// WithWorkbook adds what the workbook said beside the readings.
func (r *Review) WithWorkbook(o workbook.Origin, back *workbook.Back) {
	r.Workbook = &ReviewWorkbook{o, listed(back.Lost), listed(back.Findings), listed(back.Typed)}
}

// valuesOf are a unit's readings by point.
func valuesOf(f bench.Filled, unit int) map[string]float64 {
	values := map[string]float64{}
	for _, u := range f.Units {
		for i, v := range u.Values {
			if u.Unit == unit && !math.IsNaN(float64(v)) {
				values[f.Points[i]] = float64(v)
			}
		}
	}
	return values
}

func valueOf(values map[string]float64, name string) spread.Figure {
	if v, ok := values[name]; ok {
		return spread.Figure(v)
	}
	return spread.Figure(math.NaN())
}

func reviewUnit(unit int, s bench.Sheet, read, turns map[string]float64) ReviewUnit {
	out := ReviewUnit{Unit: unit, Points: []ReviewPoint{}, Trims: []ReviewTrim{}, Suspects: []ReviewSuspect{}}
	for _, x := range s.Readings {
		out.Points = append(out.Points, reviewPoint(workbook.Shown(x), valueOf(read, x.Point)))
	}
	for _, t := range s.Turns {
		v, within := valueOf(turns, t.Turn), workbook.ShownTurn(t)
		out.Trims = append(out.Trims, ReviewTrim{t.Turn, t.Unit, v, !beyond(v, within), within})
	}
	out.Verdict = out.judge()
	return out
}

func reviewPoint(x bench.Reading, v spread.Figure) ReviewPoint {
	half := (x.Expected.High - x.Expected.Low) / 2
	return ReviewPoint{
		Point: x.Point, Unit: x.Unit, Reading: v, Inside: !beyond(v, x.Expected), Accepted: x.Accept == nil || !beyond(v, *x.Accept),
		Score: 3 * (v - x.Expected.Low - half) / half, Expected: x.Expected, Accept: x.Accept,
	}
}

// beyond says whether a reading is outside limits. What was not read is not,
// and nothing is outside a limit that does not exist.
func beyond(v spread.Figure, l spread.Limits) bool { return v < l.Low || v > l.High }

// judge is the worst that any reading says. A trim's own reading may be left
// out: the readings that come after it show where it is.
func (u ReviewUnit) judge() string {
	switch {
	case slices.ContainsFunc(u.Points, func(p ReviewPoint) bool { return !p.Inside }),
		slices.ContainsFunc(u.Trims, func(t ReviewTrim) bool { return !t.Inside }):
		return Outside
	case slices.ContainsFunc(u.Points, func(p ReviewPoint) bool { return !p.Accepted }):
		return Misses
	case slices.ContainsFunc(u.Points, ReviewPoint.missing):
		return Incomplete
	}
	return Inside
}

// missing says whether a reading that could be judged was not taken.
func (p ReviewPoint) missing() bool {
	judged := !math.IsNaN(float64(p.Expected.Low)) || !math.IsNaN(float64(p.Expected.High)) || p.Accept != nil
	return judged && math.IsNaN(float64(p.Reading))
}

// Missing are the points of a unit that were not read.
func (u ReviewUnit) Missing() []string {
	var points []string
	for _, p := range u.Points {
		if p.missing() {
			points = append(points, p.Point)
		}
	}
	return points
}

// reviewBatch averages each point over the units that were read.
func reviewBatch(readings []bench.Reading, f bench.Filled) ReviewBatch {
	b := ReviewBatch{Points: []ReviewBatchPoint{}}
	for _, x := range readings {
		p := ReviewBatchPoint{Point: x.Point, ExpectedMean: x.Nominal, ShiftScore: spread.Figure(math.NaN())}
		sum := spread.Figure(0)
		for _, u := range f.Units {
			if v := valueOf(valuesOf(f, u.Unit), x.Point); !math.IsNaN(float64(v)) {
				sum += v
				p.Units++
			}
		}
		p.Mean = sum / spread.Figure(p.Units) // of none, NaN
		b.Points = append(b.Points, p)
	}
	b.Why = "how far a mean may be off is not worked out"
	return b
}
