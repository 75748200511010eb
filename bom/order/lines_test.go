package order

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/bom/offer"
	"batchwright/bom/part"
)

// fit places a part of an embedded family.
func fit(t *testing.T, ref, family string, value, tolerance float64) part.Part {
	t.Helper()
	f, ok := part.Embedded().Family(family)
	if !ok {
		t.Fatalf("no family %s", family)
	}
	p, err := f.Fit(ref, value, tolerance)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// trimmer places a trimmer of an embedded family.
func trimmer(t *testing.T, ref, family string, low, high float64) part.Part {
	t.Helper()
	f, _ := part.Embedded().Family(family)
	p, err := f.FitRange(ref, low, high, 0)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// prices is a book of our own, so that the totals can be worked out by hand.
func prices(t *testing.T) *offer.Book {
	t.Helper()
	b, complaints := offer.Read("shop.csv", []byte(`family,tolerance,from,to,series,at_least,price_each,multiple,stock,currency
c0g,5 %,10 pF,1 nF,E12,1,0.10,,,crowns
c0g,5 %,10 pF,1 nF,E12,100,0.075,50,,crowns
drum-choke,5 %,1 mH,10 mH,E12,1,0.415,,,crowns
film-trimmer,10 %,4 pF,34 pF,,1,1.20,5,30,crowns
small-signal-npn,,,,,1,0.0625,,,crowns
jfet-opamp,,,,,1,0.5,,10,crowns
`), part.Embedded())
	if len(complaints) > 0 {
		t.Fatal(complaints)
	}
	return b
}

// A unit has four capacitors of 220 pF, two coils, a trimmer and a transistor;
// 24 units and 5 % of spares. By hand:
//
//	C1–C3, C10: 4·24 = 96, spares ceil(4.8) = 5, 101 needed -> 150 at 0.075 = 11.25, or 101 at 0.10 = 10.10
//	CT1:        24, spares ceil(1.2) = 2, 26 -> packs of 5: 30 at 1.20 = 36.00 (stock 30)
//	L1, L2:     48, spares ceil(2.4) = 3, 51 at 0.415 = 21.165
//	Q1:         24, spares 2, 26 at 0.0625 = 1.625
//	total       10.10 + 36.00 + 21.165 + 1.625 = 68.89
//	one unit    4·0.10 + 1.20 + 2·0.415 + 0.0625 = 2.4925
//
// R1 has no family, U1 too little stock (24 + 2 of 10), C5 (1 % of it) no offer.
func TestOrderByHand(t *testing.T) {
	parts := []part.Part{
		fit(t, "L1", "drum-choke", 1.8e-3, 0.05),
		fit(t, "C10", "c0g", 220e-12, 0.05),
		fit(t, "C1", "c0g", 220e-12, 0.05),
		trimmer(t, "CT1", "film-trimmer", 4e-12, 34e-12),
		fit(t, "L2", "drum-choke", 1.8e-3, 0.05),
		fit(t, "C3", "c0g", 220e-12, 0.05),
		fit(t, "C2", "c0g", 0.22*1e-9, 0.05), // the same, written with another prefix
		fit(t, "Q1", "small-signal-npn", 0, 0),
		{Ref: "R1", Type: part.Resistor, Parameters: []part.Parameter{{Name: "value", Unit: part.Resistor.Unit(), Value: 4700}}},
		fit(t, "U1", "jfet-opamp", 0, 0),
		fit(t, "C5", "c0g", 220e-12, 0.01),
	}
	got := New(parts, 24, 5, prices(t), part.Embedded())
	for i := range got.Lines {
		got.Lines[i].Marking = "" // package marking's business
	}
	for i := range got.Unoffered {
		got.Unoffered[i].Marking = ""
	}
	want := Order{
		Lines: []Line{
			{Refs: []string{"C1", "C2", "C3", "C10"}, Family: "c0g", Title: "Ceramic C0G (NP0)", Text: "220 pF", Value: 220e-12, Tolerance: 0.05,
				PerUnit: 4, Needed: 96, Spares: 5, Buy: 101, Multiple: 1, Each: 1000, Price: 10_1000},
			{Refs: []string{"CT1"}, Family: "film-trimmer", Title: "Film trimmer capacitor", Text: "4..34 pF", Value: 34e-12, Tolerance: 0.1,
				PerUnit: 1, Needed: 24, Spares: 2, Buy: 30, Multiple: 5, Each: 1_2000, Price: 36_0000},
			{Refs: []string{"L1", "L2"}, Family: "drum-choke", Title: "Ferrite drum choke", Text: "1.8 mH", Value: 1.8e-3, Tolerance: 0.05,
				PerUnit: 2, Needed: 48, Spares: 3, Buy: 51, Multiple: 1, Each: 4150, Price: 21_1650},
			{Refs: []string{"Q1"}, Family: "small-signal-npn", Title: "Small-signal NPN transistor",
				PerUnit: 1, Needed: 24, Spares: 2, Buy: 26, Multiple: 1, Each: 625, Price: 1_6250},
		},
		Unoffered: []Line{
			{Refs: []string{"C5"}, Family: "c0g", Title: "Ceramic C0G (NP0)", Text: "220 pF", Value: 220e-12, Tolerance: 0.01,
				PerUnit: 1, Needed: 24, Spares: 2, Buy: 26, Multiple: 1, Why: "shop.csv does not offer it"},
			{Refs: []string{"R1"}, Title: "resistor", Text: "4.7 kΩ", Value: 4700,
				PerUnit: 1, Needed: 24, Spares: 2, Buy: 26, Multiple: 1, Why: "no family is given"},
			{Refs: []string{"U1"}, Family: "jfet-opamp", Title: "JFET-input operational amplifier",
				PerUnit: 1, Needed: 24, Spares: 2, Buy: 26, Multiple: 1, Why: "shop.csv has 10, 26 are needed"},
		},
		Total: 68_8900, Currency: "crowns", Units: 24, SparesPercent: 5, PerUnit: 2_4925, Book: "shop.csv",
	}
	nearly := cmp.Comparer(func(a, b float64) bool { return a == b || a/b > 1-1e-12 && a/b < 1+1e-12 })
	if d := cmp.Diff(want, got, nearly); d != "" {
		t.Error(d)
	}
	b, err := json.Marshal(got)
	if err != nil || !strings.Contains(string(b), `"total":68.89,`) || !strings.Contains(string(b), `"cost_per_unit":2.4925,`) {
		t.Errorf("%s, %v", b, err)
	}
}

// Fifty units bring the capacitors over the break: 200 needed, packs of 50.
func TestOrderReachesBreak(t *testing.T) {
	parts := []part.Part{fit(t, "C1", "c0g", 220e-12, 0.05), fit(t, "C2", "c0g", 220e-12, 0.05)}
	for _, c := range []struct {
		units, spares, buy int
		price              offer.Money
	}{
		{50, 0, 100, 7_5000}, {51, 0, 102, 10_2000}, {70, 0, 150, 11_2500}, {100, 10, 250, 18_7500}, {37, 0, 74, 7_4000}, {38, 0, 100, 7_5000},
	} {
		o := New(parts, c.units, c.spares, prices(t), part.Embedded())
		if l := o.Lines[0]; l.Buy != c.buy || l.Price != c.price || o.Total != c.price {
			t.Errorf("%d units: %d for %s, total %s; want %d for %s", c.units, l.Buy, l.Price, o.Total, c.buy, c.price)
		}
	}
}

// An order from the invented book says so.
func TestOrderDemonstration(t *testing.T) {
	parts := []part.Part{fit(t, "C1", "c0g", 220e-12, 0.05)}
	o := New(parts, 24, 0, offer.Embedded(), part.Embedded())
	if !o.Demonstration || !strings.Contains(o.Book, "invented") || o.Currency != "credits" || len(o.Lines) != 1 {
		t.Errorf("%+v", o)
	}
	if own := New(parts, 24, 0, prices(t), part.Embedded()); own.Demonstration {
		t.Error("an order from a book of one's own is called a demonstration")
	}
}

// A rated voltage that is not the family's makes a line of its own, and says so.
func TestOrderSaysRating(t *testing.T) {
	high := fit(t, "C2", "c0g", 220e-12, 0.05)
	high.Rated = 100
	o := New([]part.Part{fit(t, "C1", "c0g", 220e-12, 0.05), high}, 24, 0, prices(t), part.Embedded())
	if len(o.Lines) != 2 || o.Lines[0].Text != "220 pF" || o.Lines[1].Text != "220 pF, 100 V" {
		t.Errorf("%+v", o.Lines)
	}
}

// More than any line can hold is offered by nobody.
func TestOrderOfTooMany(t *testing.T) {
	o := New([]part.Part{fit(t, "C1", "c0g", 220e-12, 0.05)}, 1_000_000_000, 0, prices(t), part.Embedded())
	if len(o.Unoffered) != 1 || o.Total != 0 || o.Unoffered[0].Why != "1000000000 pieces are more than one line can be" {
		t.Errorf("%+v", o)
	}
}

// Nothing fitted is an order of nothing, with lists that JSON writes as such.
func TestOrderOfNothing(t *testing.T) {
	b, err := json.Marshal(New(nil, 24, 5, prices(t), part.Embedded()))
	if err != nil || !strings.Contains(string(b), `"lines":[],"unoffered":[],"total":0,`) {
		t.Errorf("%s, %v", b, err)
	}
}

// ceil(needed · percent / 100), worked out in the margin.
func TestSpares(t *testing.T) {
	for _, c := range []struct{ needed, percent, want int }{
		{0, 10, 0}, {24, 0, 0}, {24, 5, 2}, {20, 5, 1}, {21, 5, 2}, {1, 1, 1}, {100, 5, 5}, {101, 5, 6}, {96, 100, 96}, {7, 150, 11},
		{1_000_000_007, 3, 30_000_001},
	} {
		if got := Spares(c.needed, c.percent); got != c.want {
			t.Errorf("Spares(%d, %d) = %d, want %d", c.needed, c.percent, got, c.want)
		}
	}
}

// What makes a piece another one, and what does not.
func TestKey(t *testing.T) {
	base := fit(t, "C1", "c0g", 220e-12, 0.05)
	change := func(f func(*part.Parameter)) part.Part {
		p := fit(t, "C1", "c0g", 220e-12, 0.05)
		f(&p.Parameters[0])
		return p
	}
	mixed := base
	mixed.Ref, mixed.LotsMixed = "C2", true
	law := func(low float64) part.Part {
		return change(func(q *part.Parameter) { q.Law = []part.LawPoint{{Celsius: -55, Low: low, High: 0}} })
	}
	bias := func(low float64) part.Part {
		return change(func(q *part.Parameter) { q.Bias = []part.BiasPoint{{}, {Share: 1, Low: low}} })
	}
	rated := base
	rated.Rated = 16
	for _, c := range []struct {
		name string
		a, b part.Part
		same bool
	}{
		{"reference and lots", base, mixed, true},
		{"the default shape named", base, change(func(q *part.Parameter) { q.Shape = part.Normal }), true},
		{"correlation", base, change(func(q *part.Parameter) { q.Correlation.Value = 0.9 }), true},
		{"rounding of a prefix", base, change(func(q *part.Parameter) { q.Value = math.Nextafter(q.Value, 1) }), true},
		{"value", base, fit(t, "C1", "c0g", 270e-12, 0.05), false},
		{"grade", base, fit(t, "C1", "c0g", 220e-12, 0.01), false},
		{"family", base, fit(t, "C1", "polypropylene", 220e-12, 0.05), false},
		{"shape", base, change(func(q *part.Parameter) { q.Shape = part.Uniform }), false},
		{"coefficient", base, change(func(q *part.Parameter) { q.Temperature.Value = 1e-6 }), false},
		{"humidity", base, change(func(q *part.Parameter) { q.Humidity.Spread = 1e-6 }), false},
		{"ageing", base, change(func(q *part.Parameter) { q.Ageing.Value = 1e-6 }), false},
		{"ageing clock", base, change(func(q *part.Parameter) { q.Ageing.Per = part.PerThousandHours }), false},
		{"rated voltage", base, rated, false},
		{"bias law", bias(-0.5), bias(-0.4), false},
		{"law", law(-0.15), law(-0.2), false},
		{"absolute", base, change(func(q *part.Parameter) { q.Absolute = true }), false},
	} {
		if got := Key(c.a) == Key(c.b); got != c.same {
			t.Errorf("%s: one line %t, want %t:\n%s\n%s", c.name, got, c.same, Key(c.a), Key(c.b))
		}
	}
}
