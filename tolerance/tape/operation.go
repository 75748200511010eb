package tape

import "math"

// code is the number of an operation: its row in the table.
type code uint8

const (
	constant code = iota
	input
	unknown
	root
	bracketed // second result of a root
	// The operations of the table.
	add
	sub
	mul
	div
	pow
	parallel
	neg
	sqrt
	exp
	ln
	sin
	cos
	atan
	abs
	minimum
	maximum
	less
	lessEqual
	equal
	and
	or
	not
	choose
	besselI0
	besselI1
	codes
)

// operation is what the program must know of one operation. The kernels work
// on columns of equal length; dst never overlaps an argument. Arguments beyond
// the arity are nil.
type operation struct {
	name     string
	arity    int
	commutes bool

	// value writes f(a, b, c).
	value func(dst, a, b, c []float64)
	// left and right are value with one argument of two the same in every
	// lane; nil where that saves nothing.
	left  func(dst []float64, a float64, b []float64)
	right func(dst, a []float64, b float64)
	// tangent writes ∂f/∂a·da + ∂f/∂b·db + ∂f/∂c·dc, where v is the value. A
	// direction of exactly 0 contributes exactly 0, however steep f is.
	tangent func(dst, v []float64, a, b, c, da, db, dc []float64)
	// bounds encloses f over non-empty intervals, rounding included.
	bounds func(a, b, c Interval) Interval
}

// at is the value for single numbers.
func (o *operation) at(a, b, c float64) float64 {
	var dst [1]float64
	o.value(dst[:], []float64{a}, []float64{b}, []float64{c})
	return dst[0]
}

// operations is the table, indexed by code. It is never written.
var operations = [codes]operation{
	add: {name: "add", arity: 2, commutes: true, value: addValue, left: addLeft, right: addRight, tangent: addTangent, bounds: addBounds},
	sub: {name: "sub", arity: 2, value: subValue, left: subLeft, right: subRight, tangent: subTangent, bounds: subBounds},
	mul: {name: "mul", arity: 2, commutes: true, value: mulValue, left: mulLeft, right: mulRight, tangent: mulTangent, bounds: mulBounds},
	div: {name: "div", arity: 2, value: divValue, left: divLeft, right: divRight, tangent: divTangent, bounds: divBounds},
	pow: {name: "pow", arity: 2, value: powValue, tangent: powTangent, bounds: powBounds},

	parallel: {name: "parallel", arity: 2, commutes: true, value: parallelValue, tangent: parallelTangent, bounds: parallelBounds},

	neg:  {name: "neg", arity: 1, value: negValue, tangent: negTangent, bounds: negBounds},
	sqrt: {name: "sqrt", arity: 1, value: sqrtValue, tangent: sqrtTangent, bounds: sqrtBounds},
	exp:  {name: "exp", arity: 1, value: each(math.Exp), tangent: expTangent, bounds: expBounds},
	ln:   {name: "ln", arity: 1, value: each(math.Log), tangent: lnTangent, bounds: lnBounds},
	sin:  {name: "sin", arity: 1, value: each(math.Sin), tangent: sinTangent, bounds: sinBounds},
	cos:  {name: "cos", arity: 1, value: each(math.Cos), tangent: cosTangent, bounds: cosBounds},
	atan: {name: "atan", arity: 1, value: each(math.Atan), tangent: atanTangent, bounds: atanBounds},
	abs:  {name: "abs", arity: 1, value: absValue, tangent: absTangent, bounds: absBounds},

	minimum: {name: "min", arity: 2, commutes: true, value: minValue, tangent: minTangent, bounds: minBounds},
	maximum: {name: "max", arity: 2, commutes: true, value: maxValue, tangent: maxTangent, bounds: maxBounds},

	less:      {name: "less", arity: 2, value: lessValue, tangent: flat, bounds: lessBounds},
	lessEqual: {name: "less or equal", arity: 2, value: lessEqualValue, tangent: flat, bounds: lessEqualBounds},
	equal:     {name: "equal", arity: 2, commutes: true, value: equalValue, tangent: flat, bounds: equalBounds},
	and:       {name: "and", arity: 2, commutes: true, value: andValue, tangent: flat, bounds: andBounds},
	or:        {name: "or", arity: 2, commutes: true, value: orValue, tangent: flat, bounds: orBounds},
	not:       {name: "not", arity: 1, value: notValue, tangent: flat, bounds: notBounds},
	choose:    {name: "select", arity: 3, value: chooseValue, tangent: chooseTangent, bounds: chooseBounds},

	besselI0: {name: "bessel I0 scaled", arity: 1, value: besselI0Value, tangent: besselI0Tangent, bounds: besselI0Bounds},
	besselI1: {name: "bessel I1 scaled", arity: 1, value: besselI1Value, tangent: besselI1Tangent, bounds: besselI1Bounds},
}

// The re-slicing at the head of each kernel is what lets the compiler drop the
// bounds checks from the loop. Products that feed a sum are converted, so that
// no compiler fuses them and every machine gets the same bits.

func addValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		dst[i] = a[i] + b[i]
	}
}

func addLeft(dst []float64, a float64, b []float64) { addRight(dst, b, a) }

func addRight(dst, a []float64, b float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = a[i] + b
	}
}

func subValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		dst[i] = a[i] - b[i]
	}
}

func subLeft(dst []float64, a float64, b []float64) {
	b = b[:len(dst)]
	for i := range dst {
		dst[i] = a - b[i]
	}
}

func subRight(dst, a []float64, b float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = a[i] - b
	}
}

func mulValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		dst[i] = a[i] * b[i]
	}
}

func mulLeft(dst []float64, a float64, b []float64) { mulRight(dst, b, a) }

func mulRight(dst, a []float64, b float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = a[i] * b
	}
}

func divValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		dst[i] = a[i] / b[i]
	}
}

func divLeft(dst []float64, a float64, b []float64) {
	b = b[:len(dst)]
	for i := range dst {
		dst[i] = a / b[i]
	}
}

func divRight(dst, a []float64, b float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = a[i] / b
	}
}

func powValue(dst, a, b, _ []float64) {
	for i := range dst {
		dst[i] = math.Pow(a[i], b[i])
	}
}

// parallelValue is a·b/(a+b), 0 for two zeros: two parts that are not fitted.
func parallelValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		x, y := a[i], b[i]
		v := x * y / (x + y)
		if x == 0 && y == 0 {
			v = 0
		}
		dst[i] = v
	}
}

func negValue(dst, a, _, _ []float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = -a[i]
	}
}

func sqrtValue(dst, a, _, _ []float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = math.Sqrt(a[i])
	}
}

// each applies a function so dear that calling it through a pointer costs
// nothing by comparison.
func each(f func(float64) float64) func(dst, a, _, _ []float64) {
	return func(dst, a, _, _ []float64) {
		a = a[:len(dst)]
		for i := range dst {
			dst[i] = f(a[i])
		}
	}
}

func absValue(dst, a, _, _ []float64) {
	a = a[:len(dst)]
	for i := range dst {
		dst[i] = math.Abs(a[i])
	}
}

// minValue is NaN if either is: y ≠ y only for NaN.
func minValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		x, y := a[i], b[i]
		if y < x || y != y {
			x = y
		}
		dst[i] = x
	}
}

func maxValue(dst, a, b, _ []float64) {
	a, b = a[:len(dst)], b[:len(dst)]
	for i := range dst {
		x, y := a[i], b[i]
		if y > x || y != y {
			x = y
		}
		dst[i] = x
	}
}
