package build

import (
	"fmt"
	"strings"

	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
	"batchwright/tolerance/stage"
	"batchwright/tolerance/tape"
)

// environment is where equations are evaluated: a condition, a setting for
// every trim, and perhaps an instrument across one point.
type environment struct {
	condition int
	settings  []tape.Ref
	loaded    string // stage that an instrument is connected to
	loads     map[string]tape.Ref
	values    map[string]tape.Ref // equations already lowered, by "stage.name"
	heating   string              // stage whose own heat is being solved for
	heat      tape.Ref            // and how far it warms that stage, K
}

func (c *compiler) newEnvironment(condition int, settings []tape.Ref) *environment {
	return &environment{condition: condition, settings: settings, values: map[string]tape.Ref{}}
}

// load connects an instrument to a point of a stage.
func (e *environment) load(c *compiler, s *Stage, index int, i Instrument) {
	p := s.Kind.Points[index]
	resistance, capacitance := c.Build.Load(i)
	e.loaded, e.loads = s.Name, map[string]tape.Ref{}
	if p.Conductance != "" && resistance > 0 {
		e.loads[p.Conductance] = c.Graph.Constant(1 / resistance)
	}
	if p.Capacitance != "" {
		e.loads[p.Capacitance] = c.Graph.Constant(capacitance)
	}
}

// loadedEnvironment has an instrument connected to one of a stage's points.
func (c *compiler) loadedEnvironment(condition int, settings []tape.Ref, s *Stage, index int, i Instrument) *environment {
	e := c.newEnvironment(condition, settings)
	e.load(c, s, index, i)
	return e
}

// output is the node of a stage's output. A temperature in °C leaves the
// equations' absolute scale here.
func (c *compiler) output(e *environment, n OutputName) tape.Ref {
	s := c.Build.Stage(n.Stage)
	v := c.equation(e, s, n.Output)
	if o, ok := s.output(n.Output); ok && o.Unit.Offset != 0 {
		v = c.Graph.Sub(v, c.Graph.Constant(o.Unit.Offset))
	}
	return v
}

// equation is the node of one of a stage's equations.
func (c *compiler) equation(e *environment, s *Stage, name string) tape.Ref {
	k := s.Name + "." + name
	if v, ok := e.values[k]; ok {
		return v
	}
	x := s.find(name)
	if x == nil {
		if set := s.setting(name); set != nil {
			return c.settingValue(e, s, set)
		}
		c.fail(fmt.Errorf("build: %s has no equation %q", s.Kind.Name, name))
		return c.Graph.Constant(0)
	}
	v, err := c.Graph.Lower(x, func(name string) (tape.Ref, bool) { return c.resolve(e, s, name) })
	if err != nil {
		c.fail(fmt.Errorf("build: %s: %w", k, err))
		v = c.Graph.Constant(0)
	}
	e.values[k] = v
	return v
}

// find is the expression of an equation by its name; nil where there is none.
func (s *Stage) find(name string) *formula.Expression {
	equations := s.Formulas
	if !s.Kind.Free {
		equations = s.Kind.EquationList()
	}
	for _, q := range equations {
		if q.Name == name {
			return q.Expression
		}
	}
	return nil
}

// resolve finds what a name in a stage's equation stands for, in the order in
// which the scopes of formula and stage declare them.
func (c *compiler) resolve(e *environment, s *Stage, name string) (tape.Ref, bool) {
	head, tail, dotted := strings.Cut(name, ".")
	if p := s.place(head); p != nil {
		return c.placed(e, s, p, tail), true
	}
	if dotted {
		return c.fromElsewhere(e, s, head, tail)
	}
	if set := s.setting(name); set != nil {
		return c.settingValue(e, s, set), true
	}
	if s.find(name) != nil {
		return c.equation(e, s, name), true
	}
	return c.surroundings(e, s, name)
}

// fromElsewhere is a field of an input's signal, or another stage's output.
func (c *compiler) fromElsewhere(e *environment, s *Stage, head, tail string) (tape.Ref, bool) {
	for _, w := range s.Wires {
		if w.Input == head {
			from := c.Build.Stage(w.From)
			if from.find(tail) == nil && from.setting(tail) == nil {
				return c.Graph.Constant(0), true // it passes no such thing on
			}
			return c.equation(e, from, tail), true
		}
	}
	for _, i := range s.Kind.Inputs {
		if i.Name == head {
			return c.Graph.Constant(0), true // nothing is connected
		}
	}
	if other := c.Build.Stage(head); other != nil && other.find(tail) != nil {
		return c.equation(e, other, tail), true
	}
	return 0, false
}

