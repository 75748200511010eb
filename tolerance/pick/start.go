package pick

import (
	"context"
	"math"
	"slices"
)

// poolSize is how many choices of the local search are kept.
const poolSize = 16

// start fills the pool with good choices: each of a few choices that the
// ascent passes is mended until the demands hold, then made cheaper by changes
// of one line and of two, then judged.
func (s *search) start(ctx context.Context, kept [][]int) error {
	l := newLocal(s.p, kept)
	for _, choice := range l.seeds() {
		if err := ctx.Err(); err != nil {
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

// keep judges a choice and puts it in the pool.
func (s *search) keep(k known) {
	if !s.judge(k.choice, k.cost) {
		return
	}
	at, found := slices.BinarySearchFunc(s.pool, k, known.compare)
	if !found {
		s.pool = slices.Insert(s.pool, at, k)
		s.pool = s.pool[:min(len(s.pool), poolSize)]
	}
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

// A gauge has a demand's deviations at hand to measure a miss quickly.
type gauge struct {
	*Demand
	z, widest, scale float64
}

func newLocal(p *Problem, kept [][]int) *local {
	l := &local{p: p, kept: kept}
	l.totals, l.changed = make([]Effect, len(p.Demands)), make([]Effect, len(p.Demands))
	for q := range p.Demands {
		d := &p.Demands[q]
		g := gauge{Demand: d, scale: d.Scale(), widest: d.widest()}
		if !d.WorstCase && d.Share > 0.5 {
			g.z = quantile(d.rest())
		}
		l.gauges = append(l.gauges, g)
	}
	return l
}

// miss is 0 where the demand holds; else it grows with the distance, in
// the demand's scale. It need only point the way.
func (g *gauge) miss(t Effect) float64 {
	if g.WorstCase {
		return max(0, g.Low-(t.Mean-t.Half), t.Mean+t.Half-g.High) / g.scale
	}
	if g.Share > 0.5 {
		s := math.Sqrt(t.Variance)
		far := max(s*g.z-(t.Mean-g.Low), s*g.z-(g.High-t.Mean), s-g.widest)
		if far > 0 {
			return far / g.scale
		}
	}
	return max(0, g.Share-ShareOfNormal(t.Mean, t.Variance, g.Low, g.High))
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

// cheapen makes changes of one line, and when there is none of two, that save
// floor money while the demands hold.
func (l *local) cheapen(choice []int) {
	for l.one(choice) || l.two(choice) {
	}
}

// one makes the single change that saves most.
func (l *local) one(choice []int) bool {
	l.sum(choice)
	line, option, most := -1, 0, int64(0)
	for i, from := range choice {
		for _, j := range l.kept[i] {
			if saves := l.floor(i, from) - l.floor(i, j); saves > most && l.change(l.totals, i, from, j) == 0 {
				line, option, most = i, j, saves
			}
		}
	}
	if line >= 0 {
		choice[line] = option
	}
	return line >= 0
}

// two makes the first change of two lines that saves anything.
func (l *local) two(choice []int) bool {
	l.sum(choice)
	first := make([]Effect, len(l.totals))
	for i, from := range choice {
		for _, j := range l.kept[i] {
			if j == from {
				continue
			}
			l.step(first, l.totals, i, from, j)
			spare := l.floor(i, from) - l.floor(i, j)
			if line, option := l.pay(choice, first, i, spare); line >= 0 {
				choice[i], choice[line] = j, option
				return true
			}
		}
	}
	return false
}

// pay finds a second change, of a line after i, that with what the first
// spares (or costs, when negative) saves most while the demands hold.
func (l *local) pay(choice []int, first []Effect, i int, spare int64) (line, option int) {
	line, most := -1, int64(0)
	for k := i + 1; k < len(choice); k++ {
		for _, j := range l.kept[k] {
			saves := spare + l.floor(k, choice[k]) - l.floor(k, j)
			if saves > most && l.change(first, k, choice[k], j) == 0 {
				line, option, most = k, j, saves
			}
		}
	}
	return line, option
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
