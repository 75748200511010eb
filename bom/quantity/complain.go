package quantity

import "strings"

func (k kind) expected() string { return k.noun + ", such as " + k.example }

func (k kind) refuse(text, reason string) *Error {
	return &Error{Text: text, Expected: k.expected(), Reason: reason}
}

// bare refuses a number that has no unit and shows how it could have one.
func (k kind) bare(text, number string) *Error {
	e := k.refuse(text, "a number without a unit")
	switch k.unit {
	case Ohm:
		if !strings.ContainsAny(number, ".eE-") {
			e.Expected = k.noun + ": " + number + "R or " + number + " Ω"
			return e
		}
		e.Expected = k.noun + ": " + number + " Ω"
	case Farad:
		e.Expected = k.noun + ": " + number + " pF, " + number + " nF or another unit"
	case Henry:
		e.Expected = k.noun + ": " + number + " µH, " + number + " mH or another unit"
	default:
		e.Expected = k.noun + ": " + number + " " + exampleUnit(k.example)
	}
	return e
}

// exampleUnit is the unit that an example has.
func exampleUnit(example string) string {
	_, unit, _ := strings.Cut(example, " ")
	return unit
}

// wrongUnit says what the unit found is good for.
func wrongUnit(unit string, m measure) string {
	noun := ""
	for _, k := range table {
		same := k.unit.Dimension == m.dimension && sortOf(k.unit) == m.sort
		if same && (noun == "" || k.unit.Symbol == unit) {
			noun = k.noun
		}
	}
	if noun != "" {
		return "wrong unit: " + unit + " is for " + noun
	}
	return "wrong unit: " + unit + " is " + m.dimension.String()
}

// unknownUnit explains text behind a number that is no unit.
func (k kind) unknownUnit(text, unit string) string {
	if noun := codeNoun(text); noun != "" {
		return "wrong unit: " + text + " is the letter code of " + noun
	}
	if c := unit[0]; c >= '0' && c <= '9' {
		return "a gap in a number"
	}
	if k.unit == Celsius && unit == "C" {
		return "unknown unit C; a degree sign is missing (°C or degC)"
	}
	return "unknown unit " + unit
}

// noNumber explains text that does not begin with a number.
func (k kind) noNumber(text string) string {
	if noun := codeNoun(text); noun != "" {
		return "wrong unit: " + text + " is the letter code of " + noun
	}
	if _, ok := readSymbol(text); ok && text != "1" {
		return "a unit without a number"
	}
	return "not a number with a unit"
}
