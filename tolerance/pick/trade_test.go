package pick

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"batchwright/bom/offer"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// tradePoint is a point as enumeration finds it.
type tradePoint struct {
	money                int64
	predicted, simulated float64
}

// tradeByForce lists the efficient ones of all choices that meet every target
// but one, of which only what the trims leave is asked, and then leaves out what
// is no steadier in simulation than what is cheaper.
func tradeByForce(t *testing.T, b *build.Build, target int, o Options) (points []tradePoint, beaten int) {
	t.Helper()
	open := *b
	open.Targets = slices.Clone(b.Targets)
	open.Targets[target].Low, open.Targets[target].High = math.Inf(-1), math.Inf(1)
	c, asked := chooserOf(t, &open, o), chooserOf(t, b, o)
	var best [][]int
	steady := math.Inf(1)
	list := byMoney(t, c)
	for len(list) > 0 {
		n := 1 // all of one price
		cost := c.money(list[0])
		for n < len(list) && c.money(list[n]) == cost {
			n++
		}
		same := slices.Clone(list[:n])
		list = list[n:]
		slices.SortStableFunc(same, func(x, y []int) int {
			return compareFloats(asked.steadiness(x, target), asked.steadiness(y, target))
		})
		for _, choice := range same {
			w := asked.steadiness(choice, target)
			if !(w < steady) {
				break
			}
			if passes(t, c, choice) {
				best, steady = append(best, choice), w
				break
			}
		}
	}
	for _, choice := range best {
		p := tradePoint{c.money(choice), asked.steadiness(choice, target), simulatedWidth(t, asked, choice, target)}
		if n := len(points); n > 0 && !(p.simulated < points[n-1].simulated) {
			beaten++
			continue
		}
		points = append(points, p)
	}
	return points, beaten
}

