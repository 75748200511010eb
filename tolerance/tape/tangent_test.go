package tape

import (
	"math"
	"testing"

	"batchwright/tolerance/formula"
)

// Slopes against the closed form, at an ordinary point.
func TestTangents(t *testing.T) {
	const x, y = 1.3, 0.7
	rows := []struct {
		text   string
		dx, dy float64 // closed forms
	}{
		{"x + y", 1, 1},
		{"x - y", 1, -1},
		{"x * y", y, x},
		{"x / y", 1 / y, -x / (y * y)},
		{"x ^ y", y * math.Pow(x, y-1), math.Pow(x, y) * math.Log(x)},
		{"x ^ 3 + y ^ -2", 3 * x * x, -2 / (y * y * y)},
		{"-x", -1, 0},
		{"sqrt(x)", 0.5 / math.Sqrt(x), 0},
		{"exp(x*y)", y * math.Exp(x*y), x * math.Exp(x*y)},
		{"ln(x)", 1 / x, 0},
		{"log10(x)", 1 / (x * math.Ln10), 0},
		{"sin(x)", math.Cos(x), 0},
		{"cos(x)", -math.Sin(x), 0},
		{"atan(x)", 1 / (1 + x*x), 0},
		{"abs(x)", 1, 0},
		{"abs(-y)", 0, 1},
		{"min(x, y)", 0, 1},
		{"max(x, y)", 1, 0},
		{"parallel(x, y)", y * y / ((x + y) * (x + y)), x * x / ((x + y) * (x + y))},
		{"x > y ? x^2 : y", 2 * x, 0},
		{"x < y", 0, 0},
		// d(e^−x·I₀) = e^−x(I₁ − I₀), d(e^−x·I₁) = e^−x(I₀ − I₁/x − I₁): Abramowitz & Stegun 9.6.26–27.
		{"bessel_i0_scaled(x)", besselI1Scaled(x) - besselI0Scaled(x), 0},
		{"bessel_i1_scaled(y)", 0, besselI0Scaled(y) - besselI1Scaled(y)*(1+1/y)},
		// Roots, by the equation they solve.
		{"root(u, 0, 9, u*u - x)", 0.5 / math.Sqrt(x), 0},
		{"root(u, 0, 9, x - u*y)", 1 / y, -x / (y * y)},
		{"x*root(u, 0, 9, exp(u) - 1 - y)", math.Log(1 + y), x / (1 + y)},
		// Outer: w³ = inner(w) + x with inner² = w + y at w; implicit: dw·(3w² − 1/(2i)) = dx + dy/(2i).
		{"root(w, 1, 9, w^3 - root(u, 0, 9, u*u - w - y) - x)", outerSlope(x, y, 1, 0), outerSlope(x, y, 0, 1)},
		// Three deep: the sum of three halvings of x.
		{"root(a, 0, 9, a - root(b, 0, 9, b - root(c, 0, 9, 2*c - x + a + b - y)))", 0.25, 0.25},
	}
	for _, r := range rows {
		t.Run(r.text, func(t *testing.T) {
			rig := compile(t, []string{"x", "y"}, r.text)
			at := []float64{x, y}
			if got := rig.slopes(at, []float64{1, 0})[0]; !near(got, r.dx, 1e-13) {
				t.Errorf("along x: %.17g, want %.17g", got, r.dx)
			}
			if got := rig.slopes(at, []float64{0, 1})[0]; !near(got, r.dy, 1e-13) {
				t.Errorf("along y: %.17g, want %.17g", got, r.dy)
			}
			// Tangents are linear, to rounding.
			if got, want := rig.slopes(at, []float64{2, -3})[0], 2*r.dx-3*r.dy; !(math.Abs(got-want) <= 1e-12*(math.Abs(r.dx)+math.Abs(r.dy))) {
				t.Errorf("along (2, -3): %.17g, want %.17g", got, want)
			}
		})
	}
}

// outerSlope solves the nested root of the table by fixed-point iteration.
func outerSlope(x, y, dx, dy float64) float64 {
	w := 1.5
	for range 200 {
		w = math.Cbrt(math.Sqrt(w+y) + x)
	}
	i := math.Sqrt(w + y)
	return (dx + dy/(2*i)) / (3*w*w - 1/(2*i))
}

