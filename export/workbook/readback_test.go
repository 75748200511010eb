package workbook

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"batchwright/tolerance/bench"
)

// edited writes a plan's workbook and lets edit change it as a person would.
func edited(t testing.TB, p Plan, edit func(f *excelize.File)) []byte {
	t.Helper()
	var whole bytes.Buffer
	if err := Write(&whole, p); err != nil {
		t.Fatal(err)
	}
	f, err := excelize.OpenReader(&whole)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	edit(f)
	var out bytes.Buffer
	if err := f.Write(&out); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

// readBack reads a workbook that is expected to be readable.
func readBack(t testing.TB, file []byte, p Plan) *Back {
	t.Helper()
	r, err := Open(file)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	if why := r.Origin.Foreign(p.Digest); why != "" {
		t.Fatal(why)
	}
	back, err := r.Read(p)
	if err != nil {
		t.Fatal(err)
	}
	return back
}

// set changes a cell.
func set(t testing.TB, f *excelize.File, sheet, cell string, v any) {
	t.Helper()
	if err := f.SetCellValue(sheet, cell, v); err != nil {
		t.Fatal(err)
	}
}

// rowOfPoint is where a bench row of the sample stands.
func rowOfPoint(t testing.TB, p Plan, name string) (int, benchRow) {
	t.Helper()
	at := places(p)
	for i, r := range p.benchRows() {
		if r.name == name {
			return at[i], r
		}
	}
	t.Fatalf("no row %s", name)
	return 0, benchRow{}
}

// of is what was read of a point on a unit; NaN where nothing was.
func of(f bench.Filled, point string, unit int) float64 {
	for i, name := range f.Points {
		for _, u := range f.Units {
			if name == point && u.Unit == unit {
				return float64(u.Values[i])
			}
		}
	}
	return math.NaN()
}

// lines writes findings as one line each.
func findingLines(list []Finding) string {
	var b strings.Builder
	for _, f := range list {
		fmt.Fprintf(&b, "%s %s!%s", f.Kind, f.Sheet, f.Cell)
		if f.Point != "" {
			fmt.Fprintf(&b, " (%s, unit %d)", f.Point, f.Unit)
		}
		fmt.Fprintf(&b, ": %s", f.What)
		if f.Found+f.Expected != "" {
			fmt.Fprintf(&b, ": %s|%s", f.Found, f.Expected)
		}
		b.WriteByte('\n')
	}
	return b.String()
}

// TestReadBack types every kind of thing into the sheet and expects what is
// read of it. mixer.collector is read in mV, between −118.4 mV and 118.4 mV
// widened to what the sheet shows; detector.level in mV, 31 to 54 mV.
func TestReadBack(t *testing.T) {
	p := sample(3)
	rail, _ := rowOfPoint(t, p, "rails.voltage")
	collector, r := rowOfPoint(t, p, "mixer.collector")
	level, _ := rowOfPoint(t, p, "detector.level")
	tuner, _ := rowOfPoint(t, p, "fixed.tuner")
	frequency, f := rowOfPoint(t, p, "fixed.frequency")
	if r.symbol != "mV" || f.symbol != "kHz" {
		t.Fatalf("the sample is read in %s and %s", r.symbol, f.symbol)
	}
	file := edited(t, p, func(f *excelize.File) {
		set(t, f, testSheet, cellOf(1, rail), 12.02)
		set(t, f, testSheet, cellOf(2, rail), "11,98")
		set(t, f, testSheet, cellOf(3, rail), "12.1 V")
		set(t, f, testSheet, cellOf(1, collector), -3.25)
		set(t, f, testSheet, cellOf(2, collector), "0.05 V")
		set(t, f, testSheet, cellOf(3, collector), "1,234")
		set(t, f, testSheet, cellOf(1, level), 0.0401)
		set(t, f, testSheet, cellOf(2, level), "O.L")
		if err := f.SetCellFormula(testSheet, cellOf(3, level), "41.2"); err != nil {
			t.Fatal(err)
		}
		set(t, f, testSheet, cellOf(1, frequency), "329.4k")
		set(t, f, testSheet, cellOf(2, frequency), "331,2 kHz")
		set(t, f, testSheet, cellOf(3, frequency), 46085)
		set(t, f, testSheet, cellOf(2, tuner), 1.5)
		set(t, f, testSheet, "C4", "M. Okafor")
		set(t, f, testSheet, "G4", 46295)
		set(t, f, testSheet, at(fixedCols+2, serialRow), "B-017")
	})
	back := readBack(t, file, p)
	for _, c := range []struct {
		point string
		unit  int
		want  float64
	}{
		{"rails.voltage", 1, 12.02}, {"rails.voltage", 2, 11.98}, {"rails.voltage", 3, 12.1},
		{"mixer.collector", 1, -3.25e-3}, {"mixer.collector", 2, 0.05}, {"mixer.collector", 3, math.NaN()},
		{"detector.level", 1, 0.0401e-3}, {"detector.level", 2, math.NaN()}, {"detector.level", 3, math.NaN()},
		{"fixed.frequency", 1, 329.4e3}, {"fixed.frequency", 2, 331.2e3}, {"fixed.frequency", 3, 46085e3},
	} {
		if got := of(back.Filled, c.point, c.unit); got != c.want && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("%s of unit %d is %v, want %v", c.point, c.unit, got, c.want)
		}
	}
	if got := of(back.Turned, "fixed.tuner", 2); got != 1.5 {
		t.Errorf("the tuner of unit 2 was left at %v Hz, want 1.5", got)
	}
	want := strings.ReplaceAll(`taken Test sheet!M12 (rails.voltage, unit 2): typed as text; taken as 11.98 V: 11,98|
taken Test sheet!N12 (rails.voltage, unit 3): typed with its unit; taken as 12.1 V: 12.1 V|
taken Test sheet!L13 (fixed.frequency, unit 1): typed with its unit; taken as 329.4 kHz: 329.4k|
taken Test sheet!M13 (fixed.frequency, unit 2): typed with its unit; taken as 331.2 kHz: 331,2 kHz|
unit Test sheet!N13 (fixed.frequency, unit 3): far from what is expected; the spreadsheet program may have made a date of it, 2026-03-04: 46085|316.25 to 349.88 kHz
taken Test sheet!M16 (mixer.collector, unit 2): typed with its unit; taken as 50 mV: 0.05 V|
unread Test sheet!N16 (mixer.collector, unit 3): a comma before three digits: a decimal comma, or thousands?: 1,234|
unit Test sheet!L22 (detector.level, unit 1): 1000 times below what is expected; typed in V instead of mV?: 0.0401|31 to 54 mV
unread Test sheet!M22 (detector.level, unit 2): text that is no reading of a quantity in V: O.L|
unread Test sheet!N22 (detector.level, unit 3): a formula; type the figure itself: =41.2|
`, "|\n", "|\n")
	if got := findingLines(back.Findings); got != want {
		t.Errorf("findings:\n%s\nwant:\n%s", got, want)
	}
	if got := fmt.Sprint(back.Typed); got != "[{Test sheet C4 Tested by 0 M. Okafor} {Test sheet G4 Date 0 2026-09-30} {Test sheet M9 Serial number, if it has one 2 B-017}]" {
		t.Errorf("typed: %s", got)
	}
}

