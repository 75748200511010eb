package tape

import (
	"math"
	"testing"
)

func TestBounds(t *testing.T) {
	inf := math.Inf(1)
	rows := []struct {
		text string
		x, y Interval
		want Interval // to 1e-9 of its ends
	}{
		{"x + y", Interval{1, 2}, Interval{-1, 3}, Interval{0, 5}},
		{"x - y", Interval{1, 2}, Interval{-1, 3}, Interval{-2, 3}},
		{"x * y", Interval{-1, 2}, Interval{-3, 4}, Interval{-6, 8}},
		{"x * x", Interval{-1, 2}, Point(0), Interval{0, 4}},
		{"x^4", Interval{-1, 2}, Point(0), Interval{0, 16}},
		{"x / y", Interval{1, 2}, Interval{4, 8}, Interval{0.125, 0.5}},
		{"x / y", Interval{1, 2}, Interval{-1, 8}, Interval{-inf, inf}},
		{"x / y", Interval{1, 2}, Interval{0, 8}, Interval{-inf, inf}},
		{"parallel(x, y)", Interval{1, 2}, Interval{1, 6}, Interval{0.5, 1.5}},
		{"x*y/(x + y)", Interval{1, 2}, Interval{1, 6}, Interval{0.5, 1.5}},
		{"parallel(x, y)", Interval{0, 2}, Interval{0, 6}, Interval{0, 1.5}},
		{"-x", Interval{1, 2}, Point(0), Interval{-2, -1}},
		{"abs(x)", Interval{-3, 2}, Point(0), Interval{0, 3}},
		{"sqrt(x)", Interval{-3, 4}, Point(0), Interval{0, 2}},
		{"ln(x)", Interval{-3, 1}, Point(0), Interval{-inf, 0}},
		{"exp(x)", Interval{0, 1}, Point(0), Interval{1, math.E}},
		{"exp(x)", Interval{-inf, 0}, Point(0), Interval{0, 1}},
		{"sin(x)", Interval{0, 3}, Point(0), Interval{0, 1}},
		{"cos(x)", Interval{3, 4}, Point(0), Interval{-1, math.Cos(4)}},
		{"sin(x)", Interval{100, 110}, Point(0), Interval{-1, 1}},
		{"sin(x)", Interval{1e9, 1e9 + 0.1}, Point(0), Interval{-1, 1}},
		{"atan(x)", Interval{-inf, 1}, Point(0), Interval{-math.Pi / 2, math.Pi / 4}},
		{"min(x, y)", Interval{1, 5}, Interval{2, 3}, Interval{1, 3}},
		{"max(x, y)", Interval{1, 5}, Interval{2, 3}, Interval{2, 5}},
		{"x^y", Interval{0.5, 4}, Interval{-1, 2}, Interval{0.25, 16}},
		{"x^1.7", Interval{-1, 4}, Point(0), Interval{0, math.Pow(4, 1.7)}},
		{"x^5", Interval{-2, 1}, Point(0), Interval{-32, 1}},
		{"x^6", Interval{-2, 1}, Point(0), Interval{0, 64}},
		{"x < y", Interval{1, 2}, Interval{3, 4}, Interval{1, 1}},
		{"x < y", Interval{1, 2}, Interval{2, 4}, Interval{0, 1}},
		{"x <= y", Interval{1, 2}, Interval{2, 4}, Interval{1, 1}},
		{"x > y", Interval{1, 2}, Interval{2, 4}, Interval{0, 0}},
		{"x == y", Interval{1, 2}, Interval{2, 4}, Interval{0, 1}},
		{"x != y", Interval{1, 2}, Interval{3, 4}, Interval{1, 1}},
		{"x > 0 and y > 0", Interval{1, 2}, Interval{-1, 4}, Interval{0, 1}},
		{"x > 0 or y > 0", Interval{1, 2}, Interval{-1, 4}, Interval{1, 1}},
		{"not (x > 0)", Interval{1, 2}, Point(0), Interval{0, 0}},
		{"x > 0 ? y : 100", Interval{1, 2}, Interval{3, 4}, Interval{3, 4}},
		{"x > 0 ? y : 100", Interval{-2, -1}, Interval{3, 4}, Interval{100, 100}},
		{"x > 0 ? y : 100", Interval{-2, 1}, Interval{3, 4}, Interval{3, 100}},
		// A side that has no value anywhere adds nothing.
		{"x > 0 ? y : ln(-1 - y^2)", Interval{-2, 1}, Interval{3, 4}, Interval{3, 4}},
		{"y < 0 and ln(-1 - x^2) > 0", Interval{-2, 1}, Interval{3, 4}, Interval{0, 0}},
		{"y > 0 or ln(-1 - x^2) > 0", Interval{-2, 1}, Interval{3, 4}, Interval{1, 1}},
		{"bessel_i0_scaled(x)", Interval{-2, 1}, Point(0), Interval{0.3085083226, 1}},           // Abramowitz & Stegun table 9.8
		{"bessel_i1_scaled(x)", Interval{1, 2}, Point(0), Interval{0.2079104153, 0.2190919750}}, // and the crest
		{"bessel_i1_scaled(x)", Interval{-5, -0.5}, Point(0), Interval{-0.2190919750, -0.1564208032}},
	}
	for _, r := range rows {
		t.Run(r.text, func(t *testing.T) {
			got := compile(t, []string{"x", "y"}, r.text).program.Bounds([]Interval{r.x, r.y})[0]
			slack := func(v float64) float64 { return 1e-9 * (1 + math.Abs(v)) }
			if !(near(got.Low, r.want.Low, 0) || math.Abs(got.Low-r.want.Low) <= slack(r.want.Low)) ||
				!(near(got.High, r.want.High, 0) || math.Abs(got.High-r.want.High) <= slack(r.want.High)) {
				t.Errorf("over %v, %v: %v, want %v", r.x, r.y, got, r.want)
			}
		})
	}
}

