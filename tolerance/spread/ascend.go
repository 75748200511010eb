package spread

import (
	"cmp"
	"math"
	"slices"
)

// ascend goes to the corner that the slopes at a place point to, as far as the
// trims reach, or to one short of a kink where that is better, looks at the
// slopes there, and so on. Bent says whether slopes met on the way disagree in
// sign with those at the start.
func (s *search) ascend(start picture, direction float64) (best extreme, bent bool) {
	from := start
	for range 6 { // slopes that keep changing their signs are left to climb
		var aims []point
		for _, aim := range s.aims(from, direction) {
			if !slices.ContainsFunc(s.visited, func(p point) bool { return slices.Equal(p, aim) }) {
				s.visited = append(s.visited, aim)
				aims = append(aims, aim)
			}
		}
		next := best.take(s.lines(from.at, aims, direction), direction)
		if next.at == nil || best.at != nil && !best.better(next.value, direction) {
			break
		}
		best = next
		from = s.picture(best.at)
		bent = bent || s.disagree(start, from)
	}
	return best, bent
}

// disagree says whether the node's slopes at two places have other signs.
func (s *search) disagree(a, b picture) bool {
	for k, slope := range s.byZ(a.Linear, 0) {
		if slope*s.byZ(b.Linear, 0)[k] < 0 {
			return true
		}
	}
	return false
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

// lines looks along the ways from one place to others, the other ends first.
// Where something on the way is better than every end, it looks closer about
// that: an extreme such as a beat of zero lies inside, where the output bends.
func (s *search) lines(from point, aims []point, direction float64) extreme {
	ways := []float64{1, 0.9, 0.6, 0.3, 0.1}
	best, on := extreme{}, -1
	for first := 0; first < len(aims); first += lanes / len(ways) {
		var block []point
		for _, to := range aims[first:min(first+lanes/len(ways), len(aims))] {
			for _, t := range ways {
				block = append(block, mix(from, to, t))
			}
		}
		for i, v := range s.evaluate(block) {
			if best.better(v, direction) {
				best, on = extreme{v, block[i]}, first*len(ways)+i
			}
		}
	}
	if on < 0 || on%len(ways) == 0 {
		return best
	}
	return s.zoom(best, from, aims[on/len(ways)], direction)
}

// zoom looks closer and closer about the best place on a way.
func (s *search) zoom(best extreme, from, to point, direction float64) extreme {
	const steps = 16
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
