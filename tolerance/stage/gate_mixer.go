package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// gateMixer is an exclusive-or gate and the RC that averages what it puts out.
//
// Two square waves of half duty differ for the fraction θ/π of the time, θ
// being their phase difference, 0..π; so the average runs up and down between 0 V
// and the supply as a triangle at the beat. Its fundamental is 4·Vpp/π² at the
// peak, which the filter passes on as tone_level. The triangle itself, at
// the filter's output, has the peak (from the differential equation of the RC,
// with A = Vpp/2 and τ the time constant)
//
//	A·(1 − 4·beat·τ·ln(2/(1 + e^(−1/(2·beat·τ)))))
//
// which is `swing`, what a scope shows. `cycle`, beat·τ, is held above a
// millionth only so that bounds about a beat of 0 Hz stay finite; the exponential
// is nothing there.
//
// Carriers of half duty do not come through a gate at all. What is left of
// them is the sum of the two frequencies, as strong as the difference before
// the filter; `ripple` is what the filter leaves of it. The signal handed on
// carries no more of it: a stage that cannot bear it needs a lower corner.
//
// The levels that come in count for the lock range only: whatever turns them
// into square waves is taken as part of the gate. The gate's own resistance is
// neglected beside filter_r. An instrument at the output joins the filter.
var gateMixer = Kind{
	Name:    "gate-mixer",
	Summary: "exclusive-or gate whose average is a triangle at the beat of two square waves",
	Roles: []Role{
		{Name: "filter_r", Type: part.Resistor, Summary: "from the gate to the output"},
		{Name: "filter_c", Type: part.Capacitor, Summary: "from the output to ground"},
	},
	Inputs: mixerInputs,
	Settings: []Setting{
		{Name: "supply", Unit: quantity.Volt, Summary: "the gate's supply, and so the height of its square wave"},
		isolation,
	},
	Equations: mixing + `
divided = 1 + filter_r*meter
time_constant = filter_r*(filter_c + probe)/divided
turn = 2*pi*time_constant
corner = 1/turn
triangle = supply
fundamental = 4*triangle/pi^2
carrier_level = 0*volt
second_level = 0*volt
tone_level = fundamental/(divided*sqrt(1 + (beat*turn)^2))
ripple = fundamental/(divided*sqrt(1 + ((carrier.frequency + signal.frequency)*turn)^2))
cycle = max(beat*time_constant, 1e-6)
swing = triangle/(2*divided)*max(0, 1 + 4*beat*time_constant*ln(0.5 + 0.5*exp(-0.5/cycle)))
dc = supply/(2*divided)
source_resistance = filter_r/divided
`,
	Outputs: slices.Concat(mixerOutputs, []Output{
		{"triangle", quantity.Volt, "peak to peak of the triangle ahead of the filter"},
		{"fundamental", quantity.Volt, "peak level of the triangle's fundamental ahead of the filter"},
		{"corner", quantity.Hertz, "corner of the filter"},
		{"ripple", quantity.Volt, "peak level of the carriers' sum frequency left at the output"},
		{"swing", quantity.Volt, "peak of the triangle at the output, about its middle"},
		{"dc", quantity.Volt, "steady output voltage: the triangle's middle"},
	}),
	Points: []Point{
		{Name: "dc", Reading: "dc voltage", Instrument: "dmm", At: "across filter_c", Conductance: "meter"},
		{Name: "swing", Reading: "peak voltage", Instrument: "scope",
			At: "across filter_c, AC coupled", Conductance: "meter", Capacitance: "probe"},
	},
	Sketch: `
                    ┌─────┐
 carrier ───────────┤     │
                    │ =1  ├──[filter_r]──┬── out
 signal ────────────┤     │              │
                    └─────┘          [filter_c]
                                        0 V
`,
	Fragment: `
mixer:
  kind: gate-mixer
  in: {carrier: fixed, signal: moving}
  settings: {supply: 5 V}
  parts:
    filter_r: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    filter_c: {ref: C1, value: 2.2 nF, family: polyester, tolerance: 10 %}
`,
	Limits: "Square waves of half duty, rail to rail; the gate's delay small against half a period; corner well below the carriers.",
	Source: "definition: average of an exclusive-or, Fourier series of the triangle; " + mixingSource,
}
