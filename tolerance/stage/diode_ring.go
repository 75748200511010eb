package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// diodeRing is the balanced mixer of four diodes in a ring: the carrier turns
// the signal over at every half period.
//
// The product with a square wave of ±1, whose fundamental is 4/π, holds the
// difference at 2/π of the signal: 3.92 dB down, the ring's least loss. The
// sum comes out as strong, and of either carrier, the ring being balanced,
// nothing. What drives the load is then a source of that level behind `path`, the
// resistance the signal comes from and that of two conducting diodes and the
// windings; load divides with it, and filter_c across the load makes the corner
// 1/(2π·(path ∥ load)·filter_c). Between a source and a load of 50 Ω the default
// ring resistance makes the loss 5.5 dB, as bought rings have.
//
// Where the signal is as strong as the carrier, it is no longer the carrier
// that turns it over, and the ring is `overrun`. Windings pass no steady voltage.
// An instrument across the load joins it.
var diodeRing = Kind{
	Name:    "diode-ring",
	Summary: "four diodes that turn the signal over at every half period of the carrier",
	Roles: []Role{
		{Name: "filter_c", Type: part.Capacitor, Summary: "across the load, against the sum frequency"},
		{Name: "load", Type: part.Resistor, Summary: "from the output to ground"},
	},
	Inputs: mixerInputs,
	Settings: []Setting{
		{Name: "ring_resistance", Unit: quantity.Ohm, Default: "20 ohm",
			Summary: "resistance of two conducting diodes and the windings (common practice, no source)"},
		isolation,
	},
	Equations: mixing + `
path = signal.source_resistance + ring_resistance
load_conductance = 1/load + meter
divided = 1 + path*load_conductance
lag = path*(filter_c + probe)
turn = 2*pi*lag/divided
corner = divided/(2*pi*max(path, 0.001*ohm)*(filter_c + probe))
strength = conversion*signal.level
conversion = 2/(pi*divided)
carrier_level = 0*volt
second_level = 0*volt
tone_level = strength/sqrt(1 + (beat*turn)^2)
ripple = strength/sqrt(1 + ((carrier.frequency + signal.frequency)*turn)^2)
overrun = signal.level >= carrier.level
dc = 0*volt
source_resistance = path/divided
`,
	Outputs: slices.Concat(mixerOutputs, []Output{
		{"conversion", quantity.One, "level of the difference at the load over that of the signal, well below the corner"},
		{"corner", quantity.Hertz, "corner of filter_c with the load and the path to it"},
		{"ripple", quantity.Volt, "peak level of the carriers' sum frequency left at the load"},
	}),
	Points: []Point{{Name: "tone_level", Reading: "peak voltage", Instrument: "scope",
		At: "across load", Conductance: "meter", Capacitance: "probe"}},
	Findings: []Finding{
		{"overrun", "the signal is as strong as the carrier that should switch the diodes; lower the signal or raise the carrier"},
	},
	Sketch: `
                    ┌───────┐
 carrier ───────────┤ four  │
                    │ diode ├──┬───────────┬── out
 signal ────────────┤ ring  │  │           │
                    └───────┘ [filter_c] [load]
                               │           │
 0 V ──────────────────────────┴───────────┘
`,
	Fragment: `
mixer:
  kind: diode-ring
  in: {carrier: fixed, signal: moving}
  parts:
    filter_c: {ref: C1, value: 100 nF, family: polyester, tolerance: 10 %}
    load:     {ref: R1, value: 1 kΩ, family: metal-film-100, tolerance: 1 %}
`,
	Limits: "Carrier strong enough to switch the diodes hard, well over their drop and over the signal; matched diodes, balanced windings; " +
		"corner well below the carriers.",
	Source: "definition: product with a square wave, whose Fourier series gives 2/π; " + mixingSource,
}
