package build_test

import (
	"fmt"
	"strings"
	"testing"
)

// open replaces the fixed upper capacitor of the good build by an open one.
func open(choose string) string {
	return strings.Replace(good, "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}", "upper: {ref: C1, "+choose+"}", 1)
}

// TestFittings lists what may fill an opening: every family in every listed
// grade that it is sold in, at every value.
func TestFittings(t *testing.T) {
	for _, c := range []struct {
		name, choose string
		want         []string
	}{
		{"families and grades", "value: 220 pF, choose: {families: [c0g, polystyrene], tolerances: [2 %, 2.5 %, 5 %]}",
			[]string{"c0g 0.02 220 pF", "c0g 0.05 220 pF", "polystyrene 0.025 220 pF", "polystyrene 0.05 220 pF"}},
		{"every grade of the family", "value: 220 pF, family: mica, choose: {}",
			[]string{"mica 0.01 220 pF", "mica 0.02 220 pF", "mica 0.05 220 pF"}},
		{"listed values", "choose: {families: [c0g], tolerances: [5 %], values: [180 pF, 220 pF]}",
			[]string{"c0g 0.05 180 pF", "c0g 0.05 220 pF"}},
		// E24 from 198 pF to 242 pF, the nearest by ratio first.
		{"around a value", "choose: {families: [c0g], tolerances: [5 %], around: 220 pF, within: 10 %, series: E24}",
			[]string{"c0g 0.05 220 pF", "c0g 0.05 240 pF", "c0g 0.05 200 pF"}},
		{"a grade written beside is the base only", "value: 220 pF, tolerance: 5 %, choose: {families: [c0g], tolerances: [1 %, 5 %]}",
			[]string{"c0g 0.01 220 pF", "c0g 0.05 220 pF"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			b, err := read(open(c.choose))
			if err != nil {
				t.Fatal(err)
			}
			var got []string
			for _, f := range b.Fittings(b.Openings[0]) {
				got = append(got, fmt.Sprintf("%s %g %s", f.Pieces[0].Family, f.Pieces[0].Tolerance, f.Text))
				if f.Pieces[0].Part.Grade() != f.Pieces[0].Tolerance {
					t.Errorf("%s is placed with a tolerance of %g", got[len(got)-1], f.Pieces[0].Part.Grade())
				}
			}
			if strings.Join(got, ", ") != strings.Join(c.want, ", ") {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}

// TestFitLeavesTheBuild fits an opening, all its positions, and leaves the
// build it was fitted from as it was.
func TestFitLeavesTheBuild(t *testing.T) {
	b, err := read(open("value: 220 pF, choose: {families: [c0g, polystyrene], tolerances: [5 %]}"))
	if err != nil {
		t.Fatal(err)
	}
	list := b.Fittings(b.Openings[0])
	fitted, err := b.Fit(list[1:])
	if err != nil {
		t.Fatal(err)
	}
	for _, position := range []string{"fixed.upper", "fixed.lower"} {
		if got := fitted.Place(position).Part; got.Family != "polystyrene" {
			t.Errorf("%s is %+v", position, got)
		}
		if got := b.Place(position).Part; got.Family != "c0g" {
			t.Errorf("%s of the original is %+v", position, got)
		}
	}
	if fitted.Place("fixed.lower").Part.Ref != "C2" || len(fitted.Openings) != 0 || len(b.Openings) != 1 {
		t.Error("references or openings are not as they should be")
	}
}

// TestDefaults asks for what a file may leave out.
func TestDefaults(t *testing.T) {
	text := strings.Replace(good, "change_from: bench, at: [warm], limit", "change_from: warm, limit", 1)
	text = strings.Replace(text, "  warm:  {temperature: 33 °C}", "  warm:  {temperature: 33 °C}\n  cool:  {temperature: 13 °C}", 1)
	b, err := read(text)
	if err != nil {
		t.Fatal(err)
	}
	if got := fmt.Sprint(b.Targets[0].At); got != "[0 2]" {
		t.Errorf("a change from the second of three conditions is asked at %s", got)
	}
	if got := b.Conditions[2].Values; got[0] != 13 || got[1] != 1 || got[2] != 0.5 || b.Conditions[1].Values[0] != 33 || b.Conditions[0].Values[0] != 23 {
		t.Errorf("conditions are %v", b.Conditions)
	}
	if b.Spares != 5 {
		t.Errorf("%d %% spares", b.Spares)
	}
	for text, want := range map[string]bool{"0 %": true, "12 %": true, "2.5 %": false, "101 %": false, "5": false} {
		_, err := read("spares: " + text + "\n" + good)
		if (err == nil) != want {
			t.Errorf("spares of %s: %v", text, err)
		}
	}
}

// TestTypesInFormulas asks what type a formula stage's part is taken for.
func TestTypesInFormulas(t *testing.T) {
	for text, want := range map[string]string{
		"value: 4k7": "resistor", "value: 10 nF": "capacitor", "value: 1 mH": "coil",
		"value: 0..10 kΩ": "trimmer-resistor", "value: 4..34 pF": "trimmer-capacitor",
		"value: 1 nF, family: c0g": "capacitor", "family: signal-diode": "diode",
		"value: 1 nF, choose: {families: [c0g, mica]}":           "capacitor",
		"choose: {families: [film-trimmer], values: [4..34 pF]}": "trimmer-capacitor",
		"value: 1 kΩ, part: resistor":                            "resistor",
	} {
		b, err := read(strings.Replace(good, "parts: {r: {ref: R1, value: 10 kΩ}}", "parts: {r: {ref: R1, value: 10 kΩ}, x: {ref: X9, "+text+"}}", 1))
		if err != nil {
			t.Errorf("%s: %v", text, err)
			continue
		}
		if got := string(b.Place("ratio.x").Type); got != want {
			t.Errorf("%s is taken for a %s, want a %s", text, got, want)
		}
	}
}
