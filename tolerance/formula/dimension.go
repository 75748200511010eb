package formula

import (
	"math"
	"slices"
	"strconv"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

// Scope says what the names of an expression measure. Constants need not be
// in it; a name that is in it hides the constant.
type Scope interface {
	Dimension(name string) (quantity.Dimension, bool)
	Names() []string // for suggestions
}

// Check works out what e measures and writes it into every node. Values that
// are added, compared or alternatives must agree, arguments of ln and the like
// must be plain numbers, and a power of something with a dimension must be a
// constant. A literal 0, and no other number, agrees with everything.
func (e *Expression) Check(s Scope) (quantity.Dimension, Mistakes) {
	c := &checker{scope: s}
	m := c.check(e.Root)
	slices.SortStableFunc(c.mistakes, func(a, b Mistake) int { return a.Offset - b.Offset })
	return m.dimension, c.mistakes
}

// measure is a dimension, or any: of a literal zero, and of what is wrong and
// has been complained of already.
type measure struct {
	dimension quantity.Dimension
	any       bool
}

var (
	number  = measure{}
	anybody = measure{any: true}
)

type binding struct {
	name    string
	measure measure
}

type checker struct {
	scope    Scope
	bound    []binding // unknowns of the roots around, innermost last
	mistakes Mistakes
}

func (c *checker) complain(at int, message, found, expected string) measure {
	c.mistakes = append(c.mistakes, Mistake{Offset: at, Message: message, Found: found, Expected: expected})
	return anybody
}

func (c *checker) check(n Node) measure {
	m := c.of(n)
	n.place().Dimension = m.dimension
	return m
}

func (c *checker) of(n Node) measure {
	switch n := n.(type) {
	case *Number:
		return measure{any: n.Value == 0}
	case *Name:
		return c.name(n)
	case *Unary:
		return c.check(n.X)
	case *Binary:
		return c.binary(n)
	case *Compare:
		c.agree(n.X, n.Y, n.Operator)
		return number
	case *Conditional:
		c.check(n.If)
		return c.agree(n.Then, n.Else, ":")
	case *Call:
		return c.call(n)
	case *Root:
		return c.root(n)
	}
	panic("formula: unknown node")
}

func (c *checker) name(n *Name) measure {
	for _, b := range slices.Backward(c.bound) {
		if b.name == n.Name {
			return b.measure
		}
	}
	if d, ok := c.scope.Dimension(n.Name); ok {
		return measure{dimension: d}
	}
	if k, ok := ConstantNamed(n.Name); ok {
		return measure{dimension: k.Dimension}
	}
	c.complain(n.Offset, "unknown name", n.Name, "a part, a setting, an earlier result or a unit")
	c.mistakes[len(c.mistakes)-1].Nearest = c.suggest(n.Name)
	return anybody
}

// suggest returns the known name nearest to a misspelt one.
func (c *checker) suggest(word string) string {
	known := slices.Clone(c.scope.Names())
	for _, b := range c.bound {
		known = append(known, b.name)
	}
	for _, k := range constants {
		known = append(known, k.Name)
	}
	return document.Nearest(word, known)
}

// agree checks that x and y measure the same and returns what.
func (c *checker) agree(x, y Node, operator string) measure {
	return c.join(x, y, c.check(x), c.check(y), operator)
}

// join complains of whichever of two values is the likelier mistake: the one
// that is a bare number, or else the second.
func (c *checker) join(x, y Node, a, b measure, operator string) measure {
	switch {
	case a.any:
		x.place().Dimension = b.dimension
		return b
	case b.any:
		y.place().Dimension = a.dimension
		return a
	case a.dimension == b.dimension:
		return a
	}
	if bare(x) && !bare(y) {
		x, y, a, b = y, x, b, a
	}
	c.complain(start(y), "these do not go together with "+operator, b.dimension.String(), wanted(a.dimension, y))
	return anybody
}

// bare reports whether n is nothing but numbers.
func bare(n Node) bool { _, ok := constantValue(n); return ok }

// wanted words the dimension needed in place of n, with the mend if n is a
// bare number that only lacks its unit.
func wanted(d quantity.Dimension, n Node) string {
	if d == (quantity.Dimension{}) {
		return "a plain number"
	}
	text := d.String()
	v, ok := constantValue(n)
	if !ok {
		return text
	}
	for _, u := range quantity.Words() {
		if u.Dimension == d {
			return text + ", as in " + strconv.FormatFloat(v, 'g', -1, 64) + "*" + u.Word
		}
	}
	return text
}

func (c *checker) binary(n *Binary) measure {
	switch n.Operator {
	case "+", "-":
		return c.agree(n.X, n.Y, n.Operator)
	case "^":
		return c.power(n)
	}
	a, b := c.check(n.X), c.check(n.Y)
	switch n.Operator {
	case "*":
		return c.sized(n.Offset, measure{dimension: a.dimension.Mul(b.dimension), any: a.wrong(n.X) || b.wrong(n.Y)})
	case "/":
		return c.sized(n.Offset, measure{dimension: a.dimension.Div(b.dimension), any: a.wrong(n.X) || b.wrong(n.Y)})
	}
	return number // and, or
}

// wrong tells a measure that is unknown because of a mistake from a zero: a
// product with a literal zero is no literal zero any more.
func (m measure) wrong(n Node) bool { return m.any && !bare(n) }

// widest bounds the exponents of a dimension, far beyond physics and far
// within int16, in twelfths.
const widest = 12 * 60

func (c *checker) sized(at int, m measure) measure {
	for _, exponent := range m.dimension {
		if exponent > widest || exponent < -widest {
			return c.complain(at, "the dimension grows beyond sense", m.dimension.String(), "exponents up to 60")
		}
	}
	return m
}

// power checks x^y: both plain numbers, or a constant exponent whose product
// with the base's dimension is a whole number of twelfths.
func (c *checker) power(n *Binary) measure {
	a, b := c.check(n.X), c.check(n.Y)
	if !b.any && b.dimension != (quantity.Dimension{}) {
		return c.complain(start(n.Y), "an exponent with a dimension", b.dimension.String(), "a plain number")
	}
	if a.any {
		return measure{any: a.wrong(n.X)}
	}
	if a.dimension == (quantity.Dimension{}) {
		return number
	}
	y, ok := constantValue(n.Y)
	if !ok {
		return c.complain(start(n.Y), "the exponent of "+a.dimension.String()+" varies", "", "a constant exponent, or a base that is a plain number")
	}
	twelfths := math.Round(12 * y)
	if !(math.Abs(y) <= 20) || math.Abs(12*y-twelfths) > 1e-9 {
		return c.complain(start(n.Y), "an exponent that no dimension can take", strconv.FormatFloat(y, 'g', -1, 64), "a multiple of 1/12 up to 20")
	}
	return c.raised(n.Offset, a, int(twelfths), 12)
}

func (c *checker) raised(at int, m measure, num, den int) measure {
	d, ok := m.dimension.Pow(num, den)
	if !ok {
		return c.complain(at, "no whole twelfth of a dimension comes of this root", m.dimension.String(), "a dimension that divides")
	}
	return c.sized(at, measure{dimension: d, any: m.any})
}

// constantValue evaluates an expression of literals only.
func constantValue(n Node) (float64, bool) {
	switch n := n.(type) {
	case *Number:
		return n.Value, true
	case *Unary:
		x, ok := constantValue(n.X)
		return -x, ok && n.Operator == "-"
	case *Binary:
		x, ok := constantValue(n.X)
		y, also := constantValue(n.Y)
		if !ok || !also {
			return 0, false
		}
		switch n.Operator {
		case "+":
			return x + y, true
		case "-":
			return x - y, true
		case "*":
			return x * y, true
		case "/":
			return x / y, true
		case "^":
			return math.Pow(x, y), true
		}
	}
	return 0, false
}

func (c *checker) call(n *Call) measure {
	f, ok := functionNamed(n.Function)
	if !ok || len(n.Arguments) != f.arity {
		panic("formula: call of " + n.Function + " got past Parse")
	}
	first := c.check(n.Arguments[0])
	switch f.rule {
	case halved:
		return c.raised(n.Offset, first, 1, 2)
	case same:
		for _, a := range n.Arguments[1:] {
			first = c.join(n.Arguments[0], a, first, c.check(a), n.Function)
		}
		return first
	}
	if !first.any && first.dimension != (quantity.Dimension{}) {
		c.complain(start(n.Arguments[0]), n.Function+" takes a plain number", first.dimension.String(), "a ratio of two alike quantities")
	}
	return number
}

func (c *checker) root(n *Root) measure {
	m := c.agree(n.Low, n.High, "as the ends of a root")
	if c.taken(n.Unknown) {
		c.complain(n.Offset, "the unknown of this root has a meaning already", n.Unknown, "a name of its own")
	}
	c.bound = append(c.bound, binding{n.Unknown, m})
	c.check(n.Residual)
	c.bound = c.bound[:len(c.bound)-1]
	return m
}

func (c *checker) taken(name string) bool {
	for _, b := range c.bound {
		if b.name == name {
			return true
		}
	}
	if _, ok := c.scope.Dimension(name); ok {
		return true
	}
	_, ok := ConstantNamed(name)
	return ok
}
