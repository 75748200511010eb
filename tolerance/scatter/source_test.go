package scatter

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat"

	"batchwright/bom/part"
)

// z is a column of plain deviations.
func z(s part.Shape, lot int, rho float64, stream uint64) Column {
	return Column{Shape: s, Lot: lot, Rho: rho, HalfWidth: 1, Stream: stream}
}

// drawn returns n units from the first.
func drawn(s Source, c Column, n int) []float64 {
	dst := make([]float64, n)
	s.Fill(dst, c, 0)
	return dst
}

// every returns x[k], x[k+step], …
func every(x []float64, k, step int) (y []float64) {
	for ; k < len(x); k += step {
		y = append(y, x[k])
	}
	return y
}

// distance is the Kolmogorov-Smirnov statistic √n·sup|F_n - F|.
func distance(x []float64, s part.Shape) float64 {
	x = slices.Sorted(slices.Values(x))
	n, d := float64(len(x)), 0.0
	for i, v := range x {
		f := CDF(s, v)
		d = max(d, f-float64(i)/n, float64(i+1)/n-f)
	}
	return d * math.Sqrt(n)
}

// TestMarginals: the shape must be the same whether pieces share a lot or
// not. With a lot one piece per batch is taken, as the others depend on it.
//
// The critical value 1.9495 is exceeded once in 1000 (the limit law's
// 2·Σ(-1)^(k-1)·exp(-2k²λ²) = 0.001: N. Smirnov, "Table for estimating the
// goodness of fit of empirical distributions", Ann. Math. Stat. 19 (1948),
// 279-281).
func TestMarginals(t *testing.T) {
	const n, critical = 100_000, 1.9495
	for i, s := range shapes {
		for _, rho := range []float64{0, 0.2, 0.8, 1} {
			t.Run(fmt.Sprint(s, rho), func(t *testing.T) {
				x := drawn(Source{Seed: 11, Units: 2}, z(s, 4, rho, uint64(i)), 2*n)
				if d := distance(every(x, 0, 2), s); !(d < critical) {
					t.Errorf("first pieces: √n·D = %v", d)
				}
				if d := distance(every(x, 1, 2), s); !(d < critical) {
					t.Errorf("second pieces: √n·D = %v", d)
				}
			})
		}
		t.Run(fmt.Sprint(s, " no lot"), func(t *testing.T) {
			x := drawn(Source{Seed: 12, Units: 24}, z(s, -1, 0, uint64(i)), n)
			if d := distance(x, s); !(d < critical) {
				t.Errorf("√n·D = %v", d)
			}
			near(t, "variance", stat.Variance(x, nil), Variance(s), 4.5*math.Sqrt(0.2/n))
		})
	}
}

// batches is how many batches the correlations are measured on. A correlation
// coefficient of independent pairs has standard deviation 1/√batches, of
// dependent ones less; 4.5 of these are allowed.
const (
	batches = 40_000
	allowed = 4.5 / 200 // √40000 = 200
)

func TestLotCorrelation(t *testing.T) {
	for _, s := range shapes {
		for _, rho := range []float64{0.3, 0.7, 0.95} {
			t.Run(fmt.Sprint(s, rho), func(t *testing.T) {
				source := Source{Seed: 5, Units: 3}
				x := drawn(source, z(s, 0, rho, 100), 3*batches)
				y := drawn(source, z(s, 0, rho, 101), 3*batches)
				want := Correlation(s, rho)
				if s == part.Uniform {
					want = 6 / math.Pi * math.Asin(rho/2)
				}
				near(t, "two units of one column", stat.Correlation(every(x, 0, 3), every(x, 2, 3), nil), want, allowed)
				near(t, "two columns in one unit", stat.Correlation(every(x, 1, 3), every(y, 1, 3), nil), want, allowed)
			})
		}
	}
}

