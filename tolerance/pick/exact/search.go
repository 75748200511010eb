package exact

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"slices"
	"time"
)

// none is the ceiling that cuts nothing.
const none = math.MaxInt64

// Cheapest finds the cheapest choice that Judge passes and Confirm confirms,
// and of equally cheap ones the first in lexicographic order.
//
// It searches best first: partial choices wait in the order of a lower bound
// of what any completion costs, and the first full choice to come out with its
// exact cost, judged and confirmed, is the cheapest there is. The bound is the
// best of a few Lagrangian ones (money plus the demands' linear conditions at
// prices); a partial choice from which some demand is out of reach is cut.
//
// Before that a local search looks for a good choice. Its cost is a ceiling:
// nothing above it needs looking at as long as that choice, or a cheaper one,
// is confirmed. When Confirm refuses, what was left out on the strength of the
// ceiling or of dominance is let in again.
//
// The error is that of the context, of Confirm, or a fault in the problem;
// the outcome then holds what was known so far.
func (p *Problem) Cheapest(ctx context.Context, limits Limits) (Outcome, error) {
	if err := p.check(); err != nil {
		return Outcome{}, fmt.Errorf("exact: %w", err)
	}
	s := newSearch(p, limits.filled())
	if limits.For > 0 {
		s.deadline = time.Now().Add(limits.For)
	}
	err := s.cheapest(ctx)
	return s.out, err
}

// filled are the limits with their defaults.
func (l Limits) filled() Limits {
	if l.Nodes <= 0 {
		l.Nodes = DefaultNodes
	}
	if l.Steps <= 0 {
		l.Steps = DefaultSteps
	}
	if l.leaf <= 0 {
		l.leaf = leafChoices
	}
	return l
}

func newSearch(p *Problem, limits Limits) *search {
	s := &search{p: p, limits: limits, answers: map[string]answer{}, most: none, least: math.MinInt64 / 2}
	s.out.Candidates = p.candidates()
	return s
}

func (s *search) cheapest(ctx context.Context) error {
	err := s.run(ctx)
	if err == nil && !s.bare {
		err = s.near(ctx)
	}
	return err
}

type search struct {
	p       *Problem
	limits  Limits
	out     Outcome
	answers map[string]answer
	pool    []known // the cheapest seen that Judge passes and Confirm did not refuse
	refused int
	steps   int   // partial choices looked at
	want    int   // how many choices the pool has room for, at least poolSize
	nearest known // the nearest seen so far, with its verdict in out

	// Of a walk of several searches.
	most, least     int64           // costs above are of no interest; none is below
	heard           map[string]bool // what Confirm said before
	simulatedBefore int             // how often it was asked
	bare            bool            // what comes nearest is of no interest

	deadline time.Time // zero: none
	late     bool      // it has passed
}

// expired looks at the clock.
func (s *search) expired() bool {
	if !s.late && !s.deadline.IsZero() {
		s.late = !time.Now().Before(s.deadline)
	}
	return s.late
}

// spent says that the search must end because of the context, the time or the
// steps, and which.
func (s *search) spent(ctx context.Context) (bool, error) {
	switch {
	case ctx.Err() != nil:
		return true, ctx.Err()
	case s.expired():
		s.out.Stopped = OutOfTime
	case s.steps >= s.limits.Steps:
		s.out.Stopped = OutOfSteps
	}
	return s.out.Stopped != "", nil
}

// simulated says that no call of Confirm is left.
func (s *search) simulated() bool {
	return s.limits.Simulations > 0 && s.simulatedBefore+s.out.Simulated >= s.limits.Simulations
}

// An ending is why a pass over the choices came to its end.
type ending int

const (
	exhausted ending = iota // nothing left within the ceiling
	confirmed
	doubted // Confirm refused, and options had been dropped that may now matter
	crowded // no memory left for more partial choices
	stopped // a limit was reached
)

// run makes passes, each with fewer things left out, until one is conclusive.
func (s *search) run(ctx context.Context) error {
	all := s.p.all()
	if slices.ContainsFunc(all, func(o []int) bool { return len(o) == 0 }) {
		s.out.Proved, s.out.Bound = true, Unavailable
		return nil
	}
	kept, dominated := s.p.undominated()
	s.out.Bound = max(s.p.leastFloor(), s.least)
	if err := cmp.Or(s.start(ctx, kept), s.aim(ctx, kept)); err != nil {
		return err
	}
	ceiling := s.ceiling()
	for raised := 0; ; {
		b, pegged := s.prepare(kept, ceiling)
		s.out.Dominated, s.out.Pegged = dominated, pegged
		end, err := exhausted, error(nil)
		if b != nil {
			end, err = s.pass(ctx, b, ceiling, dominated > 0)
		}
		switch {
		case err != nil:
			return err
		case end == confirmed:
			s.out.Proved = true
			return nil
		case end == crowded:
			return s.deep(ctx, kept, dominated > 0)
		case end == stopped:
			return s.settle(ctx)
		case end == exhausted && ceiling == s.most && (dominated == 0 || s.refused == 0):
			s.out.Proved = true
			return nil
		case end == exhausted:
			ceiling = s.raise(ceiling, raised)
			raised++
		}
		kept, dominated = all, 0
	}
}

