package spread

import (
	"bufio"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// strd reads a data set of testdata/strd; its head names the source.
func strd(t *testing.T, name string) (x []float64) {
	t.Helper()
	f, err := os.Open("testdata/strd/" + name + ".txt")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	for s := bufio.NewScanner(f); s.Scan(); {
		if strings.HasPrefix(s.Text(), "#") {
			continue
		}
		v, err := strconv.ParseFloat(s.Text(), 64)
		if err != nil {
			t.Fatal(err)
		}
		x = append(x, v)
	}
	return x
}

// numAcc is first and then low and high by turns, 500 times each.
func numAcc(first, low, high float64) []float64 {
	x := []float64{first}
	for range 500 {
		x = append(x, low, high)
	}
	return x
}

// TestMomentsStRD: certified values of the NIST Statistical Reference
// Datasets, univariate (https://www.itl.nist.gov/div898/strd/univ/homepage.html).
// The standard deviations of NumAcc3 and NumAcc4 are limited by the rounding
// of the data to binary; a one-pass sum of squares gives 0.107 and 0. That
// NumAcc2 to NumAcc4 are built as here is from memory; their certified values
// are not.
func TestMomentsStRD(t *testing.T) {
	for _, c := range []struct {
		name     string
		x        []float64
		count    int
		mean, sd float64
		tol      float64 // relative, of sd; the means are held to 1e-14
	}{
		{"Michelso", strd(t, "michelso"), 100, 299.8524, 0.0790105478190518, 1e-12},
		{"Mavro", strd(t, "mavro"), 50, 2.001856, 0.000429123454003053, 1e-11},
		{"NumAcc1", []float64{10000001, 10000003, 10000002}, 3, 10000002, 1, 1e-15},
		{"NumAcc2", numAcc(1.2, 1.1, 1.3), 1001, 1.2, 0.1, 1e-13},
		{"NumAcc3", numAcc(1000000.2, 1000000.1, 1000000.3), 1001, 1000000.2, 0.1, 1e-9},
		{"NumAcc4", numAcc(10000000.2, 10000000.1, 10000000.3), 1001, 10000000.2, 0.1, 1e-8},
	} {
		t.Run(c.name, func(t *testing.T) {
			for _, run := range []int{len(c.x), 256, 7, 1} { // values per run
				var m Moments
				for part := range slices.Chunk(c.x, run) {
					m.AddColumn(part, nil)
				}
				if m.Count() != c.count {
					t.Errorf("count %d, want %d", m.Count(), c.count)
				}
				near(t, "mean", m.Mean(), c.mean, 1e-14*c.mean)
				near(t, "standard deviation", m.StandardDeviation(), c.sd, c.tol*c.sd)
				near(t, "least", m.Min(), slices.Min(c.x), 0)
				near(t, "largest", m.Max(), slices.Max(c.x), 0)
			}
		})
	}
}

// near fails t unless got is within tol of want, absolutely.
func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.17g, want %.17g (within %g)", what, got, want, tol)
	}
}

// absent fails t unless got is NaN.
func absent(t *testing.T, what string, got float64) {
	t.Helper()
	if !math.IsNaN(got) {
		t.Errorf("%s = %v, want NaN", what, got)
	}
}

// panics fails t unless f panics.
func panics(t *testing.T, what string, f func()) {
	t.Helper()
	defer func() {
		if recover() == nil {
			t.Errorf("%s: no panic", what)
		}
	}()
	f()
}

var whole = cmp.AllowUnexported(Moments{}, Histogram{}, wing{})

// TestMomentsKeep: what is not kept, or not finite, leaves no trace but the
// count of the latter, and the column is not written to.
func TestMomentsKeep(t *testing.T) {
	x := []float64{1e30, 2, math.NaN(), 4, math.Inf(1), math.Inf(-1), -1e30, 9, math.NaN()}
	keep := []bool{false, true, true, true, true, true, false, true, false}
	before := slices.Clone(x)
	var got, want Moments
	got.AddColumn(x, keep)
	want.AddColumn([]float64{2, 4, 9}, nil)
	want.nonFinite = 3
	if d := cmp.Diff(want, got, whole); d != "" {
		t.Error(d)
	}
	if got.NonFinite() != 3 {
		t.Errorf("%d not finite, want 3", got.NonFinite())
	}
	// Mean 5, squares 9 + 1 + 16 = 26, over 2.
	near(t, "mean", got.Mean(), 5, 1e-15)
	near(t, "variance", got.Variance(), 13, 1e-14)
	for i := range x {
		if math.Float64bits(x[i]) != math.Float64bits(before[i]) {
			t.Errorf("x[%d] was written to", i)
		}
	}
	panics(t, "short keep", func() { got.AddColumn(x, keep[1:]) })
}

