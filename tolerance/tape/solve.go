package tape

import "math"

// maxSteps bounds the search of a root. Halving alone takes a bracket of
// ordinary numbers to neighbouring floats in about 64 steps; a search that is
// still going then has met a residual of noise.
const maxSteps = 120

// ending is how the search of a root ended, or that it goes on.
type ending uint8

const (
	searching ending = iota
	found
	clampedLow
	clampedHigh
	hopeless // NaN
)

// solver is the state of a search, a lane each: x1 and x2 enclose the root with
// residuals f1 and f2 of opposite sign, x1 the newer; x3, f3 came before.
type solver struct {
	x1, f1, x2, f2, x3, f3 []float64
	shift, slope           []float64
	floor                  []float64
	state                  []ending
	saved                  [][]float64
}

func newSolver(lanes, outer int) solver {
	var s solver
	for _, c := range []*[]float64{&s.x1, &s.f1, &s.x2, &s.f2, &s.x3, &s.f3, &s.shift, &s.slope, &s.floor} {
		*c = make([]float64, lanes)
	}
	s.state = make([]ending, lanes)
	s.saved = make([][]float64, outer)
	return s
}

// solve runs the loop of a root: both ends, then steps until every lane is
// done. Lanes that are done keep their result while the others go on, so no
// lane depends on its neighbours.
func (f *Frame) solve(l *loop) {
	s := &f.solvers[l.depth]
	x, low, high := f.cols[l.unknown], f.cols[l.low], f.cols[l.high]
	residual := f.cols[l.residual]
	n := f.n
	copy(x, low)
	f.run(l.body)
	copy(s.f2[:n], residual)
	copy(x, high)
	f.run(l.body)
	copy(s.f1[:n], residual)
	going := 0
	for i := range n {
		s.state[i] = s.start(i, low[i], high[i])
		if s.state[i] == searching {
			x[i] = s.first(i)
			going++
		} else {
			x[i] = s.result(i, low[i], high[i])
		}
	}
	for step := 0; going > 0 && step < maxSteps; step++ {
		f.run(l.body)
		going = 0
		for i := range n {
			if s.state[i] != searching {
				continue
			}
			x[i] = s.step(i, x[i], residual[i])
			if s.state[i] == searching {
				going++
			}
		}
	}
	for i := range n {
		if s.state[i] == searching {
			x[i] = s.best(i)
			s.state[i] = found
		}
	}
	if l.bracketed >= 0 {
		s.flag(f.cols[l.bracketed])
	}
}

// start looks at the ends of a lane.
func (s *solver) start(i int, low, high float64) ending {
	f1, f2 := s.f1[i], s.f2[i]
	s.x1[i], s.x2[i] = high, low
	s.floor[i] = 0
	if !(low > 0 && high > 0) && !(low < 0 && high < 0) {
		// The root may be 0, of which no fraction is small enough.
		s.floor[i] = 1e-18 * math.Abs(high-low)
	}
	switch {
	case !(math.Abs(low) <= math.MaxFloat64) || !(math.Abs(high) <= math.MaxFloat64) || f1 != f1 || f2 != f2:
		return hopeless
	case f2 == 0:
		s.x1[i], s.f1[i] = low, f2
		return found
	case f1 == 0:
		return found
	case (f1 > 0) == (f2 > 0):
		if math.Abs(f1) < math.Abs(f2) {
			return clampedHigh
		}
		return clampedLow
	}
	return searching
}

// result is the value of a lane that ended at once.
func (s *solver) result(i int, low, high float64) float64 {
	switch s.state[i] {
	case clampedLow:
		return low
	case clampedHigh:
		return high
	case found:
		return s.x1[i]
	}
	return math.NaN()
}

// first is where the chord meets zero: at once the root if the residual is a
// straight line.
func (s *solver) first(i int) float64 {
	t := s.f1[i] / (s.f1[i] - s.f2[i])
	if !(t > 0 && t < 1) {
		t = 0.5
	}
	return s.between(i, t)
}

// between is the point a fraction t of the way from x1 to x2, not outside.
func (s *solver) between(i int, t float64) float64 {
	x1, x2 := s.x1[i], s.x2[i]
	x := x1 + float64(t*(x2-x1))
	if x1 > x2 {
		x1, x2 = x2, x1
	}
	return clamped(x, x1, x2)
}

// clamped is what math.Max and math.Min would do to numbers, at a third of the
// cost: the search spends a fifth of its time here.
func clamped(x, low, high float64) float64 {
	if x < low {
		return low
	}
	if x > high {
		return high
	}
	return x
}

