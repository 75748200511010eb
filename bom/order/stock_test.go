package order

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"batchwright/bom/offer"
	"batchwright/bom/part"
)

// limited is a book whose stocks run out.
func limited(t interface{ Fatal(...any) }, rows ...string) *offer.Book {
	b, complaints := offer.Read("shop.csv", []byte("family,tolerance,from,to,series,at_least,price_each,multiple,stock\n"+
		strings.Join(rows, "\n")+"\n"), part.Embedded())
	if len(complaints) > 0 {
		t.Fatal(complaints)
	}
	return b
}

// written is the part with a coefficient of its own written on it, which makes a
// line of its own.
func written(p part.Part, ref string, coefficient float64) part.Part {
	p = p.Named(ref)
	p.Parameters[0].Temperature.Value = coefficient
	return p
}

// TestShelf asks what the price book knows as one thing.
func TestShelf(t *testing.T) {
	base := fit(t, "C1", "c0g", 220e-12, 0.05)
	rated := base.Named("C2")
	rated.Rated = 16
	gain := func(beta float64) part.Part {
		p := fit(t, "Q1", "small-signal-npn", 0, 0).Named("Q2")
		p.Parameters[0].Value = beta
		return p
	}
	for _, c := range []struct {
		name string
		a, b part.Part
		same bool
	}{
		{"a coefficient of its own", base, written(base, "C2", 1e-6), true},
		{"a rating of its own", base, rated, true},
		{"another prefix", base, fit(t, "C2", "c0g", 0.22*1e-9, 0.05), true},
		{"a transistor's gain", gain(100), gain(300), true},
		{"value", base, fit(t, "C2", "c0g", 270e-12, 0.05), false},
		{"grade", base, fit(t, "C2", "c0g", 220e-12, 0.01), false},
		{"family", base, fit(t, "C2", "polystyrene", 220e-12, 0.05), false},
		{"a transistor's family", gain(100), fit(t, "Q3", "small-signal-pnp", 0, 0), false},
		{"a trimmer's low end", trimmer(t, "CT1", "film-trimmer", 4e-12, 34e-12), trimmer(t, "CT2", "film-trimmer", 5e-12, 34e-12), false},
		{"a trimmer's high end", trimmer(t, "CT1", "film-trimmer", 4e-12, 34e-12), trimmer(t, "CT2", "film-trimmer", 4e-12, 30e-12), false},
		{"one trimmer", trimmer(t, "CT1", "film-trimmer", 4e-12, 34e-12), trimmer(t, "CT2", "film-trimmer", 4e-12, 34e-12), true},
	} {
		if got := Shelf(c.a) == Shelf(c.b); got != c.same {
			t.Errorf("%s: one shelf %t, want %t: %s and %s", c.name, got, c.same, Shelf(c.a), Shelf(c.b))
		}
	}
}

