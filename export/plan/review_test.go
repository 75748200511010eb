package plan

import (
	"math"
	"testing"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/bench/explain"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// reviewedSheet has a rail between 11.5137 V and 12.4871 V, read to 10 mV: the
// sheet shows 11.51 to 12.49. Its target is proved from 11.804 V to 12.196 V,
// shown as 11.81 to 12.19. A beat is trimmed to 0 Hz within 2 Hz.
func reviewedSheet() bench.Sheet {
	return bench.Sheet{
		Turns: []bench.Turn{{Step: 1, Turn: "a.tuner", Unit: "Hz", To: 0, Within: 2}},
		Readings: []bench.Reading{
			{Step: 2, Point: "rails.voltage", Unit: "V", Nominal: 12, Uncertainty: 0.062,
				Expected: spread.Limits{Low: 11.5137, High: 12.4871}, Accept: &spread.Limits{Low: 11.804, High: 12.196}},
			{Step: 3, Point: "mixer.base", Unit: "V", Nominal: 0.6593, Uncertainty: 0.0053, Expected: spread.Limits{Low: 0.6121, High: 0.7064}},
			{Step: 4, Point: "detector.corner", Unit: "Hz", Nominal: spread.Figure(math.NaN()), Uncertainty: spread.Figure(math.NaN()),
				Expected: spread.Limits{Low: spread.Figure(math.NaN()), High: spread.Figure(math.NaN())}, Why: "no unit was good"},
		},
	}
}

func TestReviewVerdicts(t *testing.T) {
	none := math.NaN()
	for _, c := range []struct {
		name                 string
		rail, base, corner   float64
		tuner                float64
		verdict              explain.Verdict
		railInside, railGood bool
	}{
		{"all inside", 12, 0.66, none, 0.5, explain.Inside, true, true},
		{"what has no limits is never outside", 12, 0.66, 1e9, none, explain.Inside, true, true},
		{"inside as the sheet shows it", 11.82, 0.6121, none, none, explain.Inside, true, true},
		{"inside the window, outside the digits", 12.195, 0.66, none, none, explain.Misses, true, false},
		{"outside the window, inside the digits", 12.1, 0.612, none, none, explain.Inside, true, true},
		{"on the expected limit", 11.51, 0.66, none, none, explain.Misses, true, false},
		{"below it", 11.509, 0.66, none, none, explain.Outside, false, false},
		{"above the target", 12.3, 0.66, none, none, explain.Misses, true, false},
		{"another point outside", 12, 0.8, none, none, explain.Outside, true, true},
		{"outside wins", 12.3, 0.8, none, none, explain.Outside, true, false},
		{"trim outside", 12, 0.66, none, -2.5, explain.Outside, true, true},
		{"half", 12, none, none, 0, explain.Incomplete, true, true},
		{"half and not proved", 12.3, none, none, 0, explain.Misses, true, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := reviewedSheet()
			w := Work{Build: &build.Build{Title: "b", Units: 3}, Sheet: s}
			values := []spread.Figure{spread.Figure(c.rail), spread.Figure(c.base), spread.Figure(c.corner)}
			r := NewReview(w, bench.Filled{
				Points: []string{"rails.voltage", "mixer.base", "detector.corner"}, Units: []bench.FilledUnit{{Unit: 2, Values: values}},
			}, bench.Filled{Points: []string{"a.tuner"}, Units: []bench.FilledUnit{{Unit: 2, Values: []spread.Figure{spread.Figure(c.tuner)}}}}, nil)
			if len(r.Units) != 1 || len(r.Unread) != 2 {
				t.Fatalf("units %+v, unread %v", r.Units, r.Unread)
			}
			u := r.Units[0]
			if p := u.Points[0]; u.Verdict != c.verdict || p.Inside != c.railInside || p.Accepted != c.railGood {
				t.Errorf("%s, rail inside %v, accepted %v; want %s, %v, %v", u.Verdict, p.Inside, p.Accepted, c.verdict, c.railInside, c.railGood)
			}
		})
	}
}

// TestReviewFigures: the mean of 12.25 and 11.75 is 12.
func TestReviewFigures(t *testing.T) {
	w := Work{Build: &build.Build{Title: "b", Units: 2}, Sheet: reviewedSheet()}
	r := NewReview(w, bench.Filled{Points: []string{"rails.voltage"}, Units: []bench.FilledUnit{
		{Unit: 1, Values: []spread.Figure{12.25}}, {Unit: 2, Values: []spread.Figure{11.75}},
	}}, bench.Filled{}, nil)
	b := r.Batch.Points[0]
	if b.Mean != 12 || b.Units != 2 || b.ExpectedMean != 12 || !math.IsNaN(float64(r.Batch.Points[1].Mean)) {
		t.Errorf("batch %+v", r.Batch)
	}
}
