package tape

import (
	"math"
	"testing"

	"batchwright/tolerance/formula"
)

func TestSameValueIsOneNode(t *testing.T) {
	r := newRig("x", "y")
	for _, pair := range [][2]string{
		{"x + y", "y + x"},
		{"x*y + 1", "1 + y*x"},
		{"sqrt(x) - ln(y)", "x^0.5 - ln(y)"},
		{"x*x", "x^2"},
		{"x*y/(x + y)", "parallel(y, x)"},
		{"x + 0", "x*1"},
		{"0 - x", "-x"},
		{"-(-x)", "x/1"},
		{"2*3*x", "6*x"},
		{"min(x, x)", "max(x, x)"},
		{"2 > 1 ? x : y", "x"},
		{"2*pi", "6.283185307179586"},
		// Roots that differ in nothing but the name of their unknown.
		{"root(u, 0, 1, u*u - x)", "root(w, 0, 1, w*w - x)"},
		{"root(a, 0, 1, root(b, 0, 1, a*b - x) - y)", "root(c, 0, 1, root(d, 0, 1, d*c - x) - y)"},
	} {
		before := len(r.g.nodes)
		if a, b := r.lower(t, pair[0]), r.lower(t, pair[1]); a != b {
			t.Errorf("%s and %s are two values (%d nodes, %d)", pair[0], pair[1], before, len(r.g.nodes))
		}
	}
	for _, pair := range [][2]string{
		{"x - y", "y - x"},
		{"x/y", "y/x"},
		{"root(u, 0, 1, u*u - x)", "root(u, 0, 1, u*u - y)"},
		{"root(u, 0, 1, u*u - x)", "root(u, 0, 2, u*u - x)"},
		{"x*0", "y*0"}, // not 0: NaN and infinity are not forgotten
	} {
		if r.lower(t, pair[0]) == r.lower(t, pair[1]) {
			t.Errorf("%s and %s are taken for one value", pair[0], pair[1])
		}
	}
}

func TestConstantsFold(t *testing.T) {
	r := newRig("x")
	for text, want := range map[string]float64{
		"2 + 3*4": 14, "2^-1": 0.5, "sqrt(4)*exp(0)": 2, "1/0": math.Inf(1), "0/0": math.NaN(), "sqrt(-1) + 1": math.NaN(),
		"ln(0)": math.Inf(-1), "min(3, 0/0)": math.NaN(), "3 < 4 and 1 > 0": 1, "0/0 < 1": math.NaN(), "x^0": 1,
	} {
		got, ok := r.g.Value(r.lower(t, text))
		if !ok || !near(got, want, 0) {
			t.Errorf("%s is %v (constant: %v), want %v", text, got, ok, want)
		}
	}
	// A NaN constant is one node too, though NaN is not equal to itself.
	if first := r.g.Constant(math.NaN()); first != r.g.Constant(math.NaN()) {
		t.Error("NaN is two nodes")
	}
}

