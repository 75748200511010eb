package exact

import (
	"math"
	"math/rand/v2"
	"slices"
)

// A market is a random problem with everything that keeps a real one from
// being a sum: lines that buy the same offer share its price breaks and its
// stock and, coming from one bag, vary together; an option may be a pair of
// pieces, from two offers or from one.
type market struct {
	Problem
	offers [][][]int       // line, option -> offers, one for each piece
	needs  []int           // units per line
	shelf  []shelf         // by offer
	slope  [][][][]float64 // line, option, piece, demand: signed deviation
	rho    float64
	refuse float64 // share of choices that Confirm refuses
	salt   uint64
	asked  [][]int // choices Confirm was asked about, in order
}

// A shelf is how an offer is sold.
type shelf struct {
	breaks   []priceStep
	multiple int
	stock    int
}

type priceStep struct {
	from int
	each int64
}

// price is the cheapest way to hold at least n pieces of an offer, bought in
// multiples and from stock.
func (m *market) price(offer, n int) int64 {
	if n == 0 {
		return 0
	}
	best, s := Unavailable, m.shelf[offer]
	for _, b := range s.breaks {
		buy := (max(n, b.from) + s.multiple - 1) / s.multiple * s.multiple
		if buy <= s.stock {
			best = min(best, int64(buy)*b.each)
		}
	}
	return best
}

func (m *market) cost(choice []int) int64 {
	pieces := make([]int, len(m.shelf))
	for i, j := range choice {
		for _, offer := range m.offers[i][j] {
			pieces[offer] += m.needs[i]
		}
	}
	sum := m.Base
	for offer, n := range pieces {
		price := m.price(offer, n)
		if price == Unavailable {
			return Unavailable
		}
		sum += price
	}
	return sum
}

// total adds means and half widths, and variances with correlation rho between
// pieces of the same offer:
//
//	variance = sum s^2 + 2 rho sum over pairs of one offer s_i s_j
//	         = (1-rho) sum s^2 + rho sum over offers (sum s)^2 >= (1-rho) sum s^2
func (m *market) total(q int, choice []int) Effect {
	d := &m.Demands[q]
	t := Effect{d.BaseMean, d.BaseVariance, d.BaseHalf}
	bags := make([]float64, len(m.shelf))
	for i, j := range choice {
		e := m.Lines[i].Options[j].Effects[q]
		t.add(Effect{e.Mean, 0, e.Half})
		m.bag(bags, &t, q, i, j)
	}
	for _, sum := range bags {
		t.Variance += m.rho * sum * sum
	}
	return t
}

// bag adds an option's pieces to the sums by offer, and what of their variance
// is their own.
func (m *market) bag(bags []float64, t *Effect, q, i, j int) {
	for k, offer := range m.offers[i][j] {
		s := m.slope[i][j][k][q]
		bags[offer] += s
		t.Variance += (1 - m.rho) * s * s
	}
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
	pairs                   float64 // chance that an option is two pieces
	scarce                  bool    // stocks and multiples
	pennies                 bool    // prices of 1 to 4, so that sums lie close together
	marked                  float64 // chance that a line has options marked as dominated
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
	if s.pennies {
		steps = []priceStep{{1, 1 + each%4}}
	}
	sold := shelf{steps, 1, math.MaxInt}
	if s.scarce {
		sold.multiple, sold.stock = 1+r.IntN(3), 1+r.IntN(14)
	}
	m.shelf = append(m.shelf, sold)
	return len(m.shelf) - 1
}

// addLine draws options; a dearer one tends to scatter less.
func (m *market) addLine(r *rand.Rand, s shape, shared int) {
	var line Line
	var offers [][]int
	var slopes [][][]float64
	side := make([]float64, s.demands)
	for q := range side {
		side[q] = (0.3 + r.Float64()) * float64(1-2*r.IntN(2))
	}
	for range s.options {
		o, offer, slope := Option{Effects: make([]Effect, s.demands)}, []int{}, [][]float64{}
		pieces := 1
		if s.pairs > 0 && r.Float64() < s.pairs {
			pieces = 2
		}
		for range pieces {
			from, slopes := m.piece(r, s, shared, side, o.Effects)
			offer, slope = append(offer, from), append(slope, slopes)
		}
		line.Options, offers, slopes = append(line.Options, o), append(offers, offer), append(slopes, slope)
	}
	if s.marked > 0 && r.Float64() < s.marked {
		for range 2 {
			k := r.IntN(len(line.Options))
			o, offer, slope := m.worse(r, s, line.Options[k], offers[k], slopes[k])
			line.Options, offers, slopes = append(line.Options, o), append(offers, offer), append(slopes, slope)
		}
	}
	m.Lines = append(m.Lines, line)
	m.offers = append(m.offers, offers)
	m.slope = append(m.slope, slopes)
}

