package tape

import (
	"cmp"
	"slices"
	"testing"
)

func TestKinks(t *testing.T) {
	g := NewGraph()
	x, y := g.Input(), g.Input()
	d := g.Sub(x, y)
	u := g.Unknown()
	inside := g.Root(u, g.Constant(0), g.Constant(1), g.Sub(g.Abs(g.Sub(u, y)), x))
	for _, c := range []struct {
		name string
		of   Ref
		want []Kink
	}{
		{"none", g.Mul(x, y), nil},
		{"itself", g.Abs(d), []Kink{{d, NoRef}}},
		{"deep", g.Add(g.Sqrt(g.Abs(d)), g.Abs(x)), []Kink{{d, NoRef}, {x, NoRef}}},
		{"min", g.Mul(g.Min(x, y), d), []Kink{{x, y}}},
		{"choice", g.Select(g.Less(x, d), x, y), []Kink{{x, d}}},
		{"in a loop", inside, nil},
		{"behind a loop", g.Add(inside, g.Abs(d)), []Kink{{d, NoRef}}},
	} {
		got := g.Kinks(c.of)
		order := func(a, b Kink) int { return cmp.Or(cmp.Compare(a.A, b.A), cmp.Compare(a.B, b.B)) }
		slices.SortFunc(got, order)
		slices.SortFunc(c.want, order)
		if !slices.Equal(got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}

func TestDependents(t *testing.T) {
	g := NewGraph()
	x, y := g.Input(), g.Input()
	u := g.Unknown()
	root := g.Root(u, g.Constant(0), g.Constant(1), g.Sub(u, y))
	byX, byY := g.Dependents(0), g.Dependents(1)
	for _, c := range []struct {
		name string
		of   Ref
		x, y bool
	}{
		{"x", x, true, false}, {"constant", g.Constant(3), false, false}, {"root", root, false, true},
		{"both", g.Mul(x, root), true, true},
	} {
		if c.of >= Ref(len(byX)) { // made after the question was asked
			byX, byY = g.Dependents(0), g.Dependents(1)
		}
		if byX[c.of] != c.x || byY[c.of] != c.y {
			t.Errorf("%s depends on x %v and y %v, want %v and %v", c.name, byX[c.of], byY[c.of], c.x, c.y)
		}
	}
}
