// Package bench says what a bench instrument will show at each test point,
// with its own loading and error, and between which limits.
package bench

import "batchwright/tolerance/spread"

// Reading is one line of the test sheet.
//
// Expected holds the central 99.73 % of the simulated good units' readings,
// widened by the instrument's expanded uncertainty U (k = 2): outside it,
// something is built wrong. Accept, where a target sits on the point's output,
// is the target's limits drawn in by U (guard band w = U, JCGM 106): inside
// it, the target is met in spite of the instrument. Where the instrument loads
// the point, the limits are those that it would show of them, and U is
// joined by what units differ in how far it pulls them (see spread.Loading).
type Reading struct {
	Point       string         `json:"point"` // "mixer.collector"
	Reading     string         `json:"reading"`
	Instrument  string         `json:"instrument"`
	Condition   string         `json:"condition"`
	Step        int            `json:"step"` // in bench order; trims take steps of their own
	Unit        string         `json:"unit"`
	Nominal     spread.Figure  `json:"nominal"`  // what the instrument shows on a nominal unit
	Unloaded    spread.Figure  `json:"unloaded"` // what is there without the instrument
	Expected    spread.Limits  `json:"expected"`
	Accept      *spread.Limits `json:"accept"`
	Uncertainty spread.Figure  `json:"uncertainty"` // U, k = 2, at the nominal reading
	At          string         `json:"at"`          // where to hold the probe, with references
	Why         string         `json:"why,omitempty"`
	Note        string         `json:"note,omitempty"` // what else to know: what the instrument does to the reading

	// The risks of Accept; null without it. Consumer's and producer's are the
	// shares of all simulated units whose trims reached (JCGM 106:2012, 9.5);
	// specific is the chance that a unit which reads the very limit misses the
	// target (7.3).
	ConsumerRisk spread.Figure `json:"consumer_risk"`
	ProducerRisk spread.Figure `json:"producer_risk"`
	SpecificRisk spread.Figure `json:"specific_risk"`
}

// Turn is one trim as the bench does it.
type Turn struct {
	Step      int     // in the same count as Reading.Step
	Turn      string  // "mixer.bias"
	Ref       string  // "RV1"
	Watch     string  // the output watched: "mixer.collector"
	At        string  // where to hold the probe
	Unit      string  // of To and Within
	To        float64 // SI
	Within    float64
	Condition string
	// Rises says whether the watched output rises with the setting.
	Rises bool
}
