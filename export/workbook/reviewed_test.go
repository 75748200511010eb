package workbook

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// sampleReviewed is an invented batch of three: the first good, the second with
// a base too high, an oscillator off the scale and a level that proves nothing,
// the third not read. Good units read evenly over the middle half of each window.
func sampleReviewed() Reviewed {
	none := spread.Figure(math.NaN())
	r := Reviewed{
		Title: "Lantern tone box", Digest: "7f3a19c2d4e5b607", Version: "0.1.0", From: "filled.xlsx",
		Summary: []string{"2 of 3 units read; 1 not as they should be, or not read to the end."},
		Units: []ReviewedUnit{
			{Unit: 1, Verdict: "inside", Word: "good", Grade: GradeGood},
			{Unit: 2, Verdict: "outside", Word: "outside", Grade: GradeFaulted, Outside: []string{"mixer.base 0.710 V (above 0.611 to 0.707)", "fixed.frequency 290 kHz"},
				Suspects: []string{"91 % R5 ten times too large", "7 % R6 missing or open"}, Next: []string{"measure R5 out of circuit"}},
			{Unit: 3, Verdict: "not read"},
		},
		Turns: slices.Clone(sampleTurns), Readings: sampleReadings(),
		Filled: bench.Filled{Points: []string{"rails.voltage", "fixed.frequency", "mixer.base", "output.level"}, Units: []bench.FilledUnit{
			{Unit: 1, Values: []spread.Figure{12, 332000, 0.66, 0.9}}, {Unit: 2, Values: []spread.Figure{12.001, 250000, 0.71, 0.8}},
		}},
		Turned: bench.Filled{Points: []string{sampleTurns[0].Turn}, Units: []bench.FilledUnit{{Unit: 1, Values: []spread.Figure{spread.Figure(sampleTurns[0].To)}}}},
		Batch:  []string{"Averages are over 2 units."}, Lots: []string{"The lot of L1, L2 (value) is off its centre by +2.9 %."}, Rest: []string{"The unit not read yet meets every target with 98.8 %."},
		Good: map[string][]float64{},
	}
	for _, x := range r.Readings {
		r.Points = append(r.Points, ReviewedPoint{Mean: none, Expected: x.Nominal, Shift: none, Ratio: none, Slope: none})
		for i := range 2000 {
			part := 0.25 + 0.5*(float64(i)+0.5)/2000
			r.Good[x.Point] = append(r.Good[x.Point], float64(x.Expected.Low)+part*float64(x.Expected.High-x.Expected.Low))
		}
	}
	// Equations may give no figure for some units; those are not drawn.
	r.Good["rails.voltage"] = append(r.Good["rails.voltage"], math.NaN(), math.Inf(1))
	r.Points[0] = ReviewedPoint{Units: 2, Mean: 12.0005, Expected: 12, Shift: -0.04, Ratio: 1.25, Slope: 0.001, Remark: "1.3 times as far apart as expected"}
	return r
}

func reviewedBytes(t *testing.T, r Reviewed) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := WriteReviewed(&b, r); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func openReviewed(t *testing.T, r Reviewed) *excelize.File {
	t.Helper()
	f, err := excelize.OpenReader(bytes.NewReader(reviewedBytes(t, r)))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { f.Close() })
	return f
}

// rowWith is the first row of a sheet whose cell in a column says s; from 1.
func rowWith(t *testing.T, f *excelize.File, sheet string, column int, s string) int {
	t.Helper()
	rows, err := f.GetRows(sheet)
	if err != nil {
		t.Fatal(err)
	}
	for i, r := range rows {
		if len(r) >= column && r[column-1] == s {
			return i + 1
		}
	}
	t.Fatalf("%s has no %q in column %d", sheet, s, column)
	return 0
}

func rowOf(t *testing.T, f *excelize.File, sheet string, row, columns int) []string {
	t.Helper()
	var list []string
	for c := range columns {
		list = append(list, cell(t, f, sheet, at(c+1, row)))
	}
	return list
}

