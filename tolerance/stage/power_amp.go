package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// powerAmp is an amplifier on one supply that drives a speaker through a
// capacitor.
//
// Its output rests at half the supply and can go from there within headroom of
// either end: the clipping level. gain is 1 + gain_a/gain_b at every
// frequency; the bandwidth and slew rate of such amplifiers are far above the
// note, so none is asked for. A waveform whose peak, the sum of all that comes in,
// asks for more than the clipping level shrinks as one, as with opamp-noninverting.
//
// Between amplifier and speaker the capacitor makes a high-pass of corner
// 1/(2π·speaker·output_c), which all levels handed on have passed; the
// clipping level is the amplifier's. Powers are those of a sine: V²/(2·speaker).
//
// A steady voltage that comes in is taken as blocked. The output is stiff, so
// no instrument changes what is there.
var powerAmp = Kind{
	Name:    "power-amp",
	Summary: "amplifier on a single supply that drives a speaker through a capacitor",
	Roles: []Role{
		{Name: "gain_a", Type: part.Resistor, Summary: "from the output to the feedback input"},
		{Name: "gain_b", Type: part.Resistor, Summary: "from the feedback input to ground, for the note"},
		{Name: "output_c", Type: part.Capacitor, Summary: "from the output to the speaker"},
	},
	Inputs: []Input{{Name: "in", Summary: "what is to be heard"}},
	Settings: []Setting{
		{Name: "supply", Unit: quantity.Volt, Summary: "the supply, to ground"},
		{Name: "speaker", Unit: quantity.Ohm, Default: "8 ohm", Summary: "resistance of the speaker"},
		{Name: "headroom", Unit: quantity.Volt, Default: "0 V",
			Summary: "how near to either end of the supply the output cannot come; 0 is the ideal"},
	},
	Equations: `
gain = 1 + gain_a/gain_b
second_gain = gain
tone_gain = gain
rest_voltage = supply/2
clip_level = max(0, rest_voltage - headroom)
room = clip_level
clips = peak_wanted > room
share = rail_share
swing = peak_wanted*share
corner = 1/(2*pi*speaker*output_c)
output_level = carrier_wanted*share*in.frequency/sqrt(in.frequency^2 + corner^2)
gain_at_tone = gain*in.tone_frequency/sqrt(in.tone_frequency^2 + corner^2)
clip_power = clip_level^2/(2*speaker)
tone_power = tone_level^2/(2*speaker)
frequency = in.frequency
level = output_level
second_frequency = in.second_frequency
second_level = second_wanted*share*in.second_frequency/sqrt(in.second_frequency^2 + corner^2)
tone_frequency = in.tone_frequency
tone_level = tone_wanted*share*in.tone_frequency/sqrt(in.tone_frequency^2 + corner^2)
dc = 0*volt
tank_q = in.tank_q
` + railShare,
	Outputs: []Output{
		{"gain", quantity.One, "gain of the amplifier, ahead of the capacitor"},
		{"gain_at_tone", quantity.One, "gain at the note, to the speaker"},
		{"output_level", quantity.Volt, "peak level of the carrier at the speaker"},
		{"tone_level", quantity.Volt, "peak level of the note at the speaker"},
		{"dc", quantity.Volt, "steady voltage at the speaker: none"},
		{"rest_voltage", quantity.Volt, "steady voltage at the amplifier's output"},
		{"clip_level", quantity.Volt, "peak level at which the output clips"},
		{"clip_power", quantity.Watt, "power into the speaker of a sine that just clips"},
		{"tone_power", quantity.Watt, "power into the speaker of the note as it is"},
		{"corner", quantity.Hertz, "frequency below which capacitor and speaker lose the note"},
		{"swing", quantity.Volt, "peak of the whole waveform at the amplifier's output"},
	},
	Points: []Point{
		{Name: "rest_voltage", Reading: "dc voltage", Instrument: "dmm", At: "side of output_c at the amplifier, to ground", Stiff: driven},
		{Name: "swing", Reading: "peak voltage", Instrument: "scope", At: "side of output_c at the amplifier, to ground, AC coupled", Stiff: driven},
	},
	Findings: []Finding{
		{"clips", "the output clips at its supply; lower the level that comes in, make gain_a smaller, or raise the supply"},
	},
	Sketch: `
        ┌───────┐
 in ────┤ +     │
        │ amp   ├──┬──[output_c]── out
     ┌──┤ -     │  │            to the speaker
     │  └───────┘  │
     ├──[gain_a]───┘
  [gain_b]
    0 V
`,
	Fragment: `
loud:
  kind: power-amp
  in: lowpass
  settings: {supply: 12 V}
  parts:
    gain_a:   {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    gain_b:   {ref: R2, value: 1 kΩ, family: metal-film-100, tolerance: 1 %}
    output_c: {ref: C1, value: 470 µF, family: aluminium-electrolytic, tolerance: 20 %}
`,
	Limits: "Resistive speaker; idle current, the amplifier's own resistance, its heat and its current limit are left out; " +
		"levels of a stage that clips are rough.",
	Source: "power of a sine, V²/(2R): R. L. Boylestad and L. Nashelsky, Electronic Devices and Circuit Theory, Ex. 12.8",
}
