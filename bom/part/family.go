package part

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/quantity"
)

// Family is a kind of component as shops sort them: what is sold, and how
// pieces of it scatter.
type Family struct {
	Name   string
	Type   Type
	Title  string
	Grades []Grade // tightest first
	// Low and High are the range of values sold, SI; both 0 where parts of the
	// family have no value to choose.
	Low, High float64
	Scatter   Scatter // of the value (both ends of a trimmer); each grade brings the tolerance
	// Parameters are the figures the family gives besides the value, in the
	// order of Type.Parameters. One that is a value too (a trimmer's low end)
	// replaces Scatter for it; its Tolerance is GradeTolerance where the
	// grade's holds.
	Parameters             []Parameter
	Voltage                float64 // V, 0 unsaid
	MinCelsius, MaxCelsius float64 // both 0 unsaid
	Size                   string  // of the body at usual values, in words: "5 × 3 mm disc"; "" unsaid
	Source, Note           string
}

// Grade is a tolerance in which a family is sold, and the series of values in it.
type Grade struct {
	Tolerance float64 // fraction
	Series    string  // "E24"; "" unsaid
}

// GradeTolerance in Family.Parameters stands for the tolerance of the grade.
const GradeTolerance = -1

// HasValue reports whether parts of the family come in values.
func (f *Family) HasValue() bool { return f.Low != 0 || f.High != 0 }

// Grade finds the grade of that tolerance (within 1e-9 of it).
func (f *Family) Grade(tolerance float64) (Grade, bool) {
	for _, g := range f.Grades {
		if math.Abs(g.Tolerance-tolerance) <= 1e-9*g.Tolerance {
			return g, true
		}
	}
	return Grade{}, false
}

// Fit places a part of the family. The value is in SI units, 0 for a family
// whose parts have none; tolerance is one of the grades, or 0 for the widest,
// which is what a piece of unknown grade must be taken for.
func (f *Family) Fit(ref string, value, tolerance float64) (Part, error) {
	if f.Type.Trimmer() {
		return Part{}, fmt.Errorf("a %s needs a range, not one value", f.Type)
	}
	return f.fit(ref, value, value, tolerance)
}

// FitRange places a trimmer of the family that runs from low to high.
func (f *Family) FitRange(ref string, low, high, tolerance float64) (Part, error) {
	if !f.Type.Trimmer() {
		return Part{}, fmt.Errorf("a %s has one value, not a range", f.Type)
	}
	if !(low >= 0 && low < high) {
		return Part{}, fmt.Errorf("a trimmer's range runs from a low to a higher value, not from %s to %s",
			f.text(low), f.text(high))
	}
	return f.fit(ref, low, high, tolerance)
}

// fit places a part whose value, or whose trimmer's ends, are given.
func (f *Family) fit(ref string, low, high, tolerance float64) (Part, error) {
	if err := f.sells(low, high); err != nil {
		return Part{}, err
	}
	grade, err := f.pickGrade(tolerance)
	if err != nil {
		return Part{}, err
	}
	p := Part{Ref: ref, Type: f.Type, Family: f.Name, Rated: f.Voltage}
	for i, q := range f.Type.Parameters() {
		if f.valueFigure(i) {
			q.Value, q.Scatter = high, f.Scatter
			if q.Name == "low" {
				q.Value = low
			}
			q.Tolerance, q.Absolute = grade.Tolerance, false
		}
		if !f.override(&q, grade) && !f.valueFigure(i) {
			continue // the family does not have this figure
		}
		p.Parameters = append(p.Parameters, q)
	}
	return p, nil
}

// valueFigure reports whether the i-th figure is a value the family sells by.
func (f *Family) valueFigure(i int) bool {
	return f.HasValue() && (i == 0 || f.Type.Trimmer())
}

