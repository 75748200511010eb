package build

import (
	"strings"

	"batchwright/tolerance/formula"
)

// checkFormulas checks the names and dimensions of every formula stage.
func (r *reader) checkFormulas() {
	for _, s := range r.stages {
		scope := formulaScope{r.build, s.Stage}
		for _, f := range s.Formulas {
			r.checkFormula(s, f, scope)
		}
		r.checkOutputCycles(s)
	}
}

// checkOutputCycles complains of outputs of one stage that need each other in
// a circle.
func (r *reader) checkOutputCycles(s stageNode) {
	state := map[string]int{}
	var walk func(name string, path []string)
	walk = func(name string, path []string) {
		if s.place(s.Name) == nil {
			name = strings.TrimPrefix(name, s.Name+".") // an output may be named in full
		}
		x := s.Stage.find(name)
		if x == nil || !s.Kind.Free || s.place(name) != nil || s.setting(name) != nil || state[name] == 2 {
			return
		}
		path = append(path, name)
		if state[name] == 1 {
			r.Add(s.node.Get("outputs").Get(name).Get("expression"), "outputs in a circle",
				"outputs that do not need each other: "+strings.Join(path, " -> "))
			return
		}
		state[name] = 1
		for _, next := range x.Names() {
			walk(next, path)
		}
		state[name] = 2
	}
	for _, f := range s.Formulas {
		walk(f.Name, nil)
	}
}

func (r *reader) checkFormula(s stageNode, f formula.Equation, scope formulaScope) {
	n := s.node.Get("outputs").Get(f.Name)
	dimension, mistakes := f.Expression.Check(scope)
	r.mistakes(n.Get("expression"), mistakes)
	out, _ := s.output(f.Name)
	if len(mistakes) > 0 || dimension == out.Unit.Dimension {
		return
	}
	at := n.Get("unit")
	if at == nil {
		at = n.Get("expression")
	}
	r.Add(at, "unit of "+f.Name, "the unit of its expression, "+dimension.String())
}

// checkCycles complains of stages that need each other's outputs in a circle.
func (r *reader) checkCycles() {
	state := map[string]int{} // 1: on the way, 2: done
	var walk func(s stageNode, path []string)
	walk = func(s stageNode, path []string) {
		path = append(path, s.Name)
		switch state[s.Name] {
		case 1:
			r.Add(s.node.Get("kind"), "cycle between stages", "stages that do not need each other: "+strings.Join(path, " -> "))
			return
		case 2:
			return
		}
		state[s.Name] = 1
		for _, next := range r.needs(s) {
			walk(next, path)
		}
		state[s.Name] = 2
	}
	for _, s := range r.stages {
		walk(s, nil)
	}
}

// head is the stage in a name such as "fixed.frequency".
func head(name string) string {
	first, _, _ := strings.Cut(name, ".")
	return first
}

// needs lists the other stages a stage takes something from.
func (r *reader) needs(s stageNode) []stageNode {
	var out []stageNode
	for _, name := range s.Needs() {
		for _, other := range r.stages {
			if other.Name == name {
				out = append(out, other)
			}
		}
	}
	return out
}

// Needs names the other stages that a stage takes something from, and perhaps a
// condition's variables.
func (s *Stage) Needs() []string {
	var heads []string
	for _, w := range s.Wires {
		heads = append(heads, w.From)
	}
	for _, set := range s.Settings {
		for _, name := range set.references() {
			heads = append(heads, head(name))
		}
	}
	for _, p := range s.Places {
		if h := head(p.acrossFrom()); h != s.Name { // its own is for checkAcross
			heads = append(heads, h)
		}
	}
	for _, f := range s.Formulas {
		for _, name := range f.Expression.Names() { // its own are walked by checkOutputCycles
			if h := head(name); h != s.Name && s.place(h) == nil && s.setting(h) == nil {
				heads = append(heads, h)
			}
		}
	}
	return heads
}
