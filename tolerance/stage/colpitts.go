package stage

import "batchwright/bom/part"

// colpitts is the oscillator with a tapped capacitance: upper and lower in
// series across the coil, everything else in parallel with the pair.
var colpitts = Kind{
	Name:    "colpitts",
	Summary: "oscillator on one coil with two capacitors in series across it, fed at their tap",
	Roles: []Role{
		{Name: "coil", Type: part.Coil, Summary: "the tank's coil"},
		{Name: "upper", Type: part.Capacitor, Summary: "capacitor from the live end of the coil to the tap"},
		{Name: "lower", Type: part.Capacitor, Summary: "capacitor from the tap to ground"},
		{Name: "pad", Type: part.Capacitor, Optional: true, Summary: "fixed capacitor across the coil, to shift the range"},
		{Name: "tuner", Type: part.TrimmerCapacitor, Optional: true, Summary: "trimmer across the coil"},
	},
	Settings: tankSettings,
	Equations: tankLoad + `
capacitance = upper*lower/(upper + lower) + pad + tuner + across
frequency = 1/(2*pi*sqrt(coil*capacitance))
level = level
tank_q = q
`,
	Outputs: tankOutputs,
	Points:  tankPoints,
	Sketch: `
 live end ──┬─────────┬─────────┬─────────┐
            │      [upper]      │         │
          [coil]      ├── tap (pad)    (tuner)
            │      [lower]      │         │
     0 V ───┴─────────┴─────────┴─────────┘
`,
	Fragment: `
fixed:
  kind: colpitts
  settings: {stray: 8 pF, rise: 3 K}
  parts:
    coil:  {ref: L1, value: 1.8 mH, family: drum-choke, tolerance: 5 %}
    upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}
    lower: {ref: C2, same_as: fixed.upper}
`,
	Limits: tankLimits,
	Source: "D. Roddy and J. Coolen, Electronic Communications, Ex. 6.4.1, p. 205 " +
		"(inputs and method read in an open archive of textbook examples)",
}
