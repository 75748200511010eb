package offer

import (
	"fmt"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"batchwright/bom/part"
)

const head = "family,tolerance,from,to,series,at_least,price_each,multiple,stock\n"

func TestReadBook(t *testing.T) {
	b, complaints := Read("dir/my-prices.csv", []byte(head+
		"c0g,5 %,100 pF,1 nF,E12,1,0.08,,\n"+
		"c0g,5 %,100 pF,1 nF,E12,50,0.05,10,400\n"+
		"c0g,1 %,0.22 nF,220 pF,,1,0.2,,\n"+
		"small-signal-npn,,,,,1,0.06,,\n"+
		"film-trimmer,10 %,4 pF,34 pF,,1,1.1,,7\n"+
		"fixed-regulator-negative,4 %,-15 V,-5 V,E24,1,0.5,,\n"), part.Embedded())
	if len(complaints) > 0 {
		t.Fatal(complaints)
	}
	if b.Name != "my-prices.csv" || b.Demonstration || b.Currency != "" {
		t.Errorf("%q, %q, %t", b.Name, b.Currency, b.Demonstration)
	}
	nearly := cmp.Comparer(same)
	for _, c := range []struct {
		name string
		p    part.Part
		want []Row
	}{
		{"two prices", fit(t, "c0g", 330e-12, 0.05), []Row{
			{Tolerance: 0.05, Low: 100e-12, High: 1e-9, Series: "E12", AtLeast: 1, Each: 800, Multiple: 1, Stock: NoLimit, Line: 2},
			{Tolerance: 0.05, Low: 100e-12, High: 1e-9, Series: "E12", AtLeast: 50, Each: 500, Multiple: 10, Stock: 400, Line: 3},
		}},
		{"one value", fit(t, "c0g", 220e-12, 0.01), []Row{
			{Tolerance: 0.01, Low: 220e-12, High: 220e-12, AtLeast: 1, Each: 2000, Multiple: 1, Stock: NoLimit, Line: 4},
		}},
		{"no value", fit(t, "small-signal-npn", 0, 0), []Row{
			{AnyGrade: true, AnyValue: true, AtLeast: 1, Each: 600, Multiple: 1, Stock: NoLimit, Line: 5},
		}},
		{"trimmer", trimmer(t, "film-trimmer", 4e-12, 34e-12, 0), []Row{
			{Tolerance: 0.1, Low: 4e-12, High: 34e-12, AtLeast: 1, Each: 1_1000, Multiple: 1, Stock: 7, Line: 6},
		}},
		{"negative value of a series", fit(t, "fixed-regulator-negative", -12, 0.04), []Row{
			{Tolerance: 0.04, Low: -15, High: -5, Series: "E24", AtLeast: 1, Each: 5000, Multiple: 1, Stock: NoLimit, Line: 7},
		}},
	} {
		o, ok := b.Offer(c.p)
		if !ok {
			t.Errorf("%s: no offer", c.name)
			continue
		}
		if d := cmp.Diff(c.want, o.Rows, nearly, cmpopts.IgnoreUnexported(Row{})); d != "" {
			t.Errorf("%s: %s", c.name, d)
		}
	}
	other := fit(t, "fixed-regulator", 12, 0.04)
	other.Family = "fixed-regulator-negative"
	for _, c := range []struct {
		name string
		p    part.Part
		want bool
	}{
		{"a value that a row of another does not sell", fit(t, "c0g", 120e-12, 0.01), false},
		{"a negative rail's magnitude", other, false},
		{"below the range", fit(t, "c0g", 82e-12, 0.05), false},
		{"lowest of the range", fit(t, "c0g", math.Nextafter(100e-12, 0), 0.05), true},
		{"highest of the range", fit(t, "c0g", math.Nextafter(1e-9, 1), 0.05), true},
		{"above the range", fit(t, "c0g", 1.2e-9, 0.05), false},
	} {
		if _, ok := b.Offer(c.p); ok != c.want {
			t.Errorf("%s: offered %t, want %t", c.name, ok, c.want)
		}
	}
}

func TestReadBookCurrency(t *testing.T) {
	headed := "family,tolerance,from,to,series,at_least,price_each,multiple,stock,currency\n"
	b, complaints := Read("p.csv", []byte(headed+"small-signal-npn,,,,,1,0.06,,,guilders\n"), part.Embedded())
	if len(complaints) > 0 || b.Currency != "guilders" {
		t.Errorf("%v, %v", b, complaints)
	}
	_, complaints = Read("p.csv", []byte(headed+
		"small-signal-npn,,,,,1,0.06,,,guilders\nsmall-signal-pnp,,,,,1,0.06,,,ducats\n"), part.Embedded())
	if len(complaints) != 1 || complaints[0].Line != 3 {
		t.Errorf("two currencies: %v", complaints)
	}
}

