package geometry

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// rod is a straight conductor, upright over a conducting plane or in free
// space, with or without a hand near it. Howe's average-potential formula: the
// charge Q is taken to lie evenly along the rod, and the potential is averaged
// over its length l (F, m):
//
//	C = 2π·ε0·l / (ln(4l/d) − 1 − p − h)
//
// p is the potential of the rod's own image, in the plane a gap x·l below its
// lower end, likewise averaged:
//
//	p = (1 + x)·ln(2(1 + x)) − (1 + 2x)·ln(1 + 2x) + x·ln(2x)
//
// x = 0 is a rod that stands on the plane, insulated from it: p = ln 2.
//
// h is that of a hand, taken as a ball of radius b, earthed through the body,
// whose middle is a distance D from the middle of the rod and square to it. The
// rod raises it to Q·m/(4π·ε0), m being the mean of 1/distance along the rod;
// the charge −Q·b·m that the ball draws to stay at earth lowers the rod by
// −Q·b·m²/(4π·ε0):
//
//	m = (2/l)·asinh(l/(2D)),  h = b·m²·l/2
//
// For a real ball at 12 cm and more that is within 4 % of the moments below.
//
// An even charge is not the true one, so the formula is a lower bound. A
// moments calculation of a tube 0.45 to 1.04 m long, 6 to 10 mm thick, 5 cm or
// more above the plane, comes out 1.3 to 3.0 % higher; the figure is raised by
// 2 % therefore, and may be off by ±2 % either way.
var rod = Shape{
	Name:    "rod",
	Summary: "capacitance of an upright rod, over a conducting plane or in free space, a hand near it or not",
	Unit:    quantity.Farad,
	Dimensions: []Dimension{
		{Name: "length", Unit: quantity.Metre, Summary: "length of the rod"},
		{Name: "diameter", Unit: quantity.Metre, Summary: "diameter of the rod"},
		{Name: "gap", Unit: quantity.Metre, Optional: true, Zero: true,
			Summary: "from the plane, such as an earthed case, to the lower end; left out, there is no plane"},
		{Name: "hand", Unit: quantity.Metre, Optional: true,
			Summary: "from the middle of the rod to the middle of a hand beside it; left out, there is no hand"},
		// A hand of 9 to 12 cm, and an arm behind it that the ball leaves out:
		// common practice, no source.
		{Name: "palm", Unit: quantity.Metre, Optional: true, Default: "10 cm", With: "hand",
			Scatter: part.Scatter{Tolerance: 0.2, Shape: part.Uniform},
			Summary: "diameter of the ball that stands for the hand; its scatter is that of hands"},
	},
	Equations: `
permittivity = 8.8541878188e-12*farad/metre
near = gap/length
image = gap.given > 0 ? (1 + near)*ln(2*(1 + near)) - (1 + 2*near)*ln(1 + 2*near) + near*ln(2*max(near, 1e-12)) : 0
across = length/(2*hand)
mean = hand.given > 0 ? 2/length*ln(across + sqrt(across^2 + 1)) : 0/metre
drawn = palm/2*mean^2*length/2
average = 2*pi*permittivity*length/(ln(4*length/diameter) - 1 - image - drawn)
value = 1.02*average
reach = length >= 10*diameter and (hand.given < 1 or hand >= palm) ? 1 : 0
`,
	Reach: "a length of at least 10 diameters, and a hand at least a palm's width away",
	Model: part.Scatter{Tolerance: 0.02, Shape: part.Uniform},
	Limits: "Slender rods, a gap of a tenth of the length or more; nearer to the plane the charge crowds at the lower end. " +
		"What holds the rod and the wire that leads to it are not in it: they belong in stray. " +
		"The hand is the roughest part of it, and its scatter is a guess (common practice, no source).",
	Source: "average-potential method of G. W. O. Howe, 1914 (from memory); the 2 % from a moments calculation of our own. " +
		"The hand's term is derived in the same way. ε0: CODATA 2022",
}
