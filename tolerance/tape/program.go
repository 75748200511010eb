package tape

import (
	"math"
	"slices"
)

// Program computes some outputs of a graph. It is never written once made, so
// any number of goroutines may run it, each with a Frame of its own.
//
// Columns have slots: first the registers, then the inputs, the constants and
// the outputs.
type Program struct {
	code      []instruction
	registers int
	inputs    []int // input columns that are read, ascending
	constants []float64
	outputs   int
	copies    []copying // outputs that are not computed in place
	depth     int       // of nested loops
	outer     int       // most columns that a loop reads from outside
}

// instruction is one operation of the table, or a loop.
type instruction struct {
	op           code
	side         side
	dst, a, b, c int32   // slots; unused ones are those of a
	k            float64 // the constant, if side says so
	loop         *loop
}

// side says which argument of an instruction is a constant.
type side uint8

const (
	columns side = iota
	constantLeft
	constantRight
)

// loop is a Root: the body computes residual from unknown. While it runs the
// unknown's slot is the slot of the result.
type loop struct {
	unknown, low, high, residual int32
	bracketed                    int32 // slot of the second result, or −1
	body                         []instruction
	outer                        []int32 // slots that the body reads and does not write
	depth                        int     // loops around it
}

// copying moves a column that is no result of the main sequence to an output.
type copying struct{ from, output int32 }

// Program returns the program for outputs. It holds only what they need.
func (g *Graph) Program(outputs ...Ref) *Program {
	c := &compiler{g: g, p: &Program{outputs: len(outputs)}, inputSlot: map[Ref]int32{}, constantSlot: map[Ref]int32{}}
	top := newScope(nil, 0)
	for _, r := range outputs {
		if g.free[r] != 0 {
			panic("tape: an output depends on an unknown")
		}
		c.place(r, top)
	}
	c.number(outputs)
	for _, r := range outputs {
		top.last[r] = math.MaxInt
	}
	c.p.code = c.emit(top, 0)
	c.p.registers = c.made
	c.finish(top, outputs)
	return c.p
}

// Inputs returns the input columns that the program reads, ascending.
func (p *Program) Inputs() []int { return slices.Clone(p.inputs) }

// scope is the main sequence or the body of a loop: the nodes computed there.
type scope struct {
	parent *scope
	bit    uint64 // of the unknown of the loop; 0 for the main sequence
	nodes  []Ref
	has    map[Ref]bool
	bodies map[Ref]*scope // of the roots in it
	last   map[Ref]int    // the place of the last reader
	slot   map[Ref]int32
	flags  map[Ref]Ref // root -> its Bracketed node
	reads  []Ref       // what a body reads from outside; nil until asked for
}

func newScope(parent *scope, bit uint64) *scope {
	return &scope{parent: parent, bit: bit, has: map[Ref]bool{}, bodies: map[Ref]*scope{},
		last: map[Ref]int{}, slot: map[Ref]int32{}, flags: map[Ref]Ref{}}
}

// home is the innermost scope, from s outwards, on whose unknown a node with
// these free unknowns depends: as far outside all loops as it can be.
func (s *scope) home(free uint64) *scope {
	for s.parent != nil && free&s.bit == 0 {
		s = s.parent
	}
	return s
}

type compiler struct {
	g *Graph
	p *Program

	inputSlot, constantSlot map[Ref]int32

	idle []int32 // registers to use again
	made int     // registers so far
	// direct is the slot of the output that a node of the main sequence is.
	direct map[Ref]int32
}

// place puts a node, and what it needs, into the scopes where they belong.
func (c *compiler) place(r Ref, s *scope) {
	n := c.g.nodes[r]
	switch n.op {
	case constant:
		c.constantSlot[r] = 0
		return
	case input:
		c.inputSlot[r] = 0
		return
	}
	s = s.home(c.g.free[r])
	if s.has[r] {
		return
	}
	s.has[r] = true
	switch n.op {
	case unknown:
		return
	case root:
		c.place(n.a, s)
		c.place(n.b, s)
		body := newScope(s, c.g.free[n.c])
		s.bodies[r] = body
		c.place(n.d, body)
	case bracketed:
		c.place(n.a, s)
		s.flags[n.a] = r
	default:
		for _, a := range c.g.nodes[r].arguments() {
			c.place(a, s)
		}
	}
	s.nodes = append(s.nodes, r)
}

