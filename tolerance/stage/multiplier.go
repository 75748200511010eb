package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// multiplier is the plainest mixer: v1·v2/scale. With each input
// d + v·cos(ωt) the product holds d1·d2, v1·d2, v2·d1 and v1·v2/2 at the
// difference, so the carriers are suppressed unless a steady voltage comes in.
// A capacitor that is not fitted is a wire, and lets steady voltage through; one
// that is fitted blocks it and makes a high-pass with the input's resistance.
// An input's range is taken to be the scale voltage, beyond which it is
// `overdriven` (common practice, no source).
var multiplier = Kind{
	Name:    "multiplier",
	Summary: "ideal product of two carriers, divided by a scale voltage",
	Roles: []Role{
		{Name: "couple_carrier", Type: part.Capacitor, Optional: true, Summary: "capacitor into the carrier's input; a wire if not fitted"},
		{Name: "couple_signal", Type: part.Capacitor, Optional: true, Summary: "capacitor into the signal's input; a wire if not fitted"},
	},
	Inputs: mixerInputs,
	Settings: []Setting{
		{Name: "scale", Unit: quantity.Volt, Default: "10 V", Summary: "the output is the product divided by this"},
		{Name: "input_resistance", Unit: quantity.Ohm, Default: "1 Mohm", Summary: "resistance of each input to ground"},
		isolation,
	},
	Equations: mixing + `
carrier_rate = 2*pi*carrier.frequency*input_resistance*couple_carrier
signal_rate = 2*pi*signal.frequency*input_resistance*couple_signal
carrier_in = carrier.level*(couple_carrier.fitted > 0 ? carrier_rate/sqrt(1 + carrier_rate^2) : 1)
signal_in = signal.level*(couple_signal.fitted > 0 ? signal_rate/sqrt(1 + signal_rate^2) : 1)
carrier_dc = couple_carrier.fitted > 0 ? 0 : carrier.dc
signal_dc = couple_signal.fitted > 0 ? 0 : signal.dc
carrier_level = carrier_in*abs(signal_dc)/scale
second_level = signal_in*abs(carrier_dc)/scale
tone_level = carrier_in*signal_in/(2*scale)
dc = carrier_dc*signal_dc/scale
overdriven = carrier_in + abs(carrier_dc) > scale or signal_in + abs(signal_dc) > scale
`,
	Outputs: mixerOutputs,
	Points: []Point{{Name: "tone_level", Reading: "peak voltage", Instrument: "scope",
		At: "output of the multiplier, to ground", Stiff: driven}},
	Findings: []Finding{
		{"overdriven", "an input goes beyond the multiplier's range, its scale voltage; lower the levels that come in"},
	},
	Sketch: `
                            ┌─────────┐
 carrier ─(couple_carrier)──┤ product │
                            │ over    ├── out
 signal ──(couple_signal)───┤ scale   │
                            └─────────┘
`,
	Fragment: `
mixer:
  kind: multiplier
  in: {carrier: fixed, signal: moving}
`,
	Limits: "Levels within the multiplier's linear range; its output is stiff, so no instrument loads it.",
	Source: "product of sines: R. Blake, Electronic Communication Systems, Ex. 2.7, p. 76 " +
		"(inputs and method read in an open archive of textbook examples); " + mixingSource,
}
