package workbook

import (
	"bytes"
	"math"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/tolerance/spread"
)

// sampleTrade is an invented trade of eleven points, three of them within a
// coin of each other.
func sampleTrade() *Trade {
	t := &Trade{Target: "warm-up drift", Unit: "Hz", Asked: "change of mixer.offset from bench to switch on at most ±30 Hz on 98 % of the units", Limit: 30,
		Notes: []string{"Each line is the cheapest choice whose change stays closer to none on 98 % of the units than on the line above, the other targets met; the money is the whole order's, spares included."}}
	for _, x := range []struct {
		order, unit, predicted, simulated, share float64
		parts                                    string
	}{
		{200.98, 7.06, 104.118, 108.677, 0.2599, "L1, L2 powdered-iron-toroid-3 1.8 mH ±5 %; C6–C9 c0g 220 pF ±5 %; CT1 film-trimmer 4..34 pF ±10 %; C13 x7r 2.2 nF ±20 %"},
		{205.48, 7.18, 104.060, 106.099, 0.2602, "C6–C9 c0g 220 pF ±2 %"},
		{210.38, 7.46, 73.151, 79.917, 0.4980, "C6–C9 polystyrene 220 pF ±5 %"},
		{212.98, 7.46, 49.229, 54.601, 0.7654, "L1, L2 powdered-iron-toroid 1.8 mH ±5 %; C6–C9 c0g 220 pF ±5 %"},
		{217.48, 7.58, 49.134, 53.657, 0.7684, "C6–C9 c0g 220 pF ±2 %"},
		{222.05, 7.756, 49.134, 52.543, 0.7703, "C6–C9 c0g 180 pF ±5 % ∥ polystyrene 39 pF ±2.5 %, mixed lots"},
		{222.33, 7.868, 40.352, 41.343, 0.8755, "C6–C9 polypropylene 220 pF ±5 %"},
		{222.38, 7.86, 24.234, 27.421, 0.98761, "C6–C9 polystyrene 220 pF ±5 %"},
		{227.77, 8.056, 24.217, 26.568, 0.9901, "C6–C9 polystyrene 220 pF ±2.5 %"},
		{240.77, 8.556, 24.217, 26.067, 0.99996, "C6–C9 polystyrene 220 pF ±2.5 %, mixed lots"},
		{254.63, 9.06, 24.212, 25.978, 1, "C6–C9 polystyrene 220 pF ±1 %"},
	} {
		t.Points = append(t.Points, TradePoint{x.order, x.unit, spread.Figure(x.predicted), spread.Figure(x.simulated), spread.Figure(x.share), x.share >= 0.98, x.parts})
	}
	return t
}

// The sheet is there where it is asked for, between the comparison and the
// basis, and is the same each time.
func TestTradeSheet(t *testing.T) {
	p := sample(4)
	_, without := parts(t, written(t, p))
	p.Trade = sampleTrade()
	_, with := parts(t, written(t, p))
	if strings.Contains(without["xl/workbook.xml"], tradeSheet) || without["xl/charts/chart3.xml"] != "" {
		t.Error("the sheet is there without being asked for")
	}
	if !strings.Contains(with["xl/workbook.xml"], `name="Trade"`) || with["xl/charts/chart3.xml"] == "" {
		t.Error("the sheet or its chart is missing")
	}
	for _, sheet := range []string{"2", "3", "4", "5", "6", "7"} { // all before it
		if name := "xl/worksheets/sheet" + sheet + ".xml"; without[name] == "" || len(without[name]) != len(with[name]) {
			t.Errorf("%s is another one", name)
		}
	}
	if !bytes.Equal(written(t, p), written(t, p)) {
		t.Error("another workbook each time")
	}
	p.Compare = sampleCompare(2)
	f := reopen(t, saved(t, p))
	want := []string{summarySheet, buySheet, stagesSheet, trimsSheet, testSheet, tolerancesSheet, driftSheet, compareSheet, tradeSheet, basisSheet, carrierSheet}
	if d := cmp.Diff(want, f.GetSheetList()); d != "" {
		t.Error(d)
	}
}

