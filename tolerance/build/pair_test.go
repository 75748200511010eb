package build_test

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"batchwright/bom/document"
	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/tolerance/build"
)

// paired is a build whose parts are made up of two; the tests break one line of
// it.
const paired = `build: pairs
units: 4
conditions:
  bench: {temperature: 25 °C, supply: 5 V}
  warm:  {temperature: 35 °C}
stages:
  first:
    kind: tuned-tank
    parts:
      coil: {ref: L1, series: [{value: 1 mH, temperature_coefficient: 90 ppm/K}, {value: 220 uH, temperature_coefficient: 30 ppm/K}]}
      tank: {ref: C6, parallel: [{value: 180 pF, family: c0g, tolerance: 5 %}, {value: 39 pF, family: polystyrene, tolerance: 2.5 %, temperature_coefficient: -150 ppm/K}]}
  second:
    kind: tuned-tank
    parts:
      coil: {ref: L2, same_as: first.coil}
      tank: {ref: C7, same_as: first.tank}
  own:
    kind: formula
    parts:
      c: {ref: C1, series: [{value: 300 pF, temperature_coefficient: 60 ppm/K}, {value: 150 pF, temperature_coefficient: -300 ppm/K}]}
      r: {ref: R1, parallel: [{value: 3 kΩ, temperature_coefficient: 100 ppm/K}, {value: 6 kΩ, temperature_coefficient: -50 ppm/K}]}
      s: {ref: R2, series: [{value: 4.7 kΩ, family: metal-film-50, tolerance: 1 %}, {value: 220 Ω, family: carbon-film, tolerance: 5 %}], lots: mixed}
      l: {part: coil, ref: L3, parallel: [{value: 3 mH}, {value: 6 mH}]}
      t: {ref: Q1, family: small-signal-npn}
      u: {ref: C8, same_as: own.c}
    outputs:
      c: {expression: c, unit: F}
      r: {expression: r, unit: Ω}
      s: {expression: s, unit: Ω}
      l: {expression: l, unit: H}
      u: {expression: u, unit: F}
`

// TestPairRead reads two parts at a position: references, values, families and
// grades are each one's own.
func TestPairRead(t *testing.T) {
	b, err := read(paired)
	if err != nil {
		t.Fatal(err)
	}
	for position, want := range map[string]string{
		"first.tank":  "parallel C6: C6A c0g 180 pF 5 %, C6B polystyrene 39 pF 2.5 %; 180 pF ∥ 39 pF",
		"second.tank": "parallel C7: C7A c0g 180 pF 5 %, C7B polystyrene 39 pF 2.5 %; 180 pF ∥ 39 pF",
		"first.coil":  "series L1: L1A  1 mH 0 %, L1B  220 µH 0 %; 1 mH + 220 µH",
		"own.s":       "series R2: R2A metal-film-50 4.7 kΩ 1 % mixed, R2B carbon-film 220 Ω 5 % mixed; 4.7 kΩ + 220 Ω",
		"own.u":       "series C8: C8A  300 pF 0 %, C8B  150 pF 0 %; 300 pF + 150 pF",
	} {
		p := b.Place(position)
		var words []string
		for _, q := range p.Pieces() {
			text := fmt.Sprintf("%s %s %s %.3g %%", q.Ref, q.Family, q.ValueText(), 100*q.Grade())
			if q.LotsMixed {
				text += " mixed"
			}
			words = append(words, text)
		}
		if got := fmt.Sprintf("%s %s: %s; %s", p.Combine, p.Base(), strings.Join(words, ", "), p.Quantity); got != want {
			t.Errorf("%s is\n%s, want\n%s", position, got, want)
		}
		if refs := p.Refs(); !p.Paired() || len(refs) != 2 || refs[0] != p.Base()+"A" || refs[1] != p.Base()+"B" {
			t.Errorf("%s: %v", position, refs)
		}
	}
	var refs []string
	for _, p := range b.Parts() {
		refs = append(refs, p.Ref)
	}
	if got, want := strings.Join(refs, " "), "L1A L1B C6A C6B L2A L2B C7A C7B C1A C1B R1A R1B R2A R2B L3A L3B Q1 C8A C8B"; got != want {
		t.Errorf("parts are %s, want %s", got, want)
	}
	if p := b.Place("own.t"); p.Paired() || p.Base() != "Q1" || len(p.Refs()) != 1 {
		t.Errorf("a transistor is %v", p.Refs())
	}
	none := build.Place{}
	if len(none.Refs()) != 0 {
		t.Errorf("nothing fitted has references %v", none.Refs())
	}
}

