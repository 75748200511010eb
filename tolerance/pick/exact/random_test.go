package exact

import (
	"math"
	"math/rand/v2"
	"slices"
)

// A market is a random problem with everything that keeps a real one from
// being a sum: lines that buy the same offer share its price breaks and,
// coming from one bag, vary together.
type market struct {
	Problem
	offers [][]int       // line, option -> offer
	needs  []int         // pieces per line
	breaks [][]priceStep // by offer
	slope  [][][]float64 // line, option, demand: signed deviation
	rho    float64
	refuse float64 // share of choices that Confirm refuses
	salt   uint64
	asked  [][]int // choices Confirm was asked about, in order
}

type priceStep struct {
	from int
	each int64
}

// price is the cheapest way to hold at least n pieces of an offer.
func (m *market) price(offer, n int) int64 {
	if n == 0 {
		return 0
	}
	best := int64(math.MaxInt64)
	for _, s := range m.breaks[offer] {
		best = min(best, int64(max(n, s.from))*s.each)
	}
	return best
}

func (m *market) cost(choice []int) int64 {
	pieces := make([]int, len(m.breaks))
	for i, j := range choice {
		pieces[m.offers[i][j]] += m.needs[i]
	}
	sum := m.Base
	for offer, n := range pieces {
		sum += m.price(offer, n)
	}
	return sum
}

// total adds means and half widths, and variances with correlation rho between
// lines that chose the same offer:
//
//	variance = sum s^2 + 2 rho sum over pairs of one offer s_i s_j
//	         = (1-rho) sum s^2 + rho sum over offers (sum s)^2 >= (1-rho) sum s^2
func (m *market) total(q int, choice []int) Effect {
	d := &m.Demands[q]
	t := Effect{d.BaseMean, d.BaseVariance, d.BaseHalf}
	for i, j := range choice {
		e := m.Lines[i].Options[j].Effects[q]
		s := m.slope[i][j][q]
		t.add(Effect{e.Mean, s * s, e.Half})
		for k := range i {
			if m.offers[k][choice[k]] == m.offers[i][j] {
				t.Variance += 2 * m.rho * s * m.slope[k][choice[k]][q]
			}
		}
	}
	t.Variance = max(t.Variance, 0)
	return t
}

func (m *market) meets(choice []int) bool {
	for q := range m.Demands {
		if t := m.total(q, choice); !m.Demands[q].Holds(t.Mean, t.Variance, t.Half) {
			return false
		}
	}
	return true
}

// judge is the exact judgement, with the greatest miss as the shortfall.
func (m *market) judge(choice []int) Verdict {
	v := Verdict{Meets: true}
	for q := range m.Demands {
		d, t := &m.Demands[q], m.total(q, choice)
		if d.Holds(t.Mean, t.Variance, t.Half) {
			continue
		}
		if miss := d.Miss(t.Mean, t.Variance, t.Half) / d.Scale(); v.Meets || miss > v.Shortfall {
			v = Verdict{Shortfall: miss, Worst: q}
		}
	}
	return v
}

// willing is Confirm without the record.
func (m *market) willing(choice []int) bool {
	h := m.salt
	for _, j := range choice {
		h = (h ^ uint64(j+1)) * 0x9e3779b97f4a7c15
		h ^= h >> 29
	}
	return float64(h>>11)/(1<<53) >= m.refuse
}

type shape struct {
	lines, options, demands int
	merge                   float64 // chance that an option is an offer others may share
	rho, refuse             float64
	tight                   float64 // demands: 0 hopeless .. 1 loose
	whole                   int64   // money is a multiple of this, for ties
	mixed                   bool    // shares below one half and one-sided limits too
}

// newMarket draws a market; the same seed gives the same one.
func newMarket(seed uint64, s shape) *market {
	r := rand.New(rand.NewPCG(seed, 17))
	m := &market{rho: s.rho, refuse: s.refuse, salt: seed}
	m.Base = int64(r.IntN(50))
	shared := 3
	for range shared {
		m.addOffer(r, s)
	}
	for range s.lines {
		m.needs = append(m.needs, 1+r.IntN(4))
		m.addLine(r, s, shared)
	}
	for q := range s.demands {
		m.Demands = append(m.Demands, m.demand(r, s, q))
	}
	m.promise(shared)
	m.Cost = m.cost
	m.Judge = m.judge
	m.Confirm = func(choice []int) (bool, error) {
		m.asked = append(m.asked, slices.Clone(choice))
		return m.willing(choice), nil
	}
	return m
}

func (m *market) addOffer(r *rand.Rand, s shape) int {
	each := 10 + int64(r.IntN(90))
	steps := []priceStep{{1, each}}
	for from := 3; from < 12 && r.IntN(3) > 0; from += 3 {
		each = each*int64(70+r.IntN(25))/100 + 1
		steps = append(steps, priceStep{from, each})
	}
	for k := range steps {
		steps[k].each = max(1, steps[k].each/s.whole) * s.whole
	}
	m.breaks = append(m.breaks, steps)
	return len(m.breaks) - 1
}

