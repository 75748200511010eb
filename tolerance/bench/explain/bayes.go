package explain

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// freedom are the degrees of freedom of the distribution that readings are
// taken to have about their mean. With ν = 8 a reading five standard deviations
// off is some thousand times likelier than a normal one would have it, so that
// one absurd reading does not decide alone; two or three do (a choice, no source).
const freedom = 8

// scorer finds how likely the readings at some points are under each of several
// pictures.
type scorer struct {
	read  []int // points that were read
	parts [][]density
}

// density is a multivariate t over the points that were read.
type density struct {
	log  float64 // of its weight and of its height at the mean
	mean *mat.VecDense
	chol mat.Cholesky
}

// newScorer prepares pictures for readings at some of their points.
func newScorer(pictures []*picture, read []int) *scorer {
	s := &scorer{read: read, parts: make([][]density, len(pictures))}
	for i, p := range pictures {
		for _, d := range p.parts {
			s.parts[i] = append(s.parts[i], newDensity(d, read))
		}
	}
	return s
}

// newDensity is the multivariate t of a normal's mean and covariance (S. Kotz
// and S. Nadarajah, Multivariate t Distributions and Their Applications, 2004,
// 1.1; from memory):
//
//	f(y) = Γ((ν+p)/2)/(Γ(ν/2)·√|πνS|)·(1 + (y−m)ᵀS⁻¹(y−m)/ν)^(−(ν+p)/2),  S = Σ·(ν−2)/ν
func newDensity(n normal, read []int) density {
	p := len(read)
	scale := mat.NewSymDense(p, nil)
	mean := mat.NewVecDense(p, nil)
	for a, i := range read {
		mean.SetVec(a, n.mean[i])
		for b, j := range read[:a+1] {
			scale.SetSym(a, b, n.cov.At(i, j)*(freedom-2)/freedom)
		}
	}
	d := density{mean: mean}
	if !d.chol.Factorize(scale) {
		d.log = math.Inf(-1)
		return d
	}
	above, _ := math.Lgamma(float64(freedom+p) / 2)
	below, _ := math.Lgamma(float64(freedom) / 2)
	d.log = math.Log(n.weight) + above - below - (float64(p)*math.Log(math.Pi*freedom)+d.chol.LogDet())/2
	return d
}

// logarithm is ln f(y).
func (d *density) logarithm(y *mat.VecDense) float64 {
	if math.IsInf(d.log, -1) {
		return d.log
	}
	var x, z mat.VecDense
	x.SubVec(y, d.mean)
	if d.chol.SolveVecTo(&z, &x) != nil {
		return math.Inf(-1)
	}
	return d.log - float64(freedom+y.Len())/2*math.Log1p(mat.Dot(&x, &z)/freedom)
}

// logarithms are the logarithms of the likelihoods of readings, of which those
// at the scorer's points count, under each picture.
func (s *scorer) logarithms(readings []float64) []float64 {
	y := mat.NewVecDense(len(s.read), nil)
	for a, i := range s.read {
		y.SetVec(a, readings[i])
	}
	list := make([]float64, len(s.parts))
	for i, parts := range s.parts {
		terms := make([]float64, len(parts))
		for k := range parts {
			terms[k] = parts[k].logarithm(y)
		}
		list[i] = logSum(terms)
	}
	return list
}

// logSum is ln Σ e^x.
func logSum(x []float64) float64 {
	top := math.Inf(-1)
	for _, v := range x {
		top = math.Max(top, v)
	}
	if math.IsInf(top, -1) {
		return top
	}
	var sum float64
	for _, v := range x {
		sum += math.Exp(v - top)
	}
	return top + math.Log(sum)
}

// posterior is Bayes' theorem, P(h|y) = P(h)·f(y|h)/Σ P(k)·f(y|k).
func posterior(prior, logarithms []float64) []float64 {
	x := make([]float64, len(prior))
	for i := range x {
		x[i] = math.Log(prior[i]) + logarithms[i]
	}
	all := logSum(x)
	for i := range x {
		x[i] = math.Exp(x[i] - all)
	}
	return x
}
