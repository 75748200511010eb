package build_test

import (
	"testing"
	"time"

	"batchwright/tolerance/stage"
	"batchwright/tolerance/tape"
)

// BenchmarkKinds measures, for a block of 256 units, the outputs of each kind's
// fragment as a build computes them: parts that scatter, settings that do not.
// The metric x-tank is the ratio to a plain tuned tank measured in the same run,
// less what the oscillators that feed the fragment take; each is the shortest of
// 200 runs.
func BenchmarkKinds(b *testing.B) {
	tank := least(runner(b, "tuned-tank", false))
	for _, name := range stage.Names() {
		b.Run(name, func(b *testing.B) {
			run := runner(b, name, false)
			for b.Loop() {
				run()
			}
			own := least(run) - least(runner(b, name, true))
			b.ReportMetric(own/units, "ns/unit")
			b.ReportMetric(own/tank, "x-tank")
		})
	}
}

const units = 256

// least is the shortest of some runs, ns.
func least(run func()) float64 {
	shortest := time.Duration(1 << 62)
	for range 200 {
		start := time.Now()
		run()
		shortest = min(shortest, time.Since(start))
	}
	return float64(shortest.Nanoseconds())
}

// runner evaluates a block of a kind's outputs, or of those of what feeds it.
func runner(b *testing.B, kind string, feed bool) func() {
	k, _ := stage.Find(kind)
	built, err := read(around(b, k))
	if err != nil {
		b.Fatal(err)
	}
	m, err := built.Compile()
	if err != nil {
		b.Fatal(err)
	}
	last := built.Stages[len(built.Stages)-1].Name
	var refs []tape.Ref
	for _, o := range m.Outputs {
		if (o.Name.Stage != last) == feed {
			refs = append(refs, o.Node)
		}
	}
	if len(refs) == 0 {
		return func() {}
	}
	p := m.Graph.Program(refs...)
	in, out := make([][]float64, len(m.Inputs)), make([][]float64, len(refs))
	for i, x := range m.Inputs {
		in[i] = make([]float64, units)
		for lane := range in[i] {
			in[i][lane] = x.Centre + x.HalfWidth*(float64(lane%17)-8)/8
		}
	}
	for i := range out {
		out[i] = make([]float64, units)
	}
	f := p.NewFrame(units)
	return func() { p.Values(out, in, f) }
}
