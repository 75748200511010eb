package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// railDecoupling is a resistor in a rail and a capacitor behind it. Its input
// may be the stage whose carrier must not travel along the rail, or the stage
// that makes the rail; not wired, there is no carrier and nothing to attenuate.
var railDecoupling = Kind{
	Name:    "rail-decoupling",
	Summary: "resistor and capacitor that keep a carrier off a supply rail",
	Roles: []Role{
		{Name: "series", Type: part.Resistor, Summary: "in the rail"},
		{Name: "capacitor", Type: part.Capacitor, Summary: "from the rail behind it to ground"},
	},
	Inputs: []Input{{Name: "in", Summary: "the carrier on the rail, and the rail's voltage", Optional: true}},
	Settings: []Setting{
		{Name: "load_current", Unit: quantity.Ampere, Default: "10 mA", Summary: "current that the rail behind it draws"},
	},
	Equations: `
corner = 1/(2*pi*series*capacitor)
carrier_power = 1 + (in.frequency/corner)^2
attenuation = 10*log10(carrier_power)
drop = load_current*series/(1 + series*meter)
frequency = in.frequency
level = in.level/sqrt(carrier_power)
dc = in.dc - drop
source_resistance = in.source_resistance + series
`,
	Outputs: []Output{
		{"corner", quantity.Hertz, "frequency at which the attenuation is 3 dB"},
		{"attenuation", quantity.Decibel, "how much weaker the carrier leaves than it enters"},
		{"drop", quantity.Volt, "steady voltage lost in series"},
	},
	Points: []Point{{Name: "drop", Reading: "dc voltage", Instrument: "dmm", At: "across series", Conductance: "meter"}},
	Sketch: `
 rail ──[series]──┬── quiet rail
             [capacitor]
  0 V ────────────┴──
`,
	Fragment: `
quiet_rail:
  kind: rail-decoupling
  in: plus
  parts:
    series:    {ref: R1, value: 100 Ω, family: metal-film-100, tolerance: 5 %}
    capacitor: {ref: C1, value: 100 nF, family: polyester, tolerance: 10 %}
`,
	Limits: "Source small against series, capacitor without its own inductance and resistance.",
	Source: "definition: |1 + jωRC|",
}
