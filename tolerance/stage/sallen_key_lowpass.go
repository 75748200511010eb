package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// sallenKeyLowpass is two resistors and two capacitors about an amplifier of
// unity gain, taken as ideal:
//
//	H(s) = 1/(1 + s·c2·(R1 + r2) + s²·R1·r2·c1·c2)
//
// R1 is r1 with what the signal comes from. The output is stiff, so no
// instrument changes what is there.
var sallenKeyLowpass = Kind{
	Name:    "sallen-key-lowpass",
	Summary: "second-order low-pass of two resistors, two capacitors and a unity-gain buffer",
	Roles: []Role{
		{Name: "r1", Type: part.Resistor, Summary: "from the input to the middle"},
		{Name: "r2", Type: part.Resistor, Summary: "from the middle to the buffer's input"},
		{Name: "c1", Type: part.Capacitor, Summary: "from the buffer's output back to the middle"},
		{Name: "c2", Type: part.Capacitor, Summary: "from the buffer's input to ground"},
	},
	Inputs: []Input{{Name: "in", Summary: "what is filtered"}},
	Settings: []Setting{
		{Name: "source", Unit: quantity.Ohm, Default: "0 ohm", Summary: "further resistance ahead of r1"},
	},
	Equations: `
first = in.source_resistance + source + r1
period = sqrt(first*r2*c1*c2)
f0 = 1/(2*pi*period)
q = period/(c2*(first + r2))
passed = 1
` + secondOrder,
	Outputs: []Output{
		{"f0", quantity.Hertz, "frequency of the pole pair"},
		{"q", quantity.One, "how sharply it bends: 0.707 is the flattest"},
		{"corner", quantity.Hertz, "frequency at which the gain is 3 dB below that at 0 Hz"},
		{"gain_at_tone", quantity.One, "gain at the note"},
		{"gain_at_carrier", quantity.One, "gain at the carrier"},
		{"tone_level", quantity.Volt, "peak level of the note at the output"},
		{"dc", quantity.Volt, "steady output voltage"},
	},
	Points: []Point{
		{Name: "dc", Reading: "dc voltage", Instrument: "dmm", At: "output of the buffer, to 0 V", Stiff: driven},
		{Name: "tone_level", Reading: "peak voltage", Instrument: "scope", At: "output of the buffer, to 0 V, AC coupled", Stiff: driven},
	},
	Sketch: `
            ┌────────[c1]────────┐
            │        ┌────────┐  │
  in ──[r1]─┴─[r2]─┬─┤ buffer ├──┴── out
                   │ └────────┘
                 [c2]
 0 V ──────────────┴──
`,
	Fragment: `
smooth:
  kind: sallen-key-lowpass
  in: detector
  parts:
    r1: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    r2: {ref: R2, same_as: smooth.r1}
    c1: {ref: C1, value: 4.7 nF, family: polypropylene, tolerance: 2.5 %}
    c2: {ref: C2, value: 2.2 nF, family: polypropylene, tolerance: 2.5 %}
`,
	Limits: "Ideal buffer: its gain-bandwidth well above f0, its output resistance small against r1 at the carrier, its offset neglected.",
	Source: "R. P. Sallen and E. L. Key, A practical method of designing RC active filters, IRE Trans. CT-2, 1955 (from memory); " +
		"the corner by solving |H|² = 1/2",
}
