package workbook

import (
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

// worker is what LibreOffice is told through its own bridge: load, let the
// statements work on document d and test sheet s, store as .xlsx.
const worker = `import sys, time, uno
from com.sun.star.beans import PropertyValue
pipe, source, target = sys.argv[1:4]
resolver = uno.getComponentContext().ServiceManager.createInstance("com.sun.star.bridge.UnoUrlResolver")
for wait in range(600):
    try:
        context = resolver.resolve("uno:pipe,name=" + pipe + ";urp;StarOffice.ComponentContext")
        break
    except Exception:
        time.sleep(0.1)
desktop = context.ServiceManager.createInstanceWithContext("com.sun.star.frame.Desktop", context)
def value(name, v): return PropertyValue(name, 0, v, 0)
d = desktop.loadComponentFromURL(uno.systemPathToFileUrl(source), "_blank", 0, (value("Hidden", True),))
s = d.Sheets.getByName(sys.argv[4])
exec(sys.stdin.read())
d.storeToURL(uno.systemPathToFileUrl(target), (value("FilterName", "Calc MS Excel 2007 XML"),))
d.close(True)
try:
    desktop.terminate()
except Exception:
    pass # the bridge goes with it
`

// retyped opens a workbook in LibreOffice, works on it as a person would, and
// saves it as .xlsx again. It skips where LibreOffice or its bridge to Python
// is not there.
func retyped(t *testing.T, file []byte, statements ...string) []byte {
	t.Helper()
	soffice, err := exec.LookPath("soffice")
	if err != nil {
		t.Skip("LibreOffice (soffice) is not installed: not read back from another program")
	}
	const python = "/usr/bin/python3" // the one that the bridge was built for
	if exec.Command(python, "-c", "import uno").Run() != nil {
		t.Skip("LibreOffice's bridge to Python (python3-uno) is not installed: not read back from another program")
	}
	folder := t.TempDir()
	in, out := filepath.Join(folder, "in.xlsx"), filepath.Join(folder, "out.xlsx")
	if err := os.WriteFile(in, file, 0o644); err != nil {
		t.Fatal(err)
	}
	pipe := "batchwright" + filepath.Base(filepath.Dir(folder))
	office := exec.Command(soffice, "-env:UserInstallation=file://"+filepath.ToSlash(filepath.Join(folder, "profile")),
		"--headless", "--norestore", "--accept=pipe,name="+pipe+";urp;")
	office.Env = append(os.Environ(), "LC_ALL=C", "LANGUAGE=en")
	if err := office.Start(); err != nil {
		t.Fatal(err)
	}
	work := exec.Command(python, "-c", worker, pipe, in, out, testSheet)
	work.Stdin = strings.NewReader(strings.Join(statements, "\n"))
	text, failed := work.CombinedOutput()
	if failed != nil {
		office.Process.Kill()
	}
	office.Wait()
	if failed != nil {
		t.Fatalf("%v\n%s", failed, text)
	}
	saved, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	return saved
}

// TestOfficeRoundTrip has LibreOffice type readings, insert a row above the
// grid and a column in it, write over a locked cell, and rename the sheet.
func TestOfficeRoundTrip(t *testing.T) {
	p := sample(12)
	rail, _ := rowOfPoint(t, p, "rails.voltage")
	collector, _ := rowOfPoint(t, p, "mixer.collector")
	cell := func(unit, row int) string { return `s.getCellRangeByName("` + cellOf(unit, row) + `")` }
	file := retyped(t, written(t, p),
		cell(1, rail)+`.Value = 12.02`,
		cell(2, rail)+`.FormulaLocal = "11,98"`,
		cell(3, rail)+`.FormulaLocal = "3/4/2026"`,
		cell(12, rail)+`.Value = 12.0123456789012`,
		cell(1, collector)+`.FormulaLocal = "-2.50 mV"`,
		cell(2, collector)+`.FormulaLocal = "=41.2"`,
		cell(7, collector)+`.Value = -0.75`,
		`s.getCellRangeByName("C4").FormulaLocal = "M. Okafor"`,
		`s.getCellRangeByName("G4").FormulaLocal = "2026-09-30"`,
		`s.unprotect("")`,
		`s.getCellRangeByName("H12").Value = 13`,
		`s.Rows.insertByIndex(2, 1)`,
		`s.Columns.insertByIndex(14, 1)`,
		`s.Name = "Bench 4"`,
		`d.Sheets.getByName("`+trimsSheet+`").Name = "`+testSheet+`"`,
	)
	back := readBack(t, file, p)
	const want = `moved Test sheet!A1: the sheet was renamed: Test sheet|Trims
moved Bench 4!A1: the sheet was renamed: Bench 4|Test sheet
moved Bench 4!O1: a column was inserted; what follows is read where it is
moved Bench 4!A4: a row was inserted; what follows is read where it is
changed Bench 4!H13: changed: 13|12.49
taken Bench 4!M13 (rails.voltage, unit 2): typed as text; taken as 11.98 V: 11,98|
unit Bench 4!N13 (rails.voltage, unit 3): far from what is expected; the spreadsheet program may have made a date of it, 2026-03-04: 46085|11.51 to 12.49 V
taken Bench 4!L17 (mixer.collector, unit 1): typed with its unit; taken as -2.5 mV: -2.50 mV|
unread Bench 4!M17 (mixer.collector, unit 2): a formula; type the figure itself: =41.2|
`
	if got := findingLines(back.Findings); got != want {
		t.Errorf("findings:\n%s", got)
	}
	for _, c := range []struct {
		point string
		unit  int
		want  float64
	}{
		{"rails.voltage", 1, 12.02}, {"rails.voltage", 2, 11.98}, {"rails.voltage", 12, 12.0123456789012},
		{"mixer.collector", 1, -2.5e-3}, {"mixer.collector", 2, math.NaN()}, {"mixer.collector", 7, -0.75e-3},
	} {
		if got := of(back.Filled, c.point, c.unit); got != c.want && !(math.IsNaN(got) && math.IsNaN(c.want)) {
			t.Errorf("%s of unit %d is %v, want %v", c.point, c.unit, got, c.want)
		}
	}
	if len(back.Typed) != 2 || back.Typed[0].Text != "M. Okafor" || back.Typed[1].Text != "2026-09-30" {
		t.Errorf("typed: %v", back.Typed)
	}
}

// TestOfficeUntouched has nothing to say of a large workbook that LibreOffice
// only saved again: its own ways of writing are none of the bench's doing.
func TestOfficeUntouched(t *testing.T) {
	if testing.Short() {
		t.Skip("200 units through another program")
	}
	p := sample(200)
	path := filepath.Join(t.TempDir(), "plan.xlsx")
	if err := os.WriteFile(path, written(t, p), 0o644); err != nil {
		t.Fatal(err)
	}
	saved, err := os.ReadFile(filepath.Join(office(t, path, "xlsx", true), "plan.xlsx"))
	if err != nil {
		t.Fatal(err)
	}
	if f, err := excelize.OpenReader(strings.NewReader(string(saved))); err != nil {
		t.Fatal(err)
	} else if props, err := f.GetAppProps(); err != nil || !strings.Contains(props.Application, "LibreOffice") {
		t.Fatalf("saved by %+v (%v)", props, err)
	}
	back := readBack(t, saved, p)
	if len(back.Findings)+len(back.Typed)+len(back.Units)+len(back.Lost) != 0 {
		t.Errorf("%s%v %v %v", findingLines(back.Findings), back.Typed, back.Units, back.Lost)
	}
}