// TestPairSameAs buys what follows a pair on the lines of the pair, and draws it
// from their lots.
func TestPairSameAs(t *testing.T) {
	m := compiled(t, paired)
	at := map[string]part.Part{}
	for _, p := range m.Build.Parts() {
		at[p.Ref] = p
	}
	lots := map[string]int{}
	for _, x := range m.Inputs {
		if x.Parameter == "value" {
			lots[x.Ref] = x.Lot
		}
	}
	for first, second := range map[string]string{"C6A": "C7A", "C6B": "C7B"} {
		if order.Key(at[first]) != order.Key(at[second]) || lots[first] < 0 || lots[first] != lots[second] {
			t.Errorf("%s and %s are bought apart, or of lots %d and %d", first, second, lots[first], lots[second])
		}
	}
	if order.Key(at["C6A"]) == order.Key(at["C6B"]) || lots["C6A"] == lots["C6B"] {
		t.Error("two different pieces of a pair are bought as one")
	}
	if lots["R2A"] >= 0 || lots["R2B"] >= 0 {
		t.Errorf("pieces from mixed lots have lots %d and %d", lots["R2A"], lots["R2B"])
	}
	equal := compiled(t, strings.Replace(paired, "{value: 39 pF, family: polystyrene, tolerance: 2.5 %, temperature_coefficient: -150 ppm/K}", "{value: 0.18 nF, family: c0g, tolerance: 5 %}", 1))
	shared := map[int][]string{}
	for _, x := range equal.Inputs {
		if x.Parameter == "value" && x.Lot >= 0 {
			shared[x.Lot] = append(shared[x.Lot], x.Ref)
		}
	}
	if len(shared) != 1 || len(shared[lots["C6A"]]) != 4 {
		t.Errorf("four equal pieces are of lots %v", shared)
	}
}

// TestPairNominal has the values of pairs by hand: what adds up, and what adds
// up by its reciprocal, 1/(1/3 + 1/6) = 2 and 1/(1/300 + 1/150) = 100; the tank's
// frequency is 1/(2π√(LC)). Warm, every piece is 10 K up by its own coefficient.
func TestPairNominal(t *testing.T) {
	m := compiled(t, paired)
	got := nominals(t, m)
	c0g, _ := m.Build.Families.Family("c0g")
	up := func(v, ppm float64) float64 { return v * (1 + 10*ppm*1e-6) }
	l, c := 1e-3+220e-6, 180e-12+39e-12
	warmL := up(1e-3, 90) + up(220e-6, 30)
	warmC := up(180e-12, 1e6*c0g.Scatter.Temperature.Value) + up(39e-12, -150)
	a, b := up(3e3, 100), up(6e3, -50)
	x, y := up(300e-12, 60), up(150e-12, -300)
	f := func(l, c float64) float64 { return 1 / (2 * math.Pi * math.Sqrt(l*c)) }
	for name, want := range map[string]float64{
		"first.frequency bench": f(l, c), "second.frequency bench": f(l, c),
		"first.frequency warm": f(warmL, warmC), "second.frequency warm": f(warmL, warmC),
		"own.c bench": 100e-12, "own.r bench": 2e3, "own.s bench": 4920, "own.l bench": 2e-3, "own.u bench": 100e-12,
		"own.c warm": 1 / (1/x + 1/y), "own.r warm": 1 / (1/a + 1/b), "own.u warm": 1 / (1/x + 1/y),
	} {
		if !(math.Abs(got[name]/want-1) <= 1e-12) {
			t.Errorf("%s = %.12g, want %.12g", name, got[name], want)
		}
	}
}

