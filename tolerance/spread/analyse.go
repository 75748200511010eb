package spread

import (
	"context"
	"fmt"
	"math"

	"batchwright/tolerance/build"
	"batchwright/tolerance/tape"
)

// Confidence is that of every interval in a report.
const Confidence = 0.95

// QuantileNames are the quantiles a report gives, as its keys write them.
var QuantileNames = []string{"0.005", "0.025", "0.5", "0.975", "0.995"}

var quantiles = []float64{0.005, 0.025, 0.5, 0.975, 0.995}

// Analyse does everything: nominal values, worst cases, root sum squares,
// contributions and a simulation with its yield.
func Analyse(ctx context.Context, m *build.Model, o Options) (*Report, error) {
	s, err := simulate(ctx, newNodes(m, allOutputs(m), allTargets(m), true), o)
	if err != nil {
		return nil, err
	}
	worst, err := worstCases(ctx, m, o.Workers)
	if err != nil {
		return nil, err
	}
	r := &Report{Build: m.Build.Title, Seed: o.Seed, Simulation: Simulation{s.batches, s.units}}
	l := linearOutputs(m)
	for i := range m.Outputs {
		r.Outputs = append(r.Outputs, s.output(l, i, worst[i]))
	}
	for k := range s.nodes.trims { // all of them
		r.Trims = append(r.Trims, s.trim(k))
	}
	for t := range m.Build.Targets {
		r.Targets = append(r.Targets, s.target(t, worst))
	}
	r.Yield = s.yield()
	loads := s.loads()
	r.Readings, r.Samples = s.readings(loads), s.sampleReports(loads)
	r.Findings = s.findings()
	r.LockRanges = lockRanges(m, r.Outputs)
	r.Notes = s.notes()
	return r, nil
}

// JudgeShares simulates only what some of the targets ask about, and gives
// their verdicts by share.
func JudgeShares(ctx context.Context, m *build.Model, targets []int, o Options) ([]TargetReport, error) {
	s, err := simulate(ctx, newNodes(m, nil, targets, false), o)
	if err != nil {
		return nil, err
	}
	var list []TargetReport
	for k := range targets {
		list = append(list, s.shareOf(k))
	}
	return list, nil
}

// CheapFirst divides the targets by share into those that take a small part of
// the operations of simulating all, and the rest.
func CheapFirst(m *build.Model) (cheap, rest []int) {
	var shares []int
	for t, target := range m.Build.Targets {
		if !target.WorstCase {
			shares = append(shares, t)
		}
	}
	all := newNodes(m, nil, shares, false).program.Cost()
	for _, t := range shares {
		if 5*newNodes(m, nil, []int{t}, false).program.Cost() < all {
			cheap = append(cheap, t)
		} else {
			rest = append(rest, t)
		}
	}
	return cheap, rest
}

// JudgeWorstCases gives the verdicts on the targets by worst case, without
// their shares.
func JudgeWorstCases(m *build.Model) []TargetReport {
	var list []TargetReport
	for t, target := range m.Build.Targets {
		if !target.WorstCase {
			continue
		}
		worst := make([]*WorstCase, len(m.Outputs))
		for _, i := range m.Targets[t].Outputs {
			worst[i] = worstCase(m, m.Outputs[i].Node, m.Outputs[i].Trims)
		}
		r := targetReport(target)
		none := Figure(math.NaN())
		r.Share, r.ShareInterval = none, [2]Figure{none, none}
		judgeWorst(&r, m, t, worst)
		list = append(list, r)
	}
	return list
}

func linearOutputs(m *build.Model) *Linear {
	var refs []tape.Ref
	for _, o := range m.Outputs {
		refs = append(refs, o.Node)
	}
	return Linearise(m, refs...)
}

// output reports one output.
func (s *sample) output(l *Linear, i int, worst *WorstCase) OutputReport {
	m := s.nodes.model
	o := m.Outputs[i]
	column := s.nodes.columnOf[i]
	r := OutputReport{
		Output: o.Name.String(), Condition: m.Build.Conditions[o.Condition].Name,
		Unit: o.Unit.Symbol, Nominal: Figure(s.nominal[column]), WorstCase: worst,
	}
	if o.ChangeFrom >= 0 {
		r.ChangeFrom = m.Build.Conditions[o.ChangeFrom].Name
	}
	l.rootSumSquare(i, &r)
	r.Simulated = s.outputs[column].report(s.units)
	return r
}

// report summarises a column over the units that were kept.
func (s summary) report(units int) Simulated {
	r := Simulated{
		Mean:              Figure(s.moments.Mean()),
		StandardDeviation: Figure(s.moments.StandardDeviation()),
		Quantiles:         map[string]Figure{},
		ReachedShare:      Figure(float64(s.moments.Count()) / float64(units)),
	}
	for i, name := range QuantileNames {
		r.Quantiles[name] = Figure(s.histogram.Quantile(quantiles[i]))
	}
	if s.moments.Count() == 0 {
		r.Why = "in no simulated unit did every trim that it depends on reach"
	}
	return r
}

// trim reports where the k-th trimmer ends.
func (s *sample) trim(k int) TrimReport {
	trim := s.nodes.model.Build.Trims[s.nodes.trims[k]]
	x := s.settings[k]
	units := float64(s.units)
	return TrimReport{
		Turn:         trim.Stage + "." + trim.Role,
		ReachedShare: Figure(1 - float64(s.short[k][0]+s.short[k][1])/units),
		ShortLow:     Figure(float64(s.short[k][0]) / units),
		ShortHigh:    Figure(float64(s.short[k][1]) / units),
		NearLow:      Figure(float64(s.near[k][0]) / units),
		NearHigh:     Figure(float64(s.near[k][1]) / units),
		Setting: TrimSetting{
			Median:  Figure(x.histogram.Quantile(0.5)),
			Nominal: Figure(s.nominal[s.nodes.trimColumn(k)]), Mean: Figure(x.moments.Mean()),
			P01: Figure(x.histogram.Quantile(0.01)), P99: Figure(x.histogram.Quantile(0.99)),
		},
	}
}

