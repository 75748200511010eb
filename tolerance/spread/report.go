package spread

import (
	"encoding/json"
	"math"
)

// Figure is a number in a report. NaN, which stands for "does not exist", is
// written as null; the struct that holds it says why.
type Figure float64

// MarshalJSON writes NaN and infinities as null.
func (f Figure) MarshalJSON() ([]byte, error) {
	if math.IsNaN(float64(f)) || math.IsInf(float64(f), 0) {
		return []byte("null"), nil
	}
	return json.Marshal(float64(f))
}

// UnmarshalJSON reads null as NaN.
func (f *Figure) UnmarshalJSON(b []byte) error {
	if string(b) == "null" {
		*f = Figure(math.NaN())
		return nil
	}
	return json.Unmarshal(b, (*float64)(f))
}

// Limits are a lower and an upper figure.
type Limits struct {
	Low  Figure `json:"low"`
	High Figure `json:"high"`
}

// Report is what is known about a build's scatter: SI base units, Celsius for
// temperatures, fractions not percent.
type Report struct {
	Build      string         `json:"build"`
	Seed       uint64         `json:"seed"`
	Outputs    []OutputReport `json:"outputs"`
	Trims      []TrimReport   `json:"trims"`
	Targets    []TargetReport `json:"targets"`
	Yield      YieldReport    `json:"yield"`
	Simulation Simulation     `json:"simulation"`
	Findings   []Finding      `json:"findings"`    // what happens in some unit and nobody may miss
	LockRanges []LockRange    `json:"lock_ranges"` // of every mixer
	Notes      []string       `json:"notes,omitempty"`

	// Readings are what the bench will see, as the model's points; package
	// bench makes windows of them.
	Readings []ReadingReport `json:"-"`
	Samples  []SampleReport  `json:"-"` // as the model's samples
}

// ReadingReport is the distribution of one test point's reading, with the
// instrument connected: the central 99.73 % of the good units.
type ReadingReport struct {
	Nominal, Unloaded, Low, High Figure
	Units                        int // good units seen

	Level, LevelLow Figure     // V peak at the node, nominal and low; NaN where the instrument needs none
	Loading         Loading    // what the instrument does
	True            *Histogram // of what is there without it, over the units whose trims reached
}

// SampleReport is the like of a sample.
type SampleReport struct {
	Nominal, Unloaded, Low, High Figure
	Units                        int
	Loading                      Loading
}

// Loading is how an instrument's reading follows from what is there without it:
//
//	reading = Scale·value + Shift
//
// on a nominal unit, with a standard uncertainty since units differ in how far
// they are pulled.
type Loading struct{ Scale, Shift, Uncertainty float64 }

// Reading is what the instrument shows of a value, but for its own error.
func (l Loading) Reading(value float64) float64 { return l.Scale*value + l.Shift }

// OutputReport is one output at one condition, or its change from another.
type OutputReport struct {
	Output        string         `json:"output"`
	Condition     string         `json:"condition"`
	ChangeFrom    string         `json:"change_from,omitempty"`
	Unit          string         `json:"unit"`
	Nominal       Figure         `json:"nominal"`
	WorstCase     *WorstCase     `json:"worst_case"`
	RootSumSquare RootSumSquare  `json:"root_sum_square"`
	Simulated     Simulated      `json:"simulated"`
	Contributions []Contribution `json:"contributions"`
}

// WorstCase is the extreme found, and the corner that attains it.
type WorstCase struct {
	Limits
	AtLow      []Corner `json:"at_low"`
	AtHigh     []Corner `json:"at_high"`
	Searched   string   `json:"searched"`             // how: every corner, or guided
	Guaranteed *Limits  `json:"guaranteed,omitempty"` // interval bound: nothing lies beyond
	Why        string   `json:"why,omitempty"`
}

// Corner is one parameter's place in a worst case, z in [-1, 1].
type Corner struct {
	Ref       string `json:"ref"`
	Parameter string `json:"parameter"`
	Z         Figure `json:"z"`
}

// RootSumSquare is first-order propagation with lot correlation (JCGM 100).
type RootSumSquare struct {
	StandardUncertainty Figure `json:"standard_uncertainty"`
	Why                 string `json:"why,omitempty"`
}

// Simulated summarises the units whose trims, where the output depends on
// them, reached; ReachedShare is how many those are.
type Simulated struct {
	Mean              Figure            `json:"mean"`
	StandardDeviation Figure            `json:"standard_deviation"`
	Quantiles         map[string]Figure `json:"quantiles"`
	ReachedShare      Figure            `json:"reached_share"`
	Why               string            `json:"why,omitempty"`
}

// Contribution is one parameter's part in an output's variance. Sensitivity
// is the derivative of the output by the parameter in SI units, through every
// trim; shares sum to 1 and include lot correlation.
type Contribution struct {
	Ref         string `json:"ref"`
	Parameter   string `json:"parameter"`
	Sensitivity Figure `json:"sensitivity"`
	Share       Figure `json:"share"`
}

// TrimReport is how a trimmer ends up over the simulated units.
type TrimReport struct {
	Turn         string      `json:"turn"`
	ReachedShare Figure      `json:"reached_share"`
	ShortLow     Figure      `json:"short_low"`  // share that ran out at setting 0
	ShortHigh    Figure      `json:"short_high"` // share that ran out at setting 1
	NearLow      Figure      `json:"near_low"`   // share that reached within NearEnd of setting 0
	NearHigh     Figure      `json:"near_high"`  // and of setting 1
	Setting      TrimSetting `json:"setting"`
	Why          string      `json:"why,omitempty"`
}

// TrimSetting is where the trimmer ends, 0..1 of its travel.
type TrimSetting struct {
	Nominal Figure `json:"nominal"`
	Mean    Figure `json:"mean"`
	Median  Figure `json:"median"`
	P01     Figure `json:"p01"` // 1 % of the units end below
	P99     Figure `json:"p99"`
}

// TargetReport is the verdict on one target.
type TargetReport struct {
	Name          string    `json:"name"`
	Output        string    `json:"output"`
	Asked         string    `json:"asked"` // the demand in words
	Demand        float64   `json:"-"`     // the share of units that must comply
	Met           bool      `json:"met"`
	Share         Figure    `json:"share"`
	ShareInterval [2]Figure `json:"share_interval"`
	WorstCase     *Limits   `json:"worst_case"` // over the target's conditions; null for a trim's reach, and where none was found
	Why           string    `json:"why,omitempty"`
}

// YieldReport is the share of units that meet every target, by unit and by batch.
type YieldReport struct {
	UnitShare Figure      `json:"unit_share"`
	Interval  [2]Figure   `json:"interval"`
	Batch     BatchReport `json:"batch"`
}

// BatchReport is the distribution of good units per batch.
type BatchReport struct {
	Units        int    `json:"units"`
	MedianGood   Figure `json:"median_good"`
	P05Good      Figure `json:"p05_good"`
	AllGoodShare Figure `json:"all_good_share"`
}

// Simulation says how much was simulated.
type Simulation struct {
	Batches int `json:"batches"`
	Units   int `json:"units"`
}
