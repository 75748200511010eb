package build_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"batchwright/bom/series"
	"batchwright/tolerance/build"
)

// TestChooseFaults asks for one complaint of each fault of a choice, at its
// place.
func TestChooseFaults(t *testing.T) {
	const sound = "value: 220 pF, choose: {families: [c0g], combine: [single, parallel]}"
	if _, err := read(openingText("capacitor", sound)); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name, kind, text string
		at               string // the word complained of, the last of its kind in the line
		words            []string
	}{
		{"unknown combination", "capacitor", "value: 1 nF, choose: {families: [c0g], combine: [single, paralel]}", "paralel]", []string{`"paralel"`, "nearest: parallel"}},
		{"combination twice", "capacitor", "value: 1 nF, choose: {families: [c0g], combine: [single, parallel, single]}", "single]", []string{"combination named twice", `"single"`}},
		{"no combination", "capacitor", "value: 1 nF, choose: {families: [c0g], combine: []}", "[]", []string{"empty list of combine"}},
		{"combination of a transistor", "transistor", "choose: {families: [small-signal-npn], combine: [single, parallel]}", "parallel]", []string{"parallel of a transistor", "only resistors, capacitors and coils"}},
		{"combination of a trimmer", "trimmer-capacitor", "value: 4..34 pF, choose: {families: [film-trimmer], combine: series}", "series}", []string{"series of a trimmer-capacitor"}},
		{"unknown lots", "capacitor", "value: 1 nF, choose: {families: [c0g], lots: [mixd]}", "mixd", []string{`"mixd"`, "nearest: mixed"}},
		{"lots twice", "capacitor", "value: 1 nF, choose: {families: [c0g], lots: [one, mixed, one]}", "one]", []string{"lots named twice", `"one"`}},
		{"no lots", "capacitor", "value: 1 nF, choose: {families: [c0g], lots: []}", "[]", []string{"empty list of lots"}},
		{"within without around", "capacitor", "value: 1 nF, choose: {families: [c0g], within: 3 %}", "{families", []string{"within or series without around"}},
		{"series without around", "capacitor", "value: 1 nF, choose: {families: [c0g], series: E12}", "{families", []string{"within or series without around"}},
		{"around without within", "capacitor", "choose: {families: [c0g], around: 1 nF}", "{families", []string{"within is missing"}},
		{"within beside values", "capacitor", "choose: {families: [c0g], combine: parallel, values: [1 nF], within: 3 %}", "3 %}", []string{"within beside values", `"3 %"`}},
		{"series beside values", "capacitor", "choose: {families: [c0g], values: [1 nF], series: E12}", "E12}", []string{"series beside values"}},
		{"around beside values", "capacitor", "choose: {families: [c0g], values: [1 nF], around: 1 nF}", "1 nF}", []string{"around beside values"}},
		{"within of all", "capacitor", "value: 1 nF, choose: {families: [c0g], combine: parallel, within: 100 %}", "100 %}", []string{"within", `"100 %"`, "from 0 % to below 100 %"}},
		{"within below nothing", "capacitor", "choose: {families: [c0g], combine: parallel, around: 1 nF, within: -1 %}", "-1 %}", []string{"from 0 % to below 100 %"}},
		{"within of all for one piece", "capacitor", "choose: {families: [c0g], around: 1 nF, within: 150 %}", "150 %}", []string{"from 0 % to below 100 %"}},
		{"within in picofarads", "capacitor", "value: 1 nF, choose: {families: [c0g], combine: parallel, within: 3 pF}", "3 pF}", []string{`"3 pF"`}},
		{"unknown series", "capacitor", "value: 1 nF, choose: {families: [c0g], combine: parallel, series: E13}", "E13}", []string{`"E13"`, "nearest: E3"}},
		{"around nothing", "capacitor", "choose: {families: [c0g], combine: parallel, around: 0 pF}", "0 pF}", []string{`"0 pF"`, "more than zero"}},
		{"around less than nothing", "capacitor", "choose: {families: [c0g], combine: [single, parallel], around: -1 nF, within: 3 %}", "-1 nF,", []string{`"-1 nF"`, "more than zero"}},
		{"around another unit", "capacitor", "choose: {families: [c0g], combine: parallel, around: 1 mH}", "1 mH}", []string{`"1 mH"`, "capacitance"}},
		{"pair without a value", "capacitor", "choose: {families: [c0g], combine: parallel}", "{part", []string{"missing key value", "in F"}},
		{"value of nothing", "capacitor", "value: 0 pF, choose: {families: [c0g], combine: parallel}", "0 pF,", []string{"more than zero"}},
		{"too much", "capacitor", "value: 1 nF, choose: {families: [c0g, mica, polystyrene, polypropylene], combine: [single, parallel], series: E192, within: 10 %}", "{families", []string{"too much to choose from", "at most 20000 ways", "not 1"}},
		{"more than memory holds", "capacitor", "value: 1 nF, choose: {families: [c0g, mica, polystyrene, polypropylene, polyester, p100, n030, n075], combine: [series, parallel], series: E192, within: 99 %}", "{families", []string{"too much to choose from"}},
		{"nothing", "capacitor", "value: 222.2 pF, choose: {families: [c0g], combine: [parallel], within: 0.01 %, series: E3}", "222.2 pF,", []string{"nothing to choose from", `"222.2 pF"`, "a wider within"}},
		{"reference that ends in a letter", "capacitor", "REF", "X1Z,", []string{"one that ends in a figure", `"X1Z"`}},
		{"steady voltage", "capacitor", "across: 5 V, value: 1 nF, choose: {families: [c0g], combine: [single, series]}", "5 V,", []string{"series pair", "leakage", `"5 V"`}},
	} {
		t.Run(c.name, func(t *testing.T) {
			text := openingText(c.kind, c.text)
			if c.text == "REF" {
				text = strings.Replace(openingText(c.kind, sound), "X1,", "X1Z,", 1)
			}
			line := strings.Split(text, "\n")[7]
			at := fmt.Sprintf("8:%d", len([]rune(line[:strings.LastIndex(line, c.at)]))+1)
			oneFault(t, text, "open pair", "open pair", at, c.words)
		})
	}
	t.Run("steady voltage across a follower", func(t *testing.T) {
		oneFault(t, openingText("capacitor", "value: 1 nF, choose: {families: [c0g], combine: [single, series]}"),
			"same_as: own.x", "same_as: own.x, across: supply", "9:44", []string{"series pair", `"supply"`})
	})
	t.Run("a follower's pieces taken", func(t *testing.T) {
		oneFault(t, openingText("capacitor", sound), "      y:", "      w: {ref: X2B, value: 1 kΩ}\n      y:", "9:16", []string{"duplicate reference", `"X2B"`, "X2 (line 10)"})
	})
	t.Run("pieces taken after", func(t *testing.T) {
		oneFault(t, openingText("capacitor", sound), "      y:", "      w: {ref: X1A, value: 1 kΩ}\n      y:", "9:16", []string{"duplicate reference", `"X1A"`, "line 8"})
	})
}

