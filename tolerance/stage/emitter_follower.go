package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// emitterFollower is the one-transistor buffer: gain nearly 1, a small
// resistance to the stage after it.
//
// Its bias is that of junctionMixer without a trimmer, the collector on the
// positive rail. For small levels the hybrid-π model (smallSignal) gives
//
//	gain = (β+1)·|i_b·Z_E|,  above couple's corner about (β+1)·R_E/(r_π + (β+1)·R_E)
//	output_resistance = R_E ∥ (r_π + divider ∥ source)/(β+1)
//
// the latter handed on as source_resistance, with couple taken as a short. A
// stage that takes this one's signal divides with it.
//
// The emitter can rise until 0.2 V are left to the positive rail, and fall to
// the negative one, as nothing draws current from it but its resistor; a
// waveform whose peak asks for more shrinks as one and the stage `clips`. With a
// load besides, it clips downwards earlier. No slew limit is given, for want
// of a load capacitance to know it by.
//
// A scope on the emitter joins its resistor (meter and capacitance); so does a
// meter there (emitter_meter); a meter on the base joins the divider.
var emitterFollower = Kind{
	Name:    "emitter-follower",
	Summary: "one transistor as a buffer: gain nearly 1, small output resistance",
	Roles: []Role{
		{Name: "base_upper", Type: part.Resistor, Summary: "from the positive rail to the base"},
		{Name: "base_lower", Type: part.Resistor, Summary: "from the base to the negative rail"},
		{Name: "emitter", Type: part.Resistor, Summary: "from the emitter to the negative rail"},
		{Name: "transistor", Type: part.Transistor, Summary: "NPN, its collector on the positive rail"},
		{Name: "couple", Type: part.Capacitor, Summary: "from what comes in to the base"},
	},
	Inputs:   []Input{{Name: "in", Summary: "what is handed on"}},
	Settings: rails,
	Equations: `
base_foot = base_lower
emitter_ac = emitter/(1 + emitter*meter)
emitter_shunt = probe
input_resistance = parallel(base_resistance, base_series)
input_corner = 1/(2*pi*couple*(in.source_resistance + input_resistance))
output_resistance = parallel(emitter, emitter_source)
source_resistance = output_resistance
gain_at_tone = tone_gain
dc = emitter_voltage
room = max(0, min(positive - 0.2*volt - emitter_voltage, emitter_voltage - negative))
clips = peak_wanted > room
share = rail_share
` + atEach(`
at_gain = (transistor.beta + 1)*at_passing*emitter_ac/at_denominator
`) + junctionBias + smallSignal + railShare + amplified,
	Outputs: slices.Concat([]Output{
		{"gain", quantity.One, "gain at the carrier"},
		{"gain_at_tone", quantity.One, "gain at the note"},
		{"output_level", quantity.Volt, "peak level of the carrier at the emitter"},
		{"dc", quantity.Volt, "steady voltage handed on: the emitter's"},
		{"swing", quantity.Volt, "peak of the whole waveform at the emitter"},
		{"output_resistance", quantity.Ohm, "resistance that the next stage sees"},
	}, transistorOutputs, []Output{
		{"input_corner", quantity.Hertz, "corner of couple"},
	}),
	Points: []Point{
		basePoint,
		{Name: "dc", Reading: "dc voltage", Instrument: "dmm",
			At: "end of emitter at the transistor, to ground", Conductance: "emitter_meter"},
		{Name: "swing", Reading: "peak voltage", Instrument: "scope",
			At: "end of emitter at the transistor, to ground, AC coupled", Conductance: "meter", Capacitance: "probe"},
	},
	Findings: []Finding{
		starvedFinding,
		{"clips", "the waveform at the emitter clips; lower the level that comes in, or let the emitter rest nearer the middle"},
	},
	Sketch: `
 positive ────────────┬─────────────┐
                [base_upper]        │
                      │             │
 in ──[couple]────────┼──────[transistor]
                      │             ├── out
                [base_lower]    [emitter]
 negative ────────────┴─────────────┘
`,
	Fragment: `
buffer:
  kind: emitter-follower
  in: mixer
  settings: {positive: 12 V}
  parts:
    base_upper: {ref: R1, value: 100 kΩ, family: metal-film-100, tolerance: 1 %}
    base_lower: {ref: R2, value: 150 kΩ, family: metal-film-100, tolerance: 1 %}
    emitter:    {ref: R3, value: 4.7 kΩ, family: metal-film-100, tolerance: 1 %}
    transistor: {ref: Q1, family: small-signal-npn}
    couple:     {ref: C1, value: 100 nF, family: polyester, tolerance: 10 %}
`,
	Limits: "NPN, active region, base current by a constant beta; transistor capacitances and output resistance neglected, " +
		"so carriers up to about 1 MHz; resistance of couple neglected in output_resistance.",
	Source: "hybrid-π model: R. L. Boylestad and L. Nashelsky, Electronic Devices and Circuit Theory (from memory)",
}
