package order

import (
	"slices"
	"testing"

	"pgregory.net/rapid"
)

func TestNaturalOrder(t *testing.T) {
	refs := []string{"R1", "C10", "C2", "CT1", "C1", "C02", "L3", "U1A", "U1", "R10", "R9", "C99999999999999999999", "C100000000000000000000"}
	slices.SortFunc(refs, compare)
	want := []string{"C1", "C02", "C2", "C10", "C99999999999999999999", "C100000000000000000000", "CT1", "L3", "R1", "R9", "R10", "U1", "U1A"}
	if !slices.Equal(refs, want) {
		t.Errorf("%v, want %v", refs, want)
	}
	if !Less("C2", "C10") || Less("C10", "C2") || Less("C2", "C2") {
		t.Error("C2 does not come before C10 alone")
	}
}

// The order is a strict one: whatever the references, sorting cannot depend on
// how they came.
func TestNaturalOrderIsStrict(t *testing.T) {
	ref := rapid.StringMatching(`[A-C]{0,2}[0-2]{0,3}[A-B]?[0-2]{0,2}`)
	rapid.Check(t, func(t *rapid.T) {
		a, b, c := ref.Draw(t, "a"), ref.Draw(t, "b"), ref.Draw(t, "c")
		if (compare(a, b) == 0) != (a == b) || compare(a, b) != -compare(b, a) {
			t.Fatalf("%q and %q: %d and %d", a, b, compare(a, b), compare(b, a))
		}
		if compare(a, b) < 0 && compare(b, c) < 0 && compare(a, c) >= 0 {
			t.Fatalf("%q < %q < %q, but not the first before the last", a, b, c)
		}
	})
}

func TestRuns(t *testing.T) {
	for _, c := range []struct {
		name string
		refs []string
		want string
	}{
		{"none", nil, ""},
		{"one", []string{"C1"}, "C1"},
		{"two in a row are written out", []string{"C1", "C2"}, "C1, C2"},
		{"a run and one apart, given out of order", []string{"C10", "C3", "C1", "C4", "C2"}, "C1–C4, C10"},
		{"across ten", []string{"C11", "C9", "C10"}, "C9–C11"},
		{"letters part runs", []string{"C1", "C2", "C3", "R4", "R5", "R6"}, "C1–C3, R4–R6"},
		{"no numbers", []string{"X", "Y", "Z"}, "X, Y, Z"},
		{"leading zeros do not run", []string{"C01", "C02", "C03"}, "C01, C02, C03"},
		{"nor does one with them run on", []string{"C01", "C2", "C3"}, "C01, C2, C3"},
		{"the same twice", []string{"C1", "C1", "C2"}, "C1, C1, C2"},
		{"numbers before letters", []string{"2A", "2B", "2C"}, "2A, 2B, 2C"},
	} {
		before := slices.Clone(c.refs)
		if got := Runs(c.refs); got != c.want {
			t.Errorf("%s: %q, want %q", c.name, got, c.want)
		}
		if !slices.Equal(before, c.refs) {
			t.Errorf("%s: the caller's slice was changed", c.name)
		}
	}
}
