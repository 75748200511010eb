// Package pick turns open positions into fitted parts: the cheapest that meet
// the targets, with proof.
package pick

import "batchwright/bom/offer"

// Choice is what was picked for one buying line.
type Choice struct {
	Positions []string    `json:"positions"` // "fixed.upper"
	Refs      []string    `json:"refs"`
	Family    string      `json:"family"`
	Tolerance float64     `json:"tolerance"`
	Value     float64     `json:"value"`
	Text      string      `json:"-"` // value as people write it
	Combine   string      `json:"combine"`
	Parts     []Piece     `json:"parts"`     // what is combined; one piece where Combine is "single"
	UnitCost  offer.Money `json:"unit_cost"` // of this line in one unit, spares not counted
	Why       string      `json:"why"`       // from the numbers, one sentence
}

// Piece is one part that is bought for a position.
type Piece struct {
	Family    string  `json:"family"`
	Value     float64 `json:"value"`
	Tolerance float64 `json:"tolerance"`
}

// Result is the outcome of a search.
type Result struct {
	Choices        []Choice    `json:"picks"`
	ProvedCheapest bool        `json:"proved_cheapest"`
	CostPerUnit    offer.Money `json:"cost_per_unit"`
	Candidates     int         `json:"candidates"` // combinations that exist
	Examined       int         `json:"examined"`   // combinations judged against the targets
	Simulated      int         `json:"simulated"`  // of those, put through a simulation
	Why            string      `json:"why,omitempty"`
}
