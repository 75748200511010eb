package build

import (
	"fmt"

	"batchwright/bom/order"
	"batchwright/bom/quantity"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/tape"
)

// Model is a build compiled: every output at every condition, every trim and
// every bench reading as nodes of one graph, which share what they have in
// common. Parts come first, trims are solved on them, conditions follow.
type Model struct {
	Build   *Build
	Graph   *tape.Graph
	Inputs  []Input // in the order of the graph's input columns
	Outputs []Output
	Trims   []TrimNodes
	Targets []TargetNodes // as Build.Targets
	Points  []Point
	Samples []Sample // as the targets list them

	Findings []Finding // by stage, finding and condition
}

// Input is one thing that scatters: a column of the program.
type Input struct {
	Ref       string // the part's reference, "stage.setting", or the trimmer's reference
	Parameter string // "value", "temperature", "ageing", "beta", "setting error", …
	scatter.Column
	Common float64 // product-moment correlation with another piece of its lot
}

// Output is an output at a condition, or its change from another.
type Output struct {
	Name       OutputName
	Unit       quantity.Unit
	Condition  int
	ChangeFrom int // -1: the output itself
	Node       tape.Ref
	Trims      []int // the trims it depends on
}

// TrimNodes are what is known about a trim in the graph.
type TrimNodes struct {
	Setting    tape.Ref // 0..1, clamped to the end that comes nearest where it does not reach
	AtLow      tape.Ref // the output less the value wanted, at setting 0
	AtHigh     tape.Ref // and at setting 1
	Trims      []int    // the earlier trims it depends on
	ErrorInput int      // input column of its setting error
}

// TargetNodes are the outputs a target judges, as indices of Model.Outputs; a
// target on a trim's reach has none.
type TargetNodes struct{ Outputs []int }

// Point is one bench reading.
type Point struct {
	Stage      *Stage
	Index      int // of the kind's points
	Instrument Instrument
	Loaded     tape.Ref
	Unloaded   tape.Ref
	Level      tape.Ref // V peak at the loaded node, where Levelled
	Levelled   bool     // the instrument needs a least level
	Unit       quantity.Unit
	Trims      []int
}

// Sample is what a target asks of an output at a condition other than the
// reference, or of its change to there, as an instrument would read it.
type Sample struct {
	Target, Condition int
	Point             int      // of Model.Points, that reads the output; -1: none
	Loaded            tape.Ref // with the point's instrument connected, if there is one
	Unloaded          tape.Ref
}

// compiler turns a build into a graph.
type compiler struct {
	*Model
	inputs map[string]tape.Ref // by reference and parameter
	lines  map[string]string   // buying line of each reference
	lots   map[string]string   // buying line -> the first reference on it
	open   map[string]bool     // pieces that may be others: given every term a part may have
	err    error
}

// Compile builds the model. Errors are faults of this program, not of the
// build, which Read has checked.
func (b *Build) Compile() (*Model, error) {
	c := b.newCompiler()
	settings := c.compileTrims()
	environments := c.environments(settings)
	c.compileOutputs(environments)
	c.compileFindings(environments)
	c.compilePoints(settings)
	c.compileSamples(settings)
	c.findTrims()
	return c.Model, c.err
}

// CompileTargets builds the model of what the targets judge, and no more.
func (b *Build) CompileTargets() (*Model, error) {
	return b.CompileOpen(nil)
}

// CompileOpen is CompileTargets with every term that a part may have for the
// pieces with some references, so that other parts in their places need other
// inputs only, and not other equations: see PieceInputs.
func (b *Build) CompileOpen(refs map[string]bool) (*Model, error) {
	c := b.newCompiler()
	c.open = refs
	c.compileTargets(c.environments(c.compileTrims()), map[string]int{})
	c.findTrims()
	return c.Model, c.err
}

func (b *Build) newCompiler() *compiler {
	c := &compiler{
		Model:  &Model{Build: b, Graph: tape.NewGraph()},
		inputs: map[string]tape.Ref{},
		lines:  map[string]string{},
		lots:   map[string]string{},
	}
	for _, p := range b.Parts() {
		key := order.Key(p)
		c.lines[p.Ref] = key
		if c.lots[key] == "" {
			c.lots[key] = p.Ref
		}
	}
	return c
}

// compileTrims solves the trims in order. While one is done, the later
// trimmers stand in the middle of their travel.
func (c *compiler) compileTrims() []tape.Ref {
	g := c.Graph
	settings := make([]tape.Ref, len(c.Build.Trims))
	for i := range settings {
		settings[i] = g.Constant(0.5)
	}
	for i, t := range c.Build.Trims {
		place := c.Build.Stage(t.Stage).place(t.Role)
		with := func(setting tape.Ref) tape.Ref {
			at := append([]tape.Ref(nil), settings...)
			at[i] = setting
			e := c.newEnvironment(t.Condition, at)
			return g.Sub(c.output(e, t.Output), g.Constant(t.To))
		}
		column := len(c.Inputs)
		wrong := c.input(place.Part.Ref, "setting error", scatter.Column{
			Shape: "uniform", Lot: -1, HalfWidth: t.Within, Stream: stream(place.Part.Ref, "setting error"),
		})
		u := g.Unknown()
		n := TrimNodes{AtLow: with(g.Constant(0)), AtHigh: with(g.Constant(1)), ErrorInput: column}
		n.Setting = g.Root(u, g.Constant(0), g.Constant(1), g.Sub(with(u), wrong))
		c.Trims = append(c.Trims, n)
		settings[i] = n.Setting
	}
	return settings
}

