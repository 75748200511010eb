package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// rcLowpass is one resistor and one capacitor. The resistance that the signal
// comes from and the setting source both stand in series with the resistor;
// the load, where there is one, divides with all three. An instrument across
// the capacitor joins load and capacitor.
var rcLowpass = Kind{
	Name:    "rc-lowpass",
	Summary: "one resistor and one capacitor that let the note through and not the carrier",
	Roles: []Role{
		{Name: "series", Type: part.Resistor, Summary: "from input to output"},
		{Name: "shunt", Type: part.Capacitor, Summary: "from output to ground"},
	},
	Inputs: []Input{{Name: "in", Summary: "what is filtered"}},
	Settings: []Setting{
		{Name: "source", Unit: quantity.Ohm, Default: "0 ohm", Summary: "further resistance ahead of series"},
		{Name: "load", Unit: quantity.Ohm, Default: "0 ohm", Summary: "resistance from output to ground; 0 stands for none"},
	},
	Equations: `
resistance = in.source_resistance + source + series
load_conductance = (load > 0 ? 1/load : 0) + meter
divided = 1 + resistance*load_conductance
corner = divided/(2*pi*resistance*(shunt + probe))
gain_at_carrier = 1/(divided*sqrt(1 + (in.frequency/corner)^2))
gain_at_second = 1/(divided*sqrt(1 + (in.second_frequency/corner)^2))
gain_at_tone = 1/(divided*sqrt(1 + (in.tone_frequency/corner)^2))
` + filtered + `dc = in.dc/divided
source_resistance = resistance/divided
tank_q = in.tank_q
`,
	Outputs: []Output{
		{"corner", quantity.Hertz, "frequency at which the gain has fallen by 3 dB"},
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
  in ──[series]──┬── out
              [shunt]
 0 V ────────────┴──
`,
	Fragment: `
lowpass:
  kind: rc-lowpass
  in: detector
  settings: {load: 100 kΩ}
  parts:
    series: {ref: R1, value: 22 kΩ, family: metal-film-100, tolerance: 1 %}
    shunt:  {ref: C1, value: 2.2 nF, family: polyester, tolerance: 10 %}
`,
	Limits: "Resistive source and load.",
	Source: "definition: |1/(1 + jωRC)| with Thévenin's source",
}
