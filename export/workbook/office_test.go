package workbook

import (
	"encoding/csv"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// office runs LibreOffice on a file and returns the folder of what it made. It
// skips the test where LibreOffice is not installed. With always, formulas are
// worked out again on loading; otherwise stored results are trusted.
func office(t *testing.T, file, to string, always bool) string {
	t.Helper()
	soffice, err := exec.LookPath("soffice")
	if err != nil {
		t.Skip("LibreOffice (soffice) is not installed: not checked against another program")
	}
	profile, out := t.TempDir(), t.TempDir()
	if always {
		const settings = `<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry"><item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse"><value>0</value></prop></item></oor:items>`
		if err := os.MkdirAll(filepath.Join(profile, "user"), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(profile, "user", "registrymodifications.xcu"), []byte(settings), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	run := exec.Command(soffice, "-env:UserInstallation=file://"+filepath.ToSlash(profile), "--headless", "--convert-to", to, "--outdir", out, file)
	if text, err := run.CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, text)
	}
	return out
}

// allSheets converts to CSV, one file a sheet: UTF-8, every digit of a figure
// rather than the figure as shown, results rather than formulas. Token 12 of the filter is which sheet; −1 is every one.
const allSheets = `csv:Text - txt - csv (StarCalc):44,34,76,1,,0,false,true,false,false,false,-1`

// sheets reads a workbook's cells as LibreOffice shows them.
func sheets(t *testing.T, file string, always bool) map[string][][]string {
	t.Helper()
	folder := office(t, file, allSheets, always)
	names, _ := filepath.Glob(filepath.Join(folder, "*.csv"))
	if len(names) == 0 {
		t.Fatal("LibreOffice wrote no CSV")
	}
	all := map[string][][]string{}
	for _, name := range names {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		r := csv.NewReader(strings.NewReader(string(text)))
		r.FieldsPerRecord = -1
		rows, err := r.ReadAll()
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		base := strings.TrimSuffix(filepath.Base(name), ".csv")
		_, sheet, _ := strings.Cut(base, "-")
		all[sheet] = rows
	}
	return all
}

// pages renders to PDF and counts its pages; it skips without pdfinfo.
func pages(t *testing.T, file string) int {
	t.Helper()
	folder := office(t, file, "pdf", true)
	info, err := exec.LookPath("pdfinfo")
	if err != nil {
		t.Skip("pdfinfo (poppler) is not installed: pages not counted")
	}
	made, _ := filepath.Glob(filepath.Join(folder, "*.pdf"))
	if len(made) != 1 {
		t.Fatalf("LibreOffice made %d PDF files", len(made))
	}
	text, err := exec.Command(info, made[0]).CombinedOutput()
	if err != nil {
		t.Fatalf("pdfinfo: %v\n%s", err, text)
	}
	n := 0
	for line := range strings.Lines(string(text)) {
		if rest, ok := strings.CutPrefix(line, "Pages:"); ok {
			fmt.Sscan(rest, &n)
		}
	}
	return n
}
