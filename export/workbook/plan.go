// Package workbook writes a plan as a spreadsheet an assembler can be handed:
// what to buy, what goes where, how to trim, what every meter should show.
//
// It decides nothing. A [Plan] holds everything that is shown, as plain data;
// [Write] lays it out. The same Plan gives the same bytes.
package workbook

import (
	"errors"
	"fmt"
	"slices"

	"batchwright/bom/order"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// MaxUnits is how many unit columns a test sheet takes.
const MaxUnits = 200

// Paper is the sheet size the page setup asks for. Every sheet fits both.
type Paper string

// The papers; the zero value is A4.
const (
	A4     Paper = "A4"
	Letter Paper = "Letter"
)

// Plan is everything the workbook shows. Quantities are SI base units and
// degrees Celsius; shares are fractions. Empty parts leave out their rows, and
// the sheet says that there is nothing to show.
type Plan struct {
	Title    string // the build's
	Units    int    // 1 to MaxUnits
	Seed     uint64
	Simulate int    // units asked to be simulated
	File     string // the build file as the user named it
	Digest   string // of the build, hexadecimal; binds a filled sheet to its plan
	Version  string // of this program
	Paper    Paper

	PriceNote  string   // "demonstration prices, invented"; shown wherever money is
	Findings   []string // sentences for the first page; verdicts come from Spread
	Conditions []Condition
	Order      order.Order
	Picks      Picks
	Positions  []Position // in stage order
	Turns      []bench.Turn
	Readings   []bench.Reading
	Samples    []bench.Sample // none: no such sheet
	Spread     spread.Report
	Drifts     []Drift
	Compare    *Compare // nil: no such sheet
	Trade      *Trade   // nil: no such sheet

	others   []string // sheets that the contents name and that are not written
	Basis    []Basis
	Cautions []string
	Cards    bool // a page for every unit

	// Advice is what to do when a trim does not reach, by bench.Turn.Turn. A
	// general sentence stands where there is none.
	Advice map[string]string
}

// Condition is a state of the surroundings, in words: "bench", "23 °C, supply
// 12 V, hand away".
type Condition struct{ Name, Text string }

// Position is one part in its place.
type Position struct {
	Stage     string // "mixer"
	Kind      string // "junction-mixer"
	Ref       string // "R5"
	Role      string // "emitter resistor"
	Value     string // as people write it: "4.7 kΩ"
	Family    string // the family's title
	Tolerance string // "±1 %"
	Marking   string // what to look for on the part
	Note      string // "trimmer, set in step 4"
}

// Drift is how one output moves with temperature.
type Drift struct {
	Title   string // "Beat against temperature, warmed up"
	Output  string // "mixer.offset"
	Unit    string // a symbol package quantity knows
	Meaning string // what low and high are: "99 % of the units lie between"
	Target  string // whose limits are drawn; "" with no Limits
	Limits  *spread.Limits
	Rows    []DriftRow
}

// DriftRow is one temperature.
type DriftRow struct {
	Celsius            float64
	Low, Nominal, High spread.Figure
}

// Basis is one thing the figures rest on.
type Basis struct{ Heading, Text, Source string }

// optional are the sheets that a plan has only if it was asked for them.
func (p Plan) optional() []string {
	var list []string
	for _, name := range []string{cardsSheet, compareSheet, tradeSheet} {
		if p.has(name) {
			list = append(list, name)
		}
	}
	return list
}

// has says whether the contents name an optional sheet.
func (p Plan) has(sheet string) bool {
	return sheet == cardsSheet && p.Cards || sheet == compareSheet && p.Compare != nil || sheet == tradeSheet && p.Trade != nil ||
		slices.Contains(p.others, sheet)
}

// valid reports what no workbook can be made of.
func (p Plan) valid() error {
	if p.Units < 1 || p.Units > MaxUnits {
		return fmt.Errorf("a test sheet takes 1 to %d units, not %d", MaxUnits, p.Units)
	}
	if p.Paper != "" && p.Paper != A4 && p.Paper != Letter {
		return fmt.Errorf("unknown paper %q: expected %s or %s", p.Paper, A4, Letter)
	}
	if len(p.Readings)+len(p.Turns)+len(p.Samples) > maxRows {
		return errors.New("the bench list is longer than a test sheet can be")
	}
	return nil
}

// maxRows bounds the test sheet; older LibreOffice has 65,536 rows a sheet
// (from memory), and no bench session is a tenth as long.
const maxRows = 5000
