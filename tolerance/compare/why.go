package compare

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"batchwright/tolerance/spread"
)

// Verdict is how a case stands to the base.
type Verdict string

// The verdicts.
const (
	IsBase Verdict = "base"
	Wins   Verdict = "wins"
	Loses  Verdict = "loses"
	Even   Verdict = "even"
)

// explain says in one clause why a case wins or loses: by a target that it
// newly misses or meets, by what cannot be bought or stand the temperature, by
// its yield, by its price; a difference that the simulated units cannot show
// is none.
func (r *Result) explain(c *Case) {
	base := r.Base()
	if c.Base {
		c.Verdict, c.Why = IsBase, r.standing(c)
		return
	}
	lost, gained, near := r.flips(c)
	hot := len(c.Beyond) > 0 && len(base.Beyond) == 0
	switch {
	case len(lost) > 0:
		c.Verdict, c.Why = Loses, "misses "+r.shares(c, lost)
		if len(gained) > 0 {
			c.Why += ", though it meets " + r.shares(c, gained)
		}
	case c.NotOffered != "":
		c.Verdict, c.Why = Loses, "cannot be bought: "+c.NotOffered
	case len(gained) > 0:
		c.Verdict, c.Why = Wins, "meets "+r.shares(c, gained)+", which the base misses"
	case hot:
		c.Verdict, c.Why = Loses, "is not rated for the temperature at "+strings.Join(c.Beyond, ", ")
	case c.Yield.Shown:
		r.byYield(c)
	default:
		r.byPrice(c, near)
	}
}

// standing says which targets a case misses.
func (r *Result) standing(c *Case) string {
	var missed []int
	for i, t := range c.Judgement.Targets {
		if !t.Met {
			missed = append(missed, i)
		}
	}
	if len(missed) == 0 {
		return "meets every target"
	}
	return "misses " + r.shares(c, missed)
}

// flips are the targets that a case misses and the base meets, those the other
// way round, and those of both whose shares differ by less than can be shown. A
// worst case has nothing of chance.
func (r *Result) flips(c *Case) (lost, gained, near []int) {
	for i, t := range c.Judgement.Targets {
		was := r.Base().Judgement.Targets[i].Met
		switch {
		case t.Met == was:
		case !c.Targets[i].Shown && !r.Build.Targets[i].WorstCase:
			near = append(near, i)
		case was:
			lost = append(lost, i)
		default:
			gained = append(gained, i)
		}
	}
	return lost, gained, near
}

// shares names targets and their shares: the one that is furthest below what
// is asked, and how many more.
func (r *Result) shares(c *Case, list []int) string {
	above := func(i int) float64 { return float64(c.Judgement.Targets[i].Share) - c.Judgement.Targets[i].Demand }
	worst := slices.MinFunc(list, func(i, j int) int { return cmp.Compare(above(i), above(j)) })
	t := c.Judgement.Targets[worst]
	text := fmt.Sprintf("%q (%s of the units, %s asked)", t.Name, percent(t.Share), percent(spread.Figure(t.Demand)))
	if r.Build.Targets[worst].WorstCase {
		text = fmt.Sprintf("%q (every corner)", t.Name)
	}
	if len(list) > 1 {
		text += fmt.Sprintf(" and %d more", len(list)-1)
	}
	return text
}

// byYield explains a case by its yield.
func (r *Result) byYield(c *Case) {
	c.Verdict = Wins
	if c.Yield.Share < 0 {
		c.Verdict = Loses
	}
	c.Why = fmt.Sprintf("%s of its units are good, where the base has %s",
		percent(c.Judgement.Yield.UnitShare), percent(r.Base().Judgement.Yield.UnitShare))
}

// byPrice explains a case by its price, its yield being the base's.
func (r *Result) byPrice(c *Case, near []int) {
	alike := fmt.Sprintf("no difference in yield that %d units can show", r.Simulation.Units)
	if len(near) > 0 {
		alike = fmt.Sprintf("on %q on the other side of the limit by less than %d units can show", c.Judgement.Targets[near[0]].Name, r.Simulation.Units)
	}
	base := r.Base()
	dearer := c.Order.PerUnit - base.Order.PerUnit
	switch {
	case base.NotOffered != "":
		c.Verdict, c.Why = Wins, "can be bought, which the base cannot; "+alike
	case dearer < 0:
		c.Verdict, c.Why = Wins, fmt.Sprintf("saves %s a unit; %s", (-dearer).Each(), alike)
	case dearer > 0:
		c.Verdict, c.Why = Loses, fmt.Sprintf("costs %s a unit more; %s", dearer.Each(), alike)
	default:
		c.Verdict, c.Why = Even, "costs the same; "+alike
	}
}

// percent writes a share to four digits.
func percent(f spread.Figure) string { return fmt.Sprintf("%.4g %%", 100*float64(f)) }
