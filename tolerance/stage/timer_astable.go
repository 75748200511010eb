package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// timerAstable is a 555-style timer that charges its capacitor through both
// resistors from a third to two thirds of the supply, and discharges it through
// one: high for ln 2·(Ra+Rb)·C, low for ln 2·Rb·C, in seconds. The usual 1.44 is
// 1/ln 2 rounded, 0.19 % low.
var timerAstable = Kind{
	Name:    "timer-astable",
	Summary: "RC oscillator on a 555-style timer",
	Roles: []Role{
		{Name: "charge_r", Type: part.Resistor, Summary: "Ra, from the supply to the discharge pin"},
		{Name: "discharge_r", Type: part.Resistor, Summary: "Rb, from the discharge pin to the thresholds"},
		{Name: "timing_c", Type: part.Capacitor, Summary: "from the thresholds to ground"},
	},
	Settings: rcSettings("timing_c"),
	Equations: `
frequency = 1/(ln(2)*(charge_r + 2*discharge_r)*(timing_c + stray + sensor))
duty = (charge_r + discharge_r)/(charge_r + 2*discharge_r)
level = level
`,
	Outputs: append(slices.Clip(tankOutputs),
		Output{"duty", quantity.One, "share of the time during which the output is high"}),
	Points: rcPoints("output of the timer, to ground"),
	Sketch: `
 supply ──[charge_r]───┐
                       ├──── discharge pin
                 [discharge_r]
                       ├──── thresholds
                  [timing_c]
 0 V ──────────────────┴──
`,
	Fragment: `
square:
  kind: timer-astable
  parts:
    charge_r:    {ref: R1, value: 2.2 kΩ, family: metal-film-100, tolerance: 1 %}
    discharge_r: {ref: R2, value: 4.7 kΩ, family: metal-film-100, tolerance: 1 %}
    timing_c:    {ref: C1, value: 1 nF, family: c0g, tolerance: 5 %}
`,
	Limits: "Thresholds at exact thirds and no delay: a bipolar timer loses accuracy above some 100 kHz " +
		"(common practice, no source); the level is what is taken of the output.",
	Source: "T. L. Floyd, Electronic Devices, Ex. 16.6 " +
		"(inputs and method read in an open archive of textbook examples)",
}
