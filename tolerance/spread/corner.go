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
	trims   int   // whose ends follow the node in the program's outputs
	free    []int // inputs that scatter
	columns *columns
	slopes  []float64 // of the node by each free input's z, at the centre
	reach   [][]float64
	ends    [][2]float64 // of each trim at the centre: at low, at high
	started int
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
	n := &nodes{model: m, program: m.Graph.Program(refs...), count: len(refs)}
	s := &search{model: m, program: n.program, trims: len(trims), columns: n.newColumns(lanes)}
	for _, i := range n.program.Inputs() {
		if m.Inputs[i].HalfWidth > 0 {
			s.free = append(s.free, i)
		}
	}
	l := Linearise(m, refs...)
	s.slopes = s.byZ(l, 0)
	for t := range trims {
		s.reach = append(s.reach, s.byZ(l, 1+2*t), s.byZ(l, 2+2*t))
		s.ends = append(s.ends, [2]float64{l.Values[1+2*t], l.Values[2+2*t]})
	}
	return s
}

// byZ is a node's slopes by the z of each free input.
func (s *search) byZ(l *Linear, node int) []float64 {
	out := make([]float64, len(s.free))
	for k, i := range s.free {
		out[k] = l.Slopes[node][i] * s.model.Inputs[i].HalfWidth
	}
	return out
}

