package build_test

import (
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/bom/part"
	"batchwright/tolerance/build"
)

// fittedAs says in short what is at a position.
func fittedAs(b *build.Build, position string) string {
	p := b.Place(position)
	return fmt.Sprintf("%s %s %s %g mixed %t %g ppm/K", p.Part.Ref, p.Part.Family, p.Part.ValueText(), p.Part.Grade(), p.Part.LotsMixed,
		p.Part.Parameters[0].Temperature.Value*1e6)
}

// TestRefit fits lines anew: what is said changes, what is not stays, what the
// file writes on the part holds for the new one, and followers follow. 125 ppm/K
// is the slope of the embedded polystyrene, 0 that of c0g, and polystyrene's
// grades are 1, 2.5 and 5 %.
func TestRefit(t *testing.T) {
	const c1 = "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %"
	for _, c := range []struct {
		name, more string // what else the file writes on C1
		at         string
		r          build.Refitting
		want       string // of C1 or L1
		follower   string // what follows it
	}{
		{"a family", "", "fixed.upper", build.Refitting{Family: "polystyrene"},
			"C1 polystyrene 220 pF 0.05 mixed false -125 ppm/K", "C2 polystyrene 220 pF 0.05 mixed false -125 ppm/K"},
		{"named by a follower", "", "fixed.lower", build.Refitting{Family: "polystyrene", Tolerance: 0.025},
			"C1 polystyrene 220 pF 0.025 mixed false -125 ppm/K", "C2 polystyrene 220 pF 0.025 mixed false -125 ppm/K"},
		{"a value", "", "fixed.upper", build.Refitting{Worth: build.Worth{Low: 180e-12, High: 180e-12, Text: "180 pF"}},
			"C1 c0g 180 pF 0.05 mixed false 0 ppm/K", "C2 c0g 180 pF 0.05 mixed false 0 ppm/K"},
		{"lots", "", "fixed.upper", build.Refitting{Lots: build.MixedLots},
			"C1 c0g 220 pF 0.05 mixed true 0 ppm/K", "C2 c0g 220 pF 0.05 mixed true 0 ppm/K"},
		{"lots stay", ", lots: mixed", "fixed.upper", build.Refitting{Family: "polystyrene"},
			"C1 polystyrene 220 pF 0.05 mixed true -125 ppm/K", "C2 polystyrene 220 pF 0.05 mixed true -125 ppm/K"},
		{"lots no longer mixed", ", lots: mixed", "fixed.upper", build.Refitting{Lots: build.OneLot},
			"C1 c0g 220 pF 0.05 mixed false 0 ppm/K", "C2 c0g 220 pF 0.05 mixed false 0 ppm/K"},
		{"a coefficient written on the part", ", temperature_coefficient: 30 ppm/K", "fixed.upper", build.Refitting{Family: "polystyrene"},
			"C1 polystyrene 220 pF 0.05 mixed false 30 ppm/K", "C2 polystyrene 220 pF 0.05 mixed false 30 ppm/K"},
		{"nothing", "", "fixed.upper", build.Refitting{},
			"C1 c0g 220 pF 0.05 mixed false 0 ppm/K", "C2 c0g 220 pF 0.05 mixed false 0 ppm/K"},
	} {
		t.Run(c.name, func(t *testing.T) {
			b, err := read(strings.Replace(good, c1, c1+c.more, 1))
			if err != nil {
				t.Fatal(err)
			}
			before := fittedAs(b, "fixed.upper") + fittedAs(b, "fixed.lower")
			got, err := b.Refit([]string{c.at, c.at}, c.r)
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff([]string{c.want, c.follower}, []string{fittedAs(got, "fixed.upper"), fittedAs(got, "fixed.lower")}); diff != "" {
				t.Error(diff)
			}
			if after := fittedAs(b, "fixed.upper") + fittedAs(b, "fixed.lower"); after != before {
				t.Errorf("the original was changed: %s", after)
			}
			if other := fittedAs(got, "moving.tank"); other != fittedAs(b, "moving.tank") {
				t.Errorf("another line was changed: %s", other)
			}
		})
	}
}

// A tolerance that is written over the grades stays where only the value
// changes.
func TestRefitKeepsWrittenTolerance(t *testing.T) {
	b, err := read(strings.Replace(good, "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %", "upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 3 %", 1))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		r    build.Refitting
		want float64
	}{
		{build.Refitting{Worth: build.Worth{Low: 180e-12, High: 180e-12}}, 0.03},
		{build.Refitting{Tolerance: 0.01}, 0.01},
		{build.Refitting{Family: "polystyrene"}, 0.05}, // the next wider that is sold
	} {
		got, err := b.Refit([]string{"fixed.upper"}, c.r)
		if err != nil || got.Place("fixed.upper").Part.Grade() != c.want {
			t.Errorf("%+v: %+v, %v; want %g", c.r, got.Place("fixed.upper").Part, err, c.want)
		}
	}
}

