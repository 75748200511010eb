package cli

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/spread"
)

// row holds figures of one output that are to be read side by side.
type row struct {
	symbol   string
	scale    float64
	decimals int
}

// newRow chooses one prefix and one number of decimals for an output: the
// standard uncertainty shows two digits, whatever is the output's size; with
// none, the largest figure shows five.
func newRow(symbol string, uncertainty float64, figures ...float64) row {
	unit, ok := quantity.Find(symbol)
	if !ok {
		unit = quantity.One
	}
	largest := 0.0
	for _, x := range figures {
		if a := math.Abs(x); a > largest && !math.IsInf(a, 0) {
			largest = a
		}
	}
	r := row{symbol: symbol, scale: 1}
	r.scale, r.symbol = quantity.Prefixed(largest, unit)
	if unit == quantity.One {
		r.symbol = ""
	}
	digit := uncertainty / r.scale / 10
	if !(digit > 1e-9*largest/r.scale) {
		digit = largest / r.scale / 1e4
	}
	if digit > 0 {
		r.decimals = min(max(int(math.Ceil(-math.Log10(digit)-1e-9)), 0), 6)
	}
	return r
}

// text writes one figure of the row, without its unit.
func (r row) text(x spread.Figure) string {
	v := float64(x)
	switch {
	case math.IsNaN(v):
		return "–"
	case math.IsInf(v, 1):
		return "∞"
	case math.IsInf(v, -1):
		return "-∞"
	}
	text := fmt.Sprintf("%.*f", r.decimals, v/r.scale)
	if strings.Trim(text, "-0.") == "" {
		text = strings.TrimPrefix(text, "-") // no negative zero
	}
	return text
}

// tolerance writes how far a figure may be off: "±5 %", "±3 mV uniform".
func tolerance(s part.Scatter, u quantity.Unit) string {
	text := "±" + quantity.Format(s.Tolerance, quantity.Percent, 0)
	if s.Absolute {
		text = "±" + quantity.Format(s.Tolerance, u, 0)
	}
	if s.Shape != "" && s.Shape != part.Normal {
		text += " " + string(s.Shape)
	}
	return text
}

// perUnit writes a coefficient and how far it scatters: "-120 ± 60 ppm/K".
func perUnit(s spreadText, scale float64, unit string) string {
	if s.Value == 0 && s.Spread == 0 {
		return "none"
	}
	return fmt.Sprintf("%.4g ± %.4g %s", s.Value*scale, s.Spread*scale, unit)
}
