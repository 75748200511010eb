package spread

import (
	"cmp"
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
	kinks   int             // whose values follow those
	free    []int           // inputs that scatter
	columns *columns
	starts  []picture
	visited []point // corners gone to in this direction
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
	kinks := m.Graph.Kinks(node)
	refs = append(refs, kinks...)
	n := &nodes{model: m, program: m.Graph.Program(refs...), count: len(refs)}
	s := &search{model: m, program: n.program, slopes: differentiator(n.program, len(m.Inputs), len(refs)), trims: len(trims), kinks: len(kinks), columns: n.newColumns(lanes)}
	for _, i := range n.program.Inputs() {
		if m.Inputs[i].HalfWidth > 0 {
			s.free = append(s.free, i)
		}
	}
	s.starts = s.newStarts()
	return s
}

// evaluate computes the node at some points, at most lanes of them; NaN where
// a trim does not reach.
func (s *search) evaluate(points []point) []float64 { return s.evaluateColumn(points, 0) }

// evaluateColumn computes one of the program's outputs at some points.
func (s *search) evaluateColumn(points []point, column int) []float64 {
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
				out[column][lane] = math.NaN()
			}
		}
	}
	return slices.Clone(out[column])
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
	for i := range s.starts {
		best = best.take(s.ascend(i, direction), direction)
	}
	for k := range s.kinks {
		if at := s.zero(1 + 2*s.trims + k); at != nil {
			best = best.take(s.best([]point{at}, direction), direction)
		}
	}
	return s.climb(best, direction)
}

// zero looks for a place where one of the program's outputs is zero, on the
// way from the centre to the corner that the output's own slopes point to.
func (s *search) zero(column int) point {
	centre := s.starts[0]
	target := s.corner(centre, column, -math.Copysign(1, centre.Values[column]))
	const steps = 32
	low, high := 0.0, 1.0
	var at point
	for range 8 {
		block := make([]point, steps+1)
		for i := range block {
			block[i] = mix(centre.at, target, low+(high-low)*float64(i)/steps)
		}
		v := s.evaluateColumn(block, column)
		i := 1
		for i <= steps && !(v[i-1]*v[i] <= 0) {
			i++
		}
		if i > steps {
			return at
		}
		at = block[i]
		if math.Abs(v[i-1]) < math.Abs(v[i]) {
			at = block[i-1]
		}
		width := (high - low) / steps
		low, high = low+width*float64(i-1), low+width*float64(i)
	}
	return at
}

// picture is the linear picture at a place.
type picture struct {
	at point
	*Linear
}

// newStarts are the places whose slopes point to the first corners: the
// centre, and a place halfway to a corner.
func (s *search) newStarts() []picture {
	list := make([]picture, 2)
	for i, z := range []float64{0, 0.5} {
		at := make(point, len(s.free))
		for k := range at {
			at[k] = z * (1 - 2*float64(k%2))
		}
		list[i] = s.picture(at)
	}
	return list
}

