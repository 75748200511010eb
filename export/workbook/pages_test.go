package workbook

import (
	"fmt"
	"regexp"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// Every sheet is as wide as one page, drifts have a page each, and the test
// sheet has ten units to a page: for the sample that is summary, buying,
// stages, trims, tolerances, two drifts and basis, and ⌈units/10⌉.
func TestPages(t *testing.T) {
	for _, units := range []int{1, 24, 60, 200} {
		for _, paper := range []Paper{A4, Letter} {
			if testing.Short() && (units != 24 || paper != A4) {
				continue
			}
			t.Run(fmt.Sprint(units, paper), func(t *testing.T) {
				p := sample(units)
				p.Paper = paper
				want := 8 + (units+9)/10
				if got := pages(t, saved(t, p)); got != want {
					t.Errorf("%d pages, want %d", got, want)
				}
			})
		}
	}
}

// A bench list of 60 rows runs over several pages, each with its headings.
func TestPagesLongBench(t *testing.T) {
	if testing.Short() {
		t.Skip("takes a few seconds")
	}
	p := long(sample(20), 60)
	got := pages(t, saved(t, p))
	if !(got >= 8+2*2 && got <= 8+2*4) {
		t.Errorf("%d pages, want 2 to 4 down and 2 across for the test sheet, and 8", got)
	}
}

// Breaks stand before units 11, 21 and 31: columns V, AF and AP, whose left
// neighbours are the 21st, 31st and 41st.
func TestPageBreaks(t *testing.T) {
	_, text := parts(t, written(t, sample(31)))
	var got []string
	for _, m := range regexp.MustCompile(`<brk id="(\d+)"`).FindAllStringSubmatch(text["xl/worksheets/sheet5.xml"], -1) {
		got = append(got, m[1])
	}
	if d := cmp.Diff([]string{"21", "31", "41"}, got); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
}