// target gives the verdict on the k-th target: by share, or by its worst case.
func (s *sample) target(k int, worst []*WorstCase) TargetReport {
	r := s.shareOf(k)
	m, t := s.nodes.model, s.nodes.targets[k]
	if m.Build.Targets[t].WorstCase {
		r.Met, r.Why = false, ""
		judgeWorst(&r, m, t, worst)
	} else {
		r.WorstCase, _ = worstOver(m, t, worst)
	}
	return r
}

// shareOf gives the verdict on the k-th target by its share.
func (s *sample) shareOf(k int) TargetReport {
	target := s.nodes.model.Build.Targets[s.nodes.targets[k]]
	share, low, high := ShareInterval(s.perBatch(s.comply[k]), s.nodes.model.Build.Units, Confidence)
	r := targetReport(target)
	r.Share, r.ShareInterval = Figure(share), [2]Figure{Figure(low), Figure(high)}
	r.Met = share >= target.Share
	if low < target.Share && high > target.Share {
		r.Why = fmt.Sprintf("close: %.4g %% of the units comply, between %.4g %% and %.4g %% at 95 %% confidence", 100*share, 100*low, 100*high)
	}
	return r
}

// targetReport is a target's report before its verdict.
func targetReport(t build.Target) TargetReport {
	return TargetReport{Name: t.Name, Output: t.Output.String(), Asked: t.Asked, Demand: t.Share}
}

// judgeWorst judges a target by the worst case over its conditions.
func judgeWorst(r *TargetReport, m *build.Model, t int, worst []*WorstCase) {
	target := m.Build.Targets[t]
	if target.Trim >= 0 {
		var corner []Corner
		r.Met, corner = reachWorstCase(m, target.Trim)
		if !r.Met {
			r.Why = "out of reach at " + cornerText(corner)
		}
		return
	}
	r.WorstCase, r.Why = worstOver(m, t, worst)
	for _, i := range m.Targets[t].Outputs {
		switch w := worst[i]; {
		case float64(w.Low) < target.Low:
			r.Why = "too low at " + cornerText(w.AtLow)
		case float64(w.High) > target.High:
			r.Why = "too high at " + cornerText(w.AtHigh)
		}
	}
	r.Met = r.Why == ""
}

// worstOver is the worst case over a target's conditions; nil, and why, where
// none was found or there is no output.
func worstOver(m *build.Model, t int, worst []*WorstCase) (*Limits, string) {
	if len(m.Targets[t].Outputs) == 0 {
		return nil, "a trim's reach has no worst case of its own"
	}
	limits := Limits{Figure(math.Inf(1)), Figure(math.Inf(-1))}
	for _, i := range m.Targets[t].Outputs {
		if worst[i].Why != "" {
			return nil, worst[i].Why
		}
		limits.Low, limits.High = min(limits.Low, worst[i].Low), max(limits.High, worst[i].High)
	}
	return &limits, ""
}

// cornerText names the parameters that matter most in a corner.
func cornerText(corner []Corner) string {
	const most = 4
	text := ""
	for i, c := range corner {
		if i == most {
			return text + ", …"
		}
		if i > 0 {
			text += ", "
		}
		text += fmt.Sprintf("%s %s %s", c.Ref, c.Parameter, placeText(float64(c.Z)))
	}
	return text
}

// placeText says where between its limits a parameter is.
func placeText(z float64) string {
	switch z {
	case -1:
		return "low"
	case 1:
		return "high"
	}
	return fmt.Sprintf("at %+.2g of its limit", z)
}

// perBatch counts, in each batch, the units marked.
func (s *sample) perBatch(marked []bool) []int {
	units := s.nodes.model.Build.Units
	counts := make([]int, s.batches)
	for i, m := range marked {
		if m {
			counts[i/units]++
		}
	}
	return counts
}

// yield is the share of units that meet every target.
func (s *sample) yield() YieldReport {
	units := s.nodes.model.Build.Units
	good := s.perBatch(s.good)
	share, low, high := ShareInterval(good, units, Confidence)
	median, p05, all := BatchSummary(good, units)
	return YieldReport{
		UnitShare: Figure(share), Interval: [2]Figure{Figure(low), Figure(high)},
		Batch: BatchReport{units, Figure(median), Figure(p05), Figure(all)},
	}
}

// notes are what else should be known.
func (s *sample) notes() []string {
	var notes []string
	m := s.nodes.model
	for i, o := range m.Outputs {
		if v := s.nominal[s.nodes.columnOf[i]]; math.IsNaN(v) || math.IsInf(v, 0) {
			notes = append(notes, fmt.Sprintf("%s at %s has no finite value on a nominal unit", o.Name, m.Build.Conditions[o.Condition].Name))
		}
		if n := s.outputs[s.nodes.columnOf[i]].moments.NonFinite(); n > 0 {
			notes = append(notes, fmt.Sprintf("%s at %s has no finite value on %.3g %% of the units; its figures are those of the others",
				o.Name, m.Build.Conditions[o.Condition].Name, 100*float64(n)/float64(s.units)))
		}
	}
	for _, o := range m.Build.Openings {
		p := m.Build.Place(o.Positions[0])
		notes = append(notes, fmt.Sprintf("%s is still open; taken as %s here", o.Positions[0], p.Part.Family))
	}
	return notes
}
