package formula

import (
	"math"

	"batchwright/bom/quantity"
)

// Constant is a name with a fixed value, known in every expression unless the
// scope has the same name for something else.
type Constant struct {
	Name      string
	Value     float64 // SI
	Dimension quantity.Dimension
	Summary   string
}

// constants is never written after start.
var constants = listConstants()

// Constants returns pi, the physical constants and the unit words of package
// quantity, each worth one of its unit.
func Constants() []Constant { return append([]Constant(nil), constants...) }

// ConstantNamed finds a constant.
func ConstantNamed(name string) (Constant, bool) {
	for _, c := range constants {
		if c.Name == name {
			return c, true
		}
	}
	return Constant{}, false
}

// The Boltzmann constant and the elementary charge are exact since the 2019
// revision of the SI (BIPM, The International System of Units, 9th edition,
// table 1); 0 °C is 273.15 K by definition (same, 2.3.1).
func listConstants() []Constant {
	list := []Constant{
		{"pi", math.Pi, quantity.Dimension{}, "circumference over diameter"},
		{"boltzmann", 1.380649e-23, quantity.Watt.Dimension.Mul(quantity.Second.Dimension).Div(quantity.Kelvin.Dimension), "Boltzmann constant, J/K"},
		{"charge", 1.602176634e-19, quantity.Ampere.Dimension.Mul(quantity.Second.Dimension), "elementary charge, C"},
		{"zero_celsius", 273.15, quantity.Kelvin.Dimension, "0 °C in kelvin"},
	}
	for _, u := range quantity.Words() {
		list = append(list, Constant{u.Word, u.Scale, u.Dimension, "1 " + u.Symbol})
	}
	return list
}
