package document

import (
	"strconv"
	"strings"
)

// flowText is a node as YAML in one line: {value: 180 pF, family: c0g}.
func flowText(n *Node) string {
	switch n.Kind {
	case Mapping:
		pairs := make([]string, len(n.Pairs))
		for i, p := range n.Pairs {
			pairs[i] = pairText(p)
		}
		return "{" + strings.Join(pairs, ", ") + "}"
	case Sequence:
		items := make([]string, len(n.Items))
		for i, item := range n.Items {
			items[i] = flowText(item)
		}
		return "[" + strings.Join(items, ", ") + "]"
	case Null:
		return "~"
	}
	return scalarText(n.Value, 0)
}

// pairText is an entry of a mapping in one line.
func pairText(p Pair) string { return scalarText(p.Key.Value, 0) + ": " + flowText(p.Value) }

// scalarText is a text as YAML in one line, in the quotes wanted: 0 for none
// where it can do without.
func scalarText(value string, quote byte) string {
	single := "'" + strings.ReplaceAll(value, "'", "''") + "'"
	switch {
	case quote == '\'' && readsAs(single, value):
		return single
	case quote == 0 && readsAs(value, value):
		return value
	}
	return strconv.Quote(value)
}

// readsAs says whether a text, as a key and as a value in a line of its own and
// between braces, reads as that value.
func readsAs(text, value string) bool {
	if strings.Trim(text, " ") != text || strings.ContainsAny(text, "\r\n\t") {
		return false
	}
	for _, c := range [...]struct{ before, after string }{{"", ""}, {"{", ", b: c}"}} {
		n, faults := Parse("", []byte(c.before+text+": "+text+c.after))
		if len(faults) > 0 || n.Kind != Mapping || len(n.Pairs) == 0 {
			return false
		}
		p := n.Pairs[0]
		if p.Key.Value != value || p.Value.Kind != Scalar || p.Value.Value != value {
			return false
		}
	}
	return true
}
