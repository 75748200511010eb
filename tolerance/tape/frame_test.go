package tape

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

var busy = []string{
	"1/(2*pi*sqrt(x*(y*z/(y + z) + 0.1)))",
	"root(w, 0.5, 9, w^3 - root(u, 0, 9, u*u - w - y) - x)",
	"root(u, 0, 9, u*u - x) + bessel_i1_scaled(y)/bessel_i0_scaled(y)",
	"x > y ? ln(x - y) : z",
	"z",
	"4.5",
	"x > y ? ln(x - y) : z",
}

func randomBlock(n int) [][]float64 {
	random := rand.New(rand.NewPCG(5, 6))
	in := grid(3, n)
	for i := range in {
		for k := range in[i] {
			in[i][k] = 4 * random.Float64()
		}
	}
	in[0][n/2] = math.NaN()
	in[1][n/3] = 1e6
	return in
}

// A lane's bits depend on its own inputs only: not on the block's size, on the
// order of the lanes or on what else is in it.
func TestLanesAreIndependent(t *testing.T) {
	const n = 101
	r := compile(t, []string{"x", "y", "z"}, busy...)
	in, din := randomBlock(n), randomBlock(n)
	din[0][n/2] = 1
	want, wantSlopes := grid(len(busy), n), grid(len(busy), n)
	r.program.Tangents(want, wantSlopes, in, din, r.program.NewFrame(n))
	order := rand.New(rand.NewPCG(7, 8)).Perm(n)
	for _, lanes := range []int{1, 7, 64, 512} {
		f := r.program.NewFrame(lanes)
		for first := 0; first < n; first += lanes {
			part := order[first:min(first+lanes, n)]
			pin, pdin := grid(3, len(part)), grid(3, len(part))
			got, slopes := grid(len(busy), len(part)), grid(len(busy), len(part))
			for k, lane := range part {
				for i := range in {
					pin[i][k], pdin[i][k] = in[i][lane], din[i][lane]
				}
			}
			r.program.Values(got, pin, f)
			compareLanes(t, "values", got, want, part)
			r.program.Tangents(got, slopes, pin, pdin, f)
			compareLanes(t, "values beside slopes", got, want, part)
			compareLanes(t, "slopes", slopes, wantSlopes, part)
		}
	}
}

func compareLanes(t *testing.T, name string, got, want [][]float64, lanes []int) {
	t.Helper()
	for o := range got {
		for k, lane := range lanes {
			sameBits(t, name, got[o][k:k+1], want[o][lane:lane+1])
		}
	}
}

func TestNoAllocation(t *testing.T) {
	const n = 64
	r := compile(t, []string{"x", "y", "z"}, busy...)
	f := r.program.NewFrame(n)
	in, dst, slopes := randomBlock(n), grid(len(busy), n), grid(len(busy), n)
	if a := testing.AllocsPerRun(20, func() { r.program.Values(dst, in, f) }); a != 0 {
		t.Errorf("Values allocates %v times", a)
	}
	if a := testing.AllocsPerRun(20, func() { r.program.Tangents(dst, slopes, in, in, f) }); a != 0 {
		t.Errorf("Tangents allocates %v times", a)
	}
}

func TestProgramHoldsWhatIsNeeded(t *testing.T) {
	r := newRig("x", "y", "unused", "z")
	r.lower(t, "exp(unused)")
	r.use(r.lower(t, "x + sqrt(z)"))
	if got := r.program.Inputs(); !slices.Equal(got, []int{0, 3}) {
		t.Errorf("inputs %v, want 0 and 3", got)
	}
	if n := len(r.program.code); n != 2 {
		t.Errorf("%d instructions, want 2", n)
	}
	dst := grid(1, 1)
	r.program.Values(dst, [][]float64{{1}, nil, nil, {4}}, r.frame)
	if dst[0][0] != 3 {
		t.Errorf("%v, want 3", dst[0][0])
	}
}

// What does not depend on the unknown is computed outside the loop: of the
// residual below, x·y, its root and the logarithm.
func TestLoopInvariantsMoveOut(t *testing.T) {
	r := compile(t, []string{"x", "y"}, "root(u, 0, 9, u*sqrt(x*y) - ln(x) + exp(u - y)*root(w, 0, 9, w*w - x*u - sqrt(y)))")
	var loops []*loop
	outside := 0
	for _, in := range r.program.code {
		if in.loop != nil {
			loops = append(loops, in.loop)
		} else {
			outside++
		}
	}
	if len(loops) != 1 || outside != 4 { // x·y, √(x·y), ln x, √y
		t.Fatalf("%d loops and %d operations outside them, want 1 and 4", len(loops), outside)
	}
	inner := 0
	for _, in := range loops[0].body {
		if in.loop != nil {
			inner++
			// w², w² − x·u, − √y; x·u belongs to the loop outside.
			if n := len(in.loop.body); n != 3 {
				t.Errorf("%d operations in the inner loop, want 3", n)
			}
		}
	}
	if inner != 1 || len(loops[0].body) != 8 { // u·, −, u−y, exp, x·u, root, product, sum
		t.Errorf("%d operations and %d loops in the loop, want 8 and 1", len(loops[0].body), inner)
	}
}

// A thousand additions in a row need two registers, not a thousand.
func TestRegistersAreReused(t *testing.T) {
	r := newRig("x", "y")
	value := r.inputs["x"]
	for range 1000 {
		value = r.g.Add(r.g.Mul(value, r.inputs["y"]), r.inputs["x"])
	}
	r.use(value)
	if r.program.registers > 2 {
		t.Errorf("%d registers, want at most 2", r.program.registers)
	}
	// Σ y^k for k ≤ 1000 at y = ½ is 2 − 2⁻¹⁰⁰⁰, to rounding.
	if got := r.at(1, 0.5)[0]; !near(got, 2, 1e-15) {
		t.Errorf("%v, want 2", got)
	}
}

func TestEmptyBlocks(t *testing.T) {
	r := compile(t, []string{"x"}, "x + 1")
	r.program.Values([][]float64{{}}, [][]float64{{}}, r.frame)
	none := r.g.Program()
	none.Values(nil, nil, none.NewFrame(1))
	if got := none.Bounds(nil); len(got) != 0 {
		t.Errorf("bounds of nothing: %v", got)
	}
}

// The same graph, built and compiled again, is the same program.
func TestProgramsAreReproducible(t *testing.T) {
	a, b := compile(t, []string{"x", "y", "z"}, busy...), compile(t, []string{"x", "y", "z"}, busy...)
	if got, want := listing(b.program.code), listing(a.program.code); !slices.Equal(got, want) {
		t.Errorf("%v\n%v", got, want)
	}
}

// listing flattens a program for comparison.
func listing(code []instruction) []int32 {
	var list []int32
	for _, in := range code {
		if l := in.loop; l != nil {
			list = append(list, l.unknown, l.low, l.high, l.residual, l.bracketed)
			list = append(append(list, l.outer...), listing(l.body)...)
			continue
		}
		list = append(list, int32(in.op), int32(in.side), in.dst, in.a, in.b, in.c)
	}
	return list
}
