package tape

import "math"

// Interval is every number from Low to High. One whose Low is above its High
// holds no number at all: an operation that has no value anywhere.
type Interval struct{ Low, High float64 }

// Point is the interval of one number; of NaN, no number.
func Point(v float64) Interval {
	if v != v {
		return nothing
	}
	return Interval{v, v}
}

// Empty reports whether i holds no number.
func (i Interval) Empty() bool { return !(i.Low <= i.High) }

// Contains reports whether v lies in i.
func (i Interval) Contains(v float64) bool { return i.Low <= v && v <= i.High }

// Join is the smallest interval that holds both.
func (i Interval) Join(j Interval) Interval {
	switch {
	case i.Empty():
		return j
	case j.Empty():
		return i
	}
	return Interval{math.Min(i.Low, j.Low), math.Max(i.High, j.High)}
}

var (
	nothing    = Interval{math.Inf(1), math.Inf(-1)}
	everything = Interval{math.Inf(-1), math.Inf(1)}
	truths     = Interval{0, 1}
	yes        = Interval{1, 1}
	no         = Interval{0, 0}
)

// wide moves both ends outwards by n units in the last place, to allow for
// rounding, and opens an end that is NaN (∞ − ∞).
func (i Interval) wide(n int) Interval {
	for range n {
		i.Low = math.Nextafter(i.Low, math.Inf(-1))
		i.High = math.Nextafter(i.High, math.Inf(1))
	}
	if i.Low != i.Low {
		i.Low = math.Inf(-1)
	}
	if i.High != i.High {
		i.High = math.Inf(1)
	}
	return i
}

// notBelow cuts i at a limit that f cannot pass, rounding or not.
func (i Interval) notBelow(limit float64) Interval {
	i.Low = math.Max(i.Low, limit)
	i.High = math.Max(i.High, limit)
	return i
}

func (i Interval) notAbove(limit float64) Interval {
	i.Low = math.Min(i.Low, limit)
	i.High = math.Min(i.High, limit)
	return i
}

// product is x·y where 0·∞ is 0: an end of an interval is a limit, and no
// finite number times 0 is anything but 0.
func product(x, y float64) float64 {
	if x == 0 || y == 0 {
		return 0
	}
	return x * y
}

// corners is the span of f over the four corners of a box.
func corners(f func(x, y float64) float64, a, b Interval) Interval {
	p, q, r, s := f(a.Low, b.Low), f(a.Low, b.High), f(a.High, b.Low), f(a.High, b.High)
	return Interval{math.Min(math.Min(p, q), math.Min(r, s)), math.Max(math.Max(p, q), math.Max(r, s))}
}

func addBounds(a, b, _ Interval) Interval {
	return Interval{a.Low + b.Low, a.High + b.High}.wide(1)
}

func subBounds(a, b, _ Interval) Interval {
	return Interval{a.Low - b.High, a.High - b.Low}.wide(1)
}

func mulBounds(a, b, _ Interval) Interval { return corners(product, a, b).wide(1) }

// squareBounds is for a product of a value with itself.
func squareBounds(a Interval) Interval {
	m := absBounds(a, a, a)
	return Interval{product(m.Low, m.Low), product(m.High, m.High)}.wide(1).notBelow(0)
}

// A divisor that may be 0 gives everything: 0 and −0 are one number to an
// interval and opposite infinities to a division.
func divBounds(a, b, _ Interval) Interval {
	if b.Contains(0) {
		return everything
	}
	return corners(quotient, a, b).wide(1)
}

// quotient is x/y as a limit.
func quotient(x, y float64) float64 {
	if math.IsInf(y, 0) {
		return 0
	}
	return x / y
}

// parallelBounds: rising in both where neither is negative.
func parallelBounds(a, b, c Interval) Interval {
	if a.Low < 0 || b.Low < 0 {
		return divBounds(mulBounds(a, b, c), addBounds(a, b, c), c).Join(no)
	}
	bound := Interval{parallelLimit(a.Low, b.Low), parallelLimit(a.High, b.High)}.wide(4).notBelow(0)
	if a.Low*b.Low < 1e-290 { // the product may underflow
		bound.Low = 0
	}
	if math.IsInf(a.High*b.High, 1) || math.IsInf(a.High+b.High, 1) { // or overflow
		bound = Interval{0, math.Inf(1)}
	}
	return bound
}

func parallelLimit(x, y float64) float64 {
	if x == 0 || y == 0 {
		return 0
	}
	return x * y / (x + y)
}

// powBounds: x^y for x ≥ 0 is e^(y·ln x), largest and smallest at corners. A
// negative x has powers at whole exponents only.
func powBounds(a, b, _ Interval) Interval {
	fixed := b.Low == b.High
	whole := fixed && b.Low == math.Trunc(b.Low)
	switch {
	case a.Low > 0, a.Low == 0 && b.Low > 0:
		return corners(math.Pow, a, b).wide(4).notBelow(0)
	case a.Low >= 0:
		return everything // 0 to a negative power
	case fixed && !whole && b.Low > 0 && a.High >= 0:
		return corners(math.Pow, a.notBelow(0), b).wide(4).notBelow(0)
	case whole && b.Low > 0 && math.Mod(b.Low, 2) == 0:
		return corners(math.Pow, absBounds(a, a, a), b).wide(4).notBelow(0)
	case whole && b.Low > 0:
		return Interval{math.Pow(a.Low, b.Low), math.Pow(a.High, b.Low)}.wide(4)
	}
	return everything
}

func negBounds(a, _, _ Interval) Interval { return Interval{-a.High, -a.Low} }

