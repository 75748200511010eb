// Package plan gathers what the other packages found out about a batch into
// what people are handed: the workbook's plan and the JSON results. It works
// nothing out.
package plan

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"

	"batchwright/bom/order"
	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/compare"
	"batchwright/tolerance/pick"
	"batchwright/tolerance/spread"
)

// Work is everything found out about one batch.
type Work struct {
	File     string // the build file as the user named it
	Text     []byte // and what it says
	Seed     uint64
	Simulate int    // units asked for
	Version  string // of this program

	Build  *build.Build // its open positions filled
	Model  *build.Model
	Pick   *pick.Result
	Report *spread.Report
	Sheet  bench.Sheet
	Order  order.Order
	Drifts []workbook.Drift

	Compared *compare.Result // nil: nothing was compared
	Trade    *pick.Trade     // nil: nothing was traded
	Cards    bool            // a page for every unit is wanted
}

// Digest identifies a plan: the SHA-256 of the build file and of all else that
// decides its figures. A filled sheet is read back only against its own plan.
func (w Work) Digest() string {
	h := sha256.New()
	fmt.Fprintf(h, "batchwright %s\nseed %d\nsimulate %d\nunits %d\n", w.Version, w.Seed, w.Simulate, w.Build.Units)
	h.Write(w.Text)
	return hex.EncodeToString(h.Sum(nil))
}

// Compose makes the workbook's plan.
func Compose(w Work) workbook.Plan {
	return workbook.Plan{
		Title: w.Build.Title, Units: w.Build.Units, Seed: w.Seed, Simulate: w.Simulate,
		File: w.File, Digest: w.Digest(), Version: w.Version,
		PriceNote:  PriceNote(w.Order),
		Findings:   findings(w),
		Conditions: conditions(w.Build),
		Order:      w.Order, Picks: picked(w),
		Positions: positions(w),
		Turns:     w.Sheet.Turns, Readings: w.Sheet.Readings, Samples: w.Sheet.Samples, Cards: w.Cards,
		Spread: *w.Report, Drifts: w.Drifts, Compare: compared(w.Compared), Trade: traded(w),
		Basis: basis(w), Cautions: Cautions(),
		Advice: advice(w),
	}
}

// PriceNote is what must stand wherever money of the order is shown; "" where
// the prices are the user's own.
func PriceNote(o order.Order) string {
	if !o.Demonstration {
		return ""
	}
	return "demonstration prices, invented: no shop asks them"
}
