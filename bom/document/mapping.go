package document

import (
	"github.com/goccy/go-yaml/ast"
	"github.com/goccy/go-yaml/token"
)

// mapping converts a mapping. It begins at its brace, or in block style at its
// first key.
func (c *converter) mapping(y ast.Node, start *token.Token, values []*ast.MappingValueNode, depth int) measured {
	if len(values) > 0 && (start == nil || start.Type != token.MappingStartType) {
		start = values[0].Key.GetToken()
	}
	n := c.at(Mapping, start)
	if !c.spend(1, n.Node) {
		return n
	}
	n.style = c.open(c.source.byteAt(n.Span.Start) == '{' && start.Type == token.MappingStartType)
	seen := map[string]bool{}
	var merged []measured
	for _, value := range values {
		if c.spent {
			break
		}
		if value.Key.IsMergeKey() {
			list, e := c.merge(value, depth)
			merged = append(merged, list...)
			n.entries = append(n.entries, e)
			continue
		}
		key, ok := c.key(value.Key)
		child := c.nodeAfter(value.Start, value.Value, depth+1)
		if !ok {
			continue
		}
		if seen[key.Value] {
			c.faults.Add(key.Node, "a key that is already there", "each key once in a mapping")
			continue
		}
		seen[key.Value] = true
		n.Pairs = append(n.Pairs, Pair{key.Node, child.Node})
		n.entries = append(n.entries, c.entry(value, key, child))
		n.add(child)
		n.size++
	}
	c.close(&n, '}')
	c.fold(&n, seen, merged)
	return n
}

// entry is a pair as it is written. A key without a colon has its value right
// behind it.
func (c *converter) entry(y *ast.MappingValueNode, key, child measured) entry {
	if child.Kind == Null && !child.at.certain() && key.at.certain() && c.source.byteAt(c.source.blanks(key.at.End)) != ':' {
		child.occupy(Span{key.at.End, key.at.End})
	}
	start := key.at.Start
	if question, ok := y.Key.(*ast.MappingKeyNode); ok {
		start = c.at(Null, question.Start).Span.Start
	}
	e := entry{key: key.Node, value: child.Node, Span: Span{start, child.at.End}, at: child.at}
	if !key.at.certain() || !child.at.certain() || child.at.Start < key.at.End {
		e.Span = uncertain
	}
	return e
}

// key converts a key, which must be a scalar.
func (c *converter) key(y ast.MapKeyNode) (measured, bool) {
	switch y := y.(type) {
	case *ast.MappingKeyNode:
		return c.complexKey(y)
	case *ast.AnchorNode:
		n := c.anchor(y, 0)
		return n, n.Kind == Scalar
	case *ast.TagNode, *ast.AliasNode, *ast.MergeKeyNode:
		n := c.at(Null, y.GetToken())
		c.faults.Add(n.Node, "a key that is no plain word", "a plain key")
		return n, false
	}
	n := c.scalar(y)
	if n.Kind == Null {
		n.Kind = Scalar // a key may read "null"
	}
	return n, true
}

// complexKey converts "? key"; only a scalar is taken.
func (c *converter) complexKey(y *ast.MappingKeyNode) (measured, bool) {
	if y.Value != nil {
		n := c.node(y.Value, deepest)
		if n.Kind == Scalar {
			return n, true
		}
	}
	n := c.at(Null, y.Start)
	c.faults.Add(n.Node, "a key that is no plain word", "a plain key")
	return n, false
}

// merge reads the value of a merge key "<<": a mapping, or a list of them.
func (c *converter) merge(y *ast.MappingValueNode, depth int) ([]measured, entry) {
	value := c.node(y.Value, depth)
	key := c.at(Scalar, y.Key.GetToken())
	key.Value = "<<"
	e := entry{merge: true, value: value.Node, Span: Span{key.Span.Start, value.at.End}, at: value.at}
	switch value.Kind {
	case Mapping:
		return []measured{value}, e
	case Sequence:
		var all []measured
		for _, item := range value.Items {
			if item.Kind != Mapping {
				c.faults.Add(item, "a merge of what is no mapping", "*NAME of a mapping, or a list of them")
				continue
			}
			all = append(all, measured{item, value.size, value.height, item.Span})
		}
		return all, e
	}
	c.faults.Add(key.Node, "a merge of what is no mapping", "*NAME of a mapping, or a list of them")
	return nil, e
}

// fold adds the pairs of merged mappings whose keys are not there yet.
func (c *converter) fold(n *measured, seen map[string]bool, merged []measured) {
	for _, m := range merged {
		if !c.spend(len(m.Pairs), n.Node) {
			return
		}
		n.size += m.size
		n.height = max(n.height, m.height)
		for _, p := range m.Pairs {
			if !seen[p.Key.Value] {
				seen[p.Key.Value] = true
				n.Pairs = append(n.Pairs, p)
			}
		}
	}
}
