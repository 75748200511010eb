package explain

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
)

// picture is what a kind of unit reads: normal distributions, one for each way
// in which its trims end, since a trim that has run out leaves other readings
// than one that reached. Readings are counted from the healthy unit's means, in
// its standard deviations.
type picture struct {
	parts []normal
	mean  []float64 // over all
	cov   *mat.SymDense
}

// normal is one distribution of a picture.
type normal struct {
	weight float64
	mean   []float64
	cov    *mat.SymDense
}

// fewest is how many simulated units a way of ending needs for a distribution
// of its own; fewer are put with the rest.
const fewest = 12

// newPicture makes a picture of simulated readings [point][unit], already in
// scale; ways says of each unit how its trims ended, noise is the standard
// deviation of each instrument's error.
//
// A way of n units has the covariance
//
//	(S_own + ν·S_all)/(n − 1 + ν),  ν = points + 2
//
// with S_own its own sum of products and S_all the average within ways, so that
// few units do not make a narrow distribution.
func newPicture(points [][]float64, ways []int, noise []float64) *picture {
	units := members(ways)
	within := mat.NewSymDense(len(points), nil)
	sums := make([]*mat.SymDense, len(units))
	p := &picture{}
	for k, list := range units {
		mean := means(points, list)
		sums[k] = products(points, list, mean)
		within.AddSym(within, sums[k])
		p.parts = append(p.parts, normal{weight: float64(len(list)) / float64(len(ways)), mean: mean})
	}
	within.ScaleSym(1/math.Max(1, float64(len(ways)-len(units))), within)
	prior := float64(len(points) + 2)
	for k, list := range units {
		var cov mat.SymDense
		cov.ScaleSym(prior, within)
		cov.AddSym(&cov, sums[k])
		cov.ScaleSym(1/(float64(len(list)-1)+prior), &cov)
		p.parts[k].cov = &cov
		addNoise(&cov, noise)
	}
	p.overall()
	return p
}

// members sorts units by how their trims ended, the ways in the order of their
// numbers; ways with too few units are put together.
func members(ways []int) [][]int {
	by := map[int][]int{}
	var keys []int
	for i, w := range ways {
		if by[w] == nil {
			keys = append(keys, w)
		}
		by[w] = append(by[w], i)
	}
	slices.Sort(keys)
	var list [][]int
	var rest []int
	for _, k := range keys {
		if len(by[k]) >= fewest {
			list = append(list, by[k])
		} else {
			rest = append(rest, by[k]...)
		}
	}
	if len(rest) > 0 {
		list = append(list, rest)
	}
	return list
}

func means(points [][]float64, units []int) []float64 {
	mean := make([]float64, len(points))
	for i, column := range points {
		for _, k := range units {
			mean[i] += column[k]
		}
		mean[i] /= float64(len(units))
	}
	return mean
}

// products are the sums of products of deviations from a mean.
func products(points [][]float64, units []int, mean []float64) *mat.SymDense {
	s := mat.NewSymDense(len(points), nil)
	for i := range points {
		for j := range i + 1 {
			var sum float64
			for _, k := range units {
				sum += (points[i][k] - mean[i]) * (points[j][k] - mean[j])
			}
			s.SetSym(i, j, sum)
		}
	}
	return s
}

// grain is the least standard deviation of a reading, of the healthy unit's:
// it keeps a reading that neither scatters nor is read with an error from
// making a covariance singular.
const grain = 1e-5

// addNoise adds the instruments' errors to a covariance.
func addNoise(cov *mat.SymDense, noise []float64) {
	for i, u := range noise {
		cov.SetSym(i, i, cov.At(i, i)+u*u+grain*grain)
	}
}

// overall works out a picture's mean and covariance over all its parts.
func (p *picture) overall() {
	n := len(p.parts[0].mean)
	p.mean, p.cov = make([]float64, n), mat.NewSymDense(n, nil)
	for _, d := range p.parts {
		for i, m := range d.mean {
			p.mean[i] += d.weight * m
		}
	}
	for _, d := range p.parts {
		for i := range n {
			for j := range i + 1 {
				between := (d.mean[i] - p.mean[i]) * (d.mean[j] - p.mean[j])
				p.cov.SetSym(i, j, p.cov.At(i, j)+d.weight*(d.cov.At(i, j)+between))
			}
		}
	}
}

// apart is how far two pictures are from each other: the largest distance of
// their means, over all directions a in the space of readings, in the standard
// deviation of both together,
//
//	max_a |aᵀΔ|/√(aᵀ(Σ₁+Σ₂)a) = √(Δᵀ(Σ₁+Σ₂)⁻¹Δ)
func (p *picture) apart(q *picture) float64 {
	n := len(p.mean)
	var sum mat.SymDense
	sum.AddSym(p.cov, q.cov)
	difference := mat.NewVecDense(n, nil)
	for i := range n {
		difference.SetVec(i, p.mean[i]-q.mean[i])
	}
	return math.Sqrt(quadratic(&sum, difference))
}

// quadratic is xᵀA⁻¹x for a covariance A.
func quadratic(a *mat.SymDense, x *mat.VecDense) float64 {
	var chol mat.Cholesky
	var y mat.VecDense
	if !chol.Factorize(a) || chol.SolveVecTo(&y, x) != nil {
		return math.Inf(1)
	}
	return mat.Dot(x, &y)
}
