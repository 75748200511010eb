package workbook

import (
	"flag"
	"image"
	"image/draw"
	"image/png"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

var (
	pictureOf = flag.String("xlsx", "", "workbook whose test sheet TestPicture draws; the sample, filled in, where empty")
	pictureTo = flag.String("png", "", "file TestPicture draws to")
)

// TestPicture draws the first page of a workbook's test sheet:
//
//	go test ./export/workbook -run TestPicture -args -xlsx plan.xlsx -png test-sheet.png
//
// Without -png it draws the sample and looks whether there is something on it.
func TestPicture(t *testing.T) {
	if testing.Short() && *pictureTo == "" {
		t.Skip("takes a few seconds")
	}
	if _, err := exec.LookPath("pdftoppm"); err != nil {
		t.Skip("pdftoppm (poppler) is not installed: no picture drawn")
	}
	file := *pictureOf
	if file == "" {
		p := sample(10)
		file = saved(t, p)
		fill(t, file, p, pictureReadings)
	}
	shot := testSheetPage(t, file)
	if b := shot.Bounds(); b.Dx() < 1000 || b.Dy() < 400 {
		t.Errorf("the picture is %v: cut too far, or the page is empty", b.Size())
	}
	if *pictureTo == "" {
		return
	}
	w, err := os.Create(*pictureTo)
	if err != nil {
		t.Fatal(err)
	}
	if err := png.Encode(w, shot); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
}

// pictureReadings are ten units, some of them in trouble.
func pictureReadings(r benchRow, unit int) any {
	switch {
	case unit == 3 && r.step == 5:
		return 412.5
	case unit == 7 && r.step == 6:
		return 301.2
	case unit == 6 && r.step == 14:
		return 0.8
	case unit == 9 && r.step > 8 || unit == 10:
		return nil
	}
	return typical(r, unit)
}

// testSheetPage renders the first page that has the test sheet's headings, without the
// white around it.
func testSheetPage(t *testing.T, file string) image.Image {
	t.Helper()
	folder := office(t, file, "pdf", true)
	made, _ := filepath.Glob(filepath.Join(folder, "*.pdf"))
	if len(made) != 1 {
		t.Fatalf("LibreOffice made %d PDF files", len(made))
	}
	for page := 1; page < 100; page++ {
		n := strconv.Itoa(page)
		text, err := exec.Command("pdftotext", "-f", n, "-l", n, made[0], "-").Output()
		if err != nil {
			t.Fatalf("page %d: %v", page, err)
		}
		if !strings.Contains(string(text), "Hold the probe at") || !strings.Contains(string(text), "Verdict") {
			continue
		}
		to := filepath.Join(folder, "page")
		if out, err := exec.Command("pdftoppm", "-r", "150", "-f", n, "-l", n, "-singlefile", "-png", made[0], to).CombinedOutput(); err != nil {
			t.Fatalf("pdftoppm: %v\n%s", err, out)
		}
		r, err := os.Open(to + ".png")
		if err != nil {
			t.Fatal(err)
		}
		defer r.Close()
		whole, err := png.Decode(r)
		if err != nil {
			t.Fatal(err)
		}
		return cropped(whole, 24)
	}
	t.Fatal("no page has a test sheet")
	return nil
}

// cropped cuts off the white around a page and its footer, but for a margin.
func cropped(page image.Image, margin int) image.Image {
	b := page.Bounds()
	b.Max.Y -= b.Dy() / 16 // the footer
	ink := image.Rectangle{}
	for y := b.Min.Y; y < b.Max.Y; y++ {
		for x := b.Min.X; x < b.Max.X; x++ {
			if r, g, b, _ := page.At(x, y).RGBA(); r+g+b < 3*0xf000 {
				ink = ink.Union(image.Rect(x, y, x+1, y+1))
			}
		}
	}
	ink = ink.Inset(-margin).Intersect(page.Bounds())
	out := image.NewRGBA(image.Rect(0, 0, ink.Dx(), ink.Dy()))
	draw.Draw(out, out.Bounds(), page, ink.Min, draw.Src)
	return out
}
