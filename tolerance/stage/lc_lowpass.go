package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// lcLowpass is a coil and a capacitor into a load. With R what the signal comes
// from, G the load's conductance and D = 1 + R·G
//
//	H(s) = 1/(1 + (R + s·L)(G + s·C)), so f0 = √D/(2π√(LC)), q = √(D·LC)/(L·G + R·C)
//
// and with no resistance ahead f0 = 1/(2π√(LC)), q = √(C/L)/G. An instrument
// across the capacitor joins load and capacitor.
var lcLowpass = Kind{
	Name:    "lc-lowpass",
	Summary: "coil and capacitor into a load: a low-pass of the second order",
	Roles: []Role{
		{Name: "coil", Type: part.Coil, Summary: "from input to output"},
		{Name: "shunt", Type: part.Capacitor, Summary: "from output to ground"},
	},
	Inputs: []Input{{Name: "in", Summary: "what is filtered"}},
	Settings: []Setting{
		{Name: "source", Unit: quantity.Ohm, Default: "0 ohm", Summary: "further resistance ahead of coil, its own included"},
		{Name: "load", Unit: quantity.Ohm, Summary: "resistance from output to ground"},
	},
	Equations: `
resistance = in.source_resistance + source
conductance = 1/load + meter
capacitance = shunt + probe
divided = 1 + resistance*conductance
f0 = sqrt(divided/(coil*capacitance))/(2*pi)
q = sqrt(divided*coil*capacitance)/(coil*conductance + resistance*capacitance)
passed = 1/divided
source_resistance = resistance/divided
` + secondOrder,
	Outputs: []Output{
		{"f0", quantity.Hertz, "frequency of the pole pair"},
		{"q", quantity.One, "quality of coil and shunt with what they come from and the load"},
		{"corner", quantity.Hertz, "frequency at which the gain is 3 dB below that at 0 Hz"},
		{"gain_at_tone", quantity.One, "gain at the note"},
		{"gain_at_carrier", quantity.One, "gain at the carrier"},
		{"tone_level", quantity.Volt, "peak level of the note at the output"},
		{"dc", quantity.Volt, "steady output voltage"},
	},
	Points: []Point{
		{Name: "dc", Reading: "dc voltage", Instrument: "dmm", At: "across shunt", Conductance: "meter"},
		{Name: "tone_level", Reading: "peak voltage", Instrument: "scope",
			At: "across shunt, AC coupled", Conductance: "meter", Capacitance: "probe"},
	},
	Sketch: `
  in ──[coil]──┬────── out
            [shunt]  load
 0 V ──────────┴────────
`,
	Fragment: `
lowpass:
  kind: lc-lowpass
  in: amp
  settings: {load: 330 Ω}
  parts:
    coil:  {ref: L1, value: 1 mH, family: drum-choke, tolerance: 5 %}
    shunt: {ref: C1, value: 4.7 nF, family: polypropylene, tolerance: 2.5 %}
`,
	Limits: "Resistive source and load, well below the coil's own resonance. Above 0 Hz the source's resistance handed on leaves out the coil.",
	Source: "definition: nodal equations of the drawing",
}
