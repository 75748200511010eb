package exact

import (
	"cmp"
	"context"
	"math"
	"slices"
)

// A dive finds the cheapest few choices that Judge passes without keeping a
// frontier: branch and bound, depth first, below a ceiling that falls as the
// pool fills with cheaper ones. It serves where best first would need more
// memory than allowed. It splits the problem on the bounds of linear
// relaxations and looks through small pieces line by line. Of equally dear
// choices it keeps those it meets first, which are always the same but not
// always the first in lexicographic order.
type dive struct {
	s    *search
	ctx  context.Context
	want int   // how many choices
	err  error // of the context, or a broken promise

	lattice lattice
	dearest float64
	curved  bool
	best    []int // scratch
	free    []*tableau
	open    int64 // where it was stopped, what is not looked at costs at least this

	bank    *bank
	at      []*standing // by depth
	settled []int
	sorted  [][]int // by depth: kept options, least priced first
}

// dive fills the pool with the cheapest choices not refused, at least want of
// them where there are so many, and returns the cost up to which the pool now
// holds one of every cost: none when it holds them all. It ends exhausted or
// stopped.
func (s *search) dive(ctx context.Context, kept [][]int, want int) (upTo int64, end ending, err error) {
	s.want = max(poolSize, want)
	d := &dive{s: s, ctx: ctx, want: want, open: none, lattice: s.p.lattice(kept), curved: s.p.curved()}
	d.dearest, d.best = s.p.relax(kept).dearest(), make([]int, len(kept))
	whole := d.branch(&piece{kept: kept, bound: math.Inf(-1)})
	switch {
	case d.err != nil:
		return 0, stopped, d.err
	case !whole:
		s.out.Bound = max(s.out.Bound, min(d.open, s.ceiling()))
		return 0, stopped, nil
	}
	return d.last(), exhausted, nil
}

// last is the cost that a choice must be below to be of interest.
func (d *dive) last() int64 {
	if len(d.s.pool) < d.want {
		return none
	}
	return d.s.pool[d.want-1].cost
}

// ceiling is the dearest cost still of interest.
func (d *dive) ceiling() int64 {
	last := d.last()
	switch {
	case last == none:
		return d.s.most
	case last <= d.s.least:
		return math.MinInt64 / 2
	}
	return last - 1
}

// over says whether the search must end here.
func (d *dive) over() bool {
	if d.err != nil {
		return true
	}
	over := false
	over, d.err = d.s.spent(d.ctx)
	return over
}

// enter makes room for a search of a bank's options.
func (d *dive) enter(b *bank) {
	d.bank = b
	d.settled = make([]int, len(b.order))
	d.at, d.sorted = nil, nil
	for depth := range len(b.order) + 1 {
		d.at = append(d.at, b.newStanding())
		if depth == len(b.order) {
			break
		}
		options := make([]int, len(b.kept[b.order[depth]]))
		for o := range options {
			options[o] = o
		}
		width := len(b.prices)
		slices.SortStableFunc(options, func(x, y int) int {
			return cmp.Compare(b.priced[depth][x*width], b.priced[depth][y*width])
		})
		d.sorted = append(d.sorted, options)
	}
}

// below searches all completions of the settled lines before depth. It is
// false when it could not finish.
func (d *dive) below(depth int) bool {
	b := d.bank
	if depth == len(b.order) {
		d.leaf()
		return d.err == nil
	}
	for _, o := range d.sorted[depth] {
		if d.s.steps++; d.s.steps&1023 == 0 && d.over() {
			return false
		}
		bound := b.bound(d.at[depth], depth, o, b.below(d.ceiling()))
		if math.IsInf(bound, 1) {
			d.s.out.CutByBound++
			continue
		}
		b.take(d.at[depth+1], d.at[depth], depth, o)
		d.settled[b.order[depth]] = o
		if !d.below(depth + 1) {
			return false
		}
	}
	return true
}

// leaf prices and judges a full choice.
func (d *dive) leaf() {
	choice := make([]int, len(d.settled))
	for i, o := range d.settled {
		choice[i] = d.bank.kept[i][o]
	}
	cost, err := d.s.price(choice)
	if err != nil {
		d.err = err
		return
	}
	if cost > d.ceiling() || d.s.answers[name(choice)].refused {
		return
	}
	d.s.keep(known{choice, cost})
}
