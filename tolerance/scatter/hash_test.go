package scatter

import (
	"math"
	"math/bits"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// neighbours are pairs of draws that differ in one thing by one, as the
// streams, batches and seeds of a real build do.
var neighbours = map[string]func(i uint64) (a, b uint64){
	"unit": func(i uint64) (a, b uint64) {
		k := key(pieceOrigin, 1, 0, 0)
		return hash(k, 2*i), hash(k, 2*i+1)
	},
	"batch": func(i uint64) (a, b uint64) {
		return hash(key(pieceOrigin, 1, 0, 2*i), 0), hash(key(pieceOrigin, 1, 0, 2*i+1), 0)
	},
	"stream": func(i uint64) (a, b uint64) {
		return hash(key(pieceOrigin, 1, 6, i/24), i%24), hash(key(pieceOrigin, 1, 7, i/24), i%24)
	},
	"seed": func(i uint64) (a, b uint64) {
		return hash(key(pieceOrigin, 1, 6, i/24), i%24), hash(key(pieceOrigin, 2, 6, i/24), i%24)
	},
	"stream against batch": func(i uint64) (a, b uint64) {
		return hash(key(pieceOrigin, 1, i, i+1), 0), hash(key(pieceOrigin, 1, i+1, i), 0)
	},
	"lot against piece": func(i uint64) (a, b uint64) {
		return hash(key(lotOrigin, 1, 3, i), 0), hash(key(pieceOrigin, 1, 3, i), 0)
	},
}

// TestNeighboursIndependent counts pairs of draws in 32 by 32 equal cells and
// holds the counts against an even spread over all of them: Pearson's χ² with
// 1023 degrees of freedom, which sees uneven margins as well as dependence.
// It must lie between the 0.01 % and 99.99 % points; the draws are fixed.
func TestNeighboursIndependent(t *testing.T) {
	const cells, pairs = 32, 1 << 18
	chi := distuv.ChiSquared{K: cells*cells - 1}
	for name, pair := range neighbours {
		t.Run(name, func(t *testing.T) {
			var count [cells * cells]float64
			for i := range uint64(pairs) {
				a, b := pair(i)
				count[a>>59*cells+b>>59]++
			}
			sum := 0.0
			for _, n := range count {
				d := n - pairs/(cells*cells)
				sum += d * d / (pairs / (cells * cells))
			}
			if low, high := chi.Quantile(1e-4), chi.Quantile(1-1e-4); !(sum > low && sum < high) {
				t.Errorf("χ² = %v, want within %v..%v", sum, low, high)
			}
		})
	}
}

// TestEveryBitEven counts ones in each bit of the draws of one batch after
// another: half of them, within 4.5 standard deviations.
func TestEveryBitEven(t *testing.T) {
	const batches, units = 8192, 24
	var ones [64]int
	for b := range uint64(batches) {
		k := key(pieceOrigin, 42, 5, b)
		for u := range uint64(units) {
			for h := hash(k, u); h != 0; h &= h - 1 {
				ones[bits.TrailingZeros64(h)]++
			}
		}
	}
	n := float64(batches * units)
	for bit, k := range ones {
		if d := (float64(k) - n/2) / math.Sqrt(n/4); math.Abs(d) > 4.5 {
			t.Errorf("bit %d is %.1f standard deviations off", bit, d)
		}
	}
}

// TestAvalanche flips each bit of each word that goes in. Every bit that comes
// out must turn over in half of the cases, within 5 standard deviations
// (16 384 comparisons, the largest of that many is 4.2 on average).
func TestAvalanche(t *testing.T) {
	const samples = 2000
	draw := func(w [4]uint64) uint64 { return hash(key(pieceOrigin, w[0], w[1], w[2]), w[3]) }
	for which, name := range []string{"seed", "stream", "batch", "unit"} {
		var turned [64][64]int
		for i := range uint64(samples) {
			words := [4]uint64{mix(4 * i), mix(4*i + 1), mix(4*i + 2), mix(4*i + 3)}
			h := draw(words)
			for in := range 64 {
				other := words
				other[which] ^= 1 << in
				diff := h ^ draw(other)
				for out := range 64 {
					turned[in][out] += int(diff >> out & 1)
				}
			}
		}
		for in := range 64 {
			for out := range 64 {
				d := (float64(turned[in][out]) - samples/2) / math.Sqrt(samples/4.0)
				if math.Abs(d) > 5 {
					t.Errorf("%s: bit %d turns bit %d over %d times of %d", name, in, out, turned[in][out], samples)
				}
			}
		}
	}
}

// TestNoDrawTwice: among 10^6 draws of 64 bits even one coincidence has a
// probability of 3e-8.
func TestNoDrawTwice(t *testing.T) {
	var all []uint64
	for seed := range uint64(5) {
		for stream := range uint64(20) {
			for batch := range uint64(400) {
				k := key(pieceOrigin, seed, stream, batch)
				for unit := range uint64(25) {
					all = append(all, hash(k, unit))
				}
			}
		}
	}
	slices.Sort(all)
	if n := len(slices.Compact(all)); n != 1_000_000 {
		t.Errorf("%d different draws of 1000000", n)
	}
}

// TestTailEnds: the least and the largest probability stay inside (0, 1/2),
// and the largest is not rounded up to 1/2.
func TestTailEnds(t *testing.T) {
	near(t, "least", tail(0), 0x1p-54, 0)
	near(t, "least, upper side", tail(1<<63), 0x1p-54, 0)
	near(t, "largest", tail(math.MaxUint64), 0.5-0x1p-54, 0)
	if !(tail(math.MaxUint64) < 0.5) {
		t.Error("largest tail is not below 1/2")
	}
	if side(1<<62) != 0 || side(1<<63) != 1<<63 {
		t.Error("side is not the highest bit")
	}
}
