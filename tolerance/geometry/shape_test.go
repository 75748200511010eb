package geometry_test

import (
	"math"
	"strings"
	"testing"

	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
	"batchwright/tolerance/geometry"
	"batchwright/tolerance/tape"
)

// dimensions are those a shape is given by, SI; what is not there is not given.
type dimensions map[string]float64

// figure is an equation of a shape for some dimensions.
func figure(t testing.TB, shape, name string, given dimensions) float64 {
	t.Helper()
	s, ok := geometry.Find(shape)
	if !ok {
		t.Fatalf("no shape %q", shape)
	}
	lines, mistakes := formula.ParseEquations(s.Equations)
	if len(mistakes) > 0 {
		t.Fatalf("%s: %v", shape, mistakes)
	}
	g := tape.NewGraph()
	known := map[string]tape.Ref{}
	for _, d := range s.Dimensions {
		v, there := given[d.Name]
		known[d.Name], known[d.Name+".given"] = g.Constant(v), g.Constant(0)
		if there {
			known[d.Name+".given"] = g.Constant(1)
		}
	}
	for _, l := range lines { // in order: no line of these needs a later one
		r, err := g.Lower(l.Expression, func(name string) (tape.Ref, bool) { r, ok := known[name]; return r, ok })
		if err != nil {
			t.Fatalf("%s: %s: %v", shape, l.Name, err)
		}
		known[l.Name] = r
	}
	v, constant := g.Value(known[name])
	if !constant {
		t.Fatalf("%s.%s of constants is no constant", shape, name)
	}
	return v
}

func value(t testing.TB, shape string, given dimensions) float64 {
	t.Helper()
	return figure(t, shape, "value", given)
}

// near compares with a relative tolerance.
func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance*math.Abs(want)) {
		t.Errorf("%s = %.10g, want %.10g within %.1g", what, got, want, tolerance)
	}
}

// scope is what a shape's equations may name.
type scope struct {
	*geometry.Shape
	lines map[string]quantity.Dimension
}

func (s scope) Dimension(name string) (quantity.Dimension, bool) {
	if head, ok := strings.CutSuffix(name, ".given"); ok && s.Shape.Dimension(head) != nil {
		return quantity.One.Dimension, true
	}
	if d := s.Shape.Dimension(name); d != nil {
		return d.Unit.Dimension, true
	}
	d, ok := s.lines[name]
	return d, ok
}

func (s scope) Names() []string { return nil }

// TestShapes holds every shape's description whole: its equations are of one
// piece, their dimensions fit, and every default can be read.
func TestShapes(t *testing.T) {
	for _, s := range geometry.Shapes() {
		t.Run(s.Name, func(t *testing.T) {
			lines, mistakes := formula.ParseEquations(s.Equations)
			if len(mistakes) > 0 {
				t.Fatal(mistakes)
			}
			sc := scope{s, map[string]quantity.Dimension{}}
			for _, l := range lines {
				d, mistakes := l.Expression.Check(sc)
				if len(mistakes) > 0 {
					t.Errorf("%s: %v", l.Name, mistakes)
				}
				sc.lines[l.Name] = d
			}
			if d, ok := sc.lines["value"]; !ok || d != s.Unit.Dimension {
				t.Errorf("value is in %v, want %s", d, s.Unit.Symbol)
			}
			if _, ok := sc.lines["reach"]; ok != (s.Reach != "") {
				t.Errorf("reach %v beside the words %q", ok, s.Reach)
			}
			if s.Summary == "" || s.Limits == "" || s.Source == "" || !(s.Model.Tolerance > 0) {
				t.Error("a summary, limits, a source and a spread of the model are wanted")
			}
			for _, d := range s.Dimensions {
				if _, err := quantity.Parse(d.Default, d.Unit); d.Default != "" && err != nil {
					t.Errorf("%s: %v", d.Name, err)
				}
			}
		})
	}
}
