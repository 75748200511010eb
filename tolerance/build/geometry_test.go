package build_test

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/bom/document"
	"batchwright/tolerance/build"
)

// shaped is a build whose figures are given by shapes; the tests break one
// line of it.
const shaped = `build: rod and hand
units: 12
conditions:
  rest: {hand: 60 cm}
  near: {hand: 15 cm}
stages:
  moving:
    kind: tuned-tank
    settings:
      stray: {rod: {length: 450 mm, diameter: 10 mm, gap: {value: 5 cm, tolerance: 5 mm}}}
      sensor: {plate: {distance: hand, area: 120 cm2}, tolerance: 10 %}
    parts:
      coil: {ref: L1, winding: {turns: 150, diameter: {value: 30 mm, tolerance: 1 %, shape: uniform, temperature_coefficient: {value: 17 ppm/K, spread: 2 ppm/K}}, length: 60 mm}, temperature_coefficient: 20 ppm/K}
      tank: {ref: C1, value: 100 pF}
  other:
    kind: tuned-tank
    settings: {stray: {rod: {length: 450 mm, diameter: 10 mm, hand: hand}}}
    parts:
      coil: {ref: L2, same_as: moving.coil}
      tank: {ref: C2, value: 100 pF}
  own:
    kind: formula
    settings: {antenna: {rod: {length: 1.04 m, diameter: 7.2 mm}}}
    parts: {choke: {ref: L3, winding: {turns: 20, diameter: 1 cm, length: 25.4 mm}}}
    outputs:
      capacitance: {expression: antenna, unit: F}
      inductance: {expression: choke, unit: H}
`

// nominals evaluates every output of a build with nothing scattered.
func nominals(t *testing.T, m *build.Model) map[string]float64 {
	t.Helper()
	out := map[string]float64{}
	for _, o := range m.Outputs {
		p := m.Graph.Program(o.Node)
		in := make([][]float64, len(m.Inputs))
		for i, x := range m.Inputs {
			in[i] = []float64{x.Centre}
		}
		dst := [][]float64{{0}}
		p.Values(dst, in, p.NewFrame(1))
		out[o.Name.String()+" "+m.Build.Conditions[o.Condition].Name] = dst[0][0]
	}
	return out
}

