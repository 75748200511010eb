// Package part says what a part is: the families it can be placed from, the
// parameters it has, and how each parameter scatters. Scatter is data here (a
// shape by name, a half width, correlations); package scatter gives it meaning.
package part

import (
	"math"
	"slices"

	"batchwright/bom/quantity"
)

// Type is what kind of component a role in a stage asks for.
type Type string

// The types a build file and a family file can name.
const (
	Resistor         Type = "resistor"
	Capacitor        Type = "capacitor"
	Coil             Type = "coil"
	TrimmerResistor  Type = "trimmer-resistor"
	TrimmerCapacitor Type = "trimmer-capacitor"
	Transistor       Type = "transistor"
	Diode            Type = "diode"
	OpAmp            Type = "opamp"
	Regulator        Type = "regulator"
	Zener            Type = "zener"
	Crystal          Type = "crystal"
)

// Shape names the distribution of a standardised deviation z in [-1, 1].
type Shape string

// The shapes; the zero value reads as Normal.
const (
	Normal     Shape = "normal"     // standard deviation 1/3, truncated to ±1
	Uniform    Shape = "uniform"    // rectangular
	Triangular Shape = "triangular" // symmetric
	Bimodal    Shape = "bimodal"    // uniform over 1/2 <= |z| <= 1: the middle was sorted out
)

// Spread is a mean and the half width about it.
type Spread struct{ Value, Spread float64 }

// Clock is what an ageing coefficient is per.
type Clock string

const (
	PerDecade        Clock = "decade" // of hours, from one hour on
	PerThousandHours Clock = "1000 h"
)

// Ageing is a relative change per decade of hours or per 1000 h.
type Ageing struct {
	Spread
	Per Clock
}

// Correlation is that of the Gaussian copula between two pieces of one lot,
// for the value and for the temperature coefficient.
type Correlation struct{ Value, Temperature float64 }

// LawPoint is one point of a temperature law that is no slope: the relative
// change at Celsius lies between Low and High (fractions).
type LawPoint struct{ Celsius, Low, High float64 }

// Scatter is how one parameter varies from piece to piece and with its
// surroundings. Zero is an ideal parameter.
//
//	value = nominal·(1 + Tolerance·z1)·(1 + α·Δ)·(1 + η·ΔH)·(1 + a·g(age))·(1 + b(|U|/rated))
//
// with α = Temperature.Value + Temperature.Spread·z2 and likewise η and a;
// Δ is the part's temperature less 25 °C, b the change by the bias law under
// the steady voltage U. With Absolute the first factor is
// nominal + Tolerance·z1 instead.
type Scatter struct {
	Tolerance   float64 // half width: a fraction of nominal, or in the parameter's unit if Absolute
	Absolute    bool
	Shape       Shape
	Temperature Spread // 1/K
	Humidity    Spread // per unit of relative humidity (1 ppm per % is 1e-4)
	Ageing      Ageing
	Correlation Correlation
	Law         []LawPoint  // replaces Temperature where not empty
	Bias        []BiasPoint // of a capacitor; empty: no voltage changes it
}

// Parameter is one named figure of a part.
type Parameter struct {
	Name  string // "value" for parts that have one; "low" and "high" for trimmers
	Unit  quantity.Unit
	Value float64 // SI
	Scatter
}

// HalfWidth is the tolerance as a figure: so far from Value a piece may be. A
// relative tolerance of nothing is nothing.
func (p *Parameter) HalfWidth() float64 {
	if p.Absolute {
		return p.Tolerance
	}
	return math.Abs(p.Value) * p.Tolerance
}

// Part is a piece placed in a stage: every figure resolved, family and
// overrides merged.
type Part struct {
	Ref        string
	Type       Type
	Family     string // "" is ideal but for what is written on it
	Parameters []Parameter
	Rated      float64 // voltage, V; 0 unsaid
	LotsMixed  bool    // pieces deliberately drawn from different lots
}

// Named is the same part under another reference, with parameters of its own.
func (p Part) Named(ref string) Part {
	p.Ref = ref
	p.Parameters = slices.Clone(p.Parameters)
	return p
}
