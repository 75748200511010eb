package document

import (
	"fmt"
	"strings"
	"testing"
	"time"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"
)

// outline prints a tree in one line with the place of every node:
// "1:1{a@1:1=1:4'x'}".
func outline(n *Node) string {
	place := fmt.Sprintf("%d:%d", n.Line, n.Column)
	switch n.Kind {
	case Mapping:
		var pairs []string
		for _, p := range n.Pairs {
			pairs = append(pairs, fmt.Sprintf("%s@%d:%d=%s", p.Key.Value, p.Key.Line, p.Key.Column, outline(p.Value)))
		}
		return place + "{" + strings.Join(pairs, " ") + "}"
	case Sequence:
		var items []string
		for _, item := range n.Items {
			items = append(items, outline(item))
		}
		return place + "[" + strings.Join(items, " ") + "]"
	case Null:
		return place + "~" + n.Value
	}
	return place + "'" + n.Value + "'"
}

// The places are counted by hand in the text beside them.
func TestPositions(t *testing.T) {
	for _, c := range []struct{ reason, text, want string }{
		{"block mapping", "build: Tone box\nunits: 24\n", "1:1{build@1:1=1:8'Tone box' units@2:1=2:8'24'}"},
		{"blanks before a value", "a:    x\n", "1:1{a@1:1=1:7'x'}"},
		{"blanks before the colon", "a   : x\n", "1:1{a@1:1=1:7'x'}"},
		{"nested block", "a:\n  b:\n    c: d\n  e: f\n", "1:1{a@1:1=2:3{b@2:3=3:5{c@3:5=3:8'd'} e@4:3=4:6'f'}}"},
		{"flow mapping", "a: {b: c, d: e}\n", "1:1{a@1:1=1:4{b@1:5=1:8'c' d@1:11=1:14'e'}}"},
		{"flow over lines", "a: {b: c,\n    d: e}\n", "1:1{a@1:1=1:4{b@1:5=1:8'c' d@2:5=2:8'e'}}"},
		{"flow list", "a: [x, [y,z], {k: v}]\n", "1:1{a@1:1=1:4[1:5'x' 1:8[1:9'y' 1:11'z'] 1:15{k@1:16=1:19'v'}]}"},
		{"block list", "a:\n  - x\n  -   y\n", "1:1{a@1:1=2:3[2:5'x' 3:7'y']}"},
		{"list of mappings", "- a: 1\n  b: 2\n- {c: 3}\n", "1:1[1:3{a@1:3=1:6'1' b@2:3=2:6'2'} 3:3{c@3:4=3:7'3'}]"},
		{"list in list", "- - a\n  - b\n", "1:1[1:3[1:5'a' 2:5'b']]"},
		{"columns in characters, not bytes", "a: {µ: 5 Ω, µµ: x}\n", "1:1{a@1:1=1:4{µ@1:5=1:8'5 Ω' µµ@1:13=1:17'x'}}"},
		{"behind characters beyond the basic plane", "a: {𝛺: 𝛺, b: c}\n", "1:1{a@1:1=1:4{𝛺@1:5=1:8'𝛺' b@1:11=1:14'c'}}"},
		{"quoted", "a: \"b c\"\nd: 'e f'\n", "1:1{a@1:1=1:4'b c' d@2:1=2:4'e f'}"},
		{"quoted in flow", "[\"a\", 'b', c]\n", "1:1[1:2'a' 1:7'b' 1:12'c']"},
		{"quoted keys", "\"a b\": c\n'd e':   f\n", "1:1{a b@1:1=1:8'c' d e@2:1=2:10'f'}"},
		{"key of flow in quotes", "{\"a\": b, 'c': d}\n", "1:1{a@1:2=1:7'b' c@1:10=1:15'd'}"},
		{"comments", "# first\na: b # second\n# third\nc: d\n", "2:1{a@2:1=2:4'b' c@4:1=4:4'd'}"},
		{"carriage returns and line feeds", "a: b\r\nc: d\r\ne:\r\n  - f\r\n", "1:1{a@1:1=1:4'b' c@2:1=2:4'd' e@3:1=4:3[4:5'f']}"},
		{"carriage returns alone", "a: b\rc: d\r", "1:1{a@1:1=1:4'b' c@2:1=2:4'd'}"},
		{"byte order mark", "\uFEFFa: b\n", "1:1{a@1:1=1:4'b'}"},
		{"empty values", "a:\nb: ~\nc: null\n", "1:1{a@1:1=1:3~ b@2:1=2:4~~ c@3:1=3:4~null}"},
		{"empty values at the end", "a:", "1:1{a@1:1=1:3~}"},
		{"empty values of a list", "-\n- a\n-", "1:1[1:2~ 2:3'a' 3:2~]"},
		{"empty values in flow", "[a, {b: , c: }]", "1:1[1:2'a' 1:5{b@1:6=1:8~ c@1:11=1:13~}]"},
		{"empty brackets", "a: []\nb: {}\n", "1:1{a@1:1=1:4[] b@2:1=2:4{}}"},
		{"numbers stay text", "[1_000, 0x1F, 1e3, 007, .5, 5., true, no, .inf, .nan, 2026-01-01, 1:30]", "1:1[1:2'1_000' 1:9'0x1F' 1:15'1e3' 1:20'007' 1:25'.5' 1:29'5.' 1:33'true' 1:39'no' 1:43'.inf' 1:49'.nan' 1:55'2026-01-01' 1:67'1:30']"},
		{"quantities", "a: 5 %\nb: ±5 %\nc: -12 V\nd: 4..34 pF\ne: 23 °C\n", "1:1{a@1:1=1:4'5 %' b@2:1=2:4'±5 %' c@3:1=3:4'-12 V' d@4:1=4:4'4..34 pF' e@5:1=5:4'23 °C'}"},
		{"a law", "temperature_law: [[-55, -15 %], [25, 0 %]]\n", "1:1{temperature_law@1:1=1:18[1:19[1:20'-55' 1:25'-15 %'] 1:33[1:34'25' 1:38'0 %']]}"},
		{"two words as a key", "cool hall: {temperature: 13 °C}\nswitch on: {warmup: 0}\n", "1:1{cool hall@1:1=1:12{temperature@1:13=1:26'13 °C'} switch on@2:1=2:12{warmup@2:13=2:21'0'}}"},
		{"block of text", "a: |\n  x = 1\n    y\n\n  z\nb: c\n", "1:1{a@1:1=1:4'x = 1\n  y\n\nz\n' b@6:1=6:4'c'}"},
		{"folded text", "a: >\n  x\n  y\nb: c\n", "1:1{a@1:1=1:4'x y\n' b@4:1=4:4'c'}"},
		{"plain over lines", "a:\n  x\n  y\nb: c\n", "1:1{a@1:1=2:3'x y' b@4:1=4:4'c'}"},
		{"explicit key", "? a\n: b\n", "1:1{a@1:3=2:3'b'}"},
		{"null and true as keys", "null: a\ntrue: b\n5: c\n", "1:1{null@1:1=1:7'a' true@2:1=2:7'b' 5@3:1=3:4'c'}"},
		{"a header", "---\na: b\n...\n", "2:1{a@2:1=2:4'b'}"},
		{"a directive", "%YAML 1.2\n---\na: b\n", "3:1{a@3:1=3:4'b'}"},
		{"a scalar document", "just text\n", "1:1'just text'"},
		{"an empty file", "", "1:1~"},
		{"blank lines only", "\n\n  \n", "1:1~"},
		{"comments only", "# nothing\n", "1:1~"},
		{"a header only", "---\n", "1:1~"},
		{"alias: the place of the anchor", "a: &x {b: c}\nd: *x\n", "1:1{a@1:1=1:7{b@1:8=1:11'c'} d@2:1=1:7{b@1:8=1:11'c'}}"},
		{"alias of a scalar", "a: &x 5 %\nd: [*x, *x]\n", "1:1{a@1:1=1:7'5 %' d@2:1=2:4[1:7'5 %' 1:7'5 %']}"},
		{"merge: own keys win", "a: &x {b: c, d: e}\nf: {<<: *x, d: g}\n", "1:1{a@1:1=1:7{b@1:8=1:11'c' d@1:14=1:17'e'} f@2:1=2:4{d@2:13=2:16'g' b@1:8=1:11'c'}}"},
		{"merge in block style", "a: &x {b: c}\nf:\n  <<: *x\n  h: i\n", "1:1{a@1:1=1:7{b@1:8=1:11'c'} f@2:1=3:3{h@4:3=4:6'i' b@1:8=1:11'c'}}"},
		{"merge of several: the first wins", "a: &x {b: 1}\nc: &y {b: 2, d: 3}\ne: {<<: [*x, *y]}\n", "1:1{a@1:1=1:7{b@1:8=1:11'1'} c@2:1=2:7{b@2:8=2:11'2' d@2:14=2:17'3'} e@3:1=3:4{b@1:8=1:11'1' d@2:14=2:17'3'}}"},
	} {
		t.Run(c.reason, func(t *testing.T) {
			n, complaints := Parse("f.yaml", []byte(c.text))
			if complaints != nil {
				t.Fatal(complaints.Error())
			}
			if diff := cmp.Diff(c.want, outline(n)); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestComplaints(t *testing.T) {
	for _, c := range []struct{ reason, text, want string }{
		{"a key twice", "a: 1\nb: 2\na: 3\n", `f.yaml:3:1: a key that is already there: found "a", expected each key once in a mapping`},
		{"a key twice in flow", "x: {µ: 1, µ: 2}\n", `f.yaml:1:11: a key that is already there: found "µ", expected each key once in a mapping`},
		{"every key that is twice", "a: 1\na: 2\na: 3\n", "f.yaml:2:1: a key that is already there: found \"a\", expected each key once in a mapping\nf.yaml:3:1: a key that is already there: found \"a\", expected each key once in a mapping"},
		{"a tab", "a:\n\tb: c\n", "f.yaml:2:1: a tab in the indentation: expected spaces"},
		{"a tab behind spaces", "a:\n  \tb: c\n", "f.yaml:2:3: a tab in the indentation: expected spaces"},
		{"no UTF-8", "a: b\nc: \xff\n", "f.yaml:2:4: not valid UTF-8: expected a file saved as UTF-8"},
		{"UTF-16", "\xff\xfea\x00:\x00", "f.yaml:1:1: not valid UTF-8: expected a file saved as UTF-8"},
		{"NUL", "a: b\x00c\n", `f.yaml:1:5: a control character: found "\x00", expected printable text`},
		{"escape", "a: \x1b[2J\n", `f.yaml:1:4: a control character: found "\x1b", expected printable text`},
		{"a control character of two bytes", "a: \u0085\n", `f.yaml:1:4: a control character: found "\u0085", expected printable text`},
		{"two documents", "a: 1\n---\nb: 2\n", "f.yaml:2:1: a second document in one file: expected one document a file"},
		{"two documents with headers", "---\na: 1\n---\nb: 2\n", "f.yaml:3:1: a second document in one file: expected one document a file"},
		{"a tag", "a: !!str 5\n", `f.yaml:1:4: a tag: found "!!str", expected a plain value; tags have no use here`},
		{"an alias without its anchor", "a: &coil x\nb: *cool\n", `f.yaml:2:4: an alias without its anchor: found "cool", expected *NAME after &NAME; nearest: coil`},
		{"a cycle", "a: &x [1, *x]\n", `f.yaml:1:11: an alias inside its own anchor: found "x", expected a value that does not contain itself`},
		{"a cycle through a mapping", "a: &x\n  b: {c: *x}\n", `f.yaml:2:10: an alias inside its own anchor: found "x", expected a value that does not contain itself`},
		{"a merge cycle", "a: &x {<<: *x}\n", `f.yaml:1:12: an alias inside its own anchor: found "x", expected a value that does not contain itself` + "\n" + `f.yaml:1:8: a merge of what is no mapping: found "<<", expected *NAME of a mapping, or a list of them`},
		{"a merge of a scalar", "<<: 5\n", `f.yaml:1:1: a merge of what is no mapping: found "<<", expected *NAME of a mapping, or a list of them`},
		{"a list not closed", "a: [1, 2\n", `f.yaml:1:4: not valid YAML: sequence end token ']' not found: found "[", expected its closing mark`},
		{"a quote not closed", "a: \"b\nc: d\n", `f.yaml:1:4: not valid YAML: could not find end character of double-quoted text: found "\"b", expected its closing mark`},
		{"a percent sign first", "a: 5 %\nb: % 5\n", `f.yaml:2:4: not valid YAML: unexpected directive value. document not started: found "%", expected quotes around a value that begins with %`},
		{"an at sign first", "a: @b\n", `f.yaml:1:4: not valid YAML: '@' is a reserved character: found "@", expected quotes around a value that begins with @`},
		{"a colon in a value", "a: b: c\n", `f.yaml:1:4: not valid YAML: mapping value is not allowed in this context: found "b", expected quotes around a value with a colon and a space in it`},
		{"a key that is a list", "? [a, b]\n: c\n", `f.yaml:2:1: not valid YAML: found an invalid key for this map: found ":"`},
	} {
		t.Run(c.reason, func(t *testing.T) {
			_, complaints := Parse("f.yaml", []byte(c.text))
			want := strings.Split(c.want, "\n")
			got := strings.Split(complaints.Error(), "\n")
			if diff := cmp.Diff(want, got, asSet); diff != "" {
				t.Error(diff)
			}
		})
	}
}

// asSet compares lines in any order; the order of complaints has its own test.
var asSet = cmp.Transformer("set", func(lines []string) map[string]int {
	set := map[string]int{}
	for _, l := range lines {
		set[l]++
	}
	return set
})

// quick fails the test unless a text is answered soon, with a complaint or a
// tree of limited size.
func quick(t *testing.T, text string) (*Node, Complaints) {
	t.Helper()
	start := time.Now()
	n, complaints := Parse("f.yaml", []byte(text))
	if spent := time.Since(start); spent > 20*time.Second {
		t.Errorf("took %v", spent)
	}
	for _, c := range complaints {
		if len(c.Error()) > 1000 {
			t.Errorf("a complaint of %d bytes", len(c.Error()))
		}
	}
	return n, complaints
}

// Files made to break a reader: every one is answered soon and with one
// complaint, at the place given where it matters.
func TestBombs(t *testing.T) {
	const mebi = 1 << 20
	fill := func(unit string) string { return strings.Repeat(unit, mebi/len(unit)) }
	indented := func(line string) string {
		var b strings.Builder
		for i := 0; b.Len()+i+len(line) < mebi; i++ {
			b.WriteString(strings.Repeat(" ", i) + line)
		}
		return b.String()
	}
	laughs := "a0: &a0 [x, x, x, x, x, x, x, x, x, x]\n"
	for i := 1; i < 20; i++ {
		laughs += fmt.Sprintf("a%d: &a%d [%s]\n", i, i, strings.TrimSuffix(strings.Repeat(fmt.Sprintf("*a%d, ", i-1), 10), ", "))
	}
	merged := "a0: &a0 {k: {x: 1, y: 2}}\n"
	for i := 1; i < 40; i++ {
		merged += fmt.Sprintf("a%d: &a%d {l%d: *a%d, m%d: *a%d, <<: *a%d}\n", i, i, i, i-1, i, i-1, i-1)
	}
	deep := "a0: &a0 x\n"
	for i := 1; i < 100; i++ {
		deep += fmt.Sprintf("a%d: &a%d [*a%d]\n", i, i, i-1)
	}
	for _, c := range []struct{ reason, text, message string }{
		{"50 MB", strings.Repeat("a: b\n", 10<<20), "the file is too large"},
		{"a byte over the limit", strings.Repeat("#", mebi+1), "the file is too large"},
		{"brackets", fill("["), "the file is too long"},
		{"ninety thousand brackets", strings.Repeat("[", 90000), "nested too deep"},
		{"braces", fill("{a: ")[:120000], "nested too deep"},
		{"brackets in pairs", fill("[{a: ")[:120000], "nested too deep"},
		{"dashes on a line", fill("- ")[:120000], "nested too deep"},
		{"dashes by indentation", indented("-\n"), "nested too deep"},
		{"keys by indentation", indented("a:\n"), "nested too deep"},
		{"question marks", fill("? ")[:120000], "too many anchors, tags or question marks in a row"},
		{"tags", "a: " + fill("!a ")[:120000], "too many anchors, tags or question marks in a row"},
		{"anchors", "a: " + fill("&a ")[:120000], "too many anchors, tags or question marks in a row"},
		{"billion laughs", laughs, "too many values in one document, its aliases written out"},
		{"laughs by merging", merged, "too many values in one document, its aliases written out"},
		{"depth by aliases", deep, "nested too deep when its aliases are written out"},
		{"more words than the budget", fill("- a\n"), "the file is too long"},
		{"more entries than the budget", strings.Repeat("- a\n", 6000), "too many entries in one block"},
		{"more keys than the budget", strings.Repeat("a: b\n", 6000), "too many entries in one block"},
		{"values left out", "{" + fill("a:,")[:60000], "not valid YAML: could not find flow map content"},
		{"blank lines in a block", "a: |\n" + fill(" \n")[:mebi-10], "too many blank lines in a row"},
		{"line feeds", fill("\n"), "too many blank lines in a row"},
		{"a quote without end", "a: \"" + fill("x\n")[:mebi-10], "not valid YAML: could not find end character of double-quoted text"},
		{"colons", fill("a: ")[:120000], "nested too deep"},
		{"documents", fill("--- a\n")[:120000], "a second document in one file"},
		{"percent signs", fill("%")[:90000], "not valid YAML: unexpected directive value. document not started"},
		{"commas", "[" + fill(",")[:90000], "not valid YAML: expected sequence element, but found ','"},
		{"NUL bytes", fill("\x00"), "a control character"},
		{"tabs", fill("\t") + "", ""},
	} {
		t.Run(c.reason, func(t *testing.T) {
			_, complaints := quick(t, c.text)
			if c.message == "" {
				return
			}
			if len(complaints) == 0 || !strings.HasPrefix(complaints[0].Message, c.message) {
				t.Fatalf("%v, want %q", complaints, c.message)
			}
			if len(complaints) > 1 {
				t.Errorf("%d complaints", len(complaints))
			}
		})
	}
}

// The greatest depth is read, one more is not; in every style.
func TestDepthLimit(t *testing.T) {
	flow := func(n int) string { return strings.Repeat("[", n) + strings.Repeat("]", n) }
	mapping := func(n int) string { return strings.Repeat("{a: ", n) + "1" + strings.Repeat("}", n) }
	block := func(n int) string {
		text := ""
		for i := range n {
			text += strings.Repeat(" ", i) + "a:\n"
		}
		return text + strings.Repeat(" ", n) + "- 1\n"
	}
	for _, c := range []struct {
		reason string
		text   func(int) string
		most   int
	}{{"lists", flow, 32}, {"flow mappings", mapping, 32}, {"block", block, 31}} {
		if _, complaints := Parse("f.yaml", []byte(c.text(c.most))); complaints != nil {
			t.Errorf("%s: %v", c.reason, complaints)
		}
		if _, complaints := Parse("f.yaml", []byte(c.text(c.most+1))); complaints == nil {
			t.Errorf("%s: a level more is read", c.reason)
		}
	}
}

// What just fits is read; a step more is refused.
func TestLimits(t *testing.T) {
	for _, c := range []struct {
		reason string
		text   func(int) string
		most   int
	}{
		{"bytes", func(n int) string { return strings.Repeat("#", n) }, 1 << 20},
		{"blank lines", func(n int) string { return "a: b\n" + strings.Repeat("\n", n) + "c: d" }, 100},
		{"entries of a list", func(n int) string { return strings.Repeat("- a\n", n) }, 5000},
		{"tags, question marks and anchors in a row", func(n int) string { return strings.Repeat("&a ", n) + "b" }, 1},
	} {
		if _, complaints := quick(t, c.text(c.most)); complaints != nil {
			t.Errorf("%s: %v", c.reason, complaints)
		}
		if _, complaints := quick(t, c.text(c.most+1)); complaints == nil {
			t.Errorf("%s: a step more is read", c.reason)
		}
	}
}

// A wide shallow file is read whole.
func TestLargeFile(t *testing.T) {
	var b strings.Builder
	const keys = 4500
	for i := range keys {
		fmt.Fprintf(&b, "key%d: {value: %d pF, tolerance: 5 %%}\n", i, i)
	}
	n, complaints := quick(t, b.String())
	if complaints != nil {
		t.Fatal(complaints.Error())
	}
	last := n.Get("key4499").Get("value")
	if len(n.Pairs) != keys || last.Value != "4499 pF" || last.Line != keys || last.Column != 18 {
		t.Errorf("%d pairs, %+v", len(n.Pairs), last)
	}
}

func FuzzParse(f *testing.F) {
	for _, seed := range []string{
		"build: Tone box\nunits: 24\nstages:\n  fixed: {kind: colpitts}\n", "a: &x [1, *x]", "{<<: *a}", "? a\n: b", "- - -", "a: |\n  x\n", "!!map {a: b}", "%YAML 1.2\n---\n", "a: 'b", "\uFEFFa: b", "a: >-\n\n  x\n y",
		"&a : b", "*a : b", "[a: b, c]", "{a, b}", "a:\n- b\n-", "\"\\x41\"", "--- |\n a", "a: !b\n", "<<: {a: b}", "- ? a\n  : b", "a: # c\n  b", "{? a : b}", "[? a]", "{: a}", "...", "&a", "!a", "|", ">", "? ", ": ",
	} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		n, complaints := Parse("f", text)
		if n == nil && len(complaints) == 0 {
			t.Fatal("neither a tree nor a complaint")
		}
		if n != nil {
			checkTree(t, n, strings.Count(string(text), "\n")+strings.Count(string(text), "\r")+1, 0)
			checkSpans(t, text, n)
		}
		for _, c := range complaints {
			if c.File != "f" || c.Message == "" || !utf8.ValidString(c.Error()) || c.Line < 0 || c.Line > 0 && c.Column < 1 {
				t.Errorf("%#v", c)
			}
		}
	})
}

// checkTree holds what every reader of a tree relies on.
func checkTree(t *testing.T, n *Node, lines, depth int) {
	if n == nil {
		t.Fatal("a nil node")
	}
	if n.Line < 1 || n.Column < 1 || n.Line > lines || depth > deepest+1 || n.File != "f" {
		t.Fatalf("line %d of %d, column %d, depth %d", n.Line, lines, n.Column, depth)
	}
	if n.Kind != Mapping && n.Pairs != nil || n.Kind != Sequence && n.Items != nil {
		t.Fatalf("%s with children", n.Kind)
	}
	seen := map[string]bool{}
	for _, p := range n.Pairs {
		if p.Key.Kind != Scalar || seen[p.Key.Value] {
			t.Fatalf("key %q", p.Key.Value)
		}
		seen[p.Key.Value] = true
		checkTree(t, p.Value, lines, depth+1)
	}
	for _, item := range n.Items {
		checkTree(t, item, lines, depth+1)
	}
}

// checkSpans reads what is written between brackets or quotes by itself: it is
// the same again. Anchors would be missing.
func checkSpans(t *testing.T, text []byte, n *Node) {
	own := n.Span.certain() && !strings.ContainsAny(string(text), "&*!")
	if own && (n.style == brackets && n.Kind != Scalar || n.Kind == Scalar && n.lead == 1 && !n.block) {
		alone, faults := Parse("f", text[n.Span.Start:n.Span.End])
		if len(faults) == 0 && plainOutline(alone) != plainOutline(n) {
			t.Fatalf("%q stands at %q, which is %s", plainOutline(n), text[n.Span.Start:n.Span.End], plainOutline(alone))
		}
	}
	for _, e := range n.entries {
		if own && e.certain() && !n.Span.holds(e.Span) {
			t.Fatalf("%v in %v", e.Span, n.Span)
		}
		checkSpans(t, text, e.value)
	}
}
