package document

import (
	"errors"
	"slices"
	"strconv"
	"strings"

	"batchwright/bom/quantity"
)

// Faults collects complaints, so that one run shows every mistake. The zero
// value is ready. The readers (Quantity, Word, Whole…) complain of a node that
// does not fit and report false; of a nil node, a key not written, they report
// false in silence.
type Faults struct{ found Complaints }

// Add complains of a node. The nearest of the known words is offered.
func (f *Faults) Add(n *Node, message, expected string, known ...string) {
	c := Complaint{Message: message, Expected: expected}
	if n != nil {
		c.File, c.Line, c.Column = n.File, n.Line, n.Column
		c.Found, c.Nearest = n.Value, Nearest(n.Value, known)
	}
	f.found = append(f.found, c)
}

// AddAt complains of a place inside a scalar: offset counts its characters from
// 0. The complaint's own file, line and column are filled in.
func (f *Faults) AddAt(n *Node, columnOffset int, c Complaint) {
	c.File = n.File
	c.Line, c.Column = n.place(columnOffset)
	f.found = append(f.found, c)
}

// AddAll takes over complaints that are complete.
func (f *Faults) AddAll(c Complaints) { f.found = append(f.found, c...) }

// List is everything collected, by place, each once; nil if there is nothing.
func (f *Faults) List() Complaints { return f.found.tidy() }

// Keys checks that n is a mapping and that every key is allowed. It reports
// whether n is a mapping.
func (f *Faults) Keys(n *Node, allowed ...string) bool {
	if !f.kind(n, Mapping) {
		return false
	}
	for _, p := range n.Pairs {
		if !slices.Contains(allowed, p.Key.Value) {
			f.Add(p.Key, "unknown key", "one of "+strings.Join(allowed, ", "), allowed...)
		}
	}
	return true
}

// Need is the value of a key that must be there; nil, and a complaint, if not.
func (f *Faults) Need(n *Node, key, what string) *Node {
	if v := n.Get(key); v != nil && v.Kind != Null {
		return v
	}
	if n != nil {
		f.found = append(f.found, Complaint{File: n.File, Line: n.Line, Column: n.Column, Message: key + " is missing", Expected: what})
	}
	return nil
}

// kind checks what a node is, and complains.
func (f *Faults) kind(n *Node, want Kind) bool {
	if n == nil {
		return false
	}
	if n.Kind != want {
		f.Add(n, n.Kind.String()+" where "+want.String()+" belongs", "")
	}
	return n.Kind == want
}

// Mapping reports whether n is a mapping, and complains if not.
func (f *Faults) Mapping(n *Node) bool { return f.kind(n, Mapping) }

// Items are those of a list. A scalar is taken as a list of one.
func (f *Faults) Items(n *Node) ([]*Node, bool) {
	if n != nil && n.Kind == Scalar {
		return []*Node{n}, true
	}
	if !f.kind(n, Sequence) {
		return nil, false
	}
	return n.Items, true
}

// Text is a scalar's text.
func (f *Faults) Text(n *Node) (string, bool) {
	if !f.kind(n, Scalar) {
		return "", false
	}
	return n.Value, true
}

// Quantity reads a scalar as a quantity.
func (f *Faults) Quantity(n *Node, want quantity.Unit) (quantity.Quantity, bool) {
	if !f.kind(n, Scalar) {
		return quantity.Quantity{}, false
	}
	q, err := quantity.Parse(n.Value, want)
	return q, f.took(n, err)
}

// Range reads a scalar as a range of quantities.
func (f *Faults) Range(n *Node, want quantity.Unit) (low, high quantity.Quantity, ok bool) {
	if !f.kind(n, Scalar) {
		return low, high, false
	}
	low, high, err := quantity.ParseRange(n.Value, want)
	return low, high, f.took(n, err)
}

// took turns an error of package quantity into a complaint.
func (f *Faults) took(n *Node, err error) bool {
	if err == nil {
		return true
	}
	expected, reason := "", err.Error()
	var e *quantity.Error
	if errors.As(err, &e) {
		expected, reason = e.Expected, e.Reason
	}
	f.Add(n, reason, expected)
	return false
}

// Word reads a scalar that must be one of the known words; what says in a
// complaint what they are: "a capacitor family". With no known words any will do.
func (f *Faults) Word(n *Node, what string, known ...string) (string, bool) {
	if !f.kind(n, Scalar) {
		return "", false
	}
	if n.Value == "" {
		f.Add(n, "an empty word", what)
		return "", false
	}
	if len(known) > 0 && !slices.Contains(known, n.Value) {
		f.Add(n, "unknown "+bareNoun(what), what, known...)
		return "", false
	}
	return n.Value, true
}

// bareNoun drops the article.
func bareNoun(what string) string {
	for _, article := range [...]string{"a ", "an ", "the "} {
		if rest, ok := strings.CutPrefix(what, article); ok {
			return rest
		}
	}
	return what
}

// Whole reads a whole number from low to high.
func (f *Faults) Whole(n *Node, low, high int) (int, bool) {
	if !f.kind(n, Scalar) {
		return 0, false
	}
	expected := "a whole number from " + strconv.Itoa(low) + " to " + strconv.Itoa(high)
	v, err := strconv.Atoi(n.Value)
	if err != nil && !errors.Is(err, strconv.ErrRange) {
		f.Add(n, "no whole number", expected)
		return 0, false
	}
	if err != nil || v < low || v > high {
		f.Add(n, "out of range", expected)
		return 0, false
	}
	return v, true
}