// TestPairDrift compares the change over 10 K with the first-order formulas: of a
// sum the coefficient is the mean of the pieces', each weighted by its share p of
// the value; where reciprocals add up, by its share of the reciprocal; and of
// a tank df/dT = −f/2·(Σ q_i·α_Li + Σ p_i·α_Ci). What they leave out is of the
// order of (αΔ)², 1e-5 of 1.
func TestPairDrift(t *testing.T) {
	got := nominals(t, compiled(t, paired))
	c0g, _ := part.Embedded().Family("c0g")
	coil := (1e-3*90e-6 + 220e-6*30e-6) / (1e-3 + 220e-6)
	tank := (180*c0g.Scatter.Temperature.Value + 39*-150e-6) / (180 + 39)
	for name, slope := range map[string]float64{
		"first.frequency": -(coil + tank) / 2, "second.frequency": -(coil + tank) / 2,
		"own.c": 60e-6/3 + -300e-6*2/3,   // 300 pF bring 1/300 of 1/100
		"own.r": 100e-6*2/3 + -50e-6*1/3, // 3 kΩ bring 1/3 of 1/2
	} {
		drift := got[name+" warm"]/got[name+" bench"] - 1
		if !(math.Abs(drift-10*slope) <= 9e-6) || !(math.Abs(10*slope) > 1e-4) {
			t.Errorf("%s drifts by %.9g, to first order %.9g", name, drift, 10*slope)
		}
	}
}