// TestTooMuch counts what may fill a position before it is listed: as many as a
// naive double loop finds, those of one piece beside them, times the lots.
func TestTooMuch(t *testing.T) {
	const families = "families: [c0g, mica, polystyrene, polypropylene]"
	b, o := opening(t, "capacitor", "value: 2 nF, choose: {"+families+"}")
	near := func(whole, lesser float64) bool {
		return math.Abs(whole/2e-9-1) <= 0.05+1e-12 && lesser/2e-9 >= 0.01-1e-12
	}
	pairs := len(naive(t, b, o, build.Parallel, series.Between("E192", 10e-12, 4e-9), near))
	singles := len(b.Fittings(o))
	list := func(n int) string { // 100 pF, 101 pF and so on
		var words []string
		for i := range n {
			words = append(words, fmt.Sprintf("%d pF", 100+i))
		}
		return "families: [c0g], tolerances: [5 %], values: [" + strings.Join(words, ", ") + "], combine: parallel"
	}
	for _, c := range []struct {
		name, choose string
		n            int
	}{
		{"a window", families + ", series: E192, within: 5 %, combine: [parallel]", pairs},
		{"single too", families + ", series: E192, within: 5 %, combine: [parallel, single]", pairs + singles},
		{"two lots", families + ", series: E192, within: 5 %, combine: [parallel, single], lots: [one, mixed]", 2 * (pairs + singles)},
		{"listed", list(199), 199 * 200 / 2},          // 19,900
		{"one more listed", list(200), 200 * 201 / 2}, // 20,100
		{"two lots of what is listed", list(141) + ", lots: [one, mixed]", 141 * 142},
	} {
		t.Run(c.name, func(t *testing.T) {
			text := openingText("capacitor", "value: 2 nF, choose: {"+c.choose+"}")
			if c.n > build.MaxFittings {
				oneFault(t, text, "open pair", "open pair", "8:58", []string{"too much to choose from", fmt.Sprintf("not %d:", c.n)})
				return
			}
			b, err := read(text)
			if err != nil || len(b.Fittings(b.Openings[0])) != c.n {
				t.Errorf("want %d: %v", c.n, err)
			}
		})
	}
	if pairs <= build.MaxFittings {
		t.Errorf("only %d pairs", pairs)
	}
}