func absBounds(a, _, _ Interval) Interval {
	switch {
	case a.Low >= 0:
		return a
	case a.High <= 0:
		return Interval{-a.High, -a.Low}
	}
	return Interval{0, math.Max(-a.Low, a.High)}
}

func sqrtBounds(a, _, _ Interval) Interval {
	if a.High < 0 {
		return nothing
	}
	a = a.notBelow(0)
	return Interval{math.Sqrt(a.Low), math.Sqrt(a.High)}.wide(1).notBelow(0)
}

func expBounds(a, _, _ Interval) Interval {
	return Interval{math.Exp(a.Low), math.Exp(a.High)}.wide(2).notBelow(0)
}

func lnBounds(a, _, _ Interval) Interval {
	if a.High < 0 {
		return nothing
	}
	a = a.notBelow(0)
	return Interval{math.Log(a.Low), math.Log(a.High)}.wide(2)
}

func sinBounds(a, _, _ Interval) Interval { return waveBounds(a, math.Sin, math.Pi/2) }

func cosBounds(a, _, _ Interval) Interval { return waveBounds(a, math.Cos, 0) }

// waveBounds encloses a sine wave whose crest is at crest, its trough half a
// turn on. Far out, where a turn is no longer resolved, it gives up.
func waveBounds(a Interval, f func(float64) float64, crest float64) Interval {
	if !(a.High-a.Low < 2*math.Pi && a.Low > -1e6 && a.High < 1e6) {
		return Interval{-1, 1}
	}
	p, q := f(a.Low), f(a.High)
	bound := Interval{math.Min(p, q), math.Max(p, q)}.wide(4).notBelow(-1).notAbove(1)
	if reaches(a, crest) {
		bound.High = 1
	}
	if reaches(a, crest+math.Pi) {
		bound.Low = -1
	}
	return bound
}

// reaches reports whether a may hold angle plus a whole number of turns.
func reaches(a Interval, angle float64) bool {
	const slack = 1e-9
	next := angle + 2*math.Pi*math.Ceil((a.Low-slack-angle)/(2*math.Pi))
	return next <= a.High+slack
}

func atanBounds(a, _, _ Interval) Interval {
	return Interval{math.Atan(a.Low), math.Atan(a.High)}.wide(2)
}

func minBounds(a, b, _ Interval) Interval {
	return Interval{math.Min(a.Low, b.Low), math.Min(a.High, b.High)}
}

func maxBounds(a, b, _ Interval) Interval {
	return Interval{math.Max(a.Low, b.Low), math.Max(a.High, b.High)}
}

func lessBounds(a, b, _ Interval) Interval {
	switch {
	case a.High < b.Low:
		return yes
	case a.Low >= b.High:
		return no
	}
	return truths
}

func lessEqualBounds(a, b, _ Interval) Interval {
	switch {
	case a.High <= b.Low:
		return yes
	case a.Low > b.High:
		return no
	}
	return truths
}

func equalBounds(a, b, _ Interval) Interval {
	switch {
	case a.High < b.Low || b.High < a.Low:
		return no
	case a == b && a.Low == a.High:
		return yes
	}
	return truths
}

// decided tells a condition that is true, or false, over a whole box.
func decided(a Interval) (always, never bool) { return !a.Contains(0), a == no }

// andBounds and orBounds take empty intervals too: false and no value is false.
func andBounds(a, b, _ Interval) Interval {
	aTrue, aFalse := decided(a)
	bTrue, bFalse := decided(b)
	switch {
	case aFalse || bFalse:
		return no
	case a.Empty() && b.Empty(), a.Empty() && bTrue, b.Empty() && aTrue:
		return nothing
	case a.Empty() || b.Empty():
		return no
	case aTrue && bTrue:
		return yes
	}
	return truths
}

func orBounds(a, b, _ Interval) Interval {
	aTrue, aFalse := decided(a)
	bTrue, bFalse := decided(b)
	switch {
	case !a.Empty() && aTrue || !b.Empty() && bTrue:
		return yes
	case a.Empty() && b.Empty(), a.Empty() && bFalse, b.Empty() && aFalse:
		return nothing
	case a.Empty() || b.Empty():
		return yes
	case aFalse && bFalse:
		return no
	}
	return truths
}

func notBounds(a, _, _ Interval) Interval {
	always, never := decided(a)
	switch {
	case always:
		return no
	case never:
		return yes
	}
	return truths
}

// chooseBounds joins both sides unless the condition is decided.
func chooseBounds(a, b, c Interval) Interval {
	always, never := decided(a)
	switch {
	case a.Empty():
		return nothing
	case always:
		return b
	case never:
		return c
	}
	return b.Join(c)
}

// besselSlack is ten times the error that besselI0Scaled promises.
const besselSlack = 1e-13

func (i Interval) loosened() Interval {
	return Interval{i.Low - math.Abs(i.Low)*besselSlack, i.High + math.Abs(i.High)*besselSlack}.wide(1)
}

// besselI0Bounds: even, falling from 1 at 0.
func besselI0Bounds(a, _, _ Interval) Interval {
	m := absBounds(a, a, a)
	return Interval{besselI0Scaled(m.High), besselI0Scaled(m.Low)}.loosened()
}

// besselI1Bounds: odd, rising to a crest and falling beyond it.
func besselI1Bounds(a, _, _ Interval) Interval {
	p, q := besselI1Scaled(a.Low), besselI1Scaled(a.High)
	bound := Interval{math.Min(p, q), math.Max(p, q)}
	if a.Contains(besselCrest) {
		bound.High = besselCrestValue
	}
	if a.Contains(-besselCrest) {
		bound.Low = -besselCrestValue
	}
	return bound.loosened()
}
