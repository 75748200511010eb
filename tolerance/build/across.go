package build

import (
	"math"
	"slices"
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/tape"
)

// acrossKeys are the keys of a part that a steady voltage across it is about.
var acrossKeys = []string{"across", "rated", "bias_law"}

// readAcross reads the steady voltage across a capacitor, which each position
// has of its own: a value, a condition's variable or an output.
func (r *reader) readAcross(p *Place, n *document.Node) {
	r.refuseAcross(p, n)
	at := n.Get("across")
	if at == nil || p.Type != part.Capacitor {
		return
	}
	across := Setting{Name: "across", Parameter: part.Parameter{Name: "across", Unit: quantity.Volt}}
	if r.isReference(at) {
		across.Reference = at.Value // checked once every stage is known
	} else if !r.read(at, quantity.Volt, &across.Value) {
		return
	}
	p.Across = &across
}

// refuseAcross complains of a voltage, a rating or a bias law of what is no
// capacitor.
func (r *reader) refuseAcross(p *Place, n *document.Node) {
	for _, key := range acrossKeys {
		if at := n.Get(key); at != nil && p.Type != part.Capacitor {
			r.Add(at, key+" of a "+string(p.Type), "none: a capacitor's voltage is meant")
		}
	}
}

// readRated reads a capacitor's rated voltage and bias law over its family's.
func (r *reader) readRated(p *Place, n *document.Node, family *part.Family, o *Opening) {
	if p.Type != part.Capacitor {
		return // complained of
	}
	if at := n.Get("rated"); at != nil && r.read(at, quantity.Volt, &p.Part.Rated) && !(p.Part.Rated > 0) {
		r.Add(at, "rated voltage", "more than zero, such as 16 V")
	}
	part.ReadBias(&r.Faults, n, &p.Part.Parameters[0].Scatter)
	if at := n.Get("bias_law"); at != nil && n.Get("rated") == nil && !r.allRated(family, o) {
		r.Add(at, "bias law without a rated voltage", "rated: beside it, such as 16 V")
	}
}

// allRated says whether every family that a part may be of has a rated voltage.
func (r *reader) allRated(family *part.Family, o *Opening) bool {
	if o != nil {
		for _, name := range o.Families {
			if f, ok := r.build.Families.Family(name); !ok || f.Voltage == 0 {
				return false
			}
		}
		return true
	}
	return family != nil && family.Voltage != 0
}

// unshared is why capacitors in series are refused under a steady voltage.
const unshared = "none here, or parallel: how two capacitors in series share a steady voltage is up to their leakage"

// checkAcross checks the voltages across capacitors: that what they refer to
// exists, is a voltage and does not need the capacitor itself, that a plain one
// is not above the rated voltage, and that no two in series have to share it.
func (r *reader) checkAcross() {
	for _, s := range r.stages {
		for i := range s.Places {
			p := &s.Places[i]
			if p.Across == nil {
				continue
			}
			n := s.node.Get("parts").Get(p.Role).Get("across")
			if r.mayBeSeries(s.Name+"."+p.Role, p) {
				r.Add(n, "steady voltage across a series pair", unshared)
			}
			switch from, output, _ := strings.Cut(p.Across.Reference, "."); {
			case p.Across.Reference == "" && p.strained(p.rated()):
				r.Add(n, "capacitor above its rated voltage",
					"at most "+part.Text(p.rated(), quantity.Volt)+", or rated: with what it is made for")
			case p.Across.Reference == "":
			case from == s.Name && s.needsPart(output, p.Role, map[string]bool{}):
				r.Add(n, "voltage that needs the capacitor itself", "a value, a condition's variable or an output that does not need it")
			default:
				r.checkReference(n, *p.Across)
			}
		}
	}
}

// mayBeSeries says whether two pieces in series make up a position, or may be
// chosen for it.
func (r *reader) mayBeSeries(position string, p *Place) bool {
	return p.Combine == InSeries || slices.ContainsFunc(r.build.Openings, func(o Opening) bool {
		return slices.Contains(o.Positions, position) && slices.Contains(o.Combines, InSeries)
	})
}

// rated is the lowest rated voltage of a place's pieces; 0 where none is rated.
func (p *Place) rated() float64 {
	lowest := 0.0
	for _, piece := range p.Pieces() {
		if piece.Rated > 0 && (lowest == 0 || piece.Rated < lowest) {
			lowest = piece.Rated
		}
	}
	return lowest
}

// needsPart says whether an equation of the stage needs the part in a role, by
// what other capacitors of the stage stand under too.
func (s *Stage) needsPart(name, role string, seen map[string]bool) bool {
	if seen[name] || strings.HasSuffix(name, ".fitted") {
		return false
	}
	seen[name] = true
	if p := s.place(head(name)); p != nil {
		from, output, _ := strings.Cut(p.acrossFrom(), ".")
		return p.Role == role || from == s.Name && s.needsPart(output, role, seen)
	}
	x := s.find(strings.TrimPrefix(name, s.Name+"."))
	if x == nil {
		return false
	}
	return slices.ContainsFunc(x.Names(), func(next string) bool { return s.needsPart(next, role, seen) })
}

// acrossFrom is what the voltage across a part is taken from; "" for nothing.
func (p *Place) acrossFrom() string {
	if p.Across == nil {
		return ""
	}
	return p.Across.Reference
}

// strained says whether a voltage that is written as a plain value is above
// the rated one; a millionth is rounding.
func (p *Place) strained(rated float64) bool {
	return p.Across != nil && p.Across.Reference == "" && rated > 0 && math.Abs(p.Across.Value) > rated*(1+1e-6)
}

// biased is the factor that a steady voltage across a capacitor changes it by:
//
//	1 + middle(u) + z·half(u),  u = |across|/rated
//
// of the bias law's limits at u. A piece keeps to one place z between them, and
// pieces of a lot resemble each other in it as they do over temperature. It is
// 1 for parts without a law or a voltage.
func (c *compiler) biased(e *environment, x source, p *Place, piece part.Part) tape.Ref {
	g := c.Graph
	s := piece.Parameters[0].Scatter
	if len(s.Bias) == 0 || p.Across == nil {
		return g.Constant(1)
	}
	across := g.Constant(p.Across.Value)
	if p.Across.Reference != "" {
		across = c.referred(e, p.Across.Reference)
	}
	u := g.Div(g.Abs(across), g.Constant(piece.Rated))
	share := func(p part.BiasPoint) float64 { return p.Share }
	middle := interpolate(g, s.Bias, u, share, func(p part.BiasPoint) float64 { return (p.Low + p.High) / 2 })
	factor := g.Add(g.Constant(1), middle)
	if !slices.ContainsFunc(s.Bias, func(p part.BiasPoint) bool { return p.High > p.Low }) {
		return factor // an exact law scatters nothing
	}
	half := interpolate(g, s.Bias, u, share, func(p part.BiasPoint) float64 { return (p.High - p.Low) / 2 })
	if v, constant := g.Value(half); constant && v == 0 {
		return factor
	}
	return g.Add(factor, g.Mul(c.coefficient(x, "bias", s, whole), half))
}
