package document

import (
	"fmt"
	"slices"
	"strings"
)

// Editor changes entries of the mappings of a YAML document and keeps the rest
// of its text: order, spelling, comments. What cannot be changed in its place is
// a complaint, and then nothing is changed.
type Editor struct {
	file    string
	source  *source
	root    *Node
	anchors []*anchor
	edits   []placed
	wanted  map[*Node][]Pair // what mappings that were changed are to hold
	faults  Faults
}

// placed is an edit and the node that it is part of.
type placed struct {
	Edit
	of *Node
}

// NewEditor reads a document to be changed.
func NewEditor(file string, text []byte) (*Editor, Complaints) {
	root, anchors, faults := parse(file, text)
	if len(faults) > 0 {
		return nil, faults
	}
	return &Editor{file: file, source: newSource(text), root: root, anchors: anchors, wanted: map[*Node][]Pair{}}, nil
}

// Root is the document as it was.
func (e *Editor) Root() *Node { return e.root }

// Rewrite changes a mapping of the document, once. Pairs whose keys are written
// in it get their new value where they stand; the others take the place of the
// entry of the key at, which goes, as do the entries of the keys in drop. The
// comments in what goes are kept, on lines of their own above its place.
func (e *Editor) Rewrite(m *Node, at string, pairs []Pair, drop ...string) {
	r := rewrite{Editor: e, mapping: m, at: at, drop: drop}
	switch i := r.index(at); {
	case m == nil || m.Kind != Mapping || i < 0:
		e.refuse(m, "entry "+at+" that is not written here", at+": written in the mapping itself, not merged into it")
	case m.style == bare || !m.Span.certain():
		e.refuse(m, "mapping that cannot be changed in its place", "braces around it, or a line for each entry")
	default:
		e.wanted[m] = r.divide(pairs)
		r.make()
	}
	for _, key := range drop {
		if n := m.Get(key); n != nil && r.index(key) < 0 {
			e.refuse(m, key+" that is merged into the mapping and has to go", "a mapping without <<, or one merged that has no "+key)
		}
	}
}

// refuse complains of a node that cannot be changed.
func (e *Editor) refuse(n *Node, message, expected string) {
	c := Complaint{File: e.file, Message: message, Expected: expected}
	if n != nil {
		c.Line, c.Column = n.Line, n.Column
	}
	e.faults.AddAll(Complaints{c})
}

// Bytes is the text with every change made. The error is Complaints: what could
// not be changed, and why.
func (e *Editor) Bytes() ([]byte, error) {
	e.checkShared()
	if list := e.faults.List(); len(list) > 0 {
		return nil, list
	}
	edits := make([]Edit, len(e.edits))
	for i, p := range e.edits {
		edits[i] = p.Edit
	}
	out, err := Replace(e.source.text, edits)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", e.file, err)
	}
	if len(edits) == 0 {
		return out, nil
	}
	n, faults := Parse(e.file, out)
	if len(faults) > 0 || !e.asWanted(e.root, n) {
		e.refuse(e.edits[0].of, "entries that cannot be changed in their place", "a line for each entry, or braces around them all on one line")
		return nil, e.faults.List()
	}
	return out, nil
}

// checkShared refuses changes inside of a node that is used at other places
// too, unless those are written anew as well.
func (e *Editor) checkShared() {
	for _, a := range e.anchors {
		i := slices.IndexFunc(e.edits, func(p placed) bool {
			return !a.value.at.certain() || a.value.at.meets(p.Span)
		})
		if i < 0 {
			continue
		}
		for _, use := range a.uses {
			if !slices.ContainsFunc(e.edits, func(p placed) bool { return p.holds(use.Span) && p.Start < p.End }) {
				e.refuse(e.edits[i].of, fmt.Sprintf("change inside &%s, which line %d uses too", a.name, use.Line),
					fmt.Sprintf("line %d written out, without *%s", use.Line, a.name))
				break
			}
		}
	}
}

// asWanted compares a node of the document as it was with what was written,
// changes allowed for.
func (e *Editor) asWanted(was, is *Node) bool {
	if was.Kind != is.Kind || was.Value != is.Value || len(was.Items) != len(is.Items) {
		return false
	}
	for i := range was.Items {
		if !e.asWanted(was.Items[i], is.Items[i]) {
			return false
		}
	}
	pairs := was.Pairs
	if changed, ok := e.wanted[was]; ok {
		pairs = changed
	}
	return slices.EqualFunc(pairs, is.Pairs, func(a, b Pair) bool {
		return a.Key.Value == b.Key.Value && e.asWanted(a.Value, b.Value)
	})
}

// newline is the line break of the document: its first.
func (s *source) newline() string {
	end := s.lineEnd(0)
	if end == len(s.text) {
		return "\n"
	}
	return string(s.text[end:s.nextLine(end)])
}

// column is as many spaces as there are characters before i on its line.
func (s *source) column(i int) string {
	line := []rune(string(s.text[s.lineStart(i):i]))
	return strings.Repeat(" ", len(line))
}
