package spread

import (
	"math"
	"testing"
)

// TestReached has both ends above what is wanted by less than 1, either side
// of it, one on it, and one without a value.
func TestReached(t *testing.T) {
	for _, c := range []struct {
		low, high float64
		want      bool
	}{
		{0.1, 0.2, false}, {-0.1, -0.2, false}, {-0.1, 0.2, true}, {0, 0.2, true}, {math.NaN(), 0.2, false},
	} {
		if got := reached(c.low, c.high); got != c.want {
			t.Errorf("ends %v and %v: reached %v, want %v", c.low, c.high, got, c.want)
		}
	}
}

// TestMend brings z₀ + z₁ from 2 down to ½ where z₁ costs three times as much:
// z₀ goes to −½ and z₁ stays. Down to −½ takes all of z₀ and half a step of z₁.
func TestMend(t *testing.T) {
	for _, c := range []struct{ limit, z0, z1 float64 }{{0.5, -0.5, 1}, {-0.5, -1, 0.5}} {
		z := point{1, 1}
		mend(z, point{0, 0}, point{1, 3}, []float64{1, 1}, 1, -c.limit)
		if math.Abs(z[0]-c.z0) > 0.003 || math.Abs(z[1]-c.z1) > 0.003 || z[0]+z[1] > c.limit {
			t.Errorf("down to %v: %v, want %v and %v", c.limit, z, c.z0, c.z1)
		}
	}
}
