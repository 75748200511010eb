package build

import (
	"regexp"
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/stage"
)

// readSettings reads a stage's settings; those the file leaves out take the
// kind's default.
func (r *reader) readSettings(s stageNode) {
	n := s.node.Get("settings")
	if n != nil {
		var names []string
		for _, k := range s.Kind.AllSettings() {
			names = append(names, k.Name)
		}
		if !r.Keys(n, names...) && n.Kind != document.Mapping {
			n = nil
		}
	}
	for _, k := range s.Kind.AllSettings() {
		s.Settings = append(s.Settings, r.readSetting(s, k, n))
	}
}

// readSetting reads one setting of a kind.
func (r *reader) readSetting(s stageNode, k stage.Setting, all *document.Node) Setting {
	out := Setting{Name: k.Name, Parameter: part.Parameter{Name: k.Name, Unit: k.Unit}}
	var n *document.Node
	if all != nil {
		n = all.Get(k.Name)
	}
	if n != nil {
		r.readFigure(n, &out)
		return out
	}
	if k.Default == "" {
		r.Add(s.node, "missing setting "+k.Name, k.Summary+" ("+k.Unit.Symbol+")")
		return out
	}
	q, err := quantity.Parse(k.Default, k.Unit)
	if err != nil {
		panic("build: default of " + s.Kind.Name + "." + k.Name + ": " + err.Error())
	}
	out.Value, out.Scatter = q.Value, k.Scatter
	return out
}

// name is what a setting that starts with a letter must look like to be a
// reference.
var name = regexp.MustCompile(`^[A-Za-z_][A-Za-z0-9_]*(\.[A-Za-z_][A-Za-z0-9_]*)?$`)

// readFigure reads a setting given as a value, a reference, a shape or a mapping.
func (r *reader) readFigure(n *document.Node, out *Setting) {
	if shape := shapeIn(n); shape != nil {
		r.readShape(n, shape, out)
		return
	}
	if n.Kind == document.Mapping {
		r.Keys(n, append(append([]string{"value"}, part.ScatterKeys...), shapeNames()...)...)
		if v := r.Need(n, "value", "the setting's value"); v != nil {
			r.read(v, out.Unit, &out.Value)
		}
		part.ReadScatter(&r.Faults, n, out.Unit, &out.Scatter)
		if out.Correlation != (part.Correlation{}) {
			r.Add(n.Get("correlation"), "correlation", "none: settings share no lot")
		}
		return
	}
	if r.isReference(n) {
		out.Reference = n.Value // checked once every stage is known
		return
	}
	r.read(n, out.Unit, &out.Value)
}

// isReference says whether a scalar names something: a known variable or
// stage, or any word that is no quantity.
func (r *reader) isReference(n *document.Node) bool {
	if n.Kind != document.Scalar || !name.MatchString(n.Value) {
		return false
	}
	head, _, dotted := strings.Cut(n.Value, ".")
	if dotted || r.build.variable(head) >= 0 {
		return true
	}
	_, err := anyQuantity(n)
	return err != nil
}

// checkReferences checks that every setting's reference exists and has the
// setting's dimension.
func (r *reader) checkReferences() {
	for _, s := range r.stages {
		for _, set := range s.Settings {
			if set.Reference != "" {
				n := s.node.Get("settings").Get(set.Name)
				if v := n.Get("value"); v != nil {
					n = v
				}
				r.checkReference(n, set)
			}
		}
	}
}

func (r *reader) checkReference(n *document.Node, set Setting) {
	if head, _, _ := strings.Cut(set.Reference, "."); r.broken[head] {
		return
	}
	unit, ok := r.unitOf(set.Reference)
	if !ok {
		r.Add(n, "reference", "a condition's variable or another stage's output, or a value in "+
			set.Unit.Symbol, r.referenceNames()...)
		return
	}
	if unit.Dimension != set.Unit.Dimension {
		r.Add(n, "reference of the wrong unit", "something in "+set.Unit.Symbol+"; "+set.Reference+
			" is in "+unit.Symbol)
	}
}

// unitOf is the unit of a condition's variable or of a stage's output.
func (r *reader) unitOf(reference string) (quantity.Unit, bool) {
	if i := r.build.variable(reference); i >= 0 {
		return r.build.Variables[i].Unit, true
	}
	stageName, output, _ := strings.Cut(reference, ".")
	if s := r.build.Stage(stageName); s != nil {
		if o, ok := s.output(output); ok {
			return o.Unit, true
		}
	}
	return quantity.Unit{}, false
}

// referenceNames are everything a setting may refer to.
func (r *reader) referenceNames() []string {
	var names []string
	for _, v := range r.build.Variables {
		names = append(names, v.Name)
	}
	return append(names, r.outputNames()...)
}

// outputNames are every stage's outputs.
func (r *reader) outputNames() []string {
	var names []string
	for _, s := range r.build.Stages {
		for _, o := range s.Outputs {
			names = append(names, s.Name+"."+o.Name)
		}
	}
	return names
}
