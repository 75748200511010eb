package document

import (
	"maps"
	"slices"
	"strings"

	"github.com/goccy/go-yaml/ast"
	"github.com/goccy/go-yaml/token"
)

// nodeBudget is how many nodes a document may have once every alias is written
// out; what a reader of the tree then visits is bounded.
const nodeBudget = 200_000

// measured is a node with its size and height once aliases are written out, and
// the place where it is written: an anchor before it, or the alias that stands
// for it.
type measured struct {
	*Node
	size, height int
	at           Span
}

// anchor is a named node; one whose value is still being read has none.
type anchor struct {
	name  string
	value measured
	done  bool
	uses  []*Node // its aliases
}

// converter turns the library's tree into nodes.
type converter struct {
	file    string
	source  *source
	lines   []string
	anchors map[string]*anchor
	named   []*anchor // all of them, in the order written
	flow    int       // open brackets and braces
	budget  int
	spent   bool
	faults  Faults
}

// at makes a node where the token is.
func (c *converter) at(kind Kind, t *token.Token) measured {
	n := &Node{Kind: kind, File: c.file, Line: 1, Column: 1}
	if t != nil && t.Position != nil {
		n.Line, n.Column = t.Position.Line, t.Position.Column
	}
	n.Span = Span{c.source.find(n.Line, n.Column), -1}
	return measured{n, 1, 0, n.Span}
}

// spend takes nodes from the budget and complains once when it is gone.
func (c *converter) spend(nodes int, n *Node) bool {
	c.budget -= nodes
	if c.budget < 0 && !c.spent {
		c.spent = true
		c.faults.Add(n, "too many values in one document, its aliases written out", "at most 200000")
	}
	return !c.spent
}

// node converts y, which stands under depth mappings and lists.
func (c *converter) node(y ast.Node, depth int) measured {
	if y == nil {
		return c.at(Null, nil)
	}
	if depth > deepest {
		n := c.at(Null, y.GetToken())
		c.faults.Add(n.Node, "nested too deep", "at most 32 levels")
		c.spent = true
		return n
	}
	switch y := y.(type) {
	case *ast.MappingNode:
		return c.mapping(y, y.Start, y.Values, depth)
	case *ast.MappingValueNode:
		return c.mapping(y, nil, []*ast.MappingValueNode{y}, depth)
	case *ast.SequenceNode:
		return c.sequence(y, depth)
	case *ast.AnchorNode:
		return c.anchor(y, depth)
	case *ast.AliasNode:
		return c.alias(y, depth)
	case *ast.TagNode:
		n := c.at(Null, y.Start)
		n.Value = y.Start.Value
		c.faults.Add(n.Node, "a tag", "a plain value; tags have no use here")
		return c.node(y.Value, depth)
	case *ast.LiteralNode:
		return c.literal(y)
	}
	return c.scalar(y)
}

// nodeAfter converts what follows a colon or dash. Where nothing does, its place
// is right behind the mark.
func (c *converter) nodeAfter(mark *token.Token, y ast.Node, depth int) measured {
	n := c.node(y, depth)
	switch y.(type) {
	case *ast.AliasNode, *ast.AnchorNode:
		return n
	}
	if n.Kind == Null && n.Value == "" && mark != nil && mark.Position != nil {
		n.Line, n.Column = mark.Position.Line, mark.Position.Column+1
		if start := c.source.find(mark.Position.Line, mark.Position.Column); c.isMark(start) {
			n.occupy(Span{start + 1, start + 1})
		}
	}
	return n
}

// isMark says whether a colon or dash stands at an offset.
func (c *converter) isMark(i int) bool { return c.source.byteAt(i) == ':' || c.source.byteAt(i) == '-' }

// occupy settles where a node and what is written for it stand.
func (m *measured) occupy(s Span) {
	m.Span, m.at = s, s
}

// scalar converts what is left: every plain or quoted value, as text.
func (c *converter) scalar(y ast.Node) measured {
	t := y.GetToken()
	n := c.at(Scalar, t)
	if t == nil {
		n.Kind = Null
	} else {
		n.Value = t.Value
		switch t.Type {
		case token.NullType:
			n.Kind = Null
			n.occupy(c.source.plain(n.Span.Start, n.Value))
		case token.ImplicitNullType:
			n.Kind, n.Value = Null, ""
			n.occupy(uncertain)
		case token.SingleQuoteType, token.DoubleQuoteType:
			n.lead = 1
			n.occupy(c.source.quoted(n.Span.Start))
		default:
			n.occupy(c.source.plain(n.Span.Start, n.Value))
		}
	}
	c.spend(1, n.Node)
	return n
}