func TestMomentsFew(t *testing.T) {
	var none, one, nothing Moments
	for what, v := range map[string]float64{"mean": none.Mean(), "variance": none.Variance(),
		"deviation": none.StandardDeviation(), "least": none.Min(), "largest": none.Max()} {
		absent(t, what+" of none", v)
	}
	one.AddColumn([]float64{-3}, nil)
	near(t, "mean of one", one.Mean(), -3, 0)
	near(t, "largest of one", one.Max(), -3, 0)
	absent(t, "variance of one", one.Variance())
	nothing.AddColumn([]float64{math.NaN(), 5}, []bool{true, false})
	if d := cmp.Diff(Moments{nonFinite: 1}, nothing, whole); d != "" {
		t.Error(d)
	}
	one.Merge(&nothing)
	nothing.Merge(&one)
	near(t, "merged into nothing", nothing.Mean(), -3, 0)
	if one.NonFinite() != 1 || nothing.NonFinite() != 2 {
		t.Errorf("not finite: %d and %d, want 1 and 2", one.NonFinite(), nothing.NonFinite())
	}
}

// TestMomentsConstant: a column of one value has no variance at all, though
// its sum rounds.
func TestMomentsConstant(t *testing.T) {
	x := slices.Repeat([]float64{0.1}, 999)
	var m Moments
	for range 5 {
		m.AddColumn(x, nil)
	}
	near(t, "mean", m.Mean(), 0.1, 0)
	near(t, "variance", m.Variance(), 0, 0)
}

// TestMomentsOutlierFirst: the first value is where sums are taken about, and
// must not cost the others their digits when it is far away. The reference is
// the two-pass variance in the same arithmetic about the exact mean: with
// a = 1e9 and n-1 values ±1 (mean 0), mean a/n and squares a²(1-1/n) + n-1.
func TestMomentsOutlierFirst(t *testing.T) {
	const n = 1001
	x := []float64{1e9}
	for range (n - 1) / 2 {
		x = append(x, 1, -1)
	}
	var all, rest Moments
	all.AddColumn(x, nil)
	near(t, "mean", all.Mean(), 1e9/n, 1e-6)
	near(t, "variance", all.Variance(), (1e18*(1-1.0/n)+n-1)/(n-1), 1e-13*1e15)
	rest.AddColumn(x, slices.Concat([]bool{false}, slices.Repeat([]bool{true}, n-1)))
	near(t, "variance of the rest", rest.Variance(), 1000.0/999, 1e-15)
}

// TestMomentsMeanRounds: about 1e16 numbers are 2 apart. Of 0, 2, 2 above it
// the mean, 4/3 above, is rounded, and the squares about the true mean are
// (16 + 4 + 4)/9 = 8/3 all the same, 4 or 8 about a rounded one.
func TestMomentsMeanRounds(t *testing.T) {
	var m Moments
	m.AddColumn([]float64{1e16, 1e16 + 2, 1e16 + 2}, nil)
	near(t, "variance", m.Variance(), 4.0/3, 1e-15)
}

func TestMomentsAllocateNothing(t *testing.T) {
	x, keep := normals(rand.New(rand.NewPCG(1, 1)), 512), make([]bool, 512)
	var m Moments
	if n := testing.AllocsPerRun(10, func() { m.AddColumn(x, keep); m.AddColumn(x, nil) }); n != 0 {
		t.Errorf("%v allocations", n)
	}
}

// normals returns n draws of mean 0 and standard deviation 1.
func normals(r *rand.Rand, n int) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = r.NormFloat64()
	}
	return x
}

// BenchmarkMoments reports nanoseconds per value.
func BenchmarkMoments(b *testing.B) {
	x := normals(rand.New(rand.NewPCG(1, 1)), 512)
	keep := slices.Repeat([]bool{true}, 512)
	var m Moments
	for b.Loop() {
		m.AddColumn(x, keep)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(x)), "ns/value")
}
