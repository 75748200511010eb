package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// tankLimits holds for every oscillator about a coil and capacitors.
const tankLimits = "The coil's losses and the transistor's own capacitances move the frequency by parts in a thousand; " +
	"the transistor's belong in stray. The level is what limiting in the oscillator makes it, whatever the tank."

// tankSettings are those of every coil-and-capacitor oscillator. Their figures
// are common practice, no source: a drum choke of about 1 mH has a loaded Q
// between 50 and 100 near 300 kHz.
var tankSettings = []Setting{
	{Name: "level", Unit: quantity.Volt, Default: "1 V", Scatter: part.Scatter{Tolerance: 0.1},
		Summary: "peak level that the oscillator settles at"},
	{Name: "stray", Unit: quantity.Farad, Default: "0 pF",
		Summary: "capacitance of wiring, coil and transistor across the tank"},
	{Name: "sensor", Unit: quantity.Farad, Default: "0 pF",
		Summary: "further capacitance across the tank, such as a hand near a plate"},
	{Name: "loading", Unit: quantity.Farad, Default: "0 pF",
		Summary: "capacitance of the transistor across the tank; its temperature_coefficient is its slope with temperature"},
	{Name: "pushing", Unit: perVolt, Default: "0 %/V",
		Summary: "relative change of loading for each volt of supply over supply_rest"},
	{Name: "supply", Unit: quantity.Volt, Default: "0 V", Summary: "the oscillator's supply, such as a regulator's voltage"},
	{Name: "supply_rest", Unit: quantity.Volt, Default: "0 V", Summary: "supply at which loading is stated"},
	{Name: "q", Unit: quantity.One, Default: "80",
		Summary: "loaded Q of the tank; counts for the lock range only"},
}

// perVolt is the unit of supply pushing.
var perVolt = quantity.Unit{Symbol: "1/V", Scale: 1, Dimension: quantity.One.Dimension.Div(quantity.Volt.Dimension)}

// tankLoad is what lies across every tank besides its own parts. A junction's
// capacitance falls with the voltage across it, so pushing is negative as a rule.
const tankLoad = `
across = stray + sensor + probe + loading*(1 + pushing*(supply - supply_rest))
`

// tankOutputs are those of every oscillator.
var tankOutputs = []Output{
	{"frequency", quantity.Hertz, "frequency of oscillation"},
	{"level", quantity.Volt, "peak level"},
}

// tankPoints are held across the whole tank, whose capacitance the instrument
// joins. Its conductance damps the tank without moving it, and limiting brings
// the level back, so only `probe` appears in the equations.
var tankPoints = []Point{
	{Name: "frequency", Reading: "frequency", Instrument: "counter",
		At: "live end of the coil, to ground", Capacitance: "probe", Stiff: limited, Level: "level"},
	{Name: "level", Reading: "peak voltage", Instrument: "scope",
		At: "live end of the coil, to ground", Capacitance: "probe", Stiff: limited},
}

// limited is why an oscillator's resonator bears an instrument's resistance.
const limited = "resistance damps it without moving it, and limiting brings the level back"

// tunedTank is the plain resonant circuit: one coil and all that is across it.
var tunedTank = Kind{
	Name:    "tuned-tank",
	Summary: "oscillator on one coil with a capacitor across it, whatever keeps it going",
	Roles: []Role{
		{Name: "coil", Type: part.Coil, Summary: "the tank's coil"},
		{Name: "tank", Type: part.Capacitor, Summary: "capacitor across the coil"},
		{Name: "pad", Type: part.Capacitor, Optional: true, Summary: "fixed capacitor across the coil, to shift the range"},
		{Name: "tuner", Type: part.TrimmerCapacitor, Optional: true, Summary: "trimmer across the coil"},
	},
	Settings: tankSettings,
	Equations: tankLoad + `
capacitance = tank + pad + tuner + across
frequency = 1/(2*pi*sqrt(coil*capacitance))
level = level
tank_q = q
`,
	Outputs: tankOutputs,
	Points:  tankPoints,
	Sketch: `
 live end ──┬─────────┬─────────┬─────────┐
          [coil]    [tank]    (pad)    (tuner)
     0 V ───┴─────────┴─────────┴─────────┘
`,
	Fragment: `
moving:
  kind: tuned-tank
  settings: {stray: 8 pF, rise: 3 K}
  parts:
    coil: {ref: L1, value: 1.8 mH, family: drum-choke, tolerance: 5 %}
    tank: {ref: C1, value: 120 pF, family: c0g, tolerance: 5 %}
`,
	Limits: tankLimits,
	Source: "f = 1/(2π√(LC)): R. Blake, Electronic Communication Systems, Ex. 2.1, p. 50 " +
		"(inputs and method read in an open archive of textbook examples)",
}