// literal converts a block of text, and notes the column its lines begin at.
func (c *converter) literal(y *ast.LiteralNode) measured {
	n := c.at(Scalar, y.Start)
	n.block = true
	if y.Value != nil {
		n.Value = y.Value.Value
	}
	n.lead = c.blockLead(n.Node)
	n.occupy(c.source.block(n.Span.Start, n.lead))
	c.spend(1, n.Node)
	return n
}

// blockLead is how many spaces the lines of a block are indented by, judged by
// the first that is not blank: what the source has and the value has not.
func (c *converter) blockLead(n *Node) int {
	for row, text := range strings.Split(n.Value, "\n") {
		if n.Line+row >= len(c.lines) {
			break
		}
		line := c.lines[n.Line+row]
		if bare := strings.TrimLeft(line, " "); bare != "" {
			own := len(text) - len(strings.TrimLeft(text, " "))
			return max(0, len(line)-len(bare)-own)
		}
	}
	return 0
}

// sequence converts a list.
func (c *converter) sequence(y *ast.SequenceNode, depth int) measured {
	n := c.at(Sequence, y.Start)
	if !c.spend(1, n.Node) {
		return n
	}
	n.style = c.open(y.IsFlowStyle)
	for i, value := range y.Values {
		var dash *token.Token
		if i < len(y.Entries) && !y.IsFlowStyle {
			dash = y.Entries[i].Start
		}
		item := c.nodeAfter(dash, value, depth+1)
		n.Items = append(n.Items, item.Node)
		n.entries = append(n.entries, entry{value: item.Node, Span: item.at, at: item.at})
		n.add(item)
		if c.spent {
			break
		}
	}
	c.close(&n, ']')
	return n
}

// open enters a mapping or list.
func (c *converter) open(bracketed bool) style {
	switch {
	case bracketed:
		c.flow++
		return brackets
	case c.flow > 0:
		return bare
	}
	return rows
}

// close leaves it, and settles where it ends.
func (c *converter) close(n *measured, mark byte) {
	if n.style == brackets {
		c.flow--
	}
	last := n.Span.Start
	if n.style == brackets {
		last++
	}
	for _, e := range n.entries {
		if !e.certain() {
			n.occupy(uncertain)
			return
		}
		last = e.End
	}
	if n.style == brackets {
		n.occupy(c.source.closed(n.Span.Start, last, mark))
		return
	}
	n.occupy(Span{n.Span.Start, last})
}

func (m *measured) add(child measured) {
	m.size += child.size
	m.height = max(m.height, child.height+1)
}

// anchor converts a named value and remembers it.
func (c *converter) anchor(y *ast.AnchorNode, depth int) measured {
	a := &anchor{name: y.Name.GetToken().Value}
	c.anchors[a.name] = a
	c.named = append(c.named, a)
	a.value = c.node(y.Value, depth)
	if mark := c.at(Null, y.Start); a.value.Span.certain() {
		a.value.at = Span{mark.Span.Start, a.value.Span.End}
	}
	a.done = true
	return a.value
}

// alias is the very node of its anchor. Its size counts again, for whoever
// walks the tree walks it again.
func (c *converter) alias(y *ast.AliasNode, depth int) measured {
	n := c.at(Null, y.Start)
	n.Value = y.Value.GetToken().Value
	a, ok := c.anchors[n.Value]
	switch {
	case !ok:
		known := slices.Sorted(maps.Keys(c.anchors))
		c.faults.Add(n.Node, "an alias without its anchor", "*NAME after &NAME", known...)
		return n
	case !a.done:
		c.faults.Add(n.Node, "an alias inside its own anchor", "a value that does not contain itself")
		return n
	case depth+a.value.height > deepest:
		c.faults.Add(n.Node, "nested too deep when its aliases are written out", "at most 32 levels")
		c.spent = true
		return n
	}
	c.spend(a.value.size, n.Node)
	n.occupy(Span{n.Span.Start, n.Span.Start + 1 + len(n.Value)})
	a.uses = append(a.uses, n.Node)
	return measured{a.value.Node, a.value.size, a.value.height, n.at}
}
