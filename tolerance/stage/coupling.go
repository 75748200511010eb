package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// coupling is a capacitor between two resistances; it blocks the steady
// voltage. The resistance that the signal comes from and the setting source add:
// see highpassing.
var coupling = Kind{
	Name:    "coupling",
	Summary: "capacitor that passes the note on and blocks the steady voltage",
	Roles: []Role{
		{Name: "capacitor", Type: part.Capacitor, Summary: "from input to output"},
	},
	Inputs: []Input{{Name: "in", Summary: "what is passed on"}},
	Settings: []Setting{
		{Name: "source", Unit: quantity.Ohm, Default: "0 ohm", Summary: "further resistance ahead of the capacitor"},
		{Name: "load", Unit: quantity.Ohm, Summary: "resistance from output to ground"},
	},
	Equations: `
passing_c = capacitor
load_conductance = 1/load + meter
` + highpassing,
	Outputs: []Output{
		{"corner", quantity.Hertz, "frequency at which the gain has fallen by 3 dB"},
		{"gain_at_tone", quantity.One, "gain at the note"},
		{"tone_level", quantity.Volt, "peak level of the note at the output"},
	},
	Points: []Point{
		{Name: "tone_level", Reading: "peak voltage", Instrument: "scope",
			At: "output side of capacitor, to ground", Conductance: "meter", Capacitance: "probe"},
	},
	Sketch: `
  in ──[capacitor]──┬── out
                   load
 0 V ───────────────┴──
`,
	Fragment: `
output:
  kind: coupling
  in: lowpass
  settings: {load: 100 kΩ}
  parts:
    capacitor: {ref: C1, value: 470 nF, family: polyester, tolerance: 10 %}
`,
	Limits: "Resistive source and load; leakage of the capacitor neglected.",
	Source: "definition: corner 1/(2π(Rs + Rl)C)",
}

// highpassing is a capacitor, passing_c, between two resistances. With Rs what
// the signal comes from, the load's conductance G ∥ the probe's capacitance Cp
// the gain is |jωC/(jω(C(1+Rs·G) + Cp) + G − ω²·Rs·C·Cp)|, written so that a
// note of 0 Hz has gain 0 and a finite slope. Without a probe, corner is
// 1/(2π(Rs + 1/G)C).
const highpassing = `
source_total = in.source_resistance + source
load_total = 1/load_conductance
corner = 1/(2*pi*(source_total + load_total)*passing_c)
passing = passing_c*(1 + source_total*load_conductance) + probe
carrier_rate = 2*pi*in.frequency
second_rate = 2*pi*in.second_frequency
tone_rate = 2*pi*in.tone_frequency
shunting = source_total*passing_c*probe
gain_at_carrier = carrier_rate*passing_c/sqrt((carrier_rate*passing)^2 + (load_conductance - carrier_rate^2*shunting)^2)
gain_at_second = second_rate*passing_c/sqrt((second_rate*passing)^2 + (load_conductance - second_rate^2*shunting)^2)
gain_at_tone = tone_rate*passing_c/sqrt((tone_rate*passing)^2 + (load_conductance - tone_rate^2*shunting)^2)
` + filtered + `dc = 0*volt
source_resistance = parallel(source_total, load_total)
tank_q = in.tank_q
`
