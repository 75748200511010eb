package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// adjustableRegulator holds its reference across upper (R1, from the output to
// the adjusting pin); lower (R2) and the trimmer in series with it run from
// that pin to ground: V = V_ref·(1 + R2/R1) + I_adj·R2. output_slope is the
// reference's, counted from 25 °C. A negative reference makes a negative rail.
var adjustableRegulator = Kind{
	Name:    "adjustable-regulator",
	Summary: "three-terminal regulator whose voltage two resistors set",
	Roles: []Role{
		{Name: "regulator", Type: part.Regulator, Summary: "the regulator; its reference and adjusting current are parameters"},
		{Name: "upper", Type: part.Resistor, Summary: "R1, from the output to the adjusting pin"},
		{Name: "lower", Type: part.Resistor, Summary: "R2, from the adjusting pin towards ground"},
		{Name: "trim", Type: part.TrimmerResistor, Optional: true, Summary: "trimmer in series with lower"},
	},
	Settings: []Setting{
		{Name: "input", Unit: quantity.Volt, Summary: "voltage that comes in, from a certified supply"},
		loadCurrent, thermalResistance,
	},
	Equations: `
foot = lower + trim
reference = regulator.reference + regulator.output_slope*(temperature - zero_celsius - 25*kelvin)
adjust_drop = regulator.adjust_current*foot
wanted = reference*(1 + foot/upper) + (reference < 0 ? -adjust_drop : adjust_drop)
` + regulating,
	Outputs: regulatorOutputs,
	Points:  regulatorPoints, Findings: regulatorFindings,
	Sketch: `
 input ──[regulator]──┬── out
              │    [upper]
              └───────┤
                   [lower]
                   (trim)
   0 V ───────────────┘
`,
	Fragment: `
plus:
  kind: adjustable-regulator
  settings: {input: 18 V}
  parts:
    regulator: {ref: U1, family: adjustable-regulator}
    upper:     {ref: R1, value: 240 Ω, family: metal-film-100, tolerance: 1 %}
    lower:     {ref: R2, value: 2 kΩ, family: metal-film-100, tolerance: 1 %}
`,
	Limits: "Steady state; line and load regulation neglected; the divider must draw the regulator's least load current.",
	Source: "M. S. Sivakumar, Linear Integrated Circuit, Ex. 14.1 " +
		"(inputs and method read in an open archive of textbook examples); dropout behaviour is common practice, no source",
}
