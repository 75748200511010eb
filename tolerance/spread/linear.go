package spread

import (
	"cmp"
	"math"
	"slices"

	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/tape"
)

// Linear is a first-order picture: the value of some nodes with every input at
// its centre, and their slopes by every input that scatters, through the trims.
type Linear struct {
	Inputs []build.Input
	Values []float64
	Slopes [][]float64 // [node][input], per unit of the input's column; 0 by one that does not scatter
}

// Linearise differentiates nodes of a model at its inputs' centres.
func Linearise(m *build.Model, refs ...tape.Ref) *Linear {
	return NewDifferentiator(m, refs...).At(m.Inputs)
}

// Differentiator differentiates nodes of a model at one place after another.
// It is not safe for concurrent use.
type Differentiator struct {
	program            *tape.Program
	frame              *tape.Frame
	used               []int
	in, din, out, dout [][]float64
}

// NewDifferentiator compiles nodes of a model.
func NewDifferentiator(m *build.Model, refs ...tape.Ref) *Differentiator {
	return differentiator(m.Graph.Program(refs...), len(m.Inputs), len(refs))
}

// differentiator differentiates a program's outputs.
func differentiator(p *tape.Program, inputs, outputs int) *Differentiator {
	d := &Differentiator{program: p, used: p.Inputs()}
	width := max(1, len(d.used))
	d.frame = p.NewFrame(width)
	d.in, d.din = make([][]float64, inputs), make([][]float64, inputs)
	for _, i := range d.used {
		d.in[i], d.din[i] = make([]float64, width), make([]float64, width)
	}
	d.out, d.dout = block(outputs, width), block(outputs, width)
	return d
}

func block(columns, width int) [][]float64 {
	b := make([][]float64, columns)
	for i := range b {
		b[i] = make([]float64, width)
	}
	return b
}

// At differentiates about the centres of the inputs, which are the model's or
// stand in their places: one block, a direction in each lane.
func (d *Differentiator) At(inputs []build.Input) *Linear {
	var free []int
	for _, i := range d.used {
		if inputs[i].HalfWidth > 0 {
			free = append(free, i)
		}
	}
	width := max(1, len(free))
	for _, i := range d.used {
		for lane := range width {
			d.in[i][lane], d.din[i][lane] = inputs[i].Centre, 0
		}
	}
	for lane, i := range free {
		d.din[i][lane] = 1
	}
	d.program.Gradient(cut(d.out, width), cut(d.dout, width), cut(d.in, width), cut(d.din, width), d.frame)
	l := &Linear{Inputs: inputs, Values: make([]float64, len(d.out)), Slopes: block(len(d.out), len(inputs))}
	for k := range d.out {
		l.Values[k] = d.out[k][0]
		for lane, i := range free {
			l.Slopes[k][i] = d.dout[k][lane]
		}
	}
	return l
}

// cut shortens columns to their first width lanes.
func cut(columns [][]float64, width int) [][]float64 {
	short := make([][]float64, len(columns))
	for i, c := range columns {
		if c != nil {
			short[i] = c[:width]
		}
	}
	return short
}

// Term is what one input adds to a node's variance: its own, and its share of
// what it has in common with the rest of its lot.
type Term struct {
	Input    int
	Variance float64
}

// Terms are what each input adds to a node's first-order variance, with the
// correlation that lots bring (JCGM 100:2008, 5.2.2):
//
//	u² = Σ_i Σ_j c_i·u_i·c_j·u_j·r_ij
//
// with c the slope, u the standard deviation of an input's shape, and r_ij the
// product-moment correlation of two pieces of one lot. Their sum is the variance.
func (l *Linear) Terms(node int) []Term {
	var terms []Term
	lots := map[int]float64{}
	for i, x := range l.Inputs {
		own := l.Slopes[node][i] * x.HalfWidth * math.Sqrt(scatter.Variance(x.Shape)) // c·u
		if own == 0 {
			continue
		}
		terms = append(terms, Term{i, own})
		if x.Lot >= 0 {
			lots[x.Lot] += own
		}
	}
	for k, t := range terms {
		x := l.Inputs[t.Input]
		own := t.Variance
		terms[k].Variance = own * own
		if x.Lot >= 0 {
			terms[k].Variance += own * x.Common * (lots[x.Lot] - own)
		}
	}
	return terms
}

// rootSumSquare fills in the first-order part of an output's report.
func (l *Linear) rootSumSquare(node int, o *OutputReport) {
	terms := l.Terms(node)
	var variance float64
	for _, t := range terms {
		variance += t.Variance
	}
	slices.SortStableFunc(terms, func(a, b Term) int { return cmp.Compare(b.Variance, a.Variance) })
	o.RootSumSquare.StandardUncertainty = Figure(math.Sqrt(math.Max(0, variance)))
	if math.IsNaN(variance) {
		o.RootSumSquare.Why = "the output has no derivative at its nominal value"
	}
	o.Contributions = []Contribution{}
	for _, t := range terms {
		x := l.Inputs[t.Input]
		o.Contributions = append(o.Contributions, Contribution{
			Ref: x.Ref, Parameter: x.Parameter,
			Sensitivity: Figure(l.Slopes[node][t.Input]),
			Share:       Figure(t.Variance / variance),
		})
	}
}
