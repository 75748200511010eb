package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// shuntZener is a resistor and a Zener diode, a voltage in series with its
// resistance:
//
//	V = knee + resistance·I_Z, knee = voltage + voltage_slope·(t − 25 °C) − resistance·test_current
//	(input − V)/series = I_Z + load_current + V·meter
//
// Where I_Z would be negative the diode carries nothing, and the output is what
// series leaves, nothing at worst. Rails below ground are counted by their
// size: a negative input makes a negative rail.
var shuntZener = Kind{
	Name:    "shunt-zener",
	Summary: "resistor and Zener diode that make a steady voltage",
	Roles: []Role{
		{Name: "series", Type: part.Resistor, Summary: "from the input to the output"},
		{Name: "zener", Type: part.Zener, Summary: "from the output to ground"},
	},
	Settings: []Setting{
		{Name: "input", Unit: quantity.Volt, Summary: "voltage that comes in"},
		loadCurrent, thermalResistance,
		{Name: "test_current", Unit: quantity.Ampere, Default: "0 mA",
			Summary: "current at which the diode's voltage is stated; 0: it is what is left without current"},
	},
	Equations: warms + `
polarity = input < 0 ? -1 : 1
supply = abs(input)
warmth = temperature - zero_celsius - 25*kelvin
knee = zener.voltage + zener.voltage_slope*warmth - zener.resistance*test_current
metered = 1 + series*meter
spare_current = (supply - knee*metered - series*load_current)/(series + zener.resistance*metered)
unregulated = spare_current < 0
zener_current = max(0, spare_current)
size = unregulated > 0 ? max(0, (supply - series*load_current)/metered) : knee + zener.resistance*zener_current
voltage = polarity*size
zener_dissipation = size*zener_current
series_dissipation = (supply - size)^2/series
heat = zener_dissipation + series_dissipation
dc = voltage
source_resistance = unregulated > 0 ? series/metered : series*zener.resistance/(series + zener.resistance*metered)
`,
	Outputs: []Output{
		{"voltage", quantity.Volt, "output voltage"},
		{"zener_current", quantity.Ampere, "current through zener"},
		{"zener_dissipation", quantity.Watt, "heat in zener"},
		{"series_dissipation", quantity.Watt, "heat in series"},
		warmingOutput,
		{"unregulated", quantity.One, "1 where nothing is left for zener, and the voltage follows input and load"},
	},
	Points: []Point{{Name: "voltage", Reading: "dc voltage", Instrument: "dmm",
		At: "across zener", Conductance: "meter"}},
	Findings: []Finding{
		{"unregulated", "no current is left for the Zener diode, so the voltage sinks; make series smaller, or draw less"},
	},
	Sketch: `
 input ──[series]──┬── out
                [zener]
   0 V ────────────┴──
`,
	Fragment: `
bias:
  kind: shunt-zener
  settings: {input: 12 V, load_current: 2 mA}
  parts:
    series: {ref: R1, value: 330 Ω, family: metal-film-100, tolerance: 1 %}
    zener:  {ref: D1, value: 9.1 V, family: zener, tolerance: 5 %}
`,
	Limits: "Straight line above the knee: near the knee, at less than about 1 mA, a real diode's voltage falls sooner. Steady state.",
	Source: "definition: Kirchhoff's laws for a voltage with a resistance",
}
