package plan

import (
	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/pick"
	"batchwright/tolerance/spread"
)

// Spread is what `spread --json` prints.
type Spread struct {
	spread.Report
	Bench []bench.Reading `json:"bench"`
}

// Result is what `plan --json` prints.
type Result struct {
	Spread
	Picks []pick.Choice `json:"picks"`
	Pick  Proof         `json:"pick"`
	Order order.Order   `json:"order"`
	Files []string      `json:"files"` // written

	Comparison *Comparison `json:"compare,omitempty"`
}

// Proof is how the parts were chosen.
type Proof struct {
	ProvedCheapest bool        `json:"proved_cheapest"`
	CostPerUnit    offer.Money `json:"cost_per_unit"`
	Candidates     int         `json:"candidates"`
	Examined       int         `json:"examined"`
	Simulated      int         `json:"simulated"`
	Alternates     []Alternate `json:"alternates"`
	Why            string      `json:"why,omitempty"`
}

// Alternate is another choice for a position that meets the targets too.
type Alternate struct {
	Positions []string    `json:"positions"`
	Family    string      `json:"family"`
	Tolerance float64     `json:"tolerance"`
	UnitCost  offer.Money `json:"unit_cost"`
}

// NewSpread joins a report and the bench's readings.
func NewSpread(r *spread.Report, s bench.Sheet) Spread {
	out := Spread{*r, listed(s.Readings)}
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
	p := w.Pick
	var compared *Comparison
	if w.Compared != nil {
		compared = NewComparison(w.Compared)
	}
	return Result{
		Spread: NewSpread(w.Report, w.Sheet),
		Picks:  listed(p.Choices),
		Pick: Proof{
			ProvedCheapest: p.ProvedCheapest, CostPerUnit: p.CostPerUnit, Candidates: p.Candidates,
			Examined: p.Examined, Simulated: p.Simulated, Alternates: []Alternate{}, Why: p.Why,
		},
		Order: w.Order, Files: listed(files), Comparison: compared,
	}
}

// listed copies a list; none at all becomes an empty one, which JSON writes as
// [] and not as null.
func listed[T any](list []T) []T { return append([]T{}, list...) }
