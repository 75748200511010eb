package explain

import "batchwright/tolerance/spread"

// Review is what the readings say.
type Review struct {
	Units []Unit   `json:"units"`
	Batch Batch    `json:"batch"`
	Notes []string `json:"notes"`
	// Good are readings of some thousand simulated good units, by point in SI.
	Good map[string][]float64 `json:"-"`
}

// Unit is the verdict on one unit.
type Unit struct {
	Unit    int     `json:"unit"`
	Verdict Verdict `json:"verdict"`
	// Healthy is the probability that nothing is wrong with it.
	Healthy spread.Figure `json:"healthy"`
	// Accused says that something is more probably wrong than not.
	Accused       bool          `json:"accused"`
	Distance      spread.Figure `json:"distance"`       // Mahalanobis, from a healthy unit, over all that was read
	DistanceLimit spread.Figure `json:"distance_limit"` // that Unlikely of healthy units exceed
	Points        []UnitPoint   `json:"points"`
	// Suspects are ranked: by what can be told apart first, then by probability.
	Suspects []Suspect `json:"suspects"`
	// Further says how suspects that the readings leave alike can be told apart.
	Further []Further `json:"further,omitempty"`
}

// Verdict is what the readings of a unit amount to.
type Verdict string

// The verdicts, the worst first.
const (
	Outside    Verdict = "outside"    // a reading is outside its expected window
	Improbable Verdict = "unlikely"   // each is inside, but together they are further off than good units are
	Misses     Verdict = "misses"     // as expected, but outside what a target accepts
	Incomplete Verdict = "incomplete" // nothing wrong in what was read
	Inside     Verdict = "inside"
)

// UnitPoint is one reading of a unit.
type UnitPoint struct {
	Point    string        `json:"point"`
	Reading  spread.Figure `json:"reading"`  // SI; null: not read
	Inside   bool          `json:"inside"`   // of its expected window; what was not read is not outside
	Accepted bool          `json:"accepted"` // not outside its accept window
	Score    spread.Figure `json:"score"`    // (reading − mean)/standard deviation, of healthy units
	// Predicted is what the first suspect would read.
	Predicted *spread.Figure `json:"predicted,omitempty"`
}

// Suspect is something that may be wrong.
type Suspect struct {
	Ref         string        `json:"ref"`   // "R5", "C6 and C8", "mixer.bias", "counter"
	Fault       string        `json:"fault"` // "ten times too large"
	Class       Class         `json:"class"`
	Probability spread.Figure `json:"probability"`
	// Group is the same for suspects whose predicted readings differ by less
	// than their noise; from 1, the most probable first.
	Group int `json:"group"`
}

// Further is a reading that would tell two suspects apart.
type Further struct {
	Between [2]string         `json:"between"`          // "R5 ten times too large"
	Reading string            `json:"reading"`          // "detector.ripple at bench", or "measure R5 out of circuit"
	Expect  *[2]spread.Figure `json:"expect,omitempty"` // what it would be under each
	Unit    string            `json:"unit,omitempty"`
	Score   spread.Figure     `json:"score"` // their distance in standard deviations; null: a meter tells
}

// Batch is what the units say together.
type Batch struct {
	Counted int          `json:"counted"` // units that the averages are over
	Points  []BatchPoint `json:"points"`
	Lots    []Lot        `json:"lots"`
	Unclear []Unclear    `json:"unclear"`
	Rest    *Rest        `json:"rest,omitempty"`
	Why     string       `json:"why,omitempty"` // why there is nothing to say
}

// BatchPoint is one test point over the units.
type BatchPoint struct {
	Point        string        `json:"point"`
	Mean         spread.Figure `json:"mean"`
	ExpectedMean spread.Figure `json:"expected_mean"`
	ShiftScore   spread.Figure `json:"shift_score"`
	// SpreadRatio is the units' standard deviation over that expected within a
	// batch; SpreadP the chance of one as far up.
	SpreadRatio spread.Figure `json:"spread_ratio"`
	SpreadP     spread.Figure `json:"spread_p"`
	// Slope is the change of the reading per unit number.
	Slope  spread.Figure `json:"slope"`
	SlopeT spread.Figure `json:"slope_t"`
	SlopeP spread.Figure `json:"slope_p"`
	// Remarks are those of "shifted", "spread" and "trend" that hold with the
	// number of questions asked counted in.
	Remarks []string `json:"remarks"`
}

// Lot is a buying line whose pieces are off their centre.
type Lot struct {
	Refs        []string         `json:"refs"`
	Parameter   string           `json:"parameter"`
	Deviation   spread.Figure    `json:"deviation"` // of the lot, in standard deviations of lots
	Deviation95 [2]spread.Figure `json:"deviation_interval"`
	Shift       spread.Figure    `json:"shift"`          // of the pieces' mean: relative, or in Unit
	Interval    [2]spread.Figure `json:"shift_interval"` // 95 %
	Unit        string           `json:"unit"`           // "%", "ppm/K", …
	Score       spread.Figure    `json:"score"`          // deviation over its standard deviation
}

// Unclear are two lots of which one is off, and the readings do not say which.
type Unclear struct {
	Lots  [2]LotName    `json:"lots"`
	Score spread.Figure `json:"score"`
}

// LotName is a buying line's parameter.
type LotName struct {
	Refs      []string `json:"refs"`
	Parameter string   `json:"parameter"`
}

// Rest is what the units not read yet should come to.
type Rest struct {
	Units           int              `json:"units"`
	Share           spread.Figure    `json:"share"` // that meets every target, lots as learned
	Interval        [2]spread.Figure `json:"share_interval"`
	Planned         spread.Figure    `json:"planned_share"` // without the readings
	PlannedInterval [2]spread.Figure `json:"planned_interval"`
	Targets         []RestTarget     `json:"targets"`
}

// RestTarget is one target of the units not read yet.
type RestTarget struct {
	Name    string        `json:"name"`
	Share   spread.Figure `json:"share"`
	Planned spread.Figure `json:"planned_share"`
}
