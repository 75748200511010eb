package exact

import (
	"cmp"
	"math"
	"slices"
)

// A bank holds what a search needs to bound a partial choice in one sweep: the
// lines in search order and, for a few price vectors, the rows and the
// demands, what each option adds and what the lines still open add at least.
type bank struct {
	p        *Problem
	kept     [][]int
	order    []int
	prices   [][]float64 // the best for the whole first, all zero last
	rounding []float64
	rows     int
	dearest  float64 // no sum of floors is above it
	lattice  lattice
	gauges   []gauge

	// By depth: [o*len(prices)+b], [o*rows+k] and [o*demands+q].
	priced [][]float64
	use    [][]float64
	effect [][]Effect
	// By depth, lines of that depth and deeper: the least they can add.
	restPriced [][]float64
	restUse    [][]float64
	restReach  [][]reach
}

// newBank lays out a relaxation for the search.
func newBank(r *relaxation, prices [][]float64) *bank {
	b := &bank{p: r.p, kept: r.kept, rows: len(r.limit), dearest: r.dearest()}
	b.prices = append(slices.Clone(prices), make([]float64, b.rows))
	b.lattice = r.p.lattice(r.kept)
	for q := range r.p.Demands {
		b.gauges = append(b.gauges, newGauge(&r.p.Demands[q]))
	}
	for _, v := range b.prices {
		b.rounding = append(b.rounding, r.rounding(v))
	}
	b.order = r.order(b.prices[0])
	n := len(b.order)
	b.priced, b.use, b.effect = make([][]float64, n), make([][]float64, n), make([][]Effect, n)
	b.restPriced, b.restUse, b.restReach = make([][]float64, n+1), make([][]float64, n+1), make([][]reach, n+1)
	b.foot(r)
	for d := n - 1; d >= 0; d-- {
		b.layer(r, d)
	}
	return b
}

// order settles first the lines whose options differ most in priced money,
// where a wrong option shows soonest.
func (r *relaxation) order(prices []float64) []int {
	second := make([]float64, len(r.kept))
	order := make([]int, len(r.kept))
	for i := range r.kept {
		order[i] = i
		values := make([]float64, len(r.floor[i]))
		for o := range values {
			values[o] = r.priced(i, o, prices)
		}
		least, sum := slices.Min(values), 0.0
		for _, v := range values {
			sum += v - least
		}
		second[i] = sum / float64(len(values))
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(second[b], second[a]) })
	return order
}

// foot fills what is there when no line is open: the bases and limits.
func (b *bank) foot(r *relaxation) {
	n := len(b.order)
	for _, prices := range b.prices {
		sum := float64(b.p.Base)
		for k, price := range prices {
			sum -= price * r.limit[k]
		}
		b.restPriced[n] = append(b.restPriced[n], sum)
	}
	for _, limit := range r.limit {
		b.restUse[n] = append(b.restUse[n], -limit)
	}
	for q := range b.p.Demands {
		d := &b.p.Demands[q]
		b.restReach[n] = append(b.restReach[n],
			reach{d.BaseMean, d.BaseMean, d.BaseVariance, d.BaseHalf, math.Abs(d.BaseMean)})
	}
}

// layer fills depth d from depth d+1.
func (b *bank) layer(r *relaxation, d int) {
	i := b.order[d]
	for o, j := range b.kept[i] {
		for _, prices := range b.prices {
			b.priced[d] = append(b.priced[d], r.priced(i, o, prices))
		}
		b.use[d] = append(b.use[d], r.takes(i, o)...)
		b.effect[d] = append(b.effect[d], b.p.Lines[i].Options[j].Effects...)
	}
	b.restPriced[d] = addLeast(b.restPriced[d+1], b.priced[d])
	b.restUse[d] = addLeast(b.restUse[d+1], b.use[d])
	b.restReach[d] = slices.Clone(b.restReach[d+1])
	for q := range b.restReach[d] {
		b.restReach[d][q].widen(b.effect[d], q, len(b.p.Demands))
	}
}

// addLeast adds to each entry of rest the least of its column in table.
func addLeast(rest, table []float64) []float64 {
	out := slices.Clone(rest)
	for c := range out {
		least := math.Inf(1)
		for at := c; at < len(table); at += len(out) {
			least = min(least, table[at])
		}
		out[c] += least
	}
	return out
}

// widen lets the reach choose among the options of one more line.
func (r *reach) widen(effects []Effect, q, demands int) {
	low, high, variance, half := math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(1)
	for at := q; at < len(effects); at += demands {
		e := effects[at]
		low, high = min(low, e.Mean), max(high, e.Mean)
		variance, half = min(variance, e.Variance), min(half, e.Half)
	}
	r.low += low
	r.high += high
	r.variance += variance
	r.half += half
	r.size += max(math.Abs(low), math.Abs(high))
}

// A standing is what the settled lines of a partial choice add up to.
type standing struct {
	priced []float64
	use    []float64
	effect []Effect
}

func (b *bank) newStanding() *standing {
	return &standing{make([]float64, len(b.prices)), make([]float64, b.rows), make([]Effect, len(b.p.Demands))}
}

// stand adds up the settled options (by line, kept indexes) of the first depth
// lines.
func (b *bank) stand(dst *standing, settled []int, depth int) {
	clear(dst.priced)
	clear(dst.use)
	clear(dst.effect)
	for d := range depth {
		b.take(dst, dst, d, settled[b.order[d]])
	}
}

// bound is a lower bound of the floors of all completions of the standing at
// depth with option o on top, +Inf when none can meet the demands.
func (b *bank) bound(s *standing, depth, o int, ceiling float64) float64 {
	top := math.Inf(-1)
	priced, rest := b.priced[depth][o*len(s.priced):], b.restPriced[depth+1]
	for v, sum := range s.priced {
		value := sum + priced[v] + rest[v] - b.rounding[v]
		if value > ceiling {
			return math.Inf(1)
		}
		if value > top {
			top = value
		}
	}
	use, restUse := b.use[depth][o*len(s.use):], b.restUse[depth+1]
	for k, sum := range s.use {
		if sum+use[k]+restUse[k] > 0 {
			return math.Inf(1)
		}
	}
	for q := range s.effect {
		e, r := s.effect[q], b.restReach[depth+1][q]
		e.add(b.effect[depth][o*len(s.effect)+q])
		r.low += e.Mean
		r.high += e.Mean
		r.variance += e.Variance
		r.half += e.Half
		r.size += math.Abs(e.Mean)
		if b.gauges[q].beyond(&r) {
			return math.Inf(1)
		}
	}
	return top
}

// take adds option o at depth to a standing.
func (b *bank) take(dst, s *standing, depth, o int) {
	for v, sum := range s.priced {
		dst.priced[v] = sum + b.priced[depth][o*len(s.priced)+v]
	}
	for k, sum := range s.use {
		dst.use[k] = sum + b.use[depth][o*len(s.use)+k]
	}
	copy(dst.effect, s.effect)
	for q := range dst.effect {
		dst.effect[q].add(b.effect[depth][o*len(s.effect)+q])
	}
}

// below is the greatest sum of floors that a choice of at most this cost can
// have.
func (b *bank) below(cost int64) float64 {
	if cost == none {
		return b.dearest
	}
	return min(float64(b.lattice.down(cost)), b.dearest)
}
