package cli

import (
	"strings"

	"batchwright/bom/quantity"
	"batchwright/tolerance/geometry"
	"batchwright/tolerance/stage"
)

// shapeText is a shape as `kinds NAME --json` prints it.
type shapeText struct {
	named
	Unit       string          `json:"unit"`
	Dimensions []dimensionText `json:"dimensions"`
	Equations  []string        `json:"equations"`
	Off        float64         `json:"off"` // how far the formula may be, a fraction
	Limits     string          `json:"limits"`
	Source     string          `json:"source"`
}

type dimensionText struct {
	Dimension string `json:"dimension"`
	Unit      string `json:"unit"`
	Optional  bool   `json:"optional"`
	Default   string `json:"default"`
	Summary   string `json:"summary"`
}

// shapeList names every shape.
func shapeList() []named {
	list := []named{}
	for _, s := range geometry.Shapes() {
		list = append(list, named{s.Name, s.Summary})
	}
	return list
}

// shape prints all about a shape, or says that there is neither a kind nor a
// shape of that name.
func (p *program) shape(name string, asJSON bool) error {
	s, ok := geometry.Find(name)
	if !ok {
		known := stage.Names()
		for _, s := range shapeList() {
			known = append(known, s.Name)
		}
		return unknownWord("kind", name, known)
	}
	t := describeShape(s)
	if asJSON {
		return p.json(t)
	}
	p.showShape(s, t)
	return nil
}

// describeShape says of a shape what it says of itself.
func describeShape(s *geometry.Shape) shapeText {
	t := shapeText{
		named: named{s.Name, s.Summary}, Unit: s.Unit.Symbol, Dimensions: []dimensionText{},
		Equations: strings.Split(strings.Trim(s.Equations, "\n"), "\n"),
		Off:       s.Model.Tolerance, Limits: s.Limits, Source: s.Source,
	}
	for _, d := range s.Dimensions {
		text := d.Default
		if d.Default != "" && d.Scatter.Tolerance != 0 {
			text += " " + tolerance(d.Scatter, d.Unit)
		}
		t.Dimensions = append(t.Dimensions, dimensionText{d.Name, d.Unit.Symbol, d.Optional, text, d.Summary})
	}
	return t
}

// showShapeList prints the shapes below the kinds.
func (p *program) showShapeList() {
	var rows [][]string
	for _, s := range shapeList() {
		rows = append(rows, []string{s.Name, s.Summary})
	}
	p.section("shapes that settings and coils can be given by", []string{"shape", "what it is"}, rows)
}

// showShape prints all about a shape.
func (p *program) showShape(s *geometry.Shape, t shapeText) {
	p.line("%s: %s", t.Name, t.Summary)
	var rows [][]string
	for _, d := range t.Dimensions {
		value := d.Default
		switch {
		case value == "" && d.Optional:
			value = "may be left out"
		case value == "":
			value = "must be given"
		}
		rows = append(rows, []string{d.Dimension, unitText(d.Unit), value, d.Summary})
	}
	p.section("dimensions", []string{"dimension", "unit", "default", "what it is"}, rows)
	p.paragraph("equations", strings.Join(t.Equations, "\n"))
	p.paragraph("the formula may be off by", "±"+quantity.Format(t.Off, quantity.Percent, 0)+
		", alike on every unit; tolerance: beside the shape says otherwise")
	p.paragraph("limits", t.Limits)
	p.paragraph("source", t.Source)
}
