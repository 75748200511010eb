package offer

import (
	"testing"

	"pgregory.net/rapid"

	"batchwright/bom/part"
	"batchwright/bom/series"
)

// rows reads rows of (at least, each, multiple, stock).
func rows(list ...[4]int) *Offer {
	o := &Offer{Family: "c0g"}
	for _, r := range list {
		o.Rows = append(o.Rows, Row{AtLeast: r[0], Each: Money(r[1]), Multiple: r[2], Stock: r[3]})
	}
	return o
}

// Each case is worked out beside it.
func TestBuy(t *testing.T) {
	breaks := rows([4]int{1, 100, 1, NoLimit}, [4]int{10, 70, 1, NoLimit}, [4]int{100, 40, 50, NoLimit})
	for _, c := range []struct {
		name   string
		o      *Offer
		needed int
		buy    int
		each   Money
		price  Money
		ok     bool
	}{
		{"none needed", breaks, 0, 0, 0, 0, true},
		{"below the break: 6 at 100", breaks, 6, 6, 100, 600, true},
		{"jump to the break: 10 at 70 beat 8 at 100", breaks, 8, 10, 70, 700, true},
		{"same price either way takes fewer: 7 at 100 or 10 at 70", breaks, 7, 7, 100, 700, true},
		{"and so where the fewer are named later", rows([4]int{10, 70, 1, NoLimit}, [4]int{1, 100, 1, NoLimit}), 7, 7, 100, 700, true},
		{"jump to the pack: 100 at 40 beat 60 at 70", breaks, 60, 100, 40, 4000, true},
		{"not yet: 57 at 70 beat 100 at 40", breaks, 57, 57, 70, 3990, true},
		{"next pack: 150 at 40 beat 101 at 70", breaks, 101, 150, 40, 6000, true},
		{"a break that is no multiple: 12 is the first of 4 from 10", rows([4]int{10, 5, 4, NoLimit}), 1, 12, 5, 60, true},
		{"stock shuts the cheap row out", rows([4]int{1, 100, 1, NoLimit}, [4]int{10, 10, 10, 15}), 11, 11, 100, 1100, true},
		{"stock just reaches", rows([4]int{1, 5, 1, 20}), 20, 20, 5, 100, true},
		{"stock too small", rows([4]int{1, 5, 1, 20}), 21, 0, 0, 0, false},
		{"stock no whole pack", rows([4]int{1, 5, 8, 20}), 17, 0, 0, 0, false},
		{"more than can be bought", breaks, mostPieces + 1, 0, 0, 0, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			buy, each, price, ok := c.o.Buy(c.needed)
			if buy != c.buy || each != c.each || price != c.price || ok != c.ok {
				t.Errorf("Buy(%d) = %d at %d for %d, %t; want %d at %d for %d, %t",
					c.needed, buy, each, price, ok, c.buy, c.each, c.price, c.ok)
			}
		})
	}
}

// The cheapest way is found by trying every number of pieces on every row.
func TestBuyAgainstEveryPurchase(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		o := &Offer{}
		for i := range rapid.IntRange(1, 5).Draw(t, "rows") {
			_ = i
			r := Row{
				AtLeast:  rapid.IntRange(1, 60).Draw(t, "at least"),
				Each:     Money(rapid.IntRange(0, 200).Draw(t, "each")),
				Multiple: rapid.IntRange(1, 25).Draw(t, "multiple"),
				Stock:    NoLimit,
			}
			if rapid.Bool().Draw(t, "limited") {
				r.Stock = rapid.IntRange(0, 120).Draw(t, "stock")
			}
			o.Rows = append(o.Rows, r)
		}
		needed := rapid.IntRange(1, 100).Draw(t, "needed")
		const bound = 100 + 60 + 25
		found, best, fewest := false, Money(0), 0
		for n := needed; n <= bound; n++ {
			for _, r := range o.Rows {
				if n < r.AtLeast || n%r.Multiple != 0 || r.Stock != NoLimit && n > r.Stock {
					continue
				}
				if price := Money(n) * r.Each; !found || price < best {
					found, best, fewest = true, price, n
				}
			}
		}
		buy, each, price, ok := o.Buy(needed)
		if ok != found || price != best || buy != fewest || Money(buy)*each != price {
			t.Fatalf("Buy(%d) = %d at %d for %d, %t; every purchase gives %d for %d, %t", needed, buy, each, price, ok, fewest, best, found)
		}
		if found && Money(needed)*o.Floor() > price {
			t.Fatalf("floor %d times %d is above the price %d", o.Floor(), needed, price)
		}
		if m := o.Multiple(needed); found && buy%m != 0 {
			t.Fatalf("%d bought, not in multiples of %d", buy, m)
		}
		if most := o.Most(); most != NoLimit && (found && buy > most || !found && needed <= most) {
			t.Fatalf("most %d, needed %d, bought %d, %t", most, needed, buy, found)
		}
	})
}

