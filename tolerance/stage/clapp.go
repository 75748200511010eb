package stage

import "batchwright/bom/part"

// clapp is the colpitts oscillator with a third, smaller capacitor in series
// with its two: f = 1/(2π√(L·C)), 1/(1/upper + 1/lower + 1/(series + tuner)) and
// all that is across the coil making C, in henry, farad and hertz. The series
// capacitor takes most of the voltage, so upper and lower, and the transistor's
// capacitances across them, count for less the larger they are beside it.
var clapp = Kind{
	Name:    "clapp",
	Summary: "colpitts oscillator with a small capacitor in series, which sets most of the frequency",
	Roles: []Role{
		{Name: "coil", Type: part.Coil, Summary: "the tank's coil"},
		{Name: "upper", Type: part.Capacitor, Summary: "capacitor from the series capacitor to the tap"},
		{Name: "lower", Type: part.Capacitor, Summary: "capacitor from the tap to ground"},
		{Name: "series", Type: part.Capacitor, Summary: "capacitor from the live end of the coil to upper"},
		{Name: "pad", Type: part.Capacitor, Optional: true, Summary: "fixed capacitor across the coil, to shift the range"},
		{Name: "tuner", Type: part.TrimmerCapacitor, Optional: true, Summary: "trimmer across the series capacitor"},
	},
	Settings: tankSettings,
	Equations: tankLoad + `
capacitance = 1/(1/upper + 1/lower + 1/(series + tuner)) + pad + across
frequency = 1/(2*pi*sqrt(coil*capacitance))
level = level
tank_q = q
`,
	Outputs: tankOutputs,
	Points:  tankPoints,
	Sketch: `
 live end ──┬─────[series]─────┐
            ├─────(tuner)──────┤
            ├─────────┐     [upper]
          [coil]    (pad)      ├── tap
            │         │     [lower]
     0 V ───┴─────────┴────────┘
`,
	Fragment: `
moving:
  kind: clapp
  settings: {stray: 8 pF, rise: 3 K}
  parts:
    coil:   {ref: L1, value: 1.8 mH, family: drum-choke, tolerance: 5 %}
    upper:  {ref: C1, value: 1 nF, family: c0g, tolerance: 5 %}
    lower:  {ref: C2, same_as: moving.upper}
    series: {ref: C3, value: 150 pF, family: c0g, tolerance: 5 %}
`,
	Limits: tankLimits,
	Source: "J. K. Clapp, An inductance-capacitance oscillator of unusual frequency stability, " +
		"Proc. IRE 36, 1948 (from memory); resonance of the network by circuit analysis",
}
