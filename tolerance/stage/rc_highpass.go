package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// rcHighpass is one capacitor and one resistor. It is a coupling whose load is
// a part, with another load beside it where there is one: see highpassing.
var rcHighpass = Kind{
	Name:    "rc-highpass",
	Summary: "one capacitor and one resistor that let through what is above their corner",
	Roles: []Role{
		{Name: "series", Type: part.Capacitor, Summary: "from input to output"},
		{Name: "shunt", Type: part.Resistor, Summary: "from output to ground"},
	},
	Inputs: []Input{{Name: "in", Summary: "what is filtered"}},
	Settings: []Setting{
		{Name: "source", Unit: quantity.Ohm, Default: "0 ohm", Summary: "further resistance ahead of series"},
		{Name: "load", Unit: quantity.Ohm, Default: "0 ohm", Summary: "resistance from output to ground beside shunt; 0 stands for none"},
	},
	Equations: `
passing_c = series
load_conductance = 1/shunt + (load > 0 ? 1/load : 0) + meter
` + highpassing,
	Outputs: []Output{
		{"corner", quantity.Hertz, "frequency at which the gain has fallen by 3 dB"},
		{"gain_at_tone", quantity.One, "gain at the note"},
		{"gain_at_carrier", quantity.One, "gain at the carrier"},
		{"tone_level", quantity.Volt, "peak level of the note at the output"},
	},
	Points: []Point{
		{Name: "tone_level", Reading: "peak voltage", Instrument: "scope",
			At: "across shunt", Conductance: "meter", Capacitance: "probe"},
	},
	Sketch: `
  in ──[series]──┬── out
              [shunt]
 0 V ────────────┴──
`,
	Fragment: `
highpass:
  kind: rc-highpass
  in: detector
  settings: {load: 100 kΩ}
  parts:
    series: {ref: C1, value: 22 nF, family: polyester, tolerance: 10 %}
    shunt:  {ref: R1, value: 100 kΩ, family: metal-film-100, tolerance: 1 %}
`,
	Limits: "Resistive source and load; leakage of the capacitor neglected.",
	Source: "definition: |jωRC/(1 + jωRC)| with Thévenin's source",
}
