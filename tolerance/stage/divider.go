package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// divider is two resistors across a voltage. A load, where there is one, and
// an instrument at the tap stand in parallel with the lower.
var divider = Kind{
	Name:    "divider",
	Summary: "two resistors that divide a steady voltage",
	Roles: []Role{
		{Name: "upper", Type: part.Resistor, Summary: "from the input to the tap"},
		{Name: "lower", Type: part.Resistor, Summary: "from the tap to ground"},
	},
	Settings: []Setting{
		{Name: "input", Unit: quantity.Volt, Summary: "voltage across both"},
		{Name: "load", Unit: quantity.Ohm, Default: "0 ohm", Summary: "resistance from the tap to ground; 0 stands for none"},
		thermalResistance,
	},
	Equations: warms + `
tap_resistance = 1/(1/upper + 1/lower + (load > 0 ? 1/load : 0) + meter)
voltage = input*tap_resistance/upper
current = (input - voltage)/upper
heat = (input - voltage)^2/upper + voltage^2/lower
dc = voltage
source_resistance = tap_resistance
`,
	Outputs: []Output{
		{"voltage", quantity.Volt, "voltage at the tap"},
		{"current", quantity.Ampere, "current that the input delivers"},
		{"heat", quantity.Watt, "heat in both resistors"},
		warmingOutput,
	},
	Points: []Point{{Name: "voltage", Reading: "dc voltage", Instrument: "dmm",
		At: "tap of upper and lower, to ground", Conductance: "meter"}},
	Sketch: `
 input ──┐
      [upper]
         ├── out
      [lower]
   0 V ──┘
`,
	Fragment: `
half:
  kind: divider
  settings: {input: 12 V}
  parts:
    upper: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    lower: {ref: R2, same_as: half.upper}
`,
	Limits: "Steady voltage, resistive load.",
	Source: "Ohm's law",
}
