package build

import (
	"fmt"
	"slices"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/series"
)

// Fitting is what an opening is filled with: one piece, or two joined.
type Fitting struct {
	Combine Combine
	Pieces  []Piece
	Worth        // of the whole
	Mixed   bool // pieces come from mixed lots
}

// Piece is one thing that is bought for an opening.
type Piece struct {
	Family    string
	Tolerance float64 // 0 where the family is not sold by tolerance
	Worth
	Part part.Part
}

// Fittings lists everything an opening may be filled with: combinations and
// lots in the order in which the build file names them, and within those
// families, values and tolerances likewise.
func (b *Build) Fittings(o Opening) []Fitting {
	var list []Fitting
	lots := o.Lots
	if len(lots) == 0 {
		lots = []bool{b.Place(o.Positions[0]).Part.LotsMixed}
	}
	for _, combine := range o.combines() {
		var plain []Fitting
		if combine == Single {
			plain = b.singles(o)
		} else {
			plain = b.pairs(o, combine)
		}
		for _, mixed := range lots {
			list = append(list, inLots(plain, mixed)...)
		}
	}
	return list
}

// combines are the combinations an opening allows.
func (o Opening) combines() []Combine {
	if len(o.Combines) == 0 {
		return []Combine{Single}
	}
	return o.Combines
}

// inLots are fittings of pieces that come from one lot, or from mixed ones.
func inLots(list []Fitting, mixed bool) []Fitting {
	out := make([]Fitting, len(list))
	for i, f := range list {
		f.Mixed, f.Pieces = mixed, slices.Clone(f.Pieces)
		for k := range f.Pieces {
			f.Pieces[k].Part.LotsMixed = mixed
		}
		out[i] = f
	}
	return out
}

// singles are the fittings of one piece.
func (b *Build) singles(o Opening) []Fitting {
	values := o.Values
	if len(values) == 0 {
		values = []Worth{b.written(o)}
	}
	var list []Fitting
	for _, p := range b.pieces(o, values) {
		list = append(list, Fitting{Combine: Single, Pieces: []Piece{p}, Worth: p.Worth})
	}
	return list
}

// pieces are what the families of an opening sell of some values.
func (b *Build) pieces(o Opening, values []Worth) []Piece {
	var list []Piece
	for _, name := range o.Families {
		family, _ := b.Families.Family(name)
		for _, value := range values {
			for _, tolerance := range o.grades(family) {
				if p, err := b.place(o, family, value, tolerance); err == nil {
					list = append(list, Piece{name, tolerance, value, p})
				}
			}
		}
	}
	return list
}

// written is what an opening's part is said to be worth.
func (b *Build) written(o Opening) Worth {
	p := b.Place(o.Positions[0])
	if len(p.Part.Parameters) == 0 {
		return Worth{}
	}
	return Worth{p.Part.Parameters[0].Value, p.Part.Main().Value, p.Quantity}
}

// grades are the tolerances an opening leaves open that a family is sold in.
func (o Opening) grades(f *part.Family) []float64 {
	if len(f.Grades) == 0 {
		return []float64{0}
	}
	var list []float64
	for _, g := range f.Grades {
		if len(o.Tolerances) == 0 || slices.ContainsFunc(o.Tolerances, func(t float64) bool { return sameTolerance(t, g.Tolerance) }) {
			list = append(list, g.Tolerance)
		}
	}
	return list
}

func sameTolerance(a, b float64) bool { return a-b <= 1e-9*b && b-a <= 1e-9*b }

// place makes the part that fills an opening: the family's figures, and what
// else the file writes on it.
func (b *Build) place(o Opening, f *part.Family, w Worth, tolerance float64) (part.Part, error) {
	written := b.Place(o.Positions[0])
	what := bought{tolerance: tolerance}
	if f.HasValue() {
		what.low, what.high = w.Low, w.High
	}
	p, err := what.fit(o.Type, written.Part.Ref, f)
	if err != nil {
		return part.Part{}, err
	}
	if o.node.Get("rated") != nil {
		p.Rated = written.Part.Rated
	}
	for _, position := range o.Positions {
		if b.Place(position).strained(p.Rated) {
			return part.Part{}, fmt.Errorf("%s is above the rated voltage of %s", position, f.Name)
		}
	}
	var faults document.Faults // none: the node was checked when it was read
	for i := range p.Parameters {
		q := &p.Parameters[i]
		grade, absolute := q.Tolerance, q.Absolute
		part.ReadScatter(&faults, o.node, q.Unit, &q.Scatter)
		q.Tolerance, q.Absolute = grade, absolute
		part.ReadBias(&faults, o.node, &q.Scatter)
	}
	return p, nil
}

// Fit is the build with openings filled; choice holds a fitting for each
// opening. The original is left as it was.
func (b *Build) Fit(choice []Fitting) (*Build, error) {
	if len(choice) != len(b.Openings) {
		return nil, fmt.Errorf("build: %d fittings for %d openings", len(choice), len(b.Openings))
	}
	out := *b
	out.Openings = nil
	out.Stages = make([]*Stage, len(b.Stages))
	for i, s := range b.Stages {
		own := *s
		own.Places = slices.Clone(s.Places)
		out.Stages[i] = &own
	}
	for i, o := range b.Openings {
		for _, position := range o.Positions {
			p := out.Place(position)
			p.fill(p.Base(), choice[i].Combine, choice[i].parts())
			p.Quantity = choice[i].Text
		}
	}
	return &out, nil
}

// parts are the pieces' parts.
func (f Fitting) parts() []part.Part {
	var parts []part.Part
	for _, p := range f.Pieces {
		parts = append(parts, p.Part)
	}
	return parts
}

// fill puts one piece, or two, into a place, under the place's reference.
func (p *Place) fill(ref string, combine Combine, pieces []part.Part) {
	p.Combine = combine
	if len(pieces) == 1 {
		p.Part = pieces[0].Named(ref)
		return
	}
	first, second := pieceRefs(ref)
	p.Part, p.Second = pieces[0].Named(first), pieces[1].Named(second)
}

// Grade is the tolerance of the whole: that of the only piece, or of two by
// how much of the whole each makes up, both at their limits.
//
//	Σ |∂v/∂v_i|·v_i·t_i / v
func (f Fitting) Grade(t part.Type) float64 {
	if len(f.Pieces) == 1 {
		return f.Pieces[0].Tolerance
	}
	a, b := f.Pieces[0], f.Pieces[1]
	first := a.High / (a.High + b.High) // of a sum
	if f.Combine.Join(t) == series.Reciprocal {
		first = 1 - first
	}
	return first*a.Tolerance + (1-first)*b.Tolerance
}
