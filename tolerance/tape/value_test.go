package tape

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

// Every operation at one point, against the closed form beside it or a number
// that is known by heart of mathematics.
func TestValues(t *testing.T) {
	rows := []struct {
		text      string
		x, y      float64
		want      float64
		tolerance float64
	}{
		{"x + y", 1, 2, 3, 0},
		{"x - y", 1, 2, -1, 0},
		{"x * y", 3, 2, 6, 0},
		{"x / y", 3, 2, 1.5, 0},
		{"-x", 3, 0, -3, 0},
		{"x ^ y", 2, 10, 1024, 0},
		{"x ^ y", 2, 0.5, math.Sqrt2, 1e-15},
		{"x ^ 3 + x ^ 4 + x ^ -2", 2, 0, 24.25, 0},
		{"x ^ 1.5 + x ^ -0.5", 4, 0, 8.5, 0},
		{"x ^ 0", math.Inf(1), 0, 1, 0},
		{"sqrt(x)", 2, 0, math.Sqrt2, 1e-16},
		{"exp(x)", 1, 0, math.E, 1e-15},
		{"ln(x)", 10, 0, math.Ln10, 1e-15},
		{"log10(x)", 1000, 0, 3, 1e-15},
		{"sin(x)", math.Pi / 6, 0, 0.5, 1e-15},
		{"cos(x)", math.Pi / 3, 0, 0.5, 1e-15},
		{"atan(x)", 1, 0, math.Pi / 4, 1e-15},
		{"abs(x)", -3, 0, 3, 0},
		{"min(x, y)", 2, -1, -1, 0},
		{"max(x, y)", 2, -1, 2, 0},
		{"parallel(x, y)", 3, 6, 2, 0},
		{"x*y/(x + y)", 3, 6, 2, 0},
		{"y*x/(x + y)", 3, 6, 2, 0},
		{"parallel(x, y)", 0, 6, 0, 0},
		{"parallel(x, y)", 0, 0, 0, 0},
		{"x < y", 1, 2, 1, 0},
		{"x < y", 2, 2, 0, 0},
		{"x <= y", 2, 2, 1, 0},
		{"x > y", 2, 1, 1, 0},
		{"x >= y", 1, 2, 0, 0},
		{"x == y", 2, 2, 1, 0},
		{"x != y", 2, 2, 0, 0},
		{"not (x > y)", 1, 2, 1, 0},
		{"x > 0 and y > 0", 1, -1, 0, 0},
		{"x > 0 or y > 0", 1, -1, 1, 0},
		{"x > 0 ? y : -y", 1, 7, 7, 0},
		{"x > 0 ? y : -y", -1, 7, -7, 0},
		{"boltzmann*(zero_celsius + 25)/charge", 0, 0, 0.0256925791210858526, 1e-15}, // 1.380649e-23·298.15/1.602176634e-19 in decimal arithmetic
		{"2*pi + x", 0, 0, 2 * math.Pi, 0},
	}
	for _, r := range rows {
		t.Run(r.text, func(t *testing.T) {
			got := compile(t, []string{"x", "y"}, r.text).at(r.x, r.y)[0]
			if !near(got, r.want, r.tolerance) {
				t.Errorf("at %v, %v: %.17g, want %.17g", r.x, r.y, got, r.want)
			}
		})
	}
}

