package plan

import (
	"math"
	"slices"

	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/bench/explain"
	"batchwright/tolerance/spread"
)

// Review is what `review --json` prints: every unit of which something was
// read, judged by the windows of the test sheet and by what explains its
// readings, and the batch together.
type Review struct {
	Build  string       `json:"build"`
	Plan   string       `json:"plan"` // the digest
	Units  []ReviewUnit `json:"units"`
	Unread []int        `json:"unread_units"` // of which nothing was read
	Batch  ReviewBatch  `json:"batch"`
	Notes  []string     `json:"notes"`
	Files  []string     `json:"files"` // written

	Workbook *ReviewWorkbook `json:"workbook"` // null: the readings came as a table
}

// ReviewUnit is the verdict on one unit. Besides what explain.Unit says, it
// counts where trims were left.
type ReviewUnit struct {
	Unit          int               `json:"unit"`
	Verdict       explain.Verdict   `json:"verdict"`
	Points        []ReviewPoint     `json:"points"`
	Trims         []ReviewTrim      `json:"trims"`
	Healthy       spread.Figure     `json:"healthy"` // the probability that nothing is wrong
	Accused       bool              `json:"accused"` // something is more probably wrong than not
	Distance      spread.Figure     `json:"distance"`
	DistanceLimit spread.Figure     `json:"distance_limit"`
	Suspects      []explain.Suspect `json:"suspects"`
	Further       []explain.Further `json:"further"`
}

// ReviewPoint is one reading of a unit, in SI; null: not read. What was not
// read is not outside.
type ReviewPoint struct {
	Point     string         `json:"point"`
	Unit      string         `json:"unit"`
	Reading   spread.Figure  `json:"reading"`
	Inside    bool           `json:"inside"`    // of the expected window
	Accepted  bool           `json:"accepted"`  // not outside the window of the target
	Score     spread.Figure  `json:"score"`     // (reading − mean)/standard deviation, of good units
	Predicted spread.Figure  `json:"predicted"` // by the first suspect; null without one
	Expected  spread.Limits  `json:"expected"`
	Accept    *spread.Limits `json:"accept"`
}

// ReviewTrim is where a trim was left; null: not written down.
type ReviewTrim struct {
	Turn    string        `json:"turn"`
	Unit    string        `json:"unit"`
	Reading spread.Figure `json:"reading"`
	Inside  bool          `json:"inside"`
	Within  spread.Limits `json:"within"`
}

// ReviewBatch is what the units say together.
type ReviewBatch struct {
	Counted int                `json:"counted"` // units that the averages are over
	Points  []ReviewBatchPoint `json:"points"`
	Lots    []explain.Lot      `json:"lots"`
	Unclear []explain.Unclear  `json:"unclear"`
	Rest    *explain.Rest      `json:"rest"`          // null: nothing is to be said of it
	Why     string             `json:"why,omitempty"` // why figures are null
}

// ReviewBatchPoint is one test point over the units that count. Where they are
// too few to be judged, the mean is over those read, and what is expected the
// nominal reading.
type ReviewBatchPoint struct {
	explain.BatchPoint
	Units int `json:"units"` // read
}

// ReviewWorkbook is what the workbook said beside the readings.
type ReviewWorkbook struct {
	workbook.Origin
	Lost     []string           `json:"lost"` // marks of its plan that it has no more
	Findings []workbook.Finding `json:"findings"`
	Typed    []workbook.Typed   `json:"typed"`
}