// Every fault has a place; the column is where the cell's text starts.
func TestReadBookComplains(t *testing.T) {
	for _, c := range []struct{ name, row, want string }{
		{"unknown family", "cog,5 %,1 nF,1 nF,,1,0.1,,", "2:1 c0g"},
		{"tolerance without unit", "c0g,5,1 nF,1 nF,,1,0.1,,", "2:5"},
		{"tolerance beyond all", "c0g,101 %,1 nF,1 nF,,1,0.1,,", "2:5"},
		{"series across zero", "fixed-regulator-negative,4 %,-5 V,5 V,E24,1,0.1,,", "2:39"},
		{"tolerance of a transistor", "small-signal-npn,5 %,,,,1,0.1,,", "2:18"},
		{"value of a transistor", "small-signal-npn,,1 V,1 V,,1,0.1,,", "2:19"},
		{"no value of a capacitor", "c0g,5 %,,,,1,0.1,,", "2:1"},
		{"half a range", "c0g,5 %,1 nF,,,1,0.1,,", "2:1"},
		{"wrong unit", "c0g,5 %,1 nH,1 nF,,1,0.1,,", "2:9"},
		{"falling range", "c0g,5 %,2 nF,1 nF,E12,1,0.1,,", "2:14"},
		{"range without series", "c0g,5 %,1 nF,2 nF,,1,0.1,,", "2:19"},
		{"unknown series", "c0g,5 %,1 nF,2 nF,e12,1,0.1,,", "2:19 E12"},
		{"series without a value in the range", "c0g,5 %,1.3 nF,1.4 nF,E12,1,0.1,,", "2:23"},
		{"series for one value", "c0g,5 %,1 nF,1 nF,E12,1,0.1,,", "2:19"},
		{"trimmer of one value", "film-trimmer,10 %,34 pF,34 pF,,1,1,,", "2:25"},
		{"quantity of nothing", "c0g,5 %,1 nF,1 nF,,0,0.1,,", "2:20"},
		{"price with a comma", "c0g,5 %,1 nF,1 nF,,1,\"0,1\",,", "2:22"},
		{"price below zero", "c0g,5 %,1 nF,1 nF,,1,-0.1,,", "2:22"},
		{"price beyond all bounds", "c0g,5 %,1 nF,1 nF,,1,100001,,", "2:22"},
		{"multiple of nothing", "c0g,5 %,1 nF,1 nF,,1,0.1,0,", "2:26"},
		{"stock below zero", "c0g,5 %,1 nF,1 nF,,1,0.1,,-1", "2:27"},
		{"the same twice", "c0g,5 %,1 nF,1 nF,,1,0.1,,\nc0g,5 %,1000 pF,1000 pF,,1,0.2,,", "3:26"},
	} {
		t.Run(c.name, func(t *testing.T) {
			b, complaints := Read("p.csv", []byte(head+c.row+"\n"), part.Embedded())
			if len(complaints) != 1 || b != nil {
				t.Fatalf("%d complaints, want one: %v", len(complaints), complaints)
			}
			got := fmt.Sprintf("%d:%d", complaints[0].Line, complaints[0].Column)
			if complaints[0].Nearest != "" {
				got += " " + complaints[0].Nearest
			}
			if got != c.want || complaints[0].File != "p.csv" || complaints[0].Expected == "" {
				t.Errorf("at %s, want %s: %v", got, c.want, complaints)
			}
		})
	}
}

func TestReadBookFindsAllFaults(t *testing.T) {
	_, complaints := Read("p.csv", []byte(head+
		"cog,5 %,1 nF,1 nF,,1,0.1,,\n"+
		"c0g,5 %,1 nF,1 nF,,1,0.1,,\n"+
		"c0g,x,y,1 nF,,z,w,,\n"), part.Embedded())
	var lines []int
	for _, c := range complaints {
		lines = append(lines, c.Line)
	}
	if d := cmp.Diff([]int{2, 4, 4, 4, 4}, lines); d != "" {
		t.Errorf("%s\n%v", d, complaints)
	}
}

// FuzzRead holds that a price book of whatever kind is either read or
// complained of, and that whatever it offers can be bought without overflow.
func FuzzRead(f *testing.F) {
	f.Add(head + "c0g,5 %,100 pF,1 nF,E12,50,0.05,10,400\n")
	f.Add(head + "film-trimmer,10 %,4 pF,34 pF,,1,1.1,,7\n")
	f.Add(head + "small-signal-npn,,,,,1,100000,100000000,\n")
	f.Add("family,tolerance\n\"")
	families := part.Embedded()
	f.Fuzz(func(t *testing.T, text string) {
		b, complaints := Read("p.csv", []byte(text), families)
		if (b == nil) != (len(complaints) > 0) {
			t.Fatalf("book %v, complaints %v", b, complaints)
		}
		if b == nil {
			return
		}
		for name, rows := range b.rows {
			o := Offer{Family: name, Rows: rows}
			for _, n := range []int{1, 1000, mostPieces} {
				if buy, each, price, ok := o.Buy(n); ok && (buy < n || price < 0 || price/Money(buy) != each) {
					t.Fatalf("%s: %d needed, %d bought at %d for %d", name, n, buy, each, price)
				}
			}
		}
	})
}
