package exact

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// bestShare against a grid of means and variances: never below what the grid
// finds, and not above it by more than the grid's coarseness.
func TestBestShareBoundsAGrid(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 1))
	for n := range 300 {
		low := r.NormFloat64()
		high := low + r.ExpFloat64()
		meanLow := 2 * r.NormFloat64()
		meanHigh, least := meanLow+0.5*r.ExpFloat64(), 0.5*r.ExpFloat64()
		switch n % 4 {
		case 1:
			high = inf
		case 2:
			low = -inf
		}
		best := bestShare(low, high, meanLow, meanHigh, least)
		found := 0.0
		for i := range 61 {
			m := meanLow + (meanHigh-meanLow)*float64(i)/60
			for k := range 120 {
				v := least * math.Exp(float64(k)/8)
				found = max(found, ShareOfNormal(m, v, low, high))
			}
		}
		if found > best*(1+1e-12) || best > found+0.02 {
			t.Fatalf("case %d: bound %v, grid %v; window %v..%v, mean %v..%v, variance from %v", n, best, found, low, high, meanLow, meanHigh, least)
		}
	}
}

// Every row of a share demand must hold wherever the demand does, on a grid of
// means and deviations, and cut all but a little of the rest.
func TestRowsHoldWhereTheDemandDoes(t *testing.T) {
	for name, d := range map[string]Demand{
		"90 %":         {Low: -2, High: 3, Share: 0.9},
		"99.9 %":       {Low: -2, High: 3, Share: 0.999},
		"just above ½": {Low: -2, High: 3, Share: 0.51},
		"all":          {Low: -2, High: 3, Share: 1},
		"low only":     {Low: -2, High: inf, Share: 0.99},
		"high only":    {Low: -inf, High: 3, Share: 0.99},
		"far away":     {Low: 330e3, High: 330e3 + 5, Share: 0.95},
		"worst case":   {Low: -2, High: 3, WorstCase: true},
		"at a point":   {Low: 2, High: 2, Share: 0.8},
	} {
		t.Run(name, func(t *testing.T) {
			centre := max(-2, d.Low)
			p := &Problem{Demands: []Demand{d}, Lines: []Line{{Options: []Option{
				{Effects: []Effect{{0, 0, 0}}}, {Effects: []Effect{{0, 9, 0}}}}}}}
			rows := p.rows(0, p.spans(0, p.all()))
			holds, cut, all := 0, 0, 0
			for i := range 200 {
				for k := range 100 {
					m, s := centre-1+float64(i)*7/199, float64(k)*3/99
					e := Effect{m, s * s, s}
					broken := slices.ContainsFunc(rows, func(r row) bool {
						return r.use(e) > r.limit+forgive*(math.Abs(r.limit)+math.Abs(r.use(e)))
					})
					all++
					if d.Holds(m, e.Variance, e.Half) {
						if holds++; broken {
							t.Fatalf("mean %v, deviation %v meets the demand and breaks a row", m, s)
						}
					} else if broken {
						cut++
					}
				}
			}
			if d.High > d.Low && (holds == 0 || cut*2 < all-holds) {
				t.Errorf("%d of %d points hold, %d cut: hardly a condition", holds, all, cut)
			}
		})
	}
}

// The bound of every partial choice is at most the floors of each completion
// that meets the demands, and no completion of a cut one meets them.
func TestPartialBoundsAreSound(t *testing.T) {
	checked, cut := 0, 0
	for seed := range uint64(150) {
		s := randomShape(seed)
		s.refuse, s.lines = 0, min(s.lines, 4)
		m := newMarket(seed, s)
		sr := newSearch(&m.Problem, Limits{}.filled())
		b, _ := sr.prepare(m.all(), none)
		choice := make([]int, len(m.Lines))
		for {
			if m.judge(choice).Meets {
				if b == nil {
					t.Fatalf("seed %d: %v meets, but nothing was left", seed, choice)
				}
				kept, ok := inKept(b.kept, choice)
				if !ok {
					t.Fatalf("seed %d: %v meets, but lost an option without a ceiling", seed, choice)
				}
				at := b.newStanding()
				for depth := range b.order {
					b.stand(at, kept, depth)
					bound := b.bound(at, depth, kept[b.order[depth]], inf)
					if b.lattice.up(bound) > m.floor(choice) {
						t.Fatalf("seed %d: %v has floor %d, bound %v at depth %d", seed, choice, m.floor(choice), bound, depth)
					}
					checked++
				}
			} else if b == nil {
				cut++
			}
			if !m.next(choice) {
				break
			}
		}
	}
	if checked < 1000 || cut < 1000 {
		t.Errorf("%d bounds checked, %d choices cut: the draw no longer covers both", checked, cut)
	}
}

