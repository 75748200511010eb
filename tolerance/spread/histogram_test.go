package spread

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"gonum.org/v1/gonum/stat/distuv"
)

// of returns a histogram of x.
func of(centre float64, x ...float64) *Histogram {
	h := NewHistogram(centre)
	h.AddColumn(x, nil)
	return h
}

// exact is definition 7 on the values themselves.
func exact(sorted []float64, p float64) float64 {
	place := float64(len(sorted)-1) * p
	j := int(place)
	if j+1 == len(sorted) {
		return sorted[j]
	}
	f := place - float64(j)
	return (1-f)*sorted[j] + f*sorted[j+1]
}

var fractions = []float64{0.0005, 0.01, 0.025, 0.05, 0.25, 0.5, 0.75, 0.95, 0.975, 0.99, 0.9995}

// population is a distribution whose sampling error is known.
type population struct {
	name     string
	centre   float64 // of its histogram
	least    float64 // fraction p, and most 1-p, at which readings are held to 1/5
	draw     func(*rand.Rand) float64
	quantile func(p float64) float64
	prob     func(x float64) float64
}

// populations: two thin tails, where bins hold most in comparison to what is
// beyond them, and two thick ones.
func populations() []population {
	normal := distuv.UnitNormal
	skew := distuv.LogNormal{Sigma: 0.5}
	heavy := distuv.StudentsT{Sigma: 1, Nu: 2}
	uniform := distuv.Uniform{Min: -1, Max: 1}
	return []population{
		{"normal", 0, 0.0005, (*rand.Rand).NormFloat64, normal.Quantile, normal.Prob},
		{"normal, centre off by 2", 2, 0.0005, (*rand.Rand).NormFloat64, normal.Quantile, normal.Prob},
		{"log-normal", 1, 0.0005, func(r *rand.Rand) float64 { return math.Exp(r.NormFloat64() / 2) }, skew.Quantile, skew.Prob},
		// Student's t with 2 degrees of freedom has a closed inverse.
		{"heavy tails", 0, 0.0005, func(r *rand.Rand) float64 {
			p := (float64(r.Int64N(1<<52)) + 0.5) / (1 << 52)
			return (2*p - 1) / math.Sqrt(2*p*(1-p))
		}, heavy.Quantile, heavy.Prob},
		{"uniform", 0.1, 0.01, func(r *rand.Rand) float64 { return 2*r.Float64() - 1 }, uniform.Quantile, uniform.Prob},
	}
}

// TestQuantileReading compares readings with the order statistics. What the
// bins add must be, in the root of the mean square over some samples, at most
// 1/5 of the sampling error √(p(1-p)/n)/f(x_p) (H. Cramér, Mathematical
// Methods of Statistics (1946), 28.5), and never more than QuantileError.
func TestQuantileReading(t *testing.T) {
	for _, pop := range populations() {
		t.Run(pop.name, func(t *testing.T) {
			checkReading(t, pop, 100_000, 6)
			if !testing.Short() {
				checkReading(t, pop, 1_000_000, 1)
			}
		})
	}
}

func checkReading(t *testing.T, pop population, n, samples int) {
	r := rand.New(rand.NewPCG(21, uint64(n)))
	squares := make([]float64, len(fractions))
	for range samples {
		x := make([]float64, n)
		for i := range x {
			x[i] = pop.draw(r)
		}
		h := of(pop.centre, x...)
		slices.Sort(x)
		for i, p := range fractions {
			miss := h.Quantile(p) - exact(x, p)
			if bound := h.QuantileError(p); !(math.Abs(miss) <= bound) {
				t.Errorf("%d values, p = %v: off by %v, bound %v", n, p, miss, bound)
			}
			sampling := math.Sqrt(p*(1-p)/float64(n)) / pop.prob(pop.quantile(p))
			squares[i] += miss * miss / (sampling * sampling) / float64(samples)
		}
	}
	for i, p := range fractions {
		if ratio := math.Sqrt(squares[i]); min(p, 1-p) > 0.999*pop.least && !(ratio <= 0.2) {
			t.Errorf("%d values, p = %v: reading error is %.3f of the sampling error", n, p, ratio)
		}
	}
}