// TestReadBackUntouched finds nothing in a workbook as it was written, of one
// unit and of 200.
func TestReadBackUntouched(t *testing.T) {
	for _, units := range []int{1, 200} {
		p := sample(units)
		p.Cards = true
		file := written(t, p)
		p.Cards = false // was asked for then, and is not now
		back := readBack(t, file, p)
		if len(back.Findings)+len(back.Typed)+len(back.Units)+len(back.Lost) != 0 {
			t.Errorf("%d units: %s%v %v %v", units, findingLines(back.Findings), back.Typed, back.Units, back.Lost)
		}
		if len(back.Points) != len(p.Readings) || len(back.Turned.Points) != len(p.Turns) {
			t.Errorf("%d units: points %v, trims %v", units, back.Points, back.Turned.Points)
		}
	}
}

// TestReadBackExactly types figures of up to fifteen digits into every cell and
// expects of each the number nearest to that decimal in SI.
func TestReadBackExactly(t *testing.T) {
	p := sample(100)
	draw := rand.New(rand.NewPCG(1, 2))
	at := places(p)
	type cell struct {
		row  benchRow
		unit int
	}
	want := map[cell]float64{}
	file := edited(t, p, func(f *excelize.File) {
		for i, row := range p.benchRows() {
			power := int(math.Round(math.Log10(row.by)))
			for u := 1; u <= p.Units; u++ {
				digits := draw.Int64N(1_999_999_999_999_999) - 999_999_999_999_999
				digits /= int64(math.Pow(10, float64(draw.IntN(14))))
				decimals := draw.IntN(13)
				typed, _ := strconv.ParseFloat(fmt.Sprintf("%de-%d", digits, decimals), 64)
				want[cell{row, u}], _ = strconv.ParseFloat(fmt.Sprintf("%de%d", digits, power-decimals), 64)
				set(t, f, testSheet, cellOf(u, at[i]), typed)
			}
		}
	})
	back := readBack(t, file, p)
	for c, v := range want {
		filled := back.Filled
		if c.row.turn {
			filled = back.Turned
		}
		if got := of(filled, c.row.name, c.unit); got != v {
			t.Errorf("%s of unit %d, read in %s: got %v, want %v", c.row.name, c.unit, c.row.symbol, got, v)
		}
	}
	if len(want) != 14*p.Units {
		t.Errorf("%d cells", len(want))
	}
}

