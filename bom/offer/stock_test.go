package offer

import (
	"testing"

	"pgregory.net/rapid"

	"batchwright/bom/part"
)

// TestAfter takes pieces from the rows that have a stock, and leaves the offer
// itself and rows without one alone.
func TestAfter(t *testing.T) {
	o := rows([4]int{1, 100, 1, 30}, [4]int{10, 70, 1, 20}, [4]int{50, 60, 1, NoLimit})
	for _, c := range []struct {
		taken        int
		first, other int
	}{{0, 30, 20}, {7, 23, 13}, {20, 10, 0}, {25, 5, 0}, {31, 0, 0}} {
		left := o.After(c.taken)
		if left.Rows[0].Stock != c.first || left.Rows[1].Stock != c.other || left.Rows[2].Stock != NoLimit {
			t.Errorf("after %d: %+v", c.taken, left.Rows)
		}
		if left.Family != "c0g" || o.Rows[0].Stock != 30 || o.Rows[1].Stock != 20 {
			t.Errorf("after %d the offer itself is %+v", c.taken, o.Rows)
		}
	}
}

// TestDraws is what a purchase takes from the stock: all of it, or nothing where
// it is bought at a price without one.
func TestDraws(t *testing.T) {
	for _, c := range []struct {
		name   string
		o      *Offer
		needed int
		want   int
	}{
		{"nothing needed", rows([4]int{1, 100, 1, 30}), 0, 0},
		{"from the stock", rows([4]int{1, 100, 1, 30}), 12, 12},
		{"in packs", rows([4]int{1, 100, 5, 30}), 12, 15},
		{"up to a break", rows([4]int{1, 100, 1, 30}, [4]int{20, 10, 1, 30}), 12, 20},
		{"without a stock", rows([4]int{1, 100, 1, NoLimit}), 12, 0},
		{"beyond the stock", rows([4]int{1, 100, 1, 10}, [4]int{1, 200, 1, NoLimit}), 12, 0},
		{"within the stock", rows([4]int{1, 100, 1, 12}, [4]int{1, 200, 1, NoLimit}), 12, 12},
		{"alike, the stock is spared", rows([4]int{1, 100, 1, 30}, [4]int{2, 100, 1, NoLimit}), 12, 0},
		{"more than there is", rows([4]int{1, 100, 1, 10}), 12, 0},
		{"more than can be bought", rows([4]int{1, 100, 1, NoLimit}), mostPieces + 1, 0},
	} {
		if got := c.o.Draws(c.needed); got != c.want {
			t.Errorf("%s: %d, want %d", c.name, got, c.want)
		}
	}
}

// TestLimited asks for any price with a stock.
func TestLimited(t *testing.T) {
	b, complaints := Read("shop.csv", []byte(`family,tolerance,from,to,series,at_least,price_each,multiple,stock
c0g,5 %,10 pF,1 nF,E12,1,0.10,,
c0g,5 %,10 pF,1 nF,E12,100,0.075,50,900
c0g,1 %,10 pF,1 nF,E12,1,0.10,,
mica,1 %,10 pF,1 nF,E12,1,0.10,,0
`), part.Embedded())
	if len(complaints) > 0 {
		t.Fatal(complaints)
	}
	for _, c := range []struct {
		p    part.Part
		want bool
	}{
		{fit(t, "c0g", 220e-12, 0.05), true}, {fit(t, "c0g", 220e-12, 0.01), false},
		{fit(t, "mica", 220e-12, 0.01), true}, {fit(t, "polystyrene", 220e-12, 0.05), false},
	} {
		if got := b.Limited(c.p); got != c.want {
			t.Errorf("%s %s: %t", c.p.Family, c.p.ValueText(), got)
		}
	}
}

// TestBuyOneAfterAnother never takes more from a stock than there is, and what is
// bought later never costs less than alone.
func TestBuyOneAfterAnother(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		stock := rapid.IntRange(0, 80).Draw(t, "stock")
		o := &Offer{}
		for range rapid.IntRange(1, 3).Draw(t, "rows") {
			r := Row{AtLeast: rapid.IntRange(1, 30).Draw(t, "at least"), Each: Money(rapid.IntRange(0, 50).Draw(t, "each")),
				Multiple: rapid.IntRange(1, 9).Draw(t, "multiple"), Stock: stock}
			if rapid.IntRange(0, 3).Draw(t, "limited") == 0 {
				r.Stock = NoLimit
			}
			o.Rows = append(o.Rows, r)
		}
		taken := 0
		for range rapid.IntRange(1, 5).Draw(t, "lines") {
			needed := rapid.IntRange(1, 40).Draw(t, "needed")
			left := o.After(taken)
			_, _, alone, _ := o.Buy(needed)
			buy, _, price, ok := left.Buy(needed)
			if ok && price < alone {
				t.Fatalf("%d cost %d after %d are taken, %d alone", needed, price, taken, alone)
			}
			draws := left.Draws(needed)
			if draws != 0 && draws != buy {
				t.Fatalf("%d bought, %d drawn", buy, draws)
			}
			if taken += draws; taken > stock {
				t.Fatalf("%d drawn from %d", taken, stock)
			}
		}
	})
}
