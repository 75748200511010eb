package tape

import (
	"math"
	"testing"
)

func TestRoots(t *testing.T) {
	rows := []struct {
		name, text string
		x          float64
		want       float64
	}{
		{"straight line", "root(u, 0, 10, u - x)", 3, 3},
		{"straight line, ends swapped", "root(u, 10, 0, u - x)", 3, 3},
		{"falling", "root(u, 0, 10, x - u)", 3, 3},
		{"square", "root(u, 0, 10, u*u - x)", 2, math.Sqrt2},
		{"cube, flat at its root", "root(u, -1, 2, (u - x)^3)", 0.3, 0.3},
		{"exponential", "root(u, -50, 50, exp(u) - x)", 7, math.Log(7)},
		{"logarithm over eight decades", "root(u, 1e-9, 0.1, ln(u/x))", 2.5e-6, 2.5e-6},
		{"negative decades", "root(u, -0.1, -1e-9, ln(-u/x))", 2.5e-6, -2.5e-6},
		{"steep", "root(u, 0, 1, atan(1e6*(u - x)))", 0.123456789, 0.123456789},
		{"step", "root(u, 0, 1, u < x ? -1 : 1)", 0.75, 0.75},
		{"zero", "root(u, -1, 1, u^3 + u - x)", 0, 0},
		{"tiny", "root(u, 0, 1, u - x)", 1e-12, 1e-12},
		{"at the low end", "root(u, 0, 1, u)", 0, 0},
		{"at the high end", "root(u, 0, 1, u - 1)", 0, 1},
		{"cosine", "root(u, 0, 3, cos(u) - x)", 0.5, math.Pi / 3},
		// Dottie's number, the root of cos u = u: a tabulated constant, OEIS A003957.
		{"cosine's fixed point", "root(u, 0, 1, cos(u) - u)", 0, 0.73908513321516064},
		// The omega constant, u·e^u = 1: OEIS A030178.
		{"omega", "root(u, 0, 1, u*exp(u) - 1)", 0, 0.56714329040978387},
		{"nested", "root(w, 0, 9, root(u, 0, 9, u*u - w) - x)", 1.5, 2.25},
		{"clamped low", "root(u, 0, 1, u - x)", -3, 0},
		{"clamped high", "root(u, 0, 1, u - x)", 3, 1},
		{"clamped, rising away from the low end", "root(u, 2, 3, u*u + x)", 1, 2},
		{"clamped alike", "root(u, -1, 1, u*u + x)", 1, -1},
		{"unknown cancels", "root(u, 2, 3, (u - u)*x + 1)", 1, 2},
		{"infinite residual at an end", "root(u, 0, 1, ln(u) + x)", 2, math.Exp(-2)},
	}
	for _, r := range rows {
		t.Run(r.name, func(t *testing.T) {
			// A root is exact to a few units of its own last place, or of 1e-18
			// of the bracket; the flat cube's residual underflows before that.
			got := compile(t, []string{"x"}, r.text).at(r.x)[0]
			if math.Abs(got-r.want) > 1e-15*math.Abs(r.want)+1e-17 {
				t.Errorf("%.17g, want %.17g", got, r.want)
			}
		})
	}
}

// A junction fed through a resistor has a closed form by Lambert's W:
// i·R = V_T·W(I_S·R/V_T·e^(V/V_T)). W is computed here by Halley's iteration.
func TestRootDiode(t *testing.T) {
	r := compile(t, []string{"v", "r", "vt", "s"}, "root(i, 1e-15, 1, v - i*r - vt*ln(i/s))")
	for _, v := range [][]float64{{5, 1e3, 0.02569, 1e-14}, {0.7, 1e6, 0.02569, 1e-12}, {12, 47, 0.03, 1e-9}} {
		target := math.Log(v[3]*v[1]/v[2]) + v[0]/v[2] // ln of W's argument
		w := target
		for range 60 { // W + ln W = target
			w -= (w + math.Log(w) - target) / (1 + 1/w)
		}
		if got, want := r.at(v...)[0], w*v[2]/v[1]; !near(got, want, 1e-13) {
			t.Errorf("at %v: %.17g, want %.17g", v, got, want)
		}
	}
}

