package cli

import (
	"fmt"
	"strings"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/stage"
)

// showList prints names and what they are.
func (p *program) showList(list []named) {
	rows := make([][]string, len(list))
	for i, n := range list {
		rows[i] = []string{n.Name, n.Summary}
	}
	p.table("", []string{"kind", "what it is"}, rows)
}

// showKind prints all about a kind.
func (p *program) showKind(k *stage.Kind) {
	t := describeKind(k)
	p.line("%s: %s", k.Name, k.Summary)
	p.verbatim("where the parts sit", t.Sketch)
	var rows [][]string
	for _, r := range t.Roles {
		rows = append(rows, []string{r.Role, r.Type + optional(r.Optional), r.Summary})
	}
	p.section("parts", []string{"role", "type", "what it is"}, rows)
	rows = nil
	for _, i := range t.Inputs {
		rows = append(rows, []string{i.Input, i.Summary + optional(i.Optional)})
	}
	p.section("inputs", []string{"input", "what it is"}, rows)
	rows = nil
	for _, s := range t.Settings {
		value := s.Default
		if value == "" {
			value = "must be given"
		}
		rows = append(rows, []string{s.Setting, unitText(s.Unit), value, s.Summary})
	}
	p.section("settings", []string{"setting", "unit", "default", "what it is"}, rows)
	rows = nil
	for _, o := range t.Outputs {
		rows = append(rows, []string{o.Output, unitText(o.Unit), o.Summary})
	}
	p.section("outputs", []string{"output", "unit", "what it is"}, rows)
	rows = nil
	for _, q := range t.Points {
		rows = append(rows, []string{q.Point, q.Reading, q.Instrument, q.At, q.Loading})
	}
	p.section("test points", []string{"point", "reading", "with", "where", "how it loads"}, rows)
	rows = nil
	for _, f := range t.Findings {
		rows = append(rows, []string{f.Finding, f.Text})
	}
	p.section("reported where it is 1", []string{"equation", "what happens; what to do"}, rows)
	p.paragraph("equations", strings.Join(t.Equations, "\n"))
	p.verbatim("in a build file", t.Fragment)
	p.paragraph("limits", k.Limits)
	p.paragraph("source", k.Source)
}

func optional(is bool) string {
	if is {
		return ", optional"
	}
	return ""
}

// unitText is a unit's symbol, nothing for a plain number.
func unitText(symbol string) string {
	if symbol == quantity.One.Symbol {
		return ""
	}
	return symbol
}

// showFamilies prints the list of families.
func (p *program) showFamilies(list []familyEntry) {
	rows := make([][]string, len(list))
	for i, f := range list {
		rows[i] = []string{f.Name, f.Part, f.Title}
	}
	p.table("", []string{"family", "part", "title"}, rows)
}

// showFamily prints every figure of a family and where it comes from.
func (p *program) showFamily(t familyText, f *part.Family) {
	p.line("%s: %s (%s)", t.Name, t.Title, t.Part)
	var rows [][]string
	for _, g := range t.Grades {
		rows = append(rows, []string{"±" + quantity.Format(g.Tolerance, quantity.Percent, 0), g.Series})
	}
	p.section("grades sold", []string{"tolerance", "series"}, rows)
	if t.Values != nil {
		p.paragraph("values sold", quantity.Format(t.Values.Low, f.Type.Unit(), 0)+" to "+quantity.Format(t.Values.High, f.Type.Unit(), 0))
	}
	rows = nil
	for _, q := range t.Figures {
		rows = append(rows, figureRow(q))
	}
	p.section("figures", []string{"figure", "value", "tolerance", "temperature", "humidity", "ageing", "lot correlation"}, rows)
	p.laws(t.Figures)
	if t.Voltage != nil {
		p.paragraph("rated voltage", quantity.Format(*t.Voltage, quantity.Volt, 0))
	}
	if t.Temperatures != nil {
		p.paragraph("rated temperatures", fmt.Sprintf("%g °C to %g °C", t.Temperatures.Low, t.Temperatures.High))
	}
	p.paragraph("size", t.Size)
	p.paragraph("source", t.Source)
	p.paragraph("note", t.Note)
	p.line("\nFigures are typical of their class, not anyone's guarantee.")
}

// figureRow is a figure of a family in words.
func figureRow(q figureText) []string {
	unit, _ := quantity.Find(q.Unit)
	value, off := "as bought", "by grade"
	if q.Value != nil {
		value = quantity.Format(*q.Value, unit, 0)
	}
	if q.Tolerance != nil {
		off = tolerance(part.Scatter{Tolerance: *q.Tolerance, Absolute: q.Absolute}, unit)
	}
	if q.Shape != string(part.Normal) {
		off += " " + q.Shape
	}
	temperature := perUnit(q.Temperature, 1e6, "ppm/K")
	if len(q.Law) > 0 {
		temperature = "by law, below"
	}
	ageing := perUnit(q.Ageing.spreadText, 100, "%")
	if ageing != "none" {
		ageing += " per " + q.Ageing.Per
	}
	return []string{
		q.Figure, value, off, temperature, perUnit(q.Humidity, 1e4, "ppm/% RH"), ageing,
		fmt.Sprintf("value %g, temperature %g", q.Correlation.Value, q.Correlation.Temperature),
	}
}

// laws prints the temperature laws that are no slope, and the bias laws.
func (p *program) laws(figures []figureText) {
	for _, q := range figures {
		p.section("change of "+q.Figure+" with temperature", []string{"at", "lowest", "highest"},
			lawRows(q.Law, func(celsius float64) string { return fmt.Sprintf("%g °C", celsius) }))
		p.section("change of "+q.Figure+" with steady voltage", []string{"of rated", "lowest", "highest"},
			lawRows(q.Bias, func(share float64) string { return fmt.Sprintf("%g %%", 100*share) }))
	}
}

// lawRows are the points of a law.
func lawRows(law [][3]float64, at func(float64) string) [][]string {
	var rows [][]string
	for _, l := range law {
		rows = append(rows, []string{at(l[0]), fmt.Sprintf("%+.4g %%", 100*l[1]), fmt.Sprintf("%+.4g %%", 100*l[2])})
	}
	return rows
}
