// Package formula is the equation language: one line of plain arithmetic with
// names, physical dimensions and, where an unknown stands on both sides,
//
//	root(i, 1e-9*ampere, 0.1*ampere, residual in i)
//
// Circuit kinds state their equations in it and so do users; package tape
// turns the expressions into programs. The grammar is
//
//   - - * / ^   < <= > >= == !=   and or not   condition ? a : b
//     sqrt ln log10 exp abs min max sin cos atan parallel
//     bessel_i0_scaled bessel_i1_scaled root
//
// over numbers, names (`coil`, `in.level`) and Constants. Everything is in SI
// units: ten kilohms is 10000*ohm. A bare 0 fits any dimension. A condition
// that stands alone is worth 1 or 0.
package formula

import (
	"fmt"
	"strings"

	"batchwright/bom/quantity"
)

// Expression is one parsed expression. Check writes the dimensions into its
// nodes, so an Expression must not be checked by two goroutines at once.
type Expression struct {
	Text string
	Root Node
}

// Node is one of *Number, *Name, *Unary, *Binary, *Compare, *Conditional,
// *Call and *Root.
type Node interface{ place() *Place }

// Place is where a node stands and, once checked, what it measures.
type Place struct {
	Offset    int                // in runes from the start of Expression.Text
	Dimension quantity.Dimension // after Check; a condition has none
}

func (p *Place) place() *Place { return p }

// PlaceOf returns where n stands.
func PlaceOf(n Node) Place { return *n.place() }

type (
	// Number is a literal, in SI units.
	Number struct {
		Place
		Value float64
	}
	// Name is a part, setting, other equation, constant or a root's unknown.
	Name struct {
		Place
		Name string // at most one dot: "coil", "in.level"
	}
	// Unary is -x or not c.
	Unary struct {
		Place
		Operator string // "-", "not"
		X        Node
	}
	// Binary is arithmetic on two numbers, or and/or on two conditions.
	Binary struct {
		Place           // of the operator
		Operator string // "+", "-", "*", "/", "^", "and", "or"
		X, Y     Node
	}
	// Compare is a condition on two numbers of one dimension.
	Compare struct {
		Place           // of the operator
		Operator string // "<", "<=", ">", ">=", "==", "!="
		X, Y     Node
	}
	// Conditional is If ? Then : Else.
	Conditional struct {
		Place
		If, Then, Else Node
	}
	// Call is one of Functions, except root.
	Call struct {
		Place
		Function  string
		Arguments []Node
	}
	// Root is the Unknown between Low and High at which Residual is zero.
	// Unknown is known in Residual only.
	Root struct {
		Place
		Unknown             string
		Low, High, Residual Node
	}
)

// isCondition tells a truth from a number; the grammar decides, so no name is
// ever a truth.
func isCondition(n Node) bool {
	switch n := n.(type) {
	case *Compare:
		return true
	case *Unary:
		return n.Operator == "not"
	case *Binary:
		return n.Operator == "and" || n.Operator == "or"
	}
	return false
}

// Mistake is one thing wrong in an expression. Line counts from 1 in a list of
// equations and is 0 in a single expression; Offset counts runes from the
// start of that text or line.
type Mistake struct {
	Line, Offset                      int
	Message, Found, Expected, Nearest string
}

func (m Mistake) Error() string {
	var b strings.Builder
	if m.Line > 0 {
		fmt.Fprintf(&b, "line %d, ", m.Line)
	}
	fmt.Fprintf(&b, "column %d: %s", m.Offset+1, m.Message)
	if m.Found != "" {
		fmt.Fprintf(&b, ": found %q", m.Found)
	}
	if m.Expected != "" {
		fmt.Fprintf(&b, ", expected %s", m.Expected)
	}
	if m.Nearest != "" {
		fmt.Fprintf(&b, "; nearest: %s", m.Nearest)
	}
	return b.String()
}

// Mistakes are all that was found wrong, in the order of the text. An empty
// list means none; it is not an error value to return as such.
type Mistakes []Mistake

func (ms Mistakes) Error() string {
	lines := make([]string, len(ms))
	for i, m := range ms {
		lines[i] = m.Error()
	}
	return strings.Join(lines, "\n")
}