func TestBracketed(t *testing.T) {
	r := newRig("x")
	root := r.lower(t, "root(u, 0, 1, u - x)")
	inner := r.lower(t, "root(w, 0, 9, w - root(u, 0, w, u*u - x) - 1)")
	r.use(r.g.Bracketed(root), root, r.g.Add(r.g.Bracketed(inner), r.g.Bracketed(root)))
	for _, row := range [][4]float64{
		{0.5, 1, 0.5, 2}, {0, 1, 0, 2}, {1, 1, 1, 2}, {2, 0, 1, 1}, {-1, 0, 0, 1}, {math.NaN(), math.NaN(), math.NaN(), math.NaN()},
	} {
		sameBits(t, "bracketed, root, sum", r.at(row[0]), row[1:])
	}
	sameBits(t, "slopes", r.slopes([]float64{0.5}, []float64{1})[:2], []float64{0, 1})
}

// Bracketed alone, without the root's value.
func TestBracketedAlone(t *testing.T) {
	r := newRig("x")
	r.use(r.g.Bracketed(r.lower(t, "root(u, 0, 1, u - x)")))
	sameBits(t, "bracketed", append(r.at(0.5), r.at(2)...), []float64{1, 0})
	// Inside a loop: the share of a bracketed inner root.
	g := r.g
	u, w := g.Unknown(), g.Unknown()
	x := r.inputs["x"]
	innerRoot := g.Root(u, g.Constant(0), g.Constant(1), g.Sub(u, g.Mul(w, x)))
	r.use(g.Root(w, g.Constant(0), g.Constant(4), g.Sub(g.Constant(0.5), g.Bracketed(innerRoot))))
	if got := r.at(0.5)[0]; !near(got, 2, 1e-15) { // w·0.5 leaves [0, 1] at w = 2
		t.Errorf("the inner root stops being bracketed at %v, want 2", got)
	}
}

// Steps are few: superlinear where the residual is smooth, bounded where not.
func TestRootSteps(t *testing.T) {
	for text, most := range map[string]int{
		"root(u, 0, 10, u - x)":                     3, // a straight line at once
		"root(u, 0, 10, u*u - x)":                   10,
		"root(u, 1e-9, 0.1, ln(u/(x*1e-6)))":        16,
		"root(u, 1e-9, 0.1, x - u*1e3 - ln(u*1e6))": 12,
		"root(u, -50, 50, exp(u) - x)":              20,
		"root(u, 0, 1, u < x/10 ? -1 : 1)":          70, // nothing but halving
		"root(u, -1, 2, (u - x/10)^9)":              100,
	} {
		r := compile(t, []string{"x"}, text)
		loop := r.program.code[len(r.program.code)-1].loop
		if loop == nil {
			t.Fatalf("%s: no loop", text)
		}
		r.frame.begin(r.program, grid(1, 1), columnsOf([]float64{3}))
		steps := countSteps(r.frame, loop)
		if steps > most {
			t.Errorf("%s takes %d steps, want at most %d", text, steps, most)
		}
	}
}

// countSteps replays the search of lane 0.
func countSteps(f *Frame, l *loop) int {
	var s search
	x, residual := f.cols[l.unknown], f.cols[l.residual]
	low, high := f.cols[l.low][0], f.cols[l.high][0]
	x[0] = low
	f.run(l.body)
	s.f2 = residual[0]
	x[0] = high
	f.run(l.body)
	s.f1 = residual[0]
	x[0] = s.start(low, high)
	steps := 0
	for ; s.state == searching && steps < 1000; steps++ {
		f.run(l.body)
		x[0] = s.step(x[0], residual[0])
	}
	return steps
}
