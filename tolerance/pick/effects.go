package pick

import (
	"math"

	"batchwright/bom/order"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
	"batchwright/tolerance/tape"
)

// The linear picture is normal and first-order; the units are neither quite.
// A bounded shape lies within a limit more often than its normal stand-in
// (one bimodal part with its half width on the limit: always, against 81 %),
// so a share is asked for with this much less, and a worst case's half width
// counts for this much. What passes by mistake is refused by the simulation.
const (
	shareSlack = 0.2
	halfSlack  = 0.7
)

// demandNode is a target at one condition: a node of the model and its limits.
type demandNode struct {
	Demand
	target int
	node   func(m *build.Model) tape.Ref
}

// listDemands makes a demand of every target at each of its conditions. Of a
// trim's reach it is the place between the trimmer's ends at which a straight
// line would meet the value wanted, which says how far out of reach a trimmer
// is where its setting cannot.
func listDemands(m *build.Model) []demandNode {
	var list []demandNode
	for t, target := range m.Build.Targets {
		d := demandNode{target: t, Demand: Demand{
			Low: target.Low, High: target.High, WorstCase: target.WorstCase,
			Share: math.Max(0, target.Share-shareSlack),
		}}
		if target.Trim >= 0 {
			d.node = func(m *build.Model) tape.Ref {
				n, g := m.Trims[target.Trim], m.Graph
				return g.Div(n.AtLow, g.Sub(n.AtLow, n.AtHigh))
			}
			list = append(list, d)
			continue
		}
		for _, i := range m.Targets[t].Outputs {
			d.node = func(m *build.Model) tape.Ref { return m.Outputs[i].Node }
			list = append(list, d)
		}
	}
	return list
}

// picture is the linear picture of a fitted build: for each demand the mean,
// and what every part adds to variance and half width.
type picture struct {
	means    []float64
	variance []map[string]float64 // by reference
	half     []map[string]float64
}

func newPicture(m *build.Model, demands []demandNode) picture {
	var refs []tape.Ref
	for _, d := range demands {
		refs = append(refs, d.node(m))
	}
	l := spread.Linearise(m, refs...)
	p := picture{means: l.Values}
	for k := range demands {
		variance, half := map[string]float64{}, map[string]float64{}
		_, terms := l.Variance(k)
		for _, t := range terms {
			variance[m.Inputs[t.Input].Ref] += t.Variance
		}
		for i, x := range m.Inputs {
			half[x.Ref] += math.Abs(l.Slopes[k][i]) * x.HalfWidth
		}
		p.variance, p.half = append(p.variance, variance), append(p.half, half)
	}
	return p
}

// of is what some parts add to a demand. Correlation may make a part's share
// of a variance negative; a lot's whole share is not.
func (p picture) of(k int, refs []string) (variance, half float64) {
	for _, ref := range refs {
		variance += p.variance[k][ref]
		half += p.half[k][ref]
	}
	return math.Max(0, variance), half * halfSlack
}

// problem compiles the openings into a search: each option on its own, the
// other openings as they are in the base.
func (c *chooser) problem() (*Problem, error) {
	fitted, err := c.build.Fit(c.base)
	if err != nil {
		return nil, err
	}
	m, err := fitted.Compile()
	if err != nil {
		return nil, err
	}
	c.demands = listDemands(m)
	base := newPicture(m, c.demands)
	p := &Problem{Cost: c.cost, Confirm: c.confirm, Base: c.fixedMoney()}
	for k, d := range c.demands {
		d.BaseMean = base.means[k]
		d.BaseVariance, d.BaseHalf = base.of(k, c.fixedRefs(m))
		p.Demands = append(p.Demands, d.Demand)
	}
	for i := range c.fittings {
		line, err := c.line(i, base)
		if err != nil {
			return nil, err
		}
		p.Lines = append(p.Lines, line)
	}
	return p, nil
}

