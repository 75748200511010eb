package cli

import (
	"archive/zip"
	"io"
	"path/filepath"
	"strings"
	"testing"
)

// TestSummaryIsOnePage holds the first sheet of the embedded example to one
// page: the workbook asks for that only where the rows stay legible on one.
func TestSummaryIsOnePage(t *testing.T) {
	if testing.Short() {
		t.Skip("plans the whole example")
	}
	t.Chdir(t.TempDir())
	if r := runHere(t, "plan", "--simulate", "2000"); r.code != exitDone {
		t.Fatalf("exit code %d\n%s", r.code, r.stderr)
	}
	books, err := filepath.Glob("*.xlsx")
	if err != nil || len(books) != 1 {
		t.Fatalf("workbooks %v, %v", books, err)
	}
	z, err := zip.OpenReader(books[0])
	if err != nil {
		t.Fatal(err)
	}
	defer z.Close()
	f, err := z.Open("xl/worksheets/sheet1.xml")
	if err != nil {
		t.Fatal(err)
	}
	text, err := io.ReadAll(f)
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"Parts that were chosen", "What binds", `fitToHeight="1"`} {
		if !strings.Contains(string(text), want) {
			t.Errorf("the first sheet has no %s", want)
		}
	}
}
