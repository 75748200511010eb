// Package tape turns expressions into straight-line programs over columns of
// units.
//
// A Graph collects values as nodes; equal nodes are one node, and what is
// constant is computed at once. A Program is the part of a graph that some
// outputs need, in order, over a file of columns that are used again as soon
// as their value is no longer needed. It knows three things about its outputs:
// their Values for a block of units, their Tangents along a direction per unit,
// and their Bounds over a box of inputs. Every operation is one row of a table
// that knows all three. A Root, the unknown at which a residual is zero, is a
// loop: what does not depend on its unknown is computed outside.
//
// NaN is a value like another and is never hidden: an operation on NaN gives
// NaN, except where the result does not depend on it (false and NaN is false;
// a choice takes only the side that is chosen).
package tape

import "math"

// Ref is a value in a Graph. Refs of different graphs do not mix.
type Ref int32

// node is one value: an operation on earlier nodes. It is the key of the
// hash-consing, so the payload is kept as bits, for NaN is not equal to itself.
type node struct {
	op      code
	a, b, c Ref
	d       Ref    // of a root: the residual
	payload uint64 // of a constant: its bits; of an input: its column; of an unknown: its level or serial number
}

// Graph is a set of values that grows. It is not safe for concurrent use.
type Graph struct {
	nodes []node
	known map[node]Ref
	// free holds, for each node, a bit for the level of every unknown in it
	// that no root in it binds; see bind.
	free    []uint64
	inputs  int
	unknown int // serial numbers handed out
}

// NewGraph returns an empty graph.
func NewGraph() *Graph { return &Graph{known: map[node]Ref{}} }

// Constant returns the value v in every unit.
func (g *Graph) Constant(v float64) Ref {
	return g.add(node{op: constant, payload: math.Float64bits(v)}, 0)
}

// Input returns a new column of inputs. Columns are numbered from 0 in the
// order of these calls.
func (g *Graph) Input() Ref {
	g.inputs++
	return g.add(node{op: input, payload: uint64(g.inputs - 1)}, 0)
}

// Inputs returns how many columns have been made.
func (g *Graph) Inputs() int { return g.inputs }

// Value reports the value of a constant.
func (g *Graph) Value(r Ref) (float64, bool) {
	n := g.nodes[r]
	return math.Float64frombits(n.payload), n.op == constant
}

func (g *Graph) is(r Ref, v float64) bool {
	k, ok := g.Value(r)
	return ok && k == v
}

// add returns the node, the one that is there already if it is.
func (g *Graph) add(n node, free uint64) Ref {
	if r, ok := g.known[n]; ok {
		return r
	}
	r := Ref(len(g.nodes))
	g.nodes = append(g.nodes, n)
	g.free = append(g.free, free)
	g.known[n] = r
	return r
}

// apply adds an operation of the table on up to three values; of constants
// only, it is computed at once.
func (g *Graph) apply(op code, arguments ...Ref) Ref {
	row := &operations[op]
	if len(arguments) != row.arity {
		panic("tape: " + row.name + " with a wrong number of arguments")
	}
	var r [3]Ref
	var v [3]float64
	free, fixed := uint64(0), true
	for i, a := range arguments {
		r[i] = a
		free |= g.free[a]
		k, ok := g.Value(a)
		v[i], fixed = k, fixed && ok
	}
	if fixed {
		return g.Constant(row.at(v[0], v[1], v[2]))
	}
	if row.commutes && r[0] > r[1] {
		r[0], r[1] = r[1], r[0]
	}
	return g.add(node{op: op, a: r[0], b: r[1], c: r[2]}, free)
}

// arguments are the values a node is computed from.
func (n node) arguments() []Ref {
	switch n.op {
	case constant, input, unknown:
		return nil
	case root:
		return []Ref{n.a, n.b, n.d}
	case bracketed:
		return []Ref{n.a}
	}
	return []Ref{n.a, n.b, n.c}[:operations[n.op].arity]
}

// Add returns a + b.
func (g *Graph) Add(a, b Ref) Ref {
	switch {
	case g.is(a, 0):
		return b
	case g.is(b, 0):
		return a
	}
	return g.apply(add, a, b)
}

// Sub returns a − b.
func (g *Graph) Sub(a, b Ref) Ref {
	switch {
	case g.is(a, 0):
		return g.Neg(b)
	case g.is(b, 0):
		return a
	}
	return g.apply(sub, a, b)
}

// Mul returns a·b.
func (g *Graph) Mul(a, b Ref) Ref {
	switch {
	case g.is(a, 1):
		return b
	case g.is(b, 1):
		return a
	}
	return g.apply(mul, a, b)
}

