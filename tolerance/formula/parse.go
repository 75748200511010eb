package formula

import (
	"errors"
	"strings"

	"batchwright/bom/document"

	"github.com/expr-lang/expr/ast"
	"github.com/expr-lang/expr/file"
	"github.com/expr-lang/expr/parser"
)

// Parse reads one expression. The result is nil if there is any mistake.
func Parse(text string) (*Expression, Mistakes) {
	if strings.TrimSpace(text) == "" {
		return nil, Mistakes{{Message: "an empty expression", Expected: "arithmetic, as in 1/(2*pi*sqrt(coil*capacitance))"}}
	}
	prepared, mistakes := scan(text)
	if len(mistakes) > 0 {
		return nil, mistakes
	}
	tree, err := parser.Parse(prepared)
	if err != nil {
		return nil, Mistakes{grammatical(prepared, err)}
	}
	c := &converter{}
	root := c.convert(tree.Node)
	if len(c.mistakes) > 0 {
		return nil, c.mistakes
	}
	return &Expression{Text: text, Root: root}, nil
}

// grammatical words a complaint of the parser in our own terms: only its
// position is kept.
func grammatical(text string, err error) Mistake {
	at, ended := len(text), false
	var where *file.Error
	if errors.As(err, &where) {
		at = max(0, min(where.From, len(text)))
		ended = strings.HasSuffix(where.Message, "EOF")
	}
	rest := strings.TrimSpace(text[at:])
	if ended || rest == "" {
		return Mistake{Offset: len(text), Message: "the expression is incomplete", Expected: "a number, a name or a closing bracket"}
	}
	return Mistake{Offset: at, Message: "the expression cannot be read on from here", Found: firstToken(rest), Expected: "an operator between two values, and brackets in pairs"}
}

// firstToken is the word, number or sign at the start of text.
func firstToken(text string) string {
	n := strings.IndexFunc(text, func(r rune) bool { return !isLetter(r) && !isDigit(r) && r != '.' })
	switch n {
	case -1:
		return text
	case 0:
		return text[:1]
	}
	return text[:n]
}

// converter turns the parser's tree, which can say far more, into ours. What
// the scan cannot see but arithmetic cannot mean is refused here.
type converter struct{ mistakes Mistakes }

func (c *converter) refuse(n ast.Node, message, found, expected string) Node {
	c.mistakes = append(c.mistakes, Mistake{Offset: n.Location().From, Message: message, Found: found, Expected: expected})
	return &Number{}
}

func placed(n ast.Node) Place { return Place{Offset: n.Location().From} }

func (c *converter) convert(n ast.Node) Node {
	switch n := n.(type) {
	case *ast.IntegerNode:
		return &Number{placed(n), float64(n.Value)}
	case *ast.FloatNode:
		return &Number{placed(n), n.Value}
	case *ast.IdentifierNode:
		return &Name{placed(n), n.Value}
	case *ast.MemberNode:
		return c.member(n)
	case *ast.UnaryNode:
		return c.unary(n)
	case *ast.BinaryNode:
		return c.binary(n)
	case *ast.ConditionalNode:
		return c.conditional(n)
	case *ast.BuiltinNode:
		return c.call(n, n.Name, n.Arguments)
	case *ast.CallNode:
		if callee, ok := n.Callee.(*ast.IdentifierNode); ok {
			return c.call(n, callee.Value, n.Arguments)
		}
	}
	if n == nil {
		c.mistakes = append(c.mistakes, Mistake{Message: "the expression is incomplete", Expected: "a number or a name"})
		return &Number{}
	}
	return c.refuse(n, "not arithmetic", "", "numbers, names, + - * / ^ and functions")
}

// value converts a node that must be a number.
func (c *converter) value(n ast.Node) Node {
	x := c.convert(n)
	if isCondition(x) {
		c.refuse(n, "a condition stands where a number is needed", "", "condition ? value : value")
	}
	return x
}

// condition converts a node that must be true or false.
func (c *converter) condition(n ast.Node) Node {
	x := c.convert(n)
	if !isCondition(x) {
		c.mistakes = append(c.mistakes, Mistake{Offset: start(x), Message: "a number stands where a condition is needed",
			Expected: "a comparison such as x > 0; after not, in brackets"})
	}
	return x
}