// override writes what the family says of a figure over it.
func (f *Family) override(q *Parameter, g Grade) bool {
	for _, own := range f.Parameters {
		if own.Name != q.Name {
			continue
		}
		value := q.Value
		*q = own
		if own.Tolerance == GradeTolerance {
			q.Tolerance, q.Absolute = g.Tolerance, false
		}
		if f.HasValue() && (f.Type.Trimmer() || own.Name == f.Type.Parameters()[0].Name) {
			q.Value = value
		}
		return true
	}
	return false
}

// pickGrade finds the grade, the widest for 0.
func (f *Family) pickGrade(tolerance float64) (Grade, error) {
	if len(f.Grades) == 0 {
		if tolerance != 0 {
			return Grade{}, fmt.Errorf("%s is not sold by tolerance", f.Name)
		}
		return Grade{}, nil
	}
	if tolerance == 0 {
		return f.Grades[len(f.Grades)-1], nil
	}
	g, ok := f.Grade(tolerance)
	if !ok {
		return Grade{}, fmt.Errorf("%s is not sold in %s: expected one of %s",
			f.Name, percent(tolerance), strings.Join(f.gradeTexts(), ", "))
	}
	return g, nil
}

// sells checks a value against the family's range. A trimmer's range must
// reach no further than the family's; its low end may be zero.
func (f *Family) sells(low, high float64) error {
	switch {
	case !f.HasValue() && (low != 0 || high != 0):
		return fmt.Errorf("%s has no value to choose", f.Name)
	case !f.HasValue():
		return nil
	case f.Type.Trimmer() && low >= 0 && within(high, f.Low, f.High):
		return nil
	case !f.Type.Trimmer() && within(low, f.Low, f.High):
		return nil
	}
	return fmt.Errorf("%s is sold from %s to %s, not %s", f.Name, f.text(f.Low), f.text(f.High), f.text(high))
}

// within allows for the rounding of decimal prefixes.
func within(x, low, high float64) bool {
	return x >= low-1e-9*math.Abs(low) && x <= high+1e-9*math.Abs(high)
}

// text is a value of the family as people write it.
func (f *Family) text(v float64) string { return Text(v, f.Type.Unit()) }

// gradeTexts lists the grades as people write them.
func (f *Family) gradeTexts() []string {
	texts := make([]string, len(f.Grades))
	for i, g := range f.Grades {
		texts[i] = percent(g.Tolerance)
	}
	return texts
}

// percent writes a fraction as people write a tolerance: "5 %", "30 ppm".
func percent(x float64) string {
	if x < 0.0005 {
		return fmt.Sprintf("%.6g ppm", x*1e6)
	}
	return fmt.Sprintf("%.6g %%", x*100)
}

// Text is a value as people write it, without the zeros that a column of
// figures needs: "4.7 kΩ", "220 pF", "-12 V".
func Text(v float64, u quantity.Unit) string {
	scale, symbol := quantity.Prefixed(v, u)
	if u == quantity.One {
		symbol = ""
	}
	return strings.TrimSpace(fmt.Sprintf("%.7g %s", v/scale, symbol))
}

// Bought is ValueText with the rated voltage where that is not the family's:
// "100 nF, 16 V". The family may be nil.
func (p *Part) Bought(f *Family) string {
	text := p.ValueText()
	if text == "" || p.Rated == 0 || f != nil && p.Rated == f.Voltage {
		return text
	}
	return text + ", " + Text(p.Rated, quantity.Volt)
}

// ValueText is what the part is bought as, beside its family and grade:
// "220 pF", "4..34 pF", "" for parts that have no value.
func (p *Part) ValueText() string {
	if !p.soldByValue() {
		return ""
	}
	m := p.Main()
	low := p.Parameter("low")
	if low == nil {
		return Text(m.Value, m.Unit)
	}
	scale, symbol := quantity.Prefixed(m.Value, m.Unit)
	return fmt.Sprintf("%.6g..%.6g %s", low.Value/scale, m.Value/scale, symbol)
}