// Div returns a/b. A product over the sum of the same two is known for what it
// is: both in parallel, whose bounds are exact.
func (g *Graph) Div(a, b Ref) Ref {
	if g.is(b, 1) {
		return a
	}
	if p, s := g.nodes[a], g.nodes[b]; p.op == mul && s.op == add && p.a == s.a && p.b == s.b {
		return g.Parallel(p.a, p.b)
	}
	return g.apply(div, a, b)
}

// Neg returns −a.
func (g *Graph) Neg(a Ref) Ref {
	if g.nodes[a].op == neg {
		return g.nodes[a].a
	}
	return g.apply(neg, a)
}

// Pow returns a^b. Small constant exponents become products and roots, which
// cost a tenth of a general power.
func (g *Graph) Pow(a, b Ref) Ref {
	exponent, ok := g.Value(b)
	if _, fixed := g.Value(a); !ok || fixed {
		return g.apply(pow, a, b)
	}
	switch exponent {
	case 0:
		return g.Constant(1)
	case 1:
		return a
	case 2:
		return g.Mul(a, a)
	case 3:
		return g.Mul(g.Mul(a, a), a)
	case 4:
		square := g.Mul(a, a)
		return g.Mul(square, square)
	case 0.5:
		return g.Sqrt(a)
	case 1.5:
		return g.Mul(a, g.Sqrt(a))
	case -1, -2, -3, -4, -0.5, -1.5:
		return g.Div(g.Constant(1), g.Pow(a, g.Constant(-exponent)))
	}
	return g.apply(pow, a, b)
}

// Parallel returns ab/(a+b), and 0 where both are 0.
func (g *Graph) Parallel(a, b Ref) Ref { return g.apply(parallel, a, b) }

// Sqrt returns the square root of a.
func (g *Graph) Sqrt(a Ref) Ref { return g.apply(sqrt, a) }

// Exp returns e^a.
func (g *Graph) Exp(a Ref) Ref { return g.apply(exp, a) }

// Ln returns the natural logarithm of a.
func (g *Graph) Ln(a Ref) Ref { return g.apply(ln, a) }

// Sin returns the sine of a.
func (g *Graph) Sin(a Ref) Ref { return g.apply(sin, a) }

// Cos returns the cosine of a.
func (g *Graph) Cos(a Ref) Ref { return g.apply(cos, a) }

// Atan returns the arc tangent of a.
func (g *Graph) Atan(a Ref) Ref { return g.apply(atan, a) }

// Abs returns |a|.
func (g *Graph) Abs(a Ref) Ref { return g.apply(abs, a) }

// Min returns the smaller of a and b.
func (g *Graph) Min(a, b Ref) Ref {
	if a == b {
		return a
	}
	return g.apply(minimum, a, b)
}

// Max returns the larger of a and b.
func (g *Graph) Max(a, b Ref) Ref {
	if a == b {
		return a
	}
	return g.apply(maximum, a, b)
}

// Less returns 1 where a < b, else 0.
func (g *Graph) Less(a, b Ref) Ref { return g.apply(less, a, b) }

// LessEqual returns 1 where a ≤ b, else 0.
func (g *Graph) LessEqual(a, b Ref) Ref { return g.apply(lessEqual, a, b) }

// Equal returns 1 where a = b, else 0.
func (g *Graph) Equal(a, b Ref) Ref { return g.apply(equal, a, b) }

// And returns 1 where neither is 0, else 0.
func (g *Graph) And(a, b Ref) Ref { return g.apply(and, a, b) }

// Or returns 0 where both are 0, else 1.
func (g *Graph) Or(a, b Ref) Ref { return g.apply(or, a, b) }

// Not returns 1 where a is 0, else 0.
func (g *Graph) Not(a Ref) Ref { return g.apply(not, a) }

// Select returns a where cond is not 0, else b.
func (g *Graph) Select(cond, a, b Ref) Ref {
	if v, ok := g.Value(cond); ok && !math.IsNaN(v) {
		if v != 0 {
			return a
		}
		return b
	}
	return g.apply(choose, cond, a, b)
}

// BesselI0Scaled returns e^−|a|·I₀(a).
func (g *Graph) BesselI0Scaled(a Ref) Ref { return g.apply(besselI0, a) }

// BesselI1Scaled returns e^−|a|·I₁(a).
func (g *Graph) BesselI1Scaled(a Ref) Ref { return g.apply(besselI1, a) }
