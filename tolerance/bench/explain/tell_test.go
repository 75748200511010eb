package explain

import (
	"strings"
	"testing"
)

// number is a hypothesis by its name.
func (f fixture) number(t *testing.T, name string) int {
	t.Helper()
	for h, fa := range f.x.faults {
		if fa.name() == name {
			return h + 1
		}
	}
	t.Fatalf("%s has no hypothesis %q", f.name, name)
	return 0
}

// What a bench has comes first: in the second example R2 and R1 exchanged move a
// corner at every condition, and it is asked for at the first. In the first
// example an open R5 leaves the equations promising kilovolts, which no meter
// reads: R5 is measured instead.
func TestFurtherReadings(t *testing.T) {
	all := func(f fixture) (list []int) {
		for i := range f.x.sheet {
			list = append(list, i)
		}
		return list
	}
	owl, lantern := examples(t)[1], examples(t)[0]
	got := owl.x.further(owl.number(t, "R2 ten times too large"), owl.number(t, "R1 and R2 exchanged"), all(owl))
	if first := owl.model.Build.Conditions[0].Name; got.Expect == nil || !strings.HasSuffix(got.Reading, " at "+first) {
		t.Errorf("asked for %q, expected a reading at %s", got.Reading, first)
	}
	got = lantern.x.further(lantern.number(t, "R5 missing or open"), lantern.number(t, "R5 ten times too large"), all(lantern))
	if got.Reading != "measure R5 out of circuit" {
		t.Errorf("asked for %q", got.Reading)
	}
}