// TestQuantileErrorIsABound: small samples with wild values, where bins hold
// one value each and the reading leans on nothing but its bound.
func TestQuantileErrorIsABound(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for range 3000 {
		x := make([]float64, 1+r.IntN(12))
		for i := range x {
			x[i] = math.Round(r.NormFloat64()*4) / 4 * math.Pow(10, float64(r.IntN(4)))
			if r.IntN(3) == 0 {
				x[i] = 1e-9 * r.NormFloat64()
			}
		}
		centre := []float64{0, 1, -3.7, 1e6}[r.IntN(4)]
		h := of(centre, x...)
		slices.Sort(x)
		for _, p := range []float64{0, 0.05, 0.3, 0.5, 0.77, 1} {
			miss := math.Abs(h.Quantile(p) - exact(x, p))
			if !(miss <= h.QuantileError(p)) {
				t.Fatalf("centre %v, %v, p = %v: read %v, off by %v, bound %v", centre, x, p, h.Quantile(p), miss, h.QuantileError(p))
			}
		}
		near(t, "least", h.Quantile(0), x[0], 0)
		near(t, "largest", h.Quantile(1), x[len(x)-1], 0)
	}
}

// TestQuantileErrorAtAnEdge: 1e-12 less 2^20 rounds to -2^20, just over the
// edge of its bin. The bound must allow for that.
func TestQuantileErrorAtAnEdge(t *testing.T) {
	h := of(1<<20, -5000, 1e-12, 5000)
	if miss := 1e-12 - h.Quantile(0.5); !(miss > 1024 && miss <= h.QuantileError(0.5)) {
		t.Errorf("off by %v, bound %v", miss, h.QuantileError(0.5))
	}
}

// TestQuantileDefinition: the quarter point of 1, 2, 3, 4 is 1.75 by
// definition 7 (a quarter of the way is 3/4 of the step from 1 to 2).
func TestQuantileDefinition(t *testing.T) {
	h := of(2.5, 1, 2, 3, 4)
	near(t, "a quarter", h.Quantile(0.25), 1.75, 0.75/512)
	near(t, "a half", h.Quantile(0.5), 2.5, 1e-12) // 2 and 3 are read alike
	near(t, "three quarters", h.Quantile(0.75), 3.25, 0.75/512)
	near(t, "a third", h.Quantile(1.0/3), 2, 1.0/512)
}

func TestHistogramFew(t *testing.T) {
	for _, p := range []float64{0, 0.3, 1} {
		absent(t, "quantile of none", NewHistogram(1).Quantile(p))
		absent(t, "its error", NewHistogram(1).QuantileError(p))
		near(t, "quantile of one", of(7, 7.3).Quantile(p), 7.3, 0)
		near(t, "its error", of(7, 7.3).QuantileError(p), 0, 0)
		near(t, "quantile of two", of(7, 8, 4).Quantile(p), 4+4*p, 1e-15)
		near(t, "its error", of(7, 8, 4).QuantileError(p), 0, 0)
	}
	var zero Histogram
	zero.AddColumn([]float64{3}, nil)
	near(t, "zero value", zero.Quantile(0.5), 3, 0)
}

// TestHistogramConstant: a column of one value reads as that value exactly,
// at the centre, beside it, or off by a last digit.
func TestHistogramConstant(t *testing.T) {
	for _, v := range []float64{330e3, 330e3 * (1 + 0x1p-52), 329e3, 0, -1e-300, 5e-324} {
		h := of(330e3, slices.Repeat([]float64{v}, 500)...)
		for _, p := range fractions {
			near(t, "quantile", h.Quantile(p), v, 0)
			near(t, "its error", h.QuantileError(p), 0, 0)
		}
	}
}

