package build

import (
	"fmt"
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/part"
)

// Single says whether a part of the place's type is one figure, or one
// trimmer's range, so that scatter written on the part itself means that.
func (p *Place) Single() bool { return len(p.Type.Parameters()) == 1 || p.Type.Trimmer() }

// bought is what a part is bought by.
type bought struct {
	low, high float64 // equal but for a trimmer
	tolerance float64
	given     bool // a value is written, even where a family has one of its own
}

// fit places a part: from its family, or ideal where it has none.
func (b bought) fit(t part.Type, ref string, family *part.Family) (part.Part, error) {
	if family == nil {
		return b.ideal(t, ref), nil
	}
	if t.Trimmer() {
		return family.FitRange(ref, b.low, b.high, b.tolerance)
	}
	if b.given && !family.HasValue() {
		return part.Part{}, fmt.Errorf("none: %s is sold without a value", family.Name)
	}
	return family.Fit(ref, b.high, b.tolerance)
}

// ideal is a part of no family: what is written on it, and no scatter.
func (b bought) ideal(t part.Type, ref string) part.Part {
	p := part.Part{Ref: ref, Type: t, Parameters: t.Parameters()}
	p.Parameters[0].Value = b.high
	if t.Trimmer() {
		p.Parameters[0].Value, p.Parameters[1].Value = b.low, b.high
	}
	return p
}

// valued are the types that can be bought by their first figure.
var valued = map[part.Type]bool{
	part.Resistor: true, part.Capacitor: true, part.Coil: true,
	part.TrimmerResistor: true, part.TrimmerCapacitor: true,
	part.Regulator: true, part.Zener: true, part.Crystal: true,
}

// readValue reads what a part is bought by: as written, or the first of its
// opening.
func (r *reader) readValue(p *Place, n *document.Node, o *Opening, b *bought) bool {
	at := n.Get("value")
	switch {
	case at != nil && !valued[p.Type]:
		r.Add(at, "value of a "+string(p.Type), "none: its figures go under parameters")
		return false
	case at != nil && !p.Single(): // a regulator's output, which may be negative
		p.Quantity, b.given = at.Value, true
		ok := r.read(at, p.Type.Unit(), &b.high)
		b.low = b.high
		return ok
	case at != nil:
		w, ok := r.readWorth(at, p.Type)
		p.Quantity, b.low, b.high, b.given = w.Text, w.Low, w.High, true
		return ok
	case o != nil && len(o.Values) > 0:
		w := o.Values[0]
		p.Quantity, b.low, b.high, b.given = w.Text, w.Low, w.High, true
	case n.Get("choose").Get("values") != nil || n.Get("choose").Get("around") != nil:
		return false // complained of
	case p.Single():
		r.Add(n, "missing key value", "the part's value in "+p.Type.Unit().Symbol)
		return false
	}
	return true
}

// readParameters reads what overrides the figures of a part that has several.
func (r *reader) readParameters(p *Place, n *document.Node) {
	if n == nil {
		return
	}
	var names []string
	for _, q := range p.Part.Parameters {
		names = append(names, q.Name)
	}
	if !r.Keys(n, names...) && n.Kind != document.Mapping {
		return
	}
	for i := range p.Part.Parameters {
		q := &p.Part.Parameters[i]
		at := n.Get(q.Name)
		switch {
		case at == nil:
		case at.Kind == document.Mapping:
			r.Keys(at, append([]string{"value"}, part.ScatterKeys...)...)
			r.read(at.Get("value"), q.Unit, &q.Value)
			part.ReadScatter(&r.Faults, at, q.Unit, &q.Scatter)
		default:
			r.read(at, q.Unit, &q.Value)
		}
	}
}

// position is a stage and a role, as `same_as` and trims name them.
func position(text string) (stageName, role string) {
	stageName, role, _ = strings.Cut(text, ".")
	return stageName, role
}

// resolveShared gives every part that is the same as another that part's
// figures, and complains of circles.
func (r *reader) resolveShared() {
	for _, s := range r.stages {
		for i := range s.Places {
			if p := &s.Places[i]; p.SameAs != "" {
				r.resolve(s, p)
				r.joinOpening(p.SameAs, s.Name+"."+p.Role)
			}
		}
	}
}

// joinOpening adds a position to the opening that decides it, if there is one.
func (r *reader) joinOpening(decider, position string) {
	for i := range r.build.Openings {
		if o := &r.build.Openings[i]; o.Positions[0] == decider {
			o.Positions = append(o.Positions, position)
			if p := r.build.Place(position); o.paired() {
				r.reserve(p.Part.Ref)
			}
		}
	}
}

// resolve follows a same_as to the part that decides.
func (r *reader) resolve(s stageNode, p *Place) {
	at := s.node.Get("parts").Get(p.Role).Get("same_as")
	self := s.Name + "." + p.Role
	seen := map[string]bool{self: true}
	next := p.SameAs
	for {
		if seen[next] {
			r.Add(at, "same_as in a circle", "a chain that ends at a part with a value of its own")
			return
		}
		seen[next] = true
		root := r.build.Place(next)
		if root == nil || !root.Fitted {
			r.Add(at, "position", "STAGE.ROLE of a part", r.positions(p.Type)...)
			return
		}
		if root.Type != p.Type {
			r.Add(at, "same_as a part of another type", "a "+string(p.Type)+"; "+next+" is a "+string(root.Type))
			return
		}
		if root.SameAs == "" || root.resolved {
			if root.Paired() {
				r.reserve(p.Part.Ref)
			}
			p.take(root, next)
			return
		}
		next = root.SameAs
	}
}

// take copies what the deciding part is, keeping the reference.
func (p *Place) take(root *Place, from string) {
	p.fill(p.Part.Ref, root.Combine, root.Pieces())
	p.Geometry, p.Quantity, p.Position = root.Geometry, root.Quantity, root.Position
	if !root.resolved {
		p.SameAs = from
	} else {
		p.SameAs = root.SameAs
	}
	p.resolved = true
}

// positions lists the fitted positions of a type.
func (r *reader) positions(t part.Type) []string {
	var names []string
	for _, s := range r.build.Stages {
		for _, p := range s.Places {
			if p.Fitted && p.Type == t {
				names = append(names, s.Name+"."+p.Role)
			}
		}
	}
	return names
}