// The names of an inner and an outer expression meet in one graph: what is
// bound in one must not capture what is bound in the other.
func TestRootsDoNotCapture(t *testing.T) {
	// Equations of a build: a bias current in a root; a trim, a root over all
	// of it, in whose residual the bias is lowered again; a second trim over
	// that. Solved in closed form on paper:
	//   bias(s)  : i·i = s       → i = √s
	//   trim1    : √s·x = 1+a    → s = ((1+a)/x)²
	//   trim2    : s(a) = y      → a = x·√y − 1
	g := NewGraph()
	x, y := g.Input(), g.Input()
	lower := func(text string, known map[string]Ref) Ref {
		e, mistakes := formula.Parse(text)
		if len(mistakes) > 0 {
			t.Fatal(mistakes)
		}
		r, err := g.Lower(e, func(name string) (Ref, bool) { r, ok := known[name]; return r, ok })
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	a, s := g.Unknown(), g.Unknown()
	bias := lower("root(i, 0, 100, i*i - s)", map[string]Ref{"s": s})
	trim1 := g.Root(s, g.Constant(0), g.Constant(1e4), lower("bias*x - 1 - a", map[string]Ref{"bias": bias, "x": x, "a": a}))
	trim2 := g.Root(a, g.Constant(-1), g.Constant(50), lower("s - y", map[string]Ref{"s": trim1, "y": y}))
	loose := g.Root(g.Unknown(), x, y, g.Constant(1)) // no unknown in it: the low end
	p := g.Program(trim2, loose, g.Bracketed(loose))
	dst, slopes := grid(3, 1), grid(3, 1)
	p.Tangents(dst, slopes, columnsOf([]float64{2, 9}), columnsOf([]float64{0, 1}), p.NewFrame(4))
	if !near(dst[0][0], 5, 1e-14) || !near(slopes[0][0], 2/(2*3.0), 1e-12) { // da/dy = x/(2√y)
		t.Errorf("a = %.17g with slope %.17g, want 5 and 1/3", dst[0][0], slopes[0][0])
	}
	if dst[1][0] != 2 || dst[2][0] != 0 {
		t.Errorf("a root without its unknown is %v, bracketed %v; want its low end 2, and 0", dst[1][0], dst[2][0])
	}
}

// In a chain of stages, each with a root over the result of the one before,
// nothing nests: the earlier results are computed outside.
func TestChainedRootsStayFlat(t *testing.T) {
	r := newRig("x")
	value := r.inputs["x"]
	for range 100 {
		u := r.g.Unknown()
		value = r.g.Root(u, r.g.Constant(0), r.g.Constant(100), r.g.Sub(r.g.Mul(u, r.g.Constant(2)), r.g.Add(value, r.g.Constant(1))))
	}
	r.use(value)
	if r.program.depth != 1 {
		t.Errorf("loops nest %d deep, want 1", r.program.depth)
	}
	// v → (v + 1)/2 leads to 1 from anywhere.
	if got := r.at(7)[0]; !near(got, 1, 1e-15) {
		t.Errorf("%v, want 1", got)
	}
}

func TestLowerComplains(t *testing.T) {
	e, _ := formula.Parse("1 + nothing*2")
	g := NewGraph()
	_, err := g.Lower(e, func(string) (Ref, bool) { return 0, false })
	if want := `column 5: nothing is known of the name "nothing"`; err == nil || err.Error() != want {
		t.Errorf("got %v, want %s", err, want)
	}
}

func TestMisusePanics(t *testing.T) {
	for name, misuse := range map[string]func(g *Graph){
		"root of an input": func(g *Graph) { x := g.Input(); g.Root(x, x, x, x) },
		"root of a used-up unknown": func(g *Graph) {
			x, u := g.Input(), g.Unknown()
			r := g.Root(u, x, x, g.Sub(u, x))
			g.Root(g.nodes[r].c, x, x, r)
		},
		"output with an open unknown": func(g *Graph) { g.Program(g.Add(g.Unknown(), g.Input())) },
		"frame of another program": func(g *Graph) {
			x := g.Input()
			f := g.Program(x).NewFrame(1)
			g.Program(x).Values(grid(1, 1), grid(1, 1), f)
		},
		"frame without lanes":          func(g *Graph) { g.Program(g.Input()).NewFrame(0) },
		"block longer than its frame":  func(g *Graph) { p := g.Program(g.Input()); p.Values(grid(1, 3), grid(1, 3), p.NewFrame(2)) },
		"fewer columns than outputs":   func(g *Graph) { x := g.Input(); p := g.Program(x, x); p.Values(grid(1, 1), grid(1, 1), p.NewFrame(2)) },
		"fewer tangents than outputs":  func(g *Graph) { p := g.Program(g.Input()); p.Tangents(grid(1, 1), nil, grid(1, 1), nil, p.NewFrame(1)) },
		"roots nested beyond counting": func(g *Graph) { nest(g, 70, g.Input()) },
	} {
		t.Run(name, func(t *testing.T) {
			defer func() {
				if recover() == nil {
					t.Error("no panic")
				}
			}()
			misuse(NewGraph())
		})
	}
}

// nest makes n roots, each in the residual of the next and dependent on the
// unknowns of all around it; their sum so far is around.
func nest(g *Graph, n int, around Ref) Ref {
	if n == 0 {
		return around
	}
	u := g.Unknown()
	inner := nest(g, n-1, g.Add(around, u))
	return g.Root(u, g.Constant(0), g.Constant(9), g.Sub(g.Mul(u, g.Constant(2)), inner))
}
