package tape

// Kinks lists the arguments of every absolute value that a value depends on,
// but for those inside a root's loop: where one is zero, the value may have an
// extreme to which no slope points.
func (g *Graph) Kinks(r Ref) []Ref {
	var kinks []Ref
	seen := map[Ref]bool{}
	var visit func(r Ref)
	visit = func(r Ref) {
		if seen[r] {
			return
		}
		seen[r] = true
		n := g.nodes[r]
		if n.op == abs && g.free[n.a] == 0 {
			kinks = append(kinks, n.a)
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
