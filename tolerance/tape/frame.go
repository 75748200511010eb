package tape

import "slices"

// Frame is the working memory of one run of a program at a time.
type Frame struct {
	p     *Program
	lanes int
	n     int // lanes of the current block

	own, down [][]float64 // the registers and constants at full length, and their tangents
	cols      [][]float64 // the column of every slot, n long
	tans      [][]float64 // its tangent
	zero, one []float64
	solvers   []solver // by depth of loop
	alike     bool     // every lane of the block has the same inputs
}

// NewFrame returns working memory for blocks of up to lanes units.
func (p *Program) NewFrame(lanes int) *Frame {
	if lanes < 1 {
		panic("tape: a frame without lanes")
	}
	slots := int(p.firstOutput()) + p.outputs
	f := &Frame{p: p, lanes: lanes, own: make([][]float64, slots), down: make([][]float64, slots),
		cols: make([][]float64, slots), tans: make([][]float64, slots)}
	fixed := p.registers + len(p.inputs)
	// Columns a cache line apart do not all begin in the same set of the cache.
	stride := lanes + 8
	store := make([]float64, (2*p.registers+len(p.constants)+2)*stride)
	column := func() []float64 {
		c := store[:lanes:lanes]
		store = store[stride:]
		return c
	}
	f.zero, f.one = column(), column()
	for i := range f.one {
		f.one[i] = 1
	}
	for r := range p.registers {
		f.own[r], f.down[r] = column(), column()
	}
	for k, v := range p.constants {
		c := column()
		for i := range c {
			c[i] = v
		}
		f.own[fixed+k], f.down[fixed+k] = c, f.zero
	}
	f.solvers = make([]solver, p.depth)
	for i := range f.solvers {
		f.solvers[i] = newSolver(lanes, p.outer)
	}
	return f
}

// Values computes every output for a block of units: dst[k] is the column of
// output k, in[i] that of input i. All are equally long, at most as long as the
// frame has lanes; columns of inputs that the program does not read may be nil.
// dst must not overlap in. A lane's results depend on that lane's inputs only.
func (p *Program) Values(dst, in [][]float64, f *Frame) {
	if !f.begin(p, dst, in) {
		return
	}
	f.run(p.code)
	for _, c := range p.copies {
		copy(f.cols[c.output], f.cols[c.from])
	}
}

// Tangents computes the outputs, and in ddst how fast each changes as the
// inputs move along din, a direction per lane. A nil column of din stands
// still. Through a root the implicit function theorem holds,
//
//	dx = −(∂r/∂p·dp)/(∂r/∂x)  at the solution of r(x, p) = 0,
//
// and where it is clamped to an end it follows that end.
func (p *Program) Tangents(dst, ddst, in, din [][]float64, f *Frame) {
	if !f.begin(p, dst, in) {
		return
	}
	if len(ddst) != p.outputs {
		panic("tape: the tangents are not as many as the outputs")
	}
	for r := range p.registers {
		f.tans[r] = f.down[r][:f.n]
	}
	for i, column := range p.inputs {
		t := f.zero[:f.n]
		if column < len(din) && din[column] != nil {
			t = din[column][:f.n]
		}
		f.tans[p.registers+i] = t
	}
	fixed := p.registers + len(p.inputs)
	for k := range p.constants {
		f.tans[fixed+k] = f.zero[:f.n]
	}
	for k := range ddst {
		f.tans[int(p.firstOutput())+k] = ddst[k][:f.n]
	}
	f.runTangents(p.code)
	for _, c := range p.copies {
		copy(f.cols[c.output], f.cols[c.from])
		copy(f.tans[c.output], f.tans[c.from])
	}
}

// Gradient is Tangents for a block whose lanes all have the same inputs and
// differ in direction only: each root is then searched once, not in every lane.
// The results are the same bits.
func (p *Program) Gradient(dst, ddst, in, din [][]float64, f *Frame) {
	f.alike = true
	p.Tangents(dst, ddst, in, din, f)
	f.alike = false
}

// begin lays the columns of a block out; false if there is nothing to do.
func (f *Frame) begin(p *Program, dst, in [][]float64) bool {
	if f.p != p {
		panic("tape: a frame of another program")
	}
	if len(dst) != p.outputs {
		panic("tape: the columns are not as many as the outputs")
	}
	if len(dst) == 0 || len(dst[0]) == 0 {
		return false
	}
	n := len(dst[0])
	if n > f.lanes {
		panic("tape: a block longer than its frame")
	}
	f.n = n
	for s, c := range f.own {
		if c != nil {
			f.cols[s] = c[:n]
		}
	}
	for i, column := range p.inputs {
		f.cols[p.registers+i] = in[column][:n]
	}
	for k := range dst {
		f.cols[int(p.firstOutput())+k] = dst[k][:n]
	}
	return true
}

func (f *Frame) run(list []instruction) {
	for i := range list {
		in := &list[i]
		if in.loop != nil {
			f.solve(in.loop)
			continue
		}
		row := &operations[in.op]
		dst := f.cols[in.dst]
		switch in.side {
		case constantLeft:
			row.left(dst, in.k, f.cols[in.b])
		case constantRight:
			row.right(dst, f.cols[in.a], in.k)
		default:
			row.value(dst, f.cols[in.a], f.cols[in.b], f.cols[in.c])
		}
	}
}

func (f *Frame) runTangents(list []instruction) {
	for i := range list {
		in := &list[i]
		if in.loop != nil {
			f.solveTangents(in.loop)
			continue
		}
		row := &operations[in.op]
		a, b, c := f.cols[in.a], f.cols[in.b], f.cols[in.c]
		row.value(f.cols[in.dst], a, b, c)
		row.tangent(f.tans[in.dst], f.cols[in.dst], a, b, c, f.tans[in.a], f.tans[in.b], f.tans[in.c])
	}
}

// Bounds encloses every output over a box of inputs, in[i] for input i: no
// values of the inputs within the box give a number outside. An output that
// has no value anywhere is an empty interval.
func (p *Program) Bounds(in []Interval) []Interval {
	slots := make([]Interval, int(p.firstOutput())+p.outputs)
	for i, column := range p.inputs {
		slots[p.registers+i] = in[column]
	}
	for k, v := range p.constants {
		slots[p.registers+len(p.inputs)+k] = Point(v)
	}
	enclose(p.code, slots)
	for _, c := range p.copies {
		slots[c.output] = slots[c.from]
	}
	return slices.Clone(slots[p.firstOutput():])
}

func enclose(list []instruction, slots []Interval) {
	for i := range list {
		in := &list[i]
		if in.loop != nil {
			in.loop.enclose(slots)
			continue
		}
		a, b, c := slots[in.a], slots[in.b], slots[in.c]
		switch {
		case in.op == and || in.op == or || in.op == choose:
			slots[in.dst] = operations[in.op].bounds(a, b, c)
		case a.Empty() || b.Empty():
			slots[in.dst] = nothing
		case in.op == mul && in.a == in.b:
			slots[in.dst] = squareBounds(a)
		default:
			slots[in.dst] = operations[in.op].bounds(a, b, c)
		}
	}
}
