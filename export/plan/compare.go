package plan

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/export/workbook"
	"batchwright/tolerance/build"
	"batchwright/tolerance/compare"
	"batchwright/tolerance/spread"
)

// Comparison is what `compare --json` prints.
type Comparison struct {
	Build      string            `json:"build"`
	Seed       uint64            `json:"seed"`
	Simulation spread.Simulation `json:"simulation"` // of each case
	Lines      []ComparedLine    `json:"lines"`
	Currency   string            `json:"currency"`
	Invented   bool              `json:"demonstration"` // prices are those of the embedded book
	Cases      []ComparedCase    `json:"cases"`
	LeftOut    []LeftOutCase     `json:"left_out"`
	Notes      []string          `json:"notes"`
}

// ComparedLine is a buying line whose parts are exchanged.
type ComparedLine struct {
	Positions []string `json:"positions"`
	Refs      []string `json:"refs"`
}

// LeftOutCase is a combination that cannot be had.
type LeftOutCase struct {
	Label string `json:"label"`
	Why   string `json:"why"`
}

// ComparedCase is one choice of parts. Lists of families, tolerances and values
// have one entry where all lines take the same.
type ComparedCase struct {
	Label        string              `json:"label"`
	Base         bool                `json:"base"`
	Families     []string            `json:"families"`
	Tolerances   []float64           `json:"tolerances"`
	Values       []string            `json:"values"`
	Lots         build.Lots          `json:"lots"`
	Sizes        []string            `json:"sizes"`
	Temperatures *spread.Limits      `json:"temperatures"` // rated, °C
	Beyond       []string            `json:"beyond"`       // conditions outside of those
	Drift        []spread.PerKelvin  `json:"drift_per_kelvin"`
	Targets      []ComparedTarget    `json:"targets"`
	Trims        []spread.TrimReport `json:"trims"`
	Yield        ComparedYield       `json:"yield"`
	UnitCost     *offer.Money        `json:"unit_cost"`  // of all parts of a unit; null where the parts are not offered
	BatchCost    *offer.Money        `json:"batch_cost"` // with spares
	NotOffered   string              `json:"not_offered,omitempty"`
	Verdict      compare.Verdict     `json:"verdict"`
	Why          string              `json:"why"`
}

// ComparedTarget is a target's verdict and how its share differs from the base's.
type ComparedTarget struct {
	spread.TargetReport
	Changes    []spread.Change    `json:"changes,omitempty"`
	Difference compare.Difference `json:"difference"`
}

// ComparedYield is a yield and how it differs from the base's.
type ComparedYield struct {
	spread.YieldReport
	Difference compare.Difference `json:"difference"`
}

// NewComparison is a comparison for programs.
func NewComparison(r *compare.Result) *Comparison {
	o := r.Base().Order
	c := &Comparison{
		Build: r.Build.Title, Seed: r.Seed, Simulation: r.Simulation, Currency: o.Currency, Invented: o.Demonstration,
		LeftOut: []LeftOutCase{}, Notes: listed(r.Notes),
	}
	for _, l := range r.Lines {
		c.Lines = append(c.Lines, ComparedLine(l))
	}
	for _, l := range r.LeftOut {
		c.LeftOut = append(c.LeftOut, LeftOutCase(l))
	}
	for _, x := range r.Cases {
		c.Cases = append(c.Cases, newComparedCase(x))
	}
	return c
}

