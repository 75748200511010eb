package offer

import (
	"testing"

	"batchwright/bom/part"
	"batchwright/data"
)

// BenchmarkOffer looks up and buys one part of the embedded book.
func BenchmarkOffer(b *testing.B) {
	f, _ := part.Embedded().Family("metal-film-100")
	p, err := f.Fit("R1", 4750, 0.01)
	if err != nil {
		b.Fatal(err)
	}
	book := Embedded()
	for b.Loop() {
		o, ok := book.Offer(p)
		if !ok {
			b.Fatal("not offered")
		}
		o.Buy(96)
	}
}

// BenchmarkReadEmbedded reads the embedded book, which every run does once.
func BenchmarkReadEmbedded(b *testing.B) {
	families := part.Embedded()
	for b.Loop() {
		if _, complaints := Read("prices.csv", data.Prices, families); len(complaints) > 0 {
			b.Fatal(complaints)
		}
	}
}
