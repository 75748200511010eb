package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// opampNoninverting multiplies everything that comes in by the gain at its own
// frequency, A₀/√(1 + (f·A₀/GBW)²).
//
// Limits. The steady output stays within the rails less the headroom. What is
// left on the nearer side is the room for the peak of the whole waveform, the
// sum of carrier, second carrier and tone, since all three peak together once
// in every beat. The steepest slope, 2π·Σ f·level, may not exceed the slew
// rate. If either is exceeded, all levels shrink in one proportion, so that
// their sum just fits: the ratio of the carriers, on which the depth of the
// envelope rests, is kept. With one carrier this is the smallest of gain·level,
// slew/(2πf) and the room. In truth a clipped pair loses depth and gains
// harmonics: a stage that limits should be redesigned, and the levels are then
// for seeing that it does.
//
// The output is stiff, so no instrument changes what is there.
var opampNoninverting = Kind{
	Name:    "opamp-noninverting",
	Summary: "op-amp amplifier that does not invert, with gain-bandwidth, slew rate and rails",
	Roles: []Role{
		{Name: "feedback", Type: part.Resistor, Summary: "from the output to the inverting input"},
		{Name: "ground", Type: part.Resistor, Summary: "from the inverting input towards ground"},
		{Name: "gain_trim", Type: part.TrimmerResistor, Optional: true, Summary: "trimmer in series with ground"},
		{Name: "opamp", Type: part.OpAmp, Summary: "the amplifier"},
	},
	Inputs: []Input{{Name: "in", Summary: "what is amplified"}},
	Settings: []Setting{
		{Name: "positive", Unit: quantity.Volt, Summary: "positive rail"},
		{Name: "negative", Unit: quantity.Volt, Default: "0 V", Summary: "negative rail, or ground"},
	},
	Equations: `
low_gain = 1 + feedback/(ground + gain_trim)
gain = low_gain/sqrt(1 + (in.frequency*low_gain/opamp.gbw)^2)
second_gain = low_gain/sqrt(1 + (in.second_frequency*low_gain/opamp.gbw)^2)
tone_gain = low_gain/sqrt(1 + (in.tone_frequency*low_gain/opamp.gbw)^2)
top = positive - opamp.headroom
bottom = negative + opamp.headroom
dc_wanted = (in.dc + opamp.offset)*low_gain
dc = max(bottom, min(top, dc_wanted))
room = max(0, min(top - dc, dc - bottom))
carrier_wanted = in.level*gain
second_wanted = in.second_level*second_gain
tone_wanted = in.tone_level*tone_gain
peak_wanted = carrier_wanted + second_wanted + tone_wanted
slope_wanted = 2*pi*(in.frequency*carrier_wanted + in.second_frequency*second_wanted + in.tone_frequency*tone_wanted)
rail_share = peak_wanted > room ? room/peak_wanted : 1
slew_share = slope_wanted > opamp.slew ? opamp.slew/slope_wanted : 1
share = min(rail_share, slew_share)
clips = peak_wanted > room or dc_wanted > top or dc_wanted < bottom
slews = slope_wanted > opamp.slew
slew_limit_level = opamp.slew/(2*pi*in.frequency)
output_level = carrier_wanted*share
swing = peak_wanted*share
frequency = in.frequency
level = output_level
second_frequency = in.second_frequency
second_level = second_wanted*share
tone_frequency = in.tone_frequency
tone_level = tone_wanted*share
tank_q = in.tank_q
`,
	Outputs: []Output{
		{"gain", quantity.One, "gain at the carrier"},
		{"output_level", quantity.Volt, "peak level of the carrier at the output"},
		{"dc", quantity.Volt, "steady output voltage"},
		{"slew_limit_level", quantity.Volt, "peak level the slew rate allows at the carrier"},
		{"swing", quantity.Volt, "peak of the whole waveform at the output"},
	},
	Points: []Point{
		{Name: "dc", Reading: "dc voltage", Instrument: "dmm", At: "output of the opamp, to 0 V"},
		{Name: "swing", Reading: "peak voltage", Instrument: "scope", At: "output of the opamp, to 0 V, AC coupled"},
	},
	Findings: []Finding{
		{"clips", "the output clips at its rails; lower the gain or the level that comes in, or raise the rails"},
		{"slews", "the output is asked to move faster than the op-amp's slew rate; lower the gain or the level that comes in, or take a faster op-amp"},
	},
	Sketch: `
                     ┌───────┐
 in ─────────────────┤ +     │
                     │ opamp ├──┬── out
                 ┌───┤ -     │  │
                 │   └───────┘  │
                 ├──[feedback]──┘
              [ground]
             (gain_trim)
                0 V
`,
	Fragment: `
amp:
  kind: opamp-noninverting
  in: mixer
  settings: {positive: 12 V, negative: -12 V}
  parts:
    feedback: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    ground:   {ref: R2, value: 4.7 kΩ, family: metal-film-100, tolerance: 1 %}
    opamp:    {ref: U1, family: jfet-opamp}
`,
	Limits: "One-pole op-amp, input currents neglected, no capacitor under ground (steady voltage is amplified too); " +
		"levels of a stage that clips or slews are rough.",
	Source: "gain: T. L. Floyd, Electronic Devices, Ex. 12.3; slew limit: M. S. Sivakumar, Linear Integrated Circuit, Ex. 5.31 " +
		"(inputs and methods read in an open archive of textbook examples)",
}
