package plan

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/bench/explain"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// twoPoints is a batch of three with two readings and a trim; only the first
// reading proves a target, the second's window is not known.
func twoPoints() Work {
	none := spread.Figure(math.NaN())
	return Work{
		Build: &build.Build{Title: "Pair", Units: 3},
		Sheet: bench.Sheet{
			Readings: []bench.Reading{
				{Step: 1, Point: "half.voltage", Unit: "V", Nominal: 4.5, Expected: spread.Limits{Low: 4.4, High: 4.6}, Accept: &spread.Limits{Low: 4.45, High: 4.55}, Uncertainty: 0.01},
				{Step: 3, Point: "tank.level", Unit: "V", Nominal: 1, Expected: spread.Limits{Low: none, High: none}, Uncertainty: 0.01},
			},
			Turns: []bench.Turn{{Step: 2, Turn: "tank.tuner", Unit: "Hz", To: 1000, Within: 10}},
		},
	}
}

func oneUnit(point string, v float64) bench.Filled {
	return bench.Filled{Points: []string{point}, Units: []bench.FilledUnit{{Unit: 1, Values: []spread.Figure{spread.Figure(v)}}}}
}

// The worst that readings, trims and all of them together say counts; a unit
// that is inside everywhere may be accused all the same. What has no window may
// be left out.
func TestReviewVerdicts(t *testing.T) {
	ok := explain.Unit{Unit: 1, Verdict: explain.Incomplete, Healthy: 0.99, Distance: 1, DistanceLimit: 3}
	far, accused := ok, ok
	far.Verdict, far.Distance = explain.Improbable, 4
	accused.Healthy, accused.Accused = 0.2, true
	accused.Suspects = []explain.Suspect{{Ref: "R1", Fault: "missing or open", Class: explain.Open, Probability: 0.8, Group: 1}}
	for _, c := range []struct {
		name    string
		reading float64
		trim    float64
		said    explain.Unit
		want    explain.Verdict
		good    bool
	}{
		{"all inside", 4.5, 1000, ok, explain.Inside, true},
		{"outside", 4.7, 1000, ok, explain.Outside, false},
		{"a trim outside", 4.5, 1011, ok, explain.Outside, false},
		{"a target not proved", 4.41, 1000, ok, explain.Misses, false},
		{"unlikely together", 4.5, 1000, far, explain.Improbable, false},
		{"outside before unlikely", 4.7, 1000, far, explain.Outside, false},
		{"inside and accused", 4.5, 1000, accused, explain.Inside, false},
	} {
		r := NewReview(twoPoints(), oneUnit("half.voltage", c.reading), oneUnit("tank.tuner", c.trim), &explain.Review{Units: []explain.Unit{c.said}})
		if u := r.Units[0]; u.Verdict != c.want || u.Good() != c.good {
			t.Errorf("%s: %s, good %v", c.name, u.Verdict, u.Good())
		}
	}
	r := NewReview(twoPoints(), bench.Filled{}, oneUnit("tank.tuner", 1000), nil)
	if u := r.Units[0]; u.Verdict != explain.Incomplete || u.Good() {
		t.Errorf("only a trim: %s", u.Verdict)
	}
	text, err := json.Marshal(r)
	if err != nil || strings.Contains(string(text), "NaN") || !strings.Contains(string(text), `"healthy":null`) || !strings.Contains(string(text), `"unread_units":[2,3]`) {
		t.Errorf("%s (%v)", text, err)
	}
}