// NaN goes through every operation, and only a choice or a settled and/or
// leaves it behind.
func TestNaN(t *testing.T) {
	nan := math.NaN()
	for _, text := range []string{
		"x + y", "y - x", "x * y", "0 * x", "y / x", "x ^ y", "y ^ x", "-x", "sqrt(x)", "sqrt(-y)", "exp(x)", "ln(x)", "ln(-y)", "sin(x)", "cos(x)", "atan(x)", "abs(x)",
		"min(x, y)", "min(y, x)", "max(x, y)", "max(y, x)", "parallel(x, y)", "x < y", "x <= y", "x == y", "x != y", "not (x > y)", "x > 0 ? 1 : 2",
		"x > 0 and y > 0", "x > 0 or y < 0", "y > 0 ? x : y", "bessel_i0_scaled(x)", "bessel_i1_scaled(x)",
		"root(i, 0, 9, i - x)", "root(i, x, 9, i - y)", "root(i, 0, x, i - y)", "root(i, 0, 9, ln(i - 1) + 1)", "0/0 + y", "root(i, 0, 1/0, i - y)",
	} {
		if got := compile(t, []string{"x", "y"}, text).at(nan, 2)[0]; !math.IsNaN(got) {
			t.Errorf("%s with x = NaN is %v", text, got)
		}
	}
	for text, want := range map[string]float64{
		"x > 0 and y < 0": 0, "y < 0 and x > 0": 0, "x > 0 or y > 0": 1, "y > 0 ? y : x": 2, "y < 0 ? x : y": 2,
		"y > 3 ? ln(y - 3) : 0": 0, "0/0 > 1 or y > 0": 1,
	} {
		if got := compile(t, []string{"x", "y"}, text).at(nan, 2)[0]; got != want {
			t.Errorf("%s with x = NaN is %v, want %v", text, got, want)
		}
	}
}

// Random polynomials in 200 bits: sums and products lose no more than their
// roundings. Seeded, so the same ones each time.
func TestPolynomialsAgainstLongArithmetic(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 4))
	r := compile(t, []string{"a", "b", "c", "x"}, "((a*x + b)*x + c)*x + 1/(1 + x^2)")
	for range 200 {
		v := []float64{random.Float64(), random.Float64(), random.Float64(), 4 * random.Float64()}
		of := func(x float64) *big.Float { return new(big.Float).SetPrec(200).SetFloat64(x) }
		sum, x := of(v[0]), of(v[3])
		sum.Mul(sum, x).Add(sum, of(v[1])).Mul(sum, x).Add(sum, of(v[2])).Mul(sum, x)
		square := of(v[3])
		square.Mul(square, x).Add(square, of(1))
		sum.Add(sum, of(1).Quo(of(1), square))
		want, _ := sum.Float64()
		if got := r.at(v...)[0]; !near(got, want, 5e-16) {
			t.Errorf("at %v: %.17g, want %.17g", v, got, want)
		}
	}
}

// The table must be whole: an operation without a column would only show when
// somebody uses it.
func TestOperationsWhole(t *testing.T) {
	rows := 0
	for c := add; c < codes; c++ {
		o := operations[c]
		rows++
		if o.name == "" || o.arity < 1 || o.arity > 3 || o.value == nil || o.tangent == nil || o.bounds == nil || (o.left == nil) != (o.right == nil) {
			t.Errorf("row %d (%s) is not whole", c, o.name)
		}
	}
	if rows < 24 {
		t.Errorf("only %d operations", rows)
	}
}

// A constant on either side gives the same bits as a column of it.
func TestConstantSides(t *testing.T) {
	x := []float64{1.1, -2.3, 1e-300, 0, math.Inf(1)}
	for c := add; c < codes; c++ {
		o := operations[c]
		if o.left == nil {
			continue
		}
		for _, k := range []float64{0.7, -3, 0} {
			column := []float64{k, k, k, k, k}
			left, right, want := make([]float64, 5), make([]float64, 5), make([]float64, 5)
			o.left(left, k, x)
			o.value(want, column, x, nil)
			sameBits(t, o.name+" left", left, want)
			o.right(right, x, k)
			o.value(want, x, column, nil)
			sameBits(t, o.name+" right", right, want)
		}
	}
}

func sameBits(t *testing.T, name string, got, want []float64) {
	t.Helper()
	for i := range want {
		if math.Float64bits(got[i]) != math.Float64bits(want[i]) && !(math.IsNaN(got[i]) && math.IsNaN(want[i])) {
			t.Errorf("%s: %v at %d, want %v", name, got[i], i, want[i])
		}
	}
}
