package exact

import (
	"context"
	"fmt"
	"math"
	"time"
)

// A Point is a choice that no other one beats in both money and measure.
type Point struct {
	Choice  []int
	Cost    int64
	Measure float64
}

// A Walk is the trade between money and a measure.
type Walk struct {
	// Points are the efficient choices, from the cheapest on: costs rise and
	// measures fall, both strictly.
	Points []Point
	// Complete says that these are all within the money given. Otherwise a
	// limit ended the walk: Last.Stopped says which, no further point costs
	// less than Last.Bound, and where that is no more than the last point's
	// cost there may be one of the same cost in its place. Last.Choice, where
	// there is one, measures less than the last point but may not be the
	// cheapest that does.
	Complete bool
	// Last is the search that ended the walk. Where there are no points it says
	// what comes nearest.
	Last Outcome

	// Of all searches together.
	Searches, Examined, Simulated, CutByBound int
}

// Trade finds every efficient choice that costs at most so much: those to which
// no choice is both as cheap and of less measure, or cheaper and of no more.
// The last point is the one of least measure within the money.
//
// It asks for the cheapest choice, then again and again for the cheapest that
// measures less than the last (the method of bounded objectives: Haimes,
// Lasdon, Wismer 1971). problem(below) is the problem whose Judge asks besides
// that the measure be below; with +Inf it asks nothing more. Its Demands may
// say so too, and must where options are Alone. Whether Confirm passes a choice
// may not depend on below: it is asked at most once about each. Limits are for
// the whole walk.
func Trade(ctx context.Context, limits Limits, most int64, problem func(below float64) *Problem, measure func(choice []int) float64) (Walk, error) {
	w := walker{limits: limits.filled(), most: most, heard: map[string]bool{}}
	w.start()
	for below := math.Inf(1); ; {
		next, err := w.step(ctx, problem(below))
		if err != nil || next == nil {
			return w.Walk, err
		}
		m := measure(next)
		if !(m < below) {
			return w.Walk, fmt.Errorf("exact: choice %v measures %v, expected less than %v", next, m, below)
		}
		w.add(Point{next, w.Last.Cost, m})
		below = m
	}
}

type walker struct {
	Walk
	limits   Limits
	most     int64
	deadline time.Time
	heard    map[string]bool // what Confirm said
	steps    int
}

func (w *walker) start() {
	if w.limits.For > 0 {
		w.deadline = time.Now().Add(w.limits.For)
	}
}

// step finds the cheapest choice of a problem, nil when that ends the walk.
func (w *walker) step(ctx context.Context, p *Problem) ([]int, error) {
	if err := p.check(); err != nil {
		return nil, fmt.Errorf("exact: %w", err)
	}
	s := newSearch(p, w.limits)
	s.heard, s.most, s.deadline = w.heard, w.most, w.deadline
	s.steps, s.simulatedBefore = w.steps, w.Simulated
	if n := len(w.Points); n > 0 {
		s.least, s.bare = w.Points[n-1].Cost, true
	}
	err := s.cheapest(ctx)
	w.Last, w.steps = s.out, s.steps
	w.Searches++
	w.Examined += s.out.Examined
	w.Simulated += s.out.Simulated
	w.CutByBound += s.out.CutByBound
	w.Complete = err == nil && s.out.Proved && s.out.Choice == nil
	if err != nil || !s.out.Proved {
		return nil, err
	}
	return s.out.Choice, nil
}

// add puts a point at the end, in the place of one of the same cost.
func (w *walker) add(p Point) {
	if n := len(w.Points); n > 0 && w.Points[n-1].Cost == p.Cost {
		w.Points[n-1] = p
		return
	}
	w.Points = append(w.Points, p)
}