// Figures written under `parameters` hold for another family too.
func TestRefitKeepsParameters(t *testing.T) {
	b, err := read(strings.Replace(good, "parts: {r: {ref: R1, value: 10 kΩ}}",
		"parts: {r: {ref: R1, value: 10 kΩ}, d: {ref: D1, family: signal-diode, parameters: {drop: 0.4 V}}}", 1))
	if err != nil {
		t.Fatal(err)
	}
	got, err := b.Refit([]string{"ratio.d"}, build.Refitting{Family: "schottky-diode"})
	if err != nil {
		t.Fatal(err)
	}
	p := got.Place("ratio.d").Part
	if p.Family != "schottky-diode" || p.Parameter("drop").Value != 0.4 {
		t.Errorf("%+v", p)
	}
}

// Refitting an open line closes it and no other.
func TestRefitOpening(t *testing.T) {
	b, err := read(strings.Replace(open("value: 220 pF, choose: {families: [c0g, polystyrene]}"),
		"tuner: {ref: CT1, value: 4..34 pF, family: film-trimmer}", "tuner: {ref: CT1, value: 4..34 pF, choose: {families: [film-trimmer, air-trimmer]}}", 1))
	if err != nil {
		t.Fatal(err)
	}
	got, err := b.Refit([]string{"fixed.upper"}, build.Refitting{Family: "polystyrene", Tolerance: 0.01})
	if err != nil {
		t.Fatal(err)
	}
	if len(b.Openings) != 2 || len(got.Openings) != 1 || got.Openings[0].Positions[0] != "fixed.tuner" {
		t.Errorf("open: %v, was %v", got.Openings, b.Openings)
	}
	wide := build.Worth{Low: 5e-12, High: 60e-12, Text: "5..60 pF"}
	got, err = got.Refit([]string{"fixed.tuner"}, build.Refitting{Worth: wide})
	if err != nil || len(got.Openings) != 0 || got.Place("fixed.tuner").Part.ValueText() != "5..60 pF" || got.Place("fixed.tuner").Quantity != "5..60 pF" {
		t.Errorf("%+v, %v", got, err)
	}
}

// What cannot be fitted is said.
func TestRefitRefuses(t *testing.T) {
	b, err := read(strings.Replace(good, "coil: {ref: L2, same_as: fixed.coil}",
		"coil: {ref: L2, winding: {turns: 300, diameter: 30 mm, length: 60 mm}}", 1))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		at   string
		r    build.Refitting
		want string
	}{
		{"fixed.uper", build.Refitting{Family: "c0g"}, "nothing is fitted"},
		{"fixed.upper", build.Refitting{Family: "drum-choke"}, "no family that sells a capacitor"},
		{"ratio.r", build.Refitting{Tolerance: 0.01}, "no family that sells a resistor"},
		{"fixed.upper", build.Refitting{Family: "polyester"}, "sold from 1 nF"},
		{"fixed.upper", build.Refitting{Tolerance: 0.07}, "not sold in 7 %"},
		{"moving.coil", build.Refitting{Lots: build.MixedLots}, "wound, not bought"},
	} {
		if got, err := b.Refit([]string{c.at}, c.r); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s %+v: %v, %v; want %q", c.at, c.r, got != nil, err, c.want)
		}
	}
	if got := b.Line("fixed.lower"); cmp.Diff([]string{"fixed.upper", "fixed.lower"}, got) != "" || b.Line("moving.pad") != nil {
		t.Errorf("line of fixed.lower: %q", got)
	}
}

func TestClosestGrade(t *testing.T) {
	film := &part.Family{Grades: []part.Grade{{Tolerance: 0.025}, {Tolerance: 0.05}, {Tolerance: 0.1}}}
	for tolerance, want := range map[float64]float64{0.01: 0.025, 0.025: 0.025, 0.05 * (1 + 1e-12): 0.05, 0.06: 0.1, 0.2: 0.1, 0: 0.025} {
		if got := build.ClosestGrade(film, tolerance); got != want {
			t.Errorf("for %g: %g, want %g", tolerance, got, want)
		}
	}
	if got := build.ClosestGrade(&part.Family{}, 0.05); got != 0 {
		t.Errorf("of a family without grades: %g", got)
	}
}

// TestDrifting asks which outputs' drift matters.
func TestDrifting(t *testing.T) {
	const (
		trims   = "trims:\n  - {turn: fixed.tuner, output: mixer.offset, to: 0 Hz, within: 2 Hz}\n"
		targets = "targets:\n  - {name: drift, output: mixer.offset, change_from: bench, at: [warm], limit: 40 Hz, share: 99 %}\n  - {name: reach, trim: fixed.tuner, share: 99.5 %}\n"
	)
	for name, c := range map[string]struct{ old, now, want string }{
		"a change's":      {"output: mixer.offset, change_from", "output: fixed.frequency, change_from", "[fixed.frequency]"},
		"the last trim's": {targets, "targets:\n  - {name: at the bench, output: fixed.frequency, between: [1 Hz, 1 MHz]}\n", "[mixer.offset]"},
		"neither":         {trims + targets, "", "[]"},
	} {
		b, err := read(strings.Replace(good, c.old, c.now, 1))
		if err != nil {
			t.Fatal(err)
		}
		if got := fmt.Sprint(b.Drifting()); got != c.want {
			t.Errorf("%s: %s, want %s", name, got, c.want)
		}
	}
}
