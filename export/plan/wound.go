package plan

import (
	"strings"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
)

// winding tells whoever winds a coil how: "wound: turns 150, diameter 30 mm
// ±0.2 %, length 60 mm".
func winding(g *build.Geometry) string {
	var list []string
	for _, m := range g.Measures {
		text := m.Name + " " + part.Text(m.Value, m.Unit)
		switch {
		case m.Absolute:
			text += " ±" + part.Text(m.Tolerance, m.Unit)
		case m.Tolerance > 0:
			text += " ±" + quantity.Format(m.Tolerance, quantity.Percent, 0)
		}
		list = append(list, text)
	}
	return "wound: " + strings.Join(list, ", ")
}
