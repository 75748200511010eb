package build

import (
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
	"batchwright/tolerance/stage"
)

// readFormulaStage reads a stage whose roles, settings and equations are the
// user's own.
func (r *reader) readFormulaStage(s stageNode) {
	r.Keys(s.node, "kind", "settings", "parts", "outputs")
	r.readOwnSettings(s)
	r.readOwnPlaces(s)
	r.readOutputs(s)
}

// readOwnSettings reads the settings of a formula stage, each in the unit it is
// written in, and the `rise` that every stage has.
func (r *reader) readOwnSettings(s stageNode) {
	own := map[string]bool{}
	if n := s.node.Get("settings"); n != nil && n.Kind == document.Mapping {
		for _, p := range n.Pairs {
			if r.ownName(p.Key) {
				own[p.Key.Value] = true
				s.Settings = append(s.Settings, r.readOwnSetting(p))
			}
		}
	} else if n != nil {
		r.Add(n, "settings", "a mapping of names to values")
	}
	for _, k := range s.Kind.AllSettings() {
		if !own[k.Name] {
			s.Settings = append(s.Settings, r.readSetting(s, k, nil))
		}
	}
}

// ownName checks that a name of the user's can be used in an equation.
func (r *reader) ownName(n *document.Node) bool {
	if identifier.MatchString(n.Value) && !formula.Reserved(n.Value) {
		return true
	}
	r.Add(n, "name", "a letter, then letters, digits and _, that is no function, constant or unit")
	return false
}

func (r *reader) readOwnSetting(p document.Pair) Setting {
	out := Setting{Name: p.Key.Value, Parameter: part.Parameter{Name: p.Key.Value}}
	n := p.Value
	if shape := shapeIn(n); shape != nil {
		out.Unit = shape.Unit
		r.readShape(n, shape, &out)
		return out
	}
	if n.Kind == document.Mapping {
		n = p.Value.Get("value")
	}
	if n == nil {
		r.Add(p.Value, "missing key value", "the setting's value")
		return out
	}
	if r.isReference(n) {
		out.Reference = n.Value // its unit is settled once every stage is known
		return out
	}
	q, err := anyQuantity(n)
	if err != nil {
		r.Add(n, p.Key.Value, "a value with a unit, a plain number, or a reference")
		return out
	}
	out.Unit = q.Unit
	r.readFigure(p.Value, &out)
	return out
}

// settleUnits gives a formula stage's settings that refer to something the
// unit of that. What refers to nothing is complained of with the rest.
func (r *reader) settleUnits() {
	for _, s := range r.stages {
		for i := range s.Settings {
			set := &s.Settings[i]
			if unit, ok := r.unitOf(set.Reference); ok && s.Kind.Free && set.Reference != "" {
				set.Unit = unit
			}
		}
	}
}

// readOwnPlaces reads the parts of a formula stage under the user's own names.
func (r *reader) readOwnPlaces(s stageNode) {
	n := s.node.Get("parts")
	if n == nil {
		return
	}
	if n.Kind != document.Mapping {
		r.Add(n, "parts", "a mapping of names to parts")
		return
	}
	for _, pair := range n.Pairs {
		if !r.ownName(pair.Key) {
			continue
		}
		p := Place{Role: pair.Key.Value, Fitted: true, Position: 0.5}
		if p.Type = r.ownType(pair.Value); p.Type == "" {
			continue
		}
		r.readPlace(s, &p, pair.Value, append([]string{"part"}, partKeys...))
		s.Places = append(s.Places, p)
	}
}

// ownType is the type of a formula stage's part: said, its family's, that of
// the part it is the same as, that of the first of a pair, or told by its
// value's unit.
func (r *reader) ownType(n *document.Node) part.Type {
	if at := n.Get("part"); at != nil {
		word, _ := r.Word(at, "a type of part", typeNames()...)
		return part.Type(word)
	}
	if at := aFamily(n); at != nil {
		if f, ok := r.build.Families.Family(at.Value); ok {
			return f.Type
		}
		r.Word(at, "a family", r.build.Families.Names()...)
		return ""
	}
	if at := n.Get("same_as"); at != nil {
		if p := r.build.Place(at.Value); p != nil {
			return p.Type
		}
		r.Add(at, "position", "STAGE.ROLE of a part further up")
		return ""
	}
	if n.Get("winding") != nil {
		return part.Coil
	}
	if first := aPiece(n); first != nil {
		return r.ownType(first)
	}
	if t := typeOfValue(n.Get("value")); t != "" {
		return t
	}
	r.Add(n, "part of no known type", "part: and one of the types", typeNames()...)
	return ""
}

// aFamily is the family of a part, or the first that it may be chosen from.
func aFamily(n *document.Node) *document.Node {
	if at := n.Get("family"); at != nil {
		return at
	}
	if list := n.Get("choose").Get("families"); list != nil && len(list.Items) > 0 {
		return list.Items[0]
	}
	return nil
}

// aPiece is the first of the two that a part is written as.
func aPiece(n *document.Node) *document.Node {
	for _, combine := range []Combine{Parallel, InSeries} {
		if list := n.Get(string(combine)); list != nil && len(list.Items) > 0 {
			return list.Items[0]
		}
	}
	return nil
}

