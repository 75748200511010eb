// Package exact searches for the cheapest choice of one option for each of
// several lines that meets every demand, and proves that nothing cheaper does.
// It knows nothing of builds: package pick turns those into a Problem.
package exact

import (
	"fmt"
	"math"
	"slices"
	"time"
)

// A Problem is the choice of one option for every line so that the money is
// least and every demand holds.
//
// A choice holds one option's index per line, in the order of Lines. Demands
// and Floor serve to cut early and are promises about Cost and Judge: where a
// promise is broken the answer may be dearer than the cheapest. The promises
// are stated at Option and Effect.
type Problem struct {
	Lines   []Line
	Demands []Demand
	// Base is money owed whatever is chosen, a lower bound: for every choice
	// Cost >= Base + the sum of the chosen options' floors.
	Base int64
	// Cost is the exact money of a full choice, Unavailable when it cannot be
	// bought. Price breaks and lines that buy the same thing make it more than
	// a sum. nil: Base plus the floors.
	Cost func(choice []int) int64
	// Judge is the exact linear judgement of a full choice; lots that merge
	// make it more than a sum. nil: the demands with the effects added up.
	Judge func(choice []int) Verdict
	// Confirm is the simulation. It is asked only about choices that Judge
	// passes, in the order of cost and then of choice, each at most once.
	// nil: no confirmation is needed.
	Confirm func(choice []int) (bool, error)
}

// Unavailable is the cost of a choice that cannot be bought, as where lines
// together ask for more of an offer than is in stock. Such a choice is never
// judged, chosen or nearest. Costs at or above it mean the same, and so does a
// floor for every choice with that option. Base and floors may be its lower
// bounds as ever: what they come to must stay below it.
//
// A stock can be a demand besides, so that the search cuts early: worst case,
// the pieces bought as means, the stock as High.
const Unavailable int64 = 1 << 60

// A Line is one open buying line.
type Line struct {
	Options []Option
}

// An Option is one way to fill a line.
type Option struct {
	// Floor is at most what this option adds to the money, whatever else is
	// chosen. Where several lines may buy the same offer, the least of
	// price(others+own) - price(others) over the quantities the others can
	// come to is such a floor.
	Floor int64
	// Effects says what the option does to each demand, in their order.
	Effects []Effect
	// Alone promises that nothing else chosen changes this option's part in
	// money or demands: it adds exactly Floor to the cost and exactly Effects
	// to what Judge judges. Only such options are compared for dominance.
	Alone bool
	// Dominated promises that an option of its line without this mark stands in
	// for it, whatever else is chosen: the choice with that one is judged to
	// meet and can be bought wherever the choice with this one is, and costs
	// less, or the same and comes before it in order.
	Dominated bool
}

// An Effect is what an option adds to a demand's quantity N, in N's unit (the
// variance in its square). The mean must be exact for every choice. Variance
// and Half must be at most what Judge will count: where lots may merge and
// partly cancel, give the least the option can add in any company.
type Effect struct {
	Mean, Variance, Half float64
}

// A Demand is a limit on one quantity. Low and High may be infinite.
// A share demand holds when P(Low <= N(mean, variance) <= High) >= Share; a
// worst-case demand when mean-half >= Low and mean+half <= High. The base
// values are those of everything that is not open.
type Demand struct {
	Low, High float64
	Share     float64 // of the units, 0..1; not used in the worst case
	WorstCase bool

	BaseMean, BaseVariance, BaseHalf float64
}

// A Verdict is the judgement of a full choice.
type Verdict struct {
	Meets     bool
	Shortfall float64 // how far the worst demand misses; 0 when all hold
	Worst     int     // which demand misses most; 0 when all hold
}

// Limits bounds the work. The zero value means the defaults.
type Limits struct {
	Nodes       int // partial choices kept in memory, 28 bytes each; 0: DefaultNodes
	Steps       int // partial choices looked at, and rows changed in steps of linear relaxations; 0: DefaultSteps
	Simulations int // calls of Confirm; 0: no limit
	// For is the time from the start of the search, 0: no limit. It is looked
	// at now and then and before each call of Confirm, which it does not
	// interrupt. Where it stops a search, the outcome depends on the machine.
	For time.Duration

	leaf int // choices up to which a dive does not split, for tests; 0: leafChoices
}

// The limits meant by zero: some 4 MB and on one core some ten seconds.
const (
	DefaultNodes = 1 << 17
	DefaultSteps = 1 << 27
)

// A Stop is the limit that ended a search.
type Stop string

const (
	OutOfTime        Stop = "time"
	OutOfSteps       Stop = "steps"
	OutOfSimulations Stop = "simulations"
)

