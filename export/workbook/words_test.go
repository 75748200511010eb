package workbook

import (
	"math"
	"testing"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"

	"github.com/google/go-cmp/cmp"
)

func TestWords(t *testing.T) {
	nan := spread.Figure(math.NaN())
	for _, c := range []struct{ name, got, want string }{
		{"no share", share(0), "none"}, {"hardly any", share(0.0004), "< 0.1 %"}, {"some", share(0.0005), "0.1 %"}, {"most", share(0.9995), "100.0 %"},
		{"nearly all", share(0.99951), "> 99.9 %"}, {"all", share(1), "all"}, {"unknown", share(nan), "–"},
		{"interval outward", interval(0.99312, 0.99615), "99.31 – 99.62 %"}, {"interval whole", interval(0, 1), "0 – 100 %"}, {"interval unknown", interval(nan, 1), ""},
		{"percent", percent(0.025), "2.5 %"}, {"percent small", percent(0.0005), "0.05 %"}, {"tolerance", within(0.1), "±10 %"}, {"no tolerance", within(0), ""}, {"tolerance unknown", within(math.NaN()), ""},
		{"runs", runs([]int{1, 2, 3, 5, 7, 8}), "1–3, 5, 7, 8"}, {"no runs", runs(nil), ""},
		{"count", whole(1234567), "1 234 567"}, {"small count", whole(999), "999"}, {"one", plural(1, "unit"), "1 unit"}, {"many", plural(24, "unit"), "24 units"},
		{"sentence", capital("no choice"), "No choice"}, {"name", capital("mixer.offset moves"), "mixer.offset moves"}, {"nothing", capital(""), ""},
		{"stage", stageOf("mixer.collector"), "mixer"}, {"stage alone", stageOf("mixer"), "mixer"},
		{"at the top end", short(spread.TrimReport{ShortLow: 0, ShortHigh: 0.02}), "2.0 %, at 100 %"}, {"at the bottom", short(spread.TrimReport{ShortLow: 0.02, ShortHigh: 0.001}), "2.1 %, at 0 %"},
		{"both", short(spread.TrimReport{ShortLow: 0.02, ShortHigh: 0.01}), "3.0 %, both ends"}, {"never", short(spread.TrimReport{}), "none seen"}, {"not simulated", short(spread.TrimReport{ShortLow: nan}), "–"},
	} {
		if d := cmp.Diff(c.want, spaces(c.got)); d != "" {
			t.Errorf("%s (-want +got):\n%s", c.name, d)
		}
	}
}

// spaces makes the thin and the unbreakable space ordinary ones.
func spaces(s string) string {
	out := []rune(s)
	for i, r := range out {
		if r == '\u00a0' || r == '\u2009' {
			out[i] = ' '
		}
	}
	return string(out)
}

func TestContributions(t *testing.T) {
	got := contributions([]spread.Contribution{
		{Ref: "L1", Parameter: "value", Share: 0.52}, {Ref: "C1", Parameter: "temperature_coefficient", Share: 0.31}, {Ref: "R1", Parameter: "value", Share: 0.049}, {Ref: "Q1", Parameter: "vbe", Share: spread.Figure(math.NaN())},
	})
	if want := "L1 52 %, C1 temperature coefficient 31 %"; spaces(got) != want {
		t.Errorf("%q, want %q", got, want)
	}
}

// Lines are what LibreOffice made of these texts in Carlito at 10 points.
func TestLines(t *testing.T) {
	for _, c := range []struct {
		name, text string
		column     float64
		want       int
	}{
		{"empty", "", 10, 1}, {"short", "dc voltage", 14, 1}, {"two", "output of the mixer, C12 and ground, or the jack", 28, 2},
		{"a word too long for the column", "WWWWWWWWWWWWWWWWWWWW", 10, 4}, {"narrow letters", "illicit illicit illicit", 14, 1},
	} {
		if got := lines(c.text, c.column, 10, false); got != c.want {
			t.Errorf("%s: %d lines, want %d", c.name, got, c.want)
		}
	}
}

func TestAdviceNamesTheStage(t *testing.T) {
	p := sample(1)
	got := p.advice(bench.Turn{Turn: "fixed.tuner", Ref: "CT1"})
	if want := "Leave it at the end that comes nearest and write the reading down. Compare C1, C2, L1 with the parts list, then try another piece of each, the ones with the widest tolerance first."; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}
