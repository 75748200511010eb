package explain

import (
	"context"
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"

	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
)

// enoughUnits is how many units a batch must have before it is judged.
const enoughUnits = 4

// significance is that of a remark on one point of a batch. It is divided by the
// number of points read (Bonferroni), so that of batches in which nothing is
// wrong one in twenty has a remark of each sort.
const significance = 0.05

// together says what the units say together, and what is learned of the lots;
// nil of too few. Accused units are left out, unless most are: then it is the
// batch that is not as planned.
func (x *explainer) together(r *Review, all [][]float64) *learned {
	g := x.gather(r, all)
	r.Batch.Counted = len(g.units)
	if len(g.units) < enoughUnits {
		r.Batch.Why = fmt.Sprintf("a batch is judged from %d units on; %d count", enoughUnits, len(g.units))
		return nil
	}
	x.within()
	for i := range x.sheet {
		if g.count[i] >= enoughUnits {
			g.read = append(g.read, i)
		}
	}
	for _, i := range g.read {
		r.Batch.Points = append(r.Batch.Points, x.batchPoint(i, g))
	}
	p := x.learn(g)
	x.reportLots(&r.Batch, p)
	return p
}

// again weighs the hypotheses of each unit with the lots as the batch has them,
// if it has narrowed any: what all units share is then no longer a surprise in
// one of them, and what one of them has alone is the more of one.
func (x *explainer) again(ctx context.Context, r *Review, p *learned, all [][]float64) error {
	if !p.narrow() {
		return nil
	}
	known, err := x.knowing(ctx, p.draws(x.seed, max(healthyUnits, x.units)), x.options)
	if err != nil {
		return err
	}
	for i := range r.Units {
		x.accuse(&r.Units[i], known, all[i])
	}
	return nil
}

// gathered is the units that count, in scale.
type gathered struct {
	numbers []float64
	units   [][]float64 // [unit][point]; NaN where nothing was read
	count   []int       // of each point
	mean    []float64
	read    []int // points with enough units
}

func (x *explainer) gather(r *Review, all [][]float64) *gathered {
	accused := 0
	for _, u := range r.Units {
		if u.Accused {
			accused++
		}
	}
	g := &gathered{count: make([]int, len(x.sheet)), mean: make([]float64, len(x.sheet))}
	most := 2*accused > len(all)
	for i, u := range r.Units {
		if !u.Accused || most {
			g.numbers, g.units = append(g.numbers, float64(u.Unit)), append(g.units, x.inScale(all[i]))
		}
	}
	for i := range g.mean {
		for _, y := range g.units {
			if !math.IsNaN(y[i]) {
				g.mean[i] += y[i]
				g.count[i]++
			}
		}
		g.mean[i] /= float64(g.count[i])
	}
	return g
}

// batches is how many units the simulated batches have from which the scatter
// within a batch is found.
const batchOf = 8

// apportion is how readings scatter, in scale.
type apportion struct {
	own  *mat.SymDense // of the units of one batch about its mean, instruments included
	lot  []float64     // variance of the batch's mean itself, instruments not included
	gain []float64     // standard deviation of each instrument's error that all units share
}

// within divides the healthy scatter into what the units of a batch share and
// what is each one's own, by simulated batches of 8 (analysis of variance: with
// mean squares between and within batches, E[MSB] = 8·lot + own). An
// instrument's error is in two parts: what is in proportion to the reading is
// its gain and the same for every unit of a batch, the rest of its uncertainty
// is each reading's own.
func (x *explainer) within() {
	if x.shares != nil {
		return
	}
	in := x.reader.Draw(scatter.Source{Seed: x.seed, Units: batchOf}, x.model.Inputs, healthyUnits)
	r := x.reader.Read(in, healthyUnits)
	s := sample{shown(x.model, r.Points), ways(r.Trims, healthyUnits)}
	points := x.scaled(s.points)
	n := len(points)
	a := &apportion{own: mat.NewSymDense(n, nil), lot: make([]float64, n), gain: make([]float64, n)}
	var batches float64
	between := make([]spread.Moments, n)
	for first := 0; first+batchOf <= healthyUnits; first += batchOf {
		var units []int
		for u := first; u < first+batchOf; u++ {
			if s.ways[u] == 0 {
				units = append(units, u)
			}
		}
		if len(units) < batchOf { // a trim ran out: its readings say nothing of lots
			continue
		}
		batches++
		mean := means(points, units)
		a.own.AddSym(a.own, products(points, units, mean))
		for i := range mean {
			between[i].AddColumn(mean[i:i+1], nil)
		}
	}
	a.own.ScaleSym(1/math.Max(1, batches*(batchOf-1)), a.own)
	for i := range n {
		a.lot[i] = math.Max(0, between[i].Variance()-a.own.At(i, i)/batchOf)
	}
	x.shares = a
	x.shareNoise(a)
}

