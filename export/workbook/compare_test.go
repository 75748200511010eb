package workbook

import (
	"bytes"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"batchwright/tolerance/spread"
)

// sampleCompare compares invented parts, with so many targets that they take
// two tables.
func sampleCompare(cases int) *Compare {
	c := &Compare{
		Below: "Other parts at fixed.upper (C6–C9).", Currency: "EUR",
		Drifts:  []CompareDrift{{"mixer.offset", "Hz"}},
		Changes: []CompareChange{{"warm-up drift, switch on", "Hz", 30}, {"level, hall", "V", math.NaN()}},
		Targets: []string{"warm-up drift", "level", "a", "b", "c", "d", "e", "f", "g"}, Trims: []string{"fixed.tuner"},
		Notes: []string{"fixed.coil is still open; taken as drum-choke here"},
	}
	for i := range cases {
		x := CompareCase{
			Label: fmt.Sprintf("family-%d ±1 %%", i+1), Base: i == 0,
			Drifts:  []spread.PerKelvin{{Output: "mixer.offset", Unit: "Hz", Mean: 3, LotToLot: 1, UnitToUnit: spread.Figure(2 + i)}},
			Changes: []spread.Figure{spread.Figure(24 + 6*i), 0.02},
			Yield:   0.99996, Interval: [2]spread.Figure{0.98, 0.995}, Difference: "none shown",
			Unit: 1.25, Batch: math.NaN(), Size: "5 × 3 mm disc", Rated: "-40 to 70 °C, exceeded at oven", Verdict: "even",
			Why:     "costs the same; no difference in yield that 4800 units can show",
			Reached: []spread.Figure{0.999},
		}
		for t := range c.Targets {
			x.Targets, x.Missed = append(x.Targets, 0.975), append(x.Missed, t == 0 && i > 0)
		}
		c.Cases = append(c.Cases, x)
	}
	return c
}

// The sheet is there where it is asked for, and nothing of the workbook is
// otherwise than without.
func TestCompareSheet(t *testing.T) {
	p := sample(4)
	names, without := parts(t, written(t, p))
	p.Compare = sampleCompare(3)
	more, with := parts(t, written(t, p))
	if strings.Contains(without["xl/workbook.xml"], compareSheet) || !strings.Contains(with["xl/workbook.xml"], `name="Compare"`) {
		t.Error("the sheet is where it is not asked for, or is not where it is")
	}
	if len(more) <= len(names) || slices.Contains(names, "xl/charts/chart4.xml") || !slices.Contains(more, "xl/charts/chart4.xml") {
		t.Errorf("parts %v, with the sheet %v", names, more)
	}
	first, again := written(t, p), written(t, p)
	if !bytes.Equal(first, again) {
		t.Error("another workbook each time")
	}
}

// cellsOf joins a row of a sheet.
func cellsOf(rows [][]string, starts string, from int) (int, string) {
	for i := from; i < len(rows); i++ {
		if len(rows[i]) > 0 && rows[i][0] == starts {
			return i, strings.TrimRight(strings.Join(rows[i], "|"), "|")
		}
	}
	return -1, ""
}

// Another program reads what was meant: figures as figures, the missed target
// marked, money that does not exist as a dash, a change without a limit without
// a share of it. 24 + 6 = 30 Hz is 100 % of 30 Hz.
func TestCompareRead(t *testing.T) {
	p := sample(4)
	p.Compare = sampleCompare(2)
	rows := sheets(t, saved(t, p), false)[compareSheet]
	i, first := cellsOf(rows, "family-2 ±1 %", 0)
	if want := "family-2 ±1 %|99.99%|98%|99.5%|none shown|1.25|–|97.5%|97.5%|97.5%|97.5%|97.5%|97.5%"; first != want {
		t.Errorf("%q, want %q", first, want)
	}
	i, second := cellsOf(rows, "family-2 ±1 %", i+1)
	if want := "family-2 ±1 %|97.5%|97.5%|97.5%|99.9%"; second != want {
		t.Errorf("%q, want %q", second, want)
	}
	i, third := cellsOf(rows, "family-2 ±1 %", i+1)
	if want := "family-2 ±1 %|3|1|3|30|100%|20|100%"; third != want {
		t.Errorf("%q, want %q", third, want)
	}
	_, why := cellsOf(rows, "family-2 ±1 %", i+1)
	if want := "family-2 ±1 %|5 × 3 mm disc|||-40 to 70 °C, exceeded at oven||even|costs the same; no difference in yield that 4800 units can show"; why != want {
		t.Errorf("%q, want %q", why, want)
	}
	if _, base := cellsOf(rows, "family-1 ±1 % (base)", 0); base == "" {
		t.Error("the base is not marked")
	}
	_, text := parts(t, written(t, p))
	marked := 0
	for name, s := range text {
		if strings.HasPrefix(name, "xl/styles") {
			marked = strings.Count(s, "✗")
		}
	}
	if marked == 0 {
		t.Error("a missed target is not marked")
	}
}

// A comparison of a few cases is one page, on either paper.
func TestComparePages(t *testing.T) {
	if testing.Short() {
		t.Skip("takes a few seconds")
	}
	for _, paper := range []Paper{A4, Letter} {
		p := sample(4)
		p.Paper = paper
		p.Compare = sampleCompare(5)
		if got := pages(t, saved(t, p)); got != 8+1+1 {
			t.Errorf("%s: %d pages, want 10", paper, got)
		}
	}
}