func compiled(t *testing.T, text string) *build.Model {
	t.Helper()
	b, err := read(text)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// TestShapedValues compares with figures from elsewhere: 6.73315917 pF is the
// average potential of that rod, 10.79599905 pF that of the free one (see
// package geometry), both raised by 2 %; 20 turns of 1 cm on an inch have
// 1.316725041 µH. The tanks follow from f = 1/(2π√(LC)) by hand.
func TestShapedValues(t *testing.T) {
	got := nominals(t, compiled(t, shaped))
	r := math.Sqrt(0.012 / math.Pi)
	plate := func(d float64) float64 {
		return 8.8541878188e-12 * r * (math.Pi*r/d + math.Log(16*math.Pi*r/d+math.Exp(5)) - 1)
	}
	radius := 0.015 * (1 - 2*17e-6) // copper that grows, at 23 °C
	coil := 1e-6 / 0.0254 * 150 * 150 * radius * radius / (9*radius + 10*0.06)
	tank := func(c float64) float64 { return 1 / (2 * math.Pi * math.Sqrt(coil*(1-2*20e-6)*c)) } // at 23 °C
	for name, want := range map[string]float64{
		"own.capacitance rest":  1.02 * 10.79599905e-12,
		"own.inductance rest":   1.316725041e-6,
		"moving.frequency rest": tank(100e-12 + 1.02*6.73315917e-12 + plate(0.6)),
		"moving.frequency near": tank(100e-12 + 1.02*6.73315917e-12 + plate(0.15)),
	} {
		if !(math.Abs(got[name]/want-1) < 1e-8) {
			t.Errorf("%s = %.10g, want %.10g", name, got[name], want)
		}
	}
	if !(got["other.frequency near"] < got["other.frequency rest"]) {
		t.Error("a nearer hand does not lower the frequency")
	}
}

// TestShapedInputs lists everything that scatters, by name.
func TestShapedInputs(t *testing.T) {
	m := compiled(t, shaped)
	got := map[string]float64{} // half widths
	lots := map[string]int{}
	for _, x := range m.Inputs {
		name := x.Ref + " " + x.Parameter
		if got[name] = x.HalfWidth; x.HalfWidth == 0 {
			delete(got, name)
		}
		lots[name] = x.Lot
	}
	want := map[string]float64{
		"moving.stray model": 0.02, "moving.stray gap": 0.005, "moving.sensor model": 0.1,
		"L1 model": 0.01, "L1 diameter": 0.01 * 0.03, "L2 model": 0.01, "L2 diameter": 0.01 * 0.03,
		"L1 diameter temperature": 2e-6, "L2 diameter temperature": 2e-6, "L3 model": 0.01,
		"other.stray model": 0.02, "other.stray palm": 0.2 * 0.1, "own.antenna model": 0.02,
		"moving.level value": 0.1, "other.level value": 0.1, // of the kind
	}
	nearly := cmp.Comparer(func(a, b float64) bool { return math.Abs(a-b) <= 1e-12*math.Abs(b) })
	if d := cmp.Diff(want, got, nearly); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
	if lots["L1 model"] < 0 || lots["L1 model"] != lots["L2 model"] || lots["L1 model"] == lots["L3 model"] {
		t.Errorf("the formula must be off alike on coils wound alike, and only there: lots %d, %d, %d",
			lots["L1 model"], lots["L2 model"], lots["L3 model"])
	}
	if lots["L1 diameter"] >= 0 || lots["moving.stray model"] < 0 {
		t.Error("dimensions share no lot, the formula's error is the same throughout a batch")
	}
}

// TestWound: the part as it is listed for whoever winds it.
func TestWound(t *testing.T) {
	b, err := read(shaped)
	if err != nil {
		t.Fatal(err)
	}
	for _, position := range []string{"moving.coil", "other.coil"} {
		p := b.Place(position)
		if p.Geometry == nil || p.Part.Family != "" || p.Quantity != "271.2 µH" {
			t.Errorf("%s: %q of family %q", position, p.Quantity, p.Part.Family)
		}
		if got := p.Part.Main().Value; !(math.Abs(got/2.7117146071e-4-1) < 1e-9) { // 1e-6/0.0254·150²·15e-3²/(9·15e-3 + 10·60e-3)
			t.Errorf("%s is worth %.11g", position, got)
		}
	}
}

// TestShapeFaults breaks the build in one place each.
func TestShapeFaults(t *testing.T) {
	for _, c := range []struct {
		name, old, new string
		line           int
		words          []string
	}{
		{"unknown shape", "{rod: {length: 450 mm, diameter: 10 mm, gap", "{rodd: {length: 450 mm, diameter: 10 mm, gap", 10, []string{"rodd", "nearest: rod"}},
		{"unknown dimension", "distance: hand, area", "distanc: hand, area", 11, []string{"distanc", "nearest: distance"}},
		{"missing dimension", "distance: hand, area: 120 cm2", "distance: hand", 11, []string{"area", "m²"}},
		{"dimension of the wrong unit", "area: 120 cm2", "area: 12 cm", 11, []string{"12 cm", "m²"}},
		{"bare dimension", "turns: 150, diameter: {value: 30 mm", "turns: 150, diameter: {value: 30", 13, []string{"a length"}},
		{"misspelt variable", "distance: hand", "distance: hnd", 11, []string{"hnd", "nearest: hand"}},
		{"variable of the wrong unit", "distance: hand", "distance: temperature", 11, []string{"°C", "wrong unit"}},
		{"no distance at a condition", "near: {hand: 15 cm}", "near: {hand: 0 cm}", 11, []string{"distance at near", "more than zero"}},
		{"a hand in the rod", "near: {hand: 15 cm}", "near: {hand: 3 cm}", 17, []string{"rod at near", "palm"}},
		{"negative dimension", "rod: {length: 1.04 m", "rod: {length: -1.04 m", 23, []string{"length", "more than zero"}},
		{"stout rod", "diameter: 7.2 mm", "diameter: 72 cm", 23, []string{"10 diameters"}},
		{"short winding", "length: 25.4 mm", "length: 2.54 mm", 24, []string{"0.4 diameters"}},
		{"shape of the wrong unit", "stray: {rod: {length: 450 mm, diameter: 10 mm, hand: hand}}", "q: {rod: {length: 450 mm, diameter: 10 mm}}", 17, []string{"rod", "in F"}},
		{"two shapes", "area: 120 cm2}, tolerance: 10 %}", "area: 120 cm2}, rod: {length: 1 m, diameter: 1 cm}}", 11, []string{"plate"}},
		{"palm without a hand", "diameter: 7.2 mm", "diameter: 7.2 mm, palm: 9 cm", 23, []string{"palm without hand"}},
		{"shape with a correlation", "area: 120 cm2}, tolerance: 10 %}", "area: 120 cm2}, correlation: {value: 1}}", 11, []string{"correlation"}},
		{"scalar for a shape", "antenna: {rod: {length: 1.04 m, diameter: 7.2 mm}}", "antenna: {rod: 12 pF}", 23, []string{"12 pF"}},
		{"shape as a dimension", "distance: hand", "distance: {rod: {length: 1 m, diameter: 1 cm}}", 11, []string{"dimension"}},
		{"winding by reference", "turns: 20, diameter: 1 cm", "turns: 20, diameter: hand", 24, []string{"hand", "before"}},
		{"winding of a capacitor", "tank: {ref: C2, value: 100 pF}", "tank: {ref: C2, winding: {turns: 1, diameter: 1 cm, length: 1 cm}}", 20, []string{"only a coil"}},
		{"winding and value", "ref: L3, winding", "ref: L3, value: 3 µH, winding", 24, []string{"value beside winding"}},
		{"winding and family", "ref: L3, winding", "ref: L3, family: drum-choke, winding", 24, []string{"family beside winding"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			if strings.Count(shaped, c.old) != 1 {
				t.Fatalf("%q stands %d times in the build", c.old, strings.Count(shaped, c.old))
			}
			_, err := read(strings.Replace(shaped, c.old, c.new, 1))
			var faults document.Complaints
			if !errors.As(err, &faults) {
				t.Fatalf("no complaints: %v", err)
			}
			if len(faults) > 2 {
				t.Errorf("%d complaints of one fault:\n%v", len(faults), err)
			}
			for i, f := range faults[1:] {
				if f.Line == faults[i].Line && f.Column == faults[i].Column {
					t.Errorf("two complaints of one place:\n%v", err)
				}
			}
			for _, f := range faults {
				if strings.HasPrefix(f.Error(), fmt.Sprintf("lamp.yaml:%d:", c.line)) && containsAll(f.Error(), c.words) {
					return
				}
			}
			t.Errorf("no complaint at line %d with %q in:\n%v", c.line, c.words, err)
		})
	}
}

// TestShapeInACircle: a dimension that hangs on its own stage is found out.
func TestShapeInACircle(t *testing.T) {
	text := strings.Replace(shaped, "capacitance: {expression: antenna, unit: F}",
		"capacitance: {expression: antenna, unit: F}\n      size: {expression: 0.01*metre*other.frequency/hertz, unit: m}", 1)
	text = strings.Replace(text, "diameter: 10 mm, hand: hand", "diameter: 10 mm, hand: own.size", 1)
	_, err := read(text)
	if err == nil || !strings.Contains(err.Error(), "other -> own -> other") {
		t.Errorf("no cycle found: %v", err)
	}
}
