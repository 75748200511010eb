package spread

import (
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/tape"
)

// Reader simulates what the bench reads: every test point of a model with its
// instrument connected, without the instrument's error, and some outputs
// besides. It is safe for concurrent use.
type Reader struct {
	model   *build.Model
	outputs int
	program *tape.Program
}

// NewReader compiles a model's test points and some of its outputs.
func NewReader(m *build.Model, outputs ...int) *Reader {
	var refs []tape.Ref
	for _, p := range m.Points {
		refs = append(refs, p.Loaded)
	}
	for _, i := range outputs {
		refs = append(refs, m.Outputs[i].Node)
	}
	for _, t := range m.Trims {
		refs = append(refs, t.AtLow, t.AtHigh)
	}
	return &Reader{m, len(outputs), m.Graph.Program(refs...)}
}

// Inputs are the model's inputs that a reading, output or trim follows from.
func (r *Reader) Inputs() []int { return r.program.Inputs() }

// Readings are columns of simulated units.
type Readings struct {
	Points  [][]float64 // [as Model.Points][unit]
	Outputs [][]float64 // [as asked for][unit]
	Trims   [][]int8    // [as Model.Trims][unit]: 0 where it reached, else the end it was left at, -1 or +1
}

// Draw fills a column of units for every input that is needed; the others are
// nil. The inputs are the model's or stand in their places: other parts in other
// columns.
func (r *Reader) Draw(source scatter.Source, inputs []build.Input, units int) [][]float64 {
	in := make([][]float64, len(inputs))
	for _, i := range r.program.Inputs() {
		in[i] = make([]float64, units)
		source.Fill(in[i], inputs[i].Column, 0)
	}
	return in
}

// Read reads units whose inputs were drawn. What has no finite value is as the
// equations leave it.
func (r *Reader) Read(in [][]float64, units int) Readings {
	points := len(r.model.Points)
	all := block(points+r.outputs+2*len(r.model.Trims), units)
	frame := r.program.NewFrame(lanes)
	for first := 0; first < units; first += lanes {
		last := min(first+lanes, units)
		r.program.Values(stretch(all, first, last), stretch(in, first, last), frame)
	}
	return Readings{
		Points:  all[:points],
		Outputs: all[points : points+r.outputs],
		Trims:   ends(all[points+r.outputs:], units),
	}
}

// ends says of each trim, from its columns at low and at high, where it was
// left.
func ends(columns [][]float64, units int) [][]int8 {
	var list [][]int8
	for k := 0; k < len(columns); k += 2 {
		low, high := columns[k], columns[k+1]
		left := make([]int8, units)
		for i := range left {
			if !reached(low[i], high[i]) {
				left[i] = int8(shortSide(low[i], high[i]))
			}
		}
		list = append(list, left)
	}
	return list
}

// stretch is part of every column.
func stretch(columns [][]float64, first, last int) [][]float64 {
	out := make([][]float64, len(columns))
	for i, c := range columns {
		if c != nil {
			out[i] = c[first:last]
		}
	}
	return out
}
