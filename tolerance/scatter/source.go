package scatter

import (
	"math"

	"batchwright/bom/part"
)

// Column says what a column of units holds: Centre + HalfWidth·z, z of the
// given shape.
//
// With a lot, the pieces of one batch resemble each other by a Gaussian
// copula whose correlation is Rho:
//
//	g = √Rho·g_lot + √(1-Rho)·g_piece
//	z = F⁻¹(Φ(g))
//
// with g_lot drawn once per batch and lot number and g_piece once per unit,
// both standard normal, so z keeps its shape exactly and two pieces have the
// correlation Correlation(Shape, Rho). Columns with the same lot number share
// g_lot. Without a lot, or with Rho 0, z = F⁻¹(U) is computed directly; as
// g_piece is Φ⁻¹(U) of the same U, that is the limit of the above for Rho
// towards 0 and not another draw.
type Column struct {
	Shape             part.Shape
	Lot               int // -1: none
	Rho               float64
	Centre, HalfWidth float64
	Stream            uint64 // its own for each column that is to be independent
}

// Source draws units in batches. Two sources with the same Seed give a unit
// the same draw wherever the batch and the number within it are the same,
// whatever Units is: a larger batch only adds units to a smaller one.
type Source struct {
	Seed  uint64
	Units int // per batch, at least 1
	// Lots, where it is not nil, gives g_lot of a lot in a batch instead of a
	// draw; ok is false where it has nothing to say of the lot. It must answer
	// the same whenever it is asked, from any goroutine.
	Lots func(lot, batch int) (g float64, ok bool)
}

// Fill writes to dst the units first, first+1, … of the flat numbering
// batch·Units + number within the batch, both counted from 0. What a unit
// gets depends on Seed, Stream (and Lot), its batch and its number within it
// and on nothing else: not on first, len(dst) or earlier calls. Fill does not
// allocate and may be called from several goroutines.
//
// Every z is within [-1, 1]. Fill panics if Units < 1, first < 0, Rho is not
// in [0, 1] or the shape does not exist.
func (s Source) Fill(dst []float64, c Column, first int) {
	if s.Units < 1 || first < 0 {
		panic("scatter: batch without units, or unit before the first")
	}
	if !(c.Rho >= 0 && c.Rho <= 1) {
		panic("scatter: correlation outside [0, 1]")
	}
	batch, unit := first/s.Units, first%s.Units
	for len(dst) > 0 {
		run := dst[:min(len(dst), s.Units-unit)]
		k := key(pieceOrigin, s.Seed, c.Stream, uint64(batch))
		if c.Lot < 0 || c.Rho == 0 {
			c.fillAlone(run, k, uint64(unit))
		} else {
			c.fillLot(run, k, uint64(unit), s.lot(c.Lot, batch))
		}
		dst = dst[len(run):]
		batch, unit = batch+1, 0
	}
}

// lot returns g_lot of one lot in one batch.
func (s Source) lot(lot, batch int) float64 {
	if s.Lots != nil {
		if g, ok := s.Lots(lot, batch); ok {
			return g
		}
	}
	h := hash(key(lotOrigin, s.Seed, uint64(lot), uint64(batch)), 0)
	return flip(normalTailQuantile(tail(h)), side(h))
}

// flip turns the sign of x over where sign is 1<<63.
func flip(x float64, sign uint64) float64 {
	return math.Float64frombits(math.Float64bits(x) ^ sign)
}

// value returns Centre + HalfWidth·z from z's lower side.
func (c *Column) value(lower float64, side uint64) float64 {
	return c.Centre + float64(c.HalfWidth*flip(lower, side))
}

// fillAlone draws z = F⁻¹(U) for the units from unit on of a batch's key.
func (c *Column) fillAlone(dst []float64, key, unit uint64) {
	switch c.Shape {
	case part.Normal, "":
		for i := range dst {
			h := hash(key, unit+uint64(i))
			dst[i] = c.value(lowerNormal(tail(h)), side(h))
		}
	case part.Uniform:
		for i := range dst {
			h := hash(key, unit+uint64(i))
			dst[i] = c.value(lowerUniform(tail(h)), side(h))
		}
	case part.Triangular:
		for i := range dst {
			h := hash(key, unit+uint64(i))
			dst[i] = c.value(lowerTriangular(tail(h)), side(h))
		}
	case part.Bimodal:
		for i := range dst {
			h := hash(key, unit+uint64(i))
			dst[i] = c.value(lowerBimodal(tail(h)), side(h))
		}
	default:
		panic("scatter: no such shape: " + string(c.Shape))
	}
}

// fillLot is fillAlone with a lot in common. It makes two passes: first the
// signed tail of Φ at g, negative on the upper side, then the shape.
func (c *Column) fillLot(dst []float64, key, unit uint64, lot float64) {
	shared := float64(math.Sqrt(c.Rho) * lot)
	own := math.Sqrt(1 - c.Rho)
	for i := range dst {
		h := hash(key, unit+uint64(i))
		g := shared + float64(own*flip(normalTailQuantile(tail(h)), side(h)))
		dst[i] = math.Copysign(normalTail(math.Abs(g)), -g)
	}
	switch c.Shape {
	case part.Normal, "":
		for i, v := range dst {
			dst[i] = c.value(lowerNormal(math.Abs(v)), signOf(v))
		}
	case part.Uniform:
		for i, v := range dst {
			dst[i] = c.value(lowerUniform(math.Abs(v)), signOf(v))
		}
	case part.Triangular:
		for i, v := range dst {
			dst[i] = c.value(lowerTriangular(math.Abs(v)), signOf(v))
		}
	case part.Bimodal:
		for i, v := range dst {
			dst[i] = c.value(lowerBimodal(math.Abs(v)), signOf(v))
		}
	default:
		panic("scatter: no such shape: " + string(c.Shape))
	}
}

// signOf returns the sign bit of x.
func signOf(x float64) uint64 { return math.Float64bits(x) & (1 << 63) }
