// Package geometry gives a figure by its dimensions: the capacitance of a rod
// or of two plates, the inductance of a winding. A shape is text, as a kind of
// stage is: equations in the language of package formula, with how far the
// formula itself may be from the truth. Package build evaluates it.
package geometry

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// Shape is one body whose figure follows from its dimensions.
type Shape struct {
	Name       string
	Summary    string // one line
	Unit       quantity.Unit
	Dimensions []Dimension
	// Equations is one `name = expression` a line, in the units of SI. Names
	// known in it: the dimensions, `dimension.given` (1 or 0), the names of
	// earlier and later lines, and the constants of package formula. `value`
	// is the figure; `reach`, where there is one, is 1 as long as the formula
	// holds and 0 beyond.
	Equations string
	Reach     string // what `reach` asks, in words
	// Model is how far the formula may be off: a fraction of the figure, the
	// same for every piece of the shape, since they are computed alike.
	Model  part.Scatter
	Limits string // limits of validity
	Source string
}

// Dimension is one figure a shape is described by.
type Dimension struct {
	Name     string
	Unit     quantity.Unit
	Optional bool
	Default  string       // of an optional one, as a build file would say it; "" is none
	Scatter  part.Scatter // unless the file says otherwise
	With     string       // the optional dimension it belongs to; "" is the shape itself
	Zero     bool         // may be zero; every other is more
	Summary  string
}

// Area is square metres.
var Area = quantity.Unit{Symbol: "m²", Scale: 1, Dimension: quantity.Metre.Dimension.Mul(quantity.Metre.Dimension)}

// shapes are those a setting can be given by, in the order of the
// documentation; a winding is what a coil can be given by.
var shapes = []*Shape{&rod, &plate, &winding}

// Shapes lists every shape.
func Shapes() []*Shape { return append([]*Shape(nil), shapes...) }

// Find finds a shape by its name.
func Find(name string) (*Shape, bool) {
	for _, s := range shapes {
		if s.Name == name {
			return s, true
		}
	}
	return nil, false
}

// Dimension finds a dimension by its name, nil if the shape has none such.
func (s *Shape) Dimension(name string) *Dimension {
	for i := range s.Dimensions {
		if s.Dimensions[i].Name == name {
			return &s.Dimensions[i]
		}
	}
	return nil
}
