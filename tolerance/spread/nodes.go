// Package spread says how a build's outputs scatter: nominal, worst case, root
// sum square and by simulation in whole batches, with the trims solved again
// for every unit, what contributes, and which share of the units is good.
package spread

import (
	"math"

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
	outputs  []int       // the first of Model.Outputs in each column
	columnOf map[int]int // from an index of Model.Outputs
	trims    int         // first column of the trims: setting, at low, at high for each
	points   int         // first column of the loaded readings
	count    int
}

// newNodes compiles the outputs wanted, every trim and, with points, every
// reading.
func newNodes(m *build.Model, outputs []int, points bool) *nodes {
	n := &nodes{model: m, columnOf: map[int]int{}}
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
	n.trims = len(refs)
	for _, t := range m.Trims {
		refs = append(refs, t.Setting, t.AtLow, t.AtHigh)
	}
	n.points = len(refs)
	if points {
		for _, p := range m.Points {
			refs = append(refs, p.Loaded)
		}
	}
	n.count = len(refs)
	n.program = m.Graph.Program(refs...)
	return n
}

// allOutputs are the indices of every output of a model.
func allOutputs(m *build.Model) []int {
	all := make([]int, len(m.Outputs))
	for i := range all {
		all[i] = i
	}
	return all
}

// targetOutputs are the indices of the outputs that targets judge.
func targetOutputs(m *build.Model) []int {
	var list []int
	seen := map[int]bool{}
	for _, t := range m.Targets {
		for _, i := range t.Outputs {
			if !seen[i] {
				seen[i] = true
				list = append(list, i)
			}
		}
	}
	return list
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
