package formula

import (
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestNames(t *testing.T) {
	e, mistakes := Parse("i + (in.level < 2*volt ? -b : min(root(i, low, b, i - j - root(j, 0, 1, j*i)), in.level))")
	if len(mistakes) > 0 {
		t.Fatal(mistakes)
	}
	if d := cmp.Diff([]string{"i", "in.level", "volt", "b", "low", "j"}, e.Names()); d != "" {
		t.Error(d)
	}
}

func TestReserved(t *testing.T) {
	for word, want := range map[string]bool{"sqrt": true, "root": true, "ohm": true, "pi": true, "coil": false} {
		if got := Reserved(word); got != want {
			t.Errorf("Reserved(%q) = %v", word, got)
		}
	}
}
