package explain

import (
	"math"

	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// rival is how much less probable than the first a suspect may be and still be
// worth telling apart.
const rival = 1.0 / 3

// most is how many pairs of suspects a unit's review tells apart.
const most = 3

// enough is the distance in standard deviations at which one more reading tells
// two suspects apart.
const enough = 2

// guess is the relative error taken for a reading at what is no test point, whose
// instrument nobody knows.
const guess = 0.01

// tell says which further reading would tell the first suspect from those that
// are nearly as probable, or that predict the same.
func (x *explainer) tell(u *Unit, groups [][]int, read []int, probabilities []float64) {
	top := groups[0][0]
	if x.faults[top-1].class == Other {
		return
	}
	for n, g := range groups {
		for _, h := range g {
			if h == top || x.faults[h-1].class == Other || n > 0 && probabilities[h] < rival*probabilities[top] || probabilities[h] < least {
				continue
			}
			if len(u.Further) == most {
				return
			}
			u.Further = append(u.Further, x.further(top, h, read))
		}
	}
}

// readable are the dimensions that an instrument reads without cutting a wire.
var readable = map[quantity.Dimension]bool{quantity.Volt.Dimension: true, quantity.Hertz.Dimension: true}

// highest is the most that a bench meter reads, in volts (common practice, no
// source). Equations that know no supply promise more of a part that is open.
const highest = 1000

// guessed is what a hypothesis predicts of every output.
type guessed struct{ mean, sd []float64 }

// further finds the reading that tells two hypotheses apart best: an output
// that no reading taken already is, or a point not read yet. At another
// condition than the reference, which the bench has, only where none there does.
func (x *explainer) further(a, b int, read []int) Further {
	f := Further{Between: [2]string{x.faults[a-1].name(), x.faults[b-1].name()}}
	p, q := x.guess(a), x.guess(b)
	best, score := x.telling(p, q, func(o build.Output) bool { return o.Condition == 0 && !x.isRead(o, read) })
	if score < enough {
		best, score = x.telling(p, q, func(o build.Output) bool { return o.Condition != 0 })
	}
	if score < enough {
		f.Reading, f.Score = x.faults[a-1].remedy(), spread.Figure(math.NaN())
		return f
	}
	o := x.model.Outputs[best]
	f.Reading = o.Name.String() + " at " + x.model.Build.Conditions[o.Condition].Name
	f.Expect = &[2]spread.Figure{spread.Figure(p.mean[best]), spread.Figure(q.mean[best])}
	f.Unit, f.Score = o.Unit.Symbol, spread.Figure(score)
	return f
}

// telling is the output among some whose predictions are furthest apart, and
// how far in standard deviations.
func (x *explainer) telling(p, q guessed, among func(build.Output) bool) (best int, score float64) {
	for i, o := range x.model.Outputs {
		if o.ChangeFrom >= 0 || !readable[o.Unit.Dimension] || !among(o) {
			continue
		}
		largest := math.Max(math.Abs(p.mean[i]), math.Abs(q.mean[i]))
		if o.Unit.Dimension == quantity.Volt.Dimension && largest > highest {
			continue
		}
		noise := guess * largest
		s := math.Abs(p.mean[i]-q.mean[i]) / math.Sqrt(p.sd[i]*p.sd[i]+q.sd[i]*q.sd[i]+noise*noise)
		if s > score { // false for NaN
			best, score = i, s
		}
	}
	return best, score
}

// remedy is what tells when no reading does.
func (f *fault) remedy() string {
	switch f.class {
	case Range, Exchanged:
		return "read " + f.ref + " again"
	case NotTrimmed:
		return "do the trim " + f.ref + " again"
	case Family:
		return "read what is printed on " + f.ref
	}
	if f.words == doesNot {
		return "look for what keeps " + f.ref + " from oscillating"
	}
	return "measure " + f.ref + " out of circuit"
}

// isRead says whether an output is what a test point read already shows.
func (x *explainer) isRead(o build.Output, read []int) bool {
	if o.Condition != 0 {
		return false
	}
	for _, i := range read {
		if pointName(x.model.Points[i]) == o.Name.String() {
			return true
		}
	}
	return false
}

// guess simulates every output under a hypothesis; it is kept.
func (x *explainer) guess(h int) guessed {
	if g, known := x.guesses[h]; known {
		return g
	}
	f := x.faults[h-1]
	model, _ := x.at(f)
	reader := x.outputReader(model)
	r := reader.Read(reader.Draw(x.source(), f.faulted(model.Inputs), x.units), x.units)
	var g guessed
	for _, column := range r.Outputs {
		var m spread.Moments
		m.AddColumn(column, nil)
		g.mean, g.sd = append(g.mean, m.Mean()), append(g.sd, m.StandardDeviation())
	}
	x.guesses[h] = g
	return g
}

// outputReader reads every output of a model; it is kept. A build with a trim
// left alone has the same outputs in the same order.
func (x *explainer) outputReader(m *build.Model) *spread.Reader {
	if x.outputs[m] == nil {
		all := make([]int, len(m.Outputs))
		for i := range all {
			all[i] = i
		}
		x.outputs[m] = spread.NewReader(m, all...)
	}
	return x.outputs[m]
}
