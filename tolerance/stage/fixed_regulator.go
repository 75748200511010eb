package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// loadCurrent is what a supply stage delivers; the figure is common practice
// for a small instrument, no source.
var loadCurrent = Setting{Name: "load_current", Unit: quantity.Ampere, Default: "20 mA",
	Summary: "current that the stage delivers"}

var regulatorOutputs = []Output{
	{"voltage", quantity.Volt, "output voltage"},
	{"headroom", quantity.Volt, "what the input has to spare over output and dropout; negative where it no longer regulates"},
	{"dissipation", quantity.Watt, "heat in the regulator"},
	warmingOutput,
}

// regulatorPoints: a regulator is stiff, so no instrument changes its voltage.
var regulatorPoints = []Point{{Name: "voltage", Reading: "dc voltage", Instrument: "dmm",
	At: "output of the regulator, to ground", Stiff: driven}}

// regulatorFindings: what a supply that is too low does.
var regulatorFindings = []Finding{
	{"drops_out", "the input is too low for the regulator to regulate; raise the input, or take a regulator that needs less over its output"},
}

// regulating takes `wanted`, the voltage the regulator aims at. Rails below
// ground are counted by their size, so a negative regulator works alike. Where
// the input is short, the output falls to the input less the dropout, and to
// nothing at worst.
const regulating = `
polarity = wanted < 0 ? -1 : 1
headroom = polarity*(input - wanted) - regulator.dropout
drops_out = headroom < 0
voltage = polarity*max(0, min(polarity*wanted, polarity*input - regulator.dropout))
dissipation = polarity*(input - voltage)*load_current
heat = dissipation
dc = voltage
` + warms

// fixedRegulator is a three-terminal regulator with its two capacitors, which
// are bought but change no steady voltage. output_slope counts from 25 °C.
var fixedRegulator = Kind{
	Name:    "fixed-regulator",
	Summary: "three-terminal regulator of a fixed voltage, with its capacitors",
	Roles: []Role{
		{Name: "regulator", Type: part.Regulator, Summary: "the regulator; its output is a parameter"},
		{Name: "input_c", Type: part.Capacitor, Summary: "capacitor at its input"},
		{Name: "output_c", Type: part.Capacitor, Summary: "capacitor at its output"},
	},
	Settings: []Setting{
		{Name: "input", Unit: quantity.Volt, Summary: "voltage that comes in, from a certified supply"},
		loadCurrent, thermalResistance,
	},
	Equations: `
wanted = regulator.output + regulator.output_slope*(temperature - zero_celsius - 25*kelvin)
` + regulating,
	Outputs: regulatorOutputs,
	Points:  regulatorPoints, Findings: regulatorFindings,
	Sketch: `
 input ──┬───[regulator]───┬── out
     [input_c]     │   [output_c]
   0 V ──┴─────────┴───────┴──
`,
	Fragment: `
plus:
  kind: fixed-regulator
  settings: {input: 18 V}
  parts:
    regulator: {ref: U1, value: 12 V, family: fixed-regulator, tolerance: 4 %}
    input_c:   {ref: C1, value: 330 nF, family: polyester, tolerance: 10 %}
    output_c:  {ref: C2, value: 100 nF, family: polyester, tolerance: 10 %}
`,
	Limits: "Steady state; line and load regulation neglected, its own supply current left out of the dissipation.",
	Source: "definition; dropout behaviour is common practice, no source",
}