// shareNoise adds the instruments' errors.
func (x *explainer) shareNoise(a *apportion) {
	noise := x.noise(x.healthy.points)
	rest := make([]float64, len(noise))
	for i, u := range noise {
		a.gain[i] = x.model.Points[i].Instrument.Accuracy * math.Abs(x.centre[i]) / math.Sqrt(3) / x.scale[i]
		u /= x.scale[i]
		rest[i] = math.Sqrt(math.Max(0, u*u-a.gain[i]*a.gain[i]))
	}
	addNoise(a.own, rest)
}

// batchPoint is one point over the units that count:
//
//	shift score = (mean − expected)/√(lot² + gain² + own²/n)
//	spread ratio = s/own,  (n − 1)·s²/own² ~ χ²(n − 1)
//
// and the least-squares line through the readings over the unit numbers, whose
// slope over its standard error is a t of n − 2 degrees of freedom.
func (x *explainer) batchPoint(i int, g *gathered) BatchPoint {
	n := float64(g.count[i])
	own := x.shares.own.At(i, i)
	shift := g.mean[i] / math.Sqrt(x.shares.lot[i]+x.shares.gain[i]*x.shares.gain[i]+own/n)
	var squares float64
	var numbers, values []float64
	for k, y := range g.units {
		if !math.IsNaN(y[i]) {
			squares += (y[i] - g.mean[i]) * (y[i] - g.mean[i])
			numbers, values = append(numbers, g.numbers[k]), append(values, y[i])
		}
	}
	slope, t, p := trend(numbers, values)
	b := BatchPoint{
		Point: x.sheet[i].Point, Mean: spread.Figure(g.mean[i]*x.scale[i] + x.centre[i]), ExpectedMean: spread.Figure(x.centre[i]),
		ShiftScore: spread.Figure(shift), SpreadRatio: spread.Figure(math.Sqrt(squares / (n - 1) / own)),
		SpreadP: spread.Figure(distuv.ChiSquared{K: n - 1}.Survival(squares / own)),
		Slope:   spread.Figure(slope * x.scale[i]), SlopeT: spread.Figure(t), SlopeP: spread.Figure(p),
		Remarks: []string{},
	}
	one := significance / float64(len(g.read))
	for _, remark := range []struct {
		p    float64
		word string
	}{{2 * distuv.UnitNormal.Survival(math.Abs(shift)), "shifted"}, {float64(b.SpreadP), "spread"}, {p, "trend"}} {
		if remark.p < one {
			b.Remarks = append(b.Remarks, remark.word)
		}
	}
	return b
}

// trend is the least-squares slope, its t and the chance of one as far from 0;
// of readings that are all the same there is no t.
func trend(x, y []float64) (slope, t, p float64) {
	n := float64(len(x))
	var mx, my, xx, xy, yy float64
	for i := range x {
		mx, my = mx+x[i]/n, my+y[i]/n
	}
	for i := range x {
		xx += (x[i] - mx) * (x[i] - mx)
		xy += (x[i] - mx) * (y[i] - my)
		yy += (y[i] - my) * (y[i] - my)
	}
	if !(xx > 0) {
		return math.NaN(), math.NaN(), math.NaN()
	}
	slope = xy / xx
	t = slope / math.Sqrt(math.Max(0, yy-slope*xy)/(n-2)/xx)
	if math.IsInf(t, 0) {
		return slope, t, 0
	}
	return slope, t, 2 * distuv.StudentsT{Mu: 0, Sigma: 1, Nu: n - 2}.Survival(math.Abs(t))
}