// raise lets in dearer choices after all within the ceiling were refused: up
// to the cheapest known, or a few times as far above the floors.
func (s *search) raise(ceiling int64, raised int) int64 {
	if ceiling == s.most || raised > 20 {
		return s.most
	}
	s.out.Bound = max(s.out.Bound, ceiling)
	if next := s.ceiling(); next != s.most {
		return max(next, ceiling)
	}
	above := max(ceiling-s.p.leastFloor(), 1)
	if raised > 2 || above > Unavailable/8 {
		return s.most
	}
	return min(ceiling+4*above, s.most)
}

// mostWanted is how many choices a dive looks for at most.
const mostWanted = 4096

// deep goes on by dives: each finds the cheapest few choices not refused, which
// are then put to Confirm in the order of cost. The first dive wants one only;
// the more are refused, the more the next one looks for.
func (s *search) deep(ctx context.Context, kept [][]int, wary bool) error {
	for want := 1; ; want = min(16*want, mostWanted) {
		upTo, end, err := s.dive(ctx, kept, want)
		if err != nil {
			return err
		}
		if end == stopped {
			return s.settle(ctx)
		}
		for len(s.pool) > 0 && s.pool[0].cost <= upTo && !(wary && s.refused > 0) {
			s.out.Bound = max(s.out.Bound, s.pool[0].cost)
			if err := ctx.Err(); err != nil {
				return err
			}
			end, err = s.ask(s.pool[0].choice, s.pool[0].cost)
			if err != nil {
				return err
			}
			if end == stopped {
				return s.settle(ctx)
			}
			if end == confirmed {
				s.out.Proved = true
				return nil
			}
		}
		switch {
		case wary && s.refused > 0:
			kept, wary = s.p.all(), false
		case upTo == none:
			s.out.Proved = true
			return nil
		}
	}
}

// pass searches the bank's options in the order of cost up to the ceiling.
// wary asks it to end at the first refusal.
func (s *search) pass(ctx context.Context, b *bank, ceiling int64, wary bool) (ending, error) {
	f := newFrontier(b.order, b.kept)
	at, choice := b.newStanding(), make([]int, len(b.order))
	f.push(f.root(max(s.p.leastFloor(), s.least)))
	for len(f.heap) > 0 {
		i := f.pop()
		n := f.nodes[i]
		s.out.Bound = max(s.out.Bound, n.key)
		if err := ctx.Err(); err != nil {
			return stopped, err
		}
		switch {
		case int(n.depth) < f.lines:
			if over, err := s.spent(ctx); over {
				return stopped, err
			}
			if !f.room(len(b.kept[b.order[n.depth]]), s.limits.Nodes) {
				return crowded, nil
			}
			f.settled(choice, i)
			b.stand(at, choice, int(n.depth))
			s.expand(f, b, at, i, ceiling)
		case int(n.depth) == f.lines:
			f.least(choice, i)
			cost, err := s.price(choice)
			if err != nil {
				return stopped, err
			}
			if cost > ceiling || cost >= Unavailable {
				s.out.CutByBound++
			} else {
				f.push(f.priced(i, max(cost, n.key)))
			}
		default:
			f.least(choice, i)
			end, err := s.ask(choice, n.key)
			if err != nil || end == confirmed || end == stopped || end == doubted && wary {
				return end, err
			}
		}
	}
	return exhausted, nil
}

// expand pushes the children of a node that are still within reach.
func (s *search) expand(f *frontier, b *bank, at *standing, i int32, ceiling int64) {
	n := f.nodes[i]
	depth := int(n.depth)
	s.steps += len(b.kept[b.order[depth]])
	for o := range b.kept[b.order[depth]] {
		bound := b.bound(at, depth, o, b.below(ceiling))
		if math.IsInf(bound, 1) {
			s.out.CutByBound++
			continue
		}
		f.push(f.child(i, o, max(n.key, b.lattice.up(bound))))
	}
}

// all keeps every option of every line that can be bought.
func (p *Problem) all() [][]int {
	kept := make([][]int, len(p.Lines))
	for i, l := range p.Lines {
		for j, o := range l.Options {
			if o.Floor < Unavailable {
				kept[i] = append(kept[i], j)
			}
		}
	}
	return kept
}

// leastFloor is what any choice costs at least.
func (p *Problem) leastFloor() int64 {
	sum := p.Base
	for _, l := range p.Lines {
		least := Unavailable
		for _, o := range l.Options {
			least = min(least, o.Floor)
		}
		sum += least
	}
	return sum
}