// fit places a part of an embedded family.
func fit(t *testing.T, family string, value, tolerance float64) part.Part {
	t.Helper()
	f, ok := part.Embedded().Family(family)
	if !ok {
		t.Fatalf("no family %s", family)
	}
	p, err := f.Fit("X1", value, tolerance)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// trimmer places a trimmer of an embedded family.
func trimmer(t *testing.T, family string, low, high, tolerance float64) part.Part {
	t.Helper()
	f, _ := part.Embedded().Family(family)
	p, err := f.FitRange("X1", low, high, tolerance)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func TestOfferLookUp(t *testing.T) {
	b := Embedded()
	for _, c := range []struct {
		name string
		p    part.Part
		want bool
	}{
		{"series value", fit(t, "c0g", 220e-12, 0.01), true},
		{"no series value", fit(t, "c0g", 225e-12, 0.01), false},
		{"another prefix", fit(t, "c0g", 0.22*1e-9, 0.01), true},
		{"E24 value of a 1 % resistor", fit(t, "metal-film-100", 4700, 0.01), true},
		{"E96 value of a 1 % resistor", fit(t, "metal-film-100", 4750, 0.01), true},
		{"E96 value of a 5 % resistor", fit(t, "metal-film-100", 4750, 0.05), false},
		{"E12 value of a grade in E6", fit(t, "polypropylene", 180e-12, 0.1), false},
		{"transistor", fit(t, "small-signal-npn", 0, 0), true},
		{"op-amp", fit(t, "jfet-opamp", 0, 0), true},
		{"adjustable regulator", fit(t, "adjustable-regulator", 0, 0), true},
		{"regulator", fit(t, "fixed-regulator", 12, 0.04), true},
		{"negative regulator", fit(t, "fixed-regulator-negative", -12, 0.02), true},
		{"regulator nobody makes", fit(t, "fixed-regulator", 11, 0.04), false},
		{"zener", fit(t, "zener", 9.1, 0.05), true},
		{"crystal", fit(t, "at-cut-crystal", 4e6, 30e-6), true},
		{"trimmer capacitor", trimmer(t, "film-trimmer", 4e-12, 34e-12, 0), true},
		{"trimmer with another low end", trimmer(t, "film-trimmer", 3e-12, 34e-12, 0), false},
		{"trimmer with another high end", trimmer(t, "film-trimmer", 4e-12, 35e-12, 0), false},
		{"trimmer resistor", trimmer(t, "cermet-trimmer", 0, 10e3, 0.1), true},
		{"ideal part", part.Part{Type: part.Capacitor}, false},
		{"family the book does not know", part.Part{Family: "glass", Type: part.Capacitor}, false},
	} {
		if _, ok := b.Offer(c.p); ok != c.want {
			t.Errorf("%s: offered %t, want %t", c.name, ok, c.want)
		}
	}
}

// The invented book offers every family, and every value of every grade of the
// families that a tone box is built of.
func TestEmbeddedCoversTheFamilies(t *testing.T) {
	b, families := Embedded(), part.Embedded()
	if !b.Demonstration || b.Name != "demonstration prices (invented)" || b.Currency != "credits" {
		t.Errorf("the invented book is not labelled so: %q, %q, %t", b.Name, b.Currency, b.Demonstration)
	}
	checked := 0
	for _, name := range families.Names() {
		f, _ := families.Family(name)
		if b.Rows(name) == 0 {
			t.Errorf("nothing of %s is offered", name)
		}
		switch f.Type {
		case part.Resistor, part.Capacitor, part.Coil, part.Zener:
		default:
			continue
		}
		for _, g := range f.Grades {
			for _, v := range series.Between(g.Series, f.Low, f.High) {
				p, err := f.Fit("X1", v, g.Tolerance)
				if err != nil {
					t.Fatal(err)
				}
				checked++
				if _, ok := b.Offer(p); !ok {
					t.Errorf("%s %s %g is not offered", name, p.ValueText(), g.Tolerance)
				}
			}
		}
	}
	if checked < 3000 {
		t.Errorf("only %d values checked", checked)
	}
}

// A tighter grade of a family never costs less, at any quantity.
func TestEmbeddedGradesRiseInPrice(t *testing.T) {
	b, families := Embedded(), part.Embedded()
	compared := 0
	for _, name := range families.Names() {
		f, _ := families.Family(name)
		if f.Type != part.Resistor && f.Type != part.Capacitor && f.Type != part.Coil {
			continue
		}
		for i := 1; i < len(f.Grades); i++ {
			for _, v := range series.Between("E6", f.Low, f.High) {
				tight, ok := b.Offer(fit(t, name, v, f.Grades[i-1].Tolerance))
				wide, ok2 := b.Offer(fit(t, name, v, f.Grades[i].Tolerance))
				if !ok || !ok2 {
					continue
				}
				for _, n := range []int{1, 24, 96} {
					_, _, a, ok := tight.Buy(n)
					_, _, b, _ := wide.Buy(n)
					if ok && a < b {
						t.Errorf("%s %g: %d pieces cost %s tight and %s wide", name, v, n, a, b)
					}
					compared++
				}
			}
		}
	}
	if compared < 1000 {
		t.Errorf("only %d compared", compared)
	}
}
