package compare_test

import (
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/tolerance/build"
	"batchwright/tolerance/compare"
)

// paired is the pair of tanks with two capacitors in parallel as the second
// tank's pad, and another two as a third buying line.
var paired = strings.Replace(pair, "pad:  {ref: C3, value: 15 pF, family: c0g, tolerance: 5 %}",
	"pad:  {ref: C3, parallel: [{value: 10 pF, family: c0g, tolerance: 5 %}, {value: 22.3 pF, family: polystyrene, tolerance: 5 %}]}", 1)

// A pair elsewhere is no obstacle, and lots can be compared at a pair: both of
// its pieces are named, rated and told of where they cannot be bought.
func TestPairCompared(t *testing.T) {
	if r := run(t, paired, compare.Options{At: []string{"a.tank"}, Families: []string{"c0g", "mica"}}); len(r.Cases) != 2 {
		t.Errorf("%d cases beside a pair, want 2", len(r.Cases))
	}
	hot := strings.Replace(paired, "at: [warm]", "at: [warm, oven]", 1)
	r := run(t, hot, compare.Options{At: []string{"b.pad"}, Lots: []build.Lots{build.OneLot, build.MixedLots}})
	var labels []string
	for _, c := range r.Cases {
		labels = append(labels, c.Label)
		// polystyrene stands 70 °C, c0g 125 °C (the embedded families); the oven has 90 °C
		if !slices.Equal(c.Beyond, []string{"oven"}) || c.Temperatures == nil || c.Temperatures.High != 70 {
			t.Errorf("%s: beyond %v, %v", c.Label, c.Beyond, c.Temperatures)
		}
		if c.NotOffered == "" || !strings.Contains(c.NotOffered, "does not offer") {
			t.Errorf("%s: 22.3 pF polystyrene is sold by nobody, but %q", c.Label, c.NotOffered)
		}
	}
	if d := cmp.Diff([]string{"c0g/polystyrene ±5 %, one lot", "c0g/polystyrene ±5 %, mixed lots"}, labels); d != "" {
		t.Error(d)
	}
	if d := cmp.Diff([]compare.Line{{Positions: []string{"b.pad"}, Refs: []string{"C3A", "C3B"}}}, r.Lines); d != "" {
		t.Error(d)
	}
}

// Another part at a pair is refused in words.
func TestPairNotExchanged(t *testing.T) {
	for _, o := range []compare.Options{
		{At: []string{"b.pad"}, Families: []string{"mica"}},
		{At: []string{"b.pad"}, Tolerances: []float64{0.01}},
		{At: []string{"a.tank", "b.pad"}, Families: []string{"mica"}},
	} {
		_, err := compare.Cases(read(t, paired), o)
		if err == nil || !strings.Contains(err.Error(), "b.pad is made up of two pieces: expected a position of one") {
			t.Errorf("%+v: %v", o, err)
		}
	}
}
