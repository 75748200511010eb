package tape

import (
	"fmt"
	"math"

	"batchwright/tolerance/formula"
)

// Lower adds an expression to the graph. names gives the values of its names;
// what it does not know is looked up among the constants of package formula.
// The dimensions are not looked at: Check the expression first.
func (g *Graph) Lower(e *formula.Expression, names func(name string) (Ref, bool)) (Ref, error) {
	l := lowering{g: g, names: names}
	r := l.node(e.Root)
	return r, l.err
}

type lowering struct {
	g     *Graph
	names func(string) (Ref, bool)
	bound []binding // unknowns of the roots around, innermost last
	err   error
}

type binding struct {
	name  string
	value Ref
}

func (l *lowering) node(n formula.Node) Ref {
	switch n := n.(type) {
	case *formula.Number:
		return l.g.Constant(n.Value)
	case *formula.Name:
		return l.name(n)
	case *formula.Unary:
		if n.Operator == "not" {
			return l.g.Not(l.node(n.X))
		}
		return l.g.Neg(l.node(n.X))
	case *formula.Binary:
		return l.binary(n.Operator, l.node(n.X), l.node(n.Y))
	case *formula.Compare:
		return l.compare(n.Operator, l.node(n.X), l.node(n.Y))
	case *formula.Conditional:
		return l.g.Select(l.node(n.If), l.node(n.Then), l.node(n.Else))
	case *formula.Call:
		return l.call(n)
	case *formula.Root:
		return l.root(n)
	}
	panic(fmt.Sprintf("tape: no lowering for %T", n))
}

func (l *lowering) name(n *formula.Name) Ref {
	for i := len(l.bound) - 1; i >= 0; i-- {
		if l.bound[i].name == n.Name {
			return l.bound[i].value
		}
	}
	if r, ok := l.names(n.Name); ok {
		return r
	}
	if k, ok := formula.ConstantNamed(n.Name); ok {
		return l.g.Constant(k.Value)
	}
	if l.err == nil {
		l.err = fmt.Errorf("column %d: nothing is known of the name %q", n.Offset+1, n.Name)
	}
	return l.g.Constant(math.NaN())
}

func (l *lowering) binary(operator string, x, y Ref) Ref {
	switch operator {
	case "+":
		return l.g.Add(x, y)
	case "-":
		return l.g.Sub(x, y)
	case "*":
		return l.g.Mul(x, y)
	case "/":
		return l.g.Div(x, y)
	case "^":
		return l.g.Pow(x, y)
	case "and":
		return l.g.And(x, y)
	case "or":
		return l.g.Or(x, y)
	}
	panic("tape: no lowering for the operator " + operator)
}

func (l *lowering) compare(operator string, x, y Ref) Ref {
	switch operator {
	case "<":
		return l.g.Less(x, y)
	case "<=":
		return l.g.LessEqual(x, y)
	case ">":
		return l.g.Less(y, x)
	case ">=":
		return l.g.LessEqual(y, x)
	case "==":
		return l.g.Equal(x, y)
	case "!=":
		return l.g.Not(l.g.Equal(x, y))
	}
	panic("tape: no lowering for the comparison " + operator)
}

// calls is how each function of package formula is made of operations.
var calls = map[string]func(g *Graph, a []Ref) Ref{
	"sqrt":             func(g *Graph, a []Ref) Ref { return g.Sqrt(a[0]) },
	"ln":               func(g *Graph, a []Ref) Ref { return g.Ln(a[0]) },
	"log10":            func(g *Graph, a []Ref) Ref { return g.Div(g.Ln(a[0]), g.Constant(math.Ln10)) },
	"exp":              func(g *Graph, a []Ref) Ref { return g.Exp(a[0]) },
	"abs":              func(g *Graph, a []Ref) Ref { return g.Abs(a[0]) },
	"min":              func(g *Graph, a []Ref) Ref { return g.Min(a[0], a[1]) },
	"max":              func(g *Graph, a []Ref) Ref { return g.Max(a[0], a[1]) },
	"sin":              func(g *Graph, a []Ref) Ref { return g.Sin(a[0]) },
	"cos":              func(g *Graph, a []Ref) Ref { return g.Cos(a[0]) },
	"atan":             func(g *Graph, a []Ref) Ref { return g.Atan(a[0]) },
	"parallel":         func(g *Graph, a []Ref) Ref { return g.Parallel(a[0], a[1]) },
	"bessel_i0_scaled": func(g *Graph, a []Ref) Ref { return g.BesselI0Scaled(a[0]) },
	"bessel_i1_scaled": func(g *Graph, a []Ref) Ref { return g.BesselI1Scaled(a[0]) },
}

func (l *lowering) call(n *formula.Call) Ref {
	arguments := make([]Ref, len(n.Arguments))
	for i, a := range n.Arguments {
		arguments[i] = l.node(a)
	}
	build, ok := calls[n.Function]
	if !ok {
		panic("tape: no lowering for the function " + n.Function)
	}
	return build(l.g, arguments)
}

func (l *lowering) root(n *formula.Root) Ref {
	low, high := l.node(n.Low), l.node(n.High)
	u := l.g.Unknown()
	l.bound = append(l.bound, binding{n.Unknown, u})
	residual := l.node(n.Residual)
	l.bound = l.bound[:len(l.bound)-1]
	return l.g.Root(u, low, high, residual)
}