func TestIndependence(t *testing.T) {
	const rho = 0.9
	for _, s := range shapes {
		t.Run(string(s), func(t *testing.T) {
			source := Source{Seed: 6, Units: 2}
			x := drawn(source, z(s, 7, rho, 1), 2*batches+2)
			first := every(x, 0, 2)
			other := func(c Column, seed uint64) []float64 {
				return every(drawn(Source{Seed: seed, Units: 2}, c, 2*batches), 0, 2)
			}
			check := func(what string, y []float64) {
				t.Helper()
				near(t, what, stat.Correlation(first[:batches], y, nil), 0, allowed)
			}
			check("next batch", first[1:])
			check("other lot", other(z(s, 8, rho, 2), 6))
			check("no lot", other(z(s, -1, 0, 2), 6))
			check("other seed", other(z(s, 7, rho, 1), 7))
		})
	}
}

// TestReplay: one unit drawn alone equals its value in a block, and any cut
// of the units into blocks gives the same bits.
func TestReplay(t *testing.T) {
	const n = 1000
	cuts := rand.New(rand.NewPCG(3, 4))
	for _, s := range shapes {
		for _, units := range []int{1, 2, 24, 311, 5000} {
			for _, lot := range []int{-1, 2} {
				source := Source{Seed: 9, Units: units}
				c := Column{Shape: s, Lot: lot, Rho: 0.6, Centre: 3.3e-9, HalfWidth: 1e-10, Stream: 77}
				whole := drawn(source, c, n)
				alone, cut := make([]float64, n), make([]float64, n)
				for i := range n {
					source.Fill(alone[i:i+1], c, i)
				}
				for first := 0; first < n; {
					size := min(1+cuts.IntN(60), n-first)
					source.Fill(cut[first:first+size], c, first)
					first += size
				}
				if !slices.Equal(alone, whole) || !slices.Equal(cut, whole) {
					t.Errorf("%s, %d per batch, lot %d: a unit depends on its block", s, units, lot)
				}
			}
		}
	}
}

// TestLargerBatchOnlyAdds: unit u of batch b is the same for any batch size
// that has it.
func TestLargerBatchOnlyAdds(t *testing.T) {
	for _, lot := range []int{-1, 2} {
		c := z(part.Normal, lot, 0.5, 3)
		small, large := drawn(Source{Seed: 1, Units: 24}, c, 240), drawn(Source{Seed: 1, Units: 30}, c, 300)
		for b := range 10 {
			if !slices.Equal(small[24*b:24*b+24], large[30*b:30*b+24]) {
				t.Errorf("lot %d, batch %d differs", lot, b)
			}
		}
	}
}

// TestLotLimits: towards correlation 0 the draw of the direct path is met,
// and at 1 the pieces of a batch are the same piece.
func TestLotLimits(t *testing.T) {
	source := Source{Seed: 2, Units: 10}
	for _, s := range shapes {
		direct, lotless := drawn(source, z(s, 1, 0, 4), 2000), drawn(source, z(s, -1, 0.8, 4), 2000)
		if !slices.Equal(direct, lotless) {
			t.Errorf("%s: correlation 0 and no lot differ", s)
		}
		for i, v := range drawn(source, z(s, 1, 1e-30, 4), 2000) { // √ρ is 1e-15
			near(t, string(s)+" towards 0", v, direct[i], 1e-13)
		}
		one := drawn(source, z(s, 1, 1, 4), 2000)
		for i, v := range one {
			near(t, string(s)+" at 1", v, one[i/10*10], 0)
		}
	}
}

// TestCentreAndHalfWidth: a column is its deviations, scaled and moved.
func TestCentreAndHalfWidth(t *testing.T) {
	source := Source{Seed: 8, Units: 5}
	for _, s := range append(shapes, "") {
		for _, lot := range []int{-1, 0} {
			c := z(s, lot, 0.4, 2)
			plain := drawn(source, c, 500)
			c.Centre, c.HalfWidth = 100, 5
			for i, v := range drawn(source, c, 500) {
				near(t, string(s), v, 100+5*plain[i], 0)
			}
			c.HalfWidth = 0
			for _, v := range drawn(source, c, 500) {
				near(t, string(s)+" ideal", v, 100, 0)
			}
		}
	}
}

