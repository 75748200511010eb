package part

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

// familyKeys are what an entry of a family file may say.
var familyKeys = append([]string{
	"part", "title", "tolerances", "values", "series", "parameters",
	"voltage", "temperatures", "size", "source", "note", "bias_law",
}, ScatterKeys[1:]...) // the grades bring the tolerance

// seriesNames are the preferred series of IEC 60063.
var seriesNames = []string{"E3", "E6", "E12", "E24", "E48", "E96", "E192"}

// reader reads one entry into a family.
type reader struct {
	family *Family
	node   *document.Node
	faults *document.Faults
	failed bool
}

// read reads every key, then checks that the family is whole. It reports
// whether the family can be used.
func (r *reader) read() bool {
	r.readTexts()
	r.readGrades()
	r.readValues()
	ReadScatter(r.faults, r.node, r.family.Type.Unit(), &r.family.Scatter)
	r.readBias()
	r.readParameters()
	r.readRating()
	r.checkWhole()
	return !r.failed
}

// complain records a fault that makes the family unusable.
func (r *reader) complain(n *document.Node, message, expected string, known ...string) {
	r.faults.Add(n, message, expected, known...)
	r.failed = true
}

// readTexts reads title, size, source and note.
func (r *reader) readTexts() {
	for _, k := range []struct {
		key string
		to  *string
	}{{"title", &r.family.Title}, {"size", &r.family.Size}, {"source", &r.family.Source}, {"note", &r.family.Note}} {
		n := r.node.Get(k.key)
		if n == nil {
			continue
		}
		text, ok := r.faults.Text(n)
		r.failed = r.failed || !ok
		*k.to = strings.TrimSpace(text)
	}
}

// readGrades reads tolerances and series, which go together: one series for
// all grades, or one each.
func (r *reader) readGrades() {
	tolerances, series := r.node.Get("tolerances"), r.node.Get("series")
	for _, n := range []*document.Node{tolerances, series} {
		if n != nil && !r.family.Type.sellsValues() {
			r.complain(n, fmt.Sprintf("a %s is not sold by value", r.family.Type), "neither tolerances nor series nor values")
			return
		}
	}
	if tolerances != nil {
		r.readTolerances(tolerances)
	}
	if series != nil {
		r.readSeries(series)
	}
	slices.SortStableFunc(r.family.Grades, func(a, b Grade) int {
		switch {
		case a.Tolerance < b.Tolerance:
			return -1
		case a.Tolerance > b.Tolerance:
			return 1
		}
		return 0
	})
}

// readTolerances replaces the grades.
func (r *reader) readTolerances(n *document.Node) {
	list, ok := r.faults.Items(n)
	if !ok {
		r.failed = true
		return
	}
	old := r.family.Grades
	r.family.Grades = nil
	for _, item := range list {
		q, ok := r.faults.Quantity(item, quantity.Percent)
		switch {
		case !ok:
			r.failed = true
			continue
		case !(q.Value >= 0 && q.Value <= 1):
			r.complain(item, "tolerance out of range", "0 % to 100 %")
			continue
		}
		if _, twice := r.family.Grade(q.Value); twice {
			r.complain(item, "tolerance given twice", "each grade once")
			continue
		}
		g := Grade{Tolerance: q.Value}
		for _, o := range old { // an amendment that names no series keeps the one it had
			if math.Abs(o.Tolerance-g.Tolerance) <= 1e-9*g.Tolerance {
				g.Series = o.Series
			}
		}
		r.family.Grades = append(r.family.Grades, g)
	}
	if len(r.family.Grades) == 0 && !r.failed {
		r.complain(n, "no tolerances", "the grades sold, such as [1 %, 5 %]")
	}
}

// readSeries gives the grades, in the order written, their series.
func (r *reader) readSeries(n *document.Node) {
	list, ok := r.faults.Items(n)
	if !ok {
		r.failed = true
		return
	}
	if n.Kind == document.Sequence && len(list) != len(r.family.Grades) {
		if !r.failed { // a grade that could not be read has been complained of
			r.complain(n, fmt.Sprintf("%d series for %d tolerances", len(list), len(r.family.Grades)),
				"one series for all, or one for each tolerance")
		}
		return
	}
	for i, item := range list {
		name, ok := r.faults.Word(item, "a preferred series", seriesNames...)
		if !ok {
			r.failed = true
			continue
		}
		if n.Kind == document.Sequence {
			r.family.Grades[i].Series = name
			continue
		}
		for j := range r.family.Grades {
			r.family.Grades[j].Series = name
		}
	}
}