// back moves the first reading of a row to the next unit.
func back(t *testing.T, f *excelize.File, row int) {
	set(t, f, testSheet, cellOf(1, row), nil)
	set(t, f, testSheet, cellOf(2, row), 12.02)
}

// TestReadBackEdited changes what is not for typing and expects every change to
// be named by cell, and the readings still to be right.
func TestReadBackEdited(t *testing.T) {
	if testing.Short() {
		t.Skip("whole workbooks through another program")
	}
	p := sample(3)
	collector, _ := rowOfPoint(t, p, "mixer.collector")
	rail, _ := rowOfPoint(t, p, "rails.voltage")
	readings := func(f *excelize.File) {
		set(t, f, testSheet, cellOf(1, rail), 12.02)
		set(t, f, testSheet, cellOf(3, collector), -3.25)
	}
	do := func(err error) {
		if err != nil {
			t.Fatal(err)
		}
	}
	for _, c := range []struct {
		name string
		edit func(f *excelize.File)
		want string
	}{
		{"a limit", func(f *excelize.File) { set(t, f, testSheet, fmt.Sprint("H", rail), 13) }, "changed Test sheet!H12: changed: 13|12.49\n"},
		{"a limit by little", func(f *excelize.File) { set(t, f, testSheet, fmt.Sprint("H", rail), 12.49*(1+1e-11)) },
			"changed Test sheet!H12: changed: 12.4900000001249|12.49\n"},
		{"a limit by the last digit of fifteen", func(f *excelize.File) { set(t, f, testSheet, fmt.Sprint("H", rail), 12.49*(1+1e-13)) }, ""},
		{"a point's name", func(f *excelize.File) { set(t, f, testSheet, fmt.Sprint("B", collector), "mixer.colector") },
			"changed Test sheet!B16: changed: mixer.colector|mixer.collector\n"},
		{"another point's name", func(f *excelize.File) { set(t, f, testSheet, fmt.Sprint("B", collector), "mixer.base") },
			"changed Test sheet!B16: changed: mixer.base|mixer.collector\n"},
		{"a verdict", func(f *excelize.File) { set(t, f, testSheet, "M10", "good") }, "changed Test sheet!M10: changed: good|"},
		{"a row above the grid", func(f *excelize.File) { do(f.InsertRows(testSheet, 3, 1)) },
			"moved Test sheet!A4: a row was inserted; what follows is read where it is\n"},
		{"a row in the grid", func(f *excelize.File) { do(f.InsertRows(testSheet, collector, 2)) },
			"moved Test sheet!A16: a row was inserted; what follows is read where it is\nmoved Test sheet!A17: a row was inserted; what follows is read where it is\n"},
		{"a row with words in it", func(f *excelize.File) {
			do(f.InsertRows(testSheet, collector, 1))
			set(t, f, testSheet, fmt.Sprint("B", collector), "coffee")
		}, "moved Test sheet!A16: a row was inserted; what follows is read where it is: coffee|\n"},
		{"columns", func(f *excelize.File) { do(f.InsertCols(testSheet, "M", 2)) },
			"moved Test sheet!M1: a column was inserted; what follows is read where it is\nmoved Test sheet!N1: a column was inserted; what follows is read where it is\n"},
		{"the sheet's name", func(f *excelize.File) {
			do(f.SetSheetName(testSheet, "Bench 4"))
			for row := 1; row <= 60; row++ { // a spreadsheet program renames it in formulas too
				for col := 1; col <= 6; col++ {
					formula, err := f.GetCellFormula(summarySheet, at(col, row))
					do(err)
					if strings.Contains(formula, "'"+testSheet+"'") {
						do(f.SetCellFormula(summarySheet, at(col, row), strings.ReplaceAll(formula, testSheet, "Bench 4")))
					}
				}
			}
		},
			"moved Bench 4!A1: the sheet was renamed: Bench 4|Test sheet\n"},
		{"another sheet's name", func(f *excelize.File) { do(f.SetSheetName(stagesSheet, "Fitting")) },
			"moved Fitting!A1: the sheet was renamed: Fitting|Parts by stage\n"},
		{"a sheet more", func(f *excelize.File) { _, err := f.NewSheet("Mine"); do(err) },
			"added Mine!A1: a sheet that the plan does not have; it was not looked at\n"},
		{"a sheet less", func(f *excelize.File) { do(f.DeleteSheet(driftSheet)) }, "gone Drift!A1: the sheet is gone: |Drift\n"},
		{"beside the grid", func(f *excelize.File) { set(t, f, testSheet, "P13", "hm") },
			"added Test sheet!P13: nothing is to be typed here; it was not read: hm|\n"},
		{"beside a heading", func(f *excelize.File) { set(t, f, testSheet, "L11", 3) },
			"added Test sheet!L11: nothing is to be typed here; it was not read: 3|\n"},
		{"a part", func(f *excelize.File) { set(t, f, buySheet, "A5", "C99") }, "changed Parts to buy!A5: changed: C99|"},
		{"a row moved down", func(f *excelize.File) {
			do(f.DuplicateRowTo(testSheet, rail, rail+4))
			do(f.RemoveRow(testSheet, rail))
		}, "moved Test sheet!A15: the row was moved; it is read where it is: 1 · rails.voltage · output of U2, to ground · dc voltage, dmm · V · 12|\n"},
		{"a row moved down, its step written over", func(f *excelize.File) {
			set(t, f, testSheet, fmt.Sprint("A", rail), 77)
			do(f.DuplicateRowTo(testSheet, rail, rail+4))
			do(f.RemoveRow(testSheet, rail))
		}, "moved Test sheet!A15: the row was moved; it is read where it is: 77 · rails.voltage · output of U2, to ground · dc voltage, dmm · V · 12|\nchanged Test sheet!A15: changed: 77|1\n"},
		{"a row moved down, its name written over", func(f *excelize.File) {
			set(t, f, testSheet, fmt.Sprint("B", rail), "rail")
			do(f.DuplicateRowTo(testSheet, rail, rail+4))
			do(f.RemoveRow(testSheet, rail))
		}, "moved Test sheet!A15: the row was moved; it is read where it is: 1 · rail · output of U2, to ground · dc voltage, dmm · V · 12|\nchanged Test sheet!B15: changed: rail|rails.voltage\n"},
		{"a formula", func(f *excelize.File) { do(f.SetCellFormula(testSheet, "M10", `"good"`)) }, "changed Test sheet!M10: changed: =\"good\"|"},
		{"rows of another sheet", func(f *excelize.File) {
			do(f.InsertRows(stagesSheet, 6, 1))
			do(f.InsertRows(stagesSheet, 12, 2))
		}, "moved Parts by stage!A6: a row was inserted; what follows is read where it is\n" +
			"moved Parts by stage!A12: a row was inserted; what follows is read where it is\nmoved Parts by stage!A13: a row was inserted; what follows is read where it is\n"},
		{"a row twice", func(f *excelize.File) { do(f.DuplicateRowTo(testSheet, rail, rail+1)) },
			"moved Test sheet!A13: a row was inserted; what follows is read where it is: 1 · rails.voltage · output of U2, to ground · dc voltage, dmm · V · 12|\n" +
				"unread Test sheet!L13 (rails.voltage, unit 1): a second row of this point; the other one is read: 12.02|\n"},
		{"a row less", func(f *excelize.File) {
			base, _ := rowOfPoint(t, p, "mixer.base")
			do(f.RemoveRow(testSheet, base))
		}, "gone Test sheet!A14: the row is gone: |3 · mixer.base · base of Q1, to ground · dc voltage, dmm · mV · 659\n"},
		{"a column less", func(f *excelize.File) { do(f.RemoveCol(testSheet, "M")) }, "gone Test sheet!M1: the column is gone: |2 · "},
		{"two numbers changed about", func(f *excelize.File) { set(t, f, testSheet, "L8", 2); set(t, f, testSheet, "M8", 1); back(t, f, rail) },
			"moved Test sheet!M1: the column was moved; it is read where it is: 1 · "},
		{"a number twice", func(f *excelize.File) { set(t, f, testSheet, "M8", 3); set(t, f, testSheet, cellOf(2, rail), 7) },
			"changed Test sheet!M8: changed: 3|2\n"},
		{"the names", func(f *excelize.File) {
			for _, name := range []string{"plan_points", "plan_steps", "plan_units", "plan_serials", "plan_readings"} {
				do(f.DeleteDefinedName(&excelize.DefinedName{Name: name}))
			}
		}, ""},
		{"the names, and a row", func(f *excelize.File) {
			do(f.DeleteDefinedName(&excelize.DefinedName{Name: "plan_points"}))
			do(f.InsertRows(testSheet, 3, 1))
		}, "moved Test sheet!A4: a row was inserted; what follows is read where it is\n"},
		{"a unit's number", func(f *excelize.File) { set(t, f, testSheet, "N8", 30) }, "changed Test sheet!N8: changed: 30|3\n"},
	} {
		t.Run(c.name, func(t *testing.T) {
			back := readBack(t, edited(t, p, func(f *excelize.File) { readings(f); c.edit(f) }), p)
			got := findingLines(back.Findings)
			if got != c.want && !(c.want != "" && !strings.HasSuffix(c.want, "\n") && strings.HasPrefix(got, c.want) && strings.Count(got, "\n") == 1) {
				t.Errorf("findings:\n%swant:\n%s", got, c.want)
			}
			if a, b := of(back.Filled, "rails.voltage", 1), of(back.Filled, "mixer.collector", 3); a != 12.02 || b != -3.25e-3 {
				t.Errorf("read %v and %v, want 12.02 and -0.00325", a, b)
			}
		})
	}
}

