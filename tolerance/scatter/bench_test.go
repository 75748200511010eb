package scatter

import "testing"

// BenchmarkFill reports nanoseconds per draw.
func BenchmarkFill(b *testing.B) {
	for _, shape := range shapes {
		for _, lot := range []int{-1, 3} {
			name := string(shape) + "/alone"
			if lot >= 0 {
				name = string(shape) + "/lot"
			}
			b.Run(name, func(b *testing.B) {
				c := Column{Shape: shape, Lot: lot, Rho: 0.7, Centre: 1e-9, HalfWidth: 5e-11, Stream: 7}
				s := Source{Seed: 1, Units: 24}
				dst := make([]float64, 512)
				b.ReportAllocs()
				for i := 0; b.Loop(); i++ {
					s.Fill(dst, c, i*len(dst))
				}
				b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(dst)), "ns/draw")
			})
		}
	}
}
