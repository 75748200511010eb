package build

import (
	"fmt"
	"math"
	"strings"
	"sync"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
	"batchwright/tolerance/geometry"
	"batchwright/tolerance/tape"
)

// Geometry is a figure given by the dimensions of a shape.
type Geometry struct {
	Shape    *geometry.Shape
	Measures []Measure
}

// Measure is one dimension of a shape: it may refer to something and scatter
// as a setting does.
type Measure struct {
	Setting
	Given bool // written in the file, and no default
	node  *document.Node
}

// measure finds a dimension that has a figure; nil is one left out.
func (g *Geometry) measure(name string) *Measure {
	for i := range g.Measures {
		if g.Measures[i].Name == name {
			return &g.Measures[i]
		}
	}
	return nil
}

// shapeEquations are the equations of every shape, parsed once.
var shapeEquations = sync.OnceValue(func() map[string][]formula.Equation {
	all := map[string][]formula.Equation{}
	for _, s := range geometry.Shapes() {
		list, mistakes := formula.ParseEquations(s.Equations)
		if len(mistakes) > 0 {
			panic("build: equations of " + s.Name + ": " + mistakes.Error())
		}
		all[s.Name] = list
	}
	return all
})

// lower is the node of one of the shape's equations; measured gives those of
// the dimensions that have a figure.
func (g *Geometry) lower(to *tape.Graph, equation string, measured func(*Measure) tape.Ref) (tape.Ref, error) {
	var failed error
	var line func(name string) (tape.Ref, bool)
	named := func(name string) (tape.Ref, bool) {
		head, tail, dotted := strings.Cut(name, ".")
		m := g.measure(head)
		switch {
		case dotted && tail == "given":
			return to.Constant(boolean(m != nil && m.Given)), true
		case m != nil:
			return measured(m), true
		case g.Shape.Dimension(head) != nil:
			return to.Constant(0), true // left out
		}
		return line(name)
	}
	line = func(name string) (tape.Ref, bool) {
		for _, q := range shapeEquations()[g.Shape.Name] {
			if q.Name == name {
				v, err := to.Lower(q.Expression, named)
				if err != nil {
					failed = err
				}
				return v, true
			}
		}
		return 0, false
	}
	v, ok := line(equation)
	if !ok && failed == nil {
		failed = fmt.Errorf("%s has no equation %q", g.Shape.Name, equation)
	}
	return v, failed
}

// constant is one of the shape's equations where every dimension is a number.
func (g *Geometry) constant(equation string, measured func(*Measure) float64) float64 {
	to := tape.NewGraph()
	v, err := g.lower(to, equation, func(m *Measure) tape.Ref { return to.Constant(measured(m)) })
	if err != nil {
		panic("build: " + err.Error())
	}
	x, _ := to.Value(v)
	return x
}

// shapeIn is the shape that a mapping gives a figure by; nil is none.
func shapeIn(n *document.Node) *geometry.Shape {
	if n.Kind != document.Mapping {
		return nil
	}
	for _, s := range geometry.Shapes() {
		if n.Get(s.Name) != nil {
			return s
		}
	}
	return nil
}

// shapeNames are the keys a setting may be given by instead of a value.
func shapeNames() []string {
	var names []string
	for _, s := range geometry.Shapes() {
		names = append(names, s.Name)
	}
	return names
}

// readShape reads a setting given by a shape: `{rod: {length: 45 cm, …}}`. A
// tolerance beside it stands for the formula's own.
func (r *reader) readShape(n *document.Node, s *geometry.Shape, out *Setting) {
	r.Keys(n, append([]string{s.Name}, part.ScatterKeys...)...)
	if s.Unit.Dimension != out.Unit.Dimension {
		r.Add(n.Get(s.Name), s.Name+" for a setting in "+out.Unit.Symbol, "a value; a "+s.Name+" has a figure in "+s.Unit.Symbol)
		return
	}
	out.Value = 1 // what multiplies the shape's figure
	out.Scatter = s.Model
	r.readModel(n, &out.Scatter)
	out.Geometry = r.readMeasures(n.Get(s.Name), s, true)
}

// readModel reads what is written beside a shape over how far its formula may
// be off.
func (r *reader) readModel(n *document.Node, s *part.Scatter) {
	part.ReadScatter(&r.Faults, n, quantity.Percent, s)
	if at := n.Get("correlation"); at != nil {
		r.Add(at, "correlation", "none: the formula is off by the same on every unit")
	}
}

// readMeasures reads the dimensions of a shape; nil where some are missing.
func (r *reader) readMeasures(n *document.Node, s *geometry.Shape, refer bool) *Geometry {
	var names []string
	for _, d := range s.Dimensions {
		names = append(names, d.Name)
	}
	if !r.Keys(n, names...) && n.Kind != document.Mapping {
		return nil
	}
	g := &Geometry{Shape: s}
	whole := true
	for _, d := range s.Dimensions {
		m, ok := r.readMeasure(n, s, d, refer)
		if whole = whole && ok; m != nil {
			g.Measures = append(g.Measures, *m)
		}
	}
	if !whole {
		return nil
	}
	return g
}

// readMeasure reads one dimension; nil is one left out.
func (r *reader) readMeasure(n *document.Node, s *geometry.Shape, d geometry.Dimension, refer bool) (*Measure, bool) {
	m := &Measure{Setting: Setting{Name: d.Name, Parameter: part.Parameter{Name: d.Name, Unit: d.Unit}}}
	at := n.Get(d.Name)
	switch lone := d.With != "" && n.Get(d.With) == nil; {
	case lone && at != nil:
		r.Add(at, d.Name+" without "+d.With, d.With+": beside it")
		return nil, false
	case lone:
		return nil, true
	case at == nil && !d.Optional:
		r.Add(n, "missing key "+d.Name, d.Summary+" ("+d.Unit.Symbol+")")
		return nil, false
	case at == nil && d.Default == "":
		return nil, true
	case at == nil:
		q, err := quantity.Parse(d.Default, d.Unit)
		if err != nil {
			panic("build: default of " + s.Name + "." + d.Name + ": " + err.Error())
		}
		m.Value, m.Scatter = q.Value, d.Scatter
		return m, true
	}
	m.Given, m.node, m.Scatter = true, at, d.Scatter
	if shape := shapeIn(at); shape != nil {
		r.Add(at, "a "+shape.Name+" as a dimension", "a value in "+d.Unit.Symbol)
		return nil, false
	}
	m.Value = math.NaN() // until it has been read
	r.readFigure(at, &m.Setting)
	if m.Reference != "" && !refer {
		r.Add(at, "reference", "a value in "+d.Unit.Symbol+": a coil is wound before it meets any condition")
		return nil, false
	}
	if m.Reference != "" {
		return m, true
	}
	return m, !math.IsNaN(m.Value) && r.checkSize(at, d, m.Value, "")
}

// checkSize complains of a dimension that nothing has.
func (r *reader) checkSize(at *document.Node, d geometry.Dimension, v float64, where string) bool {
	if v > 0 || v == 0 && d.Zero {
		return true
	}
	expected := "more than zero"
	if d.Zero {
		expected = "zero or more"
	}
	r.Add(at, d.Name+where, expected)
	return false
}