// TestReadBackRenamed has two sheets bear each other's names: the grid goes by
// the names of its parts.
func TestReadBackRenamed(t *testing.T) {
	p := sample(2)
	rail, _ := rowOfPoint(t, p, "rails.voltage")
	back := readBack(t, edited(t, p, func(f *excelize.File) {
		set(t, f, testSheet, cellOf(2, rail), 12.02)
		for _, n := range [][2]string{{testSheet, "x"}, {trimsSheet, testSheet}, {"x", trimsSheet}} {
			if err := f.SetSheetName(n[0], n[1]); err != nil {
				t.Fatal(err)
			}
		}
	}), p)
	got := findingLines(back.Findings)
	if v := of(back.Filled, "rails.voltage", 2); v != 12.02 || !strings.Contains(got, "moved Trims!A1: the sheet was renamed: Trims|Test sheet\n") ||
		!strings.Contains(got, "moved Test sheet!A1: the sheet was renamed: Test sheet|Trims\n") {
		t.Errorf("read %v\n%s", v, got)
	}
}

// TestReadBackCopied has a copy of the test sheet under its name: the one that
// the names point to is read.
func TestReadBackCopied(t *testing.T) {
	p := sample(2)
	rail, _ := rowOfPoint(t, p, "rails.voltage")
	back := readBack(t, edited(t, p, func(f *excelize.File) {
		if err := f.SetSheetName(testSheet, "Bench 4"); err != nil {
			t.Fatal(err)
		}
		to, err := f.NewSheet(testSheet)
		if err != nil {
			t.Fatal(err)
		}
		from, err := f.GetSheetIndex("Bench 4")
		if err != nil {
			t.Fatal(err)
		}
		if err := f.CopySheet(from, to); err != nil {
			t.Fatal(err)
		}
		for _, n := range f.GetDefinedName() { // a spreadsheet program does this by itself
			if strings.HasPrefix(n.Name, "plan_") && strings.Contains(n.RefersTo, testSheet) {
				name := excelize.DefinedName{Name: n.Name, RefersTo: strings.ReplaceAll(n.RefersTo, testSheet, "Bench 4")}
				if err := errors.Join(f.DeleteDefinedName(&excelize.DefinedName{Name: n.Name}), f.SetDefinedName(&name)); err != nil {
					t.Fatal(err)
				}
			}
		}
		set(t, f, "Bench 4", cellOf(2, rail), 12.02)
		set(t, f, testSheet, cellOf(2, rail), 11.9)
	}), p)
	if v := of(back.Filled, "rails.voltage", 2); v != 12.02 {
		t.Errorf("read %v, want 12.02\n%s", v, findingLines(back.Findings))
	}
	if got := findingLines(back.Findings); !strings.Contains(got, "added Test sheet!A1: a sheet that the plan does not have") {
		t.Error(got)
	}
}

