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

// search is the search of one lane, a cache line: x1 and x2 enclose the root
// with residuals f1 and f2 of opposite sign, x1 the newer; x3, f3 came before.
type search struct {
	x1, f1, x2, f2, x3, f3 float64
	floor                  float64 // the size below which differences do not count
	state                  ending
}

// solver is the memory of a loop.
type solver struct {
	lanes        []search
	shift, slope []float64   // of the residual
	saved        [][]float64 // tangents set aside
}

func newSolver(lanes, outer int) solver {
	return solver{lanes: make([]search, lanes), shift: make([]float64, lanes), slope: make([]float64, lanes), saved: make([][]float64, outer)}
}

// solve runs the loop of a root: both ends, then steps until every lane is
// done. Lanes that are done keep their result while the others go on, so no
// lane depends on its neighbours.
func (f *Frame) solve(l *loop) {
	x, low, high := f.cols[l.unknown], f.cols[l.low], f.cols[l.high]
	residual := f.cols[l.residual]
	lanes := f.solvers[l.depth].lanes[:f.n]
	copy(x, low)
	f.run(l.body)
	for i := range lanes {
		lanes[i].f2 = residual[i]
	}
	copy(x, high)
	f.run(l.body)
	going := 0
	for i := range lanes {
		s := &lanes[i]
		s.f1 = residual[i]
		x[i] = s.start(low[i], high[i])
		if s.state == searching {
			going++
		}
	}
	for step := 0; going > 0 && step < maxSteps; step++ {
		f.run(l.body)
		going = 0
		for i := range lanes {
			s := &lanes[i]
			if s.state != searching {
				continue
			}
			x[i] = s.step(x[i], residual[i])
			if s.state == searching {
				going++
			}
		}
	}
	for i := range lanes {
		if s := &lanes[i]; s.state == searching {
			x[i], s.state = s.best(), found
		}
	}
	if l.bracketed >= 0 {
		writeBracketed(f.cols[l.bracketed], lanes)
	}
}

// solveOnce solves the first lane and gives every lane its result.
func (f *Frame) solveOnce(l *loop) {
	n := f.n
	f.narrow(1)
	f.solve(l)
	f.narrow(n)
	lanes := f.solvers[l.depth].lanes[:n]
	x := f.cols[l.unknown]
	for i := range lanes {
		lanes[i], x[i] = lanes[0], x[0]
	}
	if l.bracketed >= 0 {
		writeBracketed(f.cols[l.bracketed], lanes)
	}
}

// narrow changes the lanes of the current block.
func (f *Frame) narrow(n int) {
	f.n = n
	for s, c := range f.cols {
		f.cols[s] = c[:n]
	}
}

// start looks at the residuals at both ends and returns the first point to try,
// or the result.
func (s *search) start(low, high float64) float64 {
	s.x1, s.x2 = high, low
	s.floor = 0
	if !(low > 0 && high > 0) && !(low < 0 && high < 0) {
		// The root may be 0, of which no fraction is small enough.
		s.floor = 1e-18 * math.Abs(high-low)
	}
	finite := math.Abs(low) <= math.MaxFloat64 && math.Abs(high) <= math.MaxFloat64
	switch f1, f2 := s.f1, s.f2; {
	case !finite || f1 != f1 || f2 != f2:
		s.state = hopeless
		return math.NaN()
	case f2 == 0:
		s.state = found
		return low
	case f1 == 0:
		s.state = found
		return high
	case (f1 > 0) != (f2 > 0):
		s.state = searching
		return s.chord()
	case math.Abs(f1) < math.Abs(f2):
		s.state = clampedHigh
		return high
	}
	s.state = clampedLow
	return low
}

// chord is where the straight line between the ends meets zero: at once the
// root if the residual is one.
func (s *search) chord() float64 {
	t := s.f1 / (s.f1 - s.f2)
	if !(t > 0 && t < 1) {
		t = 0.5
	}
	return s.between(t)
}

// between is the point a fraction t of the way from x1 to x2, not outside.
func (s *search) between(t float64) float64 {
	x1, x2 := s.x1, s.x2
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
func (s *search) best() float64 {
	if math.Abs(s.f1) < math.Abs(s.f2) {
		return s.x1
	}
	return s.x2
}

// step takes the residual fx at x in and returns the next point to try, or the
// result. The rule is Chandrupatla's: inverse quadratic interpolation where the
// three points say it converges, halving elsewhere (T. R. Chandrupatla,
// Advances in Engineering Software 28 (1997) 145–149). Halving a bracket that
// spans decades is done in the logarithm.
func (s *search) step(x, fx float64) float64 {
	if fx != fx {
		s.state = hopeless
		return fx
	}
	if (fx > 0) == (s.f1 > 0) {
		s.x3, s.f3 = s.x1, s.f1
	} else {
		s.x3, s.f3 = s.x2, s.f2
		s.x2, s.f2 = s.x1, s.f1
	}
	s.x1, s.f1 = x, fx
	width := math.Abs(s.x2 - s.x1)
	best := s.best()
	const ulp = 0x1p-52
	limit := (2*ulp*math.Abs(best) + s.floor) / width
	if fx == 0 {
		s.state = found
		return x
	}
	if !(limit <= 0.5) {
		s.state = found
		return best
	}
	if t, ok := s.interpolate(); ok {
		return s.between(clamped(t, limit, 1-limit))
	}
	return s.middle()
}

// interpolate is the inverse quadratic step, as a fraction of the way from x1
// to x2, and whether it may be trusted.
func (s *search) interpolate() (float64, bool) {
	x1, x2, x3 := s.x1, s.x2, s.x3
	f1, f2, f3 := s.f1, s.f2, s.f3
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

func (s *search) middle() float64 {
	x1, x2 := s.x1, s.x2
	if x1 > 0 && x2 > 0 && (x1 > 8*x2 || x2 > 8*x1) {
		return math.Sqrt(x1) * math.Sqrt(x2)
	}
	if x1 < 0 && x2 < 0 && (x1 < 8*x2 || x2 < 8*x1) {
		return -math.Sqrt(-x1) * math.Sqrt(-x2)
	}
	return s.between(0.5)
}

// writeBracketed writes the second result of a root: whether it was bracketed.
func writeBracketed(dst []float64, lanes []search) {
	for i := range lanes {
		switch lanes[i].state {
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
	if f.alike {
		f.solveOnce(l)
	} else {
		f.solve(l)
	}
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
		switch s.lanes[i].state {
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
