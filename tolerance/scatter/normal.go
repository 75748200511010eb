package scatter

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// The normal distribution is needed once or twice per draw, so its tail and
// the inverse of its tail are kept as polynomials over short intervals. They
// are built when the program starts from mathext.NormalQuantile (Cephes) and
// math.Erfc by interpolation at the Chebyshev nodes of each interval, which
// for these analytic functions converges geometrically. Error bounds are
// tested, not assumed.
//
// Products are wrapped in float64() so that no compiler may fuse them into
// the addition: a seed gives the same bits on every processor.

// piece is a polynomial of degree 7 in t = -1/2..1/2 across an interval.
type piece [8]float64

// at evaluates the polynomial in Estrin's order, which is a shorter chain of
// dependent operations than Horner's.
func (c *piece) at(t float64) float64 {
	t2 := float64(t * t)
	t4 := float64(t2 * t2)
	a := c[0] + float64(c[1]*t)
	b := c[2] + float64(c[3]*t)
	d := c[4] + float64(c[5]*t)
	e := c[6] + float64(c[7]*t)
	return (a + float64(b*t2)) + float64((d+float64(e*t2))*t4)
}

// interpolate returns the polynomial that agrees with f at the 8 Chebyshev
// nodes of t = -1/2..1/2, by divided differences (Newton) expanded to powers.
func interpolate(f func(t float64) float64) (c piece) {
	var node, difference piece
	for i := range node {
		node[i] = math.Cos(math.Pi*(float64(i)+0.5)/float64(len(node))) / 2
		difference[i] = f(node[i])
	}
	for order := 1; order < len(node); order++ {
		for i := len(node) - 1; i >= order; i-- {
			difference[i] = (difference[i] - difference[i-1]) / (node[i] - node[i-order])
		}
	}
	for i := len(node) - 1; i >= 0; i-- { // c = c·(t - node[i]) + difference[i]
		for k := len(c) - 1; k > 0; k-- {
			c[k] = c[k-1] - float64(c[k]*node[i])
		}
		c[0] = difference[i] - float64(c[0]*node[i])
	}
	return c
}

const (
	// Φ⁻¹ is tabled over v = 2^-54..1/2, 16 intervals to the octave, so that
	// the interval is read off the bits of v. 2^-54 is the least v a draw has.
	quantileBits   = 4
	quantileShift  = 52 - quantileBits
	quantileOctave = 54
	quantileFirst  = (1023 - quantileOctave) << quantileBits // leading bits of 2^-54

	// Φ(-g) is tabled over g = 0..12, 16 intervals to the unit.
	tailPerUnit = 16
	tailReach   = 12
)

var (
	quantilePieces = makeQuantilePieces()
	tailPieces     = makeTailPieces()
)

func makeQuantilePieces() *[(quantileOctave - 1) << quantileBits]piece {
	var pieces [(quantileOctave - 1) << quantileBits]piece
	for i := range pieces {
		low := math.Float64frombits(uint64(quantileFirst+i) << quantileShift)
		high := math.Float64frombits(uint64(quantileFirst+i+1) << quantileShift)
		pieces[i] = interpolate(func(t float64) float64 {
			return mathext.NormalQuantile((low+high)/2 + t*(high-low))
		})
	}
	return &pieces
}

func makeTailPieces() *[tailPerUnit * tailReach]piece {
	var pieces [tailPerUnit * tailReach]piece
	for i := range pieces {
		pieces[i] = interpolate(func(t float64) float64 {
			return exactTail((float64(i) + 0.5 + t) / tailPerUnit)
		})
	}
	return &pieces
}

// exactTail is Φ(-g) for any g.
func exactTail(g float64) float64 { return math.Erfc(g/math.Sqrt2) / 2 }

// normalTailQuantile returns Φ⁻¹(v) for v in (0, 1/2], within 1e-14 absolute
// over v >= 2^-54; below, it asks mathext.
func normalTailQuantile(v float64) float64 {
	b := math.Float64bits(v)
	i := b>>quantileShift - quantileFirst
	if i >= uint64(len(quantilePieces)) {
		return mathext.NormalQuantile(v)
	}
	// The bits below the interval's number, as a fraction 1..2 less 3/2.
	t := math.Float64frombits(b<<(12+quantileBits)>>12|1023<<52) - 1.5
	return quantilePieces[i].at(t)
}

// normalTail returns Φ(-g) for g >= 0, within 3e-12 of itself up to g = 8 and
// within 2e-10 from there.
func normalTail(g float64) float64 {
	x := float64(g * tailPerUnit)
	if !(x < tailPerUnit*tailReach) {
		return exactTail(g)
	}
	i := uint(x)
	return tailPieces[i].at(x - float64(i) - 0.5)
}
