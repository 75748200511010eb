package cli

import (
	"encoding/json"
	"flag"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"runtime"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"batchwright/bom/quantity"
	"batchwright/data"
)

const (
	readme  = "../README.md"
	picture = "export/workbook/test-sheet.png"
)

// run in the README: everything between the marks is what the command prints.
var shown = regexp.MustCompile("(?s)(<!-- run: batchwright plan -->\n```\n).*?(```\n<!-- end of run -->)")

// TestShow holds the run that the README shows against what the program does.
// With -update it writes that run, and the picture of the test sheet where
// LibreOffice and poppler are installed.
func TestShow(t *testing.T) {
	if testing.Short() {
		t.Skip("plans the whole example")
	}
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	root, err := filepath.Abs("..")
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	r := runHere(t, "plan")
	if r.code != exitDone {
		t.Errorf("exit code %d; the example is to meet its targets\n%s", r.code, r.stderr)
	}
	marks := shown.FindSubmatch(text)
	if marks == nil {
		t.Fatal("the README has no marks for a run")
	}
	want := string(marks[1]) + r.stdout + string(marks[2])
	switch {
	case updating():
		now := strings.Replace(string(text), string(marks[0]), want, 1)
		if err := os.WriteFile(filepath.Join(root, "README.md"), []byte(now), 0o644); err != nil {
			t.Fatal(err)
		}
		draw(t, root)
	case runtime.GOARCH != "amd64":
		t.Skip("other processors round the last digits otherwise; the README's run is an amd64's")
	case string(marks[0]) != want:
		t.Errorf("the README shows another run; go test ./cli -run TestShow -update rewrites it. Now:\n%s", r.stdout)
	}
}

// draw makes the picture of the workbook in this folder.
func draw(t *testing.T, root string) {
	t.Helper()
	for _, program := range []string{"soffice", "pdftoppm"} {
		if _, err := exec.LookPath(program); err != nil {
			t.Logf("%s is not installed: the picture stays as it was", program)
			return
		}
	}
	folder, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	books, err := filepath.Glob(filepath.Join(folder, "*.xlsx"))
	if err != nil || len(books) != 1 {
		t.Fatalf("the example wrote %d workbooks (%v)", len(books), err)
	}
	draw := exec.Command("go", "test", "./export/workbook", "-count=1", "-run", "^TestPicture$", "-args",
		"-xlsx", books[0], "-png", filepath.Join(root, filepath.FromSlash(picture)))
	draw.Dir = root
	if out, err := draw.CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
}

// updating says whether -update was given; the flag belongs to the tests of
// the scripts.
func updating() bool { return flag.Lookup("update").Value.String() == "true" }

// examples are the command lines of the help texts and of the README's
// indented blocks.
func examples(t *testing.T) [][]string {
	t.Helper()
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	all := string(text)
	p := &program{}
	for _, c := range p.newApp().Commands {
		all += "\n" + c.Description
	}
	var list [][]string
	for _, line := range regexp.MustCompile(`(?m)^ {2,4}(?:batchwright|go run \./cli/batchwright) (.*)$`).FindAllStringSubmatch(all, -1) {
		list = append(list, strings.Fields(line[1]))
	}
	seen := map[string]bool{} // many stand in the README and in a command's help
	return slices.DeleteFunc(list, func(args []string) bool {
		line := strings.Join(args, " ")
		twice := seen[line]
		seen[line] = true
		return twice
	})
}

// Every example runs as it stands, those that compare on the embedded example,
// of whose cases none has to meet every target. The bare `plan` is TestShow's.
func TestExamples(t *testing.T) {
	if testing.Short() {
		t.Skip("whole plans, one for each example")
	}
	list := examples(t)
	if len(list) < 12 {
		t.Fatalf("found %d examples", len(list))
	}
	small, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	lantern, err := data.Examples.ReadFile("examples/" + example)
	if err != nil {
		t.Fatal(err)
	}
	for _, args := range list {
		line := strings.Join(args, " ")
		if line == "plan" {
			continue
		}
		t.Run(line, func(t *testing.T) {
			t.Chdir(t.TempDir())
			compares := strings.Contains(line, "compare")
			text := small // a build that is quickly planned
			if compares {
				text = lantern
			}
			if args[0] != "new" { // which makes it itself
				if err := os.WriteFile("tone-box.yaml", text, 0o600); err != nil {
					t.Fatal(err)
				}
			}
			if args[0] == "review" {
				comeBack(t)
			}
			r := runHere(t, args...)
			if compares && r.code == exitMissed {
				r.code, r.stderr = exitDone, strings.TrimPrefix(r.stderr, "batchwright: no case meets every target\n")
			}
			if r.code != exitDone || r.stdout == "" || r.stderr != "" {
				t.Errorf("exit code %d, %d bytes on standard output, standard error %q", r.code, len(r.stdout), r.stderr)
			}
		})
	}
}

// comeBack plans the build that is there and leaves its workbook as filled.xlsx,
// with one unit's readings as the model has them, and the same as a table.
func comeBack(t *testing.T) {
	t.Helper()
	r := runHere(t, "plan", "tone-box.yaml", "--json")
	var result struct {
		Bench []struct {
			Point, Unit string
			Nominal     float64
		}
		Files []string
	}
	if err := json.Unmarshal([]byte(r.stdout), &result); err != nil || len(result.Files) != 1 || len(result.Bench) == 0 {
		t.Fatalf("%v: %s", err, r.stderr)
	}
	table := "point,unit,reading\n"
	f, err := excelize.OpenFile(result.Files[0])
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	const sheet = "Test sheet"
	for _, b := range result.Bench {
		u, _ := quantity.Find(b.Unit)
		text := quantity.Format(b.Nominal, u, 6)
		table += b.Point + ",1," + text + "\n"
		at, err := f.SearchSheet(sheet, b.Point)
		if err != nil || len(at) != 1 {
			t.Fatalf("%s stands at %v (%v)", b.Point, at, err)
		}
		scale, symbol := quantity.Prefixed(b.Nominal, u)
		row := strings.TrimLeft(at[0], "ABCDEFGHIJKLMNOPQRSTUVWXYZ")
		if shown, err := f.GetCellValue(sheet, "E"+row); err != nil || shown != symbol {
			t.Fatalf("%s is read in %q, expected %q", b.Point, shown, symbol)
		}
		if err := f.SetCellValue(sheet, "L"+row, b.Nominal/scale); err != nil {
			t.Fatal(err)
		}
	}
	if err := f.SaveAs("filled.xlsx"); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile("readings.csv", []byte(table), 0o600); err != nil {
		t.Fatal(err)
	}
}