// environments are those of every condition, after the trims.
func (c *compiler) environments(settings []tape.Ref) []*environment {
	var list []*environment
	for i := range c.Build.Conditions {
		list = append(list, c.newEnvironment(i, settings))
	}
	return list
}

// compileOutputs makes a node for every output at every condition, and for
// every change that a target asks about.
func (c *compiler) compileOutputs(environments []*environment) {
	at := map[string]int{}
	for _, s := range c.Build.Stages {
		for _, o := range s.Outputs {
			for i := range environments {
				c.outputAt(OutputName{s.Name, o.Name}, i, environments, at)
			}
		}
	}
	c.compileTargets(environments, at)
}

// outputAt is the index of an output at a condition, made on first use.
func (c *compiler) outputAt(name OutputName, condition int, environments []*environment, at map[string]int) int {
	k := key(name, condition, -1)
	i, made := at[k]
	if !made {
		o, _ := c.Build.Stage(name.Stage).output(name.Output)
		i = len(c.Outputs)
		at[k] = i
		c.Outputs = append(c.Outputs, Output{Name: name, Unit: o.Unit, Condition: condition, ChangeFrom: -1,
			Node: c.output(environments[condition], name)})
	}
	return i
}

// compileTargets finds the outputs that each target judges.
func (c *compiler) compileTargets(environments []*environment, at map[string]int) {
	for _, t := range c.Build.Targets {
		var n TargetNodes
		if t.Trim < 0 {
			for _, condition := range t.At {
				n.Outputs = append(n.Outputs, c.judged(t, condition, environments, at))
			}
		}
		c.Targets = append(c.Targets, n)
	}
}

// key identifies an output at a condition or its change.
func key(name OutputName, condition, from int) string {
	return fmt.Sprintf("%s|%d|%d", name, condition, from)
}

// judged is the index of the output that a target judges at a condition: itself
// or its change.
func (c *compiler) judged(t Target, condition int, environments []*environment, at map[string]int) int {
	i := c.outputAt(t.Output, condition, environments, at)
	if t.ChangeFrom < 0 {
		return i
	}
	from := c.Outputs[c.outputAt(t.Output, t.ChangeFrom, environments, at)]
	k := key(t.Output, condition, t.ChangeFrom)
	change, made := at[k]
	if !made {
		to := c.Outputs[i]
		to.ChangeFrom, to.Node = t.ChangeFrom, c.Graph.Sub(to.Node, from.Node)
		if to.Unit.Offset != 0 { // a difference of temperatures is in kelvin
			to.Unit = quantity.Kelvin
		}
		change = len(c.Outputs)
		at[k] = change
		c.Outputs = append(c.Outputs, to)
	}
	return change
}

// compilePoints makes the readings of every test point at the reference
// condition: with the instrument connected, and without.
func (c *compiler) compilePoints(settings []tape.Ref) {
	bare := c.newEnvironment(0, settings)
	for _, s := range c.Build.Stages {
		for i, p := range s.Kind.Points {
			instrument, ok := c.Build.Instrument(p.Instrument)
			if !ok {
				c.fail(fmt.Errorf("build: %s.%s is read with %q, which is no instrument", s.Kind.Name, p.Name, p.Instrument))
				continue
			}
			loaded := c.loadedEnvironment(0, settings, s, i, instrument)
			out, ok := s.output(p.Name)
			if !ok {
				c.fail(fmt.Errorf("build: %s reads %q, which is no output", s.Kind.Name, p.Name))
				continue
			}
			q := Point{
				Stage: s, Index: i, Instrument: instrument, Unit: out.Unit,
				Loaded: c.equation(loaded, s, p.Name), Unloaded: c.equation(bare, s, p.Name),
			}
			if instrument.MinimumLevel > 0 {
				q.Level, q.Levelled = q.Loaded, p.Level != "" || p.Reading == "peak voltage"
				if p.Level != "" {
					q.Level = c.equation(loaded, s, p.Level)
				}
			}
			c.Points = append(c.Points, q)
		}
	}
}

// findTrims notes which trims everything depends on: those whose setting
// error it reads.
func (c *compiler) findTrims() {
	for t, trim := range c.Trims {
		depends := c.Graph.Dependents(trim.ErrorInput)
		for i := range c.Outputs {
			if depends[c.Outputs[i].Node] {
				c.Outputs[i].Trims = append(c.Outputs[i].Trims, t)
			}
		}
		for i := range c.Points {
			if depends[c.Points[i].Loaded] {
				c.Points[i].Trims = append(c.Points[i].Trims, t)
			}
		}
		for i := range c.Findings {
			if depends[c.Findings[i].Node] {
				c.Findings[i].Trims = append(c.Findings[i].Trims, t)
			}
		}
		for i := range c.Trims {
			if depends[c.Trims[i].AtLow] || depends[c.Trims[i].AtHigh] {
				c.Trims[i].Trims = append(c.Trims[i].Trims, t)
			}
		}
	}
}

// fail keeps the first error.
func (c *compiler) fail(err error) {
	if c.err == nil {
		c.err = err
	}
}
