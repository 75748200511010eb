package tape

// Kink is where a value bends: where A equals B, or where A is zero if B is
// NoRef.
type Kink struct{ A, B Ref }

// NoRef is no value of any graph.
const NoRef Ref = -1

// Kinks lists where a value may bend: at the zero of an absolute value's
// argument, where the two sides of a min or max are equal, and where a
// comparison turns over; but for those inside a root's loop. There the value may
// have an extreme to which no slope points.
func (g *Graph) Kinks(r Ref) []Kink {
	var kinks []Kink
	seen := map[Ref]bool{}
	var visit func(r Ref)
	visit = func(r Ref) {
		if seen[r] {
			return
		}
		seen[r] = true
		n := g.nodes[r]
		switch {
		case g.free[r] != 0:
		case n.op == abs:
			kinks = append(kinks, Kink{n.a, NoRef})
		case n.op == minimum || n.op == maximum || n.op == less || n.op == lessEqual:
			kinks = append(kinks, Kink{n.a, n.b})
		}
		for _, a := range n.arguments() {
			visit(a)
		}
	}
	visit(r)
	return kinks
}

// Dependents says of every value of the graph, by its Ref, whether it depends on
// an input column.
func (g *Graph) Dependents(column int) []bool {
	depends := make([]bool, len(g.nodes))
	for r, n := range g.nodes { // arguments come before what is made of them
		if n.op == input {
			depends[r] = n.payload == uint64(column)
			continue
		}
		for _, a := range n.arguments() {
			depends[r] = depends[r] || depends[a]
		}
	}
	return depends
}
