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
	log   float64 // of its weight and of its height at the mean
	mean  []float64
	lower [][]float64 // Cholesky factor of its scale, by rows
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
	mean := make([]float64, p)
	for a, i := range read {
		mean[a] = n.mean[i]
		for b, j := range read[:a+1] {
			scale.SetSym(a, b, n.cov.At(i, j)*(freedom-2)/freedom)
		}
	}
	d := density{mean: mean, log: math.Inf(-1)}
	var chol mat.Cholesky
	if !chol.Factorize(scale) {
		return d
	}
	var lower mat.TriDense
	chol.LTo(&lower)
	for a := range p {
		row := make([]float64, a+1)
		for b := range row {
			row[b] = lower.At(a, b)
		}
		d.lower = append(d.lower, row)
	}
	above, _ := math.Lgamma(float64(freedom+p) / 2)
	below, _ := math.Lgamma(float64(freedom) / 2)
	d.log = math.Log(n.weight) + above - below - (float64(p)*math.Log(math.Pi*freedom)+chol.LogDet())/2
	return d
}

// logarithm is ln f(y); z is room for as many numbers as y has.
func (d *density) logarithm(y, z []float64) float64 {
	if d.lower == nil {
		return d.log
	}
	return d.log - float64(freedom+len(y))/2*math.Log1p(d.form(y, z)/freedom)
}

// form is (y−m)ᵀS⁻¹(y−m), as |L⁻¹(y−m)|² by forward substitution.
func (d *density) form(y, z []float64) float64 {
	var form float64
	for a, row := range d.lower {
		sum := y[a] - d.mean[a]
		for b, l := range row[:a] {
			sum -= l * z[b]
		}
		z[a] = sum / row[a]
		form += z[a] * z[a]
	}
	return form
}

// distance is the Mahalanobis distance √((y−m)ᵀΣ⁻¹(y−m)).
func (d *density) distance(y, z []float64) float64 {
	return math.Sqrt(d.form(y, z) * (freedom - 2) / freedom)
}

// absurd is where readings in scale are cut off, so that their squares are finite.
const absurd = 1e100

// logarithms are the logarithms of the likelihoods of readings, of which those
// at the scorer's points count, under each picture.
func (s *scorer) logarithms(readings []float64) []float64 {
	y, z := s.pick(readings), make([]float64, len(s.read))
	list := make([]float64, len(s.parts))
	for i, parts := range s.parts {
		terms := make([]float64, len(parts))
		for k := range parts {
			terms[k] = parts[k].logarithm(y, z)
		}
		list[i] = logSum(terms)
	}
	return list
}

// pick is the readings at the scorer's points.
func (s *scorer) pick(readings []float64) []float64 {
	y := make([]float64, len(s.read))
	for a, i := range s.read {
		y[a] = math.Max(-absurd, math.Min(absurd, readings[i]))
	}
	return y
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
