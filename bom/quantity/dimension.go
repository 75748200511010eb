// Package quantity turns the text of a physical quantity into a number with a
// unit and back. A number is read as decimal text with the power of ten of its
// prefix, so "220 pF" is the very float64 that 220e-12 is.
package quantity

import (
	"math"
	"strconv"
	"strings"
)

// Dimension holds the exponents of kilogram, metre, second, ampere and kelvin
// in twelfths, so that square, cube and fourth roots stay exact.
type Dimension [5]int16

const twelfths = 12

// Mul is the dimension of a product.
func (d Dimension) Mul(e Dimension) Dimension {
	for i := range d {
		d[i] += e[i]
	}
	return d
}

// Div is the dimension of a quotient.
func (d Dimension) Div(e Dimension) Dimension {
	for i := range d {
		d[i] -= e[i]
	}
	return d
}

// Pow raises to the power num/den. It reports false where an exponent would be
// no twelfth, or none that fits.
func (d Dimension) Pow(num, den int) (Dimension, bool) {
	if den == 0 || num > math.MaxInt32 || num < -math.MaxInt32 {
		return Dimension{}, false
	}
	for i, e := range d {
		p := int64(e) * int64(num)
		if p%int64(den) != 0 {
			return Dimension{}, false
		}
		p /= int64(den)
		if p > math.MaxInt16 || p < math.MinInt16 {
			return Dimension{}, false
		}
		d[i] = int16(p)
	}
	return d, true
}

// String is the symbol of a unit of that dimension, "1" for a plain number,
// and a product of base units where no unit has a name: "kg·m²/s³".
func (d Dimension) String() string {
	if d == (Dimension{}) {
		return "1"
	}
	for _, k := range table {
		if k.names && k.unit.Dimension == d {
			return k.unit.Symbol
		}
	}
	var above, below []string
	for i, symbol := range [...]string{"kg", "m", "s", "A", "K"} {
		switch {
		case d[i] > 0:
			above = append(above, symbol+superscript(int(d[i])))
		case d[i] < 0:
			below = append(below, symbol+superscript(-int(d[i])))
		}
	}
	text := strings.Join(above, "·")
	if text == "" {
		text = "1"
	}
	switch len(below) {
	case 0:
		return text
	case 1:
		return text + "/" + below[0]
	}
	return text + "/(" + strings.Join(below, "·") + ")"
}

// superscript writes a positive exponent given in twelfths: "", "²", "^(1/2)".
func superscript(e int) string {
	if e == twelfths {
		return ""
	}
	if e%twelfths == 0 {
		raised := []rune("⁰¹²³⁴⁵⁶⁷⁸⁹")
		var b strings.Builder
		for _, c := range strconv.Itoa(e / twelfths) {
			b.WriteRune(raised[c-'0'])
		}
		return b.String()
	}
	den := twelfths
	for _, f := range [...]int{2, 2, 3} {
		if e%f == 0 && den%f == 0 {
			e, den = e/f, den/f
		}
	}
	return "^(" + strconv.Itoa(e) + "/" + strconv.Itoa(den) + ")"
}
