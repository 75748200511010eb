package plan

import (
	"batchwright/bom/order"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
	"batchwright/tolerance/spread"
)

// Spread is what `spread --json` prints.
type Spread struct {
	spread.Report
	Bench   []bench.Reading `json:"bench"`
	Samples []bench.Sample  `json:"samples"`
}

// Result is what `plan --json` prints.
type Result struct {
	Spread
	Picks []pick.Choice `json:"picks"`
	Pick  pick.Result   `json:"pick"`
	Order order.Order   `json:"order"`
	Files []string      `json:"files"` // written

	Comparison *Comparison `json:"compare,omitempty"`
}

// Pick is what `pick --json` prints.
type Pick struct {
	Build   string                `json:"build"`
	Seed    uint64                `json:"seed"`
	Picks   []pick.Choice         `json:"picks"`
	Pick    pick.Result           `json:"pick"`
	Targets []spread.TargetReport `json:"targets"`
	Order   order.Order           `json:"order"`
	Files   []string              `json:"files"` // written
}

// NewSpread joins a report and the bench's readings.
func NewSpread(r *spread.Report, s bench.Sheet) Spread {
	out := Spread{*r, listed(s.Readings), listed(s.Samples)}
	out.Outputs = listed(r.Outputs)
	for i := range out.Outputs {
		out.Outputs[i].Contributions = listed(out.Outputs[i].Contributions)
	}
	out.Trims, out.Targets = listed(r.Trims), listed(r.Targets)
	out.Findings, out.LockRanges = listed(r.Findings), listed(r.LockRanges)
	return out
}

// NewResult joins everything known about a batch and the files written.
func NewResult(w Work, files ...string) Result {
	var compared *Comparison
	if w.Compared != nil {
		compared = NewComparison(w.Compared)
	}
	return Result{
		Spread: NewSpread(w.Report, w.Sheet), Picks: listed(w.Pick.Choices), Pick: *w.Pick,
		Order: w.Order, Files: listed(files), Comparison: compared,
	}
}

// listed copies a list; none at all becomes an empty one, which JSON writes as
// [] and not as null.
func listed[T any](list []T) []T { return append([]T{}, list...) }

// NewPick joins what was picked and what it costs.
func NewPick(b *build.Build, seed uint64, r *pick.Result, o order.Order) Pick {
	return Pick{Build: b.Title, Seed: seed, Picks: listed(r.Choices), Pick: *r, Targets: listed(r.Targets), Order: o, Files: []string{}}
}
