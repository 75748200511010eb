package explain

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"

	"batchwright/bom/part"
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
	"batchwright/tolerance/tape"
)

// lotLine is one lot of the model: what its pieces share in one parameter.
type lotLine struct {
	number int       // of the draws
	inputs []int     // of the model
	effect []float64 // on each reading, in scale, of one standard deviation of the lot
}

// learned is what the readings say of the lots: g, standard normal before, is
// after them normal about a mean with a covariance.
type learned struct {
	lots        []lotLine
	mean        *mat.VecDense
	cov         *mat.SymDense
	r           *mat.SymDense // of the batch's means about what the lots make them
	read        []int
	information *mat.SymDense // I + AᵀR⁻¹A
}

// lines are the lots that some reading feels, to first order. A lot's draw g is
// standard normal in the copula; what it does to a piece's z is taken as the
// straight line E[z·g_lot] = √ρ·E[z·g].
func (x *explainer) lines() []lotLine {
	if x.felt != nil {
		return x.felt
	}
	var refs []tape.Ref
	for _, p := range x.model.Points {
		refs = append(refs, p.Loaded)
	}
	l := spread.Linearise(x.model, refs...)
	at := map[int]int{}
	list := []lotLine{}
	for i, in := range x.model.Inputs {
		if in.Lot < 0 || !(in.Rho > 0) {
			continue
		}
		effect := make([]float64, len(refs))
		felt := false
		for k := range refs {
			effect[k] = l.Slopes[k][i] * in.HalfWidth * math.Sqrt(in.Rho) * alongNormal(in.Shape) / x.scale[k]
			felt = felt || math.Abs(effect[k]) > 1e-6
		}
		if !felt {
			continue
		}
		n, met := at[in.Lot]
		if !met {
			n = len(list)
			at[in.Lot] = n
			list = append(list, lotLine{number: in.Lot, effect: make([]float64, len(refs))})
		}
		list[n].inputs = append(list[n].inputs, i)
		for k := range effect {
			list[n].effect[k] += effect[k]
		}
	}
	x.felt = list
	return list
}

// alongNormal is E[z·g] of a deviation z = F⁻¹(Φ(g)): by Gauss-Legendre over
// ±8 standard deviations, in halves, since a shape may have a gap at 0.
func alongNormal(s part.Shape) float64 {
	f := func(g float64) float64 {
		return g * distuv.UnitNormal.Prob(g) * scatter.Quantile(shape(s), distuv.UnitNormal.CDF(g))
	}
	return quad.Fixed(f, -8, 0, 64, nil, 0) + quad.Fixed(f, 0, 8, 64, nil, 0)
}

// shape reads the zero value as what it stands for.
func shape(s part.Shape) part.Shape {
	if s == "" {
		return part.Normal
	}
	return s
}

// given is E[z] of a piece whose lot is at g: over what is its own,
//
//	∫ F⁻¹(Φ(√ρ·g + √(1−ρ)·e))·φ(e) de
func given(in build.Input, g float64) float64 {
	f := func(e float64) float64 {
		p := distuv.UnitNormal.CDF(math.Sqrt(in.Rho)*g + math.Sqrt(1-in.Rho)*e)
		return distuv.UnitNormal.Prob(e) * scatter.Quantile(shape(in.Shape), math.Min(1, math.Max(0, p)))
	}
	return quad.Fixed(f, -8, 0, 64, nil, 0) + quad.Fixed(f, 0, 8, 64, nil, 0)
}

