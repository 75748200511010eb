package series

import (
	"cmp"
	"math"
	"slices"
)

// Join is how the values of a pair combine.
type Join int

// Resistors in series and capacitors in parallel add up; the other way round
// the reciprocals do.
const (
	Adding Join = iota
	Reciprocal
)

// Of is the value of a and b joined.
func (j Join) Of(a, b float64) float64 {
	if j == Adding {
		return a + b
	}
	return a / (a + b) * b
}

// Pair is two values of a series, First the one nearer to the target.
type Pair struct {
	First, Second float64
	Join          Join
	Value         float64 // of the two joined
	Error         float64 // Value/target − 1
}

// smallest is how much of the target the lesser contribution must be: a pair
// whose second piece vanishes in the tolerance of the first is no pair.
const smallest = 1e-3

// Pairs lists the pairs of a series that come nearest to target, the nearest
// first, at most count. For every possible first value the two seconds that
// fall just short and just beyond are tried, so none nearer is missed.
func Pairs(name string, target float64, join Join, count int) []Pair {
	if !(target > 0) || math.IsInf(target, 1) || count <= 0 {
		return nil
	}
	low, high := target/2, target
	if join == Reciprocal {
		low, high = target, target*2
	}
	// A twin just beyond the half, or a value just beyond the target with the
	// slightest second, may be nearest: look an octave beyond.
	var pairs []Pair
	for _, first := range Between(name, low/2, high*2) {
		rest := max(target-first, target*smallest)
		if join == Reciprocal {
			rest = 1 / max(1/target-1/first, smallest/target)
		}
		below, above := neighbours(name, rest)
		for _, second := range [...]float64{below, above} {
			if p, ok := pair(first, second, join, target); ok {
				pairs = append(pairs, p)
			}
		}
	}
	slices.SortFunc(pairs, func(a, b Pair) int {
		return cmp.Or(cmp.Compare(math.Abs(a.Error), math.Abs(b.Error)),
			cmp.Compare(a.First, b.First), cmp.Compare(a.Second, b.Second))
	})
	pairs = slices.Compact(pairs)
	return pairs[:min(count, len(pairs))]
}

// pair makes a Pair with its values in order, unless one of them hardly counts.
func pair(first, second float64, join Join, target float64) (Pair, bool) {
	if join == Adding && second > first || join == Reciprocal && second < first {
		first, second = second, first
	}
	lesser := second / target
	if join == Reciprocal {
		lesser = target / second
	}
	v := join.Of(first, second)
	return Pair{first, second, join, v, v/target - 1}, lesser >= smallest*(1-equal)
}
