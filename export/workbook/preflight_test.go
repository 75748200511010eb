package workbook

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"runtime"
	"slices"
	"strings"
	"testing"
)

// repacked copies a workbook, its parts put through change; nil drops one.
func repacked(t testing.TB, file []byte, change func(name string, text []byte) []byte) []byte {
	t.Helper()
	in, err := zip.NewReader(bytes.NewReader(file), int64(len(file)))
	if err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	out := zip.NewWriter(&b)
	for _, part := range in.File {
		r, err := part.Open()
		if err != nil {
			t.Fatal(err)
		}
		text, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		if text = change(part.Name, text); text == nil {
			continue
		}
		w, err := out.Create(part.Name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := w.Write(text); err != nil {
			t.Fatal(err)
		}
	}
	if err := out.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// replaced changes one text of one part.
func replaced(t testing.TB, file []byte, part, old, text string) []byte {
	t.Helper()
	done := false
	file = repacked(t, file, func(name string, b []byte) []byte {
		if name != part || !bytes.Contains(b, []byte(old)) {
			return b
		}
		done = true
		return bytes.Replace(b, []byte(old), []byte(text), 1)
	})
	if !done {
		t.Fatalf("the part %s has no %q", part, old)
	}
	return file
}

func without(t testing.TB, file []byte, part string) []byte {
	return repacked(t, file, func(name string, b []byte) []byte {
		if name == part {
			return nil
		}
		return b
	})
}

// zipOf is an archive with the parts named and nothing much in them.
func zipOf(t testing.TB, names ...string) []byte {
	t.Helper()
	var b bytes.Buffer
	out := zip.NewWriter(&b)
	for _, name := range names {
		w, err := out.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := io.WriteString(w, "<x/>"); err != nil {
			t.Fatal(err)
		}
	}
	if err := out.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// damaged is a workbook that somebody could send, and the words that refuse it.
type damaged struct {
	name string
	file []byte
	want string // within the error
}

// Sheets as they are numbered in the file: the test sheet is the fifth.
const testPart = "xl/worksheets/sheet5.xml"

func corpus(t testing.TB) []damaged {
	p := sample(2)
	var whole bytes.Buffer
	if err := Write(&whole, p); err != nil {
		t.Fatal(err)
	}
	good := whole.Bytes()
	swap := func(old, text string) []byte { return replaced(t, good, testPart, old, text) }
	rows := func(n int, row string) string {
		var b strings.Builder
		for i := 1; i <= n; i++ {
			fmt.Fprintf(&b, strings.ReplaceAll(row, "#", "%[1]d"), i)
		}
		return b.String()
	}
	sheet := func(data string) []byte {
		return repacked(t, good, func(name string, b []byte) []byte {
			if name == testPart {
				return []byte(`<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><sheetData>` + data + `</sheetData></worksheet>`)
			}
			return b
		})
	}
	flipped := bytes.Clone(good)
	flipped[len(flipped)/3] ^= 0x55
	return []damaged{
		{"empty", nil, "the file is empty"},
		{"text", []byte("point,unit,reading\nrails.voltage,1,12 V\n"), "a text file; readings in a text file are given with --readings"},
		{"html", []byte("\n<!DOCTYPE html><html><table></table></html>"), "a web page"},
		{"xml", []byte("<?xml version=\"1.0\"?><Workbook/>"), "an XML file"},
		{"pdf", []byte("%PDF-1.4\n"), "a PDF"},
		{"noise", bytes.Repeat([]byte{0, 0xff, 0xfe, 3}, 300), "not a workbook of any kind"},
		{"old or encrypted", append([]byte("\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"), make([]byte, 4096)...), "an old .xls file or one with a password"},
		{"OpenDocument", zipOf(t, "mimetype", "content.xml"), "an OpenDocument file; save it as .xlsx"},
		{"a text document", zipOf(t, "[Content_Types].xml", "word/document.xml"), "a text document"},
		{"binary workbook", zipOf(t, "[Content_Types].xml", "xl/workbook.bin"), ".xlsb"},
		{"another archive", zipOf(t, "readme.txt"), "an archive without a workbook"},
		{"an empty archive", []byte("PK\x05\x06" + strings.Repeat("\x00", 18)), "an empty archive"},
		{"many parts", zipOf(t, strings.Fields(rows(1001, "part# "))...), "1001 parts"},
		{"half", good[:len(good)/2], "truncated"},
		{"all but the end", good[:len(good)-30], "truncated"},
		{"a byte changed", flipped, "the part"},
		{"too large", append(bytes.Clone(good), make([]byte, 17<<20)...), "MiB; a filled workbook has at most 16"},
		{"a part twice", zipOf(t, "[Content_Types].xml", "xl/workbook.xml", "xl/workbook.xml"), "is there twice"},
		{"no list of parts", without(t, good, "[Content_Types].xml"), "lost parts"},
		{"no workbook part", without(t, good, "xl/workbook.xml"), "lost parts"},
		{"no test sheet", without(t, good, testPart), "is listed and not there"},
		{"no relations", without(t, good, "xl/_rels/workbook.xml.rels"), "is listed and not there"},
		{"a gigabyte of spaces", spacesBomb(t, good, 1<<30), "stretch of"},
		{"a picture of a hundred megabytes", withPart(t, good, "xl/media/a.png", make([]byte, 100<<20)), "unpacks to more"},
		{"a hundred megabytes of rows", sheet(rows(1, "<row/>") + strings.Repeat("<x> </x>", 100<<20/8)), "unpacks to more"},
		{"cells in the last column", sheet(rows(2000, `<row r="#"><c r="XFD#"><v>1</v></c></row>`)), "column 16384; a plan has at most 500"},
		{"many cells", sheet(rows(1100, `<row r="#"><c r="SF#"><v>1</v></c></row>`)), "more than 500000 cells"},
		{"a row far down", sheet(`<row r="1048576"><c r="A1048576"><v>1</v></c></row>`), "row 1048576; a plan has at most 40000"},
		{"a row of minus five", swap(`<row r="5"`, `<row r="-5"`), `row "-5" after row 4`},
		{"a row twice", swap(`<row r="5"`, `<row r="4"`), `row "4" after row 4`},
		{"a cell out of its row", swap(`r="B12"`, `r="B13"`), `cell "B13" in row 12`},
		{"a cell of no place", swap(`r="B12"`, `r="12B"`), `cell "12B"`},
		{"cut within", swap(`</sheetData>`, ``), "damaged in line"},
		{"text that is not there", swap(`<c r="B12"`, `<c r="A12" t="s"><v>7</v></c><c r="B12"`), "cell"},
		{"text of minus one", sheet(`<row r="1"><c r="A1" t="s"><v>-1</v></c></row>`), `text number "-1"`},
		{"text number seven hundred of a dozen", sheet(`<row r="1"><c r="A1" t="s"><v>700</v></c></row>`), "text number 701, and the workbook holds"},
		{"a document type", swap(`<worksheet`, `<!DOCTYPE a [<!ENTITY b "c">]><worksheet`), "a document type"},
		{"another alphabet", swap(`encoding="UTF-8"`, `encoding="UTF-16"`), "damaged"},
		{"deep", sheet(strings.Repeat("<a>", 200) + strings.Repeat("</a>", 200)), "elements 101 deep"},
		{"one long tag", sheet(`<a ` + strings.Repeat(`b="" `, 1<<20) + `/>`), "stretch of"},
		{"many merged areas", sheet(rows(8001, `<mergeCell ref="A#:B#"/>`)), "merged areas"},
		{"many names", replaced(t, good, "xl/workbook.xml", "<definedNames>", "<definedNames>"+rows(2001, `<definedName name="n#">1</definedName>`)), "more than 2000 names"},
		{"no sheet at all", repacked(t, good, func(name string, b []byte) []byte {
			if strings.HasPrefix(name, "xl/worksheets/") {
				return nil
			}
			return b
		}), "without a sheet"},
	}
}

// withPart adds a part.
func withPart(t testing.TB, file []byte, name string, text []byte) []byte {
	t.Helper()
	in, err := zip.NewReader(bytes.NewReader(file), int64(len(file)))
	if err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	out := zip.NewWriter(&b)
	for _, part := range in.File {
		if err := out.Copy(part); err != nil {
			t.Fatal(err)
		}
	}
	w, err := out.Create(name)
	if err == nil {
		_, err = w.Write(text)
	}
	if err == nil {
		err = out.Close()
	}
	if err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// spacesBomb puts n spaces into the test sheet, a kilobyte or so of archive a
// megabyte.
func spacesBomb(t testing.TB, file []byte, n int) []byte {
	t.Helper()
	var b bytes.Buffer
	out := zip.NewWriter(&b)
	in, err := zip.NewReader(bytes.NewReader(file), int64(len(file)))
	if err != nil {
		t.Fatal(err)
	}
	for _, part := range in.File {
		if part.Name != testPart {
			if err := out.Copy(part); err != nil {
				t.Fatal(err)
			}
			continue
		}
		w, err := out.Create(part.Name)
		if err != nil {
			t.Fatal(err)
		}
		io.WriteString(w, `<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><sheetData>`)
		block := bytes.Repeat([]byte(" "), 1<<20)
		for range n >> 20 {
			if _, err := w.Write(block); err != nil {
				t.Fatal(err)
			}
		}
		io.WriteString(w, `</sheetData></worksheet>`)
	}
	if err := out.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// TestDamaged has every file of the corpus refused in words, and none of them
// take more memory than a large workbook would: 800 MiB handed out and given back,
// where the worst of them asks for eight gigabytes.
func TestDamaged(t *testing.T) {
	if testing.Short() {
		t.Skip("files that inflate to gigabytes")
	}
	for _, c := range corpus(t) {
		t.Run(c.name, func(t *testing.T) {
			var before, after runtime.MemStats
			runtime.ReadMemStats(&before)
			r, err := Open(c.file)
			runtime.ReadMemStats(&after)
			if err == nil {
				r.Close()
				t.Fatal("it was opened")
			}
			if !strings.Contains(err.Error(), c.want) || strings.ContainsAny(err.Error(), "\n\x00") || len(err.Error()) > 250 {
				t.Errorf("refused with %q, want %q", err, c.want)
			}
			if used := (after.TotalAlloc - before.TotalAlloc) >> 20; used > 800 {
				t.Errorf("%d MiB were handed out", used)
			}
		})
	}
}

// TestSneaky opens what is no harm in itself and says what became of it.
func TestSneaky(t *testing.T) {
	p := sample(2)
	good := written(t, p)
	for _, c := range []struct {
		name string
		file []byte
		want string
	}{
		{"a style below nothing", replaced(t, good, testPart, `<c r="B12" s="`, `<c r="B12" s="-`), ""},
		{"a cell without a place", replaced(t, good, testPart, ` r="B12"`, ``), ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			back := readBack(t, c.file, p)
			if got := findingLines(back.Findings); got != c.want {
				t.Errorf("got %s, want %s", got, c.want)
			}
		})
	}
}

// FuzzReadBack reads whatever comes, against a plan of two units and two rows.
// Panics of ours or of the library are turned into errors elsewhere; here they
// are not, as far as the reading itself goes.
func FuzzReadBack(f *testing.F) {
	p := sample(2)
	p = Plan{Title: "small", Units: 2, Digest: p.Digest, Readings: p.Readings[:1], Turns: p.Turns[:1]}
	var whole bytes.Buffer
	if err := Write(&whole, p); err != nil {
		f.Fatal(err)
	}
	parts := partsOf(f, whole.Bytes())
	fresh, err := rewritten(p, Origin{})
	if err != nil {
		f.Fatal(err)
	}
	f.Add([]byte{}, uint8(0), uint16(0), uint16(0))
	for i, text := range []string{`r="-1"`, `s="99999"`, `t="s"`, `<f t="shared" si="0"/>`, `'`, "\x00", `1e999`, "PK\x03\x04", "<c r=\"L12\"><v>1</v></c>"} {
		for _, part := range []int{i % len(parts), slices.IndexFunc(parts, func(p onePart) bool { return p.name == testPart })} {
			f.Add([]byte(text), uint8(part), uint16(300*i), uint16(len(text)))
		}
	}
	f.Fuzz(func(t *testing.T, text []byte, part uint8, place, drop uint16) {
		for _, file := range [][]byte{text, spliced(t, parts, int(part)%len(parts), int(place), int(drop), text)} {
			r, err := Open(file)
			if err != nil {
				continue
			}
			back, err := r.against(p, fresh)
			if err == nil && len(back.Units) > p.Units {
				t.Errorf("%d units of %d", len(back.Units), p.Units)
			}
			r.Close()
		}
	})
}

// onePart is a part of an archive, unpacked.
type onePart struct {
	name string
	text []byte
}

func partsOf(t testing.TB, file []byte) []onePart {
	var parts []onePart
	repacked(t, file, func(name string, text []byte) []byte {
		parts = append(parts, onePart{name, text})
		return text
	})
	return parts
}

// spliced puts a text into one part in the place of so many bytes, which a
// fuzzer could not reach through the compression.
func spliced(t testing.TB, parts []onePart, part, place, drop int, text []byte) []byte {
	var b bytes.Buffer
	out := zip.NewWriter(&b)
	for i, p := range parts {
		whole := p.text
		if i == part {
			from := min(place, len(whole))
			to := min(from+drop, len(whole))
			whole = slices.Concat(whole[:from], text, whole[to:])
		}
		w, err := out.CreateHeader(&zip.FileHeader{Name: p.name, Method: zip.Store})
		if err == nil {
			_, err = w.Write(whole)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := out.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}
