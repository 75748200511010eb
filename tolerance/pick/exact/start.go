package exact

import (
	"context"
	"slices"
)

// poolSize is how many of the cheapest choices are kept at least.
const poolSize = 16

// start fills the pool with good choices: each of a few choices that the
// ascent passes is mended until the demands hold, then made cheaper line by
// line, then judged.
func (s *search) start(ctx context.Context, kept [][]int) error {
	l := newLocal(s.p, kept)
	for _, choice := range l.seeds() {
		if err := ctx.Err(); err != nil || s.expired() {
			return err
		}
		if !l.mend(choice) {
			continue
		}
		l.cheapen(choice)
		for _, k := range l.polish(choice) {
			s.keep(k)
		}
	}
	return nil
}

// keep judges a choice and, where Judge passes it, puts it in the pool, which
// holds the cheapest, none of them refused.
func (s *search) keep(k known) {
	if k.cost >= Unavailable || k.cost > s.most || !s.judge(k.choice, k.cost) {
		return
	}
	at, found := slices.BinarySearchFunc(s.pool, k, known.compare)
	if !found && !s.answers[name(k.choice)].refused {
		s.pool = slices.Insert(s.pool, at, k)
		s.pool = s.pool[:min(len(s.pool), max(s.want, poolSize))]
	}
}

// forget takes a refused choice out of the pool.
func (s *search) forget(choice []int) {
	s.pool = slices.DeleteFunc(s.pool, func(k known) bool { return slices.Equal(k.choice, choice) })
}

// aim improves the pool with beams over ever fewer options.
func (s *search) aim(ctx context.Context, kept [][]int) error {
	for _, width := range beamWidths {
		if err := ctx.Err(); err != nil || s.expired() {
			return err
		}
		b, _ := s.prepare(kept, s.ceiling())
		if b == nil {
			return nil
		}
		for _, choice := range b.beam(width, s.ceiling()) {
			if cost := s.p.cost(choice); cost <= s.ceiling() {
				s.keep(known{choice, cost})
			}
		}
	}
	return nil
}

// ceiling is the cost of the cheapest choice known that may still be confirmed.
func (s *search) ceiling() int64 {
	if len(s.pool) == 0 {
		return s.most
	}
	return s.pool[0].cost
}

// A local search works on full choices in the problem's own indexes, with the
// effects added up and the money as a sum of floors.
type local struct {
	p       *Problem
	kept    [][]int
	gauges  []gauge
	totals  []Effect
	changed []Effect
}

func newLocal(p *Problem, kept [][]int) *local {
	l := &local{p: p, kept: kept}
	l.totals, l.changed = make([]Effect, len(p.Demands)), make([]Effect, len(p.Demands))
	for q := range p.Demands {
		l.gauges = append(l.gauges, newGauge(&p.Demands[q]))
	}
	return l
}

func (l *local) miss(totals []Effect) float64 {
	sum := 0.0
	for q := range l.gauges {
		sum += l.gauges[q].miss(totals[q])
	}
	return sum
}

// change is the miss after line i goes from option from to option to.
func (l *local) change(totals []Effect, i, from, to int) float64 {
	l.step(l.changed, totals, i, from, to)
	return l.miss(l.changed)
}

func (l *local) step(dst, totals []Effect, i, from, to int) {
	a, b := l.p.Lines[i].Options[from].Effects, l.p.Lines[i].Options[to].Effects
	for q, t := range totals {
		dst[q] = Effect{t.Mean + b[q].Mean - a[q].Mean, t.Variance + b[q].Variance - a[q].Variance, t.Half + b[q].Half - a[q].Half}
	}
}

func (l *local) sum(choice []int) {
	for q := range l.totals {
		l.totals[q] = l.p.totals(q, choice)
	}
}

func (l *local) floor(i, j int) int64 { return l.p.Lines[i].Options[j].Floor }

// seeds are the choices at the bound's minimum for the best prices and for
// dearer rows, which lie deeper within the demands.
func (l *local) seeds() [][]int {
	r := l.p.relax(l.kept)
	prices := make([]float64, len(r.limit))
	r.ascend(r.whole(), prices, r.dearest()+1, wholeSteps, nil)
	var out [][]int
	for _, more := range [...]float64{1, 1.25, 1.6, 2.5, 5, 0} {
		v, best := slices.Clone(prices), make([]int, len(l.kept))
		for k := range v {
			v[k] *= more
		}
		r.bound(r.whole(), v, best)
		for i, o := range best {
			best[i] = l.kept[i][o]
		}
		if !slices.ContainsFunc(out, func(c []int) bool { return slices.Equal(c, best) }) {
			out = append(out, best)
		}
	}
	return out
}

// mend changes one line after another, each time the one that takes most of
// the miss away for the money, until all demands hold.
func (l *local) mend(choice []int) bool {
	for range 4 * len(choice) {
		l.sum(choice)
		now := l.miss(l.totals)
		if now == 0 {
			return true
		}
		line, option, most := -1, 0, 0.0
		for i, from := range choice {
			for _, j := range l.kept[i] {
				gain := now - l.change(l.totals, i, from, j)
				if gain <= 1e-12*now {
					continue
				}
				worth := gain / float64(max(1, l.floor(i, j)-l.floor(i, from)))
				if worth > most {
					line, option, most = i, j, worth
				}
			}
		}
		if line < 0 {
			return false
		}
		choice[line] = option
	}
	return false
}

// cheapen makes the single change that saves most floor money while the demands
// hold, until there is none.
func (l *local) cheapen(choice []int) {
	for {
		l.sum(choice)
		line, option, most := -1, 0, int64(0)
		for i, from := range choice {
			for _, j := range l.kept[i] {
				if saves := l.floor(i, from) - l.floor(i, j); saves > most && l.change(l.totals, i, from, j) == 0 {
					line, option, most = i, j, saves
				}
			}
		}
		if line < 0 {
			return
		}
		choice[line] = option
	}
}

// polish goes on with the exact cost, which merged lines make differ from the
// floors, one line at a time. It returns the choices passed on the way.
func (l *local) polish(choice []int) []known {
	now := known{slices.Clone(choice), l.p.cost(choice)}
	way := []known{now}
	for range 2 * len(choice) {
		l.sum(now.choice)
		best := now
		for i, from := range now.choice {
			next := slices.Clone(now.choice)
			for _, j := range l.kept[i] {
				if j == from || l.change(l.totals, i, from, j) != 0 {
					continue
				}
				next[i] = j
				if cost := l.p.cost(next); cost < best.cost {
					best = known{slices.Clone(next), cost}
				}
			}
		}
		if best.cost >= now.cost {
			break
		}
		now = best
		way = append(way, now)
	}
	return way
}
