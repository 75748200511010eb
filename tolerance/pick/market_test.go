package pick

import (
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"

	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/tolerance/build"
)

// readAt reads a build whose price book, shop.csv, is given.
func readAt(t testing.TB, text, prices string) *build.Build {
	t.Helper()
	b, err := build.Read("test.yaml", []byte(text), func(path string) ([]byte, error) {
		if !strings.HasSuffix(path, "shop.csv") {
			return nil, os.ErrNotExist
		}
		return []byte(bookHead + prices), nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return b
}

const bookHead = "family,tolerance,from,to,series,at_least,price_each,multiple,stock\n"

func chooserOf(t testing.TB, b *build.Build, o Options) *chooser {
	t.Helper()
	c, err := newChooser(context.Background(), b, o)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// shelves is a build whose lines meet in every way: two openings that may take
// the same part, one of two positions, one of pairs, a fixed part that they
// may join, a fixed pair of which one piece is such, and a fixed part that
// draws on the same stock though it is another line.
const shelves = `
build: shelves
price_book: shop.csv
units: %d
spares: 10 %%
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, choose: {families: [metal-film-100], tolerances: [1 %%, 2 %%], values: [1 kΩ, 1.2 kΩ]}}
      b: {part: resistor, ref: R2, choose: {families: [metal-film-100, carbon-film], tolerances: [2 %%, 5 %%], values: [1 kΩ]}}
      c: {ref: R3, same_as: s.b}
      d: {part: resistor, ref: R4, choose: {families: [metal-film-100], tolerances: [2 %%], values: [1 kΩ, 1.2 kΩ], combine: [single, parallel, series]}}
      e: {part: resistor, ref: R5, value: 1 kΩ, family: metal-film-100, tolerance: 2 %%}
      f: {part: resistor, ref: R6, parallel: [{value: 1.2 kΩ, family: metal-film-100, tolerance: 2 %%}, {value: 4.7 kΩ, family: carbon-film, tolerance: 5 %%}]}
      g: {part: resistor, ref: R7, value: 1 kΩ, family: metal-film-100, tolerance: 2 %%%s}
    outputs: {sum: {expression: a+b+c+d+e+f+g, unit: Ω}}
`

// randomPrices sells the parts of shelves in one to three rows each, with
// breaks, multiples and stocks drawn.
func randomPrices(r *rand.Rand) string {
	var b strings.Builder
	for _, what := range []string{"metal-film-100,1 %,1 kΩ,1.2 kΩ,E24", "metal-film-100,2 %,1 kΩ,1 kΩ,", "metal-film-100,2 %,1.2 kΩ,1.2 kΩ,", "carbon-film,5 %,1 kΩ,4.7 kΩ,E24"} {
		each := 20 + r.IntN(60)
		atLeast, multiple := 1, ""
		for range 1 + r.IntN(3) {
			stock := ""
			if r.IntN(2) == 0 {
				stock = fmt.Sprint(10 + r.IntN(60))
			}
			fmt.Fprintf(&b, "%s,%d,0.%03d,%s,%s\n", what, atLeast, each, multiple, stock)
			atLeast, multiple = atLeast+1+r.IntN(30), fmt.Sprint(1+r.IntN(10))
			each -= r.IntN(each / 2)
		}
	}
	return b.String()
}

// TestMoneyIsTheOrder compares the search's money with the order's for every
// choice of random markets, with all that is bought counted afresh: the same
// total, and not to be bought where a part that is open, or one that is fixed
// and would be offered without the choice, is offered by nobody. No total is
// below the floors.
func TestMoneyIsTheOrder(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 1))
	bought, short, crowds, taken := 0, 0, 0, 0
	for n := range 30 {
		other := ""
		if n%2 == 1 { // another line of the same part
			other = ", temperature_coefficient: 20 ppm/K"
		}
		b := readAt(t, fmt.Sprintf(shelves, 3+r.IntN(12), other), randomPrices(r))
		m, err := newMarket(b)
		if err != nil {
			t.Fatal(err)
		}
		if m.unsold() >= 0 {
			continue
		}
		if m.crowded {
			crowds++
		}
		fixed := offeredRefs(m, m.fixedParts())
		for _, choice := range everyChoice(&chooser{pictures: &pictures{market: m}}) {
			fitted, err := m.fit(choice)
			if err != nil {
				t.Fatal(err)
			}
			want := m.order(fitted.Parts())
			lacking, fixedLack := false, false
			for _, l := range want.Unoffered {
				for _, ref := range l.Refs {
					open := !fixed[ref] && ref != "R5" && ref != "R6A" && ref != "R6B" && ref != "R7"
					lacking = lacking || open || fixed[ref]
					fixedLack = fixedLack || fixed[ref]
				}
			}
			if fixedLack && m.crowded {
				taken++
			}
			cost, ok := m.cost(choice)
			if ok == lacking || ok && cost != int64(want.Total) {
				t.Fatalf("market %d, choice %v: cost %d, %v; the order is %v without %v", n, choice, cost, ok, want.Total, want.Unoffered)
			}
			if !ok {
				short++
				continue
			}
			bought++
			floor := m.rest
			for i, j := range choice {
				floor += m.floor(i, j)
			}
			if floor > cost {
				t.Fatalf("market %d, choice %v: floors come to %d, cost %d", n, choice, floor, cost)
			}
		}
	}
	if bought < 500 || short < 100 || crowds < 3 || taken == 0 {
		t.Errorf("%d bought, %d not to be had, %d markets crowded, %d choices that take a fixed part's stock: the test proves little", bought, short, crowds, taken)
	}
}

// offeredRefs are the references of parts that are offered.
func offeredRefs(m *market, list []part.Part) map[string]bool {
	refs := map[string]bool{}
	for _, l := range m.order(list).Lines {
		for _, ref := range l.Refs {
			refs[ref] = true
		}
	}
	return refs
}

// TestStockTogether has a stock that each of two openings could be filled from
// and both together cannot: 10 units take 11 pieces with spares each, of 12 on
// sale.
func TestStockTogether(t *testing.T) {
	b := readAt(t, `
build: stock
price_book: shop.csv
units: 10
spares: 10 %
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, choose: {families: [carbon-film, metal-film-100], tolerances: [5 %], values: [1 kΩ]}}
      b: {part: resistor, ref: R2, choose: {families: [carbon-film, metal-film-100], tolerances: [5 %], values: [1 kΩ]}}
    outputs: {sum: {expression: a+b, unit: Ω}}
targets: [{name: sum, output: s.sum, between: [1.9 kΩ, 2.1 kΩ], share: 90 %}]
`, "carbon-film,5 %,1 kΩ,1 kΩ,,1,0.01,,12\nmetal-film-100,5 %,1 kΩ,1 kΩ,,1,0.05,,\n")
	c := chooserOf(t, b, Options{Seed: 1, Units: 400})
	for _, v := range []struct {
		choice []int
		want   int64 // ten-thousandths
		ok     bool
	}{
		{[]int{0, 0}, 0, false},
		{[]int{0, 1}, 11*100 + 11*500, true},
		{[]int{1, 0}, 11*100 + 11*500, true},
		{[]int{1, 1}, 22 * 500, true},
	} {
		if cost, ok := c.cost(v.choice); ok != v.ok || cost != v.want {
			t.Errorf("%v costs %d, %v, want %d, %v", v.choice, cost, ok, v.want, v.ok)
		}
	}
	r, _, err := Choose(context.Background(), b, Options{Seed: 1, Units: 400})
	if err != nil || !r.ProvedCheapest || int64(r.Total) != 11*600 {
		t.Errorf("chose %v for %v, proved %v, %v", r.Choices, r.Total, r.ProvedCheapest, err)
	}
}

// TestFloorIsTight works the floors out by the order alone: the least, over all
// ways to fill the other openings, of what the pieces on an option's lines make
// the order dearer by, each piece taking its share.
func TestFloorIsTight(t *testing.T) {
	r := rand.New(rand.NewPCG(6, 1))
	seen, below := 0, 0
	for range 12 {
		m, err := newMarket(readAt(t, fmt.Sprintf(shelves, 3+r.IntN(12), ""), randomPrices(r)))
		if err != nil {
			t.Fatal(err)
		}
		if m.unsold() >= 0 {
			continue
		}
		for i := range m.fittings {
			for j, f := range m.fittings[i] {
				got, want := m.floor(i, j), int64(0)
				for _, key := range keysOf(f) {
					want += leastOnLine(m, i, j, key)
				}
				if got != want {
					t.Errorf("opening %d, option %d (%s): floor %d, want %d", i, j, f.Text, got, want)
				}
				seen++
				if choice := make([]int, len(m.fittings)); got > 0 {
					choice[i] = j
					if cost, ok := m.cost(choice); ok && cost > m.rest+got {
						below++
					}
				}
			}
		}
	}
	if seen < 50 || below == 0 {
		t.Errorf("%d floors", seen)
	}
}

// keysOf are the buying lines of a fitting.
func keysOf(f build.Fitting) []string {
	var keys []string
	for _, p := range f.Pieces {
		if key := order.Key(p.Part); !slices.Contains(keys, key) {
			keys = append(keys, key)
		}
	}
	return keys
}

// leastOnLine is an option's share of what the pieces on one line cost at
// least, over every way to fill the other openings.
func leastOnLine(m *market, i, j int, key string) int64 {
	var fixed []part.Part
	for _, p := range m.fixedParts() {
		if order.Key(p) == key {
			fixed = append(fixed, p)
		}
	}
	without := m.order(fixed)
	least := int64(-1)
	for _, choice := range everyChoice(&chooser{pictures: &pictures{market: m}}) {
		if choice[i] != j {
			continue
		}
		parts, own, all := slices.Clone(fixed), 0, 0
		for k, o := range m.build.Openings {
			for _, p := range m.fittings[k][choice[k]].Pieces {
				if order.Key(p.Part) != key {
					continue
				}
				for range o.Positions {
					q := p.Part
					q.Ref = fmt.Sprintf("X%d", len(parts))
					parts = append(parts, q)
					all++
					if k == i {
						own++
					}
				}
			}
		}
		with := m.order(parts)
		share := int64(with.Total-without.Total) * int64(own) / int64(all)
		if len(with.Unoffered) == 0 && (least < 0 || share < least) {
			least = share
		}
	}
	return max(least, 0)
}
