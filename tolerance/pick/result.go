// Package pick turns open positions into fitted parts: the cheapest that meet
// the targets, with proof.
package pick

import (
	"batchwright/bom/offer"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// Choice is what was picked for one opening.
type Choice struct {
	Positions []string    `json:"positions"` // "fixed.upper"
	Refs      []string    `json:"refs"`
	Family    string      `json:"family"`    // of two pieces both: "c0g + polystyrene"
	Tolerance float64     `json:"tolerance"` // of the whole
	Value     float64     `json:"value"`     // of the whole
	Text      string      `json:"-"`         // value as people write it
	Combine   string      `json:"combine"`
	Lots      string      `json:"lots"`      // "one" or "mixed"
	Parts     []Piece     `json:"parts"`     // what is combined; one piece where Combine is "single"
	UnitCost  offer.Money `json:"unit_cost"` // of this line in one unit, spares not counted
	Why       string      `json:"why"`       // from the numbers, one sentence
}

// Piece is one part that is bought for a position.
type Piece struct {
	Family    string  `json:"family"`
	Value     float64 `json:"value"`
	Tolerance float64 `json:"tolerance"`
	Text      string  `json:"-"` // value as people write it
}

// Result is the outcome of a search.
type Result struct {
	Choices        []Choice              `json:"-"`
	ProvedCheapest bool                  `json:"proved_cheapest"`
	CostPerUnit    offer.Money           `json:"cost_per_unit"`
	Total          offer.Money           `json:"total"`            // of the order, spares included
	Bound          offer.Money           `json:"bound"`            // nothing cheaper meets the targets
	Candidates     int                   `json:"candidates"`       // combinations that exist
	Examined       int                   `json:"examined"`         // combinations judged against the targets
	Simulated      int                   `json:"simulated"`        // of those, put through a simulation
	CutByDominance int                   `json:"cut_by_dominance"` // options that another one stands in for
	CutByBound     int                   `json:"cut_by_bound"`     // partial combinations and options that no good one can hold
	Checks         []Check               `json:"checks"`           // picture against simulation
	Remains        []Remains             `json:"remains"`          // of the changes that targets limit
	Binding        *Binding              `json:"binding"`          // nil: none
	Alternates     []Alternate           `json:"alternates"`
	Irreplaceable  []Irreplaceable       `json:"irreplaceable"`      // lines that were looked at and have no alternate
	Fittings       []build.Fitting       `json:"-"`                  // the choices, as a build is fitted with them
	Targets        []spread.TargetReport `json:"-"`                  // as the simulation that confirmed has them, in the build's order
	Searched       string                `json:"searched,omitempty"` // what for, where that is not the cheapest
	Why            string                `json:"why,omitempty"`
	Provided       string                `json:"provided,omitempty"` // what the proof rests on beside the picture
}

// emptyResult is one with lists that JSON writes as such.
func emptyResult() *Result {
	return &Result{Choices: []Choice{}, Checks: []Check{}, Remains: []Remains{}, Alternates: []Alternate{}, Irreplaceable: []Irreplaceable{}}
}

// Check is a target by share as the search saw it and as the simulation did.
type Check struct {
	Target    string        `json:"target"`
	Predicted spread.Figure `json:"predicted"` // share of the units, to first order
	Simulated spread.Figure `json:"simulated"`
}

// Binding is the target that costs most, and what a tighter one would.
type Binding struct {
	Target  string      `json:"target"`
	Saving  offer.Money `json:"saving"`       // of the order, to first order, if it were not asked
	Tighter string      `json:"tighter"`      // the target with its limits a tenth closer
	Total   offer.Money `json:"total"`        // of the order that meets this
	Out     bool        `json:"out_of_reach"` // no choice meets it; Total is then 0
	Unknown bool        `json:"unknown"`      // the search for it ended early; Total is then what was found, or 0
}

// Alternate is the next-best choice where one of the buying lines is out of
// stock. It meets every target and is simulated as the choice itself is.
type Alternate struct {
	Refs    []string    `json:"refs"`  // of the line that is out of stock
	Line    string      `json:"line"`  // what it is
	Instead []Choice    `json:"picks"` // the openings that are then filled otherwise
	More    offer.Money `json:"more"`  // money of the order above the choice's
	Drifts  []Moved     `json:"drifts"`
}

// Irreplaceable is a buying line for which no alternate was found, and why not.
type Irreplaceable struct {
	Refs []string `json:"refs"` // of the line
	Line string   `json:"line"` // what it is
	Why  string   `json:"why"`
}

// Moved is how much wider or narrower a change becomes, to first order: the
// half width that the target's share of the units stays within.
type Moved struct {
	Target string        `json:"target"`
	Unit   string        `json:"unit"`
	From   spread.Figure `json:"from"`
	To     spread.Figure `json:"to"`
}
