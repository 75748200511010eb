package plan

import (
	"math"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/tolerance/spread"
)

func TestFindingSentences(t *testing.T) {
	at := func(stage, finding, condition string, share, untrimmed spread.Figure) spread.Finding {
		return spread.Finding{Stage: stage, Finding: finding, Condition: condition, Share: share, UntrimmedShare: untrimmed, Text: "it " + finding + "; stop that"}
	}
	r := &spread.Report{
		Outputs: []spread.OutputReport{{Condition: "bench"}, {Condition: "warm"}, {Condition: "warm", ChangeFrom: "bench"}},
		Findings: []spread.Finding{
			at("amp", "clips", "bench", 0.25, 0), at("amp", "clips", "warm", 0.25, 0),
			at("amp", "slews", "warm", 0.00001, 0),
			at("other", "slews", "bench", 0.25, 0.02), at("other", "slews", "warm", 1, 0.03),
		},
	}
	want := []string{
		"amp: it clips on 25.0 % of the units at every condition; stop that.",
		"amp: it slews on 0.01 % of the units at warm; stop that.",
		"other: it slews on 25.0 % of the units at bench, on 100 % of the units at warm (not counting the 3.0 % whose trims do not reach); stop that.",
	}
	if diff := cmp.Diff(want, FindingSentences(r)); diff != "" {
		t.Error(diff)
	}
	if got := FindingSentences(&spread.Report{}); got != nil {
		t.Errorf("of nothing: %q", got)
	}
}

// Each mixer is told of at the condition where its lock range is widest.
func TestLockSentences(t *testing.T) {
	nan := spread.Figure(math.NaN())
	r := &spread.Report{LockRanges: []spread.LockRange{
		{Stage: "a", Condition: "bench", LockRange: 2, LowestNote: 100},
		{Stage: "a", Condition: "warm", LockRange: 2.5, LowestNote: 100},
		{Stage: "b", Condition: "bench", LockRange: 250, LowestNote: 100, Decibels: 8},
		{Stage: "b", Condition: "warm", LockRange: 240, LowestNote: 100, Decibels: 8},
		{Stage: "c", Condition: "bench", LockRange: 2, LowestNote: nan, Why: "nothing is asked"},
	}}
	want := []string{
		"a: the oscillators pull into step below 2.50 Hz at most (at warm); the lowest note wanted, 100 Hz, is clear of that.",
		"b: the lowest note wanted, 100 Hz, is inside the lock range, 250 Hz at bench, where the oscillators pull into step and there is no note; isolation must grow by 8 dB.",
		"c: the oscillators pull into step below 2.00 Hz (at bench); nothing is asked.",
	}
	if diff := cmp.Diff(want, LockSentences(r)); diff != "" {
		t.Error(diff)
	}
}

// What is found stands on the workbook's first page, and once: the notes, which
// the workbook takes from the report, are not among it.
func TestFindingsReachTheWorkbook(t *testing.T) {
	w := lampWork(t)
	w.Report.Findings = []spread.Finding{{Stage: "tank", Finding: "x", Condition: "bench", Share: 0.5, Text: "it sings; sit on it"}}
	w.Report.LockRanges = []spread.LockRange{{Stage: "tank", Condition: "bench", LockRange: 20, LowestNote: 10, Decibels: 7}}
	w.Report.Notes = []string{"a note"}
	got := Compose(w)
	for _, sentence := range append(FindingSentences(w.Report), LockSentences(w.Report)...) {
		if !slices.Contains(got.Findings, sentence) {
			t.Errorf("%q is not in %q", sentence, got.Findings)
		}
	}
	if slices.Contains(got.Findings, "a note") || !slices.Contains(got.Spread.Notes, "a note") {
		t.Errorf("notes %q, findings %q", got.Spread.Notes, got.Findings)
	}
}
