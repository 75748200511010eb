package build_test

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"batchwright/bom/document"
	"batchwright/tolerance/build"
	"batchwright/tolerance/tape"
)

// biased is a build whose capacitors stand under steady voltages; the tests
// break one line of it.
const biased = `build: capacitors under voltage
units: 2
conditions:
  low:   {temperature: 25 °C, supply: 4 V}
  point: {supply: -8 V}
  over:  {supply: 20 V}
stages:
  rail:
    kind: divider
    settings: {input: 12 V}
    parts: {upper: {ref: R1, value: 1 kΩ, tolerance: 10 %}, lower: {ref: R2, value: 1 kΩ}}
  own:
    kind: formula
    parts:
      exact: {part: capacitor, ref: C1, value: 100 nF, across: supply, rated: 16 V, bias_law: [[0 %, 0 %], [50 %, -20 %], [100 %, -60 %]]}
      same:  {ref: C2, same_as: own.exact, across: -12 V}
      none:  {ref: C3, same_as: own.exact}
      wide:  {ref: C4, value: 100 nF, family: x7r, tolerance: 10 %, across: rail.voltage, rated: 12 V}
      film:  {ref: C5, value: 100 nF, family: polyester, tolerance: 10 %, across: rail.voltage}
      fresh: {ref: C6, value: 100 nF, family: x7r, tolerance: 10 %}
    outputs:
      a: {expression: exact, unit: F}
      b: {expression: same, unit: F}
      c: {expression: none, unit: F}
      d: {expression: wide, unit: F}
      e: {expression: film, unit: F}
      f: {expression: fresh, unit: F}
`

// TestAcrossNominal has what straight lines leave of 100 nF rated 16 V: 90 at
// 4 V, 80 at the point of 8 V, 60 at 12 V, 40 at 16 V and beyond, whichever way
// round; and X7R at half its rated voltage the middle of 45 and 95 %.
func TestAcrossNominal(t *testing.T) {
	got := nominals(t, compiled(t, biased))
	for name, want := range map[string]float64{
		"own.a low": 90e-9, "own.a point": 80e-9, "own.a over": 40e-9,
		"own.b low": 60e-9, "own.b over": 60e-9,
		"own.c low": 100e-9, "own.c over": 100e-9,
		"own.d low": 70e-9, "own.f low": 100e-9,
	} {
		if !(math.Abs(got[name]-want) <= 1e-12*want) {
			t.Errorf("%s = %.12g, want %.12g", name, got[name], want)
		}
	}
}

// output finds an output at a condition.
func output(t *testing.T, m *build.Model, name string, condition int) build.Output {
	t.Helper()
	for _, o := range m.Outputs {
		if o.Name.String() == name && o.Condition == condition {
			return o
		}
	}
	t.Fatalf("no %s", name)
	return build.Output{}
}

// TestAcrossInputs asks which pieces have a place of their own between the
// limits, and that it is alike in a lot as the temperature is.
func TestAcrossInputs(t *testing.T) {
	var names []string
	lots := map[string]int{}
	for _, x := range compiled(t, strings.Replace(biased, "fresh: {ref: C6, value: 100 nF, family: x7r, tolerance: 10 %}",
		"fresh: {ref: C6, same_as: own.wide, across: 3 V}", 1)).Inputs {
		if x.Parameter == "bias" {
			names = append(names, fmt.Sprintf("%s %g ± %g rho %g", x.Ref, x.Centre, x.HalfWidth, x.Rho))
			lots[x.Ref] = x.Lot
		}
	}
	if got := strings.Join(names, ", "); got != "C4 0 ± 1 rho 0.8, C6 0 ± 1 rho 0.8" || lots["C4"] < 0 || lots["C4"] != lots["C6"] {
		t.Errorf("%s, of lots %v", got, lots)
	}
}

