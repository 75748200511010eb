package explain

import (
	"context"
	"testing"
)

// BenchmarkBatch explains a batch of 24 of the first example from nothing, with
// a fault in every sixth unit.
func BenchmarkBatch(b *testing.B) {
	f := examples(b)[0]
	y := f.measure(nil, 24, 5, nil)
	for u := 0; u < len(y); u += 6 {
		y[u] = f.measure(f.x.faults[37*(u+1)%len(f.x.faults)], 1, uint64(u), nil)[0]
	}
	sheet := filled(f, y)
	b.ResetTimer()
	for range b.N {
		if _, err := Explain(context.Background(), f.model, f.sheet, sheet, Options{Seed: 1}); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkUnits explains 24 healthy units with the hypotheses predicted already,
// each by itself.
func BenchmarkUnits(b *testing.B) {
	f := examples(b)[0]
	sheet := filled(f, f.measure(nil, 24, 5, nil))
	for range b.N {
		if _, _, err := f.x.alone(context.Background(), sheet); err != nil {
			b.Fatal(err)
		}
	}
}
