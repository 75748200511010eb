package tape

import "math"

// enclose bounds a root. Pieces of the bracket are cut off from either end
// while the residual excludes zero there. Unless the residual at both ends is
// known to have opposite signs, the value may be clamped, and the ends are
// added.
func (l *loop) enclose(slots []Interval) {
	low, high := slots[l.low], slots[l.high]
	flag := func(i Interval) {
		if l.bracketed >= 0 {
			slots[l.bracketed] = i
		}
	}
	if low.Empty() || high.Empty() {
		slots[l.unknown] = nothing
		flag(nothing)
		return
	}
	at := func(x Interval) Interval {
		slots[l.unknown] = x
		enclose(l.body, slots)
		return slots[l.residual]
	}
	atLow, atHigh := at(low), at(high)
	whole := low.Join(high)
	inside := contract(at, whole)
	opposite := atLow.Low > 0 && atHigh.High < 0 || atLow.High < 0 && atHigh.Low > 0
	same := atLow.Low > 0 && atHigh.Low > 0 || atLow.High < 0 && atHigh.High < 0
	switch {
	case atLow.Empty() || atHigh.Empty():
		slots[l.unknown] = nothing
		flag(nothing)
	case opposite:
		slots[l.unknown] = inside
		flag(yes)
	case same:
		slots[l.unknown] = clampedEnd(low, high, atLow, atHigh)
		flag(no)
	default:
		slots[l.unknown] = inside.Join(whole)
		flag(truths)
	}
}

// clampedEnd is the end, or both, with the smaller |residual|.
func clampedEnd(low, high, atLow, atHigh Interval) Interval {
	l, h := absBounds(atLow, atLow, atLow), absBounds(atHigh, atHigh, atHigh)
	switch {
	case l.High < h.Low:
		return low
	case h.High < l.Low:
		return high
	}
	return low.Join(high)
}

// contract cuts pieces without a zero of f off both ends of x, at most half at
// a time, and widens what is left by the tolerance of the search.
func contract(f func(Interval) Interval, x Interval) Interval {
	if math.IsInf(x.High-x.Low, 0) {
		return x
	}
	floor := 1e-18 * (x.High - x.Low)
	x = cut(f, x, true)
	x = cut(f, x, false)
	slack := 0x1p-50*math.Max(math.Abs(x.Low), math.Abs(x.High)) + 4*floor
	return Interval{x.Low - slack, x.High + slack}
}

// cut moves one end inwards over pieces where f has no zero. A piece that
// cannot be excluded is tried again at half the size, down to 2^−16 of x.
func cut(f func(Interval) Interval, x Interval, left bool) Interval {
	size := (x.High - x.Low) / 2
	smallest := math.Ldexp(size, -15)
	for range 200 {
		if size < smallest || !(size > 0) {
			return x
		}
		size = math.Min(size, x.High-x.Low)
		piece := Interval{x.Low, x.Low + size}
		if !left {
			piece = Interval{x.High - size, x.High}
		}
		r := f(piece)
		if r.Empty() || r.Contains(0) {
			size /= 2
			continue
		}
		if left {
			x.Low = piece.High
		} else {
			x.High = piece.Low
		}
	}
	return x
}
