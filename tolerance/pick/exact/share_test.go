package exact

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
)

var inf = math.Inf(1)

// Reference values: differences of erfc at 60 and more digits (mpmath 1.3.0).
func TestShareOfNormal(t *testing.T) {
	cases := map[string]struct{ mean, variance, low, high, want, tolerance float64 }{
		"one deviation":             {0, 1, -1, 1, 0.68268949213708589717, 1e-15},
		"95 %":                      {0, 1, -1.959963984540054, 1.959963984540054, 0.94999999999999997825, 1e-15},
		"off centre":                {1, 4, -3, 2, 0.66871232932583389644, 1e-15},
		"upper tail":                {0, 1, 5, 6, 2.8566498423415621353e-7, 1e-14},
		"lower tail":                {0, 1, -6, -5, 2.8566498423415621353e-7, 1e-14},
		"far lower tail":            {0, 1, -31, -30, 4.90671392714791753e-198, 1e-12},
		"almost too far":            {0, 1, 37, 38, 5.7255712225245765341e-300, 1e-12},
		"beyond all numbers":        {0, 1, 50, 60, 0, 0},
		"sliver in the tail":        {0, 1, 8, 8.0000001, 5.0522690319239830781e-22, 1e-8}, // the limits' own rounding: 1e-16*8/1e-7
		"narrow: series":            {0, 1, 20, 20.00004, 2.2074962279672333358e-92, 1e-11},
		"narrow: difference":        {0, 1, 20, 20.00006, 3.3105822687484956837e-92, 1e-10},
		"narrow at one: series":     {0, 1, 1, 1.0009, 0.00021767565393700216597, 1e-12},
		"narrow at one: difference": {0, 1, 1, 1.0011, 0.00026602140471226393664, 1e-12},
		"sliver in the middle":      {0, 1, -1e-9, 1e-9, 7.9788456080286540544e-10, 1e-15},
		"small beside its mean":     {330e3, 1e-4, 329999.95, 330000.02, 0.97724958150081319194, 1e-9}, // the mean's own rounding: 3e-11/0.01
		"no low limit":              {5, 2, -inf, 1, 0.002338867490523632919, 1e-14},
		"no high limit":             {0, 1, 3, inf, 0.0013498980316300945267, 1e-14},
		"no limits":                 {3, 2, -inf, inf, 1, 0},
		"no variance, inside":       {1, 0, 0, 2, 1, 0},
		"no variance, on the edge":  {2, 0, 0, 2, 1, 0},
		"no variance, on both":      {2, 0, 2, 2, 1, 0},
		"no variance, outside":      {3, 0, 0, 2, 0, 0},
		"no variance, no limits":    {3, 0, -inf, inf, 1, 0},
		"endless variance":          {0, inf, -1, 1, 0, 0},
		"endless variance, a side":  {0, inf, -1, inf, 0.5, 0},
		"limits swapped":            {0, 1, 1, -1, 0, 0},
		"limit at infinity":         {0, 1, inf, inf, 0, 0},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			got := ShareOfNormal(c.mean, c.variance, c.low, c.high)
			if got != c.want && !(math.Abs(got/c.want-1) <= c.tolerance) {
				t.Errorf("got %v, want %v within %v", got, c.want, c.tolerance)
			}
		})
	}
}

func TestShareOfNormalNotANumber(t *testing.T) {
	nan := math.NaN()
	cases := map[string][4]float64{
		"mean": {nan, 1, 0, 1}, "variance": {0, nan, 0, 1}, "low": {0, 1, nan, 1}, "high": {0, 1, 0, nan},
		"negative variance": {0, -1, 0, 1}, "endless mean": {inf, 1, 0, 1},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			if got := ShareOfNormal(c[0], c[1], c[2], c[3]); !math.IsNaN(got) {
				t.Errorf("got %v, want NaN", got)
			}
		})
	}
}

