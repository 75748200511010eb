package document

import (
	"strings"
	"unicode/utf8"
)

// Kind is what a node is.
type Kind int

// The kinds. Every scalar is text here; what it means is for its reader to say.
const (
	Scalar Kind = iota
	Mapping
	Sequence
	Null
)

// String names the kind as a complaint does.
func (k Kind) String() string {
	return [...]string{"a value", "a mapping", "a list", "nothing"}[k]
}

// Node is a piece of a document. Nodes are not changed after reading, and an
// anchor's node is shared by its aliases.
type Node struct {
	Kind         Kind
	Value        string // of a scalar
	Pairs        []Pair // of a mapping, in the order written
	Items        []*Node
	File         string
	Line, Column int // of the first character, quote and bar included
	// Span is where its text stands, without an anchor before it. Of a mapping or
	// list in block style it runs to the end of the last entry; a node that was
	// not read from YAML has none.
	Span Span

	block bool // the text is in the lines below, as of "|" and ">"
	lead  int  // characters before the text on its lines: a quote, or a block's indentation

	style   style
	entries []entry // of a mapping or list, as they are written
}

// style is how a mapping or list is written.
type style int

const (
	rows     style = iota // an entry a line
	brackets              // between braces or brackets
	bare                  // a mapping of one entry between brackets, without braces
)

// entry is an entry of a mapping or list as it is written: a merge too.
type entry struct {
	key   *Node // nil for an entry of a list, and for a merge
	merge bool
	value *Node
	Span       // of the entry
	at    Span // of its value: an anchor or an alias included
}

// Pair is an entry of a mapping. Neither node is nil.
type Pair struct{ Key, Value *Node }

// Get is the value of a key, or nil; nil also for a nil node.
func (n *Node) Get(key string) *Node {
	if n == nil {
		return nil
	}
	for _, p := range n.Pairs {
		if p.Key.Value == key {
			return p.Value
		}
	}
	return nil
}

// place is the line and column of the character at offset (counted from 0) of
// a scalar's value. Behind an escape in a quoted text, or in a text folded over
// several lines, it is only near.
func (n *Node) place(offset int) (line, column int) {
	if !n.block {
		return n.Line, n.Column + n.lead + offset
	}
	before := prefixRunes(n.Value, offset)
	row := strings.Count(before, "\n")
	rest := before[strings.LastIndexByte(before, '\n')+1:]
	return n.Line + 1 + row, 1 + n.lead + utf8.RuneCountInString(rest)
}

// prefixRunes is the first count characters of text.
func prefixRunes(text string, count int) string {
	for i := range text {
		if count == 0 {
			return text[:i]
		}
		count--
	}
	return text
}
