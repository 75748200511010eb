package build

import (
	"fmt"
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/series"
	"batchwright/tolerance/tape"
)

// Combine is how a position's pieces make up its value.
type Combine string

// The combinations; the zero value reads as Single.
const (
	Single   Combine = "single"
	Parallel Combine = "parallel"
	InSeries Combine = "series"
)

// combines are the words a build file may name a combination by.
var combines = []string{string(Single), string(Parallel), string(InSeries)}

// Join is what becomes of the values of two pieces: capacitors add up in
// parallel, resistors and coils in series; the other way round the reciprocals
// do. Two coils are taken not to feel each other's field.
func (c Combine) Join(t part.Type) series.Join {
	if (c == Parallel) == (t == part.Capacitor) {
		return series.Adding
	}
	return series.Reciprocal
}

// joinable says whether two parts of a type can make up one.
func joinable(t part.Type) bool {
	return t == part.Resistor || t == part.Capacitor || t == part.Coil
}

// Paired says whether two pieces make up the position.
func (p *Place) Paired() bool { return p.Combine == Parallel || p.Combine == InSeries }

// Pieces are what is soldered in: one part, or two.
func (p *Place) Pieces() []part.Part {
	switch {
	case !p.Fitted:
		return nil
	case p.Paired():
		return []part.Part{p.Part, p.Second}
	}
	return []part.Part{p.Part}
}

// Refs are the references of its pieces.
func (p *Place) Refs() []string {
	var refs []string
	for _, piece := range p.Pieces() {
		refs = append(refs, piece.Ref)
	}
	return refs
}

// Label is what stands at a place: "C6", of two pieces "C6A ∥ C6B".
func (p *Place) Label() string { return strings.Join(p.Refs(), p.Combine.Sign()) }

// pieceRefs are the references of the two pieces at a position: C6A and C6B
// make up C6.
func pieceRefs(ref string) (first, second string) { return ref + "A", ref + "B" }

// Base is the reference of the position itself: C6, of two pieces C6A and C6B.
func (p *Place) Base() string {
	if p.Paired() {
		return strings.TrimSuffix(p.Part.Ref, "A")
	}
	return p.Part.Ref
}

// reserve keeps the references of the two pieces a position may hold from every
// other part.
func (r *reader) reserve(ref string) {
	n := r.refs[ref]
	if n == nil {
		return // complained of
	}
	first, second := pieceRefs(ref)
	for _, own := range []string{first, second} {
		if !reference.MatchString(own) {
			r.Add(n, "reference of a pair", "one that ends in a figure, such as C6: its pieces become C6A and C6B")
			return
		}
		if other := r.refs[own]; other != nil {
			r.Add(other, "duplicate reference", fmt.Sprintf("another one: the pieces at %s (line %d) are called %s and %s", ref, n.Line, first, second))
			return
		}
		r.refs[own] = n
	}
}

// readPair reads a part that is written as two: `parallel: [{…}, {…}]` or
// `series: [{…}, {…}]`, each with a value and a family of its own. It says
// whether there is such a key.
func (r *reader) readPair(s stageNode, p *Place, n *document.Node) bool {
	combine, at := Single, (*document.Node)(nil)
	for _, word := range []Combine{Parallel, InSeries} {
		if m := n.Get(string(word)); m != nil && at != nil {
			r.Add(m, "parallel beside series", "one of the two")
		} else if m != nil {
			combine, at = word, m
		}
	}
	if at == nil {
		return false
	}
	keys := append([]string{"ref", string(Parallel), string(InSeries), "across", "lots"}, sharedKeys...)
	if s.Kind.Free {
		keys = append(keys, "part")
	}
	r.Keys(n, keys...)
	if !joinable(p.Type) {
		r.Add(at, string(combine)+" of a "+string(p.Type), "one part: only resistors, capacitors and coils make up pairs")
		return true
	}
	if at.Kind != document.Sequence || len(at.Items) != 2 {
		r.Add(at, "pair", "two parts such as [{value: 180 pF, family: c0g}, {value: 39 pF, family: polystyrene}]")
		return true
	}
	r.reserve(p.Part.Ref)
	p.Combine = combine
	first, second := pieceRefs(p.Part.Ref)
	p.Part, p.Second = r.readPiece(s, p, n, at.Items[0], first), r.readPiece(s, p, n, at.Items[1], second)
	r.readHandling(p, n)
	p.Second.LotsMixed = p.Part.LotsMixed
	p.Quantity = p.written()
	return true
}

// pieceKeys are the keys of one part of a pair, besides part.ScatterKeys.
var pieceKeys = []string{"value", "family", "rated", "bias_law"}

// sharedKeys may also be written on the pair and then hold for both pieces.
// Each has a tolerance of its own.
var sharedKeys = append([]string{"rated", "bias_law"}, part.ScatterKeys[1:]...)

// readPiece reads one part of a pair; what is written on the pair holds for it.
func (r *reader) readPiece(s stageNode, p *Place, pair, n *document.Node, ref string) part.Part {
	own := Place{Role: p.Role, Type: p.Type, Fitted: true, Part: part.Part{Ref: ref, Type: p.Type}}
	if n.Kind != document.Mapping {
		r.Add(n, "part of a pair", "a mapping such as {value: 180 pF, family: c0g, tolerance: 5 %}")
		return own.Part
	}
	r.Keys(n, append(append([]string{}, pieceKeys...), part.ScatterKeys...)...)
	r.refuseAcross(&own, n)
	for _, key := range sharedKeys {
		if at := n.Get(key); at != nil && pair.Get(key) != nil {
			r.Add(at, key+" on a piece beside the pair's", "one of the two")
		}
	}
	family := r.readFamily(&own, n)
	r.readFitted(s, &own, n, family, nil)
	r.readShared(&own, pair, family)
	return own.Part
}

// readShared reads what is written on a pair over one of its pieces.
func (r *reader) readShared(own *Place, pair *document.Node, family *part.Family) {
	if len(own.Part.Parameters) != 1 {
		return // complained of
	}
	q := &own.Part.Parameters[0]
	part.ReadScatter(&r.Faults, pair, q.Unit, &q.Scatter) // a fault found twice is told once
	r.readRated(own, pair, family, nil)
}

// written is what a position's pieces make up, as people write it.
func (p *Place) written() string {
	if !p.Paired() {
		return p.Part.ValueText()
	}
	return p.Part.ValueText() + p.Combine.Sign() + p.Second.ValueText()
}

// Sign stands between two pieces: "180 pF ∥ 39 pF", "4.7 kΩ + 220 Ω".
func (c Combine) Sign() string {
	if c == Parallel {
		return " ∥ "
	}
	return " + "
}

// joined is what two values at a position come to.
func (c *compiler) joined(p *Place, a, b tape.Ref) tape.Ref {
	g := c.Graph
	sum := g.Add(a, b)
	if p.Combine.Join(p.Type) == series.Adding {
		return sum
	}
	return g.Div(g.Mul(a, b), sum)
}
