package marking

import (
	"testing"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

func TestText(t *testing.T) {
	one := func(kind part.Type, u quantity.Unit, value, tolerance float64) part.Part {
		return part.Part{Type: kind, Family: "plain-part", Parameters: []part.Parameter{{Name: "value", Unit: u, Value: value, Scatter: part.Scatter{Tolerance: tolerance}}}}
	}
	trimmer := func(kind part.Type, u quantity.Unit, low, high float64) part.Part {
		return part.Part{Type: kind, Parameters: []part.Parameter{{Name: "low", Unit: u, Value: low}, {Name: "high", Unit: u, Value: high}}}
	}
	absolute := one(part.Capacitor, quantity.Farad, 4.7e-12, 0.25e-12)
	absolute.Parameters[0].Absolute = true
	for _, c := range []struct {
		reason string
		part   part.Part
		want   string
	}{
		{"a resistor of 5 %", one(part.Resistor, quantity.Ohm, 4700, 0.05), "4K7J (yellow violet red gold)"},
		{"a resistor of 1 %", one(part.Resistor, quantity.Ohm, 4700, 0.01), "4K7F (yellow violet black brown brown)"},
		{"a resistor of no colour", one(part.Resistor, quantity.Ohm, 4700, 0.025), "4K7 2.5 %"},
		{"a capacitor", one(part.Capacitor, quantity.Farad, 220e-12, 0.05), "221J (220pJ)"},
		{"a grade without a letter", one(part.Capacitor, quantity.Farad, 220e-12, 0.025), "221 (220p) 2.5 %"},
		{"three figures", one(part.Capacitor, quantity.Farad, 249e-12, 0.01), "249pF"},
		{"an absolute tolerance", absolute, "4R7C (4p7C)"},
		{"a coil", one(part.Coil, quantity.Henry, 1.8e-3, 0.05), "182J (1.8 mH)"},
		{"a coil of three figures", one(part.Coil, quantity.Henry, 1.82e-3, 0.05), "1.82 mH 5 %"},
		{"a trimmer resistor", trimmer(part.TrimmerResistor, quantity.Ohm, 0, 10e3), "103 (10 kΩ)"},
		{"a trimmer capacitor", trimmer(part.TrimmerCapacitor, quantity.Farad, 4e-12, 34e-12), "4..34 pF"},
		{"a zener", one(part.Zener, quantity.Volt, 5.1, 0.05), "plain-part (5.1 V)"},
		{"a transistor", one(part.Transistor, quantity.One, 200, 0.5), "plain-part"},
		{"nothing known", part.Part{Type: part.Coil}, ""},
		{"a resistor of no value", part.Part{Type: part.Resistor}, ""},
	} {
		if got := Text(c.part); got != c.want {
			t.Errorf("%s: %q, want %q", c.reason, got, c.want)
		}
	}
}
