package stage

import (
	"slices"

	"batchwright/bom/part"
)

// wienBridge has a network of series_r and series_c from the amplifier's output
// to its input, and shunt_r and shunt_c from there to ground. With s = jω, its
// transfer is 1/(1 + Rs/Rp + Cp/Cs + s·Rs·Cp + 1/(s·Rp·Cs)): real and positive
// where ω² = 1/(Rs·Cs·Rp·Cp), and there 1/needed_gain. Ohm, farad, hertz.
var wienBridge = Kind{
	Name:    "wien-bridge",
	Summary: "RC oscillator on an amplifier that does not invert, with a series and a shunt arm",
	Roles: []Role{
		{Name: "series_r", Type: part.Resistor, Summary: "resistor of the series arm"},
		{Name: "series_c", Type: part.Capacitor, Summary: "capacitor of the series arm"},
		{Name: "shunt_r", Type: part.Resistor, Summary: "resistor from the amplifier's input to ground"},
		{Name: "shunt_c", Type: part.Capacitor, Summary: "capacitor from the amplifier's input to ground"},
	},
	Settings: rcSettings("shunt_c"),
	Equations: `
shunt_capacitance = shunt_c + stray + sensor
frequency = 1/(2*pi*sqrt(series_r*series_c*shunt_r*shunt_capacitance))
needed_gain = 1 + series_r/shunt_r + shunt_capacitance/series_c
level = level
`,
	Outputs: append(slices.Clip(tankOutputs), neededGain),
	Points:  rcPoints("output of the amplifier, to ground"),
	Sketch: `
 amplifier's output ──[series_r]──[series_c]──┐
 its input that does not invert ──┬───────────┤
                             [shunt_r]   [shunt_c]
 0 V ─────────────────────────────┴───────────┘
`,
	Fragment: `
sine:
  kind: wien-bridge
  parts:
    series_r: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    series_c: {ref: C1, value: 1 nF, family: c0g, tolerance: 5 %}
    shunt_r:  {ref: R2, same_as: sine.series_r}
    shunt_c:  {ref: C2, same_as: sine.series_c}
`,
	Limits: "The amplifier is fast, draws no current at its input and has no output resistance; " +
		"the level is what its limiting or its lamp makes it.",
	Source: "equal arms: T. L. Floyd, Electronic Devices, Ex. 16.1 " +
		"(inputs and method read in an open archive of textbook examples); unequal arms by circuit analysis",
}