func TestReviewedUnits(t *testing.T) {
	f := openReviewed(t, sampleReviewed())
	if d := cmp.Diff([]string{reviewSheet, readingsSheet, batchSheet, chartsSheet, figuresSheet}, f.GetSheetList()); d != "" {
		t.Error(d)
	}
	first := rowWith(t, f, reviewSheet, 1, "1")
	want := [][]string{
		{"1", "✓ inside", "", "", ""},
		{"2", "✗ outside", "mixer.base 0.710 V (above 0.611 to 0.707); fixed.frequency 290 kHz", "91 % R5 ten times too large; 7 % R6 missing or open", "measure R5 out of circuit"},
		{"3", "not read", "", "", ""},
	}
	for i, w := range want {
		if d := cmp.Diff(w, rowOf(t, f, reviewSheet, first+i, 5)); d != "" {
			t.Errorf("unit %d: %s", i+1, d)
		}
	}
}

// Figures stand as they were read, in the row's unit; the mark is in the
// number's format, so that a printer without colours shows it, too. The windows
// are those of the test sheet.
func TestReviewedReadings(t *testing.T) {
	f := openReviewed(t, sampleReviewed())
	for _, c := range []struct{ point, one, two, mark, out string }{
		{"mixer.base", "660", "710", "▲", "1"}, {"fixed.frequency", "332", "250", "▼", "1"},
		{"output.level", "0.9", "0.8", "▽", "1"}, {"rails.voltage", "12", "12.001", "", "0"},
	} {
		row := rowWith(t, f, readingsSheet, 2, c.point)
		got := rowOf(t, f, readingsSheet, row, reviewedFixed+3)
		if d := cmp.Diff([]string{c.out, c.one, c.two, ""}, got[reviewedFixed-1:]); d != "" {
			t.Errorf("%s: %s", c.point, d)
		}
		id, err := f.GetCellStyle(readingsSheet, at(reviewedFixed+2, row))
		if err != nil {
			t.Fatal(err)
		}
		style, err := f.GetStyle(id)
		if err != nil || style.CustomNumFmt == nil {
			t.Fatalf("%s: %v", c.point, err)
		}
		marked := ""
		for _, m := range []string{"▼", "▲", "▽", "△"} {
			if strings.Contains(*style.CustomNumFmt, m) {
				marked = m
			}
		}
		if marked != c.mark {
			t.Errorf("%s of unit 2 is marked %q, want %q", c.point, marked, c.mark)
		}
		i := slices.IndexFunc(sampleReadings(), func(r bench.Reading) bool { return r.Point == c.point })
		shown := readingRow(sampleReadings()[i])
		if low, err := strconv.ParseFloat(got[3], 64); err != nil || low != shown.low {
			t.Errorf("%s shows at least %s, the test sheet %v", c.point, got[3], shown.low)
		}
	}
	turn := rowWith(t, f, readingsSheet, 2, "turn "+sampleTurns[0].Turn)
	if got := cell(t, f, readingsSheet, at(reviewedFixed+1, turn)); got == "" {
		t.Error("where the trim was left is missing")
	}
}

func TestReviewedBatch(t *testing.T) {
	f := openReviewed(t, sampleReviewed())
	row := rowWith(t, f, batchSheet, 1, "rails.voltage")
	if d := cmp.Diff([]string{"rails.voltage", "2", "V", "12.001", "12", "0", "1.25", "1", "◆ 1.3 times as far apart as expected"}, rowOf(t, f, batchSheet, row, 9)); d != "" {
		t.Error(d) // 12.0005 to a digit more than the sheet's two; −0.04 to a tenth
	}
	if d := cmp.Diff("–", cell(t, f, batchSheet, at(4, row+1))); d != "" {
		t.Error("a mean that is not known: " + d)
	}
	for _, s := range append(sampleReviewed().Lots, sampleReviewed().Rest...) {
		if found, err := f.SearchSheet(batchSheet, s); len(found) != 1 || err != nil {
			t.Errorf("%q is said %d times", s, len(found))
		}
	}
}