// learn conditions the lots on the batch's means ȳ, which are normal about A·g
// with the covariance R = W/n + G of the units' own scatter and the instruments'
// gains (C. M. Bishop, Pattern Recognition and Machine Learning, 2.3.3; from
// memory):
//
//	Σ = (I + AᵀR⁻¹A)⁻¹,  mean = Σ·AᵀR⁻¹ȳ
//
// Where not every unit was read at every point, W_ij counts n_ij/(n_i·n_j) times,
// n_ij units being read at both.
func (x *explainer) learn(g *gathered) *learned {
	p := &learned{lots: x.lines(), read: g.read}
	n, m := len(g.read), len(p.lots)
	if m == 0 || n == 0 {
		return p
	}
	p.r = mat.NewSymDense(n, nil)
	y, a := mat.NewVecDense(n, nil), mat.NewDense(n, m, nil)
	for k, i := range g.read {
		y.SetVec(k, g.mean[i])
		for l, j := range g.read[:k+1] {
			p.r.SetSym(k, l, x.shares.own.At(i, j)*g.both(i, j)/float64(g.count[i]*g.count[j]))
		}
		p.r.SetSym(k, k, p.r.At(k, k)+x.shares.gain[i]*x.shares.gain[i])
		for l := range m {
			a.Set(k, l, p.lots[l].effect[i])
		}
	}
	p.solve(a, y)
	return p
}

// both is how many units were read at both of two points.
func (g *gathered) both(i, j int) float64 {
	var n float64
	for _, y := range g.units {
		if !math.IsNaN(y[i]) && !math.IsNaN(y[j]) {
			n++
		}
	}
	return n
}

// solve finds the lots' mean and covariance.
func (p *learned) solve(a *mat.Dense, y *mat.VecDense) {
	_, m := a.Dims()
	var chol, information mat.Cholesky
	if !chol.Factorize(p.r) {
		panic("explain: the units' own scatter has no inverse")
	}
	var ra, ata mat.Dense
	if err := chol.SolveTo(&ra, a); err != nil {
		panic("explain: " + err.Error())
	}
	ata.Mul(a.T(), &ra)
	precision := mat.NewSymDense(m, nil)
	for i := range m {
		for j := range i + 1 {
			precision.SetSym(i, j, (ata.At(i, j)+ata.At(j, i))/2)
		}
		precision.SetSym(i, i, precision.At(i, i)+1)
	}
	p.cov, p.mean = mat.NewSymDense(m, nil), mat.NewVecDense(m, nil)
	information.Factorize(precision)
	if err := information.InverseTo(p.cov); err != nil {
		panic("explain: " + err.Error())
	}
	var right mat.VecDense
	right.MulVec(ra.T(), y)
	p.mean.MulVec(p.cov, &right)
	p.information = precision
}

// A lot is reported where it is this many of its standard deviations off its
// centre, and the readings have narrowed it to this share of what it was.
const (
	off      = 2
	narrowed = 0.6
)

// narrow says whether the readings have narrowed any lot.
func (p *learned) narrow() bool {
	for k := range p.lots {
		if math.Sqrt(p.cov.At(k, k)) < narrowed {
			return true
		}
	}
	return false
}

// reportLots names the lots that are off, the furthest first, and pairs of
// which the readings see only the sum.
func (x *explainer) reportLots(b *Batch, p *learned) {
	if p.mean == nil {
		return
	}
	told := make([]bool, len(p.lots))
	for k := range p.lots {
		g, sd := p.mean.AtVec(k), math.Sqrt(p.cov.At(k, k))
		if math.Abs(g) > off*sd && sd < narrowed {
			told[k] = true
			b.Lots = append(b.Lots, x.lot(p.lots[k], g, sd))
		}
	}
	slices.SortStableFunc(b.Lots, func(p, q Lot) int {
		return cmp.Compare(math.Abs(float64(q.Deviation)), math.Abs(float64(p.Deviation)))
	})
	x.reportUnclear(b, p, told)
}