// number gives inputs, constants and outputs their slots. Register slots come
// first and their count is not known yet, so these count down from −2 until
// finish moves them.
func (c *compiler) number(outputs []Ref) {
	next := int32(-2)
	for _, r := range sortedKeys(c.inputSlot) {
		c.inputSlot[r] = next
		c.p.inputs = append(c.p.inputs, int(c.g.nodes[r].payload))
		next--
	}
	for _, r := range sortedKeys(c.constantSlot) {
		v, _ := c.g.Value(r)
		c.constantSlot[r] = next
		c.p.constants = append(c.p.constants, v)
		next--
	}
	c.direct = map[Ref]int32{}
	for i, r := range outputs {
		slot := next - int32(i)
		_, fixed := c.constantSlot[r]
		_, given := c.inputSlot[r]
		if _, taken := c.direct[r]; !taken && !fixed && !given {
			c.direct[r] = slot
		}
	}
}

func sortedKeys(m map[Ref]int32) []Ref {
	keys := make([]Ref, 0, len(m))
	for r := range m {
		keys = append(keys, r)
	}
	slices.Sort(keys)
	return keys
}

func (c *compiler) allocate() int32 {
	if n := len(c.idle); n > 0 {
		slot := c.idle[n-1]
		c.idle = c.idle[:n-1]
		return slot
	}
	c.made++
	return int32(c.made - 1)
}

func (c *compiler) release(slot int32) {
	if slot >= 0 {
		c.idle = append(c.idle, slot)
	}
}

// slotOf finds the column of a node from inside s.
func (c *compiler) slotOf(r Ref, s *scope) int32 {
	if slot, ok := c.constantSlot[r]; ok {
		return slot
	}
	if slot, ok := c.inputSlot[r]; ok {
		return slot
	}
	slot, ok := s.home(c.g.free[r]).slot[r]
	if !ok {
		panic("tape: a value is used before it is computed")
	}
	return slot
}

// reads lists what a node of s reads, for a root also what its body reads from
// s. Constants and inputs are left in.
func (c *compiler) reads(r Ref, s *scope) []Ref {
	n := c.g.nodes[r]
	if n.op != root {
		return c.g.nodes[r].arguments()
	}
	return append([]Ref{n.a, n.b}, c.outer(s.bodies[r], n.d)...)
}

// outer lists what the body of a root reads and does not compute.
func (c *compiler) outer(body *scope, residual Ref) []Ref {
	if body.reads != nil {
		return body.reads
	}
	list := []Ref{}
	seen := map[Ref]bool{}
	note := func(r Ref) {
		if !body.has[r] && !seen[r] {
			seen[r] = true
			list = append(list, r)
		}
	}
	note(residual)
	for _, r := range body.nodes {
		for _, a := range c.reads(r, body) {
			note(a)
		}
	}
	body.reads = list
	return list
}

// emit writes the instructions of a scope. Arguments are older than what is
// made of them, so the order of the graph is an order to compute in.
func (c *compiler) emit(s *scope, depth int) []instruction {
	c.p.depth = max(c.p.depth, depth)
	slices.Sort(s.nodes)
	reads := make([][]Ref, len(s.nodes))
	for i, r := range s.nodes {
		reads[i] = c.reads(r, s)
		for _, a := range reads[i] {
			s.last[a] = max(s.last[a], i)
		}
	}
	var list []instruction
	for i, r := range s.nodes {
		if c.g.nodes[r].op == bracketed {
			c.retire(reads[i], i, s)
			continue // written by its root
		}
		s.slot[r] = c.destination(r, s)
		if flag, ok := s.flags[r]; ok {
			s.slot[flag] = c.destination(flag, s)
		}
		list = append(list, c.instruction(r, s, depth))
		c.retire(reads[i], i, s)
	}
	return list
}