// TestStockAcrossLines has two lines of one thing that the book has so many of.
// Ten units take ten of each, without spares.
func TestStockAcrossLines(t *testing.T) {
	c := fit(t, "C1", "c0g", 220e-12, 0.05)
	two := []part.Part{c, written(c, "C2", 30e-6)}
	three := append(slices.Clone(two), written(c, "C3", 60e-6))
	npn := fit(t, "Q1", "small-signal-npn", 0, 0)
	strong := npn.Named("Q2")
	strong.Parameters[0].Value = 300
	for _, x := range []struct {
		name  string
		parts []part.Part
		rows  []string
		want  string // of each line what is bought, or why nothing is
	}{
		{"enough for both", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,20"}, "C1 10 for 1.00, C2 10 for 1.00"},
		{"one too few", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,19"},
			"C1 10 for 1.00, C2: shop.csv has 9 left beside the 10 on other lines, 10 are needed"},
		{"none at all", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,9"},
			"C1: shop.csv has 9, 10 are needed, C2: shop.csv has 9, 10 are needed"},
		{"what two others leave", three, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,25"},
			"C1 10 for 1.00, C2 10 for 1.00, C3: shop.csv has 5 left beside the 20 on other lines, 10 are needed"},
		// Packs of 8: 16 for the first, of 25 are 9 left, one pack of 8.
		{"packs", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,8,25"},
			"C1 16 for 1.60, C2: shop.csv has 8 left beside the 16 on other lines, 10 are needed"},
		{"packs that go up", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,8,32"}, "C1 16 for 1.60, C2 16 for 1.60"},
		// The break takes 15 for the first: 5 of 20 are left, too few for the second.
		{"a break", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,20", "c0g,5 %,10 pF,1 nF,E12,15,0.05,,20"},
			"C1 15 for 0.75, C2: shop.csv has 5 left beside the 15 on other lines, 10 are needed"},
		// Behind the cheap stock of 12 stands another price without end.
		{"what is left is dearer", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,12", "c0g,5 %,10 pF,1 nF,E12,2,0.30,,"}, "C1 10 for 1.00, C2 10 for 3.00"},
		{"no stock is no limit", two, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,"}, "C1 10 for 1.00, C2 10 for 1.00"},
		// The first needs 20 and takes them where there is no end; the stock of 12
		// is still there for the second.
		{"what is not taken stays", []part.Part{c, c.Named("C9"), two[1]},
			[]string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,12", "c0g,5 %,10 pF,1 nF,E12,2,0.30,,"}, "C1 20 for 6.00, C2 10 for 1.00"},
		{"transistors", []part.Part{npn, strong}, []string{"small-signal-npn,,,,,1,0.20,,15"},
			"Q1 10 for 2.00, Q2: shop.csv has 5 left beside the 10 on other lines, 10 are needed"},
		{"other values have stocks of their own", []part.Part{c, fit(t, "C2", "c0g", 270e-12, 0.05)}, []string{"c0g,5 %,10 pF,1 nF,E12,1,0.10,,10"}, "C1 10 for 1.00, C2 10 for 1.00"},
	} {
		t.Run(x.name, func(t *testing.T) {
			o := New(x.parts, 10, 0, limited(t, x.rows...), part.Embedded())
			lines := append(slices.Clone(o.Lines), o.Unoffered...)
			slices.SortFunc(lines, func(a, b Line) int { return compare(a.Refs[0], b.Refs[0]) })
			var words []string
			total := offer.Money(0)
			for _, l := range lines {
				if l.Why != "" {
					words = append(words, l.Refs[0]+": "+l.Why)
					continue
				}
				total += l.Price
				words = append(words, fmt.Sprintf("%s %d for %s", l.Refs[0], l.Buy, l.Price))
			}
			if got := strings.Join(words, ", "); got != x.want || o.Total != total {
				t.Errorf("got\n%s for %s, want\n%s for %s", got, o.Total, x.want, total)
			}
		})
	}
}

// TestStockAgainstNaive fills lines one after the other from rows that remember
// by themselves how many pieces are gone, trying every row and every number.
func TestStockAgainstNaive(t *testing.T) {
	type row struct{ least, each, multiple, stock int }
	base := fit(t, "C1", "c0g", 220e-12, 0.05)
	rapid.Check(t, func(t *rapid.T) {
		var rows []row
		var text []string
		for i := range rapid.IntRange(1, 4).Draw(t, "rows") {
			r := row{i + 1 + rapid.IntRange(0, 8).Draw(t, "at least")*4, rapid.IntRange(1, 9).Draw(t, "each"),
				rapid.IntRange(1, 6).Draw(t, "multiple"), rapid.IntRange(-1, 40).Draw(t, "stock")}
			if slices.ContainsFunc(rows, func(q row) bool { return q.least == r.least && q.multiple == r.multiple }) {
				continue // one price for each quantity
			}
			stock := fmt.Sprint(r.stock)
			if r.stock < 0 {
				stock = ""
			}
			rows = append(rows, r)
			text = append(text, fmt.Sprintf("c0g,5 %%,10 pF,1 nF,E12,%d,0.0%d,%d,%s", r.least, r.each, r.multiple, stock))
		}
		units, gone := rapid.IntRange(1, 20).Draw(t, "units"), 0
		var parts []part.Part
		var want []string
		for k := range rapid.IntRange(1, 4).Draw(t, "lines") {
			n := rapid.IntRange(1, 2).Draw(t, "pieces")
			for i := range n {
				parts = append(parts, written(base, fmt.Sprintf("C%d", 10*k+i+1), float64(k+1)*1e-6))
			}
			best, price, draws := 0, 0, false
			for buy := n * units; buy <= n*units+50; buy++ {
				for _, r := range rows {
					if buy < r.least || buy%r.multiple != 0 || r.stock >= 0 && buy > max(0, r.stock-gone) {
						continue
					}
					if c := buy * r.each; best == 0 || c < price || c == price && buy == best && draws && r.stock < 0 {
						best, price, draws = buy, c, r.stock >= 0
					}
				}
			}
			if draws {
				gone += best
			}
			want = append(want, fmt.Sprintf("C%d %d for %s", 10*k+1, best, offer.Money(100*price)))
		}
		o := New(parts, units, 0, limited(t, text...), part.Embedded())
		lines := append(slices.Clone(o.Lines), o.Unoffered...)
		slices.SortFunc(lines, func(a, b Line) int { return compare(a.Refs[0], b.Refs[0]) })
		var got []string
		for _, l := range lines {
			if l.Why != "" {
				l.Buy = 0
			}
			got = append(got, fmt.Sprintf("%s %d for %s", l.Refs[0], l.Buy, l.Price))
		}
		if !slices.Equal(got, want) {
			t.Fatalf("%d units of %d parts from\n%s\ngot %v\nwant %v", units, len(parts), strings.Join(text, "\n"), got, want)
		}
	})
}
