package build_test

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"batchwright/bom/part"
	"batchwright/bom/series"
	"batchwright/tolerance/build"
)

// opening reads a build with one open part of a formula stage, "own.x" at X1,
// and a follower at X2.
func opening(t *testing.T, kind, text string) (*build.Build, build.Opening) {
	t.Helper()
	b, err := read(openingText(kind, text))
	if err != nil {
		t.Fatalf("%s:\n%v", text, err)
	}
	return b, b.Openings[0]
}

// openingText is that build; the part stands on line 8, from column 10 on.
func openingText(kind, text string) string {
	return `build: open pair
units: 4
conditions: {bench: {supply: 5 V}}
stages:
  own:
    kind: formula
    parts:
      x: {part: ` + kind + `, ref: X1, ` + text + `}
      y: {ref: X2, same_as: own.x}
    outputs: {z: {expression: 2}}
`
}

// naive lists the pairs of an opening by trying every two pieces: values as one
// goes through a series or a list, families and their grades. A pair is its
// pieces in the order of their text, so that it comes once whichever is first.
func naive(t *testing.T, b *build.Build, o build.Opening, combine build.Combine, values []float64, near func(whole, lesser float64) bool) map[string]int {
	t.Helper()
	adding := (combine == build.Parallel) == (o.Type == part.Capacitor)
	type piece struct {
		name  string
		value float64
	}
	var pieces []piece
	for _, name := range o.Families {
		f, _ := b.Families.Family(name)
		for _, g := range f.Grades {
			if len(o.Tolerances) > 0 && !slices.Contains(o.Tolerances, g.Tolerance) {
				continue
			}
			for _, v := range values {
				if v >= f.Low*(1-1e-12) && v <= f.High*(1+1e-12) {
					pieces = append(pieces, piece{fmt.Sprintf("%s %g %.6g", name, g.Tolerance, v), v})
				}
			}
		}
	}
	pairs := map[string]int{}
	for i, p := range pieces {
		for j, q := range pieces {
			if j < i {
				continue
			}
			whole, lesser := p.value+q.value, min(p.value, q.value)
			if !adding {
				whole = 1 / (1/p.value + 1/q.value)
				lesser = whole * whole / max(p.value, q.value) // its share of 1/whole
			}
			if near(whole, lesser) {
				names := []string{p.name, q.name}
				slices.Sort(names)
				pairs[strings.Join(names, " with ")]++
			}
		}
	}
	return pairs
}

// TestPairFittings compares what pairs may fill a position with a naive double
// loop, for both joins and several windows, series and families. The lesser
// piece makes up a hundredth at least: of a sum it is that share of the value
// asked for, of reciprocals the greater value is at most a hundredfold.
func TestPairFittings(t *testing.T) {
	for _, c := range []struct {
		kind, families, grades string
		centre                 float64
		text                   string
	}{
		{"capacitor", "[c0g, polystyrene]", "", 220e-12, "220 pF"},
		{"capacitor", "[mica]", "[1 %]", 217e-12, "217 pF"},
		{"resistor", "[metal-film-50]", "", 4.85e3, "4.85 kΩ"},
		{"coil", "[drum-choke, air-core]", "", 100e-6, "100 uH"},
	} {
		for _, combine := range []build.Combine{build.Parallel, build.InSeries} {
			for _, name := range []string{"E6", "E24"} {
				for _, within := range []float64{0.005, 0.01, 0.03, 0.10} {
					t.Run(fmt.Sprintf("%s %s %s %g", c.kind, combine, name, within), func(t *testing.T) {
						choose := fmt.Sprintf("value: %s, choose: {families: %s, combine: [%s, single], within: %g %%, series: %s", c.text, c.families, combine, 100*within, name)
						if c.grades != "" {
							choose += ", tolerances: " + c.grades
						}
						b, o := opening(t, c.kind, choose+"}")
						all := series.Between(name, 1e-3*c.centre, 1e3*c.centre)
						adding := (combine == build.Parallel) == (c.kind == "capacitor")
						want := naive(t, b, o, combine, all, func(whole, lesser float64) bool {
							share := lesser / c.centre
							if !adding {
								share = lesser / whole * c.centre / whole // centre over the greater value
							}
							return math.Abs(whole/c.centre-1) <= within+1e-12 && share >= 0.01-1e-12
						})
						comparePairs(t, b.Fittings(o), combine, o.Type, want)
						nearestFirst(t, b.Fittings(o), c.centre)
					})
				}
			}
		}
	}
}