// picture differentiates at a place.
func (s *search) picture(at point) picture {
	inputs := slices.Clone(s.model.Inputs)
	for k, i := range s.free {
		inputs[i].Centre += inputs[i].HalfWidth * at[k]
	}
	s.evals += len(s.free)
	return picture{at, s.slopes.At(inputs)}
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

// ascend goes to the corner that the slopes at a start point to, as far as the
// trims reach, looks at the slopes there, and so on.
func (s *search) ascend(start int, direction float64) extreme {
	best := extreme{}
	from := s.starts[start]
	for range 6 { // slopes that keep changing their signs are left to climb
		corner := s.corner(from, 0, direction)
		if slices.ContainsFunc(s.visited, func(p point) bool { return slices.Equal(p, corner) }) {
			break
		}
		s.visited = append(s.visited, corner)
		next := s.line(from.at, corner, direction)
		if next.at == nil || !best.better(next.value, direction) {
			break
		}
		best = next
		from = s.picture(best.at)
	}
	return best
}

// climb moves single coordinates to their ends as long as that helps.
func (s *search) climb(best extreme, direction float64) extreme {
	if best.at == nil {
		return best
	}
	for range 40 { // each pass settles at least one coordinate
		next := s.pass(best, direction)
		if !best.better(next.value, direction) {
			break
		}
		best = next
	}
	return best
}

// line looks along the way from one place to another, the other end first.
// Where something on the way is better than the end, it looks closer about
// that: an extreme such as a beat of zero lies inside, where the output bends.
func (s *search) line(from, to point, direction float64) extreme {
	const steps = 16
	coarse := []point{to, mix(from, to, 0.9), mix(from, to, 0.6), mix(from, to, 0.3), mix(from, to, 0.1)}
	best := s.best(coarse, direction)
	if best.at == nil || &best.at[0] == &to[0] {
		return best
	}
	low, high := 0.0, 1.0
	for range 10 {
		block := make([]point, steps+1)
		for i := range block {
			block[i] = mix(from, to, high-(high-low)*float64(i)/steps)
		}
		next := s.best(block, direction)
		if next.at == nil || !best.better(next.value, direction) {
			return best
		}
		best = next
		at := slices.IndexFunc(block, func(p point) bool { return &p[0] == &next.at[0] })
		width := (high - low) / steps
		middle := high - width*float64(at)
		low, high = math.Max(0, middle-width), math.Min(1, middle+width)
	}
	return best
}

// mix is the place a share t of the way from one to the other; the other
// itself at 1.
func mix(from, to point, t float64) point {
	p := slices.Clone(to)
	if t < 1 {
		for k := range p {
			p[k] = from[k] + t*(to[k]-from[k])
		}
	}
	return p
}

// corner is the place where the linear picture of an output is greatest in the
// direction, while every trim reaches to first order.
func (s *search) corner(l picture, column int, direction float64) point {
	c := s.byZ(l.Linear, column)
	z := make(point, len(c))
	for k := range z {
		z[k] = l.at[k]
		if g := direction * c[k]; g != 0 {
			z[k] = math.Copysign(1, g)
		}
	}
	for range 2 { // mending one trim may spoil another
		for t := range s.trims {
			low, high := l.Values[1+2*t], l.Values[2+2*t]
			rising := math.Copysign(1, high-low)
			mend(z, l.at, c, s.byZ(l.Linear, 1+2*t), rising, rising*low)
			mend(z, l.at, c, s.byZ(l.Linear, 2+2*t), -rising, -rising*high)
		}
	}
	return z
}

// byZ is a node's slopes by the z of each free input.
func (s *search) byZ(l *Linear, node int) []float64 {
	out := make([]float64, len(s.free))
	for k, i := range s.free {
		out[k] = l.Slopes[node][i] * s.model.Inputs[i].HalfWidth
	}
	return out
}

// mend moves z until the linear constraint
//
//	value + sign·g·(z − at) <= 0
//
// holds, at the least cost in c: the coordinates that give most for what they
// cost go first (a continuous knapsack).
func mend(z, at point, c, g []float64, sign, value float64) {
	excess := value
	var order []int
	for k := range z {
		excess += sign * g[k] * (z[k] - at[k])
		if g[k] != 0 {
			order = append(order, k)
		}
	}
	slices.SortStableFunc(order, func(a, b int) int {
		return cmp.Compare(math.Abs(c[a]*g[b]), math.Abs(c[b]*g[a]))
	})
	for _, k := range order {
		if excess <= 0 {
			return
		}
		end := -math.Copysign(1, sign*g[k])
		gain := sign * g[k] * (z[k] - end)
		if gain <= 0 {
			continue
		}
		part := math.Min(1, 1.001*excess/gain) // a little more than enough
		z[k] += part * (end - z[k])
		excess -= part * gain
	}
}

// pass tries every move of one coordinate to an end, then all that help at
// once, half of them, a quarter, and so on, and returns the best.
func (s *search) pass(from extreme, direction float64) extreme {
	moves := s.moves(from, direction)
	if len(moves) == 0 {
		return from
	}
	best := extreme{from.value + direction*moves[0].gain, moves[0].of(from.at)}
	var joint []point
	for n := len(moves); n > 1; n /= 2 {
		p := slices.Clone(from.at)
		for _, m := range moves[:n] {
			p[m.coordinate] = m.z
		}
		joint = append(joint, p)
	}
	if len(joint) > 0 {
		best = best.take(s.best(joint, direction), direction)
	}
	return best
}

// move is one coordinate's new place, and what it gains.
type move struct {
	coordinate int
	z, gain    float64
}

func (m move) of(p point) point {
	out := slices.Clone(p)
	out[m.coordinate] = m.z
	return out
}

// moves are the moves of one coordinate to an end that gain, the best first.
func (s *search) moves(from extreme, direction float64) []move {
	var all []move
	for k := range s.free {
		for _, z := range []float64{-1, 1} {
			if z != from.at[k] {
				all = append(all, move{coordinate: k, z: z})
			}
		}
	}
	for first := 0; first < len(all); first += lanes {
		some := all[first:min(first+lanes, len(all))]
		block := make([]point, len(some))
		for i, m := range some {
			block[i] = m.of(from.at)
		}
		for i, v := range s.evaluate(block) {
			some[i].gain = direction * (v - from.value) // NaN: out of reach
		}
	}
	enough := 1e-12 * math.Abs(from.value)
	all = slices.DeleteFunc(all, func(m move) bool { return !(m.gain > enough) })
	slices.SortStableFunc(all, func(a, b move) int { return cmp.Compare(b.gain, a.gain) })
	return all
}

// searched says how the search went.
func (s *search) searched() string {
	if len(s.free) <= everyCorner {
		return fmt.Sprintf("every one of %d corners, then along coordinates; attained, %d evaluations", 1<<len(s.free), s.evals)
	}
	return fmt.Sprintf("%d inputs: corners that the slopes point to from several starts, within the trims' reach, then coordinate moves; attained, not proved extreme, %d evaluations",
		len(s.free), s.evals)
}

// named names the inputs of a point, those that move the node most first.
func (s *search) named(p point) []Corner {
	slopes := s.byZ(s.starts[0].Linear, 0)
	list := make([]Corner, 0, len(p))
	for _, k := range byMagnitude(slopes) {
		x := s.model.Inputs[s.free[k]]
		list = append(list, Corner{x.Ref, x.Parameter, Figure(p[k])})
	}
	return list
}