// TestPairFaults breaks one line each and asks for the one complaint at its
// place. Columns are counted by hand.
func TestPairFaults(t *testing.T) {
	const tank = `tank: {ref: C6, parallel: [{value: 180 pF, family: c0g, tolerance: 5 %}, {value: 39 pF, family: polystyrene, tolerance: 2.5 %, temperature_coefficient: -150 ppm/K}]}`
	const two = `[{value: 1 nF}, {value: 2 nF}]`
	for _, c := range []struct {
		name, old, new, at string
		words              []string
	}{
		{"parallel beside series", tank, "tank: {ref: C6, parallel: " + two + ", series: " + two + "}", "11:73", []string{"parallel beside series", "one of the two"}},
		{"one part", tank, "tank: {ref: C6, parallel: [{value: 1 nF}]}", "11:33", []string{"pair", "two parts such as"}},
		{"three parts", tank, "tank: {ref: C6, parallel: [{value: 1 nF}, {value: 2 nF}, {value: 3 nF}]}", "11:33", []string{"two parts such as"}},
		{"no list", tank, "tank: {ref: C6, parallel: 2 nF}", "11:33", []string{`"2 nF"`, "two parts such as"}},
		{"nothing", tank, "tank: {ref: C6, parallel: }", "11:32", []string{"two parts such as"}},
		{"no mapping", tank, "tank: {ref: C6, parallel: [{value: 1 nF}, 2 nF]}", "11:49", []string{"part of a pair", `"2 nF"`, "a mapping such as"}},
		{"unknown key", tank, "tank: {ref: C6, parallel: [{value: 1 nF}, {valu: 2 nF, value: 2 nF}]}", "11:50", []string{`"valu"`, "nearest: value"}},
		{"a reference of its own", tank, "tank: {ref: C6, parallel: [{value: 1 nF, ref: C9}, {value: 2 nF}]}", "11:48", []string{`"ref"`, "unknown key"}},
		{"lots of one piece", tank, "tank: {ref: C6, parallel: [{value: 1 nF, lots: mixed}, {value: 2 nF}]}", "11:48", []string{`"lots"`, "unknown key"}},
		{"unknown lots", tank, "tank: {ref: C6, parallel: " + two + ", lots: mixd}", "11:71", []string{`"mixd"`, "nearest: mixed"}},
		{"a value beside", tank, "tank: {ref: C6, value: 3 nF, parallel: " + two + "}", "11:23", []string{`"value"`, "unknown key"}},
		{"choose beside", tank, "tank: {ref: C6, choose: {families: [c0g]}, parallel: " + two + "}", "11:23", []string{`"choose"`, "unknown key"}},
		{"part outside a formula", tank, "tank: {ref: C6, part: capacitor, parallel: " + two + "}", "11:23", []string{`"part"`, "unknown key"}},
		{"missing value", tank, "tank: {ref: C6, parallel: [{value: 1 nF}, {family: c0g}]}", "11:49", []string{"missing key value", "in F"}},
		{"wrong unit", tank, "tank: {ref: C6, parallel: [{value: 1 nF}, {value: 2 mH}]}", "11:57", []string{`"2 mH"`, "capacitance"}},
		{"value of nothing", tank, "tank: {ref: C6, parallel: [{value: 1 nF}, {value: 0 pF}]}", "11:57", []string{"more than zero"}},
		{"unknown family", tank, "tank: {ref: C6, parallel: [{value: 1 nF, family: cog}, {value: 2 nF}]}", "11:56", []string{`"cog"`, "nearest: c0g"}},
		{"family of another type", tank, "tank: {ref: C6, parallel: [{value: 1 nF, family: carbon-film}, {value: 2 nF}]}", "11:56", []string{"carbon-film"}},
		{"rating of a resistor", "{value: 3 kΩ, temp", "{value: 3 kΩ, rated: 5 V, temp", "21:52", []string{"rated of a resistor"}},
		{"reference of the first taken before", "ref: L1, series: [{value: 1 mH, temperature_coefficient: 90 ppm/K}, {value: 220 uH, temperature_coefficient: 30 ppm/K}]", "ref: C6A, value: 1 mH", "10:19", []string{"duplicate reference", `"C6A"`, "C6 (line 11)", "C6A and C6B"}},
		{"reference of the second taken after", "ref: Q1", "ref: R2B", "24:16", []string{"duplicate reference", `"R2B"`, "line 22"}},
		{"reference of a follower's taken", "ref: Q1", "ref: C8B", "24:16", []string{"duplicate reference", `"C8B"`, "C8 (line 25)"}},
		{"reference that ends in a letter", "ref: C6,", "ref: C6X,", "11:19", []string{`"C6X"`, "one that ends in a figure"}},
		{"a follower's that ends in a letter", "ref: C7", "ref: C7X", "16:19", []string{`"C7X"`, "one that ends in a figure"}},
		{"of a transistor", "t: {ref: Q1, family: small-signal-npn}", "t: {ref: Q1, series: [{family: small-signal-npn}, {family: small-signal-npn}]}", "24:28", []string{"series of a transistor", "only resistors, capacitors and coils"}},
		{"of a trimmer", "t: {ref: Q1, family: small-signal-npn}", "t: {ref: Q1, parallel: [{value: 4..34 pF}, {value: 4..34 pF}]}", "24:30", []string{"parallel of a trimmer-capacitor"}},
		{"steady voltage across", "ref: C1, series", "ref: C1, across: 5 V, series", "20:28", []string{"series pair", `"5 V"`, "leakage"}},
		{"steady voltage that refers", "ref: C1, series", "ref: C1, across: supply, series", "20:28", []string{"series pair", `"supply"`, "leakage"}},
		{"steady voltage across a follower", "same_as: own.c", "same_as: own.c, across: 5 V", "25:44", []string{"series pair", `"5 V"`, "leakage"}},
		{"above the second's rating", "tank: {ref: C6,", "tank: {ref: C6, across: 300 V,", "11:31", []string{"capacitor above its rated voltage", `"300 V"`, "at most 50 V"}},
	} {
		t.Run(c.name, func(t *testing.T) { oneFault(t, paired, c.old, c.new, c.at, c.words) })
	}
}