// BenchmarkReadBack reads a full sheet of 200 units.
func BenchmarkReadBack(b *testing.B) {
	p := sample(200)
	at := places(p)
	file := edited(b, p, func(f *excelize.File) {
		for i := range at {
			for u := 1; u <= p.Units; u++ {
				set(b, f, testSheet, cellOf(u, at[i]), 1.25)
			}
		}
	})
	b.ReportAllocs()
	for b.Loop() {
		if len(readBack(b, file, p).Units) != p.Units {
			b.Fatal("units are missing")
		}
	}
}

// TestReadBackElsewhere reads a workbook back from another folder, and one that
// has a sheet of comparisons: neither is an edit.
func TestReadBackElsewhere(t *testing.T) {
	p := sample(2)
	written := edited(t, p, func(f *excelize.File) {})
	p.File = "../lantern.yaml"
	if got := findingLines(readBack(t, written, p).Findings); got != "" {
		t.Error(got)
	}
	compared := p
	compared.Compare, compared.Trade = sampleCompare(5), sampleTrade()
	if got := findingLines(readBack(t, edited(t, compared, func(f *excelize.File) {}), p).Findings); got != "" {
		t.Error(got)
	}
}

// TestOrigin takes the marks of the plan out one by one, and forges them.
func TestOrigin(t *testing.T) {
	p := sample(2)
	do := func(err error) {
		if err != nil {
			t.Fatal(err)
		}
	}
	property := func(text any) func(f *excelize.File) {
		return func(f *excelize.File) {
			do(f.SetCustomProps(excelize.CustomProperty{Name: "plan.digest", Value: text}))
		}
	}
	name := func(refers string) func(f *excelize.File) {
		return func(f *excelize.File) {
			do(f.DeleteDefinedName(&excelize.DefinedName{Name: "plan_digest"}))
			if refers != "" {
				do(f.SetDefinedName(&excelize.DefinedName{Name: "plan_digest", RefersTo: refers}))
			}
		}
	}
	cell := func(text string) func(f *excelize.File) {
		return func(f *excelize.File) { set(t, f, carrierSheet, "B1", text) }
	}
	sheet := func(f *excelize.File) { do(f.DeleteSheet(carrierSheet)) }
	for _, c := range []struct {
		name   string
		edits  []func(f *excelize.File)
		why    string
		missed int
	}{
		{"whole", nil, "", 0},
		{"no property", []func(*excelize.File){property(nil)}, "", 1},
		{"no name", []func(*excelize.File){name("")}, "", 1},
		{"no sheet", []func(*excelize.File){sheet}, "", 1},
		{"only the sheet", []func(*excelize.File){property(nil), name("")}, "", 2},
		{"none", []func(*excelize.File){property(nil), name(""), sheet}, "the workbook does not say which plan it was written from; this plan is 7f3a19c2", 3},
		{"two plans", []func(*excelize.File){cell("0123456789abcdef")}, "the workbook says of itself that it is of the plans 01234567 and 7f3a19c2; this plan is 7f3a19c2", 0},
		{"another", []func(*excelize.File){property("aa11223344"), name(`"aa11223344"`), cell("aa11223344")}, "the workbook is of plan aa112233; this plan is 7f3a19c2", 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			r, err := Open(edited(t, p, func(f *excelize.File) {
				for _, edit := range c.edits {
					edit(f)
				}
			}))
			if err != nil {
				t.Fatal(err)
			}
			defer r.Close()
			if got := r.Origin.Foreign(p.Digest); got != c.why || len(r.Origin.missing) != c.missed {
				t.Errorf("got %q and %v, want %q and %d", got, r.Origin.missing, c.why, c.missed)
			}
			if s := r.Origin; c.name == "whole" && (s.Seed != "1" || s.Units != "2" || s.File != "lantern.yaml" || s.Version != "0.1.0" || s.Simulate != "0") {
				t.Errorf("got %+v", s)
			}
		})
	}
}
