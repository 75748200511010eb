package workbook

import (
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// The alternates stand below the total, before what nobody sells, with money
// as a figure and a dash where nothing else is to be had.
func TestAlternatesRead(t *testing.T) {
	p := sample(24)
	rows := sheets(t, saved(t, p), false)[buySheet]
	at := func(text string) int {
		return slices.IndexFunc(rows, func(r []string) bool { return strings.HasPrefix(r[0], text) })
	}
	title := at("If a line is out of stock")
	if total, missing := at("Total for"), at("Not in the price book"); !(total < title && title < missing) {
		t.Fatalf("rows %d, %d, %d: total, alternates, not offered", total, title, missing)
	}
	var got []string
	for _, r := range rows[title+1 : title+5] {
		got = append(got, strings.TrimRight(strings.Join(r, "|"), "|"))
	}
	want := []string{
		"References|Out of stock|Take instead||||Order (EUR)|Changes then",
		"C1–C4|polystyrene 220 pF ±2.5 %|c0g 220 pF ±2 % for C1–C4; polypropylene 100 nF ±5 % for C5||||31.8|warm-up drift within 38.4 Hz instead of 24.2 Hz, room drift within 62 Hz instead of 55 Hz",
		"L1, L2|drum-choke 1.80 mH ±5 %|none was found that meets every target||||–",
		"Each was put to the same simulation as the choice itself, of 24000 units, and meets every target.",
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
}

// Money is shown with its sign: what is dearer with a plus, what is cheaper with a minus.
func TestAlternateSigns(t *testing.T) {
	p := sample(24)
	p.Picks.Alternates = []Alternate{{Refs: "A1", More: 31.8}, {Refs: "A2", More: -0.5}}
	f := reopen(t, saved(t, p))
	found, err := f.SearchSheet(buySheet, "A1")
	if len(found) != 1 || err != nil {
		t.Fatal(found, err)
	}
	row, err := strconv.Atoi(strings.TrimPrefix(found[0], "A"))
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for i := range 2 {
		text, err := f.GetCellValue(buySheet, at(7, row+i))
		if err != nil {
			t.Fatal(err)
		}
		got = append(got, strings.TrimSpace(text))
	}
	if d := cmp.Diff([]string{"+31.80", "−0.50"}, got); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
}

// Without alternates nothing is said of them.
func TestNoAlternates(t *testing.T) {
	p := sample(24)
	p.Picks.Alternates = nil
	f := reopen(t, saved(t, p))
	if found, _ := f.SearchSheet(buySheet, "If a line is out of stock"); len(found) > 0 {
		t.Error("a heading over nothing")
	}
}

// The first page has both pieces of a pair, how they are joined, the proof,
// what binds, and where the search and the simulation differ, each once.
func TestPicksOnSummary(t *testing.T) {
	p := sample(24)
	f := reopen(t, saved(t, p))
	for _, want := range []string{"c0g 180 pF ±5 % ∥ polystyrene 39 pF ±2.5 %, mixed lots", p.Picks.Proof, p.Picks.Binding, p.Picks.Checks[0], "Proof", "What binds", "First order"} {
		if found, err := f.SearchSheet(summarySheet, want); len(found) != 1 || err != nil {
			t.Errorf("%q stands %d times on the first page, want once", want, len(found))
		}
	}
	p.Picks.Binding, p.Picks.Checks = "", nil
	f = reopen(t, saved(t, p))
	for _, gone := range []string{"What binds", "First order"} {
		if found, _ := f.SearchSheet(summarySheet, gone); len(found) > 0 {
			t.Errorf("%q over nothing", gone)
		}
	}
}
