package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// hartley is the oscillator with a tapped coil: f = 1/(2π√(L·C)) with
// L = coil_a + coil_b + 2k√(coil_a·coil_b) in henry, and C in farad all that is
// across both. k is 0 for two coils apart, near 1 for one coil with a tap on a
// core, and below 0 where the two work against each other.
var hartley = Kind{
	Name:    "hartley",
	Summary: "oscillator on two coils in series, or one with a tap, and a capacitor across both",
	Roles: []Role{
		{Name: "coil_a", Type: part.Coil, Summary: "coil from the live end to the tap"},
		{Name: "coil_b", Type: part.Coil, Summary: "coil from the tap to the other end"},
		{Name: "tank", Type: part.Capacitor, Summary: "capacitor across both coils"},
		{Name: "pad", Type: part.Capacitor, Optional: true, Summary: "fixed capacitor across both coils, to shift the range"},
		{Name: "tuner", Type: part.TrimmerCapacitor, Optional: true, Summary: "trimmer across both coils"},
	},
	Settings: append(slices.Clip(tankSettings), Setting{Name: "coupling", Unit: quantity.One, Default: "0",
		Summary: "coupling factor k of the coils, from -1 to 1"}),
	Equations: tankLoad + `
inductance = coil_a + coil_b + 2*coupling*sqrt(coil_a*coil_b)
capacitance = tank + pad + tuner + across
frequency = 1/(2*pi*sqrt(inductance*capacitance))
level = level
tank_q = q
`,
	Outputs: tankOutputs,
	Points:  tankPoints,
	Sketch: `
 live end ──┬─────────┬─────────┬─────────┐
        [coil_a]      │         │         │
            ├── tap [tank]    (pad)    (tuner)
        [coil_b]      │         │         │
     0 V ───┴─────────┴─────────┴─────────┘
`,
	Fragment: `
moving:
  kind: hartley
  settings: {stray: 8 pF, rise: 3 K, coupling: 0}
  parts:
    coil_a: {ref: L1, value: 1 mH, family: drum-choke, tolerance: 5 %}
    coil_b: {ref: L2, value: 220 uH, family: drum-choke, tolerance: 5 %}
    tank:   {ref: C1, value: 180 pF, family: c0g, tolerance: 5 %}
`,
	Limits: tankLimits,
	Source: "R. Blake, Electronic Communication Systems, Ex. 2.2, p. 62 " +
		"(inputs and method read in an open archive of textbook examples)",
}