// Leaving out dominated options must not change the cheapest choice that Judge
// passes, nor which of equally cheap ones is the first.
func TestDominanceKeepsTheCheapest(t *testing.T) {
	gone := 0
	for seed := range uint64(400) {
		s := randomShape(seed)
		s.refuse, s.merge, s.options, s.lines = 0, 0.2, 6, min(s.lines, 4)
		m := newMarket(seed, s)
		kept, dropped := m.undominated()
		gone += dropped
		want := m.brute().choice
		if want == nil {
			continue
		}
		if _, ok := inKept(kept, want); !ok {
			t.Fatalf("seed %d: the cheapest, %v, has an option that was dropped: %v", seed, want, kept)
		}
	}
	if gone < 100 {
		t.Errorf("%d options dropped: hardly tested", gone)
	}
}

func TestDominance(t *testing.T) {
	share := Demand{Low: -1, High: 1, Share: 0.9}
	worst := Demand{Low: -1, High: 1, WorstCase: true}
	below := Demand{Low: -inf, High: 1, Share: 0.9}
	few := Demand{Low: -1, High: 1, Share: 0.3}
	cases := map[string]struct {
		d    Demand
		a, b Effect
		want bool
	}{
		"less variance":              {share, Effect{0, 1, 0}, Effect{0, 2, 0}, true},
		"more variance":              {share, Effect{0, 2, 0}, Effect{0, 1, 0}, false},
		"the same":                   {share, Effect{1, 2, 0}, Effect{1, 2, 0}, true},
		"mean elsewhere":             {share, Effect{0, 1, 0}, Effect{0.1, 1, 0}, false},
		"move paid for":              {share, Effect{0.01, 0, 0}, Effect{0, 0.3, 0}, true},
		"move not paid for":          {share, Effect{0.5, 0.29, 0}, Effect{0, 0.3, 0}, false},
		"away from the only limit":   {below, Effect{-1, 1, 0}, Effect{0, 1, 0}, true},
		"toward the only limit":      {below, Effect{0, 1, 0}, Effect{-1, 1, 0}, false},
		"scatter may help a few":     {few, Effect{0, 1, 0}, Effect{0, 2, 0}, false},
		"interval inside":            {worst, Effect{0.5, 0, 1}, Effect{0, 0, 2}, true},
		"interval sticks out":        {worst, Effect{1.5, 0, 1}, Effect{0, 0, 2}, false},
		"variance is no worst case":  {worst, Effect{0, 5, 1}, Effect{0, 1, 1}, true},
		"half width counts for that": {worst, Effect{0, 1, 2}, Effect{0, 1, 1}, false},
	}
	for name, c := range cases {
		t.Run(name, func(t *testing.T) {
			if got := c.d.noWorse(c.a, c.b, inf); got != c.want {
				t.Errorf("got %v, want %v", got, c.want)
			}
		})
	}
}

func TestQuantile(t *testing.T) {
	for _, p := range []float64{0.9, 0.5, 0.1, 1e-3, 1e-9, 1e-15, 1e-100} {
		if got := tail(quantile(p)); !(math.Abs(got-p) <= 1e-13*p*max(1, -math.Log(p))) {
			t.Errorf("tail of the %v quantile is %v", p, got)
		}
	}
}