// TestAcrossLimits has the ends of X7R rated 12 V under 6 V, the rest of the
// part at its middle: 45 and 95 nF of 100; as values, as bounds, and within the
// two the slope by the rail's own voltage.
func TestAcrossLimits(t *testing.T) {
	m := compiled(t, biased)
	p := m.Graph.Program(output(t, m, "own.d", 0).Node)
	in, box := make([][]float64, len(m.Inputs)), make([]tape.Interval, len(m.Inputs))
	bias, upper := -1, -1
	for i, x := range m.Inputs {
		in[i], box[i] = []float64{x.Centre}, tape.Point(x.Centre)
		switch {
		case x.Ref == "C4" && x.Parameter == "bias":
			bias = i
		case x.Ref == "R1" && x.Parameter == "value":
			upper = i
		}
	}
	if bias < 0 || upper < 0 {
		t.Fatal("no such inputs")
	}
	value := func() float64 {
		dst := [][]float64{{0}}
		p.Values(dst, in, p.NewFrame(1))
		return dst[0][0]
	}
	for z, want := range map[float64]float64{-1: 45e-9, 0: 70e-9, 1: 95e-9} {
		in[bias][0] = z
		if got := value(); !(math.Abs(got-want) <= 1e-12*want) {
			t.Errorf("at %g: %g, want %g", z, got, want)
		}
	}
	box[bias] = tape.Interval{Low: -1, High: 1}
	if got := p.Bounds(box)[0]; !(math.Abs(got.Low-45e-9) < 1e-18 && math.Abs(got.High-95e-9) < 1e-18) {
		t.Errorf("bounds %g to %g", got.Low, got.High)
	}
	// Above the point, a volt more of 12 V takes (35 − 0)/100 of 100 nF a share:
	// middles 70 at half, 55 at the whole, so −30 nF a share. R1 larger by a
	// hundredth lowers 12 V/(2.01) to 5.97 V: below the point, where the middle
	// falls by 60 nF a share.
	nominal := m.Inputs[upper].Centre
	in[bias][0], in[upper][0] = 0, 1.01*nominal
	want := 100e-9 - 60e-9*12/2.01/12
	if got := value(); !(math.Abs(got-want) <= 1e-12*want) {
		t.Errorf("off the point: %.12g, want %.12g", got, want)
	}
	direction := make([][]float64, len(in))
	for i := range direction {
		direction[i] = []float64{0}
	}
	direction[upper][0] = nominal
	dst, ddst := [][]float64{{0}}, [][]float64{{0}}
	p.Tangents(dst, ddst, in, direction, p.NewFrame(1))
	if want := 60e-9 / (2.01 * 2.01); !(math.Abs(ddst[0][0]-want) <= 1e-12*want) {
		t.Errorf("slope %.12g, want %.12g", ddst[0][0], want)
	}
}

// TestAcrossRegulator takes the voltage of a negative regulator: −12 V of 16 V
// leaves 60 nF.
func TestAcrossRegulator(t *testing.T) {
	text := strings.Replace(biased, "  own:\n", `  supply_rail:
    kind: fixed-regulator
    settings: {input: -15 V}
    parts:
      regulator: {ref: U1, value: -12 V, family: fixed-regulator-negative, tolerance: 4 %}
      input_c:   {ref: C7, value: 100 nF}
      output_c:  {ref: C8, value: 100 nF}
  own:
`, 1)
	text = strings.Replace(text, "across: -12 V", "across: supply_rail.voltage", 1)
	if got, want := nominals(t, compiled(t, text))["own.b low"], 60e-9; !(math.Abs(got-want) <= 1e-3*want) {
		t.Errorf("%g, want %g", got, want)
	}
}

// TestAcrossFaults breaks one line each and asks for the one complaint at its
// place.
func TestAcrossFaults(t *testing.T) {
	for _, c := range []struct {
		name, old, new, at string
		words              []string
	}{
		{"above the rated voltage", "across: -12 V", "across: -17 V", "16:52", []string{"above its rated voltage", "-17 V", "at most 16 V"}},
		{"above the family's", "across: rail.voltage}", "across: 600 V}", "19:83", []string{"above its rated voltage"}},
		{"no such variable", "across: supply", "across: suply", "15:64", []string{"suply", "nearest: supply"}},
		{"no such output", "across: rail.voltage}", "across: rail.volts}", "19:83", []string{"rail.volts", "nearest: rail.voltage"}},
		{"not a voltage", "across: rail.voltage}", "across: rail.current}", "19:83", []string{"wrong unit", "is in A"}},
		{"wrong unit", "across: -12 V", "across: 5 mA", "16:52", []string{"5 mA"}},
		{"bare number", "across: -12 V", "across: 5", "16:52", []string{"without a unit"}},
		{"a mapping", "across: -12 V", "across: {value: 5 V}", "16:52", nil},
		{"what needs it", "across: -12 V", "across: own.b", "16:52", []string{"own.b", "the capacitor itself"}},
		{"rated nothing", "rated: 16 V", "rated: 0 V", "15:79", []string{"more than zero"}},
		{"a law without a rating", ", rated: 16 V", "", "15:82", []string{"without a rated voltage"}},
		{"of a resistor", "R1, value: 1 kΩ", "R1, across: 5 V, value: 1 kΩ", "11:38", []string{"across of a resistor"}},
		{"rating of a resistor", "R1, value: 1 kΩ", "R1, rated: 5 V, value: 1 kΩ", "11:37", []string{"rated of a resistor"}},
		{"law beside same_as", "across: -12 V", "rated: 12 V", "16:44", []string{"rated", "unknown key"}},
		{"law that starts late", "[[0 %, 0 %], [50 %, -20 %]", "[[10 %, 0 %], [50 %, -20 %]", "15:96", []string{"start"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			if strings.Count(biased, c.old) != 1 {
				t.Fatalf("%q stands %d times in the build", c.old, strings.Count(biased, c.old))
			}
			_, err := read(strings.Replace(biased, c.old, c.new, 1))
			var faults document.Complaints
			if !errors.As(err, &faults) || len(faults) != 1 || !strings.HasPrefix(faults[0].Error(), "lamp.yaml:"+c.at+":") || !containsAll(faults[0].Error(), c.words) {
				t.Errorf("expected one complaint at %s with %q:\n%v", c.at, c.words, err)
			}
		})
	}
}

