package geometry

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// plate is two equal plates face to face in air, such as a hand held before a
// plate. For discs of radius r at a distance s (F, m):
//
//	C = ε0·r·(π·r/s + ln(16π·r/s + e⁵) − 1)
//
// The first term is ε0·A/s, the field between the plates; the others are that
// of the edges, without which the figure is 15 % low at s = r/10 and less than
// half at s = r. Without e⁵ it is Kirchhoff's formula of close discs; with it
// the sum comes to 4·ε0·r when they are far apart, which is two discs of 8·ε0·r
// each in series. At every distance it lies between 0.2 % below and 3.4 % above
// the solution of Love's equation, which is exact.
//
// Other outlines count as the disc of the same area. A hand is neither flat nor
// of one size, and the body behind it is left out: ±20 %, common practice, no
// source, and no less rough than it sounds.
var plate = Shape{
	Name:    "plate",
	Summary: "capacitance of two equal plates face to face, such as a hand held before a plate",
	Unit:    quantity.Farad,
	Dimensions: []Dimension{
		{Name: "distance", Unit: quantity.Metre, Summary: "from plate to plate, or to the hand"},
		{Name: "area", Unit: Area, Summary: "area of one plate, or of the hand, whichever is the smaller"},
	},
	Equations: `
permittivity = 8.8541878188e-12*farad/metre
radius = sqrt(area/pi)
ratio = radius/distance
value = permittivity*radius*(pi*ratio + ln(16*pi*ratio + exp(5)) - 1)
`,
	Model: part.Scatter{Tolerance: 0.2, Shape: part.Uniform},
	Limits: "Equal plates in air, both far from everything else. Far apart it does not fall to nothing but to 4·ε0·r: " +
		"two plates that only see each other. ±20 % is for hands; two machined plates deserve tolerance: 4 %.",
	Source: "G. Kirchhoff, 1877 (from memory), for discs close together; the limit far apart and the joint by us, " +
		"held against Love's equation. ε0: CODATA 2022",
}
