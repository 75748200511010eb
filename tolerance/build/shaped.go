package build

import (
	"fmt"

	"batchwright/bom/part"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/tape"
)

// shaped is a figure given by a shape: its formula with every dimension as it
// comes out, times how far the formula is off, times what temperature, humidity
// and age do. The formula is off by the same on every unit, and on every coil
// wound alike: pieces of one lot that have everything in common.
func (c *compiler) shaped(e *environment, x source, shape *Geometry, s part.Scatter) tape.Ref {
	figure, err := shape.lower(c.Graph, "value", func(m *Measure) tape.Ref { return c.measured(e, x, m) })
	if err != nil {
		c.fail(fmt.Errorf("build: %s: %w", x.ref, err))
		return c.Graph.Constant(0)
	}
	first := x.ref
	if x.line != "" {
		first = c.lots[x.line]
	}
	model := c.input(x.ref, "model", scatter.Column{
		Shape: s.Shape, Lot: lot(first, "model"), Rho: 1, HalfWidth: s.Tolerance, Stream: stream(x.ref, "model"),
	})
	g := c.Graph
	return g.Mul(g.Mul(figure, g.Add(g.Constant(1), model)), c.surround(e, x, s))
}

// measured is one dimension. Each piece has its own.
func (c *compiler) measured(e *environment, x source, m *Measure) tape.Ref {
	if m.Reference != "" {
		return c.referred(e, m.Reference)
	}
	own := source{ref: x.ref, prefix: m.Name + " ", stage: x.stage}
	return c.element(e, own, m.Parameter, m.Name)
}

// references are what a setting takes its figure from.
func (s *Setting) references() []string {
	list := []string{s.Reference}
	if s.Geometry != nil {
		for _, m := range s.Geometry.Measures {
			list = append(list, m.Reference)
		}
	}
	return list
}
