package stage

import "batchwright/bom/quantity"

// A kind that warms itself has an equation of the name Heat, W, and the setting
// ThermalResistance; while that is not zero, its parts are Heat·ThermalResistance
// above ambient besides `rise`, at the temperature at which both agree. The
// output `warming` hands that on: a neighbour's `rise: plus.warming`.
const (
	Heat              = "heat"
	ThermalResistance = "thermal_resistance"
)

var thermalResistance = Setting{
	Name: ThermalResistance, Default: "0 K/W", Unit: quantity.Unit{
		Symbol: "K/W", Scale: 1, Dimension: quantity.Kelvin.Dimension.Div(quantity.Watt.Dimension),
	},
	Summary: "how far each watt of its own heat warms the stage above ambient, once settled",
}

const warms = `
warming = heat*thermal_resistance
`

var warmingOutput = Output{"warming", quantity.Kelvin, "how far its own heat takes the stage above ambient, once settled"}
