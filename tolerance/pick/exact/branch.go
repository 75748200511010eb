package exact

import (
	"cmp"
	"slices"
)

// leafChoices is up to how many choices a piece of the problem is searched
// line by line; a larger one is split.
const leafChoices = 1_000_000

// pivotsAtMost ends a linear relaxation that would not end by itself.
const pivotsAtMost = 400

// lookahead is how many lines are tried before a piece is split on one.
const lookahead = 4

// A piece is a part of the problem: some options of each line.
type piece struct {
	kept   [][]int
	bound  float64 // no choice in it has a lower sum of floors
	r      *relaxation
	mixed  *tableau // solved
	prices []float64
}

// branch searches a piece: it bounds it by its linear relaxation, leaves out
// the options that no choice within the ceiling can hold, and either looks
// through what is left or splits it in two. It is false when a limit stopped
// it.
func (d *dive) branch(p *piece) bool {
	if d.over() {
		d.leave(p)
		return false
	}
	defer d.release(p)
	if !d.tighten(p) {
		d.s.out.CutByBound++
		return true
	}
	if choices(p.kept) <= float64(d.s.limits.leaf) {
		return d.search(p)
	}
	whole := true
	for _, part := range d.split(p) {
		switch {
		case part.bound > d.target():
			d.s.out.CutByBound++
		case whole:
			whole = d.branch(part)
		default:
			d.leave(part)
		}
	}
	return whole
}

// release lets another piece have the memory of a tableau.
func (d *dive) release(p *piece) {
	if p.mixed != nil {
		d.free = append(d.free, p.mixed)
		p.mixed = nil
	}
}

// spare is a tableau to copy to.
func (d *dive) spare() *tableau {
	last := len(d.free) - 1
	if last < 0 {
		return &tableau{}
	}
	t := d.free[last]
	d.free = d.free[:last]
	return t
}

// leave notes a piece that is not looked at.
func (d *dive) leave(p *piece) { d.open = min(d.open, d.lattice.up(p.bound)) }

// target is the greatest sum of floors still of interest.
func (d *dive) target() float64 {
	if c := d.ceiling(); c != none {
		return min(float64(d.lattice.down(c)), d.dearest)
	}
	return d.dearest
}

// tighten leaves out options until that hardly helps the bound. It is false
// when nothing is left within the ceiling.
func (d *dive) tighten(p *piece) bool {
	for {
		if p.mixed == nil {
			p.r = d.s.p.relax(p.kept)
			p.mixed = newTableau(p.r)
			d.mix(p)
		}
		target := d.target()
		if p.bound > target {
			return false
		}
		left, gone := p.r.peg(p.prices, target)
		if slices.ContainsFunc(left, func(o []int) bool { return len(o) == 0 }) {
			return false
		}
		if gone > 0 {
			p.kept, p.r = left, p.r.narrow(left)
		}
		if !d.curved || gone*10 < p.r.options() {
			return true
		}
		d.release(p) // the rows of shares follow the variances that are left
	}
}

// mix solves the relaxation of a piece and takes its bound and prices.
func (d *dive) mix(p *piece) {
	p.mixed.solve(d.target(), pivotsAtMost)
	d.s.steps += p.mixed.pivots * p.mixed.rows
	p.prices = make([]float64, len(p.r.limit))
	p.mixed.prices(p.prices)
	p.bound = max(p.bound, p.r.bound(p.r.whole(), p.prices, d.best)-p.r.rounding(p.prices))
}

// split halves a piece on the line where both halves are bounded best, the
// more promising half first.
func (d *dive) split(p *piece) []*piece {
	cuts := d.cuts(p)
	var best []*piece
	most := -1.0
	for _, c := range cuts[:min(len(cuts), lookahead)] {
		parts := []*piece{d.part(p, c.line, c.low), d.part(p, c.line, c.high)}
		reach := d.target() - p.bound + 1
		score := 1.0
		for _, part := range parts {
			score *= 1e-3*reach + min(part.bound-p.bound, reach)
		}
		if score > most {
			parts, best, most = best, parts, score
		}
		for _, part := range parts {
			d.release(part)
		}
	}
	slices.SortStableFunc(best, func(x, y *piece) int { return cmp.Compare(x.bound, y.bound) })
	return best
}

// part is a piece with only some options of one line.
func (d *dive) part(p *piece, line int, options []int) *piece {
	kept := slices.Clone(p.kept)
	kept[line] = options
	q := &piece{kept: kept, bound: p.bound, r: p.r.narrow(kept), mixed: d.spare()}
	p.mixed.narrow(q.mixed, kept)
	d.mix(q)
	if d.curved {
		d.release(q)
	}
	return q
}

// A cut divides a line's options, in the order of floors.
type cut struct {
	line      int
	low, high []int
	even      float64 // the smaller part's share of the mixture
}

// cuts lists how to split the lines, the ones that the mixture divides most
// evenly first; where it divides none, the line with most options.
func (d *dive) cuts(p *piece) []cut {
	weights := p.mixed.weights()
	var out []cut
	longest := 0
	for i, options := range p.kept {
		if len(options) > len(p.kept[longest]) {
			longest = i
		}
		if len(options) > 1 {
			if c := d.cut(i, options, weights); c.even > 1e-6 {
				out = append(out, c)
			}
		}
	}
	if out == nil {
		return []cut{d.cut(longest, p.kept[longest], nil)}
	}
	slices.SortStableFunc(out, func(x, y cut) int { return cmp.Compare(y.even, x.even) })
	return out
}

// cut divides a line's options so that the weights of both parts are as even
// as can be; without weights, in the middle.
func (d *dive) cut(line int, options []int, weights map[[2]int32]float64) cut {
	l := &d.s.p.Lines[line]
	sorted := slices.Clone(options)
	slices.SortStableFunc(sorted, func(x, y int) int { return cmp.Compare(l.Options[x].Floor, l.Options[y].Floor) })
	at, even, sum := len(sorted)/2, 0.0, 0.0
	for k, j := range sorted[:len(sorted)-1] {
		sum += weights[[2]int32{int32(line), int32(j)}]
		if e := min(sum, 1-sum); e > even {
			at, even = k+1, e
		}
	}
	low, high := slices.Clone(sorted[:at]), slices.Clone(sorted[at:])
	slices.Sort(low)
	slices.Sort(high)
	return cut{line, low, high, even}
}

// search looks through the choices of a piece line by line.
func (d *dive) search(p *piece) bool {
	d.enter(newBank(p.r, [][]float64{p.prices}))
	if d.below(0) {
		return true
	}
	d.leave(p)
	return false
}

// choices is how many a piece holds.
func choices(kept [][]int) float64 {
	n := 1.0
	for _, options := range kept {
		n *= float64(len(options))
	}
	return n
}

// curved says that some demand's rows are not exact but follow the variances
// left.
func (p *Problem) curved() bool {
	return slices.ContainsFunc(p.Demands, func(d Demand) bool { return !d.WorstCase && d.Share > 0.5 })
}
