package build_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
)

// figuresOf is a build with one part at X1, the same at X2, and at X3 again but
// from mixed lots; a target asks for each of its figures.
func figuresOf(t *testing.T, kind part.Type, text string, figures []part.Parameter) *build.Build {
	t.Helper()
	var outputs, targets strings.Builder
	for _, piece := range []string{"x", "y", "z"} {
		for i, q := range figures {
			name, output := piece+"."+q.Name, fmt.Sprintf("%s%d", piece, i)
			if len(kind.Parameters()) == 1 || kind.Trimmer() {
				name = piece
			}
			fmt.Fprintf(&outputs, "      %s: {expression: \"%s/(1%s)\"}\n", output, name, unitIn(q.Unit))
			fmt.Fprintf(&targets, "  - {name: %s, output: own.%s, between: [-1e30, 1e30], share: 90 %%}\n", output, output)
		}
	}
	across := ""
	if strings.Contains(text, "across: ") {
		across = ", across: 3 V"
	}
	b, err := read(fmt.Sprintf(`build: figures
units: 4
conditions:
  bench: {temperature: 35 °C, humidity: 60 %%, age: 1000 h}
stages:
  own:
    kind: formula
    parts:
      x: {part: %s, ref: X1, %s}
      y: {ref: X2, same_as: own.x%s}
      z: {part: %s, ref: X3, %s, lots: mixed}
    outputs:
%stargets:
%s`, kind, text, across, kind, text, &outputs, &targets))
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// unitIn is a unit as an equation has it, after a figure.
func unitIn(u quantity.Unit) string {
	for symbol, text := range map[string]string{
		"Ω": "*ohm", "F": "*farad", "H": "*henry", "V": "*volt", "A": "*ampere", "Hz": "*hertz",
		"V/K": "*volt/kelvin", "V/s": "*volt/second", "1/K": "/kelvin", "1/K²": "/kelvin^2", "1/K³": "/kelvin^3",
	} {
		if u.Dimension == quantity.One.Dimension {
			return ""
		}
		if u.Symbol == symbol {
			return text
		}
	}
	panic("no unit for " + u.Symbol)
}

// TestPieceInputs compares the inputs that a piece is said to bring with those
// of a compiled model, for every embedded family and for parts of none with
// everything written on them.
func TestPieceInputs(t *testing.T) {
	type given struct {
		kind part.Type
		text string
	}
	cases := map[string]given{
		"written": {part.Resistor, "value: 1 kΩ, tolerance: 30 Ω, shape: uniform, temperature_coefficient: {value: 40 ppm/K, spread: 20 ppm/K}, " +
			"humidity_coefficient: {value: 5 ppm/% RH, spread: 2 ppm/% RH}, ageing: {value: 0.1 %, spread: 0.2 %, per: 1000 h}, correlation: {value: 0.6, temperature: 0.3}"},
		"alike in nothing":  {part.Resistor, "value: 1 kΩ, tolerance: 1 %"},
		"a law":             {part.Capacitor, "value: 1 nF, temperature_law: [[0, -3 %, 5 %], [50, -10 %, 20 %]], correlation: {value: 0, temperature: 0.7}"},
		"an exact bias law": {part.Capacitor, "value: 1 nF, across: 5 V, rated: 10 V, bias_law: [[0 %, 0 %], [100 %, -50 %]], correlation: {value: 0.2, temperature: 0.7}"},
	}
	families := part.Embedded()
	for _, name := range families.Names() {
		f, _ := families.Family(name)
		text := "family: " + name
		switch {
		case f.Type.Trimmer():
			text += fmt.Sprintf(", value: %g..%g %s", f.High/4, f.High, f.Type.Unit().Symbol)
		case f.HasValue():
			text += fmt.Sprintf(", value: %s", part.Text(f.High, f.Type.Unit()))
		}
		if f.Type == part.Capacitor {
			text += ", across: 1 V"
		}
		cases[name] = given{f.Type, text}
	}
	if len(cases) < 50 {
		t.Fatalf("only %d cases", len(cases))
	}
	types, laws := map[part.Type]bool{}, 0
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			whole := c.kind.Parameters()
			if len(whole) > 1 && !c.kind.Trimmer() {
				f, _ := families.Family(name)
				p, err := f.Fit("X1", f.High, 0)
				if err != nil {
					t.Fatal(err)
				}
				whole = p.Parameters
			}
			b := figuresOf(t, c.kind, c.text, whole[:len(whole):len(whole)])
			types[c.kind] = true
			for _, p := range b.Parts() {
				if len(p.Parameters[0].Bias) > 0 {
					laws++
				}
				compareInputs(t, b, p)
			}
			compareLots(t, b)
		})
	}
	if len(types) != len(part.Types()) || laws < 6 {
		t.Errorf("%d of %d types seen, %d bias laws", len(types), len(part.Types()), laws)
	}
}

