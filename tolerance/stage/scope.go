package stage

import (
	"slices"
	"sort"

	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
)

// Scope says what the names in a kind's equations stand for; it implements
// formula.Scope. An equation's own dimension is found when it is first asked
// for, so lines may come in any order. Not for concurrent use.
type Scope struct {
	given     map[string]quantity.Dimension
	equations map[string]formula.Equation
	found     map[string]quantity.Dimension
	open      []string // equations being looked at, to find a circle
	mistakes  map[string]formula.Mistakes
}

// Scope is what the kind's equations may name: roles (`role.parameter` and
// `role.fitted`), settings, `input.field`, the loads named by Points,
// `temperature`, the constants of package formula and the equations.
func (k *Kind) Scope() *Scope {
	s := &Scope{
		given:     map[string]quantity.Dimension{"temperature": quantity.Kelvin.Dimension},
		equations: map[string]formula.Equation{},
		found:     map[string]quantity.Dimension{},
		mistakes:  map[string]formula.Mistakes{},
	}
	for _, r := range k.Roles {
		s.addRole(r)
	}
	for _, set := range k.AllSettings() {
		s.given[set.Name] = set.Unit.Dimension
	}
	for _, in := range k.Inputs {
		for _, f := range Fields {
			s.given[in.Name+"."+f.Name] = f.Unit.Dimension
		}
	}
	for _, p := range k.Points {
		s.addLoad(p.Conductance, quantity.Siemens)
		s.addLoad(p.Capacitance, quantity.Farad)
	}
	for _, e := range k.EquationList() {
		s.equations[e.Name] = e
	}
	return s
}

// addRole gives a part's name its only figure, or a trimmer's set value, and
// each of its parameters by `role.parameter`.
func (s *Scope) addRole(r Role) {
	all := r.Type.Parameters()
	if len(all) == 1 || r.Type.Trimmer() {
		s.given[r.Name] = all[0].Unit.Dimension
	}
	for _, p := range all {
		s.given[r.Name+"."+p.Name] = p.Unit.Dimension
	}
	s.given[r.Name+".fitted"] = quantity.One.Dimension
}

func (s *Scope) addLoad(name string, unit quantity.Unit) {
	if name != "" {
		s.given[name] = unit.Dimension
	}
}

// Dimension implements formula.Scope.
func (s *Scope) Dimension(name string) (quantity.Dimension, bool) {
	if d, ok := s.given[name]; ok {
		return d, true
	}
	return s.equation(name)
}

// equation is the dimension of an equation; ok is false while it is being
// found, which is a circle, and where it is wrong.
func (s *Scope) equation(name string) (d quantity.Dimension, ok bool) {
	if d, ok := s.found[name]; ok {
		return d, true
	}
	e, ok := s.equations[name]
	if !ok || slices.Contains(s.open, name) || len(s.mistakes[name]) > 0 {
		return quantity.Dimension{}, false
	}
	s.open = append(s.open, name)
	d, mistakes := e.Expression.Check(s)
	s.open = s.open[:len(s.open)-1]
	if len(mistakes) > 0 {
		s.mistakes[name] = mistakes
		return quantity.Dimension{}, false
	}
	s.found[name] = d
	return d, true
}

// Names implements formula.Scope: everything that can be named, sorted.
func (s *Scope) Names() []string {
	var names []string
	for n := range s.given {
		names = append(names, n)
	}
	for n := range s.equations {
		if _, hidden := s.given[n]; !hidden {
			names = append(names, n)
		}
	}
	sort.Strings(names)
	return names
}

// Mistakes checks every equation and returns what is wrong with each, by its
// name; an equation that stands in a circle is one that its neighbour cannot
// name.
func (s *Scope) Mistakes() map[string]formula.Mistakes {
	for name := range s.equations {
		s.equation(name)
	}
	return s.mistakes
}