// oneFault breaks a build in one place and asks for one complaint there.
func oneFault(t *testing.T, text, old, new, at string, words []string) {
	t.Helper()
	if strings.Count(text, old) != 1 {
		t.Fatalf("%q stands %d times in the build", old, strings.Count(text, old))
	}
	_, err := read(strings.Replace(text, old, new, 1))
	var faults document.Complaints
	if !errors.As(err, &faults) || len(faults) != 1 || !strings.HasPrefix(faults[0].Error(), "lamp.yaml:"+at+":") || !containsAll(faults[0].Error(), words) {
		t.Errorf("expected one complaint at %s with %q:\n%v", at, words, err)
	}
}

// TestPairRated takes the lower of two ratings: 180 pF rated 50 V beside 39 pF
// rated 20 V stand 15 V but not 30.
func TestPairRated(t *testing.T) {
	text := strings.Replace(paired, "tolerance: 2.5 %,", "tolerance: 2.5 %, rated: 20 V,", 1)
	for volts, want := range map[string]bool{"15 V": true, "-20 V": true, "30 V": false, "-30 V": false} {
		_, err := read(strings.Replace(text, "tank: {ref: C6,", "tank: {ref: C6, across: "+volts+",", 1))
		if (err == nil) != want {
			t.Errorf("%s: %v", volts, err)
		}
		if err != nil && !strings.Contains(err.Error(), "at most 20 V") {
			t.Errorf("%s: %v", volts, err)
		}
	}
}

// TestPairBias puts a pair under a voltage: each piece loses by its own law and
// its own rating. 100 nF rated 16 V at 8 V keeps 80 nF; 100 nF rated 32 V, a
// quarter of the way, 90 nF; a piece without a law all of it.
func TestPairBias(t *testing.T) {
	const law = "bias_law: [[0 %, 0 %], [50 %, -20 %], [100 %, -60 %]]"
	text := strings.Replace(paired, "c: {ref: C1, series: [{value: 300 pF, temperature_coefficient: 60 ppm/K}, {value: 150 pF, temperature_coefficient: -300 ppm/K}]}",
		"c: {ref: C1, across: 8 V, parallel: [{value: 100 nF, rated: 16 V, "+law+"}, {value: 100 nF, rated: 32 V, "+law+"}]}", 1)
	got := nominals(t, compiled(t, text))
	if !(math.Abs(got["own.c bench"]/170e-9-1) <= 1e-12) {
		t.Errorf("under 8 V: %g, want 170 nF", got["own.c bench"])
	}
	if !(math.Abs(got["own.u bench"]/200e-9-1) <= 1e-12) {
		t.Errorf("a follower without a voltage: %g, want 200 nF", got["own.u bench"])
	}
}

// TestPairTypes tells a formula stage's pair by its first piece.
func TestPairTypes(t *testing.T) {
	for text, want := range map[string]part.Type{
		"parallel: [{value: 1 nF}, {value: 2 nF}]":                                   part.Capacitor,
		"series: [{value: 1 kΩ, family: carbon-film}, {value: 2 kΩ}]":                part.Resistor,
		"part: coil, series: [{value: 1 mH, family: air-core}, {value: 2 mH}]":       part.Coil,
		"parallel: [{value: 1 nF, family: c0g}, {value: 2 nF, family: polystyrene}]": part.Capacitor,
	} {
		b, err := read(strings.Replace(paired, "t: {ref: Q1, family: small-signal-npn}", "t: {ref: X1, "+text+"}", 1))
		if err != nil {
			t.Errorf("%s: %v", text, err)
		} else if got := b.Place("own.t"); got.Type != want || !got.Paired() {
			t.Errorf("%s is a %s", text, got.Type)
		}
	}
	oneFault(t, paired, "t: {ref: Q1, family: small-signal-npn}", "t: {ref: Q1, parallel: [{}, {value: 2 nF}]}", "24:31", []string{"part of no known type"})
}

// TestPairReferencesAreFree lets references be used again that no pair needs.
func TestPairReferencesAreFree(t *testing.T) {
	text := strings.Replace(good, "ref: C3", "ref: C1A", 1)
	b, err := read(text)
	if err != nil || !slices.Equal(b.Place("moving.tank").Refs(), []string{"C1A"}) {
		t.Error(err)
	}
}
