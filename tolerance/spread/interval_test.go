package spread

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// Trials with k of n good. 7 of 50 is SciPy's reference example of an exact
// interval; 4 of 20 is NIST/SEMATECH e-Handbook 7.2.4.2, which prints 0.071354
// and 0.401029; the others are R. G. Newcombe, "Two-sided confidence intervals
// for the single proportion", Statistics in Medicine 17 (1998), 857-872, who
// prints (Clopper-Pearson) 0.2527-0.3676, 0.0578-0.1617, 0-0.1684,
// 0.0009-0.1776 and (Wilson) 0.2553-0.3662, 0.0624-0.1605, 0-0.1611,
// 0.0061-0.1718. The further digits are computed with scipy 1.10.1.
func TestClopperPearson(t *testing.T) {
	for _, c := range []struct {
		k, n                  int
		confidence, low, high float64
	}{
		{7, 50, 0.95, 0.05819170034, 0.2673960025},
		{4, 20, 0.90, 0.07135388431, 0.40102811733},
		{81, 263, 0.95, 0.25273674559, 0.3676219226},
		{15, 148, 0.95, 0.05784401008, 0.16165049035},
		{0, 20, 0.95, 0, 0.16843347098},
		{1, 29, 0.95, 0.00087264688, 0.17764429549},
	} {
		checkInterval(t, ClopperPearson, c.k, c.n, c.confidence, c.low, c.high)
	}
}

func TestWilson(t *testing.T) {
	for _, c := range []struct {
		k, n      int
		low, high float64
	}{
		{7, 50, 0.06950833427, 0.26186193711},
		{81, 263, 0.2552885199, 0.36620957698},
		{15, 148, 0.06238639953, 0.16048724172},
		{0, 20, 0, 0.16112515805},
		{1, 29, 0.00611321429, 0.17175521879},
	} {
		checkInterval(t, Wilson, c.k, c.n, 0.95, c.low, c.high)
	}
}

// checkInterval checks an interval and, turned over, that of the failures.
func checkInterval(t *testing.T, f func(k, n int, c float64) (low, high float64), k, n int, confidence, low, high float64) {
	t.Helper()
	gotLow, gotHigh := f(k, n, confidence)
	near(t, "low", gotLow, low, 1e-8*low)
	near(t, "high", gotHigh, high, 1e-8*high)
	gotLow, gotHigh = f(n-k, n, confidence)
	near(t, "low of failures", gotLow, 1-high, 1e-8*high)
	near(t, "high of failures", gotHigh, 1-low, 1e-8*low)
}

// TestClopperPearsonCoverage: the very definition. At the lower limit, as many
// good units or more have probability α/2; at the upper, as many or fewer.
func TestClopperPearsonCoverage(t *testing.T) {
	for _, c := range []struct{ k, n int }{{1, 1}, {1, 24}, {23, 24}, {500, 1000}, {9999, 10000}} {
		low, high := ClopperPearson(c.k, c.n, 0.9)
		below := distuv.Binomial{N: float64(c.n), P: low}.CDF(float64(c.k - 1))
		near(t, "at least k at the lower limit", 1-below, 0.05, 1e-7)
		if c.k < c.n {
			near(t, "at most k at the upper limit", distuv.Binomial{N: float64(c.n), P: high}.CDF(float64(c.k)), 0.05, 1e-7)
		}
	}
}

func TestIntervalEnds(t *testing.T) {
	for name, f := range map[string]func(k, n int, c float64) (low, high float64){"exact": ClopperPearson, "score": Wilson} {
		t.Run(name, func(t *testing.T) {
			low, high := f(0, 0, 0.95)
			near(t, "low of no units", low, 0, 0)
			near(t, "high of no units", high, 1, 0)
			for _, n := range []int{1, 7, 24, 1000, 123457} {
				low, _ := f(0, n, 0.95)
				near(t, "low of none good", low, 0, 0)
				_, high := f(n, n, 0.95)
				near(t, "high of all good", high, 1, 0)
			}
			panics(t, "more than there are", func() { f(8, 7, 0.9) })
			panics(t, "fewer than none", func() { f(-1, 7, 0.9) })
			for _, c := range []float64{0, 1, -0.5, 95, math.NaN()} {
				panics(t, "confidence", func() { f(3, 7, c) })
			}
		})
	}
}

// TestShareIntervalByHand: batches all good or all bad, alternately. Four of
// them: s² = 4·(1/2)²/3 = 1/3, deff = m·(1/3)/(1/4) = 4m/3, so n/deff = 3
// whatever m is; t for 3 degrees of freedom is 3.182446 (any table), so the
// effective number is 3·(1.959964/3.182446)² = 1.137874.
func TestShareIntervalByHand(t *testing.T) {
	wantLow, wantHigh := wilson(0.5, 1.137874, 1.959964)
	for _, m := range []int{1, 24, 1000} {
		share, low, high := ShareInterval([]int{m, 0, m, 0}, m, 0.95)
		near(t, "share", share, 0.5, 0)
		near(t, "low", low, wantLow, 1e-6)
		near(t, "high", high, wantHigh, 1e-6)
	}
	// Batches more alike than chance would have them count as independent
	// units, no more: 20 and 19 of 24 by turns, t for 99 is 1.984217.
	good := slices.Repeat([]int{20, 19}, 50)
	_, low, high := ShareInterval(good, 24, 0.95)
	wantLow, wantHigh = wilson(19.5/24, 2400*math.Pow(1.959964/1.984217, 2), 1.959964)
	near(t, "low", low, wantLow, 1e-7)
	near(t, "high", high, wantHigh, 1e-7)
}

