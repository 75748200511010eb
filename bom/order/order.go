// Package order turns the fitted parts of one unit and a number of units into
// what must be bought: lines, spares, packs and money.
package order

import "batchwright/bom/offer"

// Line is one thing bought: every position that takes the same piece.
type Line struct {
	Refs      []string    `json:"refs"` // natural order: C2 before C10
	Family    string      `json:"family"`
	Title     string      `json:"-"`         // the family's title
	Text      string      `json:"-"`         // value as people write it: "220 pF", "4..34 pF", "" for a transistor
	Value     float64     `json:"value"`     // SI; the high end of a trimmer; 0 where there is none
	Tolerance float64     `json:"tolerance"` // fraction
	Marking   string      `json:"marking"`
	PerUnit   int         `json:"per_unit"`
	Needed    int         `json:"needed"` // PerUnit × units
	Spares    int         `json:"spares"` // ceil(Needed × spares percent)
	Buy       int         `json:"buy"`    // Needed + Spares, rounded up to packs
	Multiple  int         `json:"multiple"`
	Each      offer.Money `json:"price_each"`
	Price     offer.Money `json:"price"`
	Why       string      `json:"why,omitempty"` // set on a line nobody offers
}

// Order is the whole shopping list.
type Order struct {
	Lines         []Line      `json:"lines"`
	Unoffered     []Line      `json:"unoffered"` // counted in no total
	Total         offer.Money `json:"total"`
	Currency      string      `json:"currency"`
	Units         int         `json:"units"`
	SparesPercent int         `json:"spares_percent"`
	PerUnit       offer.Money `json:"cost_per_unit"` // parts of one unit at the batch's prices, spares not counted
	Book          string      `json:"price_book"`
	Demonstration bool        `json:"demonstration"` // the book is the embedded, invented one
}
