package stage

import "batchwright/bom/quantity"

// rcSettings are those of the oscillators without a tank; stray and sensor lie
// across the place named.
//
// These kinds hand on no tank_q: there is no tank, and a mixer then counts with
// Q = 1/2 (see mixing). By the slope of the phase, (ω/2)·|dφ/dω|, a Wien bridge
// of equal arms has 1/3 and a phase shifter of equal sections 6√6/29 = 0.51, so
// that is the right size; a switching oscillator has no such slope, and is
// pulled at least as easily.
func rcSettings(place string) []Setting {
	return []Setting{
		tankSettings[0],
		{Name: "stray", Unit: quantity.Farad, Default: "0 pF",
			Summary: "capacitance of wiring and amplifier across " + place},
		{Name: "sensor", Unit: quantity.Farad, Default: "0 pF",
			Summary: "further capacitance across " + place + ", such as a hand near a plate"},
	}
}

// driven is why a point bears every instrument.
const driven = "the output that is read is stiff"

// rcPoints are held at the output of whatever drives the network, which is
// stiff: no instrument changes what is there.
func rcPoints(at string) []Point {
	return []Point{
		{Name: "frequency", Reading: "frequency", Instrument: "counter", At: at, Stiff: driven, Level: "level"},
		{Name: "level", Reading: "peak voltage", Instrument: "scope", At: at, Stiff: driven},
	}
}

// neededGain is the output of the oscillators that run on a linear amplifier.
var neededGain = Output{"needed_gain", quantity.One,
	"gain at which the amplifier just makes up for the network; it starts only with more"}