// typeOfValue is the type that a value's unit tells; a range is a trimmer's.
func typeOfValue(at *document.Node) part.Type {
	if at == nil || at.Kind != document.Scalar {
		return ""
	}
	for _, t := range []part.Type{part.Resistor, part.Capacitor, part.Coil} {
		if _, err := quantity.Parse(at.Value, t.Unit()); err == nil {
			return t
		}
	}
	for _, t := range []part.Type{part.TrimmerResistor, part.TrimmerCapacitor} {
		if _, _, err := quantity.ParseRange(at.Value, t.Unit()); err == nil {
			return t
		}
	}
	return ""
}

// readOutputs reads `outputs: {name: {expression, unit}}`.
func (r *reader) readOutputs(s stageNode) {
	n := r.Need(s.node, "outputs", "the stage's outputs, {name: {expression: …, unit: …}}")
	if n == nil {
		return
	}
	if n.Kind != document.Mapping || len(n.Pairs) == 0 {
		r.Add(n, "outputs", "a mapping of names to expressions")
		return
	}
	s.Outputs = nil
	for _, p := range n.Pairs {
		if r.ownName(p.Key) {
			r.readOutput(s, p)
		}
	}
}

func (r *reader) readOutput(s stageNode, p document.Pair) {
	if !r.Keys(p.Value, "expression", "unit") && p.Value.Kind != document.Mapping {
		return
	}
	out := stage.Output{Name: p.Key.Value, Unit: quantity.One, Summary: "your own"}
	if at := p.Value.Get("unit"); at != nil {
		unit, ok := quantity.Find(at.Value)
		if !ok {
			r.Add(at, "unit", "a unit such as Hz, V or 1", unitSymbols()...)
		}
		out.Unit = unit
	}
	at := r.Need(p.Value, "expression", "an equation's right-hand side")
	if at == nil {
		return
	}
	e, mistakes := formula.Parse(at.Value)
	r.mistakes(at, mistakes)
	if len(mistakes) > 0 {
		return
	}
	s.Outputs = append(s.Outputs, out)
	s.Formulas = append(s.Formulas, formula.Equation{Name: out.Name, Expression: e, Line: at.Line})
}

// mistakes reports what is wrong inside an expression, at its column.
func (r *reader) mistakes(at *document.Node, mistakes formula.Mistakes) {
	for _, m := range mistakes {
		r.AddAt(at, m.Offset, document.Complaint{
			Message: m.Message, Found: m.Found, Expected: m.Expected, Nearest: m.Nearest,
		})
	}
}

// formulaScope is what an expression of a formula stage may name.
type formulaScope struct {
	build *Build
	stage *Stage
}

// Dimension implements formula.Scope.
func (s formulaScope) Dimension(name string) (quantity.Dimension, bool) {
	if u, ok := s.own(name); ok {
		return u.Dimension, true
	}
	if u, ok := s.shared(name); ok {
		return u.Dimension, true
	}
	return quantity.Dimension{}, false
}

// own finds a part, a part's parameter, a setting or an output of the stage.
func (s formulaScope) own(name string) (quantity.Unit, bool) {
	head, tail, dotted := strings.Cut(name, ".")
	if p := s.stage.place(head); p != nil {
		return parameterUnit(p.Type, tail, dotted)
	}
	if dotted {
		return quantity.Unit{}, false
	}
	if set := s.stage.setting(name); set != nil {
		return set.Unit, true
	}
	if o, ok := s.stage.output(name); ok {
		return o.Unit, true
	}
	return quantity.Unit{}, false
}

// parameterUnit is the unit of `role` or `role.parameter`.
func parameterUnit(t part.Type, parameter string, dotted bool) (quantity.Unit, bool) {
	all := t.Parameters()
	if !dotted {
		return all[0].Unit, len(all) == 1 || t.Trimmer()
	}
	if parameter == "fitted" {
		return quantity.One, true
	}
	for _, p := range all {
		if p.Name == parameter {
			return p.Unit, true
		}
	}
	return quantity.Unit{}, false
}

// shared finds a condition's variable or another stage's output. In equations
// the temperature is the stage's own and absolute.
func (s formulaScope) shared(name string) (quantity.Unit, bool) {
	if name == Temperature {
		return quantity.Kelvin, true
	}
	if i := s.build.variable(name); i >= 0 {
		return s.build.Variables[i].Unit, true
	}
	head, tail, _ := strings.Cut(name, ".")
	if other := s.build.Stage(head); other != nil {
		if o, ok := other.output(tail); ok {
			return o.Unit, true
		}
	}
	return quantity.Unit{}, false
}

// Names implements formula.Scope.
func (s formulaScope) Names() []string {
	var names []string
	for _, p := range s.stage.Places {
		names = append(names, p.Role)
	}
	for _, set := range s.stage.Settings {
		names = append(names, set.Name)
	}
	for _, o := range s.stage.Outputs {
		names = append(names, o.Name)
	}
	for _, v := range s.build.Variables {
		names = append(names, v.Name)
	}
	for _, other := range s.build.Stages {
		for _, o := range other.Outputs {
			names = append(names, other.Name+"."+o.Name)
		}
	}
	return names
}

// typeNames lists the types of parts.
func typeNames() []string {
	var names []string
	for _, t := range part.Types() {
		names = append(names, string(t))
	}
	return names
}

// unitSymbols lists the units an output may be given in.
func unitSymbols() []string {
	var symbols []string
	for _, u := range anyUnits {
		symbols = append(symbols, u.Symbol)
	}
	return symbols
}
