package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// commonEmitter is the plain one-transistor amplifier.
//
// Its bias is that of junctionMixer without a trimmer. For small levels the
// hybrid-π model (smallSignal) with r_π = β·V_T/I_C gives the gain at each
// frequency, with the coupling capacitor, the resistance that the signal comes
// from, the divider, and the bypass in parallel with the emitter resistor:
//
//	gain = β·|i_b|·load,  well above both corners −load/(V_T/I_C) with a bypass,
//	about −load/emitter without
//
// The stage inverts; levels are peaks and have no sign, so `gain` is the size.
// bypass_corner is where the bypass begins to count in full,
// 1/(2π·bypass·(emitter ∥ (r_π + divider ∥ source)/(β+1))), 0 without one;
// input_corner is that of `couple`, with the emitter taken as bypassed if there is a
// bypass.
//
// Downwards the collector can go to the emitter + 0.2 V, upwards to where the
// current is nothing; a waveform whose peak asks for more shrinks as one and
// the stage `clips`. A bypassed junction bends long before: with more than some
// 10 mV between base and emitter the levels are rough (junction-mixer has the
// law of that). No slew limit is given: a collector is as fast as its current
// into the capacitance behind it, of which nothing is known here.
//
// Instruments as with junctionMixer: a meter on the collector divides with the
// load, a scope's capacitance shunts it, a meter on the base joins the divider,
// one on the emitter joins its resistor.
var commonEmitter = Kind{
	Name:    "common-emitter",
	Summary: "one transistor that amplifies and inverts, its emitter resistor bypassed or not",
	Roles: []Role{
		{Name: "base_upper", Type: part.Resistor, Summary: "from the positive rail to the base"},
		{Name: "base_lower", Type: part.Resistor, Summary: "from the base to the negative rail"},
		{Name: "emitter", Type: part.Resistor, Summary: "from the emitter to the negative rail"},
		{Name: "bypass", Type: part.Capacitor, Optional: true, Summary: "capacitor across the emitter resistor"},
		{Name: "load", Type: part.Resistor, Summary: "from the positive rail to the collector"},
		{Name: "transistor", Type: part.Transistor, Summary: "NPN, common emitter"},
		{Name: "couple", Type: part.Capacitor, Summary: "from what comes in to the base"},
	},
	Inputs:   []Input{{Name: "in", Summary: "what is amplified"}},
	Settings: rails,
	Equations: `
base_foot = base_lower
emitter_ac = emitter
emitter_shunt = bypass
input_resistance = parallel(base_resistance, bypass.fitted > 0 ? base_drop : base_series)
input_corner = 1/(2*pi*couple*(in.source_resistance + input_resistance))
bypass_corner = bypass.fitted > 0 ? 1/(2*pi*bypass*parallel(emitter, emitter_source)) : 0
gain_at_tone = tone_gain
room = min(collector - floor, current*load/(1 + load*meter))
clips = resting >= floor and peak_wanted > room
share = rail_share
` + atEach(`
at_loading = load/sqrt((1 + load*meter)^2 + (2*pi*in.at_frequency*load*probe)^2)
at_gain = transistor.beta*at_passing*sqrt(1 + at_turn^2)/at_denominator*at_loading
`) + junctionBias + restingCollector + smallSignal + railShare + amplified,
	Outputs: slices.Concat([]Output{
		{"gain", quantity.One, "size of the gain at the carrier"},
		{"gain_at_tone", quantity.One, "size of the gain at the note"},
		{"output_level", quantity.Volt, "peak level of the carrier at the collector"},
		{"dc", quantity.Volt, "steady voltage handed on: the collector's"},
		{"swing", quantity.Volt, "peak of the whole waveform at the collector"},
		{"collector", quantity.Volt, "steady collector voltage"},
		{"saturated", quantity.One, "1 where the collector has come down to the emitter"},
	}, transistorOutputs, []Output{
		{"input_corner", quantity.Hertz, "corner of couple"},
		{"bypass_corner", quantity.Hertz, "frequency above which the bypass counts in full; 0 without one"},
	}),
	Points: []Point{
		basePoint,
		{Name: "emitter_voltage", Reading: "dc voltage", Instrument: "dmm",
			At: "end of emitter at the transistor, to ground", Conductance: "emitter_meter"},
		{Name: "collector", Reading: "dc voltage", Instrument: "dmm",
			At: "collector of the transistor, to ground", Conductance: "meter"},
		{Name: "swing", Reading: "peak voltage", Instrument: "scope",
			At: "collector of the transistor, to ground, AC coupled", Conductance: "meter", Capacitance: "probe"},
	},
	Findings: []Finding{
		{"saturated", "the transistor is saturated; lower the bias, or make load smaller"},
		starvedFinding,
		{"clips", "the waveform at the collector clips; lower the level that comes in, or let the collector rest nearer the middle"},
	},
	Sketch: `
 positive ────────────┬─────────────┐
                [base_upper]      [load]
                      │             ├── out
 in ──[couple]────────┼──────[transistor]
                      │             ├─────────┐
                [base_lower]    [emitter]  (bypass)
 negative ────────────┴─────────────┴─────────┘
`,
	Fragment: `
amp:
  kind: common-emitter
  in: mixer
  settings: {positive: 12 V}
  parts:
    base_upper: {ref: R1, value: 47 kΩ, family: metal-film-100, tolerance: 1 %}
    base_lower: {ref: R2, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    emitter:    {ref: R3, value: 1 kΩ, family: metal-film-100, tolerance: 1 %}
    load:       {ref: R4, value: 4.7 kΩ, family: metal-film-100, tolerance: 1 %}
    transistor: {ref: Q1, family: small-signal-npn}
    couple:     {ref: C1, value: 100 nF, family: polyester, tolerance: 10 %}
`,
	Limits: "NPN, active region, base current by a constant beta; levels small against V_T where the emitter is bypassed; " +
		"transistor capacitances and output resistance neglected, so carriers up to about 1 MHz; levels mean nothing while saturated.",
	Source: "hybrid-π model: R. L. Boylestad and L. Nashelsky, Electronic Devices and Circuit Theory (from memory)",
}
