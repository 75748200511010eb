package build

import (
	"fmt"
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// Refitting is what buying lines are given in place of what a build has there.
// What is left zero stays as it is.
type Refitting struct {
	Family    string
	Tolerance float64 // a grade the family is sold in; 0: see ClosestGrade
	Worth     Worth
	Lots      Lots
}

// Lots says how pieces of a buying line are drawn.
type Lots string

// The words a build file has for it; "" is as it is.
const (
	OneLot    Lots = "one"
	MixedLots Lots = "mixed"
)

// Line lists the positions of the buying line that a position is on by
// `same_as`, first the one that decides; nil where nothing is fitted.
func (b *Build) Line(position string) []string {
	p := b.Place(position)
	if p == nil || !p.Fitted {
		return nil
	}
	line := []string{position}
	if p.SameAs != "" {
		line[0] = p.SameAs
	}
	for _, s := range b.Stages {
		for _, q := range s.Places {
			if q.SameAs == line[0] {
				line = append(line, s.Name+"."+q.Role)
			}
		}
	}
	return line
}

// Refit is the build with the lines of some positions fitted anew, open or not.
// What else the file writes on their parts holds for the new ones. The other
// openings stay open; the original is left as it was.
func (b *Build) Refit(positions []string, r Refitting) (*Build, error) {
	lines := *b
	lines.Openings = nil
	var choice []Fitting
	for _, position := range positions {
		line := b.Line(position)
		if line == nil {
			return nil, fmt.Errorf("build: nothing is fitted at %q", position)
		}
		if slices.ContainsFunc(lines.Openings, func(o Opening) bool { return o.Positions[0] == line[0] }) {
			continue
		}
		decides := b.Place(line[0])
		if decides.Geometry != nil {
			return nil, fmt.Errorf("%s is wound, not bought", line[0])
		}
		o := Opening{Positions: line, Type: decides.Type, node: decides.node}
		f, err := b.refitting(o, r)
		if err != nil {
			return nil, err
		}
		lines.Openings = append(lines.Openings, o)
		choice = append(choice, f)
	}
	out, err := lines.Fit(choice)
	if err != nil {
		return nil, err
	}
	for _, o := range b.Openings {
		if !slices.ContainsFunc(lines.Openings, func(done Opening) bool { return done.Positions[0] == o.Positions[0] }) {
			out.Openings = append(out.Openings, o)
		}
	}
	return out, nil
}

// refitting makes the part that a line is given.
func (b *Build) refitting(o Opening, r Refitting) (Fitting, error) {
	now := b.Place(o.Positions[0])
	f := Fitting{Combine: now.Combine, Worth: b.written(o)}
	for _, q := range now.Pieces() {
		f.Pieces = append(f.Pieces, Piece{q.Family, q.Grade(), Worth{q.Main().Value, q.Main().Value, q.ValueText()}, q})
	}
	if r.Family != "" || r.Tolerance != 0 || r.Worth != (Worth{}) {
		if now.Paired() {
			return f, fmt.Errorf("%s is made up of two pieces: expected a position of one", o.Positions[0])
		}
		f.Pieces[0].Worth = f.Worth
		if err := b.replace(&f.Pieces[0], o, r); err != nil {
			return f, err
		}
		f.Worth = f.Pieces[0].Worth
	}
	if r.Lots != "" {
		f = inLots([]Fitting{f}, r.Lots == MixedLots)[0]
	}
	return f, nil
}

// replace puts another part in a piece's place.
func (b *Build) replace(f *Piece, o Opening, r Refitting) error {
	if r.Family != "" {
		f.Family = r.Family
	}
	if r.Worth != (Worth{}) {
		f.Worth = r.Worth
	}
	family, known := b.Families.Family(f.Family)
	if !known || family.Type != o.Type {
		return fmt.Errorf("%s is of no family that sells a %s", o.Positions[0], o.Type)
	}
	now := f.Part
	if f.Tolerance = r.Tolerance; f.Tolerance == 0 {
		f.Tolerance = ClosestGrade(family, now.Grade())
	}
	p, err := b.place(o, family, f.Worth, f.Tolerance)
	if err != nil {
		return err
	}
	p.LotsMixed = now.LotsMixed
	var none reader // nothing to complain of: the node was checked when it was read
	as := Place{Part: p}
	none.readParameters(&as, o.node.Get("parameters"))
	f.Part = as.Part
	if r.Family == "" && r.Tolerance == 0 { // one may be written that is no grade
		for i := range f.Part.Parameters {
			q, was := &f.Part.Parameters[i], now.Parameters[i]
			q.Tolerance, q.Absolute = was.Tolerance, was.Absolute
		}
	}
	return nil
}

// ClosestGrade is the grade of a family that stands in for a tolerance without
// flattering the family: the tolerance itself where it is sold, else the next
// wider one, else the widest. It is 0 for a family that is sold without.
func ClosestGrade(f *part.Family, tolerance float64) float64 {
	if len(f.Grades) == 0 {
		return 0
	}
	for _, g := range f.Grades { // tightest first
		if g.Tolerance >= tolerance*(1-1e-9) {
			return g.Tolerance
		}
	}
	return f.Grades[len(f.Grades)-1].Tolerance
}

// Overrides are the keys written on a position's part that stand over its
// family's figures, whatever the family.
func (b *Build) Overrides(position string) []string {
	line := b.Line(position)
	if line == nil || b.Place(line[0]).node == nil {
		return nil
	}
	var list []string
	for _, key := range append(slices.Clone(part.ScatterKeys[1:]), "bias_law", "rated", "parameters") { // the first is the tolerance
		if b.Place(line[0]).node.Get(key) != nil {
			list = append(list, key)
		}
	}
	return list
}

// ParseWorth reads what a part of a type is bought by: a value above zero, or
// a trimmer's range.
func ParseWorth(text string, t part.Type) (Worth, error) {
	if !(&Place{Type: t}).Single() {
		return Worth{}, fmt.Errorf("a %s has no value to choose", t)
	}
	w := Worth{Text: text}
	if t.Trimmer() {
		low, high, err := quantity.ParseRange(text, t.Unit())
		if err != nil || !(low.Value >= 0 && low.Value < high.Value) {
			return w, fmt.Errorf("%q is no trimmer's range: two values with a unit, low..high, such as 4..34 pF or 0..10 kΩ", text)
		}
		w.Low, w.High = low.Value, high.Value
		return w, nil
	}
	q, err := quantity.Parse(text, t.Unit())
	if err != nil {
		return w, err
	}
	if !(q.Value > 0) {
		return w, fmt.Errorf("%q is no value of a %s: more than zero", text, t)
	}
	w.Low, w.High = q.Value, q.Value
	return w, nil
}