// lot reports one lot; the interval is of 95 %.
func (x *explainer) lot(l lotLine, g, sd float64) Lot {
	const z95 = 1.959963984540054
	in := x.model.Inputs[l.inputs[0]]
	name := x.lotName(l)
	factor, unit := x.shiftUnit(in)
	shift := func(g float64) spread.Figure { return spread.Figure(given(in, g) * in.HalfWidth * factor) }
	low, high := g-z95*sd, g+z95*sd
	from, to := shift(low), shift(high)
	return Lot{
		Refs: name.Refs, Parameter: name.Parameter,
		Deviation: spread.Figure(g), Deviation95: [2]spread.Figure{spread.Figure(low), spread.Figure(high)},
		Shift: shift(g), Interval: [2]spread.Figure{min(from, to), max(from, to)}, Unit: unit, Score: spread.Figure(g / sd),
	}
}

// lotName is the line's references and the parameter.
func (x *explainer) lotName(l lotLine) LotName {
	var refs []string
	for _, i := range l.inputs {
		refs = append(refs, x.model.Inputs[i].Ref)
	}
	return LotName{Refs: refs, Parameter: x.model.Inputs[l.inputs[0]].Parameter}
}

// shiftUnit is what a shift of an input is multiplied by and then in: per cent
// of a figure, ppm/K of a temperature coefficient, and per cent of the distance
// between a law's limits or of a coefficient with no other name.
func (x *explainer) shiftUnit(in build.Input) (float64, string) {
	for _, p := range x.model.Build.Parts() {
		if p.Ref != in.Ref {
			continue
		}
		if p.Parameter(in.Parameter) != nil && in.Centre != 0 {
			return 100 / in.Centre, "%"
		}
		if in.Parameter == "temperature" && !lawful(&p) {
			return 1e6, "ppm/K"
		}
	}
	if in.HalfWidth == 0 {
		return 0, "%"
	}
	return 100 / in.HalfWidth, "% of its limits"
}

// Two lots that do the same to the readings, but for so much, cannot be told
// apart.
const parallel = 0.95

// farthest is how far off a lot may be taken to be, in its standard deviations.
const farthest = 3

// reportUnclear finds pairs of lots that do the same to the readings and whose
// sum, each counted by how strongly the readings feel it, is off: two that the
// readings have not narrowed, or one that was reported and another that could
// have done it in its place:
//
//	u = (a_i·g_i ± a_j·g_j)/√(a_i² + a_j²),  a² = AᵀR⁻¹A
func (x *explainer) reportUnclear(b *Batch, p *learned, told []bool) {
	for i := range p.lots {
		for j := range i {
			ai, aj := math.Sqrt(p.information.At(i, i)-1), math.Sqrt(p.information.At(j, j)-1)
			cosine := p.information.At(i, j) / (ai * aj)
			if !(math.Abs(cosine) > parallel) || told[i] && !p.standsFor(i, j, ai, aj) || told[j] && !p.standsFor(j, i, aj, ai) {
				continue
			}
			size := math.Hypot(ai, aj)
			ui, uj := ai/size, math.Copysign(aj/size, cosine)
			mean := ui*p.mean.AtVec(i) + uj*p.mean.AtVec(j)
			sd := math.Sqrt(ui*ui*p.cov.At(i, i) + uj*uj*p.cov.At(j, j) + 2*ui*uj*p.cov.At(i, j))
			if math.Abs(mean) > off*sd && sd < narrowed {
				b.Unclear = append(b.Unclear, Unclear{
					Lots: [2]LotName{x.lotName(p.lots[j]), x.lotName(p.lots[i])}, Score: spread.Figure(mean / sd)})
			}
		}
	}
	slices.SortStableFunc(b.Unclear, func(p, q Unclear) int {
		return cmp.Compare(math.Abs(float64(q.Score)), math.Abs(float64(p.Score)))
	})
}

// standsFor says whether another lot could have done what is said of one: it
// was not narrowed and need not be off too far. The readings feel them by a and
// other.
func (p *learned) standsFor(lot, instead int, a, other float64) bool {
	return math.Sqrt(p.cov.At(instead, instead)) >= narrowed && math.Abs(p.mean.AtVec(lot))*a <= farthest*other
}
