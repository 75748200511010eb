package spread

import (
	"cmp"
	"math"
	"slices"
)

// picture is the linear picture at a place.
type picture struct {
	at point
	*Linear
}

// elsewhere is a second start: a place halfway to a corner.
func (s *search) elsewhere() picture {
	if s.other == nil {
		at := make(point, len(s.free))
		for k := range at {
			at[k] = 0.5 - float64(k%2)
		}
		p := s.picture(at)
		s.other = &p
	}
	return *s.other
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

// kink is two of the program's outputs at whose equality the node bends; b is
// -1 for zero.
type kink struct{ a, b int }

// constraint is value + sign·slopes·(z − at) <= 0, to first order about a place.
type constraint struct {
	slopes      []float64
	sign, value float64
}

// bends are the constraints that keep a place on its side of each kink that
// the box may cross; on a kink, to either side.
func (s *search) bends(l picture) []constraint {
	var list []constraint
	for _, k := range s.kinks {
		v, g := l.Values[k.a], s.byZ(l.Linear, k.a)
		if k.b >= 0 {
			v -= l.Values[k.b]
			for i, slope := range s.byZ(l.Linear, k.b) {
				g[i] -= slope
			}
		}
		var reach float64
		for i := range g {
			reach += math.Abs(g[i]) * (1 + math.Abs(l.at[i]))
		}
		if !(math.Abs(v) <= 1.1*reach) {
			continue
		}
		if v > -1e-6*reach {
			list = append(list, constraint{g, -1, -v})
		}
		if v < 1e-6*reach {
			list = append(list, constraint{g, 1, v})
		}
	}
	return list
}

// aims are the corners to go for from a place: the one its slopes point to and,
// for each kink on the way, the one on this side of it.
func (s *search) aims(l picture, direction float64) []point {
	list := []point{s.corner(l, s.byZ(l.Linear, 0), direction)}
	for _, c := range s.bends(l) {
		list = append(list, s.corner(l, s.byZ(l.Linear, 0), direction, c))
	}
	return list
}

// corner is the place where the linear picture c is greatest in the direction,
// while every trim reaches to first order and some more constraints hold.
func (s *search) corner(l picture, c []float64, direction float64, more ...constraint) point {
	z := make(point, len(c))
	for k := range z {
		z[k] = l.at[k]
		if g := direction * c[k]; g != 0 {
			z[k] = math.Copysign(1, g)
		}
	}
	for t := range s.trims {
		low, high := l.Values[1+2*t], l.Values[2+2*t]
		rising := math.Copysign(1, high-low)
		more = append(more, constraint{s.byZ(l.Linear, 1+2*t), rising, rising * low},
			constraint{s.byZ(l.Linear, 2+2*t), -rising, -rising * high})
	}
	for range 2 { // mending one may spoil another
		for _, m := range more {
			mend(z, l.at, c, m.slopes, m.sign, m.value)
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

// zeros are places where the arguments of absolute values are zero. Ascents
// stop short of other kinks by themselves.
func (s *search) zeros() []point {
	if s.bent == nil {
		s.bent = []point{}
		for k, kink := range s.kinks {
			if kink.b >= 0 {
				continue
			}
			if at := s.bend(k); at != nil {
				s.bent = append(s.bent, at)
			}
		}
	}
	return s.bent
}

// bend looks for a zero of an absolute value's argument, on the way from the
// centre to the corner where its own slopes say that it is passed.
func (s *search) bend(k int) point {
	column, centre := s.kinks[k].a, s.centre
	target := s.corner(centre, s.byZ(centre.Linear, column), -math.Copysign(1, centre.Values[column]))
	const steps = 32
	low, high := 0.0, 1.0
	var at point
	for range 8 {
		block := make([]point, steps+1)
		for i := range block {
			block[i] = mix(centre.at, target, low+(high-low)*float64(i)/steps)
		}
		d := s.values(block)[column]
		i := 1
		for i <= steps && !(d[i-1]*d[i] <= 0) {
			i++
		}
		if i > steps {
			return at
		}
		at = block[i]
		if math.Abs(d[i-1]) < math.Abs(d[i]) {
			at = block[i-1]
		}
		width := (high - low) / steps
		low, high = low+width*float64(i-1), low+width*float64(i)
	}
	return at
}