func newComparedCase(x compare.Case) ComparedCase {
	c := ComparedCase{
		Label: x.Label, Base: x.Base, Families: listed(x.Families), Tolerances: listed(x.Tolerances), Values: listed(x.Values),
		Lots: x.Lots, Sizes: listed(x.Sizes), Temperatures: x.Temperatures, Beyond: listed(x.Beyond),
		Drift: listed(x.Drifts), Targets: []ComparedTarget{}, Trims: listed(x.Judgement.Trims),
		Yield: ComparedYield{x.Judgement.Yield, x.Yield}, NotOffered: x.NotOffered, Verdict: x.Verdict, Why: x.Why,
	}
	if x.NotOffered == "" {
		unit, batch := x.Order.PerUnit, x.Order.Total
		c.UnitCost, c.BatchCost = &unit, &batch
	}
	for i, t := range x.Judgement.Targets {
		c.Targets = append(c.Targets, ComparedTarget{t.TargetReport, t.Changes, x.Targets[i]})
	}
	return c
}

// compared lays a comparison out for the workbook; nil where there is none.
func compared(r *compare.Result) *workbook.Compare {
	if r == nil {
		return nil
	}
	c := &workbook.Compare{Currency: r.Base().Order.Currency, Notes: r.Notes}
	var lines []string
	for _, l := range r.Lines {
		lines = append(lines, fmt.Sprintf("%s (%s)", l.Positions[0], order.Runs(l.Refs)))
	}
	c.Below = fmt.Sprintf("Other parts at %s. %d cases, each on the same %d simulated units, seed %d.",
		strings.Join(lines, ", "), len(r.Cases), r.Simulation.Units, r.Seed)
	for _, l := range r.LeftOut {
		c.Notes = append(c.Notes, fmt.Sprintf("Left out: %s: %s.", l.Label, l.Why))
	}
	for _, d := range r.Cases[0].Drifts {
		c.Drifts = append(c.Drifts, workbook.CompareDrift{Output: d.Output, Unit: d.Unit})
	}
	for i, t := range r.Build.Targets {
		c.Targets = append(c.Targets, t.Name)
		for _, x := range r.Cases[0].Judgement.Targets[i].Changes {
			c.Changes = append(c.Changes, workbook.CompareChange{
				Title: t.Name + ", " + x.Condition, Unit: t.Unit.Symbol, Limit: math.Min(-t.Low, t.High),
			})
		}
	}
	for _, t := range r.Cases[0].Judgement.Trims {
		c.Trims = append(c.Trims, t.Turn)
	}
	for _, x := range r.Cases {
		c.Cases = append(c.Cases, comparedCase(x))
	}
	return c
}

// comparedCase is one case as the workbook shows it.
func comparedCase(x compare.Case) workbook.CompareCase {
	c := workbook.CompareCase{
		Label: x.Label, Base: x.Base, Drifts: x.Drifts,
		Yield: x.Judgement.Yield.UnitShare, Interval: x.Judgement.Yield.Interval, Difference: "none shown",
		Unit: math.NaN(), Batch: math.NaN(), Size: strings.Join(x.Sizes, "; "), Rated: Rated(x),
		Verdict: string(x.Verdict), Why: x.Why,
	}
	if x.Base {
		c.Difference = "–"
	} else if x.Yield.Shown {
		c.Difference = fmt.Sprintf("%+.3g", 100*float64(x.Yield.Share))
	}
	if x.NotOffered == "" {
		c.Unit, c.Batch = x.Order.PerUnit.Float(), x.Order.Total.Float()
	}
	for _, t := range x.Judgement.Targets {
		c.Targets, c.Missed = append(c.Targets, t.Share), append(c.Missed, !t.Met)
		for _, change := range t.Changes {
			c.Changes = append(c.Changes, change.HalfWidth)
		}
	}
	for _, t := range x.Judgement.Trims {
		c.Reached = append(c.Reached, t.ReachedShare)
	}
	return c
}

// Rated is the range of temperatures that a case's parts are rated for, and
// where it is left.
func Rated(x compare.Case) string {
	if x.Temperatures == nil {
		return "–"
	}
	text := fmt.Sprintf("%g to %g °C", float64(x.Temperatures.Low), float64(x.Temperatures.High))
	if len(x.Beyond) > 0 {
		text += ", exceeded at " + strings.Join(x.Beyond, ", ")
	}
	return text
}