// surroundings is a condition's variable, a load (nothing unless this stage's
// point is being read), or a constant.
func (c *compiler) surroundings(e *environment, s *Stage, name string) (tape.Ref, bool) {
	if name == Temperature {
		return c.absolute(e, s), true
	}
	if i := c.Build.variable(name); i >= 0 {
		return c.variableValue(e, i), true
	}
	for _, p := range s.Kind.Points {
		if name == p.Conductance || name == p.Capacitance {
			if v, ok := e.loads[name]; ok && e.loaded == s.Name {
				return v, true
			}
			return c.Graph.Constant(0), true
		}
	}
	if v, ok := formula.ConstantNamed(name); ok {
		return c.Graph.Constant(v.Value), true
	}
	return 0, false
}

// variableValue is a condition's variable in SI.
func (c *compiler) variableValue(e *environment, i int) tape.Ref {
	v := c.Build.Conditions[e.condition].Values[i]
	if c.Build.Variables[i].Unit.Offset != 0 {
		v += quantity.Celsius.Offset
	}
	return c.Graph.Constant(v)
}

// variableNamed is a standard variable of the condition as it is stored.
func (c *compiler) variableNamed(e *environment, name string) float64 {
	return c.Build.Conditions[e.condition].Values[c.Build.variable(name)]
}

// rise is the stage's temperature above ambient, K: what the file says, and
// what the stage's own heat adds.
func (c *compiler) rise(e *environment, s *Stage) tape.Ref {
	full := c.Graph.Add(c.settingValue(e, s, s.setting("rise")), c.ownHeat(e, s))
	return c.Graph.Mul(c.Graph.Constant(c.variableNamed(e, Warmup)), full)
}

// hottest bounds the search for a stage's own warming, K.
const hottest = 500

// ownHeat is how far a stage's own heat warms it: the u at which
//
//	thermal_resistance·heat(u) = u,
//
// the heat being that of the stage as warm as that makes it. A stage that would
// run away is held at the hottest.
func (c *compiler) ownHeat(e *environment, s *Stage) tape.Ref {
	set := s.setting(stage.ThermalResistance)
	if set == nil || set.Reference == "" && set.Value == 0 && set.Tolerance == 0 {
		return c.Graph.Constant(0)
	}
	if e.heating == s.Name {
		return e.heat
	}
	k := s.Name + " own heat"
	if v, ok := e.values[k]; ok {
		return v
	}
	u := c.Graph.Unknown()
	warm := *e
	warm.values, warm.heating, warm.heat = map[string]tape.Ref{}, s.Name, u
	heat := c.Graph.Mul(c.settingValue(&warm, s, set), c.equation(&warm, s, stage.Heat))
	v := c.Graph.Root(u, c.Graph.Constant(0), c.Graph.Constant(hottest), c.Graph.Sub(heat, u))
	e.values[k] = v
	return v
}

// absolute is the stage's own temperature, K.
func (c *compiler) absolute(e *environment, s *Stage) tape.Ref {
	ambient := c.variableNamed(e, Temperature) + quantity.Celsius.Offset
	return c.Graph.Add(c.Graph.Constant(ambient), c.rise(e, s))
}

// settingValue is a setting: what it refers to, or its own figure.
func (c *compiler) settingValue(e *environment, s *Stage, set *Setting) tape.Ref {
	if set.Reference == "" {
		x := source{ref: s.Name + "." + set.Name, prefix: "", stage: s}
		if set.Geometry != nil {
			return c.shaped(e, x, set.Geometry, set.Scatter)
		}
		if set.Name == "rise" { // it makes the temperature, so it cannot feel it
			return c.base(x, set.Parameter, "value")
		}
		return c.element(e, x, set.Parameter, "value")
	}
	return c.referred(e, set.Reference)
}

// referred is a condition's variable or another stage's output.
func (c *compiler) referred(e *environment, reference string) tape.Ref {
	if i := c.Build.variable(reference); i >= 0 {
		return c.variableValue(e, i)
	}
	stageName, output, _ := strings.Cut(reference, ".")
	return c.equation(e, c.Build.Stage(stageName), output)
}