// readValues reads the range of values sold.
func (r *reader) readValues() {
	n := r.node.Get("values")
	if n == nil {
		return
	}
	if !r.family.Type.sellsValues() {
		r.complain(n, fmt.Sprintf("a %s is not sold by value", r.family.Type), "neither tolerances nor series nor values")
		return
	}
	low, high, ok := r.faults.Range(n, r.family.Type.Unit())
	if !ok {
		r.failed = true
		return
	}
	negative := r.family.Type == Regulator // a negative rail
	if low.Value == 0 || high.Value == 0 || low.Value < 0 && !(negative && high.Value < 0) {
		r.complain(n, "range of values reaches zero or below", "a range such as "+rangeExample(r.family.Type))
		return
	}
	r.family.Low, r.family.High = low.Value, high.Value
}

// rangeExample is a range of values in the type's unit.
func rangeExample(t Type) string {
	switch t {
	case Capacitor, TrimmerCapacitor:
		return "10 pF..10 nF"
	case Coil:
		return "1 uH..10 mH"
	case Regulator, Zener:
		return "3.3 V..24 V"
	case Crystal:
		return "1 MHz..30 MHz"
	}
	return "10 Ω..1 MΩ"
}

// readParameters reads the figures of parts that have several.
func (r *reader) readParameters() {
	n := r.node.Get("parameters")
	if n == nil {
		return
	}
	known := r.family.Type.Parameters()
	names := make([]string, len(known))
	for i, p := range known {
		names[i] = p.Name
	}
	if !r.faults.Keys(n, names...) {
		r.failed = true
		return
	}
	for i, p := range known {
		if entry := n.Get(p.Name); entry != nil {
			r.readParameter(entry, i, p)
		}
	}
}

// readParameter reads one figure over what the family has of it.
func (r *reader) readParameter(n *document.Node, i int, p Parameter) {
	value := r.family.Type.Trimmer() || i == 0 && r.node.Get("values") != nil
	if value {
		p.Scatter = r.family.Scatter
		p.Tolerance = GradeTolerance
	}
	at := slices.IndexFunc(r.family.Parameters, func(q Parameter) bool { return q.Name == p.Name })
	if at >= 0 {
		p = r.family.Parameters[at]
	}
	keys := ScatterKeys
	if !value {
		keys = append([]string{"value"}, ScatterKeys...)
	}
	if !r.faults.Keys(n, keys...) {
		r.failed = true
		return
	}
	if m := n.Get("value"); m != nil {
		q, ok := r.faults.Quantity(m, p.Unit)
		r.failed = r.failed || !ok
		p.Value = q.Value
	} else if !value && at < 0 {
		r.complain(n, "no value for "+p.Name, "value: with a figure in "+p.Unit.Symbol)
	}
	ReadScatter(r.faults, n, p.Unit, &p.Scatter)
	if at >= 0 {
		r.family.Parameters[at] = p
		return
	}
	r.family.Parameters = append(r.family.Parameters, p)
}

// readRating reads the voltage and the temperatures the family stands.
func (r *reader) readRating() {
	if n := r.node.Get("voltage"); n != nil {
		q, ok := r.faults.Quantity(n, quantity.Volt)
		switch {
		case !ok:
			r.failed = true
		case !(q.Value > 0):
			r.complain(n, "rated voltage not above zero", "a voltage such as 50 V")
		default:
			r.family.Voltage = q.Value
		}
	}
	if n := r.node.Get("temperatures"); n != nil {
		low, high, ok := r.faults.Range(n, quantity.Celsius)
		r.failed = r.failed || !ok
		r.family.MinCelsius, r.family.MaxCelsius = low.Value, high.Value
	}
}

// checkWhole complains of what a family of its type cannot be without.
func (r *reader) checkWhole() {
	if r.failed {
		return
	}
	f := r.family
	a, _ := anatomyOf(f.Type)
	if a.valued && !f.HasValue() {
		r.complain(r.node, "family without values", "values: with a range such as "+rangeExample(f.Type))
	}
	if f.HasValue() && len(f.Grades) == 0 {
		r.complain(r.node, "family without tolerances", "tolerances: with the grades sold, such as [1 %, 5 %]")
	}
	if !f.HasValue() && len(f.Grades) > 0 {
		r.complain(r.node, "tolerances without values", "values: with a range such as "+rangeExample(f.Type))
	}
	for _, g := range a.figures {
		has := slices.ContainsFunc(f.Parameters, func(p Parameter) bool { return p.Name == g.name })
		if g.need && !has {
			r.complain(r.node, "family without "+g.name, "parameters: with a value for "+g.name)
		}
	}
	if len(f.Scatter.Bias) > 0 && f.Voltage == 0 {
		r.complain(r.node, "bias law without a rated voltage", "voltage: with the rated voltage, such as 50 V")
	}
	reference := slices.ContainsFunc(f.Parameters, func(p Parameter) bool { return p.Name == "reference" })
	if f.Type == Regulator && f.HasValue() == reference {
		r.complain(r.node, "a regulator has either an output or a reference",
			"values: with the outputs sold, or parameters: {reference: …}")
	}
}
