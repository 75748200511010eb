package build

import (
	"fmt"
	"math"
	"slices"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// FilledIn is the text of the build's file with every opening filled; choice
// holds a fitting for each. A part's `choose` gives way to its value, family and
// tolerance, or to `parallel` or `series`. What is written already and says the
// same stays as it is spelled, and so does every byte of what belongs to no
// opening; comments in a `choose` are put above its place. The error is a
// document.Complaints where a part cannot be changed without changing another.
func (b *Build) FilledIn(text []byte, choice []Fitting) ([]byte, error) {
	if len(choice) != len(b.Openings) {
		return nil, fmt.Errorf("build: %d fittings for %d openings", len(choice), len(b.Openings))
	}
	editor, faults := document.NewEditor(b.File, text)
	if len(faults) > 0 {
		return nil, faults
	}
	for i, o := range b.Openings {
		stageName, role := position(o.Positions[0])
		n := editor.Root().Get("stages").Get(stageName).Get("parts").Get(role)
		f := filler{families: b.Families, unit: o.Type.Unit(), part: n}
		if err := f.fill(choice[i]); err != nil {
			return nil, fmt.Errorf("build: %s: %w", o.Positions[0], err)
		}
		editor.Rewrite(n, "choose", f.pairs, f.drop...)
	}
	return editor.Bytes()
}

// filler finds out which keys of a part to write, and which must go.
type filler struct {
	families *part.Catalogue
	unit     quantity.Unit
	part     *document.Node
	pairs    []document.Pair
	drop     []string
}

// fill takes a fitting.
func (f *filler) fill(c Fitting) error {
	switch {
	case c.Combine == Single && len(c.Pieces) == 1:
		if err := f.single(c.Pieces[0]); err != nil {
			return err
		}
	case (c.Combine == Parallel || c.Combine == InSeries) && len(c.Pieces) > 1:
		list := &document.Node{Kind: document.Sequence}
		for _, p := range c.Pieces {
			item, err := f.keys(p)
			if err != nil {
				return err
			}
			list.Items = append(list.Items, &document.Node{Kind: document.Mapping, Pairs: item})
		}
		f.without("value", "family", "tolerance")
		f.pairs = append(f.pairs, document.Pair{Key: word(string(c.Combine)), Value: list})
	default:
		return fmt.Errorf("%d pieces combined as %q", len(c.Pieces), c.Combine)
	}
	lots := OneLot
	if c.Mixed {
		lots = MixedLots
	}
	if at := f.part.Get("lots"); (c.Mixed || at != nil) && !f.says("lots", string(lots)) {
		f.pairs = append(f.pairs, document.Pair{Key: word("lots"), Value: word(string(lots))})
	}
	return nil
}

// single writes one piece, but for what is written already.
func (f *filler) single(p Piece) error {
	pairs, err := f.keys(p)
	if err != nil {
		return err
	}
	for _, key := range []string{"value", "family", "tolerance"} {
		i := slices.IndexFunc(pairs, func(p document.Pair) bool { return p.Key.Value == key })
		switch {
		case i < 0:
			f.without(key)
		case !f.says(key, pairs[i].Value.Value):
			f.pairs = append(f.pairs, pairs[i])
		}
	}
	return nil
}

// without drops keys that the part has.
func (f *filler) without(keys ...string) {
	for _, key := range keys {
		if f.part.Get(key) != nil {
			f.drop = append(f.drop, key)
		}
	}
}

// keys are those of a piece by itself. A family that comes in one value only is
// given none, one that is not sold by tolerance no tolerance.
func (f *filler) keys(p Piece) ([]document.Pair, error) {
	family, ok := f.families.Family(p.Family)
	if !ok {
		return nil, fmt.Errorf("no family is called %q", p.Family)
	}
	var pairs []document.Pair
	if family.HasValue() {
		pairs = append(pairs, document.Pair{Key: word("value"), Value: word(p.Text)})
	}
	pairs = append(pairs, document.Pair{Key: word("family"), Value: word(p.Family)})
	if len(family.Grades) == 0 || onlyGrade(family, p.Tolerance) {
		return pairs, nil
	}
	return append(pairs, document.Pair{Key: word("tolerance"), Value: word(f.grade(p.Tolerance))}), nil
}

// onlyGrade says whether a trimmer is better written without its tolerance: it
// is what a piece of the family is taken for anyway, and written on the part it
// would hold for an end too that the family has another tolerance for.
func onlyGrade(f *part.Family, tolerance float64) bool {
	return f.Type.Trimmer() && sameTolerance(f.Grades[len(f.Grades)-1].Tolerance, tolerance) &&
		slices.ContainsFunc(f.Parameters, func(q part.Parameter) bool { return q.Tolerance != part.GradeTolerance })
}

// grade is a tolerance as the part's list of grades spells it, where it does.
func (f *filler) grade(tolerance float64) string {
	if list := f.part.Get("choose").Get("tolerances"); list != nil {
		for _, n := range append([]*document.Node{list}, list.Items...) {
			if q, err := quantity.Parse(n.Value, quantity.Percent); err == nil && sameTolerance(q.Value, tolerance) {
				return n.Value
			}
		}
	}
	return quantity.Format(tolerance, quantity.Percent, 0)
}

// says whether what the part has under a key means the same as a text.
func (f *filler) says(key, text string) bool {
	n := f.part.Get(key)
	switch {
	case n == nil || n.Value == text:
		return n != nil
	case key == "tolerance":
		return sameQuantity(n.Value, text, quantity.Percent)
	case key == "value":
		return sameQuantity(n.Value, text, f.unit)
	}
	return false
}

// sameQuantity says whether two texts are the same value or range.
func sameQuantity(a, b string, unit quantity.Unit) bool {
	if x, err := quantity.Parse(a, unit); err == nil {
		y, err := quantity.Parse(b, unit)
		return err == nil && same(x.Value, y.Value)
	}
	low, high, err := quantity.ParseRange(a, unit)
	low2, high2, err2 := quantity.ParseRange(b, unit)
	return err == nil && err2 == nil && same(low.Value, low2.Value) && same(high.Value, high2.Value)
}

// same allows for the rounding of decimal prefixes.
func same(a, b float64) bool { return math.Abs(a-b) <= 1e-9*math.Abs(b) }

// word is a text to be written.
func word(text string) *document.Node { return &document.Node{Value: text} }
