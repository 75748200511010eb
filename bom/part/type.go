package part

import "batchwright/bom/quantity"

// figure is one row of what a part of a type has.
type figure struct {
	name string
	unit quantity.Unit
	need bool // a family that sells no value must give it
}

// anatomy is what a type's parts have: their figures, and whether a price list
// sells them by value.
type anatomy struct {
	part    Type
	valued  bool // a family must say the range of values it comes in
	figures []figure
}

// anatomies lists the types in the order in which help prints them. The first
// figure is the main one, but for trimmers, whose high end is.
var anatomies = []anatomy{
	{Resistor, true, []figure{{"value", quantity.Ohm, false}}},
	{Capacitor, true, []figure{{"value", quantity.Farad, false}}},
	{Coil, true, []figure{{"value", quantity.Henry, false}}},
	{TrimmerResistor, true, []figure{{"low", quantity.Ohm, false}, {"high", quantity.Ohm, false}}},
	{TrimmerCapacitor, true, []figure{{"low", quantity.Farad, false}, {"high", quantity.Farad, false}}},
	{Transistor, false, []figure{
		{"beta", quantity.One, true},
		{"vbe", quantity.Volt, true}, // at 1 mA and 25 °C
		{"vbe_slope", quantity.VoltPerKelvin, true},
	}},
	{Diode, false, []figure{
		{"drop", quantity.Volt, true}, // at 1 mA and 25 °C
		{"drop_slope", quantity.VoltPerKelvin, true},
		{"ideality", quantity.One, true},
	}},
	{OpAmp, false, []figure{
		{"gbw", quantity.Hertz, true},
		{"slew", quantity.VoltPerSecond, true},
		{"offset", quantity.Volt, true},
		{"headroom", quantity.Volt, true},
	}},
	{Regulator, false, []figure{
		{"output", quantity.Volt, false},
		{"reference", quantity.Volt, false},
		{"adjust_current", quantity.Ampere, false},
		{"dropout", quantity.Volt, false},
		{"output_slope", quantity.VoltPerKelvin, false},
	}},
	{Zener, true, []figure{
		{"voltage", quantity.Volt, false},
		{"resistance", quantity.Ohm, false},
		{"voltage_slope", quantity.VoltPerKelvin, false},
	}},
	{Crystal, true, []figure{
		{"frequency", quantity.Hertz, false},
		{"motional_c", quantity.Farad, true},
		{"shunt_c", quantity.Farad, true},
		{"cubic_a1", quantity.PerKelvin, false}, // about 25 °C
		{"cubic_a2", quantity.PerKelvin2, false},
		{"cubic_a3", quantity.PerKelvin3, false},
	}},
}

// anatomyOf finds a type's row; ok is false for a name that is no type.
func anatomyOf(t Type) (a anatomy, ok bool) {
	for _, s := range anatomies {
		if s.part == t {
			return s, true
		}
	}
	return anatomy{}, false
}

// Types lists every type, in the order in which help prints them.
func Types() []Type {
	types := make([]Type, len(anatomies))
	for i, s := range anatomies {
		types[i] = s.part
	}
	return types
}

// Parameters lists the figures that a part of this type has, with their units
// and no values: "value" alone for most, "low" and "high" for a trimmer. A
// regulator's family gives either its output or its reference.
func (t Type) Parameters() []Parameter {
	s, _ := anatomyOf(t)
	parameters := make([]Parameter, len(s.figures))
	for i, g := range s.figures {
		parameters[i] = Parameter{Name: g.name, Unit: g.unit}
	}
	return parameters
}

// Unit is that of the figure by which the type is bought, One where there is
// none to a type of that name.
func (t Type) Unit() quantity.Unit {
	s, ok := anatomyOf(t)
	if !ok {
		return quantity.One
	}
	return s.figures[0].unit
}

// Trimmer reports whether parts of the type are turned, and so have two ends.
func (t Type) Trimmer() bool { return t == TrimmerResistor || t == TrimmerCapacitor }

// sellsValues reports whether parts of the type can be bought by value.
func (t Type) sellsValues() bool {
	s, _ := anatomyOf(t)
	return s.valued || t == Regulator
}

// Parameter finds a figure of the part by name, nil if it has none such.
func (p *Part) Parameter(name string) *Parameter {
	for i := range p.Parameters {
		if p.Parameters[i].Name == name {
			return &p.Parameters[i]
		}
	}
	return nil
}

// Main is the figure by which the part is bought: the value, a trimmer's high
// end, a crystal's frequency; of a transistor, diode or operational amplifier
// the first, by which nobody buys it. The zero Parameter if there is none.
func (p *Part) Main() Parameter {
	if len(p.Parameters) == 0 {
		return Parameter{}
	}
	if p.Type.Trimmer() {
		return p.Parameters[len(p.Parameters)-1]
	}
	return p.Parameters[0]
}

// soldByValue reports whether the part was bought by its main figure. An
// adjustable regulator, whose first figure is a reference, was not.
func (p *Part) soldByValue() bool {
	a, _ := anatomyOf(p.Type)
	return p.Type.sellsValues() && len(p.Parameters) > 0 && p.Parameters[0].Name == a.figures[0].name
}

// Grade is the tolerance by which the part is bought, a fraction: that of the
// main figure, 0 for parts that are not bought by a value.
func (p *Part) Grade() float64 {
	if !p.soldByValue() {
		return 0
	}
	m := p.Main()
	if m.Absolute && m.Value != 0 {
		return m.Tolerance / max(m.Value, -m.Value)
	}
	return m.Tolerance
}