// TestHistogramNonFinite: one infinity in a hundred ends the finite quantiles
// where it should; NaN does not take part.
func TestHistogramNonFinite(t *testing.T) {
	h := of(0, math.Inf(-1), math.NaN(), math.Inf(1), math.Inf(1), math.NaN(), math.NaN())
	for i := range 97 {
		h.AddColumn([]float64{float64(i + 1)}, nil)
	}
	negative, positive, nan := h.NonFinite()
	if negative != 1 || positive != 2 || nan != 3 || h.Count() != 100 {
		t.Errorf("counted %d, %d, %d of %d, want 1, 2, 3 of 100", negative, positive, nan, h.Count())
	}
	near(t, "rank 1 of 0..99", h.Quantile(1.0/99), 1, 0)
	near(t, "rank 50", h.Quantile(50.0/99), 50, 50.0/512)
	for p, want := range map[float64]float64{0: math.Inf(-1), 0.005: math.Inf(-1), 0.985: math.Inf(1), 1: math.Inf(1)} {
		if got := h.Quantile(p); got != want {
			t.Errorf("Quantile(%v) = %v, want %v", p, got, want)
		}
		absent(t, "error of an infinite quantile", h.QuantileError(p))
	}
	absent(t, "between the infinities", of(0, math.Inf(-1), math.Inf(1)).Quantile(0.5))
	// Too far from the centre for a difference: as good as infinite.
	if got := of(-1.7e308, 1.7e308).Quantile(0); got != math.Inf(1) {
		t.Errorf("1.7e308 about -1.7e308 reads %v", got)
	}
}

func TestHistogramKeep(t *testing.T) {
	x := []float64{5, -2, math.Inf(1), 0.5}
	h := NewHistogram(0)
	h.AddColumn(x, []bool{false, true, false, true})
	if d := cmp.Diff(of(0, -2, 0.5), h, whole); d != "" {
		t.Error(d)
	}
	panics(t, "short keep", func() { h.AddColumn(x, make([]bool, 3)) })
	panics(t, "centre", func() { NewHistogram(math.NaN()) })
	panics(t, "fraction", func() { h.Quantile(math.NaN()) })
	panics(t, "fraction", func() { h.QuantileError(1.1) })
	panics(t, "centres", func() { h.Merge(NewHistogram(1)) })
	panics(t, "too many", func() { h.Merge(&Histogram{finite: 1 << 32}) })
}

// TestHistogramMerge: any cut merged in any order is the same histogram.
func TestHistogramMerge(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for range 50 {
		x := make([]float64, 400)
		for i := range x {
			x[i] = r.NormFloat64() * math.Pow(2, 6*r.NormFloat64())
		}
		x[3], x[77], x[200] = 0.25, math.NaN(), math.Inf(1)
		all := of(0.25, x...)
		var parts []*Histogram
		for rest := x; len(rest) > 0; {
			n := min(r.IntN(90), len(rest)) // some are empty
			parts = append(parts, of(0.25, rest[:n]...))
			rest = rest[n:]
		}
		r.Shuffle(len(parts), func(i, j int) { parts[i], parts[j] = parts[j], parts[i] })
		merged := NewHistogram(0.25)
		for _, p := range parts {
			merged.Merge(p)
		}
		if d := cmp.Diff(all, merged, whole); d != "" {
			t.Fatal(d)
		}
	}
}

// TestHistogramBins: every value lies in the bin that counts it, and bins are
// as narrow as promised.
func TestHistogramBins(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 9))
	for range 20_000 {
		d := r.NormFloat64() * math.Pow(10, float64(r.IntN(80)-40))
		found := 0
		for bin, n := range of(0, d).bins() {
			found += int(n)
			if !(bin.low <= d && d <= bin.high) || !(bin.high-bin.low <= math.Abs(d)/512) {
				t.Fatalf("%v counted in %v..%v", d, bin.low, bin.high)
			}
		}
		if found != 1 {
			t.Fatalf("%v counted %d times", d, found)
		}
	}
}

// TestHistogramAllocatesNothing once each octave was met, and little before:
// a normal column takes two dozen octaves a side at most, 100 kB in all.
func TestHistogramAllocatesNothing(t *testing.T) {
	x := normals(rand.New(rand.NewPCG(1, 1)), 100_000)
	h := of(0, x...)
	if n := testing.AllocsPerRun(3, func() { h.AddColumn(x, nil) }); n != 0 {
		t.Errorf("%v allocations", n)
	}
	if n := len(h.wings[0].counts) + len(h.wings[1].counts); n > 2*24*octave {
		t.Errorf("%d bins", n)
	}
}

// BenchmarkHistogram reports nanoseconds per value.
func BenchmarkHistogram(b *testing.B) {
	x := normals(rand.New(rand.NewPCG(1, 1)), 512)
	keep := slices.Repeat([]bool{true}, 512)
	h := NewHistogram(0)
	for b.Loop() {
		h.AddColumn(x, keep)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*len(x)), "ns/value")
}