// TestAlwaysWithinLimits sends the extreme hashes and a few million ordinary
// ones through every path.
func TestAlwaysWithinLimits(t *testing.T) {
	dst := make([]float64, 100_000)
	for _, s := range shapes {
		below := lowerQuantile(s)
		for _, h := range []uint64{0, 1, 1 << 63, math.MaxUint64, math.MaxUint64 >> 1} {
			if v := below(tail(h)); !(v >= -1 && v <= 0) {
				t.Errorf("%s of %#x = %v", s, h, v)
			}
		}
		for _, g := range []float64{0, 1e-300, 8.3, 11.7, 38, 40, math.Inf(1)} {
			if v := below(normalTail(g)); !(v >= -1 && v <= 0) {
				t.Errorf("%s of g = %v: %v", s, g, v)
			}
		}
		for _, rho := range []float64{0, 0.5, 1} {
			for seed := range uint64(5) {
				Source{Seed: seed, Units: 3}.Fill(dst, z(s, 1, rho, seed), 0)
				for _, v := range dst {
					if !(v >= -1 && v <= 1) || s == part.Bimodal && math.Abs(v) < 0.5 {
						t.Fatalf("%s, correlation %v: z = %v", s, rho, v)
					}
				}
			}
		}
	}
}

func TestFillAllocatesNothing(t *testing.T) {
	dst := make([]float64, 300)
	for _, s := range shapes {
		for _, lot := range []int{-1, 1} {
			c := z(s, lot, 0.5, 1)
			if n := testing.AllocsPerRun(10, func() { Source{Seed: 1, Units: 24}.Fill(dst, c, 7) }); n != 0 {
				t.Errorf("%s, lot %d: %v allocations", s, lot, n)
			}
		}
	}
}

func TestFillPanics(t *testing.T) {
	dst := make([]float64, 3)
	panics(t, "no units", func() { Source{}.Fill(dst, Column{}, 0) })
	panics(t, "negative unit", func() { Source{Units: 1}.Fill(dst, Column{}, -1) })
	for _, rho := range []float64{-0.1, 1.1, math.NaN()} {
		panics(t, "correlation", func() { Source{Units: 1}.Fill(dst, Column{Rho: rho}, 0) })
	}
	for _, lot := range []int{-1, 0} {
		panics(t, "shape", func() { Source{Units: 1}.Fill(dst, Column{Shape: "lopsided", Lot: lot, Rho: 0.5}, 0) })
	}
}

// TestSameDraws pins one draw of each kind: these numbers have no source but
// this program and only detect that a seed no longer means what it meant.
func TestSameDraws(t *testing.T) {
	for i, want := range pinned {
		s, lot := shapes[i/2], i%2-1
		got := make([]float64, 1)
		Source{Seed: 2024, Units: 24}.Fill(got, z(s, lot, 0.5, 9), 1000)
		if got[0] != want {
			t.Errorf("%s, lot %d: %.17g, was %.17g", s, lot, got[0], want)
		}
	}
}

// pinned holds, for each of shapes, a draw without and one with a lot.
var pinned = []float64{
	0.26180805263986406, 0.49592837330478279,
	0.56933215944034921, 0.86552918118110167,
	0.34374712148467435, 0.63329737004093034,
	0.78466607972017455, 0.93276459059055084,
}

// TestGivenLots draws with lots that are given: the same columns as a shift of
// what each piece has of its own, Φ⁻¹(F(z)) = √ρ·g_lot + √(1−ρ)·g_piece.
func TestGivenLots(t *testing.T) {
	const n, rho = 64, 0.64 // √ρ = 0.8
	c := z(part.Uniform, 7, rho, 3)
	given := func(g float64) []float64 {
		s := Source{Seed: 1, Units: 8, Lots: func(lot, batch int) (float64, bool) { return g * float64(batch), lot == 7 }}
		return drawn(s, c, n)
	}
	none, one := given(0), given(1)
	normal := func(z float64) float64 { return mathext.NormalQuantile((1 + z) / 2) }
	for i := range n {
		if got, want := normal(one[i])-normal(none[i]), 0.8*float64(i/8); math.Abs(got-want) > 1e-7 && math.Abs(one[i]) < 0.9999999 {
			t.Errorf("unit %d is moved by %v, want %v", i, got, want)
		}
	}
	other := Source{Seed: 1, Units: 8, Lots: func(lot, batch int) (float64, bool) { return 5, false }}
	if !slices.Equal(drawn(other, c, n), drawn(Source{Seed: 1, Units: 8}, c, n)) {
		t.Error("a lot of which nothing is known is not drawn as ever")
	}
}
