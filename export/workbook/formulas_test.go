package workbook

import (
	"strconv"
	"strings"
	"testing"

	"batchwright/bom/order"

	"github.com/google/go-cmp/cmp"
)

// Results stored with the formulas are what LibreOffice works out for itself,
// and what the plan says.
func TestStoredResults(t *testing.T) {
	if testing.Short() {
		t.Skip("every sheet worked out by another program")
	}
	p := sample(24)
	path := saved(t, p)
	stored, worked := sheets(t, path, false), sheets(t, path, true)
	if d := cmp.Diff(stored, worked); d != "" {
		t.Errorf("stored and recalculated differ (-stored +recalculated):\n%s", d)
	}
	for _, l := range p.Order.Lines {
		row := find(t, worked[buySheet], order.Runs(l.Refs), l.Text)
		got := numbers(t, row[5:12])
		want := []float64{float64(l.PerUnit), float64(l.Needed), float64(l.Spares), float64(l.Multiple), float64(l.Buy), l.Each.Float(), l.Price.Float()}
		if d := cmp.Diff(want, got); d != "" {
			t.Errorf("%v (-plan +sheet):\n%s", l.Refs, d)
		}
	}
	total := find(t, worked[buySheet], "Total for 24 units", "")
	if got := numbers(t, total[11:])[0]; got != p.Order.Total.Float() {
		t.Errorf("total %v, want %v", got, p.Order.Total)
	}
	for sheet, rows := range worked {
		for r, row := range rows {
			for c, v := range row {
				if strings.HasPrefix(v, "#") || strings.HasPrefix(v, "Err:") {
					t.Errorf("%s %s shows %s", sheet, at(c+1, r+1), v)
				}
			}
		}
	}
}

func numbers(t *testing.T, texts []string) (all []float64) {
	t.Helper()
	for _, s := range texts {
		v, err := strconv.ParseFloat(s, 64)
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, v)
	}
	return all
}

func find(t *testing.T, rows [][]string, first, third string) []string {
	t.Helper()
	for _, r := range rows {
		if len(r) > 2 && r[0] == first && r[2] == third {
			return r
		}
	}
	t.Fatalf("no row %q, %q", first, third)
	return nil
}

// Verdicts and counts on a filled sheet, worked out by LibreOffice, against
// the same rules written down a second time here.
func TestVerdicts(t *testing.T) {
	p := sample(12)
	path := saved(t, p)
	typed := map[int]map[int]any{}
	reading := func(r benchRow, u int) any {
		v := typical(r, u)
		switch {
		case u == 2 && r.step == 5: // above what a good unit shows
			v = r.high + 0.1
		case u == 3 && r.step == 1: // below
			v = r.low - 0.01
		case u == 4 && r.step == 14: // inside expected, above accept
			v = 1.05
		case u == 5 && r.step == 14:
			v = 0.8
		case u == 6 && r.step == 8:
			v = "O.L"
		case u == 7 && r.step > 5: // not finished
			v = nil
		case u == 8 && r.step == 6: // exactly on the limit is inside
			v = r.low
		case u == 8 && r.step == 10:
			v = r.high
		case u == 9: // both wrong: the graver verdict
			v = map[bool]any{true: 9e6, false: v}[r.step == 2]
			if r.step == 14 {
				v = 1.05
			}
		case u == 10 && r.step == 12: // a row without limits never matters
			v = 77.0
		case u >= 11:
			v = nil
		}
		if typed[r.step] == nil {
			typed[r.step] = map[int]any{}
		}
		typed[r.step][u] = v
		return v
	}
	fill(t, path, p, reading)
	shown := sheets(t, path, true)
	want := []string{good, check, check, misses, misses, check, begun, good, check, good, untouched, untouched}
	if got := shown[testSheet][verdictRow-1][fixedCols : fixedCols+12]; cmp.Diff(want, got) != "" {
		t.Errorf("verdicts (-want +got):\n%s", cmp.Diff(want, got))
	}
	at := places(p)
	for i, r := range p.benchRows() {
		n := 0
		for _, v := range typed[r.step] {
			if outside(r, v) {
				n++
			}
		}
		want := strconv.Itoa(n) // a zero is not shown
		if got := shown[testSheet][at[i]-1][fixedCols-1]; got != want {
			t.Errorf("step %d: %q outside, want %q", r.step, got, want)
		}
	}
	var tally []string
	for i, row := range shown[summarySheet] {
		if row[0] == "Good" {
			tally = shown[summarySheet][i+1][:5]
		}
	}
	if d := cmp.Diff([]string{"3", "2", "4", "1", "2"}, tally); d != "" {
		t.Errorf("good, misses, check, begun, not begun (-want +got):\n%s", d)
	}
}

func outside(r benchRow, v any) bool {
	x, ok := v.(float64)
	return v != nil && (!ok || x < r.low || x > r.high || x < r.acceptLow || x > r.acceptHigh)
}
