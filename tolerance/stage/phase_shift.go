package stage

import (
	"slices"

	"batchwright/bom/part"
)

// phaseShift has a high-pass ladder of three sections from the amplifier's
// output to its input: c1 in series, r1 to ground, c2, r2, c3, r3, each section
// loaded by the next. e, in farad, is what lies across r3.
//
// The inverse of the transfer is a polynomial in 1/s. With s = jω, and every
// coefficient multiplied out, it is
//
//	a0 − a2/ω² − j·a1/ω·(1 − 1/(ω²·a1/a3))
//	a1/a3 = r1·r2·(c1c2 + c1c3 + c2c3) + r1·r3·(c1 + c2)(c3 + e) + r2·r3·(c2c3 + e(c2 + c3))
//	a2    = (r1(c1 + c2) + r2(c2 + c3) + r3(c3 + e))/(r1·r2·r3·c1·c2·c3)
//	a0    = 1 + e/c1 + e/c2 + e/c3
//
// The transfer is real where ω² = a3/a1, and there −1/(a2·a1/a3 − a0), which is
// negative. Equal sections and no e: 1/(2πRC√6) and 29. The other circuits of
// the name have other factors: √3 with buffers between the sections, √6 above
// 1/(RC) with resistors in series and capacitors to ground.
var phaseShift = Kind{
	Name:    "phase-shift",
	Summary: "RC oscillator on an inverting amplifier, with three high-pass sections and no buffers",
	Roles: []Role{
		{Name: "r1", Type: part.Resistor, Summary: "from c1 and c2 to ground"},
		{Name: "r2", Type: part.Resistor, Summary: "from c2 and c3 to ground"},
		{Name: "r3", Type: part.Resistor, Summary: "from c3 to ground, or to an inverting input that is as good as ground"},
		{Name: "c1", Type: part.Capacitor, Summary: "from the amplifier's output to r1"},
		{Name: "c2", Type: part.Capacitor, Summary: "from r1 to r2"},
		{Name: "c3", Type: part.Capacitor, Summary: "from r2 to r3"},
	},
	Settings: rcSettings("r3"),
	Equations: `
end = stray + sensor
time_square = r1*r2*(c1*c2 + c1*c3 + c2*c3) + r1*r3*(c1 + c2)*(c3 + end) + r2*r3*(c2*c3 + end*(c2 + c3))
real_part = (r1*(c1 + c2) + r2*(c2 + c3) + r3*(c3 + end))/(r1*r2*r3*c1*c2*c3)
frequency = 1/(2*pi*sqrt(time_square))
needed_gain = real_part*time_square - 1 - end*(1/c1 + 1/c2 + 1/c3)
level = level
`,
	Outputs: append(slices.Clip(tankOutputs), neededGain),
	Points:  rcPoints("output of the amplifier, to ground"),
	Sketch: `
 inverting amplifier's output ──[c1]──┬──[c2]──┬──[c3]──┐
 its input ───────────────────────────│────────│────────┤
                                    [r1]     [r2]     [r3]
 0 V ─────────────────────────────────┴────────┴────────┘
`,
	Fragment: `
sine:
  kind: phase-shift
  parts:
    r1: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    r2: {ref: R2, same_as: sine.r1}
    r3: {ref: R3, same_as: sine.r1}
    c1: {ref: C1, value: 1 nF, family: c0g, tolerance: 5 %}
    c2: {ref: C2, same_as: sine.c1}
    c3: {ref: C3, same_as: sine.c1}
`,
	Limits: "The amplifier is fast, does not load r3 and drives c1 from no resistance; a resistance R0 there, as of a " +
		"transistor's load, lowers equal sections to 1/(2πRC√(6 + 4R0/R)).",
	Source: "equal sections: T. L. Floyd, Electronic Devices, Ex. 16.2; drive resistance: D. Roddy and J. Coolen, " +
		"Electronic Communications, Ex. 6.3.1, p. 199 (inputs and methods read in an open archive of textbook examples); " +
		"unequal sections by circuit analysis",
}
