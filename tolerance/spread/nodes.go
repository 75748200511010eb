// Package spread says how a build's outputs scatter: nominal, worst case, root
// sum square and by simulation in whole batches, with the trims solved again
// for every unit, what contributes, and which share of the units is good.
package spread

import (
	"math"
	"slices"

	"batchwright/tolerance/build"
	"batchwright/tolerance/tape"
)

// lanes is how many units are evaluated at once.
const lanes = 256

// nodes is a model's program and where its columns are. Outputs that are one
// node of the graph, such as a rail's voltage at two conditions that do not
// touch it, share a column.
type nodes struct {
	model    *build.Model
	program  *tape.Program
	targets  []int       // of Build.Targets, that are judged
	outputs  []int       // the first of Model.Outputs in each column
	columnOf map[int]int // from an index of Model.Outputs
	trims    []int       // of Model.Trims; setting, at low, at high follow the outputs for each
	points   int         // first column of the loaded readings, and what goes with them, up to happen
	levels   []int       // of Model.Points, how far from points its level is; -1: none is asked
	samples  int         // how far from points the first of Model.Samples is
	happen   int         // first column of the findings
	findings []int       // the first of Model.Findings in each column from there
	happenAt []int       // of Model.Findings, which of these it is
	kept     []int       // columns of outputs whose values a simulation keeps
	count    int
}

// newNodes compiles some outputs and what some targets judge, the trims that
// either depends on and, with points, every trim, reading and finding.
func newNodes(m *build.Model, outputs, targets []int, points bool) *nodes {
	n := &nodes{model: m, targets: targets, columnOf: map[int]int{}}
	for _, t := range targets {
		outputs = append(slices.Clip(outputs), m.Targets[t].Outputs...)
	}
	var refs []tape.Ref
	column := map[tape.Ref]int{}
	for _, i := range outputs {
		node := m.Outputs[i].Node
		if _, there := column[node]; !there {
			column[node] = len(refs)
			refs = append(refs, node)
			n.outputs = append(n.outputs, i)
		}
		n.columnOf[i] = column[node]
	}
	n.findTrims(points)
	for _, t := range n.trims {
		refs = append(refs, m.Trims[t].Setting, m.Trims[t].AtLow, m.Trims[t].AtHigh)
	}
	n.points = len(refs)
	if points {
		refs = n.addReadings(refs)
	}
	n.happen = len(refs)
	if points {
		refs = n.addFindings(refs)
	}
	n.count = len(refs)
	n.program = m.Graph.Program(refs...)
	return n
}

// findTrims lists the trims that the outputs and targets depend on, or all.
func (n *nodes) findTrims(all bool) {
	need := make([]bool, len(n.model.Trims))
	mark := func(trims []int) {
		for _, t := range trims {
			need[t] = true
		}
	}
	for _, i := range n.outputs {
		mark(n.model.Outputs[i].Trims)
	}
	for _, t := range n.targets {
		if trim := n.model.Build.Targets[t].Trim; trim >= 0 {
			mark(append([]int{trim}, n.model.Trims[trim].Trims...))
		}
	}
	for t := range need {
		if need[t] || all {
			n.trims = append(n.trims, t)
		}
	}
}

// addReadings gives columns to the loaded readings, to the levels that the
// instruments ask for, and to the samples.
func (n *nodes) addReadings(refs []tape.Ref) []tape.Ref {
	m := n.model
	for _, p := range m.Points {
		refs = append(refs, p.Loaded)
	}
	for i, p := range m.Points {
		at := -1
		switch {
		case p.Levelled && p.Level == p.Loaded:
			at = i
		case p.Levelled:
			at = len(refs) - n.points
			refs = append(refs, p.Level)
		}
		n.levels = append(n.levels, at)
	}
	n.samples = len(refs) - n.points
	for _, s := range m.Samples {
		refs = append(refs, s.Loaded)
	}
	return refs
}

// addFindings gives the findings their columns; those that are one node, such
// as a regulator's at conditions that do not touch it, share one.
func (n *nodes) addFindings(refs []tape.Ref) []tape.Ref {
	column := map[tape.Ref]int{}
	for i, f := range n.model.Findings {
		if _, there := column[f.Node]; !there {
			column[f.Node] = len(n.findings)
			n.findings = append(n.findings, i)
			refs = append(refs, f.Node)
		}
		n.happenAt = append(n.happenAt, column[f.Node])
	}
	return refs
}

// trimColumn is the first column of the k-th trim.
func (n *nodes) trimColumn(k int) int { return len(n.outputs) + 3*k }

// allOutputs are the indices of every output of a model.
func allOutputs(m *build.Model) []int {
	all := make([]int, len(m.Outputs))
	for i := range all {
		all[i] = i
	}
	return all
}

// allTargets are the indices of every target of a build.
func allTargets(m *build.Model) []int {
	all := make([]int, len(m.Build.Targets))
	for i := range all {
		all[i] = i
	}
	return all
}

// columns are a worker's own memory: the inputs and results of one block.
type columns struct {
	frame   *tape.Frame
	in, out [][]float64
}

func (n *nodes) newColumns(width int) *columns {
	c := &columns{frame: n.program.NewFrame(width)}
	c.in = make([][]float64, len(n.model.Inputs))
	for _, i := range n.program.Inputs() {
		c.in[i] = make([]float64, width)
	}
	c.out = make([][]float64, n.count)
	for i := range c.out {
		c.out[i] = make([]float64, width)
	}
	return c
}

// cut shortens every column to the first width lanes.
func (c *columns) cut(width int) (in, out [][]float64) {
	return cut(c.in, width), cut(c.out, width)
}

// nominal evaluates every column with each input at its centre.
func (n *nodes) nominal() []float64 {
	c := n.newColumns(1)
	for _, i := range n.program.Inputs() {
		c.in[i][0] = n.model.Inputs[i].Centre
	}
	n.program.Values(c.out, c.in, c.frame)
	values := make([]float64, n.count)
	for i := range values {
		values[i] = c.out[i][0]
	}
	return values
}

// reached says whether a trim whose ends read low and high, less the value
// wanted, can be brought to it. NaN cannot.
func reached(low, high float64) bool { return low*high <= 0 }

// shortSide says at which end a trim that does not reach comes nearest: -1 at
// setting 0, +1 at setting 1.
func shortSide(low, high float64) int {
	if math.Abs(low) < math.Abs(high) {
		return -1
	}
	return 1
}