// start is the offset of the first character of a node.
func start(n Node) int {
	switch n := n.(type) {
	case *Binary:
		return start(n.X)
	case *Compare:
		return start(n.X)
	case *Conditional:
		return start(n.If)
	}
	return n.place().Offset
}

func (c *converter) member(n *ast.MemberNode) Node {
	head, ok := n.Node.(*ast.IdentifierNode)
	tail, named := n.Property.(*ast.StringNode)
	if !ok || !named || n.Optional || n.Method {
		return c.refuse(n, "not arithmetic", ".", "a name with one dot, as in.level")
	}
	return &Name{placed(head), strings.Replace(head.Value, string(disguise), "i", 1) + "." + tail.Value}
}

func (c *converter) unary(n *ast.UnaryNode) Node {
	switch n.Operator {
	case "-":
		return &Unary{placed(n), "-", c.value(n.Node)}
	case "+":
		return c.value(n.Node)
	case "not":
		return &Unary{placed(n), "not", c.condition(n.Node)}
	}
	return c.refuse(n, "not arithmetic", n.Operator, "- or not")
}

func (c *converter) binary(n *ast.BinaryNode) Node {
	switch n.Operator {
	case "+", "-", "*", "/", "^":
		return &Binary{placed(n), n.Operator, c.value(n.Left), c.value(n.Right)}
	case "and", "or":
		return &Binary{placed(n), n.Operator, c.condition(n.Left), c.condition(n.Right)}
	case "<", "<=", ">", ">=", "==", "!=":
		return &Compare{placed(n), n.Operator, c.value(n.Left), c.value(n.Right)}
	case "&&":
		// The scan lets no ampersand through: the parser has unrolled a
		// comparison of three, whose middle it shares between two nodes.
		return c.refuse(n, "comparisons cannot be chained", "", "a < b and b < c")
	}
	return c.refuse(n, "not arithmetic", n.Operator, "+ - * / ^, a comparison, and, or")
}

func (c *converter) conditional(n *ast.ConditionalNode) Node {
	x := &Conditional{If: c.condition(n.Cond), Then: c.value(n.Exp1), Else: c.value(n.Exp2)}
	x.Offset = start(x.If)
	return x
}

func (c *converter) call(n ast.Node, name string, arguments []ast.Node) Node {
	if name == rootFunction {
		return c.root(n, arguments)
	}
	f, ok := functionNamed(name)
	if !ok {
		c.refuse(n, "unknown function", name, "one of "+strings.Join(Functions(), ", "))
		c.mistakes[len(c.mistakes)-1].Nearest = document.Nearest(name, Functions())
		return &Number{}
	}
	if len(arguments) != f.arity {
		return c.refuse(n, "wrong number of arguments", name+"("+strings.Repeat("…", min(1, len(arguments)))+")", argumentCount(name, f.arity))
	}
	call := &Call{Place: placed(n), Function: name}
	for _, a := range arguments {
		call.Arguments = append(call.Arguments, c.value(a))
	}
	return call
}

func argumentCount(name string, arity int) string {
	return name + "(" + strings.Join([]string{"a", "b", "c"}[:arity], ", ") + ")"
}

func (c *converter) root(n ast.Node, arguments []ast.Node) Node {
	const usage = "root(unknown, low, high, residual)"
	if len(arguments) != 4 {
		return c.refuse(n, "wrong number of arguments", rootFunction, usage)
	}
	unknown, ok := arguments[0].(*ast.IdentifierNode)
	if !ok {
		return c.refuse(arguments[0], "the unknown of a root is a plain name of its own", "", usage)
	}
	x := &Root{placed(n), unknown.Value, c.value(arguments[1]), c.value(arguments[2]), c.value(arguments[3])}
	if !mentions(x.Residual, x.Unknown) {
		return c.refuse(arguments[3], "the residual does not contain the unknown", unknown.Value, usage)
	}
	return x
}

// mentions reports whether name occurs in n other than as the unknown of an
// inner root.
func mentions(n Node, name string) bool {
	found := false
	appear(n, nil, func(other string) { found = found || other == name })
	return found
}
