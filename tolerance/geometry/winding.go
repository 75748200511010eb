package geometry

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// winding is a coil of one layer without a core. Wheeler's formula, in inches
// and microhenries
//
//	L = r²·N²/(9r + 10l)
//
// with N turns of mean radius r along a length l, and here in metres and
// henries. Against the exact current sheet (Lorentz) it is 0.54 % low at
// l = 0.4 diameters, 0.06 % high at 0.7, 0.58 % low at 3 and 0.35 % low at 30:
// within the 1 % that Wheeler claims for l > 0.8r.
//
// Round wire with space between the turns is no current sheet. Rosa's
// corrections for that are left out; they take a few parts in a thousand off
// most windings, more where turns are few and far apart.
var winding = Shape{
	Name:    "winding",
	Summary: "inductance of a winding of one layer without a core",
	Unit:    quantity.Henry,
	Dimensions: []Dimension{
		{Name: "turns", Unit: quantity.One, Summary: "number of turns"},
		{Name: "diameter", Unit: quantity.Metre, Summary: "from the middle of the wire to the middle of the wire"},
		{Name: "length", Unit: quantity.Metre, Summary: "from the first turn to the last, and one turn more"},
	},
	Equations: `
radius = diameter/2
value = 1e-6*henry*turns^2*radius^2/(0.0254*metre*(9*radius + 10*length))
reach = 5*length >= 2*diameter ? 1 : 0
`,
	Reach:  "a length of at least 0.4 diameters",
	Model:  part.Scatter{Tolerance: 0.01, Shape: part.Uniform},
	Limits: "One layer, close wound, no core and nothing that conducts within a diameter; well below its own resonance.",
	Source: "H. A. Wheeler, 1928 (from memory), as in S. Bhooshan, Fundamentals of Engineering Electromagnetics, Ex. 9.14 " +
		"(inputs and method read in an open archive of textbook examples)",
}