// The sentences by hand: suspects of less than a hundredth are not worth a line
// unless nothing else is there, those alike share one, and one measurement is
// asked for once.
func TestExplainedSentences(t *testing.T) {
	s := func(ref, fault string, p float64, group int) explain.Suspect {
		return explain.Suspect{Ref: ref, Fault: fault, Probability: spread.Figure(p), Group: group}
	}
	u := ReviewUnit{Accused: true, Healthy: 0.004, Suspects: []explain.Suspect{
		s("R5", "missing or open", 0.7, 1), s("R5", "ten times too large", 0.25, 1), s("R6", "shorted", 0.001, 1), s("R7", "shorted", 0.04, 2), s("R8", "shorted", 0.005, 3)},
		Further: []explain.Further{
			{Between: [2]string{"R5 missing or open", "R5 ten times too large"}, Reading: "measure R5 out of circuit"},
			{Between: [2]string{"R5 missing or open", "R6 shorted"}, Reading: "measure R5 out of circuit"},
			{Between: [2]string{"R5 missing or open", "R7 shorted"}, Reading: "amp.dc at bench", Expect: &[2]spread.Figure{0.0012, 3.2}, Unit: "V"},
		}}
	var got []string
	for _, g := range SuspectGroups(u) {
		got = append(got, Likelihood(g.Probability)+" "+g.Text())
	}
	got = append(append(got, FurtherTexts(u)...), HealthyText(u))
	want := []string{
		"95 % R5 missing or open (70 %), or R5 ten times too large (25 %); these readings do not tell which", "4 % R7 shorted",
		"measure R5 out of circuit, to tell R5 missing or open from R5 ten times too large",
		"read amp.dc at bench: 1.20 mV if R5 missing or open, 3.20 V if R7 shorted", "",
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
	edge := ReviewUnit{Verdict: explain.Outside, Healthy: 0.97, Suspects: []explain.Suspect{s("R5", "shorted", 0.003, 1)}}
	if len(SuspectGroups(edge)) != 0 || !strings.Contains(HealthyText(edge), "the whole batch is off") {
		t.Errorf("a unit at the edge: %v, %q", SuspectGroups(edge), HealthyText(edge))
	}
}

// What the batch says, by hand.
func TestBatchSentences(t *testing.T) {
	point := func(name string, remarks ...string) ReviewBatchPoint {
		return ReviewBatchPoint{explain.BatchPoint{Point: name, Mean: 4.55, ExpectedMean: 4.5, ShiftScore: -3.26, SpreadRatio: 1.7, Slope: 0.002, Remarks: remarks}, 8}
	}
	b := ReviewBatch{Counted: 8, Points: []ReviewBatchPoint{point("half.voltage", "shifted", "spread", "trend"), point("tank.level")},
		Lots: []explain.Lot{{Refs: []string{"C6", "C7", "C8", "C9"}, Parameter: "value", Deviation: -2.04, Shift: -4.1, Interval: [2]spread.Figure{-6, -2.2}, Unit: "%"}},
		Rest: &explain.Rest{Units: 6, Share: 0.9, Interval: [2]spread.Figure{0.88, 0.92}, Planned: 0.985,
			Targets: []explain.RestTarget{{Name: "drift", Share: 0.9, Planned: 0.985}, {Name: "level", Share: 0.99, Planned: 0.991}}}}
	odds := BatchOdds(twoPoints().Sheet, b)
	want := []BatchOdd{{Point: "half.voltage", Mean: "4.55", Expected: "4.5", Symbol: "V",
		What: "the mean is 3.3 standard deviations of such means below; 1.7 times as far apart as expected; drifts by +2.00 mV from unit to unit"}}
	if len(odds) == 1 { // how many digits is the test sheet's matter
		odds[0].Mean, odds[0].Expected = strings.TrimRight(odds[0].Mean, "0"), strings.TrimRight(odds[0].Expected, "0")
	}
	if d := cmp.Diff(want, odds); d != "" {
		t.Error(d)
	}
	got := append(LotSentences(b), RestSentences(b)...)
	got = append(got, BatchSentences(Review{Units: make([]ReviewUnit, 10), Batch: b, Notes: []string{"a note"}})...)
	text := []string{
		"The lot of C6–C9 (value) is off its centre by -4.1 % (95 %: -6 % to -2.2 %), 2.0 times the usual scatter of lots.",
		"The 6 units not read yet: 90.0 % should meet every target (88.0 % to 92.0 %); before the readings it was 98.5 %.", "drift: 90.0 % instead of 98.5 %.",
		"a note", "Averages are over 8 units; 2 with a probable fault or without readings left out.",
	}
	if d := cmp.Diff(text, got); d != "" {
		t.Error(d)
	}
}