// evaluate computes the node at some points, at most lanes of them; NaN where
// a trim does not reach.
func (s *search) evaluate(points []point) []float64 {
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
	for t := range s.trims {
		for lane := range points {
			if !reached(out[1+2*t][lane], out[2+2*t][lane]) {
				out[0][lane] = math.NaN()
			}
		}
	}
	return append([]float64(nil), out[0]...)
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

// run looks for the extreme in a direction, +1 or -1.
func (s *search) run(direction float64) extreme {
	best := extreme{}
	if len(s.free) <= everyCorner {
		best = s.corners(direction)
	}
	for _, start := range s.starts(direction) {
		s.started++
		if e := s.ascend(start, direction); e.at != nil && best.better(e.value, direction) {
			best = e
		}
	}
	if best.at != nil {
		best = s.along(best, direction)
	}
	return best
}

// corners tries every corner.
func (s *search) corners(direction float64) extreme {
	best := extreme{}
	var block []point
	flush := func() {
		for i, v := range s.evaluate(block) {
			if best.better(v, direction) {
				best = extreme{v, block[i]}
			}
		}
		block = block[:0]
	}
	for bits := range 1 << len(s.free) {
		p := make(point, len(s.free))
		for k := range p {
			p[k] = float64(bits>>k&1)*2 - 1
		}
		if block = append(block, p); len(block) == lanes {
			flush()
		}
	}
	if len(block) > 0 {
		flush()
	}
	return best
}

// starts are where ascents begin: the corner that the slopes point to and,
// where a trim does not reach there, that corner drawn in towards the centre
// and the corners to which the slopes point when the trim's reach is paid for.
func (s *search) starts(direction float64) []point {
	corner := s.signs(direction, nil, 0)
	drawn := s.drawIn(corner)
	list := []point{drawn}
	if slices.Equal(corner, drawn) {
		return list
	}
	for _, against := range s.reach {
		for _, price := range []float64{0.5, 2} {
			list = append(list, s.drawIn(s.signs(direction, against, price)), s.drawIn(s.signs(direction, against, -price)))
		}
	}
	return append(list, make(point, len(s.free)))
}

// signs is the corner that the slopes, less a price on another node's slopes,
// point to.
func (s *search) signs(direction float64, against []float64, price float64) point {
	p := make(point, len(s.free))
	scale := 0.0
	if against != nil {
		scale = price * total(s.slopes) / math.Max(total(against), 1e-300)
	}
	for k := range p {
		g := direction * s.slopes[k]
		if against != nil {
			g -= scale * against[k]
		}
		switch {
		case g > 0:
			p[k] = 1
		case g < 0:
			p[k] = -1
		}
	}
	return p
}

func total(x []float64) float64 {
	var sum float64
	for _, v := range x {
		sum += math.Abs(v)
	}
	return sum
}

// drawIn scales a point towards the centre until every trim reaches there to
// first order.
func (s *search) drawIn(p point) point {
	scale := 1.0
	for t := range s.ends {
		for side := range 2 {
			at := s.ends[t][side]
			var move float64
			for k := range p {
				move += s.reach[2*t+side][k] * p[k]
			}
			if room := -at / move; room > 0 && room < scale {
				scale = 0.98 * room
			}
		}
	}
	drawn := make(point, len(p))
	for k := range p {
		drawn[k] = scale * p[k]
	}
	return drawn
}

// ascend improves a start by moving coordinates to their ends as long as that
// helps.
func (s *search) ascend(start point, direction float64) extreme {
	best := extreme{}
	if v := s.evaluate([]point{start})[0]; !math.IsNaN(v) {
		best = extreme{v, start}
	} else {
		return best
	}
	for range 60 { // each pass fixes at least one coordinate; a few passes do
		next := s.pass(best, direction)
		if !best.better(next.value, direction) {
			return best
		}
		best = next
	}
	return best
}

// pass tries every move of one coordinate, then all that help at once, half of
// them, a quarter, and so on, and returns the best.
func (s *search) pass(from extreme, direction float64) extreme {
	moves, gains := s.moves(from, direction)
	best := from
	for i, g := range gains {
		if g > 0 && best.better(from.value+direction*g, direction) {
			best = extreme{from.value + direction*g, moves[i].of(from.at)}
		}
	}
	helping := helpful(moves, gains)
	for n := len(helping); n > 1; n /= 2 {
		p := append(point(nil), from.at...)
		for _, m := range helping[:n] {
			p[m.coordinate] = m.z
		}
		if v := s.evaluate([]point{p})[0]; best.better(v, direction) {
			return extreme{v, p}
		}
	}
	return best
}

// move is one coordinate's new place.
type move struct {
	coordinate int
	z, gain    float64
}

func (m move) of(p point) point {
	out := append(point(nil), p...)
	out[m.coordinate] = m.z
	return out
}

// moves evaluates every move of one coordinate and what it gains.
func (s *search) moves(from extreme, direction float64) ([]move, []float64) {
	var moves []move
	for k := range s.free {
		for _, z := range []float64{-1, 1} {
			if z != from.at[k] {
				moves = append(moves, move{coordinate: k, z: z})
			}
		}
	}
	gains := make([]float64, 0, len(moves))
	for first := 0; first < len(moves); first += lanes {
		var block []point
		for _, m := range moves[first:min(first+lanes, len(moves))] {
			block = append(block, m.of(from.at))
		}
		for _, v := range s.evaluate(block) {
			gains = append(gains, direction*(v-from.value)) // NaN: out of reach
		}
	}
	return moves, gains
}

// along looks between the centre and the best point, and a little to each
// side of what it finds: an extreme such as a beat of zero lies inside.
func (s *search) along(best extreme, direction float64) extreme {
	low, high := 0.0, 1.0
	corner := best.at
	for range 6 {
		const steps = 64
		block := make([]point, steps+1)
		for i := range block {
			t := low + (high-low)*float64(i)/steps
			block[i] = make(point, len(corner))
			for k := range corner {
				block[i][k] = t * corner[k]
			}
		}
		at := -1
		for i, v := range s.evaluate(block) {
			if best.better(v, direction) {
				best, at = extreme{v, block[i]}, i
			}
		}
		if at < 0 {
			return best
		}
		width := (high - low) / steps
		middle := low + width*float64(at)
		low, high = math.Max(0, middle-width), math.Min(1, middle+width)
	}
	return best
}

// searched says how the search went.
func (s *search) searched() string {
	if len(s.free) <= everyCorner {
		return fmt.Sprintf("every one of %d corners, then along coordinates; attained, %d evaluations", 1<<len(s.free), s.evals)
	}
	return fmt.Sprintf("%d inputs: corners guided by slopes, then coordinate ascent from %d starts; attained, not proved extreme, %d evaluations",
		len(s.free), s.started, s.evals)
}

// corner names the inputs of a point, those that move the node most first.
func (s *search) corner(p point) []Corner {
	corner := make([]Corner, 0, len(p))
	for _, k := range byMagnitude(s.slopes) {
		x := s.model.Inputs[s.free[k]]
		corner = append(corner, Corner{x.Ref, x.Parameter, Figure(p[k])})
	}
	return corner
}
