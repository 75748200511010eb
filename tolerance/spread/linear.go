package spread

import (
	"cmp"
	"math"
	"slices"

	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/tape"
)

// Linear is a model's first-order picture: the value of some nodes with every
// input at its centre, and their slopes by every input, through the trims.
type Linear struct {
	Model  *build.Model
	Values []float64
	Slopes [][]float64 // [node][input], per unit of the input's column
}

// Linearise differentiates nodes of a model by all its inputs: one block, a
// direction in each lane.
func Linearise(m *build.Model, refs ...tape.Ref) *Linear {
	program := m.Graph.Program(refs...)
	used := program.Inputs()
	width := max(1, len(used))
	l := &Linear{Model: m, Values: make([]float64, len(refs)), Slopes: make([][]float64, len(refs))}
	in, din := make([][]float64, len(m.Inputs)), make([][]float64, len(m.Inputs))
	for lane, i := range used {
		in[i], din[i] = make([]float64, width), make([]float64, width)
		for j := range in[i] {
			in[i][j] = m.Inputs[i].Centre
		}
		din[i][lane] = 1
	}
	out, dout := make([][]float64, len(refs)), make([][]float64, len(refs))
	for k := range refs {
		out[k], dout[k] = make([]float64, width), make([]float64, width)
	}
	program.Tangents(out, dout, in, din, program.NewFrame(width))
	for k := range refs {
		l.Values[k] = out[k][0]
		l.Slopes[k] = make([]float64, len(m.Inputs))
		for lane, i := range used {
			l.Slopes[k][i] = dout[k][lane]
		}
	}
	return l
}

// Term is what one input adds to a node's variance: its own, and its share of
// what it has in common with the rest of its lot.
type Term struct {
	Input    int
	Variance float64
}

// Variance is the first-order variance of a node and its terms, with the
// correlation that lots bring (JCGM 100:2008, 5.2.2):
//
//	u² = Σ_i Σ_j c_i·u_i·c_j·u_j·r_ij
//
// with c the slope, u the standard deviation of an input's shape, and r_ij the
// product-moment correlation of two pieces of one lot.
func (l *Linear) Variance(node int) (float64, []Term) {
	var terms []Term
	var total float64
	own := make([]float64, len(l.Model.Inputs)) // c·u
	lots := map[int]float64{}
	for i, x := range l.Model.Inputs {
		own[i] = l.Slopes[node][i] * x.HalfWidth * math.Sqrt(scatter.Variance(x.Shape))
		if x.Lot >= 0 {
			lots[x.Lot] += own[i]
		}
	}
	for i, x := range l.Model.Inputs {
		if own[i] == 0 {
			continue
		}
		v := own[i] * own[i]
		if x.Lot >= 0 {
			v += own[i] * scatter.Correlation(x.Shape, x.Rho) * (lots[x.Lot] - own[i])
		}
		total += v
		terms = append(terms, Term{i, v})
	}
	slices.SortStableFunc(terms, func(a, b Term) int { return cmp.Compare(b.Variance, a.Variance) })
	return total, terms
}

// rootSumSquare fills in the first-order part of an output's report.
func (l *Linear) rootSumSquare(node int, o *OutputReport) {
	variance, terms := l.Variance(node)
	o.RootSumSquare.StandardUncertainty = Figure(math.Sqrt(math.Max(0, variance)))
	if math.IsNaN(variance) {
		o.RootSumSquare.Why = "the output has no derivative at its nominal value"
	}
	o.Contributions = []Contribution{}
	for _, t := range terms {
		x := l.Model.Inputs[t.Input]
		o.Contributions = append(o.Contributions, Contribution{
			Ref: x.Ref, Parameter: x.Parameter,
			Sensitivity: Figure(l.Slopes[node][t.Input] * x.PerUnit),
			Share:       Figure(t.Variance / variance),
		})
	}
}
