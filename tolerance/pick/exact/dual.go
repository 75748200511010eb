package exact

import (
	"math"
	"slices"
)

// A part of a relaxation: some lines are settled and what they take is
// subtracted; the others are open.
type subproblem struct {
	open  []int     // lines still open
	base  float64   // money settled
	limit []float64 // what is left of each row
}

func (r *relaxation) whole() subproblem {
	open := make([]int, len(r.kept))
	for i := range open {
		open[i] = i
	}
	return subproblem{open, float64(r.p.Base), r.limit}
}

// settle is the part left when the lines given are settled to the kept options
// of choice (indexes into kept).
func (r *relaxation) settle(lines []int, choice []int) subproblem {
	s := subproblem{base: float64(r.p.Base), limit: slices.Clone(r.limit)}
	settled := make([]bool, len(r.kept))
	for _, i := range lines {
		settled[i] = true
		s.base += r.floor[i][choice[i]]
		for k, u := range r.takes(i, choice[i]) {
			s.limit[k] -= u
		}
	}
	for i := range r.kept {
		if !settled[i] {
			s.open = append(s.open, i)
		}
	}
	return s
}

// takes is what kept option o of line i uses of each row.
func (r *relaxation) takes(i, o int) []float64 {
	k := len(r.limit)
	return r.use[i][o*k : o*k+k]
}

// priced is the floor of an option plus what it uses of the rows at the prices.
func (r *relaxation) priced(i, o int, prices []float64) float64 {
	sum := r.floor[i][o]
	for k, u := range r.takes(i, o) {
		sum += prices[k] * u
	}
	return sum
}

// bound is the Lagrangian lower bound on the floors of any choice of the open
// lines that obeys the rows:
//
//	base - sum prices*limit + sum over lines of min over options of priced
//
// valid for every prices >= 0. best[i] becomes the option at the minimum.
func (r *relaxation) bound(s subproblem, prices []float64, best []int) float64 {
	sum := s.base
	for k, price := range prices {
		sum -= price * s.limit[k]
	}
	for _, i := range s.open {
		least := math.Inf(1)
		for o := range r.floor[i] {
			if v := r.priced(i, o, prices); v < least {
				least, best[i] = v, o
			}
		}
		sum += least
	}
	return sum
}

// ascend raises the bound by subgradient steps of Polyak's length toward the
// target, starting at and improving prices in place. It returns the best bound
// and calls visit, when not nil, with the choice at each step.
func (r *relaxation) ascend(s subproblem, prices []float64, target float64, steps int, visit func(best []int)) float64 {
	best := make([]int, len(r.kept))
	at := slices.Clone(prices)
	slope := make([]float64, len(prices))
	top, length, idle := math.Inf(-1), 1.0, 0
	for range steps {
		value := r.bound(s, at, best)
		if visit != nil {
			visit(best)
		}
		idle++
		if value > top {
			if value > top+1e-4*(target-top) {
				idle = 0
			}
			top = value
			copy(prices, at)
		}
		if idle >= 8 {
			length, idle = length/2, 0
			copy(at, prices)
			value = r.bound(s, at, best)
		}
		square := r.slope(s, at, best, slope)
		if square == 0 || length < 1e-4 || !(top < target) {
			break
		}
		step := length * max(target-value, 1e-9*math.Abs(target)) / square
		for k := range at {
			at[k] = max(0, at[k]+step*slope[k])
		}
	}
	return top
}

// slope fills the subgradient, how far the choice at the minimum breaks each
// row, with directions that lead below a zero price left out; it returns the
// squared length.
func (r *relaxation) slope(s subproblem, prices []float64, best []int, dst []float64) float64 {
	for k := range dst {
		dst[k] = -s.limit[k]
	}
	for _, i := range s.open {
		for k, u := range r.takes(i, best[i]) {
			dst[k] += u
		}
	}
	square := 0.0
	for k := range dst {
		if prices[k] == 0 && dst[k] < 0 {
			dst[k] = 0
		}
		square += dst[k] * dst[k]
	}
	return square
}

// rounding is what a bound at these prices may be too high by.
func (r *relaxation) rounding(prices []float64) float64 {
	sum := math.Abs(float64(r.p.Base))
	for k, price := range prices {
		sum += price * math.Abs(r.limit[k])
	}
	for i := range r.kept {
		most := 0.0
		for o := range r.floor[i] {
			size := math.Abs(r.floor[i][o])
			for k, u := range r.takes(i, o) {
				size += prices[k] * math.Abs(u)
			}
			most = max(most, size)
		}
		sum += most
	}
	return 1e-12 * sum
}

// dearest is the greatest sum of floors of any choice.
func (r *relaxation) dearest() float64 {
	sum := float64(r.p.Base)
	for i := range r.floor {
		sum += slices.Max(r.floor[i])
	}
	return sum
}

// peg leaves out every option that no choice within the ceiling can hold: the
// bound with that option forced is above it. It returns the options left, as
// the problem's indexes, and how many went; a line left empty means that no
// choice is within the ceiling at all.
func (r *relaxation) peg(prices []float64, ceiling float64) ([][]int, int) {
	best := make([]int, len(r.kept))
	value := r.bound(r.whole(), prices, best) - r.rounding(prices)
	out, gone := make([][]int, len(r.kept)), 0
	for i, options := range r.kept {
		least := r.priced(i, best[i], prices)
		for o, j := range options {
			if value+r.priced(i, o, prices)-least > ceiling {
				gone++
				continue
			}
			out[i] = append(out[i], j)
		}
	}
	return out, gone
}
