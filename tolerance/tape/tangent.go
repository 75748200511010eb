package tape

import "math"

// times is slope·d, and exactly 0 in a direction that does not move, even
// where the slope is infinite: the square root of a part that is not fitted.
func times(slope, d float64) float64 {
	if d == 0 {
		return 0
	}
	return slope * d
}

func addTangent(dst, _ []float64, _, _, _, da, db, _ []float64) {
	addValue(dst, da, db, nil)
}

func subTangent(dst, _ []float64, _, _, _, da, db, _ []float64) {
	subValue(dst, da, db, nil)
}

func mulTangent(dst, _ []float64, a, b, _, da, db, _ []float64) {
	a, b, da, db = a[:len(dst)], b[:len(dst)], da[:len(dst)], db[:len(dst)]
	for i := range dst {
		dst[i] = times(b[i], da[i]) + times(a[i], db[i])
	}
}

// d(a/b) = (da − v·db)/b.
func divTangent(dst, v []float64, _, b, _, da, db, _ []float64) {
	v, b, da, db = v[:len(dst)], b[:len(dst)], da[:len(dst)], db[:len(dst)]
	for i := range dst {
		d := da[i] - times(v[i], db[i])
		if d != 0 {
			d /= b[i]
		}
		dst[i] = d
	}
}

// d(a^b) = b·a^(b−1)·da + v·ln(a)·db.
func powTangent(dst, v []float64, a, b, _, da, db, _ []float64) {
	for i := range dst {
		d := 0.0
		if da[i] != 0 && b[i] != 0 {
			d = b[i] * math.Pow(a[i], b[i]-1) * da[i]
		}
		if db[i] != 0 && v[i] != 0 {
			d += v[i] * math.Log(a[i]) * db[i]
		}
		dst[i] = d
	}
}

// d(ab/(a+b)) = (b/(a+b))²·da + (a/(a+b))²·db. From two zeros, towards either
// side alone, it stays 0; towards both it is the parallel of the directions.
func parallelTangent(dst, _ []float64, a, b, _, da, db, _ []float64) {
	for i := range dst {
		s := a[i] + b[i]
		if a[i] == 0 && b[i] == 0 {
			parallelValue(dst[i:i+1], da[i:], db[i:], nil)
			continue
		}
		p, q := b[i]/s, a[i]/s
		dst[i] = times(p*p, da[i]) + times(q*q, db[i])
	}
}

func negTangent(dst, _ []float64, _, _, _, da, _, _ []float64) {
	negValue(dst, da, nil, nil)
}

// d√a = da/(2√a).
func sqrtTangent(dst, v []float64, _, _, _, da, _, _ []float64) {
	v, da = v[:len(dst)], da[:len(dst)]
	for i := range dst {
		d := da[i]
		if d != 0 {
			d /= 2 * v[i]
		}
		dst[i] = d
	}
}

func expTangent(dst, v []float64, _, _, _, da, _, _ []float64) {
	v, da = v[:len(dst)], da[:len(dst)]
	for i := range dst {
		dst[i] = times(v[i], da[i])
	}
}

func lnTangent(dst, _ []float64, a, _, _, da, _, _ []float64) {
	a, da = a[:len(dst)], da[:len(dst)]
	for i := range dst {
		d := da[i]
		if d != 0 {
			d /= a[i]
		}
		dst[i] = d
	}
}

func sinTangent(dst, _ []float64, a, _, _, da, _, _ []float64) {
	for i := range dst {
		dst[i] = times(math.Cos(a[i]), da[i])
	}
}

func cosTangent(dst, _ []float64, a, _, _, da, _, _ []float64) {
	for i := range dst {
		dst[i] = times(-math.Sin(a[i]), da[i])
	}
}

func atanTangent(dst, _ []float64, a, _, _, da, _, _ []float64) {
	for i := range dst {
		dst[i] = da[i] / (1 + a[i]*a[i])
	}
}

// At the kink of |a| the tangent is taken as 0, midway between both sides.
func absTangent(dst, _ []float64, a, _, _, da, _, _ []float64) {
	for i := range dst {
		switch {
		case a[i] > 0:
			dst[i] = da[i]
		case a[i] < 0:
			dst[i] = -da[i]
		default:
			dst[i] = 0 * a[i]
		}
	}
}

// Where both are equal, min and max follow the first.
func minTangent(dst, _ []float64, a, b, _, da, db, _ []float64) {
	for i := range dst {
		d := da[i]
		if b[i] < a[i] {
			d = db[i]
		}
		dst[i] = d
	}
}

func maxTangent(dst, _ []float64, a, b, _, da, db, _ []float64) {
	for i := range dst {
		d := da[i]
		if b[i] > a[i] {
			d = db[i]
		}
		dst[i] = d
	}
}

// d(e^−x·I₀) = e^−x·(I₁ − I₀) for x ≥ 0; the function is even.
func besselI0Tangent(dst, v []float64, a, _, _, da, _, _ []float64) {
	for i := range dst {
		x := math.Abs(a[i])
		slope := besselI1Scaled(x) - v[i]
		if a[i] < 0 {
			slope = -slope
		}
		dst[i] = times(slope, da[i])
	}
}

// d(e^−x·I₁) = e^−x·(I₀ − I₁/x − I₁) for x ≥ 0, ½ at 0; the function is odd.
func besselI1Tangent(dst, v []float64, a, _, _, da, _, _ []float64) {
	for i := range dst {
		x := math.Abs(a[i])
		slope := 0.5
		if x != 0 {
			i1 := math.Abs(v[i])
			slope = besselI0Scaled(x) - i1/x - i1
		}
		dst[i] = times(slope, da[i])
	}
}
