package tape

import "math"

// truth is 1 or 0, NaN if x or y is.
func truth(holds bool, x, y float64) float64 {
	switch {
	case x != x || y != y:
		return math.NaN()
	case holds:
		return 1
	}
	return 0
}

func lessValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		dst[i] = truth(a[i] < b[i], a[i], b[i])
	}
}

func lessEqualValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		dst[i] = truth(a[i] <= b[i], a[i], b[i])
	}
}

func equalValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		dst[i] = truth(a[i] == b[i], a[i], b[i])
	}
}

// andValue is 0 as soon as one is 0, even if the other is NaN: in
// `x > 0 and ln(x) > 1` the first settles it.
func andValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		if a[i] == 0 || b[i] == 0 {
			dst[i] = 0
			continue
		}
		dst[i] = truth(true, a[i], b[i])
	}
}

// orValue is 1 as soon as one is true, even if the other is NaN.
func orValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		x, y := a[i], b[i]
		if x != 0 && x == x || y != 0 && y == y {
			dst[i] = 1
			continue
		}
		dst[i] = truth(false, x, y)
	}
}

func notValue(dst, a, _, _ []float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = truth(a[i] == 0, a[i], 0)
	}
}

// chooseValue takes b where a is true and c where it is false; the other side
// may be NaN.
func chooseValue(dst, a, b, c []float64) {
	a, b, c = a[:len(dst)], b[:len(dst)], c[:len(dst)]
	for i := range dst {
		v := b[i]
		if a[i] == 0 {
			v = c[i]
		} else if a[i] != a[i] {
			v = a[i]
		}
		dst[i] = v
	}
}

// flat is the tangent of a condition: none.
func flat(dst, _ []float64, _, _, _, _, _, _ []float64) { clear(dst) }

func chooseTangent(dst, _ []float64, a, _, _, _, db, dc []float64) {
	for i := range dst {
		v := db[i]
		if a[i] == 0 {
			v = dc[i]
		} else if a[i] != a[i] {
			v = a[i]
		}
		dst[i] = v
	}
}