func compareFloats(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// simulatedWidth is the widest half width of a target's changes, from the
// judgement of the whole build.
func simulatedWidth(t *testing.T, c *chooser, choice []int, target int) float64 {
	t.Helper()
	b, err := c.fit(choice)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.CompileTargets()
	if err != nil {
		t.Fatal(err)
	}
	j, err := spread.Judge(context.Background(), m, spread.Options{Seed: c.Seed, Units: c.Units})
	if err != nil {
		t.Fatal(err)
	}
	var widest spread.Figure
	for _, x := range j.Targets[target].Changes {
		widest = max(widest, x.HalfWidth)
	}
	return float64(widest)
}

var tradeBuilds = map[string]string{
	"tanks":   tanks("80 Hz"),
	"merging": merging(),
	"two conditions": strings.NewReplacer("  warm:  {warmup: 1}", "  warm:  {warmup: 1}\n  cold:  {temperature: 5 °C}",
		"at: [warm]", "at: [warm, cold]", "tolerances: [1 %, 5 %]", "tolerances: [1 %, 5 %], lots: [one, mixed]").Replace(tanks("80 Hz")),
	"a worst case": strings.Replace(tanks("80 Hz"), "limit: 80 Hz, share: 95 %", "limit: 80 Hz, by: worst-case", 1),
	"pairs":        fmt.Sprintf(bruteBuilds[0].text, "120 Hz"),
}

// TestTradeByForce compares with every choice.
func TestTradeByForce(t *testing.T) {
	points, thinned := 0, 0
	for name, text := range tradeBuilds {
		for _, few := range []int{0, 1} {
			t.Run(fmt.Sprint(name, " ", few), func(t *testing.T) {
				b, o := read(t, text), Options{Seed: 5, Units: 400, few: few}
				want, beaten := tradeByForce(t, b, 0, o)
				got, err := Efficient(context.Background(), b, "drift", math.MaxInt64, o)
				if err != nil || !got.Complete || got.Beaten != beaten || (got.Provided == "") != (few == 0) {
					t.Fatalf("%+v, want %d beaten, %v", got, beaten, err)
				}
				var list []tradePoint
				for _, p := range got.Points {
					list = append(list, tradePoint{int64(p.Total), float64(p.Predicted), float64(p.Simulated)})
				}
				if !slices.EqualFunc(want, list, func(a, b tradePoint) bool {
					return a.money == b.money && near(a.predicted, b.predicted) && near(a.simulated, b.simulated)
				}) {
					t.Errorf("points %+v\nwant   %+v", list, want)
				}
				points, thinned = points+len(want), thinned+beaten
			})
		}
	}
	if points < 20 || thinned == 0 {
		t.Errorf("%d points, %d left out: the test proves little", points, thinned)
	}
}

// TestSteadiestWithin asks for the steadiest at every price of the trade, just
// above, just below, and below the cheapest.
func TestSteadiestWithin(t *testing.T) {
	b, o := read(t, tradeBuilds["pairs"]), Options{Seed: 5, Units: 400}
	c := chooserOf(t, b, o)
	trade, err := Efficient(context.Background(), b, "drift", math.MaxInt64, o)
	if err != nil || len(trade.Points) < 3 {
		t.Fatal(trade, err)
	}
	for n, p := range trade.Points {
		for _, more := range []offer.Money{0, 1, -1} {
			r, fitted, err := Steadiest(context.Background(), b, "drift", p.Total+more, o)
			if err != nil {
				t.Fatal(err)
			}
			at := n
			if more < 0 {
				at--
			}
			if at < 0 {
				if len(r.Choices) > 0 || !strings.Contains(r.Why, "nothing within") {
					t.Errorf("below the cheapest: %+v", r)
				}
				continue
			}
			want := trade.Points[at]
			if int64(r.Total) != int64(want.Total) || c.order(fitted.Parts()).Total != r.Total || !near(c.steadiness(chosenIn(t, c, r), 0), float64(want.Predicted)) {
				t.Errorf("within %v: %v, want %v with %v", p.Total+more, r.Total, want.Total, want.Predicted)
			}
			if r.Targets[0].Share != want.Complying || r.Targets[0].Met != want.Met || len(r.Remains) != 1 || r.ProvedCheapest || r.Why != "" {
				t.Errorf("within %v: %+v", p.Total+more, r)
			}
		}
	}
}

// TestMoreMoneyNoLess draws prices: more money is never less steady, to first
// order. And limits: a wider one is never dearer.
func TestMoreMoneyNoLess(t *testing.T) {
	if testing.Short() {
		t.Skip("two dozen searches")
	}
	r := rand.New(rand.NewPCG(9, 1))
	b, o := read(t, merging()), Options{Seed: 2, Units: 240}
	c := chooserOf(t, b, o)
	prices := []offer.Money{}
	for range 10 {
		prices = append(prices, offer.Money(20_0000+r.IntN(60_0000)))
	}
	slices.Sort(prices)
	before, got := math.Inf(1), 0
	for _, most := range prices {
		r, _, err := Steadiest(context.Background(), b, "drift", most, o)
		if err != nil {
			t.Fatal(err)
		}
		if len(r.Choices) == 0 {
			if !math.IsInf(before, 1) {
				t.Errorf("nothing within %v, though there was within less", most)
			}
			continue
		}
		got++
		if w := c.steadiness(chosenIn(t, c, r), 0); w > before || r.Total > most {
			t.Errorf("within %v: %v for %v, but %v for less", most, w, r.Total, before)
		} else {
			before = w
		}
	}
	var limits []float64
	for range 14 {
		limits = append(limits, 30+270*r.Float64())
	}
	slices.Sort(limits)
	dearest, met := offer.Money(math.MaxInt64), 0
	for _, limit := range limits {
		r, _, err := Choose(context.Background(), read(t, strings.Replace(merging(), "60 Hz", fmt.Sprintf("%g Hz", limit), 1)), o)
		switch {
		case err != nil:
			t.Fatal(err)
		case r.ProvedCheapest && r.Total > dearest:
			t.Errorf("±%g Hz costs %v, a closer limit %v", limit, r.Total, dearest)
		case !r.ProvedCheapest && met > 0:
			t.Errorf("±%g Hz is out of reach, a closer limit is not", limit)
		case r.ProvedCheapest:
			dearest = r.Total
			met++
		}
	}
	if got < 4 || met < 6 {
		t.Errorf("%d prices and %d limits can be had: the test proves little", got, met)
	}
}
