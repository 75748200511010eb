package explain

import (
	"context"
	"math/rand/v2"

	"gonum.org/v1/gonum/mat"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// yieldUnits is how many units are simulated for what the rest should come to.
const yieldUnits = 10_000

// rest says what the units not read yet should come to: simulated with the lots
// as the readings have them, and without. Both are drawn alike.
func (x *explainer) rest(ctx context.Context, r *Review, p *learned) error {
	units := x.model.Build.Units - len(r.Units)
	if units <= 0 {
		return nil
	}
	m := inBatchesOf(x.model, units)
	o := spread.Options{Seed: x.seed, Units: x.options.Yield}
	if o.Units <= 0 {
		o.Units = yieldUnits
	}
	planned, err := spread.Judge(ctx, m, o)
	if err != nil {
		return err
	}
	o.Lots = p.draws(x.seed, (o.Units+units-1)/units)
	known, err := spread.Judge(ctx, m, o)
	if err != nil {
		return err
	}
	rest := &Rest{Units: units, Share: known.Yield.UnitShare, Interval: known.Yield.Interval,
		Planned: planned.Yield.UnitShare, PlannedInterval: planned.Yield.Interval, Targets: []RestTarget{}}
	for t, target := range m.Build.Targets {
		rest.Targets = append(rest.Targets, RestTarget{target.Name, known.Targets[t].Share, planned.Targets[t].Share})
	}
	r.Batch.Rest = rest
	return nil
}

// inBatchesOf is a model of the same build in batches of another size.
func inBatchesOf(m *build.Model, units int) *build.Model {
	b, out := *m.Build, *m
	b.Units = units
	out.Build = &b
	return &out
}

// draws are the lots of simulated batches, drawn from what was learned. A lot
// that no reading feels is drawn as ever.
func (p *learned) draws(seed uint64, batches int) func(lot, batch int) (float64, bool) {
	var chol mat.Cholesky
	if !chol.Factorize(p.cov) {
		panic("explain: lots without a covariance")
	}
	var lower mat.TriDense
	chol.LTo(&lower)
	column := map[int]int{}
	for k, l := range p.lots {
		column[l.number] = k
	}
	random := rand.New(rand.NewPCG(seed, 0x6C6F7473))
	table := make([]float64, 0, batches*len(p.lots))
	z, g := mat.NewVecDense(len(p.lots), nil), mat.NewVecDense(len(p.lots), nil)
	for range batches {
		for k := range p.lots {
			z.SetVec(k, random.NormFloat64())
		}
		g.MulVec(&lower, z)
		g.AddVec(g, p.mean)
		table = append(table, g.RawVector().Data...)
	}
	return func(lot, batch int) (float64, bool) {
		k, known := column[lot]
		if !known || batch >= batches {
			return 0, false
		}
		return table[batch*len(p.lots)+k], true
	}
}
