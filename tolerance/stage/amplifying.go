package stage

import (
	"strings"

	"batchwright/bom/quantity"
)

// rails are the settings of every amplifier between two of them.
var rails = []Setting{
	{Name: "positive", Unit: quantity.Volt, Summary: "positive rail"},
	{Name: "negative", Unit: quantity.Volt, Default: "0 V", Summary: "negative rail, or ground"},
}

// railShare is how every amplifier keeps what comes out within the room that
// its supply leaves for a peak. It takes `room` and the three gains. All peak
// together once in every beat, so their sum counts, and if that is too much all
// shrink in one proportion.
const railShare = `
carrier_wanted = in.level*gain
second_wanted = in.second_level*second_gain
tone_wanted = in.tone_level*tone_gain
peak_wanted = carrier_wanted + second_wanted + tone_wanted
rail_share = peak_wanted > room ? room/peak_wanted : 1
`

// amplified is what an amplifier hands on: everything that came in, each at its
// own gain and shrunk by `share`.
const amplified = `
output_level = carrier_wanted*share
swing = peak_wanted*share
frequency = in.frequency
level = output_level
second_frequency = in.second_frequency
second_level = second_wanted*share
tone_frequency = in.tone_frequency
tone_level = tone_wanted*share
tank_q = in.tank_q
`

// atEach writes an equation text three times: for the carrier, the second
// carrier and the note. `at_` in it is the beginning of the names that differ:
// nothing, `second_` and `tone_`, as in the fields of a signal.
func atEach(text string) string {
	return strings.ReplaceAll(text, "at_", "") +
		strings.ReplaceAll(text, "at_", "second_") +
		strings.ReplaceAll(text, "at_", "tone_")
}