// A part that is not fitted is worth 0: in a direction that leaves it there,
// infinite slopes must not make NaN of the rest.
func TestTangentsAtZero(t *testing.T) {
	for text, want := range map[string]float64{
		"y + sqrt(x)": 1, "y + x^0.3": 1, "y + sqrt(x*y)": 1, "y + parallel(x, y)": 1, "y + parallel(x, x)": 1,
		"y + abs(x)": 1, "y + exp(-exp(1000 + x))": 1, "y*exp(x)": 1, "(x > 0 ? ln(x) : 0) + y": 1, "y + bessel_i1_scaled(x)/bessel_i0_scaled(x)": 1,
	} {
		r := compile(t, []string{"x", "y"}, text)
		if got := r.slopes([]float64{0, 2}, []float64{0, 1})[0]; got != want {
			t.Errorf("%s at x = 0: slope %v along y, want %v", text, got, want)
		}
	}
	r := compile(t, []string{"x"}, "bessel_i1_scaled(x)/bessel_i0_scaled(x)", "sqrt(x)")
	// I₁/I₀ → x/2; the square root is steep without limit.
	if got := r.slopes([]float64{0}, []float64{1}); got[0] != 0.5 || !math.IsInf(got[1], 1) {
		t.Errorf("slopes at 0: %v, want 0.5 and +Inf", got)
	}
}

// Where a root is clamped it is the end, and moves as the end does.
func TestTangentsClamped(t *testing.T) {
	r := compile(t, []string{"x", "y"}, "root(u, 0, 1, u - x)", "root(u, 0, y, u - x)", "root(u, -y, 1, u - x)")
	got := r.slopes([]float64{5, 2}, []float64{1, 1})
	for i, want := range []float64{0, 1, 0} {
		if got[i] != want {
			t.Errorf("output %d: slope %v, want %v", i, got[i], want)
		}
	}
	if got := r.slopes([]float64{-5, 2}, []float64{1, 1})[2]; got != -1 {
		t.Errorf("at the low end: slope %v, want -1", got)
	}
}

// Tangents computes the same values as Values, to the bit, and lanes that are
// clamped, solved and hopeless do not disturb each other.
func TestTangentsGiveValues(t *testing.T) {
	r := compile(t, []string{"x", "y"}, "root(w, 0.5, 9, w^3 - root(u, 0, 9, u*u - w - y) - x)", "x*y", "y", "3")
	in := [][]float64{{1, 5000, math.NaN(), 2, -100}, {2, 1, 1, 0.5, 0.5}}
	plain, values, slopes := grid(4, 5), grid(4, 5), grid(4, 5)
	r.program.Values(plain, in, r.frame)
	r.program.Tangents(values, slopes, in, [][]float64{{1, 1, 1, 1, 1}, nil}, r.frame)
	for k := range plain {
		sameBits(t, "values", values[k], plain[k])
	}
	for lane, x := range in[0] {
		alone := r.slopes([]float64{x, in[1][lane]}, []float64{1, 0})[0]
		sameBits(t, "slope", slopes[0][lane:lane+1], []float64{alone})
	}
	sameBits(t, "clamped slopes", []float64{slopes[0][1], slopes[0][4]}, []float64{0, 0})
	sameBits(t, "slope of an input and of a constant", []float64{slopes[2][0], slopes[3][0]}, []float64{0, 0})
}

// TestGradient asks for the bits of Tangents where every lane has the same
// inputs, through nested roots, some clamped.
func TestGradient(t *testing.T) {
	for _, text := range []string{
		"sqrt(x)*y + exp(x*y)",
		"root(w, 1, 9, w^3 - root(u, 0, 9, u*u - w - y) - x)",
		"x*root(u, 0, 0.1, exp(u) - 1 - y)",
		"root(u, -1, 1, ln(u) - x)",
	} {
		g := NewGraph()
		x, y := g.Input(), g.Input()
		e, mistakes := formula.Parse(text)
		if len(mistakes) > 0 {
			t.Fatal(mistakes)
		}
		r, err := g.Lower(e, func(name string) (Ref, bool) { return map[string]Ref{"x": x, "y": y}[name], true })
		if err != nil {
			t.Fatal(err)
		}
		p := g.Program(r)
		const n = 5
		in := [][]float64{{1.3, 1.3, 1.3, 1.3, 1.3}, {0.7, 0.7, 0.7, 0.7, 0.7}}
		din := [][]float64{{1, 0, 1, -2, 0}, {0, 1, 1, 0.5, 0}}
		var value, slope [2][n]float64
		f := p.NewFrame(n)
		p.Gradient([][]float64{value[0][:]}, [][]float64{slope[0][:]}, in, din, f)
		p.Tangents([][]float64{value[1][:]}, [][]float64{slope[1][:]}, in, din, f)
		for i := range n {
			if math.Float64bits(value[0][i]) != math.Float64bits(value[1][i]) || math.Float64bits(slope[0][i]) != math.Float64bits(slope[1][i]) {
				t.Errorf("%s, lane %d: %v and %v, want %v and %v", text, i, value[0][i], slope[0][i], value[1][i], slope[1][i])
			}
		}
	}
}