// compareInputs holds what a piece is said to bring against the model.
func compareInputs(t *testing.T, b *build.Build, p part.Part) {
	t.Helper()
	m, err := b.CompileOpen(map[string]bool{"X1": true, "X2": true, "X3": true})
	if err != nil {
		t.Fatal(err)
	}
	want := build.PieceInputs(p)
	seen := map[string]bool{}
	for _, x := range m.Inputs {
		if x.Ref != p.Ref {
			continue
		}
		y, ok := want[x.Parameter]
		if seen[x.Parameter] = true; !ok {
			t.Errorf("%s brings no %s", p.Ref, x.Parameter)
			continue
		}
		if x.Centre != y.Centre || x.HalfWidth != y.HalfWidth || x.Shape != y.Shape || x.Rho != y.Rho || x.Common != y.Common ||
			(x.Lot >= 0) != (y.Lot >= 0) || y.Ref != p.Ref || y.Parameter != x.Parameter {
			t.Errorf("%s %s is %+v in the model, %+v of the piece", p.Ref, x.Parameter, x, y)
		}
		if y.Lot >= 0 && y.Common != scatter.Correlation(y.Shape, y.Rho) {
			t.Errorf("%s %s has %g in common, want %g", p.Ref, x.Parameter, y.Common, scatter.Correlation(y.Shape, y.Rho))
		}
	}
	for parameter := range want {
		if !seen[parameter] && parameter != "bias" {
			t.Errorf("%s brings %s, which the model has not", p.Ref, parameter)
		}
	}
	if scatters := biasScatters(p); seen["bias"] != scatters {
		t.Errorf("%s has a place between the limits of its bias law: %t, want %t", p.Ref, seen["bias"], scatters)
	}
}

// biasScatters says whether a piece's bias law leaves anything open.
func biasScatters(p part.Part) bool {
	for _, l := range p.Parameters[0].Bias {
		if l.High > l.Low {
			return true
		}
	}
	return false
}

// compareLots asks that two pieces share a lot, in the model and by their
// numbers, where they are bought on one line and neither is mixed.
func compareLots(t *testing.T, b *build.Build) {
	t.Helper()
	m, err := b.CompileOpen(map[string]bool{"X1": true, "X2": true, "X3": true})
	if err != nil {
		t.Fatal(err)
	}
	model := map[string]build.Input{}
	for _, x := range m.Inputs {
		model[x.Ref+" "+x.Parameter] = x
	}
	parts := b.Parts()
	for _, p := range parts {
		for _, q := range parts {
			for parameter, x := range build.PieceInputs(p) {
				y := build.PieceInputs(q)[parameter]
				together := order.Key(p) == order.Key(q) && !p.LotsMixed && !q.LotsMixed
				if shared := x.Lot >= 0 && x.Lot == y.Lot; shared != (together && x.Rho > 0) {
					t.Errorf("%s of %s and %s: lots %d and %d", parameter, p.Ref, q.Ref, x.Lot, y.Lot)
				}
				u, there := model[p.Ref+" "+parameter]
				v, too := model[q.Ref+" "+parameter]
				if shared := u.Lot >= 0 && u.Lot == v.Lot; there && too && shared != (together && u.Rho > 0) {
					t.Errorf("%s of %s and %s: lots %d and %d in the model", parameter, p.Ref, q.Ref, u.Lot, v.Lot)
				}
			}
		}
	}
}

// TestPieceLots gives different things different lots: families, grades, values,
// parameters.
func TestPieceLots(t *testing.T) {
	lots := map[int]string{}
	for _, name := range []string{"c0g", "mica", "polystyrene"} {
		f, _ := part.Embedded().Family(name)
		for _, g := range f.Grades {
			for _, v := range []float64{220e-12, 270e-12} {
				p, err := f.Fit("C1", v, g.Tolerance)
				if err != nil {
					t.Fatal(err)
				}
				for parameter, x := range build.PieceInputs(p) {
					if x.Lot < 0 {
						continue
					}
					own := fmt.Sprint(name, g.Tolerance, v, parameter)
					if other, taken := lots[x.Lot]; taken {
						t.Errorf("%s and %s share a lot", own, other)
					}
					lots[x.Lot] = own
				}
			}
		}
	}
	if len(lots) < 50 {
		t.Errorf("only %d lots", len(lots))
	}
}

// TestNominalIsTheCentre keeps the value out of the equations: halved inputs
// halve what is made of them.
func TestNominalIsTheCentre(t *testing.T) {
	b := figuresOf(t, part.Resistor, "value: 4.7 kΩ, family: metal-film-50, tolerance: 1 %", part.Resistor.Parameters())
	m, err := b.CompileTargets()
	if err != nil {
		t.Fatal(err)
	}
	in := make([][]float64, len(m.Inputs))
	for i, x := range m.Inputs {
		in[i] = []float64{x.Centre}
		if x.Parameter == "value" && strings.HasPrefix(x.Ref, "X") {
			if x.Centre != 4700 || !(math.Abs(x.HalfWidth/47-1) <= 1e-15) {
				t.Errorf("%s is %g ± %g", x.Ref, x.Centre, x.HalfWidth)
			}
			in[i][0] /= 2
		}
	}
	p := m.Graph.Program(m.Outputs[0].Node)
	dst := [][]float64{{0}}
	p.Values(dst, in, p.NewFrame(1))
	if !(math.Abs(dst[0][0]/2350-1) <= 1e-12) {
		t.Errorf("half of it is %g", dst[0][0])
	}
}