// line compiles the options of one opening.
func (c *chooser) line(i int, base picture) (Line, error) {
	var line Line
	refs := c.refs(i)
	for _, f := range c.fittings[i] {
		choice := append([]build.Fitting(nil), c.base...)
		choice[i] = f
		b, err := c.build.Fit(choice)
		if err != nil {
			return line, err
		}
		m, err := b.Compile()
		if err != nil {
			return line, err
		}
		own := newPicture(m, c.demands)
		o := Option{Alone: c.alone(i, f)}
		o.Floor = c.floor(i, f, o.Alone)
		for k := range c.demands {
			e := Effect{Mean: own.means[k] - base.means[k]}
			e.Variance, e.Half = own.of(k, refs)
			o.Effects = append(o.Effects, e)
		}
		line.Options = append(line.Options, o)
	}
	return line, nil
}

// refs are the references at an opening's positions.
func (c *chooser) refs(i int) []string {
	var refs []string
	for _, position := range c.build.Openings[i].Positions {
		refs = append(refs, c.build.Place(position).Part.Ref)
	}
	return refs
}

// fixedRefs are the references of everything that scatters and is not open.
func (c *chooser) fixedRefs(m *build.Model) []string {
	open := map[string]bool{}
	for i := range c.fittings {
		for _, ref := range c.refs(i) {
			open[ref] = true
		}
	}
	var refs []string
	for _, x := range m.Inputs {
		if !open[x.Ref] {
			open[x.Ref] = true // each once
			refs = append(refs, x.Ref)
		}
	}
	return refs
}

// fixedMoney is what the parts that are not open cost by themselves.
func (c *chooser) fixedMoney() int64 {
	open := map[string]bool{}
	for i := range c.fittings {
		for _, ref := range c.refs(i) {
			open[ref] = true
		}
	}
	parts := c.build.Parts()
	var fixed = parts[:0:0]
	for _, p := range parts {
		if !open[p.Ref] {
			fixed = append(fixed, p)
		}
	}
	return int64(c.order(fixed).Total)
}

// alone says whether nothing else in the build, and nothing that may fill
// another opening, is bought on the same line as a fitting.
func (c *chooser) alone(i int, f build.Fitting) bool {
	key := order.Key(f.Part)
	for j, others := range c.fittings {
		for _, other := range others {
			if j != i && order.Key(other.Part) == key {
				return false
			}
		}
	}
	return c.fixedCount(key) == 0
}

// fixedCount is how many parts that are not open are bought on a line.
func (c *chooser) fixedCount(key string) int {
	open := map[string]bool{}
	for i := range c.fittings {
		for _, ref := range c.refs(i) {
			open[ref] = true
		}
	}
	n := 0
	for _, p := range c.build.Parts() {
		if !open[p.Ref] && order.Key(p) == key {
			n++
		}
	}
	return n
}

// floor is the least that an option can add to the money: its own price where
// it is alone on its line; otherwise the least over every number of pieces
// that others may put on that line.
func (c *chooser) floor(i int, f build.Fitting, alone bool) int64 {
	own := len(c.build.Openings[i].Positions)
	if alone {
		money, _ := c.buying(f.Part, own)
		return int64(money)
	}
	least := int64(math.MaxInt64)
	for others := range c.company(i, f) {
		with, _ := c.buying(f.Part, others+own)
		without, _ := c.buying(f.Part, others)
		least = min(least, int64(with-without))
	}
	return least
}

// company is every number of pieces that others may put on a fitting's line.
func (c *chooser) company(i int, f build.Fitting) map[int]bool {
	key := order.Key(f.Part)
	counts := map[int]bool{c.fixedCount(key): true}
	for j, others := range c.fittings {
		if j == i {
			continue
		}
		for _, other := range others {
			if order.Key(other.Part) != key {
				continue
			}
			for n := range counts {
				counts[n+len(c.build.Openings[j].Positions)] = true
			}
			break
		}
	}
	return counts
}