// comparePairs holds fittings of pairs against what is wanted: each once, the
// greater contributor first, the whole worth what the two come to.
func comparePairs(t *testing.T, list []build.Fitting, combine build.Combine, kind part.Type, want map[string]int) {
	t.Helper()
	got := map[string]int{}
	for _, f := range list {
		if f.Combine == build.Single {
			continue
		}
		p, q := f.Pieces[0], f.Pieces[1]
		sum, first := p.High+q.High, p.High >= q.High
		if (combine == build.Parallel) != (kind == part.Capacitor) {
			sum, first = p.High*q.High/(p.High+q.High), p.High <= q.High
		}
		if f.Combine != combine || !first || !(math.Abs(f.High/sum-1) <= 1e-12) || f.Low != f.High {
			t.Errorf("%s of %s: worth %g, want %g", f.Combine, f.Text, f.High, sum)
		}
		sign := map[build.Combine]string{build.Parallel: " ∥ ", build.InSeries: " + "}[combine]
		if f.Text != p.Text+sign+q.Text {
			t.Errorf("%s and %s are written %s", p.Text, q.Text, f.Text)
		}
		var names []string
		for _, x := range f.Pieces {
			names = append(names, fmt.Sprintf("%s %g %.6g", x.Family, x.Tolerance, x.High))
			if main := x.Part.Main(); main.Value != x.High || x.Part.Grade() != x.Tolerance || x.Part.Family != x.Family {
				t.Errorf("%s is placed as %s %s", names[len(names)-1], x.Part.Family, x.Part.ValueText())
			}
		}
		slices.Sort(names)
		got[strings.Join(names, " with ")]++
	}
	for name, n := range want {
		if got[name] != n || n != 1 {
			t.Errorf("%s stands %d times, want %d", name, got[name], n)
		}
	}
	if len(got) != len(want) {
		t.Errorf("%d pairs, want %d", len(got), len(want))
	}
}

// nearestFirst asks that pairs come in the order of their distance.
func nearestFirst(t *testing.T, list []build.Fitting, centre float64) {
	t.Helper()
	last := 0.0
	for _, f := range list {
		if f.Combine == build.Single {
			continue
		}
		d := math.Abs(f.High/centre - 1)
		if d < last-1e-15 {
			t.Errorf("%s, %.3g off, comes after one that is %.3g off", f.Text, d, last)
		}
		last = d
	}
}

// TestPairsAreFound asks for some that everybody knows, so that a comparison of
// nothing with nothing is noticed: 180 + 39 is 219 pF, 100 + 120 are 220 exactly;
// 10 and 10 kΩ in parallel are 5 kΩ.
func TestPairsAreFound(t *testing.T) {
	for _, c := range []struct{ kind, choose, want string }{
		{"capacitor", "value: 219 pF, choose: {families: [c0g], combine: [parallel], within: 0.1 %}", "180 pF ∥ 39 pF"},
		{"capacitor", "value: 220 pF, choose: {families: [c0g], combine: [parallel], within: 0 %}", "120 pF ∥ 100 pF"},
		{"capacitor", "value: 220 pF, choose: {families: [c0g], combine: [parallel]}", "200 pF ∥ 20 pF"},
		{"capacitor", "choose: {families: [c0g], combine: [parallel], around: 220 pF}", "120 pF ∥ 100 pF"},
		{"capacitor", "choose: {families: [c0g], combine: [parallel], around: 217 pF}", "200 pF ∥ 18 pF"}, // no single one near
		{"resistor", "value: 5 kΩ, choose: {families: [carbon-film], combine: [parallel]}", "10 kΩ ∥ 10 kΩ"},
		{"resistor", "choose: {families: [metal-film-50], combine: [parallel, single], around: 4.73 kΩ}", "4.7 kΩ"},
		{"coil", "value: 1.22 mH, choose: {families: [drum-choke], combine: [series]}", "1 mH + 220 µH"},
	} {
		b, o := opening(t, c.kind, c.choose)
		if !slices.ContainsFunc(b.Fittings(o), func(f build.Fitting) bool { return f.Text == c.want }) {
			t.Errorf("%s: no %s among %d", c.choose, c.want, len(b.Fittings(o)))
		}
	}
}

