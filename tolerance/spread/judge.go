package spread

import (
	"context"
	"fmt"
	"math"
	"slices"

	"batchwright/tolerance/build"
)

// Judgement is what a simulation says of a build's targets and trims, batch by
// batch, so that two builds that were drawn alike can be compared.
type Judgement struct {
	Targets    []Judged
	Trims      []TrimReport
	Yield      YieldReport
	Good       []int // units of each batch that meet every target
	Simulation Simulation
}

// Judged is the verdict on one target.
type Judged struct {
	TargetReport
	Complying []int    // units of each batch
	Changes   []Change // of a target on a change, at each of its conditions
}

// Change is how far an output moves to one condition. HalfWidth is the smallest
// that as many units stay within, of all that are built, as the target asks;
// for a target by worst case, that every corner stays within. Share is of the
// units within the target's limits.
type Change struct {
	Condition     string    `json:"condition"`
	HalfWidth     Figure    `json:"half_width"`
	Share         Figure    `json:"share"`
	ShareInterval [2]Figure `json:"share_interval"`
	Met           bool      `json:"met"`
	Why           string    `json:"why,omitempty"`
}

// Judge simulates what a build's targets ask about, and every trim. The model
// may be one of its targets alone.
func Judge(ctx context.Context, m *build.Model, o Options) (*Judgement, error) {
	n := newNodes(m, nil, allTargets(m), true)
	for t, target := range m.Build.Targets {
		if target.ChangeFrom >= 0 {
			for _, i := range m.Targets[t].Outputs {
				n.kept = append(n.kept, n.columnOf[i])
			}
		}
	}
	s, err := simulate(ctx, n, o)
	if err != nil {
		return nil, err
	}
	j := &Judgement{Yield: s.yield(), Good: s.perBatch(s.good), Simulation: Simulation{s.batches, s.units}}
	for k := range n.trims { // all of them
		j.Trims = append(j.Trims, s.trim(k))
	}
	for t := range m.Build.Targets {
		j.Targets = append(j.Targets, s.judged(t))
		if err := ctx.Err(); err != nil {
			return nil, err
		}
	}
	return j, nil
}

// judged is the verdict on the target of index t, all of which are judged.
func (s *sample) judged(t int) Judged {
	m := s.nodes.model
	target := m.Build.Targets[t]
	r := Judged{TargetReport: s.shareOf(t), Complying: s.perBatch(s.comply[t])}
	worst := make([]*WorstCase, len(m.Outputs))
	if target.WorstCase {
		for _, i := range m.Targets[t].Outputs {
			worst[i] = worstCase(m, m.Outputs[i].Node, m.Outputs[i].Trims)
		}
		r.TargetReport = s.target(t, worst)
	}
	if target.ChangeFrom < 0 {
		return r
	}
	for _, i := range m.Targets[t].Outputs {
		r.Changes = append(r.Changes, s.change(target, i, worst[i]))
	}
	return r
}

// change says how far an output moves, and how many units keep to the limits.
func (s *sample) change(t build.Target, output int, worst *WorstCase) Change {
	m := s.nodes.model
	values := s.values[s.nodes.columnOf[output]]
	inside := make([]bool, len(values))
	for i, x := range values {
		inside[i] = x >= t.Low && x <= t.High
	}
	share, low, high := ShareInterval(s.perBatch(inside), m.Build.Units, Confidence)
	c := Change{
		Condition: m.Build.Conditions[m.Outputs[output].Condition].Name,
		Share:     Figure(share), ShareInterval: [2]Figure{Figure(low), Figure(high)},
		HalfWidth: Figure(halfWidth(values, t.Share)), Met: share >= t.Share,
	}
	if math.IsNaN(float64(c.HalfWidth)) {
		c.Why = fmt.Sprintf("fewer than %.4g %% of the units have a change at all: their trims do not reach", 100*t.Share)
	}
	if worst != nil {
		c.HalfWidth = Figure(math.Max(math.Abs(float64(worst.Low)), math.Abs(float64(worst.High))))
		c.Met = float64(worst.Low) >= t.Low && float64(worst.High) <= t.High
		c.Why = worst.Why
	}
	return c
}

// halfWidth is the smallest distance from zero that a share of all values stays
// within; NaN where the values that are none leave too few.
func halfWidth(values []float64, share float64) float64 {
	var sizes []float64
	for _, x := range values {
		if !math.IsNaN(x) {
			sizes = append(sizes, math.Abs(x))
		}
	}
	need := int(math.Ceil(share*float64(len(values)) - 1e-9))
	if need > len(sizes) || need < 1 {
		return math.NaN()
	}
	slices.Sort(sizes)
	return sizes[need-1]
}
