package tape

import (
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
		want []Ref
	}{
		{"none", g.Mul(x, y), nil},
		{"itself", g.Abs(d), []Ref{d}},
		{"deep", g.Add(g.Sqrt(g.Abs(d)), g.Abs(x)), []Ref{d, x}},
		{"in a loop", inside, nil},
		{"behind a loop", g.Add(inside, g.Abs(d)), []Ref{d}},
	} {
		got := g.Kinks(c.of)
		slices.Sort(got)
		slices.Sort(c.want)
		if !slices.Equal(got, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, got, c.want)
		}
	}
}