// NewReview judges what was read of a plan. Verdicts are worked out from the
// readings; a workbook's own are never looked at. What explains the readings is
// nil where nothing was read.
func NewReview(w Work, filled, turned bench.Filled, explained *explain.Review) Review {
	if explained == nil {
		explained = &explain.Review{}
	}
	r := Review{
		Build: w.Build.Title, Plan: w.Digest(), Units: []ReviewUnit{}, Unread: []int{},
		Batch: reviewBatch(w.Sheet.Readings, filled, explained.Batch), Notes: listed(explained.Notes), Files: []string{},
	}
	said := map[int]explain.Unit{}
	for _, u := range explained.Units {
		said[u.Unit] = u
	}
	for u := 1; u <= w.Build.Units; u++ {
		read, turns := valuesOf(filled, u), valuesOf(turned, u)
		if len(read)+len(turns) == 0 {
			r.Unread = append(r.Unread, u)
			continue
		}
		r.Units = append(r.Units, reviewUnit(u, w.Sheet, read, turns, said[u]))
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

func reviewUnit(unit int, s bench.Sheet, read, turns map[string]float64, said explain.Unit) ReviewUnit {
	out := ReviewUnit{
		Unit: unit, Points: []ReviewPoint{}, Trims: []ReviewTrim{}, Healthy: said.Healthy, Accused: said.Accused,
		Distance: said.Distance, DistanceLimit: said.DistanceLimit, Suspects: listed(said.Suspects), Further: listed(said.Further),
	}
	for _, x := range s.Readings {
		out.Points = append(out.Points, reviewPoint(workbook.Shown(x), valueOf(read, x.Point), said))
	}
	for _, t := range s.Turns {
		v, within := valueOf(turns, t.Turn), workbook.ShownTurn(t)
		out.Trims = append(out.Trims, ReviewTrim{t.Turn, t.Unit, v, !beyond(v, within), within})
	}
	if said.Unit == 0 { // only trims were written down
		none := spread.Figure(math.NaN())
		out.Healthy, out.Distance, out.DistanceLimit = none, none, none
	}
	out.Verdict = out.judge(said.Unit != 0 && !(said.Distance <= said.DistanceLimit))
	return out
}

func reviewPoint(x bench.Reading, v spread.Figure, said explain.Unit) ReviewPoint {
	none := spread.Figure(math.NaN())
	p := ReviewPoint{
		Point: x.Point, Unit: x.Unit, Reading: v, Inside: !beyond(v, x.Expected), Accepted: x.Accept == nil || !beyond(v, *x.Accept),
		Score: none, Predicted: none, Expected: x.Expected, Accept: x.Accept,
	}
	for _, q := range said.Points {
		if q.Point == x.Point {
			p.Score = q.Score
			if q.Predicted != nil {
				p.Predicted = *q.Predicted
			}
		}
	}
	return p
}

// beyond says whether a reading is outside limits. What was not read is not,
// and nothing is outside a limit that does not exist.
func beyond(v spread.Figure, l spread.Limits) bool { return v < l.Low || v > l.High }

// judge is the worst that any reading says, or all of them together. A trim's
// own reading may be left out: the readings that come after it show where it is.
func (u ReviewUnit) judge(unlikely bool) explain.Verdict {
	switch {
	case slices.ContainsFunc(u.Points, func(p ReviewPoint) bool { return !p.Inside }),
		slices.ContainsFunc(u.Trims, func(t ReviewTrim) bool { return !t.Inside }):
		return explain.Outside
	case unlikely:
		return explain.Improbable
	case slices.ContainsFunc(u.Points, func(p ReviewPoint) bool { return !p.Accepted }):
		return explain.Misses
	case slices.ContainsFunc(u.Points, ReviewPoint.missing):
		return explain.Incomplete
	}
	return explain.Inside
}

// Good says whether a unit is as it should be: every reading inside, and
// nothing more probably wrong than not.
func (u ReviewUnit) Good() bool { return u.Verdict == explain.Inside && !u.Accused }

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

// reviewBatch has every point of the sheet. Those that were not judged are
// averaged over the units that were read.
func reviewBatch(readings []bench.Reading, f bench.Filled, said explain.Batch) ReviewBatch {
	b := ReviewBatch{Counted: said.Counted, Points: []ReviewBatchPoint{}, Lots: listed(said.Lots), Unclear: listed(said.Unclear), Rest: said.Rest, Why: said.Why}
	for _, x := range readings {
		sum, n := spread.Figure(0), 0
		for _, u := range f.Units {
			if v := valueOf(valuesOf(f, u.Unit), x.Point); !math.IsNaN(float64(v)) {
				sum += v
				n++
			}
		}
		none := spread.Figure(math.NaN())
		p := explain.BatchPoint{
			Point: x.Point, Mean: sum / spread.Figure(n) /* of none, NaN */, ExpectedMean: x.Nominal,
			ShiftScore: none, SpreadRatio: none, SpreadP: none, Slope: none, SlopeT: none, SlopeP: none, Remarks: []string{},
		}
		for _, q := range said.Points {
			if q.Point == x.Point {
				p = q
			}
		}
		b.Points = append(b.Points, ReviewBatchPoint{p, n})
	}
	return b
}