// outsideNormal keeps what 1-ShareOfNormal loses: beyond 9 deviations on both
// sides lie 2.257e-19 (twice 1.12858840595384e-19, mpmath).
func TestOutsideNormal(t *testing.T) {
	cases := map[string]struct{ mean, variance, low, high, want float64 }{
		"nine deviations": {0, 1, -9, 9, 2 * 1.12858840595384e-19},
		"one side":        {0, 1, -9, inf, 1.12858840595384e-19},
		"outside":         {0, 1, 5, 6, 1 - 2.8566498423415621353e-7},
		"limits swapped":  {0, 1, 1, -1, 1},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			if got := outsideNormal(c.mean, c.variance, c.low, c.high); !scalar.EqualWithinRel(got, c.want, 1e-13) {
				t.Errorf("got %v, want %v", got, c.want)
			}
		})
	}
}

// The widenings of the first rows: bisection at 60 digits (mpmath 1.3.0).
func TestMiss(t *testing.T) {
	share := func(low, high, share float64) Demand { return Demand{Low: low, High: high, Share: share} }
	worst := func(low, high float64) Demand { return Demand{Low: low, High: high, WorstCase: true} }
	cases := map[string]struct {
		d                    Demand
		mean, variance, half float64
		want                 float64
	}{
		"off centre":              {share(0, 3, 0.9), 1, 4, 0, 1.89116125216234938},
		"far outside":             {share(-1, 1, 0.99), 10, 1, 0, 11.3263478740408411},
		"one side":                {share(-1, inf, 0.999), 0, 9, 0, 8.27069691850344062},
		"small share":             {share(-.01, .01, 0.3), 0, 1, 0, 0.375320466407567624},
		"holds":                   {share(-1, 1, 0.6826), 0, 1, 0, 0},
		"no variance":             {share(-1, 1, 0.9), 3, 0, 0, 2},
		"no variance, share one":  {share(-1, 1, 1), 3, 0, 0, 2},
		"worst case, high":        {worst(-1, 1), 0.5, 0, 1, 0.5},
		"worst case, low":         {worst(-1, 1), -0.75, 9, 1, 0.75},
		"worst case, both":        {worst(-1, 1), 0, 0, 4, 3},
		"worst case, on the edge": {worst(-1, 1), 0.5, 9, 0.5, 0},
		"worst case, one side":    {worst(-inf, 1), -9, 0, 11, 1},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			if got := c.d.Miss(c.mean, c.variance, c.half); !scalar.EqualWithinAbsOrRel(got, c.want, 1e-15, 1e-12) {
				t.Errorf("got %v, want %v", got, c.want)
			}
		})
	}
}

// After widening by the miss the share is met, by a little less it is not.
func TestMissMeetsTheShare(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 5))
	for n := range 2000 {
		d := Demand{Low: r.NormFloat64(), Share: r.Float64()}
		d.High = d.Low + r.ExpFloat64()
		if n%5 == 0 {
			d.Low = -inf
		}
		mean, variance := 3*r.NormFloat64(), r.ExpFloat64()
		w := d.Miss(mean, variance, 0)
		if d.Holds(mean, variance, 0) {
			continue
		}
		if got := ShareOfNormal(mean, variance, d.Low-w, d.High+w); math.Abs(got-d.Share) > 1e-12 {
			t.Fatalf("case %d: %+v at %v, %v widened by %v holds a share of %v", n, d, mean, variance, w, got)
		}
	}
}

func TestScale(t *testing.T) {
	cases := map[string]struct {
		low, high, want float64
	}{
		"window": {-1, 5, 3}, "low only": {-4, inf, 4}, "high only": {-inf, 8, 8},
		"zero": {0, inf, 1}, "none": {-inf, inf, 1}, "no width": {7, 7, 7},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			d := Demand{Low: c.low, High: c.high}
			if got := d.Scale(); got != c.want {
				t.Errorf("got %v, want %v", got, c.want)
			}
		})
	}
}
