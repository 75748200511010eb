package stage

import "batchwright/bom/quantity"

// opampLimits is what bandwidth, rails and slew rate leave of an op-amp stage's
// output. It takes `low_gain`, the gain at 0 Hz; `noise_gain`, the gain from the
// non-inverting input, which sets the bandwidth: A₀/√(1 + (f·noise_gain/GBW)²); and
// `dc_wanted`, the steady output were there no rails. opampNoninverting tells
// how levels shrink that do not fit.
var opampLimits = atEach(`
at_gain = low_gain/sqrt(1 + (in.at_frequency*noise_gain/opamp.gbw)^2)
`) + `
top = positive - opamp.headroom
bottom = negative + opamp.headroom
dc = max(bottom, min(top, dc_wanted))
room = max(0, min(top - dc, dc - bottom))
slope_wanted = 2*pi*(in.frequency*carrier_wanted + in.second_frequency*second_wanted + in.tone_frequency*tone_wanted)
slew_share = slope_wanted > opamp.slew ? opamp.slew/slope_wanted : 1
share = min(rail_share, slew_share)
clips = peak_wanted > room or dc_wanted > top or dc_wanted < bottom
slews = slope_wanted > opamp.slew
slew_limit_level = opamp.slew/(2*pi*in.frequency)
`

var opampOutputs = []Output{
	{"gain", quantity.One, "gain at the carrier"},
	{"output_level", quantity.Volt, "peak level of the carrier at the output"},
	{"dc", quantity.Volt, "steady output voltage"},
	{"slew_limit_level", quantity.Volt, "peak level the slew rate allows at the carrier"},
	{"swing", quantity.Volt, "peak of the whole waveform at the output"},
}

// opampPoints: the output is stiff, so no instrument changes what is there.
var opampPoints = []Point{
	{Name: "dc", Reading: "dc voltage", Instrument: "dmm", At: "output of the opamp, to 0 V", Stiff: driven},
	{Name: "swing", Reading: "peak voltage", Instrument: "scope", At: "output of the opamp, to 0 V, AC coupled", Stiff: driven},
}

var opampFindings = []Finding{
	{"clips", "the output clips at its rails; lower the gain or the level that comes in, or raise the rails"},
	{"slews", "the output is asked to move faster than the op-amp's slew rate; lower the gain or the level that comes in, or take a faster op-amp"},
}
