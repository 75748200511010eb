package exact

import (
	"cmp"
	"context"
	"slices"
)

// nearestAll is the number of choices up to which all are judged to find the
// nearest; beyond it the nearest is the best seen and improved line by line.
const nearestAll = 200_000

// see keeps the nearest of the choices judged: least shortfall, then least
// cost, then first in order.
func (s *search) see(choice []int, cost int64, v Verdict) {
	if s.nearest.choice != nil {
		c := cmp.Compare(v.Shortfall, s.out.NearestVerdict.Shortfall)
		if cmp.Or(c, known{choice, cost}.compare(s.nearest)) >= 0 {
			return
		}
	}
	s.nearest = known{slices.Clone(choice), cost}
	s.out.NearestVerdict = v
}

// near completes the outcome of a search without a choice.
func (s *search) near(ctx context.Context) error {
	if s.out.Choice != nil {
		s.out.NearestVerdict = Verdict{}
		return nil
	}
	err := s.look(ctx)
	s.out.Nearest = s.nearest.choice
	return err
}

// look finds the nearest choice. A finished search has asked about every
// choice that Judge passes in the order of cost, so if there was one the
// cheapest is known already.
func (s *search) look(ctx context.Context) error {
	if s.out.Proved && s.nearest.choice != nil && s.out.NearestVerdict.Meets {
		s.out.NearestExact = true
		return nil
	}
	if s.out.Candidates > nearestAll {
		return s.improve(ctx)
	}
	choice := make([]int, len(s.p.Lines))
	for {
		if err := ctx.Err(); err != nil || s.hurried() {
			return err
		}
		if cost := s.p.cost(choice); cost < Unavailable && !s.answers[name(choice)].judged {
			s.out.Examined++
			s.see(choice, cost, s.p.judge(choice))
		}
		if !s.p.next(choice) {
			s.out.NearestExact = true
			return nil
		}
	}
}

// hurried says that time is over and something near is known.
func (s *search) hurried() bool { return s.nearest.choice != nil && s.expired() }

// next steps to the choice that follows in lexicographic order.
func (p *Problem) next(choice []int) bool {
	for i := len(choice) - 1; i >= 0; i-- {
		choice[i]++
		if choice[i] < len(p.Lines[i].Options) {
			return true
		}
		choice[i] = 0
	}
	return false
}

// improve walks from the nearest choice seen to nearer ones, one line at a
// time, until no single change helps.
func (s *search) improve(ctx context.Context) error {
	if s.nearest.choice == nil {
		s.begin()
	}
	for {
		from := s.nearest
		for i := range from.choice {
			choice := slices.Clone(from.choice)
			for j := range s.p.Lines[i].Options {
				if err := ctx.Err(); err != nil || s.hurried() {
					return err
				}
				choice[i] = j
				if cost := s.p.cost(choice); cost < Unavailable {
					s.judge(choice, cost)
				}
			}
		}
		if from.compare(s.nearest) == 0 {
			return nil
		}
	}
}

// beginnings is how many choices are looked at to find one that can be bought.
const beginnings = 4096

// begin judges the first choice that can be bought, of those whose options
// step evenly from line to line.
func (s *search) begin() {
	choice := make([]int, len(s.p.Lines))
	for n := range beginnings {
		for i, l := range s.p.Lines {
			choice[i] = (n + n/len(l.Options)*i) % len(l.Options)
		}
		if cost := s.p.cost(choice); cost < Unavailable {
			s.judge(choice, cost)
			return
		}
	}
}
