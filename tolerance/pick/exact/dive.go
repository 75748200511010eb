package exact

import (
	"cmp"
	"context"
	"math"
	"slices"
)

// pieceSteps is how many partial choices a depth-first search looks at before
// its part of the problem is split on one line and prepared anew, which makes
// the bounds of each piece tighter.
const pieceSteps = 200_000

// A dive finds the cheapest few choices that Judge passes without keeping a
// frontier: depth first below a ceiling that falls as the pool fills with
// cheaper ones. It serves where best first would need more memory than
// allowed. Of equally dear choices it keeps those it meets first, which are
// always the same but not always the first in lexicographic order.
type dive struct {
	s    *search
	ctx  context.Context
	want int   // how many choices
	left int   // partial choices until the next split
	err  error // of the context, or a broken promise

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
	d := &dive{s: s, ctx: ctx, want: want}
	whole := d.split(kept)
	switch {
	case d.err != nil:
		return 0, stopped, d.err
	case !whole:
		return 0, stopped, nil
	}
	return d.best(), exhausted, nil
}

// best is the cost that a choice must be below to be of interest.
func (d *dive) best() int64 {
	if len(d.s.pool) < d.want {
		return none
	}
	return d.s.pool[d.want-1].cost
}

// split searches the choices of the kept options, in pieces if need be. It is
// false when a limit stopped it.
func (d *dive) split(kept [][]int) bool {
	b, _ := d.s.prepare(kept, d.ceiling())
	if b == nil {
		return true
	}
	d.enter(b)
	d.left = d.s.limits.piece
	open := slices.IndexFunc(b.order, func(i int) bool { return len(b.kept[i]) > 1 })
	if open < 0 {
		d.left = len(b.order)
	}
	if d.below(0) {
		return true
	}
	if d.over() {
		return false
	}
	line := b.order[open]
	for _, o := range d.sorted[open] {
		part := slices.Clone(b.kept)
		part[line] = b.kept[line][o : o+1]
		if !d.split(part) {
			return false
		}
	}
	return true
}

// ceiling is the dearest cost still of interest.
func (d *dive) ceiling() int64 {
	if best := d.best(); best != none {
		return best - 1
	}
	return none
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
		if d.left--; d.left < 0 {
			return false
		}
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