// series reads one series' figures of a point.
func figuresOf(t *testing.T, f *excelize.File, point, series string) (list []mark) {
	t.Helper()
	rows, err := f.GetRows(figuresSheet, excelize.Options{RawCellValue: true})
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range rows {
		if len(r) == 4 && r[0] == point && r[1] == series {
			x, errX := strconv.ParseFloat(r[2], 64)
			y, errY := strconv.ParseFloat(r[3], 64)
			if errX != nil || errY != nil {
				t.Fatalf("%s %s: %v", point, series, r)
			}
			list = append(list, mark{x, y})
		}
	}
	return list
}

// The expected counts of all bins are as many as units were read, since every
// good unit is on the axis; they are about evenly many where good units read
// evenly. Two readings of one bin stand upon each other. What is off the scale
// stands at its edge and is named.
func TestDistributions(t *testing.T) {
	file := reviewedBytes(t, sampleReviewed())
	f := openReviewed(t, sampleReviewed())
	var sum float64
	for _, m := range figuresOf(t, f, "rails.voltage", "expected") {
		sum += m.y
		if inner := m.x > 11.8 && m.x < 12.2; inner && math.Abs(m.y/0.05-expectedPerVolt*binWidth(t, f)/0.05) > 0.2 {
			t.Errorf("%.3f units are expected about %.2f V", m.y, m.x)
		}
	}
	if math.Abs(sum-2) > 1e-3 { // figures are written to three digits a bin
		t.Errorf("%v units are expected over all bins, 2 were read", sum)
	}
	if d := cmp.Diff([]mark{{12, 0.5}, {12.001, 1.5}}, figuresOf(t, f, "rails.voltage", "inside"), cmp.AllowUnexported(mark{})); d != "" {
		t.Error(d)
	}
	if d := cmp.Diff([]mark{{710, 0.5}}, figuresOf(t, f, "mixer.base", "outside"), cmp.AllowUnexported(mark{})); d != "" {
		t.Error(d)
	}
	off := figuresOf(t, f, "fixed.frequency", "outside")
	low := figuresOf(t, f, "fixed.frequency", "shows at least")
	if len(off) != 1 || len(low) != 2 || !(off[0].x > 250 && off[0].x < low[0].x) {
		t.Errorf("the reading off the scale stands at %v, the window begins at %v", off, low)
	}
	if level := figuresOf(t, f, "output.level", "proves at least"); len(level) != 2 || level[0].x != 0.83 {
		t.Errorf("what proves the target begins at %v", level)
	}
	_, text := parts(t, file)
	charts := ""
	for name, s := range text {
		if strings.HasPrefix(name, "xl/charts/chart") {
			charts += s
		}
	}
	for _, want := range []string{"off the scale: unit 2 at 250.00", "mixer.base, mV", "Chart figures"} {
		if !strings.Contains(charts, want) {
			t.Errorf("no chart says %q", want)
		}
	}
	if strings.Contains(charts, "mixer.collector") {
		t.Error("a chart of what was not read")
	}
	if visible, err := f.GetSheetVisible(figuresSheet); visible || err != nil {
		t.Error("the figures of the charts are not hidden")
	}
}

// expectedPerVolt is the density of 2 units evenly over the middle half of
// 11.5137 V to 12.4871 V.
const expectedPerVolt = 2 / ((12.4871 - 11.5137) / 2)

func binWidth(t *testing.T, f *excelize.File) float64 {
	m := figuresOf(t, f, "rails.voltage", "expected")
	return m[1].x - m[0].x
}

