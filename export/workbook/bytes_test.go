package workbook

import (
	"archive/zip"
	"bytes"
	"io"
	"runtime"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func written(t *testing.T, p Plan) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, p); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// parts unpacks a file: the compressed stream may change with the Go version,
// what is in it may not.
func parts(t *testing.T, file []byte) (names []string, text map[string]string) {
	t.Helper()
	z, err := zip.NewReader(bytes.NewReader(file), int64(len(file)))
	if err != nil {
		t.Fatal(err)
	}
	text = map[string]string{}
	for _, f := range z.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		b, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		names = append(names, f.Name)
		text[f.Name] = string(b)
	}
	return names, text
}

func TestSameBytes(t *testing.T) {
	p := sample(24)
	first := written(t, p)
	for range 12 { // map orders differ from run to run
		if !bytes.Equal(first, written(t, p)) {
			t.Fatal("the same plan gave other bytes")
		}
	}
	before := runtime.GOMAXPROCS(1)
	defer runtime.GOMAXPROCS(before)
	one := written(t, p)
	runtime.GOMAXPROCS(2)
	two := written(t, p)
	if !bytes.Equal(first, one) || !bytes.Equal(first, two) {
		t.Error("the number of processors changes the bytes")
	}
	p.Seed++
	if bytes.Equal(first, written(t, p)) {
		t.Error("another seed gave the same bytes: it is shown nowhere")
	}
}

func TestParts(t *testing.T) {
	names, text := parts(t, written(t, sample(2)))
	if names[0] != "[Content_Types].xml" {
		t.Errorf("first part %s", names[0])
	}
	got := map[string]bool{}
	for _, want := range []string{"xl/workbook.xml", "xl/charts/chart1.xml", "xl/charts/chart2.xml", "docProps/custom.xml", "xl/worksheets/sheet9.xml"} {
		got[want] = text[want] != ""
	}
	want := map[string]bool{"xl/workbook.xml": true, "xl/charts/chart1.xml": true, "xl/charts/chart2.xml": true, "docProps/custom.xml": true, "xl/worksheets/sheet9.xml": true}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
	for name, s := range text {
		if bytes.Contains([]byte(s), []byte("xuri")) && name == "docProps/core.xml" {
			t.Error("the library's author is named as ours")
		}
	}
}