// addLine draws options; a dearer one tends to scatter less.
func (m *market) addLine(r *rand.Rand, s shape, shared int) {
	var line Line
	var offers []int
	var slopes [][]float64
	side := make([]float64, s.demands)
	for q := range side {
		side[q] = (0.3 + r.Float64()) * float64(1-2*r.IntN(2))
	}
	for range s.options {
		offer := r.IntN(shared)
		if r.Float64() >= s.merge {
			offer = m.addOffer(r, s)
		}
		spread := 3 / math.Sqrt(float64(m.breaks[offer][0].each)) * math.Exp(0.3*r.NormFloat64())
		effects, slope := make([]Effect, s.demands), make([]float64, s.demands)
		for q := range effects {
			slope[q] = spread * side[q]
			effects[q] = Effect{Mean: 0.6 * r.NormFloat64() * side[q], Variance: slope[q] * slope[q], Half: 2 * math.Abs(slope[q])}
		}
		line.Options = append(line.Options, Option{Effects: effects})
		offers = append(offers, offer)
		slopes = append(slopes, slope)
	}
	m.Lines = append(m.Lines, line)
	m.offers = append(m.offers, offers)
	m.slope = append(m.slope, slopes)
}

// demand sets limits around what a random choice gives.
func (m *market) demand(r *rand.Rand, s shape, q int) Demand {
	d := Demand{BaseMean: r.NormFloat64(), BaseVariance: 0.05 * r.Float64(), BaseHalf: 0.1 * r.Float64(), WorstCase: r.IntN(3) == 0}
	mean, variance, half := d.BaseMean, d.BaseVariance, d.BaseHalf
	for i := range m.Lines {
		j := r.IntN(len(m.Lines[i].Options))
		e := m.Lines[i].Options[j].Effects[q]
		mean, variance, half = mean+e.Mean, variance+e.Variance, half+e.Half
	}
	wide := 0.3 + 1.2*s.tight
	d.Share = []float64{0.9, 0.99, 0.999, 0.6}[r.IntN(4)]
	reach := wide * 2.5 * math.Sqrt(variance)
	if d.WorstCase {
		reach = wide * half
	}
	d.Low, d.High = mean-reach*(0.6+0.8*r.Float64()), mean+reach*(0.6+0.8*r.Float64())
	if s.mixed {
		switch r.IntN(5) {
		case 0:
			d.Low = math.Inf(-1)
		case 1:
			d.High = math.Inf(1)
		case 2:
			d.Share = 0.05 + 0.4*r.Float64()
		}
	}
	return d
}

// promise sets floors, variances in company and Alone from what can merge.
func (m *market) promise(shared int) {
	for i := range m.Lines {
		for j := range m.Lines[i].Options {
			option, offer := &m.Lines[i].Options[j], m.offers[i][j]
			others := m.others(i, offer)
			option.Alone = len(others) == 1
			option.Floor = math.MaxInt64
			for _, n := range others {
				option.Floor = min(option.Floor, m.price(offer, n+m.needs[i])-m.price(offer, n))
			}
			if !option.Alone {
				for q := range option.Effects {
					option.Effects[q].Variance *= 1 - m.rho
				}
			}
		}
	}
}

// others are the quantities of an offer that lines other than i can come to.
func (m *market) others(i, offer int) []int {
	sums := []int{0}
	for k := range m.Lines {
		if k == i || !slices.Contains(m.offers[k], offer) {
			continue
		}
		for _, n := range sums {
			if !slices.Contains(sums, n+m.needs[k]) {
				sums = append(sums, n+m.needs[k])
			}
		}
	}
	slices.Sort(sums)
	return slices.Compact(sums)
}

// A brute is what looking at every choice finds.
type brute struct {
	choice   []int
	cost     int64
	nearest  []int
	verdict  Verdict
	nearCost int64
}

func (m *market) brute() brute {
	var b brute
	choice := make([]int, len(m.Lines))
	for {
		if cost := m.cost(choice); (b.choice == nil || cost < b.cost) && m.meets(choice) && m.willing(choice) {
			b.choice, b.cost = slices.Clone(choice), cost
		}
		if !m.next(choice) {
			break
		}
	}
	for b.choice == nil {
		cost, v := m.cost(choice), m.judge(choice)
		if b.nearest == nil || v.Shortfall < b.verdict.Shortfall || v.Shortfall == b.verdict.Shortfall && cost < b.nearCost {
			b.nearest, b.verdict, b.nearCost = slices.Clone(choice), v, cost
		}
		if !m.next(choice) {
			break
		}
	}
	return b
}
