package exact

import (
	"cmp"
	"context"
	"encoding/binary"
	"fmt"
	"slices"
)

// An answer is what is known of a full choice.
type answer struct{ judged, meets, refused bool }

// A known choice that Judge passed, with its cost.
type known struct {
	choice []int
	cost   int64
}

func (k known) compare(o known) int {
	return cmp.Or(cmp.Compare(k.cost, o.cost), slices.Compare(k.choice, o.choice))
}

// price is the exact cost of a full choice, checked against the floors it was
// promised to be above.
func (s *search) price(choice []int) (int64, error) {
	cost := s.p.cost(choice)
	if floor := s.p.floor(choice); cost < floor {
		return 0, fmt.Errorf("exact: choice %v costs %d, expected at least the sum of its floors, %d", choice, cost, floor)
	}
	return cost, nil
}

// ask judges a choice, once, and has it confirmed where Judge passes it.
func (s *search) ask(choice []int, cost int64) (ending, error) {
	if !s.judge(choice, cost) || s.answers[name(choice)].refused {
		return exhausted, nil
	}
	_, known := s.heard[name(choice)]
	switch {
	case s.expired():
		s.out.Stopped = OutOfTime
		return stopped, nil
	case s.simulated() && !known:
		s.out.Stopped = OutOfSimulations
		return stopped, nil
	}
	ok, err := s.confirm(choice)
	switch {
	case err != nil:
		return stopped, err
	case ok:
		s.out.Choice, s.out.Cost = slices.Clone(choice), cost
		return confirmed, nil
	}
	return doubted, nil
}

// remembered is how many answers are kept at most; a choice met again after
// that is judged again.
const remembered = 1 << 18

// judge says whether Judge passes a choice and remembers the answer.
func (s *search) judge(choice []int, cost int64) bool {
	key := name(choice)
	if a := s.answers[key]; a.judged {
		return a.meets
	}
	v := s.p.judge(choice)
	s.out.Examined++
	if len(s.answers) < remembered {
		s.answers[key] = answer{judged: true, meets: v.Meets}
	}
	s.see(choice, cost, v)
	return v.Meets
}

func (s *search) confirm(choice []int) (bool, error) {
	if s.p.Confirm == nil {
		return true, nil
	}
	ok, known := s.heard[name(choice)]
	if !known {
		var err error
		s.out.Simulated++
		if ok, err = s.p.Confirm(slices.Clone(choice)); err != nil {
			return false, fmt.Errorf("exact: confirming: %w", err)
		}
	}
	if s.heard != nil {
		s.heard[name(choice)] = ok
	}
	if !ok {
		s.refused++
		s.answers[name(choice)] = answer{judged: true, meets: true, refused: true}
		s.forget(choice)
	}
	return ok, nil
}

// lateAnswers is how many choices are put to Confirm after the time is over.
const lateAnswers = 4

// settle makes the best of a search that was stopped: the cheapest of the
// choices known that Confirm confirms, of a few only when time is over.
func (s *search) settle(ctx context.Context) error {
	for asked := 0; len(s.pool) > 0; asked++ {
		k := s.pool[0]
		if err := ctx.Err(); err != nil {
			return err
		}
		if s.simulated() || s.expired() && asked >= lateAnswers {
			return nil
		}
		ok, err := s.confirm(k.choice)
		if err != nil {
			return err
		}
		if ok {
			s.out.Choice, s.out.Cost = k.choice, k.cost
			return nil
		}
	}
	return nil
}

// name is a choice as a map key.
func name(choice []int) string {
	b := make([]byte, 0, 2*len(choice))
	for _, j := range choice {
		b = binary.BigEndian.AppendUint16(b, uint16(j))
	}
	return string(b)
}
