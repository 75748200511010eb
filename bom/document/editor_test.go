package document

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/goccy/go-yaml/lexer"
	"github.com/goccy/go-yaml/token"
	"github.com/google/go-cmp/cmp"
)

// spelled lists the texts that nodes stand at, in the order of the tree.
func spelled(text string, n *Node) []string {
	list := []string{"?"}
	if n.Span.certain() {
		list[0] = text[n.Span.Start:n.Span.End]
	}
	for _, p := range n.Pairs {
		list = append(list, spelled(text, p.Key)...)
		list = append(list, spelled(text, p.Value)...)
	}
	for _, item := range n.Items {
		list = append(list, spelled(text, item)...)
	}
	return list
}

// What each node's text is, read off by eye.
func TestSpans(t *testing.T) {
	for _, c := range []struct {
		reason, text string
		want         []string
	}{
		{"block mapping", "a: b c # d\ne:  f\n", []string{"a: b c # d\ne:  f", "a", "b c", "e", "f"}},
		{"nested block", "a:\n  b: c\n  d: e # f\n# g\nh: i\n", []string{"a:\n  b: c\n  d: e # f\n# g\nh: i", "a", "b: c\n  d: e", "b", "c", "d", "e", "h", "i"}},
		{"flow mapping", "a: {b: c , d: [e,f ] } # g\n", []string{"a: {b: c , d: [e,f ] }", "a", "{b: c , d: [e,f ] }", "b", "c", "d", "[e,f ]", "e", "f"}},
		{"flow over lines", "a: {b: c, # }\n  d: e,\n  # ]\n  }\nf: g", []string{"a: {b: c, # }\n  d: e,\n  # ]\n  }\nf: g", "a", "{b: c, # }\n  d: e,\n  # ]\n  }", "b", "c", "d", "e", "f", "g"}},
		{"empty brackets", "a: { }\nb: [ # c\n ]\n", []string{"a: { }\nb: [ # c\n ]", "a", "{ }", "b", "[ # c\n ]"}},
		{"quoted", `{"a}": "b\"}", 'c''}': 'd''}'}`, []string{`{"a}": "b\"}", 'c''}': 'd''}'}`, `"a}"`, `"b\"}"`, "'c''}'", "'d''}'"}},
		{"letters of more bytes", "µ: {Ω: 5 Ω, 𝛺: \"µ\"} # µ\n", []string{"µ: {Ω: 5 Ω, 𝛺: \"µ\"}", "µ", "{Ω: 5 Ω, 𝛺: \"µ\"}", "Ω", "5 Ω", "𝛺", `"µ"`}},
		{"carriage returns and line feeds", "a: b\r\nc:\r\n  - d\r\n", []string{"a: b\r\nc:\r\n  - d", "a", "b", "c", "- d", "d"}},
		{"carriage returns alone", "a: b\rc: {d: e,\r f: g}\r", []string{"a: b\rc: {d: e,\r f: g}", "a", "b", "c", "{d: e,\r f: g}", "d", "e", "f", "g"}},
		{"byte order mark", "\uFEFFa: b\nc: d", []string{"a: b\nc: d", "a", "b", "c", "d"}},
		{"tabs", "a: b\t# c\nd: \"e\"\t# f\n", []string{"a: b\t# c\nd: \"e\"", "a", "b", "d", `"e"`}},
		{"a space that is none of YAML's", "a: 5\u00A0%\n", []string{"a: 5\u00A0%", "a", "5\u00A0%"}},
		{"plain over lines", "a:\n  b\n  c\nd: e\n", []string{"a:\n  b\n  c\nd: e", "a", "b\n  c", "d", "e"}},
		{"blocks of text", "a: | # b\n  c\n   # d\n\n# e\nf: >-\n  g\n\n", []string{"a: | # b\n  c\n   # d\n\n# e\nf: >-\n  g", "a", "| # b\n  c\n   # d", "f", ">-\n  g"}},
		{"a comment nearer to the margin than the text above", "a: |\n   c\n  # d\nb: e\n", []string{"a: |\n   c\n  # d\nb: e", "a", "|\n   c", "b", "e"}},
		{"an anchor of nothing", "a: &x\nb: c\n", []string{"?", "a", "?", "b", "c"}},
		{"nothing", "a:\nb: ~\nc: null # d\ne:\n", []string{"a:\nb: ~\nc: null # d\ne:", "a", "", "b", "~", "c", "null", "e", ""}},
		{"nothing in flow", "{a: , b, c: }", []string{"{a: , b, c: }", "a", "", "b", "", "c", ""}},
		{"lists", "- a\n- - b\n  - c: d\n    e: f\n-\n", []string{"- a\n- - b\n  - c: d\n    e: f\n-", "a", "- b\n  - c: d\n    e: f", "b", "c: d\n    e: f", "c", "d", "e", "f", ""}},
		{"anchors", "a: &x {b: c}\nd: *x\ne: &y\n  f: g\n", []string{"a: &x {b: c}\nd: *x\ne: &y\n  f: g", "a", "{b: c}", "b", "c", "d", "{b: c}", "b", "c", "e", "f: g", "f", "g"}},
		{"merges", "a: &x {b: c}\nd:\n  e: f\n  <<: *x\ng: h\n", []string{"a: &x {b: c}\nd:\n  e: f\n  <<: *x\ng: h", "a", "{b: c}", "b", "c", "d", "e: f\n  <<: *x", "e", "f", "b", "c", "g", "h"}},
		{"a header and an end", "---\na: {b: c}\n...\n", []string{"a: {b: c}", "a", "{b: c}", "b", "c"}},
		{"escapes", `{a: "\x41\"", b: "\u00e9\\"}`, []string{`{a: "\x41\"", b: "\u00e9\\"}`, "a", `"\x41\""`, "b", `"\u00e9\\"`}},
		{"an escape that takes the quote for a digit", `a: "\x"1"`, []string{"?", "a", "?"}},
		{"a pair between brackets", "[a: b, c]", []string{"[a: b, c]", "a: b", "a", "b", "c"}},
	} {
		t.Run(c.reason, func(t *testing.T) {
			n, complaints := Parse("f.yaml", []byte(c.text))
			if complaints != nil {
				t.Fatal(complaints.Error())
			}
			if diff := cmp.Diff(c.want, spelled(c.text, n)); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestReplace(t *testing.T) {
	text := []byte("abcdef")
	for _, c := range []struct {
		edits []Edit
		want  string
	}{
		{nil, "abcdef"},
		{[]Edit{{Span{4, 6}, "Y"}, {Span{0, 1}, "XX"}}, "XXbcdY"},
		{[]Edit{{Span{3, 3}, "Z"}, {Span{1, 3}, ""}}, "aZdef"},
		{[]Edit{{Span{1, 3}, ""}, {Span{2, 4}, ""}}, ""},
		{[]Edit{{Span{2, 7}, ""}}, ""},
		{[]Edit{{Span{-1, 2}, ""}}, ""},
		{[]Edit{{Span{3, 2}, ""}}, ""},
	} {
		out, err := Replace(text, c.edits)
		if string(out) != c.want || (err != nil) != (c.want == "") {
			t.Errorf("%v: %q, %v", c.edits, out, err)
		}
	}
	if string(text) != "abcdef" {
		t.Errorf("the text became %q", text)
	}
}

func pairs(list ...string) []Pair {
	var out []Pair
	for i := 0; i < len(list); i += 2 {
		out = append(out, Pair{&Node{Value: list[i]}, &Node{Value: list[i+1]}})
	}
	return out
}

// rewritten changes the mapping under "m", where "go" gives way to pairs and
// "out" goes.
func rewritten(text string, pairs []Pair) (string, error) {
	e, complaints := NewEditor("f.yaml", []byte(text))
	if complaints != nil {
		return "", complaints
	}
	e.Rewrite(e.Root().Get("m"), "go", pairs, "out", "off")
	out, err := e.Bytes()
	return string(out), err
}

// The texts wanted are what one would write by hand.
func TestRewrite(t *testing.T) {
	for _, c := range []struct {
		reason, text string
		put          []string
		want         string
	}{
		{"flow", "m: {a: b, go: {c: d}, e: f} # g\n", []string{"x", "1", "y", "5 %"}, "m: {a: b, x: 1, y: 5 %, e: f} # g\n"},
		{"flow, last", "m: {a: b, go: {c: d}}\n", []string{"x", "1"}, "m: {a: b, x: 1}\n"},
		{"flow, a key that is there", "m: {a: b , go: {c: d}}\n", []string{"a", "1", "x", "2"}, "m: {a: 1 , x: 2}\n"},
		{"flow, nothing to put", "m: {a: b, go: {c: d}}\n", []string{"a", "1"}, "m: {a: 1}\n"},
		{"flow, nothing to put, first", "m: {go: {c: d}, a: b}\n", nil, "m: {a: b}\n"},
		{"flow, nothing to put, between", "m: { a: b, go: {c: d}, e: f }\n", nil, "m: { a: b, e: f }\n"},
		{"flow, several out", "m: {out: 1, off: 2, a: b, go: {c: d}}\n", nil, "m: {a: b}\n"},
		{"flow, several out at the end", "m: {a: b, go: {c: d}, out: 1, off: 2,}\n", nil, "m: {a: b,}\n"},
		{"flow, out beside what is put", "m: {out: 1, go: {c: d}, off: 2}\n", []string{"x", "1"}, "m: {x: 1}\n"},
		{"flow over lines, out before what is put with a comment", "m: {a: b, out: 1, go: {c: d, # one\n  e: f}}\n", []string{"x", "1"}, "m: {a: b,\n    # one\n    x: 1}\n"},
		{"flow, all out", "m: {out: 1, go: {c: d}, }\n", nil, "m: { }\n"},
		{"flow over lines", "m: {a: b,\n    go: {c: d,\n         e: f}}   # g\nh: i\n", []string{"x", "1"}, "m: {a: b,\n    x: 1}   # g\nh: i\n"},
		{"flow over lines, a comment inside", "m: {a: b,\n    go: {c: d,   # why, then\n         e: f}}   # g\n", []string{"x", "1"}, "m: {a: b,\n    # why, then\n    x: 1}   # g\n"},
		{"flow over lines, a comment inside, not first on its line", "m: {a: b, go: {c: d,   # why\n  e: f}}\n", []string{"x", "1"}, "m: {a: b,\n    # why\n    x: 1}\n"},
		{"flow over lines, comments around", "m: {a: b, # about a, b\n  # about go\n  go: {c: d}, # behind\n  e: f}\n", []string{"x", "1"}, "m: {a: b, # about a, b\n  # about go\n  x: 1, # behind\n  e: f}\n"},
		{"flow over lines, out with a comment before", "m: {a: b, # about a, b\n  go: {c: d}}\n", nil, "m: {a: b # about a, b\n  }\n"},
		{"flow over lines, out with comments and a comma behind", "m: {a: b, # one\n  go: {c: d} # two, three\n  , # four\n  }\n", nil, "m: {a: b, # one\n  # two, three\n   # four\n  }\n"},
		{"flow over lines, out with a comment within", "m: {a: b, go: {c: d # one\n  }}\n", nil, "m: {a: b\n    # one\n    }\n"},
		{"flow over lines, out with a comment behind", "m: {go: {c: d}, # one\n  a: b}\n", nil, "m: {\n    # one\n    a: b}\n"},
		{"block", "m:\n  a: b\n  go:\n    c: d\n    e: [f,\n      g]\n\n  h: i\n", []string{"x", "1", "y", "2"}, "m:\n  a: b\n  x: 1\n  y: 2\n\n  h: i\n"},
		{"block, at the end without a line end", "m:\n  a: b\n  go: {c: d}", []string{"x", "1"}, "m:\n  a: b\n  x: 1"},
		{"block, comments", "m:\n  # above\n  go:   # one\n    # two\n    c: d # three\n     # four\n  # below\n  a: b # a\n", []string{"a", "1", "x", "2"}, "m:\n  # above\n  # one\n  # two\n  # three\n  # four\n  x: 2\n  # below\n  a: 1 # a\n"},
		{"block, nothing to put", "m:\n  a: b\n  go:\n    c: d\n  # below\n  e: f\n", nil, "m:\n  a: b\n  # below\n  e: f\n"},
		{"block, nothing to put but comments", "m:\n  a: b\n  go:\n    c: d # one\n    # two\n  e: f\n", nil, "m:\n  a: b\n  # one\n  # two\n  e: f\n"},
		{"block, out", "m:\n  out: 1\n  off: | # one\n    # text\n  a: b\n  go: c\n", []string{"x", "1"}, "m:\n  # one\n  a: b\n  x: 1\n"},
		{"block in a flow line each", "m:\n  go: {c: \"#d\", e: 'f # g', h: i#j} # k\n  a: b\n", []string{"x", "1"}, "m:\n  # k\n  x: 1\n  a: b\n"},
		{"signs of a comment in keys and names", "k: &x#y b\nm:\n  go: {\"a #b\": c, d: *x#y } # one  \n  a: b\n", []string{"x", "1"}, "k: &x#y b\nm:\n  # one\n  x: 1\n  a: b\n"},
		{"an anchor before the key", "m:\n  &x go: c\n  a: b\n", []string{"x", "1"}, "m:\n  x: 1\n  a: b\n"},
		{"quotes kept", "m: {a: \"b\", e: 'f', go: c}\n", []string{"a", "x", "e", "it's"}, "m: {a: \"x\", e: 'it''s'}\n"},
		{"quotes needed", "m: {a: b, go: c}\n", []string{"a", "x: y", "x", "[", "y", "", "z", "4..34 pF", "v", "b # c"}, "m: {a: \"x: y\", x: \"[\", y: \"\", z: 4..34 pF, v: \"b # c\"}\n"},
		{"value over lines", "m:\n  a: b\n    c\n  go: d\n", []string{"a", "x"}, "m:\n  a: x\n"},
		{"value on the line below", "m:\n  a:   # one\n    b # two\n  go: d\n", []string{"a", "x"}, "m:\n  a:   # one\n    x # two\n"},
		{"value left out", "m:\n  a:   # one\n  go: d\n", []string{"a", "x"}, "m:\n  a: x   # one\n"},
		{"carriage returns", "m:\r\n  go: # one\r\n    c: d\r\n  a: b\r\n", []string{"x", "1", "y", "2"}, "m:\r\n  # one\r\n  x: 1\r\n  y: 2\r\n  a: b\r\n"},
		{"byte order mark", "\uFEFFm: {go: a}\n", []string{"x", "1"}, "\uFEFFm: {x: 1}\n"},
		{"letters of more bytes", "µ: Ω # µ\nm: {Ω: µ, go: {Ω: µ}, a: Ω} # µ\n", []string{"x", "1 µ", "a", "2 Ω"}, "µ: Ω # µ\nm: {Ω: µ, x: 1 µ, a: 2 Ω} # µ\n"},
		{"an anchor that nothing uses", "m: &x {go: &y {c: d}, a: &z b}\n", []string{"x", "1", "a", "2"}, "m: &x {x: 1, a: &z 2}\n"},
		{"an alias gives way", "k: &x {c: d}\nl: &y b\nm: {go: *x, a: *y}\n", []string{"x", "1", "a", "2"}, "k: &x {c: d}\nl: &y b\nm: {x: 1, a: 2}\n"},
		{"an anchor used where it goes too", "m: {go: {c: &x [1], d: *x}, a: b}\n", []string{"x", "1"}, "m: {x: 1, a: b}\n"},
		{"merged keys are written over", "k: &x {a: b, c: d}\nm: {<<: *x, go: e}\n", []string{"a", "1"}, "k: &x {a: b, c: d}\nm: {<<: *x, a: 1}\n"},
		{"first behind a merge", "k: &x {a: b, c: d}\nm:\n  <<: *x\n  go: e\n", nil, "k: &x {a: b, c: d}\nm:\n  <<: *x\n"},
		{"explicit keys", "m:\n  ? go\n  : c\n  ? a\n  : b\n", []string{"x", "1", "a", "2"}, "m:\n  x: 1\n  ? a\n  : 2\n"},
	} {
		t.Run(c.reason, func(t *testing.T) {
			got, err := rewritten(c.text, pairs(c.put...))
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(c.want, got); diff != "" {
				t.Error(diff)
			}
		})
	}
}

// What is refused, and how.
func TestRewriteComplaints(t *testing.T) {
	for _, c := range []struct{ reason, text, want string }{
		{"no such entry", "m: {a: b}\n", "f.yaml:1:4: entry go that is not written here: expected go: written in the mapping itself, not merged into it"},
		{"no mapping", "m: go\n", "f.yaml:1:4: entry go that is not written here: expected go: written in the mapping itself, not merged into it"},
		{"nothing", "go: a\n", "f.yaml: entry go that is not written here: expected go: written in the mapping itself, not merged into it"},
		{"merged", "k: &x {go: a}\nm: {<<: *x, a: b}\n", "f.yaml:2:4: entry go that is not written here: expected go: written in the mapping itself, not merged into it"},
		{"used elsewhere", "m: &x {go: a}\nk: *x\n", "f.yaml:1:7: change inside &x, which line 2 uses too: expected line 2 written out, without *x"},
		{"used elsewhere, block", "m: &x\n  a: b\n  go: a\nk: *x\n", "f.yaml:2:3: change inside &x, which line 4 uses too: expected line 4 written out, without *x"},
		{"used further out", "k: &x {m: &y {go: c}}\nm: *y\n", "f.yaml:1:14: change inside &y, which line 2 uses too: expected line 2 written out, without *y"},
		{"merged elsewhere", "m: &x {go: a}\nk:\n  <<: *x\n", "f.yaml:1:7: change inside &x, which line 3 uses too: expected line 3 written out, without *x"},
		{"an anchor that goes", "m: {go: [&x a, *x]}\nk: *x\n", "f.yaml:1:4: change inside &x, which line 2 uses too: expected line 2 written out, without *x"},
		{"a value used elsewhere", "m: {a: &x b, go: c}\nk: [*x]\n", "f.yaml:1:4: change inside &x, which line 2 uses too: expected line 2 written out, without *x"},
		{"a value of many lines", "m:\n  a:\n    b: c\n  go: c\n", "f.yaml:2:3: value of a that cannot be replaced in its place: expected a value on the same line"},
		{"what is taken out is merged", "k: &x {out: a}\nm: {<<: *x, go: c}\n", "f.yaml:2:4: out that is merged into the mapping and has to go: expected a mapping without <<, or one merged that has no out"},
		{"what is taken out would be merged", "k: &x {out: a}\nm: {<<: *x, out: b, go: c}\n", "f.yaml:2:4: entries that cannot be changed in their place: expected a line for each entry, or braces around them all on one line"},
	} {
		t.Run(c.reason, func(t *testing.T) {
			out, err := rewritten(c.text, pairs("a", "1"))
			if err == nil || err.Error() != c.want || out != "" {
				t.Errorf("%q, %v", out, err)
			}
		})
	}
}

// TestRewriteLastLine takes a line out of a mapping that is used elsewhere: the
// line reaches beyond the mapping.
func TestRewriteLastLine(t *testing.T) {
	out, err := rewritten("m: &x\n  a: b\n  go: c\nk: *x\n", nil)
	if err == nil || !strings.Contains(err.Error(), "change inside &x, which line 4 uses too") {
		t.Errorf("%q, %v", out, err)
	}
}

// TestRewriteNothing leaves a text without changes as it is.
func TestRewriteNothing(t *testing.T) {
	const text = "\uFEFFa: {b : c}  \r\n\r\n# d\n"
	e, complaints := NewEditor("f.yaml", []byte(text))
	if complaints != nil {
		t.Fatal(complaints)
	}
	if out, err := e.Bytes(); err != nil || string(out) != text {
		t.Errorf("%q, %v", out, err)
	}
}

// mappings lists the mappings of a tree, each once.
func mappings(n *Node, list []*Node) []*Node {
	if slices.Contains(list, n) {
		return list
	}
	if n.Kind == Mapping {
		list = append(list, n)
	}
	for _, e := range n.entries {
		list = mappings(e.value, list)
	}
	return list
}

// plainOutline is a tree without places.
func plainOutline(n *Node) string {
	switch n.Kind {
	case Mapping:
		var pairs []string
		for _, p := range n.Pairs {
			pairs = append(pairs, fmt.Sprintf("%q: %s", p.Key.Value, plainOutline(p.Value)))
		}
		return "{" + strings.Join(pairs, ", ") + "}"
	case Sequence:
		var items []string
		for _, item := range n.Items {
			items = append(items, plainOutline(item))
		}
		return "[" + strings.Join(items, ", ") + "]"
	}
	return fmt.Sprintf("%d %q", n.Kind, n.Value)
}

// comments are those of a text as the YAML library's scanner sees them, sorted.
func comments(text string) []string {
	source, bad := clean("", []byte(text))
	if bad != nil {
		return nil
	}
	var list []string
	for _, t := range lexer.Tokenize(source) {
		if t.Type == token.CommentType {
			list = append(list, strings.TrimSpace(t.Value))
		}
	}
	slices.Sort(list)
	return list
}

func FuzzRewrite(f *testing.F) {
	for _, seed := range []string{
		"m: {a: b, go: {c: d # e\n  }, f: g}\n", "a:\n  - b: c # d\n    e:\n      f: g # h\n      # i\n    j: |\n      # k\n", "a: &x {b: c}\nd: {<<: *x, e: *x}\n",
		"\uFEFFa: 'b # c'\r\n\"d\": # e\r\n  f: \"g\"\t# h\r\n", "{a, b: , c: d,}", "? a\n: b\n? c # d\n: # e\n  f\n", "[a: b, {c: d}]", "a: >-\n\n  x # y\n y: z\n", "a:\r  b: c\r  d: e # f\r",
		"a: {b: c, # d\n  e: f # g\n  , # h\n  }\n", "&a a: &b b\nc: *a\n", "--- # x\na:\n  b: c\n... # y\n", "- # a\n  b: c # d\n  e: f\n", "a: {\"b\":c,'d':e}\n", "a:\n  b:\n  c:\n", "a: {b: !x c}", "a: {b: [c # d\n], e: f}#g\n",
	} {
		f.Add(seed, uint8(0), uint8(0), uint8(0), "x")
		f.Add(seed, uint8(1), uint8(1), uint8(2), "5 %")
	}
	f.Fuzz(func(t *testing.T, text string, which, at, mode uint8, value string) {
		e, complaints := NewEditor("f", []byte(text))
		if complaints != nil {
			return
		}
		list := mappings(e.Root(), nil)
		if len(list) == 0 {
			return
		}
		m := list[int(which)%len(list)]
		if len(m.Pairs) == 0 {
			return
		}
		key := m.Pairs[int(at)%len(m.Pairs)].Key.Value
		other := m.Pairs[int(at/16)%len(m.Pairs)].Key.Value
		var put []Pair
		if mode&1 == 0 {
			put = pairs("new", value)
		}
		var drop []string
		switch {
		case other == key:
		case mode&2 == 0:
			put = append(put, pairs(other, value)...)
		default:
			drop = []string{other}
		}
		e.Rewrite(m, key, put, drop...)
		out, err := e.Bytes()
		if err != nil {
			if len(out) > 0 {
				t.Errorf("a text beside %v", err)
			}
			return
		}
		n, complaints := Parse("f", out)
		if complaints != nil {
			t.Fatalf("%q became %q:\n%v", text, out, complaints)
		}
		if was, is := comments(text), comments(string(out)); !slices.Equal(was, is) && mode&2 == 2 {
			t.Errorf("%q became %q: comments %q became %q", text, out, was, is)
		}
		if again := plainOutline(n); strings.Contains(again, fmt.Sprintf("%q: ", "new")) != (len(put) > 0 && put[0].Key.Value == "new") && !strings.Contains(text, "new") {
			t.Errorf("%q became %q: %s", text, out, again)
		}
	})
}