// TestPairsOfListedValues takes any two of the listed values, in every grade of
// every family, whatever they come to: of n pieces n(n+1)/2 pairs.
func TestPairsOfListedValues(t *testing.T) {
	for _, c := range []struct {
		kind    string
		combine build.Combine
		text    string
		values  []float64
	}{
		{"capacitor", build.Parallel, "[180 pF, 39 pF, 1 nF]", []float64{180e-12, 39e-12, 1e-9}},
		{"capacitor", build.InSeries, "[180 pF, 39 pF]", []float64{180e-12, 39e-12}},
		{"capacitor", build.Parallel, "[180 pF]", []float64{180e-12}},
	} {
		b, o := opening(t, c.kind, fmt.Sprintf("choose: {families: [c0g, polystyrene], combine: [%s], values: %s}", c.combine, c.text))
		list := b.Fittings(o)
		comparePairs(t, list, c.combine, o.Type, naive(t, b, o, c.combine, c.values, func(float64, float64) bool { return true }))
		n := 0
		for _, family := range []string{"c0g", "polystyrene"} {
			f, _ := b.Families.Family(family)
			n += len(f.Grades) * len(c.values)
		}
		if len(list) != n*(n+1)/2 {
			t.Errorf("%s %s: %d pairs of %d pieces", c.combine, c.text, len(list), n)
		}
	}
}

// TestCombineOrder lists combinations in the order in which they are named, and
// lots within each.
func TestCombineOrder(t *testing.T) {
	b, o := opening(t, "capacitor", "value: 220 pF, choose: {families: [c0g], tolerances: [5 %], combine: [parallel, single, series], lots: [mixed, one]}")
	var order []string
	for _, f := range b.Fittings(o) {
		if at := fmt.Sprintf("%s %t", f.Combine, f.Mixed); len(order) == 0 || order[len(order)-1] != at {
			order = append(order, at)
		}
	}
	if got, want := strings.Join(order, ", "), "parallel true, parallel false, single true, single false, series true, series false"; got != want {
		t.Errorf("%s, want %s", got, want)
	}
}

// TestLotsInChoose doubles what may fill a position: the same from one lot and
// from mixed ones, whose pieces share none.
func TestLotsInChoose(t *testing.T) {
	const choose = "value: 220 pF, choose: {families: [c0g, polystyrene], combine: [single, parallel]"
	b, o := opening(t, "capacitor", choose+"}")
	plain := b.Fittings(o)
	both, o2 := opening(t, "capacitor", choose+", lots: [one, mixed]}")
	list := both.Fittings(o2)
	if len(list) != 2*len(plain) || len(plain) < 10 {
		t.Fatalf("%d with both lots, %d with one", len(list), len(plain))
	}
	count := map[string]int{}
	for _, f := range list {
		count[fmt.Sprint(f.Text, f.Pieces[0].Family, f.Pieces[0].Tolerance, f.Pieces[len(f.Pieces)-1].Tolerance, f.Pieces[len(f.Pieces)-1].Family, f.Mixed)]++
		for _, p := range f.Pieces {
			if p.Part.LotsMixed != f.Mixed {
				t.Errorf("%s, mixed %t, has a piece that is mixed %t", f.Text, f.Mixed, p.Part.LotsMixed)
			}
			for name, x := range build.PieceInputs(p.Part) {
				if shared := x.Lot >= 0; shared == f.Mixed && x.Shape != "" {
					t.Errorf("%s of %s, mixed %t, has lot %d", name, f.Text, f.Mixed, x.Lot)
				}
			}
		}
	}
	if len(count) != len(list) {
		t.Errorf("%d of %d fittings are different", len(count), len(list))
	}
	for text, want := range map[string]bool{
		"value: 220 pF, choose: {families: [c0g]}":                                 false,
		"value: 220 pF, lots: mixed, choose: {families: [c0g]}":                    true,
		"value: 220 pF, lots: mixed, choose: {families: [c0g], lots: [one]}":       false,
		"value: 220 pF, choose: {families: [c0g], lots: mixed}":                    true,
		"value: 220 pF, lots: one, choose: {families: [c0g], lots: [mixed]}":       true,
		"value: 220 pF, lots: mixed, choose: {families: [c0g], combine: parallel}": true,
	} {
		b, o := opening(t, "capacitor", text)
		for _, f := range b.Fittings(o) {
			if f.Mixed != want || f.Pieces[0].Part.LotsMixed != want {
				t.Errorf("%s: mixed %t, want %t", text, f.Mixed, want)
				break
			}
		}
	}
}

