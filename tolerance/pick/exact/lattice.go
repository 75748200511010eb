package exact

import "math"

// A lattice is where sums of floors lie: origin plus whole multiples of step,
// the greatest common divisor of all differences within a line. Prices in
// whole cents make it coarse, and a bound between two of its points counts as
// the upper one.
type lattice struct{ origin, step int64 }

func (p *Problem) lattice(kept [][]int) lattice {
	l := lattice{origin: p.Base}
	for i, options := range kept {
		first := p.Lines[i].Options[options[0]].Floor
		l.origin += first
		for _, j := range options {
			l.step = divisor(l.step, p.Lines[i].Options[j].Floor-first)
		}
	}
	return l
}

// divisor is the greatest common divisor; that of a number and 0 is the number.
func divisor(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return max(a, -a)
}

// up is the least sum of floors that a lower bound leaves possible.
func (l lattice) up(bound float64) int64 {
	switch {
	case bound <= float64(math.MinInt64/2):
		return math.MinInt64 / 2
	case bound >= float64(math.MaxInt64/2):
		return math.MaxInt64 / 2
	case l.step == 0:
		return l.origin
	}
	whole := int64(math.Ceil(bound - 1e-6))
	over := (whole - l.origin) % l.step
	if over < 0 {
		over += l.step
	}
	if over > 0 {
		whole += l.step - over
	}
	return whole
}

// down is the greatest sum of floors at or below a cost.
func (l lattice) down(cost int64) int64 {
	if l.step == 0 {
		if cost < l.origin {
			return cost
		}
		return l.origin
	}
	over := (cost - l.origin) % l.step
	if over < 0 {
		over += l.step
	}
	return cost - over
}
