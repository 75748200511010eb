package build

import (
	"math"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/geometry"
)

// checkGeometries checks every setting's shape at every condition, once all
// that its dimensions may refer to is known.
func (r *reader) checkGeometries() {
	for _, s := range r.stages {
		for _, set := range s.Settings {
			if set.Geometry == nil {
				continue
			}
			for _, m := range set.Geometry.Measures {
				if m.Reference != "" {
					r.checkReference(valueNode(m.node), m.Setting)
				}
			}
			at := s.node.Get("settings").Get(set.Name).Get(set.Geometry.Shape.Name)
			for i := range r.build.Conditions {
				if !r.checkAt(at, set.Geometry, i) {
					break // the other conditions would say the same
				}
			}
		}
	}
}

// valueNode is where a figure's value is written.
func valueNode(n *document.Node) *document.Node {
	if v := n.Get("value"); v != nil {
		return v
	}
	return n
}

// checkAt checks a shape at a condition. What hangs on another stage's output
// is not known yet and passes.
func (r *reader) checkAt(at *document.Node, g *Geometry, condition int) bool {
	c := r.build.Conditions[condition]
	sizes := map[string]float64{}
	for _, m := range g.Measures {
		sizes[m.Name] = m.Value
		if m.Reference == "" {
			continue
		}
		i := r.build.variable(m.Reference)
		if i < 0 || r.build.Variables[i].Unit.Dimension != m.Unit.Dimension {
			return true
		}
		sizes[m.Name] = c.Values[i]
		if !r.checkSize(valueNode(m.node), *g.Shape.Dimension(m.Name), c.Values[i], " at "+c.Name) {
			return false
		}
	}
	return r.checkReach(at, g, sizes, " at "+c.Name)
}

// checkReach complains of dimensions that the shape's formula does not hold for.
func (r *reader) checkReach(at *document.Node, g *Geometry, sizes map[string]float64, where string) bool {
	size := func(m *Measure) float64 { return sizes[m.Name] }
	if g.Shape.Reach != "" && g.constant("reach", size) != 1 {
		r.Add(at, g.Shape.Name+where+" out of its formula's reach", g.Shape.Reach)
		return false
	}
	if v := g.constant("value", size); !(v > 0 && !math.IsInf(v, 1)) {
		r.Add(at, g.Shape.Name+where+" of no figure", "dimensions for which its formula has a figure above zero")
		return false
	}
	return true
}

// readWound reads a coil given by its winding. It is made and not bought, so
// what belongs to a purchase has no place beside it.
func (r *reader) readWound(p *Place, n, at *document.Node) {
	for _, key := range []string{"value", "family", "choose", "lots", "parameters", "position"} {
		if k := n.Get(key); k != nil {
			r.Add(k, key+" beside winding", "one of the two: a winding is made, not bought")
		}
	}
	if p.Type != part.Coil {
		r.Add(at, "winding of a "+string(p.Type), "none: only a coil is wound")
		return
	}
	shape, _ := geometry.Find("winding")
	g := r.readMeasures(at, shape, false)
	if g == nil {
		return
	}
	sizes := map[string]float64{}
	for _, m := range g.Measures {
		sizes[m.Name] = m.Value
	}
	if !r.checkReach(at, g, sizes, "") {
		return
	}
	figure := p.Type.Parameters()[0]
	figure.Value = g.constant("value", func(m *Measure) float64 { return m.Value })
	figure.Scatter = shape.Model
	r.readModel(n, &figure.Scatter)
	p.Part.Parameters = []part.Parameter{figure}
	p.Quantity = quantity.Format(figure.Value, figure.Unit, 4)
	p.Geometry = g
}
