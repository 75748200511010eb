package build

import (
	"fmt"
	"slices"

	"batchwright/bom/document"
	"batchwright/bom/part"
)

// Fitting is what an opening is filled with.
type Fitting struct {
	Family    string
	Tolerance float64 // 0 where the family is not sold by tolerance
	Worth
	Part part.Part
}

// Fittings lists everything an opening may be filled with, in the order in
// which the build file names families, values and tolerances.
func (b *Build) Fittings(o Opening) []Fitting {
	var list []Fitting
	values := o.Values
	if len(values) == 0 {
		values = []Worth{b.written(o)}
	}
	for _, name := range o.Families {
		family, _ := b.Families.Family(name)
		for _, value := range values {
			for _, tolerance := range o.grades(family) {
				if p, err := b.place(o, family, value, tolerance); err == nil {
					list = append(list, Fitting{name, tolerance, value, p})
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
	p.LotsMixed = written.Part.LotsMixed
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
			ref := p.Part.Ref
			p.Part = choice[i].Part
			p.Part.Parameters = slices.Clone(choice[i].Part.Parameters)
			p.Part.Ref = ref
			p.Quantity = choice[i].Text
		}
	}
	return &out, nil
}
