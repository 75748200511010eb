package pick

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"batchwright/bom/offer"
	"batchwright/bom/order"
)

// uses says whether a choice buys on one of some lines, each named by
// order.Key.
func uses(c *chooser, choice []int, lines map[string]bool) bool {
	for i, j := range choice {
		for _, p := range c.fittings[i][j].Pieces {
			if lines[order.Key(p.Part)] {
				return true
			}
		}
	}
	return false
}

// linesOf are the lines of a choice in the order in which they come.
func keysOfChoice(c *chooser, choice []int) []string {
	var keys []string
	for i, j := range choice {
		for _, key := range keysOf(c.fittings[i][j]) {
			if !slices.Contains(keys, key) {
				keys = append(keys, key)
			}
		}
	}
	return keys
}

// alternatesByForce finds at most two alternates of every line of a choice
// among all choices, cheapest first, and the lines that have none.
func alternatesByForce(t *testing.T, c *chooser, list [][]int, choice []int) (alternates []Alternate, without []string) {
	own, _ := c.fit(choice)
	cost, _ := orderOf(c, own)
	known := map[string]bool{}
	good := func(other []int) bool {
		name := fmt.Sprint(other)
		if _, seen := known[name]; !seen {
			known[name] = passes(t, c, other)
		}
		return known[name]
	}
	for _, key := range keysOfChoice(c, choice) {
		out := map[string]bool{key: true}
		id := c.lineIDs[key]
		for n := range 2 {
			other := cheapestOf(t, c, list, func(other []int) bool { return !uses(c, other, out) && good(other) })
			if other == nil {
				if n == 0 {
					without = append(without, strings.Join(c.refsOf(choice, id), " "))
				}
				break
			}
			b, err := c.fit(other)
			if err != nil {
				t.Fatal(err)
			}
			money, _ := orderOf(c, b)
			a := c.alternate(choice, other, id, 0)
			a.More = offer.Money(money - cost)
			alternates = append(alternates, a)
			before := len(out)
			for _, taken := range keysOfChoice(c, other) {
				if !slices.Contains(keysOfChoice(c, choice), taken) {
					out[taken] = true
				}
			}
			if len(out) == before {
				break
			}
		}
	}
	return alternates, without
}

// TestAlternatesByForce finds the alternates of every line by simulating every
// choice without it, cheapest first.
func TestAlternatesByForce(t *testing.T) {
	found, none := 0, 0
	texts := map[string][2]string{"tanks": {tanks("80 Hz"), ""}, "tight tanks": {tanks("40 Hz"), ""}, "merging": {merging(), ""}, "grades": {grades, closeIsCheap}}
	for _, v := range bruteBuilds {
		for _, limit := range []string{v.limits[0], v.limits[2]} {
			texts[v.name+" "+limit] = [2]string{fmt.Sprintf(v.text, limit), v.prices}
		}
	}
	for name, text := range texts {
		t.Run(name, func(t *testing.T) {
			b, o := readAt(t, text[0], text[1]), Options{Seed: 3, Units: 480, Alternates: 2}
			r, _, err := Choose(context.Background(), b, o)
			if err != nil {
				t.Fatal(err)
			}
			if !r.ProvedCheapest {
				return
			}
			c := chooserOf(t, b, o)
			want, without := alternatesByForce(t, c, byMoney(t, c), chosenIn(t, c, r))
			if d := cmp.Diff(want, r.Alternates, cmpopts.EquateEmpty()); d != "" {
				t.Error(d)
			}
			var got []string
			for _, x := range r.Irreplaceable {
				got = append(got, strings.Join(x.Refs, " "))
				if x.Why != "no choice without it meets every target" || x.Line == "" {
					t.Errorf("%+v", x)
				}
			}
			if d := cmp.Diff(without, got); d != "" {
				t.Error(d)
			}
			found, none = found+len(want), none+len(without)
		})
	}
	if found < 10 || none < 2 {
		t.Errorf("%d alternates, %d lines without: the test proves little", found, none)
	}
}

// TestNoAlternates says why a line has none: nothing else will do, a fixed part
// is bought there too, or none were looked for, which is no verdict.
func TestNoAlternates(t *testing.T) {
	b := read(t, `
build: only one
units: 8
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, value: 1 kΩ, choose: {families: [metal-film-100], tolerances: [5 %]}}
      b: {part: resistor, ref: R2, value: 2.2 kΩ, choose: {families: [metal-film-100], tolerances: [5 %]}}
      c: {part: resistor, ref: R3, value: 2.2 kΩ, family: metal-film-100, tolerance: 5 %}
    outputs: {x: {expression: a+b+c, unit: Ω}}
targets: [{name: x, output: s.x, between: [5 kΩ, 6 kΩ]}]
`)
	r, _, err := Choose(context.Background(), b, Options{Seed: 1, Units: 400, Alternates: 1})
	if err != nil {
		t.Fatal(err)
	}
	want := []Irreplaceable{
		{[]string{"R1"}, "metal-film-100 1 kΩ ±5 %", "no choice without it meets every target"},
		{[]string{"R2"}, "metal-film-100 2.2 kΩ ±5 %", "parts that are not open come from it too"},
	}
	if d := cmp.Diff(want, r.Irreplaceable); d != "" || len(r.Alternates) != 0 {
		t.Error(d)
	}
	r, _, err = Choose(context.Background(), b, Options{Seed: 1, Units: 400})
	if err != nil || len(r.Irreplaceable) != 0 {
		t.Errorf("%+v of what was not looked for, %v", r.Irreplaceable, err)
	}
}

// TestAlternateOnce has an alternate that takes another line of the choice in
// place of the one that is out: there is no second one that differs.
func TestAlternateOnce(t *testing.T) {
	b := readAt(t, `
build: twice
price_book: shop.csv
units: 8
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {part: resistor, ref: R1, choose: {families: [metal-film-100], tolerances: [5 %], values: [1 kΩ, 1.1 kΩ]}}
      b: {part: resistor, ref: R2, choose: {families: [metal-film-100], tolerances: [5 %], values: [1.1 kΩ]}}
    outputs: {x: {expression: a+b, unit: Ω}}
targets: [{name: x, output: s.x, between: [1.5 kΩ, 3 kΩ]}]
`, "metal-film-100,5 %,1 kΩ,1 kΩ,,1,0.01,,\nmetal-film-100,5 %,1.1 kΩ,1.1 kΩ,,1,0.02,,\n")
	r, _, err := Choose(context.Background(), b, Options{Seed: 1, Units: 400, Alternates: 3})
	if err != nil || len(r.Alternates) != 1 || r.Alternates[0].Refs[0] != "R1" || len(r.Irreplaceable) != 1 {
		t.Errorf("%+v, %+v, %v", r.Alternates, r.Irreplaceable, err)
	}
}