// TestAcrossInACircle is a capacitor under a voltage that needs it.
func TestAcrossInACircle(t *testing.T) {
	_, err := read(strings.Replace(biased, "settings: {input: 12 V}", "settings: {input: {plate: {distance: 1 m, area: 1 m2}}}", 1))
	if err == nil {
		t.Error("a plate for a voltage is read")
	}
	text := strings.Replace(biased, "kind: divider\n    settings: {input: 12 V}\n    parts: {upper: {ref: R1, value: 1 kΩ, tolerance: 10 %}, lower: {ref: R2, value: 1 kΩ}}",
		"kind: formula\n    outputs: {voltage: {expression: own.d*volt/(1e-9*farad), unit: V}}", 1)
	_, err = read(text)
	if err == nil || !containsAll(err.Error(), []string{"lamp.yaml:9:11:", "rail -> own -> rail"}) {
		t.Errorf("got %v", err)
	}
}

// TestAcrossOwnStage takes the voltage of the capacitor's own stage, where that
// does not need it: 12 V of 16 V, twice, leaves 60 nF; and where two capacitors
// need each other by it.
func TestAcrossOwnStage(t *testing.T) {
	text := strings.Replace(biased, "across: -12 V", "across: own.v", 1)
	text += `      v: {expression: "same.fitted*none/(1e-7*farad)*12*volt", unit: V}
      w: {expression: "same/(1e-7*farad)*volt", unit: V}
`
	if got, want := nominals(t, compiled(t, text))["own.b low"], 60e-9; !(math.Abs(got-want) <= 1e-12*want) {
		t.Errorf("%g, want %g", got, want)
	}
	_, err := read(strings.Replace(text, "same_as: own.exact}", "same_as: own.exact, across: own.w}", 1))
	if err == nil || !containsAll(err.Error(), []string{"lamp.yaml:16:52:", "lamp.yaml:17:52:", "the capacitor itself"}) {
		t.Errorf("got %v", err)
	}
}

// TestSelfReferences are a setting and an output that need their own stage.
func TestSelfReferences(t *testing.T) {
	for _, c := range []struct{ old, new, want string }{
		{"settings: {input: 12 V}", "settings: {input: rail.voltage}", "rail -> rail"},
		{"a: {expression: exact, unit: F}", "a: {expression: own.a, unit: F}", "outputs in a circle"},
	} {
		_, err := read(strings.Replace(biased, c.old, c.new, 1))
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v", c.new, err)
		}
	}
	if _, err := read(strings.Replace(biased, "b: {expression: same", "b: {expression: own.a + same", 1)); err != nil {
		t.Errorf("an output named in full: %v", err)
	}
}

// TestAcrossOpen leaves a capacitor's family open: a family that is not made for
// the voltage at one of its positions is not among the choices, and a choice
// keeps what is written of rating and voltage.
func TestAcrossOpen(t *testing.T) {
	wide := "wide:  {ref: C4, value: 100 nF, family: x7r, tolerance: 10 %, across: rail.voltage, rated: 12 V}"
	fresh := "fresh: {ref: C6, value: 100 nF, family: x7r, tolerance: 10 %}"
	text := strings.Replace(biased, wide, "wide: {ref: C4, value: 100 nF, choose: {families: [x7r, x5r], tolerances: [10 %]}, across: rail.voltage}", 1)
	families := func(text string) (string, *build.Build, []build.Fitting) {
		t.Helper()
		b, err := read(text)
		if err != nil {
			t.Fatal(err)
		}
		list := b.Fittings(b.Openings[0])
		var names []string
		for _, f := range list {
			names = append(names, f.Pieces[0].Family)
		}
		return strings.Join(names, " "), b, list
	}
	joined := strings.Replace(text, fresh, "fresh: {ref: C6, same_as: own.wide, across: 40 V}", 1)
	if got, _, _ := families(joined); got != "x7r" { // made for 50 V, x5r for 25 V
		t.Errorf("under 40 V: %s", got)
	}
	rated := strings.Replace(text, "across: rail.voltage}\n      film", "across: rail.voltage, rated: 10 V}\n      film", 1)
	got, b, list := families(rated)
	if got != "x7r x5r" {
		t.Fatalf("under the rail: %s", got)
	}
	fitted, err := b.Fit(list[1:])
	if err != nil {
		t.Fatal(err)
	}
	m, err := fitted.Compile()
	if err != nil {
		t.Fatal(err)
	}
	// 6 of 10 V, a third of the way from the middles of −39.5 % to −50 %: −43 %.
	if got, want := nominals(t, m)["own.d low"], 57e-9; !(math.Abs(got-want) <= 1e-12*want) {
		t.Errorf("chosen x5r is %g, want %g", got, want)
	}
}
