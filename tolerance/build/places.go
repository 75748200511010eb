package build

import (
	"fmt"
	"regexp"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/stage"
)

// partKeys are the keys of a part, besides part.ScatterKeys.
var partKeys = []string{"ref", "value", "family", "choose", "same_as", "lots", "parameters", "position", "winding",
	"across", "rated", "bias_law", "parallel", "series"}

var reference = regexp.MustCompile(`^[A-Z]{1,4}[0-9]{1,4}[A-Z]?$`)

// readPlaces reads the parts of a stage of a built-in kind.
func (r *reader) readPlaces(s stageNode) {
	n := s.node.Get("parts")
	if n != nil {
		var names []string
		for _, role := range s.Kind.Roles {
			names = append(names, role.Name)
		}
		if !r.Keys(n, names...) && n.Kind != document.Mapping {
			n = nil
		}
	}
	for _, role := range s.Kind.Roles {
		r.readRole(s, role, n)
	}
}

// readRole reads the part in one role.
func (r *reader) readRole(s stageNode, role stage.Role, all *document.Node) {
	p := Place{Role: role.Name, Type: role.Type, Position: 0.5}
	var n *document.Node
	if all != nil {
		n = all.Get(role.Name)
	}
	switch {
	case n != nil:
		p.Fitted = true
		r.readPlace(s, &p, n, partKeys)
	case !role.Optional:
		at := s.node
		if all != nil {
			at = all
		}
		r.Add(at, "missing part "+role.Name, role.Summary+" ("+string(role.Type)+")")
	}
	s.Places = append(s.Places, p)
}

// readPlace reads one part: on its own, or the same as another.
func (r *reader) readPlace(s stageNode, p *Place, n *document.Node, keys []string) {
	if n.Kind != document.Mapping {
		r.Add(n, "part", "a mapping such as {ref: R1, value: 10 kΩ, family: metal-film-50, tolerance: 1 %}")
		return
	}
	p.Part.Type, p.node = p.Type, n
	r.readRef(p, n)
	r.readAcross(p, n)
	if same := n.Get("same_as"); same != nil {
		r.Keys(n, "ref", "same_as", "across")
		p.SameAs = same.Value // resolved once every part is known
		return
	}
	if r.readPair(s, p, n) {
		return
	}
	r.Keys(n, append(append([]string{}, keys...), part.ScatterKeys...)...)
	if winding := n.Get("winding"); winding != nil {
		r.readWound(p, n, winding)
		return
	}
	family := r.readFamily(p, n)
	opening := r.readOpening(s, p, n, family)
	if opening != nil && family == nil {
		family, _ = r.build.Families.Family(opening.Families[0])
	}
	r.readFitted(s, p, n, family, opening)
}

// readRef reads the reference, which no other part may have.
func (r *reader) readRef(p *Place, n *document.Node) {
	ref := n.Get("ref")
	if ref == nil {
		r.Add(n, "missing key ref", "the part's reference, such as C1")
		return
	}
	if !reference.MatchString(ref.Value) {
		r.Add(ref, "reference", "capital letters and a number, such as C1")
		return
	}
	if first := r.refs[ref.Value]; first != nil {
		r.Add(ref, "duplicate reference", fmt.Sprintf("one that no other part has (line %d has it)", first.Line))
		return
	}
	r.refs[ref.Value] = ref
	p.Part.Ref = ref.Value
}

// readFamily reads the family a part is placed from; nil is none.
func (r *reader) readFamily(p *Place, n *document.Node) *part.Family {
	at := n.Get("family")
	if at == nil {
		return nil
	}
	return r.familyOf(at, p.Type)
}

// familyOf finds a family of a type by its name.
func (r *reader) familyOf(at *document.Node, t part.Type) *part.Family {
	word, ok := r.Word(at, "a family", r.build.Families.OfType(t)...)
	if !ok {
		return nil
	}
	f, _ := r.build.Families.Family(word)
	return f
}

// readFitted resolves a part: its family's figures, then what is written on it.
func (r *reader) readFitted(s stageNode, p *Place, n *document.Node, family *part.Family, o *Opening) {
	b := bought{tolerance: r.readTolerance(n, family, o)}
	if !r.readValue(p, n, o, &b) {
		return
	}
	ref := p.Part.Ref
	fitted, err := b.fit(p.Type, ref, family)
	if err != nil {
		at := n.Get("value")
		if at == nil {
			at = n
		}
		r.Add(at, "part that its family is not sold as", err.Error())
		return
	}
	p.Part = fitted
	if p.Single() {
		for i := range p.Part.Parameters {
			part.ReadScatter(&r.Faults, n, p.Part.Parameters[i].Unit, &p.Part.Parameters[i].Scatter)
		}
	} else {
		r.refuseScatter(n)
	}
	r.readParameters(p, n.Get("parameters"))
	r.readRated(p, n, family, o)
	r.readHandling(p, n)
	r.checkParameters(s, p, n)
}

// refuseScatter complains of scatter written on a part that has several
// figures: it belongs to one of them.
func (r *reader) refuseScatter(n *document.Node) {
	for _, key := range part.ScatterKeys {
		if at := n.Get(key); at != nil && key != "tolerance" {
			r.Add(at, key+" on a part with several parameters", "under parameters, on the one that is meant")
		}
	}
}

// readHandling reads how pieces are drawn from lots, and where a trimmer that
// no trim turns is left.
func (r *reader) readHandling(p *Place, n *document.Node) {
	if at := n.Get("lots"); at != nil {
		word, _ := r.Word(at, "lots: mixed or one", "mixed", "one")
		p.Part.LotsMixed = word == "mixed"
	}
	if at := n.Get("position"); at != nil && r.read(at, quantity.One, &p.Position) && !(p.Position >= 0 && p.Position <= 1) {
		r.Add(at, "position", "a share of the trimmer's travel from 0 to 1")
	}
}

// readTolerance is the grade written on the part, or the first of its opening
// that the family sells; 0 leaves it to the family.
func (r *reader) readTolerance(n *document.Node, family *part.Family, o *Opening) float64 {
	at := n.Get("tolerance")
	if at == nil {
		return firstGrade(family, o)
	}
	q, err := quantity.Parse(at.Value, quantity.Percent)
	if err != nil || family == nil || len(family.Grades) == 0 {
		return 0 // read with the rest of the scatter
	}
	if _, sold := family.Grade(q.Value); !sold {
		return 0 // written on the part, over whatever its family is sold in
	}
	return q.Value
}

// firstGrade is the first grade listed in an opening that the family sells.
func firstGrade(family *part.Family, o *Opening) float64 {
	if family == nil || o == nil {
		return 0
	}
	for _, t := range o.Tolerances {
		if _, sold := family.Grade(t); sold {
			return t
		}
	}
	return 0
}

// checkParameters complains of figures that the stage's equations use and the
// part does not have.
func (r *reader) checkParameters(s stageNode, p *Place, n *document.Node) {
	if p.Single() {
		return
	}
	for _, q := range s.Kind.EquationList() {
		for _, name := range q.Expression.Names() {
			role, figure := position(name)
			if role == p.Role && figure != "" && figure != "fitted" && p.Part.Parameter(figure) == nil {
				r.Add(n, "part without "+figure, "a family that has it, or parameters: {"+figure+": …}")
				return
			}
		}
	}
}
