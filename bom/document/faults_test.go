package document

import (
	"strings"
	"testing"

	"batchwright/bom/quantity"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// tree reads a document that must be without fault.
func tree(t *testing.T, text string) *Node {
	t.Helper()
	n, complaints := Parse("lamp.yaml", []byte(text))
	if complaints != nil {
		t.Fatal(complaints.Error())
	}
	return n
}

// Every reader of Faults, with what it complains of: the text is one line, the
// value at key "a".
func TestReaders(t *testing.T) {
	families := []string{"c0g", "polyester", "polystyrene"}
	for _, c := range []struct {
		reason, text string
		read         func(f *Faults, n *Node) bool
		want         string
	}{
		{"a word", "a: c0g", func(f *Faults, n *Node) bool {
			w, ok := f.Word(n, "a capacitor family", families...)
			return ok && w == "c0g"
		}, ""},
		{"an unknown word", "a: cog", func(f *Faults, n *Node) bool { _, ok := f.Word(n, "a capacitor family", families...); return ok },
			`lamp.yaml:1:4: unknown capacitor family: found "cog", expected a capacitor family; nearest: c0g`},
		{"a word of any kind", "a: anything", func(f *Faults, n *Node) bool { _, ok := f.Word(n, "a title"); return ok }, ""},
		{"an empty word", `a: ""`, func(f *Faults, n *Node) bool { _, ok := f.Word(n, "a title"); return ok }, "lamp.yaml:1:4: an empty word: expected a title"},
		{"a list for a word", "a: [b]", func(f *Faults, n *Node) bool { _, ok := f.Word(n, "a title"); return ok }, "lamp.yaml:1:4: a list where a value belongs"},
		{"nothing for a word", "a:", func(f *Faults, n *Node) bool { _, ok := f.Word(n, "a title"); return ok }, "lamp.yaml:1:3: nothing where a value belongs"},
		{"a quantity", "a: 4k7", func(f *Faults, n *Node) bool { q, ok := f.Quantity(n, quantity.Ohm); return ok && q.Value == 4700 }, ""},
		{"a bare number", "a: 240", func(f *Faults, n *Node) bool { _, ok := f.Quantity(n, quantity.Ohm); return ok },
			`lamp.yaml:1:4: a number without a unit: found "240", expected a resistance: 240R or 240 Ω`},
		{"a mapping for a quantity", "a: {b: c}", func(f *Faults, n *Node) bool { _, ok := f.Quantity(n, quantity.Ohm); return ok }, "lamp.yaml:1:4: a mapping where a value belongs"},
		{"a range", "a: 4..34 pF", func(f *Faults, n *Node) bool {
			_, high, ok := f.Range(n, quantity.Farad)
			return ok && high.Value == 34e-12
		}, ""},
		{"a range backwards", "a: 34..4 pF", func(f *Faults, n *Node) bool { _, _, ok := f.Range(n, quantity.Farad); return ok },
			`lamp.yaml:1:4: the range runs backwards: found "34..4 pF", expected a range of capacitance, such as 0..220 pF`},
		{"a whole number", "a: 24", func(f *Faults, n *Node) bool { v, ok := f.Whole(n, 1, 1000); return ok && v == 24 }, ""},
		{"the least", "a: 1", func(f *Faults, n *Node) bool { _, ok := f.Whole(n, 1, 1000); return ok }, ""},
		{"the greatest", "a: 1000", func(f *Faults, n *Node) bool { _, ok := f.Whole(n, 1, 1000); return ok }, ""},
		{"too few", "a: 0", func(f *Faults, n *Node) bool { _, ok := f.Whole(n, 1, 1000); return ok }, `lamp.yaml:1:4: out of range: found "0", expected a whole number from 1 to 1000`},
		{"too many", "a: 1001", func(f *Faults, n *Node) bool { _, ok := f.Whole(n, 1, 1000); return ok }, `lamp.yaml:1:4: out of range: found "1001", expected a whole number from 1 to 1000`},
		{"more than fits", "a: 99999999999999999999", func(f *Faults, n *Node) bool { _, ok := f.Whole(n, 1, 1000); return ok },
			`lamp.yaml:1:4: out of range: found "99999999999999999999", expected a whole number from 1 to 1000`},
		{"no whole number", "a: 2.5", func(f *Faults, n *Node) bool { _, ok := f.Whole(n, 1, 1000); return ok }, `lamp.yaml:1:4: no whole number: found "2.5", expected a whole number from 1 to 1000`},
		{"keys", "a: {value: 1, family: 2}", func(f *Faults, n *Node) bool { return f.Keys(n, "value", "family", "ref") }, ""},
		{"an unknown key", "a: {valeu: 1}", func(f *Faults, n *Node) bool { return !f.Keys(n, "value", "ref") }, `lamp.yaml:1:5: unknown key: found "valeu", expected one of value, ref; nearest: value`},
		{"a list for a mapping", "a: [b]", func(f *Faults, n *Node) bool { return f.Keys(n, "value") }, "lamp.yaml:1:4: a list where a mapping belongs"},
		{"a value for a mapping", "a: b", func(f *Faults, n *Node) bool { return f.Mapping(n) }, `lamp.yaml:1:4: a value where a mapping belongs: found "b"`},
		{"items", "a: [b, c]", func(f *Faults, n *Node) bool { items, ok := f.Items(n); return ok && len(items) == 2 }, ""},
		{"one item", "a: b", func(f *Faults, n *Node) bool { items, ok := f.Items(n); return ok && len(items) == 1 && items[0] == n }, ""},
		{"a mapping for a list", "a: {b: c}", func(f *Faults, n *Node) bool { _, ok := f.Items(n); return ok }, "lamp.yaml:1:4: a mapping where a list belongs"},
		{"text", "a: 'b c'", func(f *Faults, n *Node) bool { s, ok := f.Text(n); return ok && s == "b c" }, ""},
		{"a key that is there", "a: {b: c}", func(f *Faults, n *Node) bool { return f.Need(n, "b", "a thing").Value == "c" }, ""},
		{"a key that is missing", "a: {b: c}", func(f *Faults, n *Node) bool { return f.Need(n, "d", "a thing") != nil }, "lamp.yaml:1:4: d is missing: expected a thing"},
		{"a key of nothing", "a: {b: }", func(f *Faults, n *Node) bool { return f.Need(n, "b", "a thing") != nil }, "lamp.yaml:1:4: b is missing: expected a thing"},
	} {
		t.Run(c.reason, func(t *testing.T) {
			var f Faults
			ok := c.read(&f, tree(t, c.text).Get("a"))
			if got := f.List().Error(); got != c.want {
				t.Errorf("%s\nwant %s", got, c.want)
			}
			if unknownKey := strings.Contains(c.want, "unknown key"); ok != (c.want == "") && !(unknownKey && !ok) {
				t.Errorf("reported %v", ok)
			}
		})
	}
}

// A key that was not written is no one's fault here.
func TestReadersOfNothing(t *testing.T) {
	var f Faults
	_, word := f.Word(nil, "a thing")
	_, whole := f.Whole(nil, 0, 1)
	_, q := f.Quantity(nil, quantity.Ohm)
	_, _, r := f.Range(nil, quantity.Ohm)
	_, items := f.Items(nil)
	if word || whole || q || r || items || f.Keys(nil) || f.Need(nil, "a", "b") != nil || f.List() != nil {
		t.Errorf("a nil node is not silent: %v", f.List())
	}
	var none *Node
	if none.Get("a") != nil || tree(t, "a: 1").Get("b") != nil {
		t.Error("Get finds what is not there")
	}
}

// The place of a mistake inside a scalar, counted by hand.
func TestAddAt(t *testing.T) {
	for _, c := range []struct {
		reason, text string
		offset       int
		line, column int
	}{
		{"plain", "a: x + yy", 4, 1, 8},
		{"behind a wide character", "a: µ + yy", 4, 1, 8},
		{"double quotes", `a: "x + yy"`, 4, 1, 9},
		{"single quotes", `a: 'x + yy'`, 4, 1, 9},
		{"a block's first line", "a: |\n  x + yy\n", 4, 2, 7},
		{"a block's second line", "a: |\n  x = 1\n  y = zz\n", 10, 3, 7},
		{"a block's line of deeper indentation", "a: |\n  x = 1\n    y = zz\n", 12, 3, 9},
		{"behind a blank line", "a: |\n  x = 1\n\n  y\n", 7, 4, 3},
		{"a block with blanks of its own", "a: |2\n    x\n", 2, 2, 5},
		{"a block behind wide characters", "a: |\n    Ω = µ + y\n", 8, 2, 13},
		{"a nested block", "b:\n  a: |\n    x = 1\n    y\n", 6, 4, 5},
		{"beyond the end", "a: xy", 2, 1, 6},
	} {
		t.Run(c.reason, func(t *testing.T) {
			n := tree(t, c.text)
			if n = n.Get("a"); n == nil {
				n = tree(t, c.text).Get("b").Get("a")
			}
			var f Faults
			f.AddAt(n, c.offset, Complaint{Message: "wrong", Found: "y"})
			want := Complaints{{File: "lamp.yaml", Line: c.line, Column: c.column, Message: "wrong", Found: "y"}}
			if diff := cmp.Diff(want, f.List()); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestListIsSortedAndOnce(t *testing.T) {
	at := func(file string, line, column int, message string) Complaint {
		return Complaint{File: file, Line: line, Column: column, Message: message}
	}
	var f Faults
	f.AddAll(Complaints{at("b", 1, 1, "x"), at("a", 2, 1, "x"), at("a", 1, 2, "x"), at("a", 1, 2, "w"), at("a", 2, 1, "x"), at("a", 0, 0, "z"), at("a", 1, 1, "y")})
	want := "a: z\na:1:1: y\na:1:2: w\na:1:2: x\na:2:1: x\nb:1:1: x"
	if got := f.List().Error(); got != want {
		t.Errorf("%s\nwant %s", got, want)
	}
	if len(f.found) != 7 || f.found[0].File != "b" {
		t.Error("List rearranges what was collected")
	}
}

func TestComplaintText(t *testing.T) {
	for _, c := range []struct {
		reason string
		c      Complaint
		want   string
	}{
		{"in full", Complaint{"lamp.yaml", 12, 15, "unknown family", "cog", "a capacitor family", "c0g"}, `lamp.yaml:12:15: unknown family: found "cog", expected a capacitor family; nearest: c0g`},
		{"the whole file", Complaint{File: "f", Message: "the file is too large"}, "f: the file is too large"},
		{"no file", Complaint{Message: "m", Found: "x"}, `m: found "x"`},
		{"expected alone", Complaint{File: "f", Line: 1, Column: 2, Message: "m", Expected: "e"}, "f:1:2: m: expected e"},
		{"terminal controls are escaped", Complaint{Message: "m", Found: "\x1b[2J"}, `m: found "\x1b[2J"`},
		{"letters are not", Complaint{Message: "m", Found: "µ Ω"}, `m: found "µ Ω"`},
		{"long text is cut", Complaint{Message: "m", Found: strings.Repeat("é", 61)}, `m: found "` + strings.Repeat("é", 60) + `…"`},
		{"text that just fits is not", Complaint{Message: "m", Found: strings.Repeat("é", 60)}, `m: found "` + strings.Repeat("é", 60) + `"`},
	} {
		if got := c.c.Error(); got != c.want {
			t.Errorf("%s: %s\nwant %s", c.reason, got, c.want)
		}
	}
}

func TestNearest(t *testing.T) {
	families := []string{"c0g", "polyester", "polystyrene", "polypropylene", "carbon-film", "metal-film", "x7r"}
	for _, c := range []struct{ word, want, reason string }{
		{"cog", "c0g", "one edit of three letters"},
		{"C0G", "c0g", "another case"},
		{"polyestre", "polyester", "two letters swapped are two edits"},
		{"polystyren", "polystyrene", "nearer than polyester"},
		{"metalfilm", "metal-film", "a hyphen left out"},
		{"x7", "x7r", "one edit is allowed to two letters"},
		{"c", "", "none to one letter"},
		{"zzz", "", "nothing is close"},
		{"", "", "nothing"},
		{"x7r", "x7r", "the word itself"},
		{strings.Repeat("c0g", 30), "", "far too long"},
	} {
		if got := Nearest(c.word, families); got != c.want {
			t.Errorf("Nearest(%q) = %q, want %q: %s", c.word, got, c.want, c.reason)
		}
	}
	if got := Nearest("ab", []string{"ax", "ay"}); got != "ax" {
		t.Errorf("of words equally close the first: %q", got)
	}
	long := strings.Repeat("c", 64)
	if got := Nearest(long, []string{long[1:]}); got != long[1:] {
		t.Errorf("of the longest word: %q", got)
	}
	if got := Nearest(long+"c", []string{long}); got != "" {
		t.Errorf("of a longer one: %q", got)
	}
	if got := Nearest("ab", nil); got != "" {
		t.Errorf("of no words: %q", got)
	}
}

// A document written from a tree of plain words comes back as that tree, with
// every place the one it was written at.
func TestFlowStyleReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var text strings.Builder
		column := 1
		write := func(s string) int {
			start := column
			text.WriteString(s)
			column += len([]rune(s))
			return start
		}
		word := rapid.StringMatching(`[a-zµΩé][a-z0-9µΩé]{0,6}`)
		var draw func(depth int) *Node
		draw = func(depth int) *Node {
			n := &Node{Kind: Scalar, File: "f", Line: 1}
			if depth < 4 {
				n.Kind = rapid.SampledFrom([]Kind{Scalar, Mapping, Sequence}).Draw(t, "kind")
			}
			switch n.Kind {
			case Scalar:
				n.Value = "v" + word.Draw(t, "word")
				n.Column = write(n.Value)
			case Sequence:
				n.Column = write("[")
				for i := range rapid.IntRange(0, 3).Draw(t, "items") {
					if i > 0 {
						write(rapid.SampledFrom([]string{", ", ",  "}).Draw(t, "gap"))
					}
					n.Items = append(n.Items, draw(depth+1))
				}
				write("]")
			case Mapping:
				n.Column = write("{")
				for i := range rapid.IntRange(0, 3).Draw(t, "pairs") {
					if i > 0 {
						write(", ")
					}
					key := &Node{Kind: Scalar, Value: string(rune('a'+i)) + word.Draw(t, "key"), File: "f", Line: 1}
					key.Column = write(key.Value)
					write(": ")
					n.Pairs = append(n.Pairs, Pair{key, draw(depth + 1)})
				}
				write("}")
			}
			return n
		}
		want := draw(0)
		got, complaints := Parse("f", []byte(text.String()))
		if complaints != nil {
			t.Fatalf("%s\n%s", text.String(), complaints.Error())
		}
		if diff := cmp.Diff(outline(want), outline(got)); diff != "" {
			t.Fatalf("%s\n%s", text.String(), diff)
		}
	})
}
