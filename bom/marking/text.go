package marking

import (
	"strings"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// Text is what someone holding the part looks for on it: the bands of a
// resistor, the digits of a capacitor or coil with the tolerance letter, the
// voltage of a regulator, the type of what has no value. What a maker does
// print varies: only resistors and capacitors have a standard.
func Text(p part.Part) string {
	if len(p.Parameters) == 0 {
		return p.Family
	}
	switch p.Type {
	case part.Resistor:
		v := figure(p, 0)
		return joined(Code(p.Type, v.Value, tolerance(v)), bandText(v)) + unlettered(v, toleranceLetter(tolerance(v)))
	case part.Capacitor:
		v := figure(p, 0)
		digits, letter := Digits(v.Value), capacitorLetter(v.Value, tolerance(v))
		if digits != "" {
			digits += letter
		}
		return joined(digits, Code(p.Type, v.Value, tolerance(v))) + unlettered(v, letter)
	case part.Coil:
		v := figure(p, 0)
		digits, letter := CoilDigits(v.Value), toleranceLetter(tolerance(v))
		if digits == "" {
			letter = "" // and so the tolerance is spelled out
		}
		return joined(digits+letter, plainText(v)) + unlettered(v, letter)
	case part.TrimmerResistor:
		v := figure(p, 1)
		return joined(digitCode(v.Value, 0, 2), plainText(v))
	case part.TrimmerCapacitor:
		return quantity.FormatRange(figure(p, 0).Value, figure(p, 1).Value, quantity.Farad, 0)
	case part.Zener, part.Regulator, part.Crystal:
		return joined(p.Family, plainText(figure(p, 0)))
	}
	return p.Family
}

// figure is a part's parameter at a place, or one of no value.
func figure(p part.Part, i int) part.Parameter {
	if i >= len(p.Parameters) {
		return part.Parameter{}
	}
	return p.Parameters[i]
}

// tolerance is a parameter's as a fraction.
func tolerance(p part.Parameter) float64 {
	if p.Absolute && p.Value != 0 {
		return p.Tolerance / p.Value
	}
	return p.Tolerance
}

// unlettered spells a tolerance out that has no letter.
func unlettered(p part.Parameter, letter string) string {
	t := tolerance(p)
	if letter != "" || !(t > 0) {
		return ""
	}
	return " " + quantity.Format(t, quantity.Percent, 0)
}

func plainText(p part.Parameter) string {
	if p.Value == 0 {
		return ""
	}
	return quantity.Format(p.Value, p.Unit, 0)
}

func bandText(v part.Parameter) string {
	bands, ok := Bands(v.Value, tolerance(v), 0)
	if !ok {
		return ""
	}
	return strings.Join(bands, " ")
}

// joined writes two marks of one part, either of which may be missing.
func joined(first, second string) string {
	switch {
	case first == "":
		return second
	case second == "" || second == first:
		return first
	}
	return first + " (" + second + ")"
}