// An Outcome is what the search found out.
//
// Proved with a Choice: no confirmed choice is cheaper, and of equally cheap
// ones none comes before it in lexicographic order, unless the search needed
// more partial choices than Limits.Nodes: then it is one of the cheapest, the
// same in every run. Proved without a Choice:
// no choice meets the demands and is confirmed. Not Proved: a limit or a
// cancellation stopped the search; Choice, if any, is the best confirmed one
// found, and nothing confirmed can cost less than Bound.
type Outcome struct {
	Choice []int
	Cost   int64
	Bound  int64 // no cheaper choice exists; equals Cost when proved
	Proved bool
	// Stopped says which limit ended a search that proved nothing.
	Stopped Stop

	Candidates int // combinations that exist; math.MaxInt when more than that
	Examined   int // full choices put to Judge
	Simulated  int // full choices put to Confirm
	CutByBound int // partial choices cut: dearer than a known one, beyond a demand's reach, or not to be bought
	Dominated  int // options left out before the search because another one stands in for them
	Pegged     int // options left out before the search because no choice cheap enough can hold them

	// Nearest is set when there is no Choice, and one can be bought: least
	// shortfall, then least cost, then first in order. Where Judge passed choices that Confirm
	// refused, it is the cheapest of those.
	Nearest        []int
	NearestVerdict Verdict
	NearestExact   bool // all choices were compared, not only those seen
}

// Gap is how much cheaper a better choice could at most be, as a fraction of
// Cost: 0 when proved, NaN without a choice.
func (o *Outcome) Gap() float64 {
	if o.Choice == nil {
		return math.NaN()
	}
	if o.Cost <= o.Bound || o.Cost == 0 {
		return 0
	}
	return float64(o.Cost-o.Bound) / float64(o.Cost)
}

// check finds the faults of a problem that would make the search meaningless.
func (p *Problem) check() error {
	for q, d := range p.Demands {
		if err := d.check(); err != nil {
			return fmt.Errorf("demand %d: %w", q, err)
		}
	}
	for i, l := range p.Lines {
		if len(l.Options) == 0 {
			return fmt.Errorf("line %d: no options", i)
		}
		if len(l.Options) > math.MaxUint16 {
			return fmt.Errorf("line %d: %d options, expected at most %d", i, len(l.Options), math.MaxUint16)
		}
		for j, o := range l.Options {
			if err := o.check(len(p.Demands)); err != nil {
				return fmt.Errorf("line %d, option %d: %w", i, j, err)
			}
		}
		if !slices.ContainsFunc(l.Options, func(o Option) bool { return !o.Dominated }) {
			return fmt.Errorf("line %d: every option is dominated, expected one that stands in for the others", i)
		}
	}
	if !p.addable() {
		return fmt.Errorf("base and floors come to %d or more in size, expected less", Unavailable)
	}
	if len(p.Lines) >= math.MaxUint16 {
		return fmt.Errorf("%d lines, expected fewer than %d", len(p.Lines), math.MaxUint16)
	}
	return nil
}

// addable says that no sum of base and floors comes near an overflow. Floors of
// options that cannot be bought are in no sum.
func (p *Problem) addable() bool {
	size := func(x int64) int64 {
		if x <= -Unavailable {
			return Unavailable
		}
		return min(max(x, -x), Unavailable)
	}
	sum := size(p.Base)
	for _, l := range p.Lines {
		most := int64(0)
		for _, o := range l.Options {
			if o.Floor < Unavailable {
				most = max(most, size(o.Floor))
			}
		}
		if sum += most; sum >= Unavailable {
			return false
		}
	}
	return sum < Unavailable
}

func (o *Option) check(demands int) error {
	if len(o.Effects) != demands {
		return fmt.Errorf("%d effects, expected one for each of the %d demands", len(o.Effects), demands)
	}
	for q, e := range o.Effects {
		if !finite(e.Mean) || !(e.Variance >= 0) || !(e.Half >= 0) || !finite(e.Variance) || !finite(e.Half) {
			return fmt.Errorf("effect %d is %v, expected finite numbers, variance and half width not negative", q, e)
		}
	}
	return nil
}

func (d *Demand) check() error {
	if !(d.Low <= d.High) {
		return fmt.Errorf("limits %v to %v, expected low <= high", d.Low, d.High)
	}
	if !d.WorstCase && !(d.Share >= 0 && d.Share <= 1) {
		return fmt.Errorf("share %v, expected 0 to 1", d.Share)
	}
	if !finite(d.BaseMean) || !(d.BaseVariance >= 0) || !(d.BaseHalf >= 0) || !finite(d.BaseVariance) || !finite(d.BaseHalf) {
		return fmt.Errorf("base mean %v, variance %v, half width %v, expected finite numbers, the last two not negative",
			d.BaseMean, d.BaseVariance, d.BaseHalf)
	}
	return nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// candidates is the number of combinations, held at math.MaxInt.
func (p *Problem) candidates() int {
	n := 1
	for _, l := range p.Lines {
		if n > math.MaxInt/len(l.Options) {
			return math.MaxInt
		}
		n *= len(l.Options)
	}
	return n
}

// cost is Cost, or its stand-in, and never more than Unavailable.
func (p *Problem) cost(choice []int) int64 {
	for i, j := range choice {
		if p.Lines[i].Options[j].Floor >= Unavailable {
			return Unavailable
		}
	}
	if p.Cost != nil {
		return min(p.Cost(choice), Unavailable)
	}
	return p.floor(choice)
}

// floor is the sum of floors of a choice whose options can all be bought.
func (p *Problem) floor(choice []int) int64 {
	sum := p.Base
	for i, j := range choice {
		sum += p.Lines[i].Options[j].Floor
	}
	return sum
}