// destination is a register, or the output that a node of the main sequence
// is. It is taken before arguments are released: a kernel never writes over
// what it reads.
func (c *compiler) destination(r Ref, s *scope) int32 {
	if slot, ok := c.direct[r]; ok && s.parent == nil {
		return slot
	}
	return c.allocate()
}

// retire releases the registers whose last reader was node i.
func (c *compiler) retire(reads []Ref, i int, s *scope) {
	for k, a := range reads {
		slot, ok := s.slot[a]
		if ok && s.has[a] && s.last[a] == i && !slices.Contains(reads[:k], a) && c.g.nodes[a].op != unknown {
			c.release(slot)
			delete(s.slot, a)
		}
	}
}

func (c *compiler) instruction(r Ref, s *scope, depth int) instruction {
	n := c.g.nodes[r]
	if n.op == root {
		return instruction{op: root, loop: c.loop(r, s, depth)}
	}
	row := &operations[n.op]
	in := instruction{op: n.op, dst: s.slot[r], a: c.slotOf(n.a, s)}
	in.b, in.c = in.a, in.a
	if row.arity > 1 {
		in.b = c.slotOf(n.b, s)
	}
	if row.arity > 2 {
		in.c = c.slotOf(n.c, s)
	}
	if k, ok := c.g.Value(n.a); ok && row.left != nil {
		in.side, in.k = constantLeft, k
	} else if k, ok := c.g.Value(n.b); ok && row.arity == 2 && row.right != nil {
		in.side, in.k = constantRight, k
	}
	return in
}

func (c *compiler) loop(r Ref, s *scope, depth int) *loop {
	n := c.g.nodes[r]
	body := s.bodies[r]
	l := &loop{unknown: s.slot[r], low: c.slotOf(n.a, s), high: c.slotOf(n.b, s), bracketed: -1, depth: depth}
	if flag, ok := s.flags[r]; ok {
		l.bracketed = s.slot[flag]
	}
	body.slot[n.c] = l.unknown
	l.body = c.emit(body, depth+1)
	l.residual = c.slotOf(n.d, body)
	for _, a := range c.outer(body, n.d) {
		if a != n.c {
			l.outer = append(l.outer, c.slotOf(a, body))
		}
	}
	c.p.outer = max(c.p.outer, len(l.outer))
	for _, m := range body.nodes {
		if slot, ok := body.slot[m]; ok {
			c.release(slot)
		}
	}
	return l
}

// finish moves the provisional slots behind the registers and lists the
// outputs that have to be copied.
func (c *compiler) finish(top *scope, outputs []Ref) {
	c.move(c.p.code)
	first := c.p.firstOutput()
	for i, r := range outputs {
		from := c.final(c.slotOf(r, top))
		if to := first + int32(i); from != to {
			c.p.copies = append(c.p.copies, copying{from, to})
		}
	}
}

func (p *Program) firstOutput() int32 {
	return int32(p.registers + len(p.inputs) + len(p.constants))
}

func (c *compiler) final(slot int32) int32 {
	if slot < -1 {
		return int32(c.p.registers) - 2 - slot
	}
	return slot
}

func (c *compiler) move(list []instruction) {
	for i := range list {
		in := &list[i]
		if l := in.loop; l != nil {
			for _, slot := range []*int32{&l.unknown, &l.low, &l.high, &l.residual, &l.bracketed} {
				*slot = c.final(*slot)
			}
			for k := range l.outer {
				l.outer[k] = c.final(l.outer[k])
			}
			c.move(l.body)
			continue
		}
		in.dst, in.a, in.b, in.c = c.final(in.dst), c.final(in.a), c.final(in.b), c.final(in.c)
	}
}

// Cost estimates how many operations the program takes for one unit: a loop
// counts as often as a search usually steps.
func (p *Program) Cost() int { return cost(p.code) }

func cost(list []instruction) int {
	const steps = 10
	total := 0
	for _, in := range list {
		total++
		if in.loop != nil {
			total += steps * cost(in.loop.body)
		}
	}
	return total
}
