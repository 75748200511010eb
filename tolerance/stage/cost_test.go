package stage

import "testing"

// BenchmarkKinds measures each kind's outputs for a block of 256 units; the
// metric ns/unit of tuned-tank is the yardstick for the others.
func BenchmarkKinds(b *testing.B) {
	const lanes = 256
	for _, k := range fixedKinds() {
		b.Run(k.Name, func(b *testing.B) {
			c := newCircuit(b, k.Name, lanes)
			in := spread(c.fill(b, examples[k.Name]), lanes)
			dst := spread(make([]float64, len(c.outputs)), lanes)
			b.ReportAllocs()
			for b.Loop() {
				c.program.Values(dst, in, c.frame)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/lanes, "ns/unit")
		})
	}
}

// spread makes a column of each value, slightly different from unit to unit.
func spread(values []float64, lanes int) [][]float64 {
	out := make([][]float64, len(values))
	for i, v := range values {
		out[i] = make([]float64, lanes)
		for lane := range out[i] {
			out[i][lane] = v * (1 + 1e-4*float64(lane%17-8))
		}
	}
	return out
}
