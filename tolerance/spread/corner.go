package spread

import (
	"fmt"
	"math"
	"slices"

	"batchwright/tolerance/build"
	"batchwright/tolerance/tape"
)

// everyCorner is the most inputs for which every corner is tried.
const everyCorner = 12

// search looks for the extremes of one node over every z in [-1, 1], each on
// its own, with the trims solved again at each point. A point at which a trim
// does not reach is no worst case: it is outside the search.
type search struct {
	model   *build.Model
	program *tape.Program
	slopes  *Differentiator // of the node, and of each trim's ends
	trims   int             // whose ends follow the node in the program's outputs
	kinks   []kink
	free    []int // inputs that scatter
	columns *columns
	centre  picture
	other   *picture // a second start, made when it is wanted
	bent    []point  // where an absolute value's argument is zero; nil: not looked for yet
	visited []point  // corners gone to in this direction
	evals   int
}

// point is a place in the search: z of each free input.
type point []float64

// newSearch prepares the search of a node that depends on some trims.
func newSearch(m *build.Model, node tape.Ref, trims []int) *search {
	refs := []tape.Ref{node}
	for _, t := range trims {
		refs = append(refs, m.Trims[t].AtLow, m.Trims[t].AtHigh)
	}
	var kinks []kink
	for _, k := range m.Graph.Kinks(node) {
		bend := kink{len(refs), -1}
		refs = append(refs, k.A)
		if k.B != tape.NoRef {
			bend.b = len(refs)
			refs = append(refs, k.B)
		}
		kinks = append(kinks, bend)
	}
	n := &nodes{model: m, program: m.Graph.Program(refs...), count: len(refs)}
	s := &search{model: m, program: n.program, slopes: differentiator(n.program, len(m.Inputs), len(refs)), trims: len(trims), kinks: kinks, columns: n.newColumns(lanes)}
	for _, i := range n.program.Inputs() {
		if m.Inputs[i].HalfWidth > 0 {
			s.free = append(s.free, i)
		}
	}
	s.centre = s.picture(make(point, len(s.free)))
	return s
}

// evaluate computes the node at some points, at most lanes of them; NaN where
// a trim does not reach.
func (s *search) evaluate(points []point) []float64 {
	out := s.values(points)
	for t := range s.trims {
		for lane := range points {
			if !reached(out[1+2*t][lane], out[2+2*t][lane]) {
				out[0][lane] = math.NaN()
			}
		}
	}
	return slices.Clone(out[0])
}

// values computes the program's outputs at some points.
func (s *search) values(points []point) [][]float64 {
	in, out := s.columns.cut(len(points))
	for _, i := range s.program.Inputs() {
		for lane := range points {
			in[i][lane] = s.model.Inputs[i].Centre
		}
	}
	for k, i := range s.free {
		x := s.model.Inputs[i]
		for lane, p := range points {
			in[i][lane] = x.Centre + x.HalfWidth*p[k]
		}
	}
	s.program.Values(out, in, s.columns.frame)
	s.evals += len(points)
	return out
}

// extreme is the best point found in one direction.
type extreme struct {
	value float64
	at    point
}

// better says whether v lies further in the direction than the best so far.
func (e extreme) better(v, direction float64) bool {
	return !math.IsNaN(v) && (e.at == nil || direction*(v-e.value) > 1e-12*math.Abs(e.value))
}

// take keeps the better of two.
func (e extreme) take(o extreme, direction float64) extreme {
	if o.at != nil && e.better(o.value, direction) {
		return o
	}
	return e
}

// run looks for the extreme in a direction, +1 or -1.
func (s *search) run(direction float64) extreme {
	best := extreme{}
	if len(s.free) <= everyCorner {
		best = s.corners(direction)
	}
	s.visited = nil
	if len(s.free) == 0 {
		return s.best([]point{{}}, direction)
	}
	top, bent := s.ascend(s.centre, direction)
	best = best.take(top, direction)
	if bent || top.at == nil {
		top, _ = s.ascend(s.elsewhere(), direction)
		best = best.take(top, direction)
	}
	for _, at := range s.zeros() {
		best = best.take(s.best([]point{at}, direction), direction)
	}
	return s.climb(best, direction)
}

// corners tries every corner.
func (s *search) corners(direction float64) extreme {
	best := extreme{}
	total := 1 << len(s.free)
	for first := 0; first < total; first += lanes {
		block := make([]point, min(lanes, total-first))
		for i := range block {
			block[i] = make(point, len(s.free))
			for k := range s.free {
				block[i][k] = float64((first+i)>>k&1)*2 - 1
			}
		}
		best = best.take(s.best(block, direction), direction)
	}
	return best
}

// best evaluates points and keeps the best.
func (s *search) best(points []point, direction float64) extreme {
	best := extreme{}
	for i, v := range s.evaluate(points) {
		if best.better(v, direction) {
			best = extreme{v, points[i]}
		}
	}
	return best
}

// searched says how the search went.
func (s *search) searched() string {
	if len(s.free) <= everyCorner {
		return fmt.Sprintf("every one of %d corners, then along coordinates; attained, %d evaluations", 1<<len(s.free), s.evals)
	}
	return fmt.Sprintf("%d inputs: corners that the slopes point to, from several starts where the slopes disagree, within the trims' reach and along kinks, then coordinate moves; attained, not proved extreme, %d evaluations",
		len(s.free), s.evals)
}

// named names the inputs of a point, those that move the node most first.
func (s *search) named(p point) []Corner {
	slopes := s.byZ(s.centre.Linear, 0)
	list := make([]Corner, 0, len(p))
	for _, k := range byMagnitude(slopes) {
		x := s.model.Inputs[s.free[k]]
		list = append(list, Corner{x.Ref, x.Parameter, Figure(p[k])})
	}
	return list
}
