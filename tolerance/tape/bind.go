package tape

// maxLevel bounds how deep roots may nest: one bit of Graph.free each, the
// last bit for unknowns that no root binds yet.
const (
	maxLevel = 62
	unbound  = uint64(1) << 63
)

// Unknown returns a new unknown, to be bound by one Root.
func (g *Graph) Unknown() Ref {
	g.unknown++
	return g.add(node{op: unknown, payload: uint64(maxLevel + g.unknown)}, unbound)
}

// Root returns the value of unknown, between low and high, at which residual
// is zero. The ends may come in either order. Where residual has the same sign
// at both, the value is the end with the smaller |residual|, low if they are
// equal; where residual is NaN, or an end is not finite, it is NaN. The unknown
// must come from Unknown and mean nothing outside residual.
//
// The unknown is renamed by how deep roots nest inside residual, so that two
// roots that differ only in their unknown are one value.
func (g *Graph) Root(u, low, high, residual Ref) Ref {
	if n := g.nodes[u]; n.op != unknown || n.payload <= maxLevel {
		panic("tape: the unknown of a root must come from Unknown")
	}
	b := binder{g: g, from: u, done: map[Ref]Ref{}}
	level := 1 + b.depth(residual)
	if level >= maxLevel {
		panic("tape: roots nest too deep")
	}
	bit := uint64(1) << level
	b.to = g.add(node{op: unknown, payload: uint64(level)}, bit)
	body := b.rename(residual)
	if g.free[body]&bit == 0 {
		// Nothing to solve: the same residual at both ends.
		return g.Add(low, g.Mul(g.Constant(0), body))
	}
	free := g.free[low] | g.free[high] | g.free[body]&^bit
	return g.add(node{op: root, a: low, b: high, c: b.to, d: body}, free)
}

// Bracketed returns 1 where the ends of a Root have residuals of opposite sign
// or zero, 0 where its value is clamped to an end, NaN where it has none. It
// costs nothing beyond the root itself. Of what Root made of a residual without
// its unknown it is 0.
func (g *Graph) Bracketed(r Ref) Ref {
	if g.nodes[r].op != root {
		return g.Constant(0)
	}
	return g.add(node{op: bracketed, a: r}, g.free[r])
}

// binder rebuilds what depends on one unknown in terms of another. Nodes older
// than the unknown cannot depend on it.
type binder struct {
	g        *Graph
	from, to Ref
	done     map[Ref]Ref
	deep     map[Ref]int
}

// depth is the highest level of a root in r that depends on the unknown, 0 if
// there is none, −1 if r does not depend on it.
func (b *binder) depth(r Ref) int {
	d := b.dependent(r)
	return max(d, 0)
}

func (b *binder) dependent(r Ref) int {
	if r == b.from {
		return 0
	}
	if r < b.from || b.g.free[r]&unbound == 0 {
		return -1
	}
	if d, ok := b.deep[r]; ok {
		return d
	}
	d := -1
	for _, a := range b.g.nodes[r].arguments() {
		d = max(d, b.dependent(a))
	}
	if n := b.g.nodes[r]; n.op == root && d >= 0 {
		d = max(d, int(b.g.nodes[n.c].payload))
	}
	if b.deep == nil {
		b.deep = map[Ref]int{}
	}
	b.deep[r] = d
	return d
}

func (b *binder) rename(r Ref) Ref {
	if r == b.from {
		return b.to
	}
	if b.dependent(r) < 0 {
		return r
	}
	if s, ok := b.done[r]; ok {
		return s
	}
	s := b.rebuild(b.g.nodes[r])
	b.done[r] = s
	return s
}

func (b *binder) rebuild(n node) Ref {
	g := b.g
	switch n.op {
	case root:
		low, high, body := b.rename(n.a), b.rename(n.b), b.rename(n.d)
		free := g.free[low] | g.free[high] | g.free[body]&^g.free[n.c]
		return g.add(node{op: root, a: low, b: high, c: n.c, d: body}, free)
	case bracketed:
		return g.Bracketed(b.rename(n.a))
	}
	var renamed [3]Ref
	arity := operations[n.op].arity
	for i, a := range []Ref{n.a, n.b, n.c}[:arity] {
		renamed[i] = b.rename(a)
	}
	return g.apply(n.op, renamed[:arity]...)
}
