package stage

import "batchwright/bom/quantity"

// mixing is what every mixer has in common: the difference of its carriers, and
// how far apart they must be.
//
// The lock range is that of the carrier's oscillator, pulled by what leaks to it
// of the signal's: f/(2Q)·(injected/own), with f, Q (tank_q) and the own level
// the carrier's, and the injected level the signal's less the isolation. A
// carrier that comes from no tank is taken as Q = 1/2, near that of an RC
// oscillator, which errs towards a wide range.
const mixing = `
offset = carrier.frequency - signal.frequency
beat = abs(offset)
leak = 10^(-isolation/20)
lock_range = carrier.level > 0 ? carrier.frequency/(2*max(carrier.tank_q, 0.5))*leak*signal.level/carrier.level : 0
frequency = carrier.frequency
level = carrier_level
second_frequency = signal.frequency
tone_frequency = beat
`

// mixingSource is where lock_range comes from.
const mixingSource = "lock range: R. Adler, A study of locking phenomena in oscillators, Proc. IRE 34, 1946 (from memory)"

var mixerInputs = []Input{
	{Name: "carrier", Summary: "the oscillator that stays"},
	{Name: "signal", Summary: "the oscillator that is played"},
}

// isolation is the setting of that name; its default is common practice, no source.
var isolation = Setting{Name: "isolation", Unit: quantity.Decibel, Default: "60 dB",
	Summary: "how far below its own level one oscillator feels the other"}

var mixerOutputs = []Output{
	{"offset", quantity.Hertz, "carrier's frequency less the signal's, with its sign"},
	{"beat", quantity.Hertz, "the note: the offset without its sign"},
	{"carrier_level", quantity.Volt, "peak level of the carrier at the output"},
	{"second_level", quantity.Volt, "peak level of the signal at the output"},
	{"tone_level", quantity.Volt, "peak level of the difference frequency at the output"},
	{"lock_range", quantity.Hertz, "offset below which the oscillators pull into step and there is no note"},
}