// Bounds of roots: close where the residual rises steadily, the ends where they
// may be reached.
func TestBoundsOfRoots(t *testing.T) {
	rows := []struct {
		name, text string
		x          Interval
		want       Interval
	}{
		{"square root", "root(u, 0, 10, u*u - x)", Interval{4, 9}, Interval{2, 3}},
		{"swapped ends", "root(u, 10, 0, u*u - x)", Interval{4, 9}, Interval{2, 3}},
		{"nested", "root(w, 0.1, 100, root(u, 0, 90, u*u - w) - x)", Interval{2, 3}, Interval{4, 9}},
		{"certainly clamped high", "root(u, 0, 1, u - x)", Interval{2, 2.5}, Interval{1, 1}},
		{"certainly clamped low", "root(u, 0, 1, u - x)", Interval{-2.5, -2}, Interval{0, 0}},
		{"perhaps clamped", "root(u, 0, 1, u - x)", Interval{0.5, 3}, Interval{0, 1}},
		{"a point", "root(u, 0, 10, u*u*u - x)", Point(27), Interval{3, 3}},
	}
	for _, r := range rows {
		t.Run(r.name, func(t *testing.T) {
			got := compile(t, []string{"x"}, r.text).program.Bounds([]Interval{r.x})[0]
			if got.Low > r.want.Low || got.High < r.want.High {
				t.Errorf("%v does not hold %v", got, r.want)
			}
			// Pieces down to 2^−16 of the bracket are cut off; nested, twice.
			if slack := 100 * 4 / 65536.0; got.Low < r.want.Low-slack || got.High > r.want.High+slack {
				t.Errorf("%v is wider than %v", got, r.want)
			}
		})
	}
	r := newRig("x")
	r.use(r.g.Bracketed(r.lower(t, "root(u, 0, 1, u - x)")))
	for _, row := range []struct{ x, want Interval }{{Interval{0.2, 0.8}, yes}, {Interval{2, 3}, no}, {Interval{0, 3}, truths}} {
		if got := r.program.Bounds([]Interval{row.x})[0]; got != row.want {
			t.Errorf("bracketed over %v: %v, want %v", row.x, got, row.want)
		}
	}
}

func TestBoundsOfNothing(t *testing.T) {
	r := compile(t, []string{"x"}, "ln(-1 - x^2)", "1 + sqrt(-1 - x^2)", "root(u, 0, 1, u + ln(-1 - x^2))", "x + 0/0")
	for i, got := range r.program.Bounds([]Interval{{-1, 1}}) {
		if !got.Empty() {
			t.Errorf("output %d: %v, want no number", i, got)
		}
	}
}

// Rounding may carry a value past the exact bound by a unit in the last place;
// the bounds allow for it. 0.1 + 0.2 > 0.3 is the plainest case.
func TestBoundsAllowForRounding(t *testing.T) {
	r := compile(t, []string{"x", "y"}, "x + y", "x*y", "x/y", "exp(x*y)", "(x + y)^1.3")
	for i, b := range r.program.Bounds([]Interval{Point(0.1), Point(0.2)}) {
		v := r.at(0.1, 0.2)[i]
		if !(b.Low < v && v < b.High) {
			t.Errorf("output %d: %v has no margin around %v", i, b, v)
		}
	}
}
