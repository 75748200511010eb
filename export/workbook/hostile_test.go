package workbook

import (
	"encoding/xml"
	"errors"
	"io"
	"math"
	"reflect"
	"strings"
	"testing"
	"unicode/utf16"

	"batchwright/tolerance/spread"

	"github.com/google/go-cmp/cmp"
)

func TestClean(t *testing.T) {
	for _, c := range []struct{ name, in, want string }{
		{"plain", "4.7 kΩ ±1 %", "4.7 kΩ ±1 %"},
		{"a formula is only text", `=HYPERLINK("http://x")`, `=HYPERLINK("http://x")`},
		{"lines become one", "a\r\nb\tc", "a  b c"},
		{"control characters go", "a\x00b\x1b[31mc\x7f", "ab[31mc"},
		{"broken UTF-8", "a\xffb", "a\ufffdb"},
		{"turned direction", "abc\u202egpj.exe\u2066", "abcgpj.exe"},
		{"no character at all", "a\ufffeb", "ab"},
		{"only blanks", " \n ", ""},
	} {
		if got := clean(c.in); got != c.want {
			t.Errorf("%s: %q, want %q", c.name, got, c.want)
		}
	}
	if got := utf16.Encode([]rune(clean(strings.Repeat("𝄞", 40000)))); len(got) > longest+1 {
		t.Errorf("a long text keeps %d units", len(got))
	}
}

// poison puts s into every text of v, whatever v is made of.
func poison(v reflect.Value, s string) {
	switch v.Kind() {
	case reflect.String:
		if v.Type() == reflect.TypeFor[string]() {
			v.SetString(s)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			poison(v.Field(i), s)
		}
	case reflect.Slice:
		for i := range v.Len() {
			poison(v.Index(i), s)
		}
	case reflect.Pointer:
		if !v.IsNil() {
			poison(v.Elem(), s)
		}
	}
}

// Whatever stands in the texts, the file is well-formed XML and its formulas
// are those of the harmless plan.
func TestHostileTexts(t *testing.T) {
	harmless := sample(2)
	harmless.Trade = sampleTrade()
	_, clean := parts(t, written(t, harmless))
	for _, c := range []struct{ name, s string }{
		{"formula", `=cmd|'/c calc'!A1`}, {"quotes", `'"'; "")&A1`}, {"controls", "\x00\x01\x1b\x7f\x9b"}, {"markup", `</t></is></c><c r="A1"><f>1+1</f>`},
		{"escape", "_x0041_&amp;&#0;"}, {"broken", "\xff\xfe\xc0\x80"}, {"long", strings.Repeat("a ", 40000)}, {"one word", strings.Repeat("W", 5000)},
		{"print codes", "&P &N &\"Arial\"&72 &&"}, {"empty", ""}, {"other scripts", "اختبار 试验 𝄞"},
	} {
		t.Run(c.name, func(t *testing.T) {
			p := sample(2)
			p.Trade = sampleTrade()
			poison(reflect.ValueOf(&p).Elem(), c.s)
			p.Advice = map[string]string{c.s: c.s}
			_, text := parts(t, written(t, p))
			for name, s := range text {
				if err := wellFormed(s); err != nil && strings.HasSuffix(name, ".xml") {
					t.Errorf("%s: %v", name, err)
				}
			}
			for _, sheet := range []string{"xl/worksheets/sheet1.xml", "xl/worksheets/sheet2.xml"} {
				if got, want := strings.Count(text[sheet], "<f>"), strings.Count(clean[sheet], "<f>"); got != want {
					t.Errorf("%s has %d formulas, the harmless plan %d", sheet, got, want)
				}
			}
			if i := strings.Index(text["xl/worksheets/sheet5.xml"], "calc'!"); i >= 0 && strings.Contains(text["xl/worksheets/sheet5.xml"][max(0, i-30):i], "<f>") {
				t.Error("a text became a formula")
			}
		})
	}
}

func wellFormed(s string) error {
	d := xml.NewDecoder(strings.NewReader(s))
	for {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			return nil
		} else if err != nil {
			return err
		}
	}
}

// spoil makes every figure of v NaN.
func spoil(v reflect.Value) {
	switch v.Kind() {
	case reflect.Float64:
		v.SetFloat(math.NaN())
	case reflect.Struct:
		for i := range v.NumField() {
			spoil(v.Field(i))
		}
	case reflect.Slice, reflect.Array:
		for i := range v.Len() {
			spoil(v.Index(i))
		}
	case reflect.Pointer:
		if !v.IsNil() {
			spoil(v.Elem())
		}
	}
}

// Figures that do not exist become blanks or dashes, never "NaN" or an error,
// and the test sheet says why.
func TestNoFigures(t *testing.T) {
	p := sample(2)
	p.Trade = sampleTrade()
	spoil(reflect.ValueOf(&p).Elem())
	for i := range p.Readings {
		p.Readings[i].Why = ""
	}
	path := saved(t, p)
	f := reopen(t, path)
	for _, sheet := range f.GetSheetList() {
		rows, err := f.GetRows(sheet)
		if err != nil {
			t.Fatal(err)
		}
		for r, row := range rows {
			for c, v := range row {
				if strings.Contains(v, "NaN") || strings.Contains(v, "Inf") {
					t.Errorf("%s %s shows %q", sheet, at(c+1, r+1), v)
				}
			}
		}
	}
	got := cell(t, f, testSheet, "F12")
	notes, _ := f.SearchSheet(testSheet, "Steps 1–3, 5, 6, 8, 10–14: No nominal reading exists here. No limits could be worked out: write the reading down for the record.")
	if d := cmp.Diff([]any{"", 1}, []any{got, len(notes)}); d != "" {
		t.Errorf("nominal of step 1, notes that explain it (-want +got):\n%s", d)
	}
}

// Nothing but a title and a unit is still a workbook.
func TestEmptyPlan(t *testing.T) {
	f := reopen(t, saved(t, Plan{Units: 1}))
	for sheet, want := range map[string]string{buySheet: "There is nothing to buy.", stagesSheet: "No part is placed in this build.", trimsSheet: "This build has nothing to adjust.",
		testSheet: "There is nothing to measure in this build.", tolerancesSheet: "No output was analysed.", driftSheet: "No drift was worked out.", summarySheet: "The build names no target: nothing was judged."} {
		if found, err := f.SearchSheet(sheet, want); len(found) != 1 || err != nil {
			t.Errorf("%s does not say %q", sheet, want)
		}
	}
}

// A target that the instrument cannot prove is left open, with the reason.
func TestAcceptTakenUpByUncertainty(t *testing.T) {
	r := sampleReadings()[9]
	none := limits(3000, 2000)
	r.Accept = &none
	got := readingRow(r)
	if finite(got.acceptLow) || finite(got.acceptHigh) || !strings.Contains(got.why, "No reading can prove the target") {
		t.Errorf("accept %v to %v, why %q", got.acceptLow, got.acceptHigh, got.why)
	}
	oneSided := spread.Limits{Low: 1000, High: spread.Figure(math.NaN())}
	r.Accept = &oneSided
	if got := readingRow(r); got.acceptLow != 1 || finite(got.acceptHigh) {
		t.Errorf("one-sided target: %v to %v", got.acceptLow, got.acceptHigh)
	}
}