// TestFitPairs fills both positions with a pair, under references of their own.
func TestFitPairs(t *testing.T) {
	b, o := opening(t, "capacitor", "value: 219 pF, choose: {families: [c0g, polystyrene], combine: [single, parallel], within: 0.1 %}")
	for _, f := range b.Fittings(o) {
		fitted, err := b.Fit([]build.Fitting{f})
		if err != nil {
			t.Fatal(err)
		}
		x, y := fitted.Place("own.x"), fitted.Place("own.y")
		want := []string{"X1", "X2"}
		if f.Combine == build.Parallel {
			want = []string{"X1A", "X1B", "X2A", "X2B"}
		}
		if got := append(x.Refs(), y.Refs()...); !slices.Equal(got, want) || x.Quantity != f.Text || y.Quantity != f.Text || x.Base() != "X1" || y.Base() != "X2" {
			t.Errorf("%s fills %v as %s and %s", f.Text, got, x.Quantity, y.Quantity)
		}
		for i, p := range f.Pieces {
			if got := y.Pieces()[i]; got.Family != p.Family || got.ValueText() != p.Part.ValueText() || got.Grade() != p.Tolerance {
				t.Errorf("%s has %s %s", f.Text, got.Family, got.ValueText())
			}
		}
		if got := b.Place("own.x"); got.Paired() || got.Part.Ref != "X1" {
			t.Errorf("the original has %v", got.Refs())
		}
	}
}

// TestPairGrade is how far the whole may be off with both pieces at their limits
// and at one side: 180 pF ±5 % with 39 pF ±2.5 % is 9 + 0.975 pF of 219; of 1 kΩ
// ±1 % and 3 kΩ ±5 % in parallel to first order 3/4·1 % + 1/4·5 % = 2 %.
func TestPairGrade(t *testing.T) {
	piece := func(v, t float64) build.Piece { return build.Piece{Tolerance: t, Worth: build.Worth{Low: v, High: v}} }
	pair := func(c build.Combine, a, b build.Piece) build.Fitting {
		return build.Fitting{Combine: c, Pieces: []build.Piece{a, b}}
	}
	for _, c := range []struct {
		f    build.Fitting
		kind part.Type
		want float64
	}{
		{pair(build.Parallel, piece(180, 0.05), piece(39, 0.025)), part.Capacitor, (9 + 0.975) / 219},
		{pair(build.Parallel, piece(1000, 0.01), piece(3000, 0.05)), part.Resistor, 0.02},
		{pair(build.InSeries, piece(3000, 0.05), piece(1000, 0.01)), part.Resistor, 0.04},
		{pair(build.InSeries, piece(100, 0.01), piece(300, 0.05)), part.Capacitor, 0.02},
		{build.Fitting{Combine: build.Single, Pieces: []build.Piece{piece(180, 0.05)}}, part.Capacitor, 0.05},
	} {
		if got := c.f.Grade(c.kind); !(math.Abs(got-c.want) <= 1e-15) {
			t.Errorf("%s of a %s: %.12g, want %.12g", c.f.Combine, c.kind, got, c.want)
		}
	}
}
