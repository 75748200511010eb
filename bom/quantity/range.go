package quantity

import "strings"

// ParseRange reads "5..30 pF" or "1 nF..10 uF": the first number borrows the
// unit of the second where it has none of its own. The ends may be equal, and
// may not run backwards. The error is always an *Error.
func ParseRange(text string, want Unit) (low, high Quantity, err error) {
	k := describe(want)
	refuse := func(reason string) (Quantity, Quantity, error) {
		e := k.refuse(text, reason)
		e.Expected = "a range of " + strings.TrimPrefix(strings.TrimPrefix(k.noun, "a "), "an ") + ", such as " + k.rangeExample()
		return Quantity{}, Quantity{}, e
	}
	if reason := unreadable(strings.TrimSpace(text)); reason != "" {
		return refuse(reason)
	}
	first, second, found := strings.Cut(text, "..")
	if !found {
		return refuse("no range: two dots are missing")
	}
	if strings.HasPrefix(second, ".") || strings.Contains(second, "..") {
		return refuse("too many dots")
	}
	if high, err = Parse(second, want); err != nil {
		return Quantity{}, Quantity{}, err
	}
	first, second = strings.TrimSpace(first), strings.TrimSpace(second)
	number, unit, ok := splitNumber(first)
	if _, borrowed, _ := splitNumber(second); ok && unit == "" && borrowed != "" && !isCode(second, want) {
		first = number + " " + borrowed
	}
	if low, err = Parse(first, want); err != nil {
		return Quantity{}, Quantity{}, err
	}
	if low.Value > high.Value {
		return refuse("the range runs backwards")
	}
	return low, high, nil
}

func isCode(text string, want Unit) bool {
	_, ok := readCode(text, want)
	_, isUnit := readSymbol(strings.TrimLeft(text, "0123456789."))
	return ok && !isUnit
}

// rangeExample makes a range of the unit's example: "4.7..10 kΩ" would need
// thought for each, so the example is from zero.
func (k kind) rangeExample() string { return "0.." + k.example }
