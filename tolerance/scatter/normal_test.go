package scatter

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mathext"
)

// The test values of M. J. Wichura, "Algorithm AS 241: the percentage points
// of the normal distribution", Applied Statistics 37 (1988), 477-484, and the
// usual two-sided points, to double precision (scipy 1.10.1, norm.ppf).
func TestNormalTailQuantilePoints(t *testing.T) {
	for _, c := range []struct{ v, want float64 }{
		{0.25, -0.6744897501960817},
		{0.001, -3.090232306167814},
		{1e-20, -9.262340089798409}, // beyond the table
		{0.025, -1.959963984540054},
		{0.005, -2.5758293035489},
		{0.0005, -3.290526731491926},
	} {
		near(t, "Φ⁻¹", normalTailQuantile(c.v), c.want, 1e-12*-c.want)
	}
}

// TestNormalTailQuantile scans every interval of the table, its ends
// included, and one place beyond the least draw.
func TestNormalTailQuantile(t *testing.T) {
	worst := 0.0
	for i := range len(quantilePieces) * 37 {
		first := uint64(quantileFirst) << quantileShift
		v := math.Float64frombits(first + uint64(i)*(1<<quantileShift)/37)
		worst = math.Max(worst, math.Abs(normalTailQuantile(v)-mathext.NormalQuantile(v)))
	}
	near(t, "error of the table", worst, 0, 1e-14)
	for _, v := range []float64{0.5, math.Nextafter(0.5, 0), 0x1p-54, math.Nextafter(0x1p-54, 0), 1e-300} {
		near(t, "Φ⁻¹", normalTailQuantile(v), mathext.NormalQuantile(v), 1e-14)
	}
}

// TestNormalTail compares the table with Erfc, relatively: far tails count,
// but the further out the less.
func TestNormalTail(t *testing.T) {
	near(t, "relative error up to 8", tailError(0, 8), 0, 3e-12)
	near(t, "relative error up to 14", tailError(8, 14), 0, 2e-10)
	near(t, "Φ(-0)", normalTail(0), 0.5, 1e-15)
	near(t, "Φ(-∞)", normalTail(math.Inf(1)), 0, 0)
}

func tailError(low, high float64) (worst float64) {
	for g := low; g < high; g += 1.0 / 1024 {
		worst = max(worst, math.Abs(normalTail(g)/exactTail(g)-1))
	}
	return worst
}
