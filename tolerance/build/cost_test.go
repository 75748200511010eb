package build_test

import (
	"testing"
	"time"

	"batchwright/tolerance/stage"
	"batchwright/tolerance/tape"
)

// BenchmarkKinds measures, for a block of 256 units, the outputs of each kind's
// fragment as a build computes them: parts that scatter, settings that do not.
// What feeds the stage counts too, so a kind's share is smaller than it says.
// The metric x-tank is the ratio to a plain tuned tank measured in the same run.
func BenchmarkKinds(b *testing.B) {
	tank := cost(b, "tuned-tank")
	for _, name := range stage.Names() {
		b.Run(name, func(b *testing.B) {
			run := runner(b, name)
			for b.Loop() {
				run()
			}
			own := float64(b.Elapsed().Nanoseconds()) / float64(b.N)
			b.ReportMetric(own/units, "ns/unit")
			b.ReportMetric(own/tank, "x-tank")
		})
	}
}

const units = 256

// cost is what a block of a kind takes, ns: the least of some runs.
func cost(b *testing.B, kind string) float64 {
	run := runner(b, kind)
	least := time.Duration(1 << 62)
	for range 200 {
		start := time.Now()
		run()
		least = min(least, time.Since(start))
	}
	return float64(least.Nanoseconds())
}

// runner evaluates a block of a kind's outputs.
func runner(b *testing.B, kind string) func() {
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
		if o.Name.Stage == last {
			refs = append(refs, o.Node)
		}
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