// Another program reads what was meant. Figures up to 108.7 Hz are shown to a
// tenth: 108.7/200 = 0.54, and the power of ten below is 0.1. Beside the table
// stand the corners of the steps: money goes up to the next point's at the half
// width had so far.
func TestTradeRead(t *testing.T) {
	p := sample(4)
	p.Trade = sampleTrade()
	rows := sheets(t, saved(t, p), false)[tradeSheet]
	first := slices.IndexFunc(rows, func(r []string) bool { return r[0] == "200.98" })
	if first < 0 {
		t.Fatal("no row of the cheapest")
	}
	for i, want := range map[int][]string{
		5:  {"222.05", "7.756", "49.1", "52.5", "77.03%", "MISSED", "C6–C9 c0g 180 pF ±5 % ∥ polystyrene 39 pF ±2.5 %, mixed lots"},
		7:  {"222.38", "7.86", "24.2", "27.4", "98.761%", "met", "C6–C9 polystyrene 220 pF ±5 %"},
		9:  {"240.77", "8.556", "24.2", "26.1", "99.99%", "met", "C6–C9 polystyrene 220 pF ±2.5 %, mixed lots"}, // never 100 %
		10: {"254.63", "9.06", "24.2", "26", "100%", "met", "C6–C9 polystyrene 220 pF ±1 %"},
	} {
		if d := cmp.Diff(want, rows[first+i][:tradeWide]); d != "" {
			t.Errorf("row %d (-want +got):\n%s", i, d)
		}
	}
	want := [][]string{{"200.98", "108.7", "30"}, {"205.48", "108.7", "30"}, {"205.48", "106.1", "30"}, {"210.38", "106.1", "30"}, {"210.38", "79.9", "30"}}
	var got [][]string
	for _, r := range rows[first : first+len(want)] {
		got = append(got, r[tradeSteps-1:tradeSteps+2])
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("steps (-want +got):\n%s", d)
	}
	if last := rows[first+2*11-2]; last[tradeSteps-1] != "254.63" || last[0] != "" { // 11 points have 21 corners
		t.Errorf("the last step is %q", last)
	}
}

// The chart draws all corners, and the limit only where there is one. The
// first point stands in row 5: title, subtitle, gap, headings.
func TestTradeChart(t *testing.T) {
	p := sample(4)
	p.Trade = sampleTrade()
	_, text := parts(t, written(t, p))
	chart := text["xl/charts/chart3.xml"]
	for _, want := range []string{"'Trade'!$I$5:$I$25", "'Trade'!$J$5:$J$25", "'Trade'!$K$5:$K$25", "'Trade'!$A$5:$A$15", "'Trade'!$D$5:$D$15", "'Trade'!$C$5:$C$15"} {
		if !strings.Contains(strings.ReplaceAll(chart, "&#39;", "'"), want) {
			t.Errorf("the chart does not draw %s", want)
		}
	}
	p.Trade.Limit = math.NaN()
	_, text = parts(t, written(t, p))
	if got := strings.Count(text["xl/charts/chart3.xml"], "<ser>"); got != 3 {
		t.Errorf("%d series without a limit, want 3", got)
	}
}

// Half widths are shown in the unit that people use for their size, to a two
// hundredth of the largest: 2500 Hz is 2.5 kHz, and 2500/200 = 12.5 to 0.01 kHz.
func TestTradeScale(t *testing.T) {
	tr := &Trade{Unit: "Hz", Limit: 1800, Points: []TradePoint{{Predicted: 2400, Simulated: 2500}, {Predicted: spread.Figure(math.Inf(1)), Simulated: spread.Figure(math.NaN())}}}
	if got := tr.scale(); got.symbol != "kHz" || got.by != 1000 || got.decimals != 2 {
		t.Errorf("%+v", got)
	}
}

// A trade is one page on either paper, and one without a point says so.
func TestTradePages(t *testing.T) {
	p := sample(4)
	p.Trade = &Trade{Notes: []string{"no choice meets it"}}
	f := reopen(t, saved(t, p))
	if found, err := f.SearchSheet(tradeSheet, "There is no choice to trade between."); len(found) != 1 || err != nil {
		t.Errorf("found %v, %v", found, err)
	}
	if testing.Short() {
		t.Skip("rendering takes a few seconds")
	}
	for _, paper := range []Paper{A4, Letter} {
		p.Paper, p.Trade = paper, sampleTrade()
		if got := pages(t, saved(t, p)); got != 8+1+1 {
			t.Errorf("%s: %d pages, want 10", paper, got)
		}
	}
}