// TestShareIntervalEqualBatches: nothing to estimate from, so each batch is
// one unit.
func TestShareIntervalEqualBatches(t *testing.T) {
	for _, c := range []struct {
		name       string
		each, b, m int
	}{{"all good", 24, 50, 24}, {"none good", 0, 50, 24}, {"alike", 20, 50, 24}, {"one batch", 20, 1, 24}, {"one unit", 1, 1, 1}} {
		t.Run(c.name, func(t *testing.T) {
			share, low, high := ShareInterval(slices.Repeat([]int{c.each}, c.b), c.m, 0.95)
			p := float64(c.each) / float64(c.m)
			wantLow, wantHigh := wilson(p, float64(c.b), 1.959963984540054)
			near(t, "share", share, p, 1e-15)
			near(t, "low", low, wantLow, 1e-12)
			near(t, "high", high, wantHigh, 1e-12)
			if !(0 <= low && low <= share && share <= high && high <= 1) {
				t.Errorf("%v is not within %v..%v", share, low, high)
			}
		})
	}
	for _, units := range []int{0, 24} {
		share, low, high := ShareInterval(nil, units, 0.95)
		absent(t, "share of no batches", share)
		absent(t, "low", low)
		absent(t, "high", high)
	}
	panics(t, "impossible batch", func() { ShareInterval([]int{3, 25}, 24, 0.95) })
}

// TestShareIntervalCoverage simulates batches whose units resemble each other:
// beta-binomial counts of mean share p and intraclass correlation icc (a
// batch's own share is Beta(p·k, (1-p)·k), k = 1/icc - 1). The interval must
// hold p in 90 to 99 % of 200 runs; Wilson's without regard to batches must
// fail where the correlation is strong.
func TestShareIntervalCoverage(t *testing.T) {
	const runs = 200
	for i, c := range []struct {
		p, icc         float64
		batches, units int
	}{
		{0.9, 0.05, 100, 24}, {0.9, 0.3, 100, 24}, {0.7, 0.6, 100, 24},
		{0.98, 0.1, 200, 24}, {0.5, 0.2, 20, 10}, {0.97, 0.3, 400, 12},
	} {
		r := rand.New(rand.NewPCG(31, uint64(i)))
		covered, naive := 0, 0
		for range runs {
			good, total := batchesOf(r, c.p, c.icc, c.batches, c.units), 0
			for _, g := range good {
				total += g
			}
			if _, low, high := ShareInterval(good, c.units, 0.95); low <= c.p && c.p <= high {
				covered++
			}
			if low, high := Wilson(total, c.batches*c.units, 0.95); low <= c.p && c.p <= high {
				naive++
			}
		}
		t.Logf("p %v, icc %v: %d of %d, without batches %d", c.p, c.icc, covered, runs, naive)
		if covered < 180 || covered > 198 {
			t.Errorf("p %v, icc %v: covered in %d of %d runs", c.p, c.icc, covered, runs)
		}
		if c.icc >= 0.2 && naive > 170 {
			t.Errorf("p %v, icc %v: the plain interval covers in %d runs, no test of batching", c.p, c.icc, naive)
		}
	}
}

// batchesOf draws the good units of some batches.
func batchesOf(r *rand.Rand, p, icc float64, batches, units int) []int {
	k := 1/icc - 1
	share := distuv.Beta{Alpha: p * k, Beta: (1 - p) * k, Src: r}
	good := make([]int, batches)
	for b := range good {
		own := share.Rand()
		for range units {
			if r.Float64() < own {
				good[b]++
			}
		}
	}
	return good
}

// TestBatchSummary: numpy 1.24 percentile (its default is definition 7) of
// the same counts.
func TestBatchSummary(t *testing.T) {
	good := []int{24, 22, 24, 17, 23, 24, 20, 24}
	before := slices.Clone(good)
	median, p05, allGood := BatchSummary(good, 24)
	near(t, "median", median, 23.5, 0)
	near(t, "5 % point", p05, 18.05, 1e-13)
	near(t, "all good", allGood, 0.5, 0)
	if !slices.Equal(good, before) {
		t.Error("the counts were written to")
	}
	median, p05, allGood = BatchSummary([]int{3}, 24)
	near(t, "median of one", median, 3, 0)
	near(t, "5 % point of one", p05, 3, 0)
	near(t, "all good of one", allGood, 0, 0)
	median, p05, allGood = BatchSummary(nil, 24)
	absent(t, "median", median)
	absent(t, "5 % point", p05)
	absent(t, "all good", allGood)
	panics(t, "impossible batch", func() { BatchSummary([]int{25}, 24) })
}
