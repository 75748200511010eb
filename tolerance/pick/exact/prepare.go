package exact

import "slices"

// Steps of the ascent on the whole problem and on a part of it, and how often
// options are left out and the prices found anew.
const (
	wholeSteps = 300
	partSteps  = 60
	rounds     = 6
)

// prepare leaves out what no choice within the ceiling can hold and lays out
// the rest for the search. It returns no bank when nothing is left, and how
// many options went.
func (s *search) prepare(kept [][]int, ceiling int64) (*bank, int) {
	pegged := 0
	for range rounds {
		r := s.p.relax(kept)
		target := min(float64(ceiling), r.dearest())
		prices := make([]float64, len(r.limit))
		r.ascend(r.whole(), prices, target+1, wholeSteps, nil)
		left, gone := r.peg(prices, target)
		pegged += gone
		if slices.ContainsFunc(left, func(o []int) bool { return len(o) == 0 }) {
			return nil, pegged
		}
		kept = left
		if gone == 0 {
			return newBank(r, s.vectors(r, prices, target)), pegged
		}
	}
	r := s.p.relax(kept)
	prices := make([]float64, len(r.limit))
	target := min(float64(ceiling), r.dearest())
	r.ascend(r.whole(), prices, target+1, wholeSteps, nil)
	return newBank(r, s.vectors(r, prices, target)), pegged
}

// vectors are the prices the search bounds with: the best for the whole
// problem, and the best for parts of it, with the first lines settled as good
// choices settle them. Different parts are tight in different rows.
func (s *search) vectors(r *relaxation, prices []float64, target float64) [][]float64 {
	if len(prices) == 0 {
		return nil
	}
	order := r.order(prices)
	best := make([]int, len(order))
	r.bound(r.whole(), prices, best)
	out := [][]float64{prices}
	add := func(choice []int) {
		for _, quarter := range [...]int{1, 2, 3} {
			lines := order[:len(order)*quarter/4]
			if len(lines) == 0 {
				continue
			}
			v := slices.Clone(prices)
			r.ascend(r.settle(lines, choice), v, target+1, partSteps, nil)
			out = append(out, v)
		}
	}
	add(best)
	for _, k := range s.pool[:min(len(s.pool), 3)] {
		if choice, ok := inKept(r.kept, k.choice); ok {
			add(choice)
		}
	}
	return out
}

// inKept turns the problem's indexes into kept ones.
func inKept(kept [][]int, choice []int) ([]int, bool) {
	out := make([]int, len(choice))
	for i, j := range choice {
		o, ok := slices.BinarySearch(kept[i], j)
		if !ok {
			return nil, false
		}
		out[i] = o
	}
	return out, true
}
