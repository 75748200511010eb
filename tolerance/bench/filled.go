package bench

import "batchwright/tolerance/spread"

// Filled is what the bench read: a test sheet that came back. Readings are in
// SI units.
type Filled struct {
	Points []string     `json:"points"` // "mixer.collector", as the sheet's readings
	Units  []FilledUnit `json:"units"`  // in the order of their numbers; those of which nothing was read are left out
}

// FilledUnit is what was read of one unit; NaN where nothing was.
type FilledUnit struct {
	Unit   int             `json:"unit"`   // from 1
	Values []spread.Figure `json:"values"` // as Filled.Points
}
