package scatter

// A draw is a hash of what it belongs to, never the next number of a
// sequence: any unit can be drawn alone, in any order, by anyone.
//
// The hash of unit i under a key is output i of a SplitMix64 generator that
// starts at the key: a Weyl sequence of odd step and a finaliser that mixes
// every bit into every other (G. L. Steele, D. Lea, C. H. Flood, "Fast
// splittable pseudorandom number generators", OOPSLA 2014; the finaliser is
// D. Stafford's variant 13). Keys are made by the same mixing from the seed,
// the stream and the batch, so each batch of each stream is a stretch of the
// sequence at an unrelated place.

// weyl is the step, 2^64 divided by the golden ratio, made odd.
const weyl = 0x9E3779B97F4A7C15

// The two kinds of stream start apart (first hexadecimal digits of the
// fractions of π and e), so stream 3 and lot 3 have nothing in common.
const (
	pieceOrigin = 0x243F6A8885A308D3
	lotOrigin   = 0xB7E151628AED2A6A
)

// mix is the finaliser, a bijection of 64 bits.
func mix(x uint64) uint64 {
	x = (x ^ x>>30) * 0xBF58476D1CE4E5B9
	x = (x ^ x>>27) * 0x94D049BB133111EB
	return x ^ x>>31
}

// absorb returns the key that follows key when word is taken in; for each
// key it is a bijection of word.
func absorb(key, word uint64) uint64 { return mix(key + word*weyl + weyl) }

// key returns where the hashes of one batch of one stream start.
func key(origin, seed, stream, batch uint64) uint64 {
	return absorb(absorb(absorb(origin, seed), stream), batch)
}

// hash returns 64 bits for one unit under a key.
func hash(key, unit uint64) uint64 { return mix(key + unit*weyl) }

// tail returns the probability part of a draw: (k + 1/2)·2^-53 with k the 52
// bits of h below its highest, uniform on a grid over (0, 1/2) that leaves
// out both ends and is exact in a float64.
func tail(h uint64) float64 {
	return (float64(int64(h<<1>>12)) + 0.5) * (1.0 / (1 << 53))
}

// side returns the sign bit of a draw: 0 keeps the lower side, 1<<63 turns
// the draw over to the upper. It is the highest bit of h; tail uses the next
// 52.
func side(h uint64) uint64 { return h & (1 << 63) }
