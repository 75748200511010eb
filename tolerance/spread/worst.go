package spread

import (
	"cmp"
	"context"
	"math"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"

	"batchwright/tolerance/build"
	"batchwright/tolerance/tape"
)

// byMagnitude is the order of x by falling magnitude.
func byMagnitude(x []float64) []int {
	order := make([]int, len(x))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		return cmp.Compare(math.Abs(x[b]), math.Abs(x[a]))
	})
	return order
}

// worstCase searches both extremes of a node.
func worstCase(m *build.Model, node tape.Ref, trims []int) *WorstCase {
	s := newSearch(m, node, trims)
	low, high := s.run(-1), s.run(1)
	w := &WorstCase{Limits: Limits{Figure(math.NaN()), Figure(math.NaN())}, AtLow: []Corner{}, AtHigh: []Corner{}}
	w.Searched = s.searched()
	if low.at == nil || high.at == nil {
		w.Why = "no point was found at which every trim reaches"
		return w
	}
	w.Low, w.High = Figure(low.value), Figure(high.value)
	w.AtLow, w.AtHigh = s.named(low.at), s.named(high.at)
	return w
}

// worstCases searches every output, in parallel, each node once and into its
// own place.
func worstCases(ctx context.Context, m *build.Model, workers int) ([]*WorstCase, error) {
	out := make([]*WorstCase, len(m.Outputs))
	first := map[tape.Ref]int{}
	var distinct []int
	for i, o := range m.Outputs {
		if _, there := first[o.Node]; !there {
			first[o.Node] = i
			distinct = append(distinct, i)
		}
	}
	if workers == 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	var next atomic.Int64
	var wait sync.WaitGroup
	for range workers {
		wait.Go(func() {
			for ctx.Err() == nil {
				k := int(next.Add(1)) - 1
				if k >= len(distinct) {
					return
				}
				o := m.Outputs[distinct[k]]
				out[distinct[k]] = worstCase(m, o.Node, o.Trims)
			}
		})
	}
	wait.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	guarantee(m, out, distinct)
	for i, o := range m.Outputs {
		out[i] = out[first[o.Node]]
	}
	return out, nil
}

// guarantee adds the interval bounds: nothing that meets the equations lies
// beyond them, though they may be far from attained where a part occurs in
// more than one place.
func guarantee(m *build.Model, list []*WorstCase, distinct []int) {
	var refs []tape.Ref
	for _, i := range distinct {
		refs = append(refs, m.Outputs[i].Node)
	}
	box := make([]tape.Interval, len(m.Inputs))
	for i, x := range m.Inputs {
		box[i] = tape.Interval{Low: x.Centre - x.HalfWidth, High: x.Centre + x.HalfWidth}
	}
	for k, b := range m.Graph.Program(refs...).Bounds(box) {
		list[distinct[k]].Guaranteed = &Limits{Figure(b.Low), Figure(b.High)}
	}
}

// reachWorstCase says whether a trim reaches at every corner searched, and
// names one where it does not.
func reachWorstCase(m *build.Model, t int) (reaches bool, corner []Corner) {
	n := m.Trims[t]
	l := Linearise(m, n.AtLow, n.AtHigh)
	rising := 1.0
	if l.Values[0] > l.Values[1] {
		rising = -1
	}
	low := newSearch(m, n.AtLow, n.Trims)
	high := newSearch(m, n.AtHigh, n.Trims)
	a, b := low.run(rising), high.run(-rising)
	switch {
	case a.at == nil || b.at == nil:
		return false, nil
	case rising*a.value > 0:
		return false, low.named(a.at)
	case rising*b.value < 0:
		return false, high.named(b.at)
	}
	return true, nil
}
