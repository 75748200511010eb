package build

import (
	"math"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

var percent = quantity.Percent

// readConditions reads every condition. What the first leaves unsaid of the
// four standard variables is a bench at 23 °C, warmed up, at 50 % humidity,
// new; what a later one leaves unsaid is as in the first.
func (r *reader) readConditions(n *document.Node) {
	b := r.build
	b.Variables = []Variable{
		{Temperature, quantity.Celsius}, {Warmup, quantity.One},
		{Humidity, quantity.Percent}, {Age, quantity.Hour},
	}
	base := []float64{23, 1, 0.5, 0}
	if n == nil {
		b.Conditions = []Condition{{"bench", base}} // so that reading can go on
		return
	}
	if n.Kind != document.Mapping || len(n.Pairs) == 0 {
		r.Add(n, "conditions", "a mapping of names to conditions")
		b.Conditions = []Condition{{"bench", base}}
		return
	}
	for i, p := range n.Pairs {
		if i == 0 {
			base = r.readReference(p.Value, base)
			b.Conditions = append(b.Conditions, Condition{p.Key.Value, base})
			continue
		}
		values := append([]float64(nil), base...)
		r.readValues(p.Value, values)
		b.Conditions = append(b.Conditions, Condition{p.Key.Value, values})
	}
}

// readReference reads the first condition, which declares the user's own
// variables and their units.
func (r *reader) readReference(n *document.Node, base []float64) []float64 {
	if n.Kind != document.Mapping {
		r.Add(n, "condition", "a mapping of variables to values")
		return base
	}
	for _, p := range n.Pairs {
		if r.build.variable(p.Key.Value) >= 0 {
			continue
		}
		if !identifier.MatchString(p.Key.Value) {
			r.Add(p.Key, "variable's name", "a letter, then letters, digits and _")
			continue
		}
		q, err := anyQuantity(p.Value)
		if err != nil {
			r.Add(p.Value, p.Key.Value, "a value with a unit")
			continue
		}
		r.build.Variables = append(r.build.Variables, Variable{p.Key.Value, q.Unit})
		base = append(base, q.Value)
	}
	r.readValues(n, base)
	return base
}

// readValues reads the variables of one condition over values.
func (r *reader) readValues(n *document.Node, values []float64) {
	var known []string
	for _, v := range r.build.Variables {
		known = append(known, v.Name)
	}
	if n.Kind == document.Null || !r.Keys(n, known...) && n.Kind != document.Mapping {
		return
	}
	for _, p := range n.Pairs {
		i := r.build.variable(p.Key.Value)
		if i < 0 {
			continue
		}
		if q, ok := r.Quantity(p.Value, r.build.Variables[i].Unit); ok {
			values[i] = q.Value
			r.checkVariable(p.Value, r.build.Variables[i].Name, q.Value)
		}
	}
}

// checkVariable refuses surroundings in which no part is specified.
func (r *reader) checkVariable(n *document.Node, name string, v float64) {
	limits := map[string]struct {
		low, high float64
		expected  string
	}{
		Temperature: {-100, 300, "a temperature from -100 °C to 300 °C"},
		Warmup:      {0, 1, "a share of the warm-up from 0 (just switched on) to 1 (settled)"},
		Humidity:    {0, 1, "a relative humidity from 0 % to 100 %"},
		Age:         {0, math.Inf(1), "an age of 0 h or more"},
	}
	if l, ok := limits[name]; ok && !(v >= l.low && v <= l.high) {
		r.Add(n, name, l.expected)
	}
}

// anyUnits are the units a figure of the user's own may have, tried in order.
var anyUnits = []quantity.Unit{
	quantity.One, quantity.Percent, quantity.Volt, quantity.Ampere, quantity.Hertz, quantity.Celsius,
	quantity.Kelvin, quantity.Second, quantity.Hour, quantity.Metre, quantity.Watt, quantity.Farad,
	quantity.Henry, quantity.Ohm, quantity.Siemens, quantity.PPMPerKelvin, quantity.VoltPerKelvin,
	quantity.VoltPerSecond, quantity.Decibel, quantity.Cent,
}

// anyQuantity reads a figure whose unit the text itself decides.
func anyQuantity(n *document.Node) (quantity.Quantity, error) {
	var first error
	if n.Kind != document.Scalar {
		return quantity.Quantity{}, &quantity.Error{Text: n.Value, Expected: "a value with a unit"}
	}
	for _, u := range anyUnits {
		q, err := quantity.Parse(n.Value, u)
		if err == nil {
			return q, nil
		}
		if first == nil {
			first = err
		}
	}
	return quantity.Quantity{}, first
}