// piece draws one piece of an option and adds its effects.
func (m *market) piece(r *rand.Rand, s shape, shared int, side []float64, effects []Effect) (offer int, slope []float64) {
	offer = r.IntN(shared)
	if r.Float64() >= s.merge {
		offer = m.addOffer(r, s)
	}
	spread := 3 / math.Sqrt(float64(m.shelf[offer].breaks[0].each)) * math.Exp(0.3*r.NormFloat64())
	slope = make([]float64, s.demands)
	for q := range effects {
		slope[q] = spread * side[q]
		effects[q].add(Effect{0.6 * r.NormFloat64() * side[q], slope[q] * slope[q], 2 * math.Abs(slope[q])})
	}
	return offer, slope
}

// worse is an option that another stands in for: the same once more, or with a
// piece besides that only costs and widens worst cases.
func (m *market) worse(r *rand.Rand, s shape, o Option, offer []int, slope [][]float64) (Option, []int, [][]float64) {
	o.Dominated, o.Effects = true, slices.Clone(o.Effects)
	if r.IntN(2) == 0 {
		return o, offer, slope
	}
	for q := range o.Effects {
		o.Effects[q].Half += 0.1
	}
	return o, append(slices.Clone(offer), m.addOffer(r, s)), append(slices.Clone(slope), make([]float64, s.demands))
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
			option := &m.Lines[i].Options[j]
			option.Alone, option.Floor = true, 0
			for k, offer := range m.offers[i][j] {
				if slices.Contains(m.offers[i][j][:k], offer) {
					continue
				}
				others := m.others(i, offer)
				option.Alone = option.Alone && len(others) == 1
				option.Floor = min(option.Floor+m.adds(i, j, offer, others), Unavailable)
			}
			for q := range option.Effects {
				bags, t := make([]float64, len(m.shelf)), Effect{}
				m.bag(bags, &t, q, i, j)
				if option.Alone {
					for _, sum := range bags {
						t.Variance += m.rho * sum * sum
					}
				}
				option.Effects[q].Variance = t.Variance
			}
		}
	}
}

// adds is the least that an option's pieces of an offer add to the money,
// Unavailable when there are never enough.
func (m *market) adds(i, j, offer int, others []int) int64 {
	own := 0
	for _, o := range m.offers[i][j] {
		if o == offer {
			own += m.needs[i]
		}
	}
	least := Unavailable
	for _, n := range others {
		if with := m.price(offer, n+own); with < Unavailable {
			least = min(least, with-m.price(offer, n))
		}
	}
	return least
}

// others are the quantities of an offer that lines other than i can come to.
func (m *market) others(i, offer int) []int {
	sums := []int{0}
	for k := range m.Lines {
		if k == i {
			continue
		}
		for _, n := range slices.Clone(sums) {
			for _, offers := range m.offers[k] {
				sum := n
				for _, o := range offers {
					if o == offer {
						sum += m.needs[k]
					}
				}
				if !slices.Contains(sums, sum) {
					sums = append(sums, sum)
				}
			}
		}
	}
	return sums
}

// A brute is what looking at every choice finds.
type brute struct {
	choice   []int
	cost     int64
	nearest  []int
	verdict  Verdict
	nearCost int64
	scarce   bool // some choice meets the demands and cannot be bought
}

func (m *market) brute() brute {
	var b brute
	choice := make([]int, len(m.Lines))
	for {
		if cost := m.cost(choice); cost == Unavailable {
			b.scarce = b.scarce || m.meets(choice)
		} else if (b.choice == nil || cost < b.cost) && m.meets(choice) && m.willing(choice) {
			b.choice, b.cost = slices.Clone(choice), cost
		}
		if !m.next(choice) {
			break
		}
	}
	for b.choice == nil {
		if cost, v := m.cost(choice), m.judge(choice); cost < Unavailable && (b.nearest == nil ||
			v.Shortfall < b.verdict.Shortfall || v.Shortfall == b.verdict.Shortfall && cost < b.nearCost) {
			b.nearest, b.verdict, b.nearCost = slices.Clone(choice), v, cost
		}
		if !m.next(choice) {
			break
		}
	}
	return b
}