// best is the end of the bracket with the smaller residual.
func (s *solver) best(i int) float64 {
	if math.Abs(s.f1[i]) < math.Abs(s.f2[i]) {
		return s.x1[i]
	}
	return s.x2[i]
}

// step takes the residual fx at x in and returns the next point to try, or the
// result. The rule is Chandrupatla's: inverse quadratic interpolation where the
// three points say it converges, halving elsewhere (T. R. Chandrupatla,
// Advances in Engineering Software 28 (1997) 145–149). Halving a bracket that
// spans decades is done in the logarithm.
func (s *solver) step(i int, x, fx float64) float64 {
	if fx != fx {
		s.state[i] = hopeless
		return fx
	}
	if (fx > 0) == (s.f1[i] > 0) {
		s.x3[i], s.f3[i] = s.x1[i], s.f1[i]
	} else {
		s.x3[i], s.f3[i] = s.x2[i], s.f2[i]
		s.x2[i], s.f2[i] = s.x1[i], s.f1[i]
	}
	s.x1[i], s.f1[i] = x, fx
	width := math.Abs(s.x2[i] - s.x1[i])
	best := s.best(i)
	const ulp = 0x1p-52
	limit := (2*ulp*math.Abs(best) + s.floor[i]) / width
	if fx == 0 {
		s.state[i] = found
		return x
	}
	if !(limit <= 0.5) {
		s.state[i] = found
		return best
	}
	if t, ok := s.interpolate(i); ok {
		return s.between(i, clamped(t, limit, 1-limit))
	}
	return s.middle(i)
}

// interpolate is the inverse quadratic step, as a fraction of the way from x1
// to x2, and whether it may be trusted.
func (s *solver) interpolate(i int) (float64, bool) {
	x1, x2, x3 := s.x1[i], s.x2[i], s.x3[i]
	f1, f2, f3 := s.f1[i], s.f2[i], s.f3[i]
	xi := (x1 - x2) / (x3 - x2)
	phi := (f1 - f2) / (f3 - f2)
	if !(float64(phi*phi) < xi && float64((1-phi)*(1-phi)) < 1-xi) {
		return 0, false
	}
	// f₁/(f₂−f₁)·f₃/(f₂−f₃) + (x₃−x₁)/(x₂−x₁)·f₁/(f₃−f₁)·f₂/(f₃−f₂), with
	// one division for the four that share factors.
	p, q := f2-f1, f3-f1
	t := f1 * (float64((x3-x1)/(x2-x1)*f2*p) - float64(f3*q)) / (p * q * (f3 - f2))
	return t, t == t
}

func (s *solver) middle(i int) float64 {
	x1, x2 := s.x1[i], s.x2[i]
	if x1 > 0 && x2 > 0 && (x1 > 8*x2 || x2 > 8*x1) {
		return math.Sqrt(x1) * math.Sqrt(x2)
	}
	if x1 < 0 && x2 < 0 && (x1 < 8*x2 || x2 < 8*x1) {
		return -math.Sqrt(-x1) * math.Sqrt(-x2)
	}
	return s.between(i, 0.5)
}

// flag writes the second result of a root: whether it was bracketed.
func (s *solver) flag(dst []float64) {
	for i := range dst {
		switch s.state[i] {
		case found:
			dst[i] = 1
		case hopeless:
			dst[i] = math.NaN()
		default:
			dst[i] = 0
		}
	}
}

// solveTangents solves, then differentiates the residual at the solution twice:
// with the unknown at rest, and with the unknown alone in motion.
func (f *Frame) solveTangents(l *loop) {
	f.solve(l)
	s := &f.solvers[l.depth]
	n := f.n
	dx := f.tans[l.unknown]
	residual := func() []float64 { return f.tans[l.residual] }
	clear(dx)
	f.runTangents(l.body)
	copy(s.shift[:n], residual())
	for k, slot := range l.outer {
		s.saved[k] = f.tans[slot]
		f.tans[slot] = f.zero[:n]
	}
	copy(dx, f.one[:n])
	f.runTangents(l.body)
	copy(s.slope[:n], residual())
	for k, slot := range l.outer {
		f.tans[slot] = s.saved[k]
	}
	dlow, dhigh := f.tans[l.low], f.tans[l.high]
	for i := range n {
		switch s.state[i] {
		case clampedLow:
			dx[i] = dlow[i]
		case clampedHigh:
			dx[i] = dhigh[i]
		case hopeless:
			dx[i] = math.NaN()
		default:
			dx[i] = 0
			if s.shift[i] != 0 {
				dx[i] = -s.shift[i] / s.slope[i]
			}
		}
	}
	if l.bracketed >= 0 {
		clear(f.tans[l.bracketed])
	}
}
