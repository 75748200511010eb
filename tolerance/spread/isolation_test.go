package spread

import (
	"math"
	"testing"
)

// 20·log10 of the ratio, rounded up: 6.02 dB for two, exactly 20 for ten, which
// rounding must not make 21, and at least one for a hair.
func TestMoreIsolation(t *testing.T) {
	tests := map[string]struct {
		lockRange, note float64
		want            int
	}{
		"twice": {200, 100, 7}, "ten times": {0.3 * 10, 0.3, 20}, "ten times, rounded": {math.Nextafter(70, 71), 7, 20},
		"a hair": {math.Nextafter(100, 101), 100, 1}, "on it": {100, 100, 0}, "outside": {99, 100, 0},
		"no note": {100, math.NaN(), 0}, "no range": {math.NaN(), 100, 0}, "endless": {math.Inf(1), 100, 0}, "nothing": {0, 0, 0},
	}
	for name, tt := range tests {
		if got := moreIsolation(tt.lockRange, tt.note); got != tt.want {
			t.Errorf("%s: %d dB, want %d", name, got, tt.want)
		}
	}
}