// The same review gives the same bytes, and texts and figures from anywhere
// leave a file that programs can read and that has no formula at all.
func TestReviewedHostile(t *testing.T) {
	first := reviewedBytes(t, sampleReviewed())
	for range 8 { // map orders differ from run to run
		if !bytes.Equal(first, reviewedBytes(t, sampleReviewed())) {
			t.Fatal("the same review gave other bytes")
		}
	}
	for _, c := range []struct{ name, s string }{
		{"formula", `=cmd|'/c calc'!A1`}, {"quotes", `'"'; "")&A1`}, {"controls", "\x00\x01\x1b\x7f\x9b"}, {"markup", `</a:t></a:r><f>1+1</f>`},
		{"broken", "\xff\xfe\xc0\x80"}, {"long", strings.Repeat("a ", 40000)}, {"print codes", "&P &N &\"Arial\"&72 &&"}, {"empty", ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := sampleReviewed()
			poison(reflect.ValueOf(&r).Elem(), c.s)
			r.Good = map[string][]float64{c.s: {1, 2, math.NaN(), math.Inf(1)}}
			_, text := parts(t, reviewedBytes(t, r))
			for name, s := range text {
				if err := wellFormed(s); err != nil && strings.HasSuffix(name, ".xml") {
					t.Errorf("%s: %v", name, err)
				}
				if strings.HasPrefix(name, "xl/worksheets/") && strings.Contains(s, "<f>") {
					t.Errorf("%s has a formula", name)
				}
			}
		})
	}
}

// Figures that do not exist become blanks or dashes.
func TestReviewedWithoutFigures(t *testing.T) {
	r := sampleReviewed()
	spoil(reflect.ValueOf(&r).Elem())
	for _, r := range []Reviewed{r, {}} {
		f := openReviewed(t, r)
		for _, sheet := range f.GetSheetList() {
			rows, err := f.GetRows(sheet)
			if text := strings.Join(slices.Concat(rows...), "|"); err != nil || strings.Contains(text, "NaN") || strings.Contains(text, "Inf") {
				t.Errorf("%s has a figure that is none (%v)", sheet, err)
			}
		}
	}
	same := sampleReviewed()
	same.Good["rails.voltage"] = []float64{12, 12, 12}
	same.Readings[0].Expected = limits(12, 12)
	same.Filled.Units = same.Filled.Units[:1]
	if m := figuresOf(t, openReviewed(t, same), "rails.voltage", "inside"); len(m) != 1 || m[0].x != 12 {
		t.Errorf("one reading where all are alike stands at %v", m)
	}
	same.Filled.Units[0].Values[0] = math.MaxFloat64
	same.Readings[0].Unit, same.Readings[0].Nominal, same.Readings[0].Expected = "V", 0.001, limits(0.0009, 0.0011)
	f := openReviewed(t, same)
	shown := cell(t, f, readingsSheet, at(reviewedFixed+1, rowWith(t, f, readingsSheet, 2, "rails.voltage")))
	if v, err := strconv.ParseFloat(shown, 64); err != nil || !(v > 1e308) || math.IsInf(v, 0) {
		t.Error("a reading too large for its unit is shown as " + shown)
	}
}

// A review of 24 units prints on five pages: the units, two of readings, the
// batch, and the charts of four points on one. Hidden figures are not printed.
func TestReviewedPages(t *testing.T) {
	if testing.Short() {
		t.Skip("pages on both papers")
	}
	for _, paper := range []Paper{A4, Letter} {
		r := sampleReviewed()
		r.Paper = paper
		for n := 4; n <= 24; n++ {
			r.Units = append(r.Units, ReviewedUnit{Unit: n, Verdict: "not read"})
		}
		path := filepath.Join(t.TempDir(), "reviewed.xlsx")
		if err := os.WriteFile(path, reviewedBytes(t, r), 0o600); err != nil {
			t.Fatal(err)
		}
		if got := pages(t, path); got != 5 {
			t.Errorf("%s: %d pages, want 5", paper, got)
		}
	}
}
