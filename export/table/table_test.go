package table

import (
	"encoding/csv"
	"errors"
	"io"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

var parts = Table{
	Title: "Order for 24 units",
	Head:  []string{"References", "Part", "Value", "Buy", "Price, EUR"},
	Rows: [][]string{
		{"C1–C4", "Polystyrene film", "220 pF", "110", "34.54"},
		{"L1, L2", "Drum choke", "1.80 mH", "53", "25.71"},
		{"U1", "JFET-input op-amp", "", "27"},
	},
	Notes: []string{"Demonstration prices, invented."},
}

func TestText(t *testing.T) {
	const want = `Order for 24 units
References  Part                 Value  Buy  Price, EUR
----------  -----------------  -------  ---  ----------
C1–C4       Polystyrene film    220 pF  110       34.54
L1, L2      Drum choke         1.80 mH   53       25.71
U1          JFET-input op-amp            27
Demonstration prices, invented.
`
	var b strings.Builder
	if err := parts.Text(&b); err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(want, b.String()); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
}

func TestTextParts(t *testing.T) {
	for _, c := range []struct {
		name string
		give Table
		want string
	}{
		{"nothing", Table{}, ""},
		{"title and note alone", Table{Title: "a", Notes: []string{"b"}}, "a\nb\n"},
		{"no rows", Table{Head: []string{"a", "bc"}}, "a  bc\n-  --\n"},
		{"control characters", Table{Title: "a\x1b[2Jb\nc\xff\u202e"}, "a[2Jb c?\n"},
	} {
		var b strings.Builder
		if err := c.give.Text(&b); err != nil {
			t.Fatal(err)
		}
		if b.String() != c.want {
			t.Errorf("%s: %q, want %q", c.name, b.String(), c.want)
		}
	}
}

func TestFigures(t *testing.T) {
	for _, c := range []struct {
		cells []string
		want  bool
	}{
		{[]string{"1", "-4.7 kΩ", "–", ""}, true}, {[]string{"±5 %", "< 0.1 %", "> 99.9 %"}, true}, {[]string{"1.3..2.2 kHz"}, true}, {[]string{"1e-12 F", "30 ppm/K", "24 000"}, true},
		{[]string{"R1"}, false}, {[]string{"4 of 5"}, false}, {[]string{"12", "none"}, false}, {[]string{"", "–"}, false}, {nil, false}, {[]string{"1N4148 or like"}, false},
	} {
		give := Table{Head: []string{"x"}}
		for _, s := range c.cells {
			give.Rows = append(give.Rows, []string{s})
		}
		if got := give.figures(0); got != c.want {
			t.Errorf("%q: figures %v, want %v", c.cells, got, c.want)
		}
	}
}

func TestCSV(t *testing.T) {
	give := Table{Title: "not written", Head: []string{"name", "value"}, Notes: []string{"nor this"}, Rows: [][]string{
		{"=1+1", "-12.0 V"}, {"@SUM(A1)", "+3"}, {"+cmd|' /C calc'!A0", "-2e-6"}, {"-", "-3-2"}, {"\tx", "\rx"}, {`a "b", c`, "−4"}, {"short"},
	}}
	const want = "name,value\n'=1+1,-12.0 V\n'@SUM(A1),+3\n'+cmd|' /C calc'!A0,-2e-6\n'-,'-3-2\n'\tx,\"'\rx\"\n\"a \"\"b\"\", c\",−4\nshort,\n"
	var b strings.Builder
	if err := give.CSV(&b); err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(want, b.String()); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
}

// Whatever the cells hold, every field comes back, and none begins like a
// formula unless it is a plain figure.
func TestCSVHolds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		cell := rapid.StringMatching(`[=+\-@\t]?[ -~]{0,12}`)
		give := Table{Head: []string{"a", "b"}, Rows: [][]string{{cell.Draw(t, "a"), "x" + cell.Draw(t, "b")}}}
		var b strings.Builder
		if err := give.CSV(&b); err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(strings.NewReader(b.String())).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		a := rows[1][0]
		if a != give.Rows[0][0] && a != "'"+give.Rows[0][0] || rows[1][1] != give.Rows[0][1] {
			t.Fatalf("%q came back as %q", give.Rows[0], rows[1])
		}
		if strings.IndexAny(a, "=+-@\t") == 0 && strings.ContainsAny(a, "()|!,") {
			t.Fatalf("%q could be run", a)
		}
	})
}

func TestJSON(t *testing.T) {
	type inner struct {
		Unit string             `json:"unit"`
		Q    map[string]float64 `json:"quantiles"`
	}
	var b strings.Builder
	if err := JSON(&b, inner{"kΩ <x>", map[string]float64{"0.5": 2, "0.005": 1}}); err != nil {
		t.Fatal(err)
	}
	const want = "{\n  \"unit\": \"kΩ <x>\",\n  \"quantiles\": {\n    \"0.005\": 1,\n    \"0.5\": 2\n  }\n}\n"
	if d := cmp.Diff(want, b.String()); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
	b.Reset()
	if err := JSON(&b, math.NaN()); err == nil || b.Len() > 0 {
		t.Errorf("NaN: error %v, %d bytes written", err, b.Len())
	}
}

type full struct{}

func (full) Write([]byte) (int, error) { return 0, io.ErrShortWrite }

func TestFailingWriter(t *testing.T) {
	for name, write := range map[string]func(io.Writer) error{"text": parts.Text, "csv": parts.CSV, "json": func(w io.Writer) error { return JSON(w, 1) }} {
		if err := write(full{}); !errors.Is(err, io.ErrShortWrite) {
			t.Errorf("%s: error %v", name, err)
		}
	}
}
