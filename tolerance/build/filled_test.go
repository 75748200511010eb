package build_test

import (
	"fmt"
	"io/fs"
	"strings"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/build"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

// checkFilled fills a build's openings and holds the file that is written
// against the build that is fitted.
func checkFilled(t rapid.TB, text string, choice []build.Fitting) string {
	b, err := read(text)
	if err != nil {
		t.Fatal(err)
	}
	out, err := b.FilledIn([]byte(text), choice)
	if err != nil {
		t.Fatalf("%v\n%s", err, text)
	}
	again, err := read(string(out))
	if err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	fitted, err := b.Fit(choice)
	if err != nil {
		t.Fatal(err)
	}
	if len(again.Openings) > 0 || len(again.Parts()) == 0 {
		t.Errorf("%d openings are left", len(again.Openings))
	}
	if diff := cmp.Diff(fitted.Parts(), again.Parts(), cmpopts.EquateApprox(1e-12, 0)); diff != "" {
		t.Errorf("fitted and written:\n%s\n%s", diff, out)
	}
	if same, err := again.FilledIn(out, nil); err != nil || string(same) != string(out) {
		t.Errorf("a file without openings is changed: %v", err)
	}
	return string(out)
}

// changed are the lines that two texts do not share, as a reviewer sees them;
// the texts share what comes before and after a block of lines.
func changed(was, is string) string {
	a, b := strings.SplitAfter(was, "\n"), strings.SplitAfter(is, "\n")
	for len(a) > 0 && len(b) > 0 && a[0] == b[0] {
		a, b = a[1:], b[1:]
	}
	for len(a) > 0 && len(b) > 0 && a[len(a)-1] == b[len(b)-1] {
		a, b = a[:len(a)-1], b[:len(b)-1]
	}
	return strings.Join(b, "")
}

// TestFilledInStyles writes one part in every style; the texts wanted are what
// one would write by hand.
func TestFilledInStyles(t *testing.T) {
	const upper = "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}\n"
	single := func(family string, tolerance float64, text string) build.Fitting {
		return build.Fitting{Combine: "single", Pieces: []build.Piece{{Family: family, Tolerance: tolerance, Worth: build.Worth{Text: text}}}}
	}
	pair := func(combine build.Combine) build.Fitting {
		return build.Fitting{Combine: combine, Pieces: []build.Piece{{Family: "c0g", Tolerance: 0.05, Worth: build.Worth{Text: "180 pF"}}, {Family: "polystyrene", Tolerance: 0.025, Worth: build.Worth{Text: "39 pF"}}}}
	}
	lots := func(f build.Fitting, word string) build.Fitting { f.Mixed = word == "mixed"; return f }
	for _, c := range []struct {
		name, text string
		choice     build.Fitting
		want       string
	}{
		{"flow", "upper: {ref: C1, value: 220 pF, choose: {families: [c0g, polystyrene], tolerances: [5 %]}}   # tank\n",
			single("polystyrene", 0.05, "220 pF"), "upper: {ref: C1, value: 220 pF, family: polystyrene, tolerance: 5 %}   # tank\n"},
		{"block", "upper:\n        ref: C1   # left\n        value: 220 pF\n        choose:   # film or not\n          families:\n            - c0g\n            - polystyrene   # in stock\n          tolerances: [2.5 %, 5 %]\n        temperature_coefficient: 0 ppm/K\n",
			single("polystyrene", 0.025, "220 pF"), "upper:\n        ref: C1   # left\n        value: 220 pF\n        # film or not\n        # in stock\n        family: polystyrene\n        tolerance: 2.5 %\n        temperature_coefficient: 0 ppm/K\n"},
		{"flow over lines", "upper: {ref: C1, choose: {families: [c0g, polystyrene],   # film or not\n                              values: [180 pF, 220 pF]},      # near it\n              lots: mixed}\n",
			lots(single("c0g", 0.01, "180 pF"), "mixed"), "upper: {ref: C1,\n              # film or not\n              value: 180 pF, family: c0g, tolerance: 1 %,      # near it\n              lots: mixed}\n"},
		{"all there, the same", "upper: {ref: C1, value: \"0.22 nF\", family: c0g, tolerance: 50000 ppm, choose: {families: [c0g]}}\n",
			single("c0g", 0.05, "220 pF"), "upper: {ref: C1, value: \"0.22 nF\", family: c0g, tolerance: 50000 ppm}\n"},
		{"all there, changed", "upper: {choose: {families: [c0g, polystyrene], values: [180 pF]}, ref: C1, value: \"0.22 nF\", family: 'c0g' , tolerance: 5 %}\n",
			single("polystyrene", 0.025, "180 pF"), "upper: {ref: C1, value: \"180 pF\", family: 'polystyrene' , tolerance: 2.5 %}\n"},
		{"grades as the file spells them", "upper: {ref: C1, value: 220 pF, choose: {families: [c0g], tolerances: [10000 ppm, 5 %]}}\n",
			single("c0g", 0.01, "220 pF"), "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 10000 ppm}\n"},
		{"parallel", "upper: {ref: C1, value: 220 pF, family: c0g, choose: {families: [c0g, polystyrene]}, lots: one}\n",
			pair("parallel"), "upper: {ref: C1, parallel: [{value: 180 pF, family: c0g, tolerance: 5 %}, {value: 39 pF, family: polystyrene, tolerance: 2.5 %}], lots: one}\n"},
		{"series", "upper:\n        value: 220 pF   # or near it\n        ref: C1\n        choose: {families: [c0g, polystyrene]}\n",
			pair("series"), "upper:\n        # or near it\n        ref: C1\n        series: [{value: 180 pF, family: c0g, tolerance: 5 %}, {value: 39 pF, family: polystyrene, tolerance: 2.5 %}]\n"},
		{"lots", "upper: {ref: C1, value: 220 pF, choose: {families: [c0g]}}\n",
			lots(single("c0g", 0.05, "220 pF"), "mixed"), "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %, lots: mixed}\n"},
		{"lots that are there", "upper: {ref: C1, lots: mixed, value: 220 pF, choose: {families: [c0g]}}\n",
			lots(single("c0g", 0.05, "220 pF"), "one"), "upper: {ref: C1, lots: one, value: 220 pF, family: c0g, tolerance: 5 %}\n"},
		{"an anchor that nothing uses", "upper: {ref: C1, value: 220 pF, choose: &open {families: [c0g]}}\n      # second\n",
			single("c0g", 0.05, "220 pF"), "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}\n      # second\n"},
	} {
		t.Run(c.name, func(t *testing.T) {
			text := strings.Replace(good, upper, c.text, 1)
			b, err := read(text)
			if err != nil {
				t.Fatal(err)
			}
			out, err := b.FilledIn([]byte(text), []build.Fitting{c.choice})
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(strings.Replace(good, upper, c.want, 1), string(out)); diff != "" {
				t.Error(diff)
			}
			returns := strings.ReplaceAll(text, "\n", "\r\n")
			out, err = b.FilledIn([]byte(returns), []build.Fitting{c.choice})
			if err != nil || string(out) != strings.ReplaceAll(strings.Replace(good, upper, c.want, 1), "\n", "\r\n") {
				t.Errorf("with carriage returns: %v\n%q", err, out)
			}
		})
	}
}

// TestFilledInTypes fills parts that have no value, no grades, or a range.
func TestFilledInTypes(t *testing.T) {
	for _, c := range []struct{ name, part, choose, want string }{
		{"transistor", "ref: Q9, part: transistor", "{families: [small-signal-npn]}", "ref: Q9, part: transistor, family: small-signal-npn"},
		{"trimmer", "ref: CT9, part: trimmer-capacitor, tolerance: 10 %", "{families: [ceramic-trimmer], values: [\"4..34 pF\"]}", ""},
		{"trimmer of another low end", "ref: CT9, value: 5..34 pF", "{families: [ceramic-trimmer], values: [4..34 pF]}", "ref: CT9, value: 4..34 pF, family: ceramic-trimmer"},
		{"trimmer of another high end", "ref: CT9, value: 4..20 pF", "{families: [ceramic-trimmer], values: [4..34 pF]}", "ref: CT9, value: 4..34 pF, family: ceramic-trimmer"},
		{"trimmer in other words", "ref: CT9, value: 4 pF..0.034 nF", "{families: [ceramic-trimmer], values: [4..34 pF]}", "ref: CT9, value: 4 pF..0.034 nF, family: ceramic-trimmer"},
		{"coil", "ref: L9, value: 1.8 mH", "{families: [drum-choke], tolerances: [10 %]}", "ref: L9, value: 1.8 mH, family: drum-choke, tolerance: 10 %"},
		{"regulator", "ref: U9, part: regulator, value: 12 V", "{families: [fixed-regulator], tolerances: [4 %]}", "ref: U9, part: regulator, value: 12 V, family: fixed-regulator, tolerance: 4 %"},
		{"trimmer with its tolerance written", "ref: CT9, part: trimmer-capacitor, value: 4..34 pF, tolerance: 10 %", "{families: [film-trimmer]}", "ref: CT9, part: trimmer-capacitor, value: 4..34 pF, family: film-trimmer"},
		{"tolerance that is not sold", "ref: Q9, part: transistor, tolerance: 5 %", "{families: [small-signal-npn]}", "ref: Q9, part: transistor, family: small-signal-npn"},
	} {
		t.Run(c.name, func(t *testing.T) {
			x := fmt.Sprintf("x: {%s, choose: %s}", c.part, c.choose)
			text := strings.Replace(good, "parts: {r: {ref: R1, value: 10 kΩ}}", "parts: {r: {ref: R1, value: 10 kΩ}, "+x+"}", 1)
			b, err := read(text)
			if err != nil {
				t.Fatal(err)
			}
			for _, f := range b.Fittings(b.Openings[0])[:1] {
				out := checkFilled(t, text, []build.Fitting{f})
				if c.want != "" && !strings.Contains(out, "{"+c.want+"}") {
					t.Error(changed(text, out))
				}
			}
		})
	}
}

// TestFilledInCloserTrimmer writes the tolerance of a trimmer that its family
// is sold in more closely than it is taken for unsaid.
func TestFilledInCloserTrimmer(t *testing.T) {
	x := "x: {ref: RV9, value: 0..10 kΩ, choose: {families: [cermet-trimmer], tolerances: [10 %, 20 %]}}"
	text := strings.Replace(good, "parts: {r: {ref: R1, value: 10 kΩ}}", "parts: {r: {ref: R1, value: 10 kΩ}, "+x+"}", 1)
	b, err := read(text)
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []string{"family: cermet-trimmer, tolerance: 10 %}", "family: cermet-trimmer}"} {
		out, err := b.FilledIn([]byte(text), b.Fittings(b.Openings[0])[i:i+1])
		if err != nil || !strings.Contains(string(out), "x: {ref: RV9, value: 0..10 kΩ, "+want) {
			t.Errorf("%v\n%s", err, changed(text, string(out)))
		}
	}
}

// TestFilledInExamples fills every example with the first, the last and some of
// the choices between.
func TestFilledInExamples(t *testing.T) {
	files, err := fs.Glob(data.Examples, "examples/*.yaml")
	if err != nil || len(files) == 0 {
		t.Fatalf("no examples: %v", err)
	}
	for _, name := range files {
		raw, err := fs.ReadFile(data.Examples, name)
		if err != nil {
			t.Fatal(err)
		}
		text := string(raw)
		b, err := read(text)
		if err != nil {
			t.Fatal(err)
		}
		for share := range 5 {
			var choice []build.Fitting
			for _, o := range b.Openings {
				list := b.Fittings(o)
				choice = append(choice, list[(len(list)-1)*share/4])
			}
			out := checkFilled(t, text, choice)
			checkRemarks(t, text, out)
			for _, line := range strings.Split(out, "\n") {
				if bare := strings.TrimSpace(line); !strings.Contains(text, line+"\n") && !strings.HasPrefix(bare, "family: ") && !strings.HasPrefix(bare, "tolerance: ") && !strings.HasPrefix(bare, "value: ") && bare != "" {
					t.Errorf("%s: a line that was not there: %q", name, line)
				}
			}
		}
	}
}

// checkRemarks asks for every comment of a text, found by its " # " or as the
// first of a line, in what became of it. The texts have no # in their values.
func checkRemarks(t rapid.TB, was, is string) {
	for _, line := range strings.FieldsFunc(was, func(r rune) bool { return r == '\n' || r == '\r' }) {
		if i := strings.IndexByte(line, '#'); i >= 0 {
			if remark := strings.TrimRight(line[i:], " \t"); strings.Count(is, remark) != strings.Count(was, remark) {
				t.Errorf("%q is there %d times, was %d times:\n%s", remark, strings.Count(is, remark), strings.Count(was, remark), is)
			}
		}
	}
}

// TestFilledInRefusals asks for a complaint rather than for a change at two
// places.
func TestFilledInRefusals(t *testing.T) {
	const upper = "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}"
	const tank = "tank: {ref: C3, value: 130 pF, family: c0g, tolerance: 5 %}"
	for _, c := range []struct{ name, upper, tank, want string }{
		{"a value used elsewhere", "upper: {ref: C1, value: &v 220 pF, choose: {families: [c0g], values: [180 pF]}}", "tank: {ref: C3, value: *v}",
			"lamp.yaml:12:14: change inside &v, which line 20 uses too: expected line 20 written out, without *v"},
		{"an anchor in what goes", "upper: {ref: C1, value: 220 pF, choose: {families: [c0g], tolerances: [&t 5 %]}}", "tank: {ref: C3, value: 130 pF, family: c0g, tolerance: *t}",
			"lamp.yaml:12:14: change inside &t, which line 20 uses too: expected line 20 written out, without *t"},
		{"a part merged elsewhere", "upper: &p {ref: C1, value: 220 pF, choose: {families: [c0g]}}", "tank: {<<: *p, ref: C3}",
			"lamp.yaml:12:17: change inside &p, which line 20 uses too: expected line 20 written out, without *p"},
		{"choose merged", "upper: &p {ref: C1, value: 220 pF, choose: {families: [c0g]}}", "tank: {<<: *p, ref: C3}",
			"lamp.yaml:20:13: entry choose that is not written here"},
	} {
		t.Run(c.name, func(t *testing.T) {
			text := strings.NewReplacer(upper, c.upper, tank, c.tank).Replace(good)
			b, err := read(text)
			if err != nil {
				t.Fatal(err)
			}
			var choice []build.Fitting
			for _, o := range b.Openings {
				choice = append(choice, b.Fittings(o)[0])
			}
			out, err := b.FilledIn([]byte(text), choice)
			if err == nil || !strings.Contains(err.Error(), c.want) || out != nil {
				t.Errorf("%v\n%s", err, out)
			}
		})
	}
}

// TestFilledInShared writes what is right for every place that uses an anchor.
func TestFilledInShared(t *testing.T) {
	text := strings.NewReplacer(
		"upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}", "upper: {ref: C1, value: &v 220 pF, choose: &open {families: &f [c0g, polystyrene], tolerances: [5 %]}}",
		"tank: {ref: C3, value: 130 pF, family: c0g, tolerance: 5 %}", "tank: {ref: C3, value: *v, choose: *open}",
	).Replace(good)
	b, err := read(text)
	if err != nil {
		t.Fatal(err)
	}
	first, second := b.Fittings(b.Openings[0]), b.Fittings(b.Openings[1])
	out := checkFilled(t, text, []build.Fitting{first[0], second[1]})
	for _, want := range []string{"upper: {ref: C1, value: &v 220 pF, family: c0g, tolerance: 5 %}", "tank: {ref: C3, value: *v, family: polystyrene, tolerance: 5 %}"} {
		if !strings.Contains(out, want) {
			t.Errorf("no %q in\n%s", want, out)
		}
	}
}

// TestFilledInMistakes are ours: choices that fit no opening.
func TestFilledInMistakes(t *testing.T) {
	text := open("value: 220 pF, choose: {families: [c0g]}")
	b, err := read(text)
	if err != nil {
		t.Fatal(err)
	}
	piece := build.Piece{Family: "c0g", Tolerance: 0.05, Worth: build.Worth{Text: "220 pF"}}
	for _, choice := range [][]build.Fitting{
		nil,
		{{Combine: "single"}},
		{{Combine: "single", Pieces: []build.Piece{piece, piece}}},
		{{Combine: "parallel", Pieces: []build.Piece{piece}}},
		{{Combine: "", Pieces: []build.Piece{piece}}},
		{{Combine: "single", Pieces: []build.Piece{{Family: "cog"}}}},
		{{Combine: "series", Pieces: []build.Piece{piece, {Family: "cog"}}}},
	} {
		if out, err := b.FilledIn([]byte(text), choice); err == nil {
			t.Errorf("%v gives %s", choice, out)
		}
	}
}

// drawn is a build file in chunks; those at odd places are its open parts.
type drawn struct {
	t       *rapid.T
	chunks  []string
	remarks int
}

// remark is now and then a comment, told from all others by its number.
func (d *drawn) remark(before string) string {
	if rapid.IntRange(0, 3).Draw(d.t, "remark") > 0 {
		return ""
	}
	d.remarks++
	return fmt.Sprintf("%s# remark %d, {ends}", before, d.remarks)
}

// keys are those of an open part in any order, the value of choose left out.
func (d *drawn) keys(i int) (keys [][2]string, choose [][2]string) {
	pick := func(list ...string) string { return rapid.SampledFrom(list).Draw(d.t, "word") }
	type offer struct{ family, families, values, tolerances string }
	o := rapid.SampledFrom([]offer{
		{"c0g", "[c0g, polystyrene, mica]", "[180 pF, 0.22 nF, '330 pF']", "[1 %, 2.5 %, 2 %, 5 %]"},
		{"film-trimmer", "[film-trimmer, ceramic-trimmer]", "[4..20 pF, \"4..34 pF\"]", ""},
		{"drum-choke", "[drum-choke, powdered-iron-toroid]", "[1.8 mH, 2200 uH]", "[5 %, 10 %]"},
		{"small-signal-npn", "[small-signal-npn]", "", ""},
	}).Draw(d.t, "offer")
	maybe := func(list *[][2]string, key string, texts ...string) {
		if text := pick(append(texts, "")...); text != "" {
			*list = append(*list, [2]string{key, text})
		}
	}
	keys = [][2]string{{"ref", fmt.Sprintf("X%d", i)}, {"choose", ""}}
	choose = [][2]string{{"families", o.families}}
	if o.tolerances != "" {
		choose = append(choose, [2]string{"tolerances", o.tolerances})
		maybe(&keys, "temperature_coefficient", "30 ppm/K", "{value: 30 ppm/K, spread: 60 ppm/K}")
	}
	maybe(&keys, "family", o.family, "'"+o.family+"'")
	maybe(&keys, "tolerance", "5 %", "'1 %'")
	maybe(&keys, "lots", "mixed", "one")
	if o.values != "" {
		value := strings.Trim(strings.Split(strings.Trim(o.values, "[]"), ",")[rapid.IntRange(0, 1).Draw(d.t, "value")], " ")
		if rapid.Bool().Draw(d.t, "values") {
			choose = append(choose, [2]string{"values", o.values})
			maybe(&keys, "value", value)
		} else {
			keys = append(keys, [2]string{"value", value})
		}
	}
	return rapid.Permutation(keys).Draw(d.t, "keys"), rapid.Permutation(choose).Draw(d.t, "choose")
}

// block writes a mapping a key a line.
func (d *drawn) block(list, choose [][2]string, indent string) string {
	var b strings.Builder
	for _, k := range list {
		if r := d.remark(indent); r != "" {
			b.WriteString(r + "\n")
		}
		text := " " + k[1]
		switch {
		case k[0] == "choose" && rapid.Bool().Draw(d.t, "deep"):
			b.WriteString(indent + k[0] + ":" + d.remark("  ") + "\n" + d.block(choose, nil, indent+"  "))
			continue
		case k[0] == "choose":
			text = " " + d.braces(choose, nil, indent+"  ")
		case k[1][0] == '[' && rapid.Bool().Draw(d.t, "rows"):
			text = d.remark(" ")
			for _, item := range strings.Split(strings.Trim(k[1], "[]"), ",") {
				text += "\n" + indent + rapid.SampledFrom([]string{"", "  "}).Draw(d.t, "dash") + "- " + strings.TrimSpace(item) + d.remark("\t")
			}
			text = evenDashes(text)
		}
		b.WriteString(indent + k[0] + ":" + text + d.remark("   ") + "\n")
	}
	return b.String()
}

// evenDashes indents every dash of a list like the first.
func evenDashes(text string) string {
	lines := strings.Split(text, "\n")
	for i := 2; i < len(lines); i++ {
		first := lines[1][:strings.Index(lines[1], "- ")]
		lines[i] = first + strings.TrimLeft(lines[i], " ")
	}
	return strings.Join(lines, "\n")
}

// braces writes a mapping between braces, on one line or over several.
func (d *drawn) braces(list, choose [][2]string, indent string) string {
	var b strings.Builder
	b.WriteString("{")
	for i, k := range list {
		if i > 0 {
			b.WriteString("," + d.gap(indent))
		}
		text := k[1]
		if k[0] == "choose" {
			text = d.braces(choose, nil, indent+"  ")
		}
		b.WriteString(k[0] + ": " + text)
	}
	if rapid.IntRange(0, 4).Draw(d.t, "end") == 0 {
		b.WriteString(d.gap(indent))
	}
	b.WriteString("}")
	return b.String()
}

// gap is what may stand behind a comma.
func (d *drawn) gap(indent string) string {
	if rapid.IntRange(0, 2).Draw(d.t, "gap") > 0 {
		return " "
	}
	text := d.remark("  ") + "\n" + indent
	if r := d.remark(""); r != "" {
		text += r + "\n" + indent
	}
	return text
}

// part writes an open part behind its name.
func (d *drawn) part(i int) string {
	keys, choose := d.keys(i)
	const indent = "        "
	if rapid.Bool().Draw(d.t, "block") {
		return d.remark(" ") + "\n" + d.block(keys, choose, indent)
	}
	return " " + d.braces(keys, choose, indent) + d.remark(" ") + "\n"
}

// file writes the whole build.
func (d *drawn) file() {
	head := "build: drawn # a\nunits: 2\nconditions: {a: {}} # b\nstages:\n  s:\n    kind: formula\n    parts:\n"
	for i := range rapid.IntRange(1, 3).Draw(d.t, "parts") {
		closed := fmt.Sprintf("      # before %d\n      c%d: {ref: R%d,   value: 1e3 Ω } # kΩ %d\n", i, i, i, i)
		d.chunks = append(d.chunks, head+closed+fmt.Sprintf("      p%d:", i), d.part(i+1))
		head = "\n"
	}
	d.chunks = append(d.chunks, "      # after\n    outputs:\n      y: {expression: \"1\"}   # end")
	from := rapid.SampledFrom([]string{"\n", "\r\n", "\r"}).Draw(d.t, "line end")
	for i := range d.chunks {
		d.chunks[i] = strings.ReplaceAll(d.chunks[i], "\n", from)
	}
	if rapid.Bool().Draw(d.t, "mark") {
		d.chunks[0] = "\uFEFF" + d.chunks[0]
	}
}

// TestFilledInProperties draws build files and choices: what is written is the
// build that was fitted, no comment is lost, and what belongs to no open part
// is the same byte for byte.
func TestFilledInProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := drawn{t: t}
		d.file()
		text := strings.Join(d.chunks, "")
		b, err := read(text)
		if err != nil {
			t.Fatalf("%v\n%s", err, text)
		}
		var choice []build.Fitting
		for _, o := range b.Openings {
			list := b.Fittings(o)
			if len(list) == 0 {
				t.Skip("nothing fits")
			}
			choice = append(choice, rapid.SampledFrom(list).Draw(t, "fitting"))
		}
		out := checkFilled(t, text, choice)
		checkRemarks(t, text, out)
		rest := out
		for i := 0; i < len(d.chunks); i += 2 {
			at := strings.Index(rest, d.chunks[i])
			if at < 0 || i == 0 && at > 0 || i == len(d.chunks)-1 && at+len(d.chunks[i]) < len(rest) {
				t.Fatalf("%q is not kept in\n%s", d.chunks[i], out)
			}
			rest = rest[at+len(d.chunks[i]):]
		}
		if strings.Contains(d.chunks[1], "\r\n") && strings.Count(out, "\n") != strings.Count(out, "\r\n") {
			t.Errorf("line ends:\n%q", out)
		}
	})
}
