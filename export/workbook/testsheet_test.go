package workbook

import (
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"
)

// saved writes a plan to a file of its own.
func saved(t *testing.T, p Plan) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "plan.xlsx")
	if err := Save(path, p); err != nil {
		t.Fatal(err)
	}
	return path
}

func reopen(t *testing.T, path string) *excelize.File {
	t.Helper()
	f, err := excelize.OpenFile(path)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { f.Close() })
	return f
}

func cell(t *testing.T, f *excelize.File, sheet, name string) string {
	t.Helper()
	v, err := f.GetCellValue(sheet, name, excelize.Options{RawCellValue: true})
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// The test sheet of the sample, columns A to K. Expected limits go outward,
// accept limits inward: 316250.3 Hz with U = 6.64 Hz is shown to 0.01 kHz
// (narrowest window 33.6 kHz, a thousandth of it 33.6 Hz, coarser than
// U/10 = 0.7 Hz), so 316.25 below and 349871.9 Hz is 349.88 above. The dmm's U of
// 2 mV at the collector leaves no digit below 1 mV: 0.2 mV is a tenth of it.
func TestTestSheetRows(t *testing.T) {
	p := sample(3)
	f := reopen(t, saved(t, p))
	want := [][]string{
		{"Condition: bench. Set up: 23 °C, supply 12 V, hand away, warmed up, 50 % relative humidity", "", "", "", "", "", "", "", "", "", ""},
		{"1", "rails.voltage", "output of U2, to ground", "dc voltage, dmm", "V", "12", "11.51", "12.49", "", "", ""},
		{"2", "fixed.frequency", "emitter of Q2, through the probe, to ground", "frequency, counter", "kHz", "332.12", "316.25", "349.88", "", "", ""},
		{"3", "mixer.base", "base of Q1, to ground", "dc voltage, dmm", "mV", "659", "612", "707", "", "", ""},
		{"4", "turn mixer.bias", "turn RV1 until right; collector of Q1, to ground", "dc voltage, dmm", "mV", "0", "-100", "100", "", "", ""},
		{"5", "mixer.collector", "collector of Q1, to ground", "dc voltage, dmm", "mV", "0", "-119", "119", "", "", ""},
		{"6", "moving.frequency", "emitter of Q3, through the probe, to ground", "frequency, counter", "kHz", "331.7", "315.8", "349.42", "", "", ""},
		{"7", "turn fixed.tuner", "turn CT1 until right; output of the mixer, C12 and ground", "frequency, counter", "Hz", "0", "-2", "2", "", "", ""},
		{"8", "mixer.offset", "output of the mixer, C12 and ground", "frequency, counter", "Hz", "0", "-5.2", "5.2", "", "", ""},
		{"9", "turn amplifier.gain", "turn RV2 until right; pin 6 of U1, to ground", "peak voltage, scope", "V", "1.5", "1.45", "1.55", "", "", ""},
		{"10", "amplifier.output", "pin 6 of U1, to ground", "peak voltage, scope", "V", "1.5", "1.38", "1.62", "", "", ""},
		{"11", "detector.level", "across R9, the side that is not ground", "dc voltage, dmm", "mV", "41", "31", "54", "", "", ""},
		{"12", "detector.corner", "not measured directly", "frequency, scope", "Hz", "", "", "", "", "", ""},
		{"Condition: hand near. Set up: hand 1.5 pF", "", "", "", "", "", "", "", "", "", ""},
		{"13", "mixer.beat", "output of the mixer, C12 and ground", "frequency, counter", "kHz", "2.212", "1.41", "3.12", "1.001", "3.999", ""},
		{"14", "output.level", "output jack, tip to sleeve", "peak voltage, scope", "V", "0.912", "0.741", "1.083", "0.83", "1.02", ""},
	}
	var got [][]string
	for i := range want {
		var row []string
		for c := 1; c <= fixedCols; c++ {
			v := cell(t, f, testSheet, at(c, verdictRow+1+i))
			if c > 1 && v == row[0] {
				v = "" // excelize gives a joined cell's text for all of it
			}
			row = append(row, v)
		}
		got = append(got, row)
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("test sheet (-want +got):\n%s", d)
	}
	if why := cell(t, f, testSheet, at(1, verdictRow+len(want)+2)); why != "Step 12: the detector has no output when the beat is at zero" {
		t.Errorf("the blank row is explained by %q", why)
	}
}

// Readings, serial numbers and the places at the top can be typed in; nothing
// else can, and no password stands in the way.
func TestProtection(t *testing.T) {
	p := sample(3)
	f := reopen(t, saved(t, p))
	open := map[string]bool{"C4": true, "G4": true, "C5": true, "G5": true}
	for u := 1; u <= 3; u++ {
		open[at(fixedCols+u, serialRow)] = true
		for _, r := range places(p) {
			open[at(fixedCols+u, r)] = true
		}
	}
	last := places(p)[len(places(p))-1]
	for r := 1; r <= last; r++ {
		for c := 1; c <= fixedCols+3; c++ {
			if merged := c == 4 && (r == 4 || r == 5) || c > 7 && c < 11 && (r == 4 || r == 5); merged {
				continue // the rest of a place that is one cell to the eye
			}
			if got := unlocked(t, f, testSheet, at(c, r)); got != open[at(c, r)] {
				t.Errorf("%s: can be typed in %v, want %v", at(c, r), got, !got)
			}
		}
	}
	for _, sheet := range []string{summarySheet, buySheet, stagesSheet, trimsSheet, testSheet, tolerancesSheet, driftSheet, basisSheet} {
		o, err := f.GetSheetProtection(sheet)
		if err != nil {
			t.Fatalf("%s: %v", sheet, err)
		}
		if o.Password != "" || o.AlgorithmName != "" || !o.SelectUnlockedCells || !o.SelectLockedCells {
			t.Errorf("%s: protection %+v", sheet, o)
		}
	}
}

func unlocked(t *testing.T, f *excelize.File, sheet, name string) bool {
	t.Helper()
	id, err := f.GetCellStyle(sheet, name)
	if err != nil {
		t.Fatal(err)
	}
	s, err := f.GetStyle(id)
	if err != nil {
		t.Fatal(err)
	}
	return s.Protection != nil && !s.Protection.Locked
}

func TestValidationAndMarks(t *testing.T) {
	f := reopen(t, saved(t, sample(24)))
	rules, err := f.GetDataValidations(testSheet)
	if err != nil {
		t.Fatal(err)
	}
	if len(rules) != 1 || rules[0].Type != "decimal" || rules[0].Sqref != "L11:AI26" || *rules[0].ErrorStyle != "warning" || len(*rules[0].ErrorTitle) > 32 || len(*rules[0].Error) > 255 {
		t.Errorf("validation: %+v", rules)
	}
	marks, err := f.GetConditionalFormats(testSheet)
	if err != nil {
		t.Fatal(err)
	}
	var formulas []string
	for _, r := range marks["L11:AI26"] {
		formulas = append(formulas, r.Criteria)
		if !r.StopIfTrue {
			t.Errorf("%s does not stop", r.Criteria)
		}
	}
	want := []string{"ISTEXT(L11)", "AND(ISNUMBER(L11),ISNUMBER($G11),L11<$G11)", "AND(ISNUMBER(L11),ISNUMBER($H11),L11>$H11)",
		"AND(ISNUMBER(L11),ISNUMBER($I11),L11<$I11)", "AND(ISNUMBER(L11),ISNUMBER($J11),L11>$J11)", "ISNUMBER(L11)"}
	if d := cmp.Diff(want, formulas); d != "" {
		t.Errorf("marks (-want +got):\n%s", d)
	}
	// Direction survives without colour: the number formats carry the marks.
	_, text := parts(t, written(t, sample(24)))
	_, formats, _ := strings.Cut(text["xl/styles.xml"], "<dxfs")
	for _, mark := range []string{"@&#34; ?&#34;", "▼", "▲", "▽", "△"} {
		if !strings.Contains(formats, mark) {
			t.Errorf("no mark %s among the rules' formats", mark)
		}
	}
}

// A filled sheet is bound to its plan in three places.
func TestCarriers(t *testing.T) {
	p := sample(2)
	f := reopen(t, saved(t, p))
	props, err := f.GetCustomProps()
	if err != nil {
		t.Fatal(err)
	}
	names := map[string]string{}
	for _, n := range f.GetDefinedName() {
		names[n.Name] = n.RefersTo
	}
	got := []any{props, names["plan_digest"], cell(t, f, carrierSheet, "B1"), names["plan_readings"], names["plan_units"], names["plan_points"]}
	want := []any{[]excelize.CustomProperty{{Name: "plan.digest", Value: p.Digest}}, `"` + p.Digest + `"`, p.Digest,
		"'Test sheet'!$L$11:$M$26", "'Test sheet'!$L$8:$M$8", "'Test sheet'!$B$11:$B$26"}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
	if visible, err := f.GetSheetVisible(carrierSheet); visible || err != nil {
		t.Errorf("the carrier sheet can be seen: %v, %v", visible, err)
	}
	if u := cell(t, f, testSheet, "M8"); u != "2" {
		t.Errorf("unit header %q, want the number 2", u)
	}
}
