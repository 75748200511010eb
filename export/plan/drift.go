package plan

import (
	"context"
	"fmt"
	"slices"

	"batchwright/export/workbook"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// The sweep of temperature: so far to either side of the reference, further
// where a condition lies further, in so many steps.
const (
	driftReach = 15 // K
	driftSteps = 12
	driftUnits = 4_800 // simulated at most; the band's ends are good to a few per cent of its width
)

// Drifts moves every output whose change a target limits, or that a trim sets
// where no target does, through the temperatures around the reference.
func Drifts(ctx context.Context, b *build.Build, o spread.Options) ([]workbook.Drift, error) {
	from, to := temperatures(b)
	o.Units = min(o.Units, driftUnits)
	o.Progress = nil // it counts from the start for every output
	var list []workbook.Drift
	for _, output := range b.Drifting() {
		rows, err := spread.Drift(ctx, b, output, from, to, driftSteps, o)
		if err != nil {
			return nil, err
		}
		d := workbook.Drift{
			Title:   fmt.Sprintf("Change of %s with temperature, from %s", output, b.Conditions[0].Name),
			Output:  output.String(),
			Unit:    unitOf(b, output),
			Meaning: fmt.Sprintf("Low and high: 95 %% of the units lie between. The trimmers stay as they were set at %s.", b.Conditions[0].Name),
		}
		d.Target, d.Limits = driftLimits(b, output)
		for _, r := range rows {
			d.Rows = append(d.Rows, workbook.DriftRow(r))
		}
		list = append(list, d)
	}
	return list, nil
}

// temperatures is the range to sweep.
func temperatures(b *build.Build) (from, to float64) {
	at := slices.IndexFunc(b.Variables, func(v build.Variable) bool { return v.Name == build.Temperature })
	reference := b.Conditions[0].Values[at]
	from, to = reference-driftReach, reference+driftReach
	for _, c := range b.Conditions {
		from, to = min(from, c.Values[at]), max(to, c.Values[at])
	}
	return from, to
}

// driftLimits are the limits of the target that is about temperature: its
// conditions differ from the reference in nothing else.
func driftLimits(b *build.Build, output build.OutputName) (string, *spread.Limits) {
	for _, t := range b.Targets {
		if t.Trim >= 0 || t.ChangeFrom != 0 || t.Output != output {
			continue
		}
		if !slices.ContainsFunc(t.At, func(i int) bool { return !onlyWarmer(b, i) }) {
			return t.Name, &spread.Limits{Low: spread.Figure(t.Low), High: spread.Figure(t.High)}
		}
	}
	return "", nil
}

// onlyWarmer says whether a condition differs from the reference in its
// temperature alone.
func onlyWarmer(b *build.Build, i int) bool {
	for j, v := range b.Variables {
		if v.Name != build.Temperature && b.Conditions[i].Values[j] != b.Conditions[0].Values[j] {
			return false
		}
	}
	return i != 0
}

// unitOf is the unit of an output's change.
func unitOf(b *build.Build, n build.OutputName) string {
	for _, o := range b.Stage(n.Stage).Outputs {
		if o.Name == n.Output && o.Unit.Offset != 0 {
			return "K"
		}
		if o.Name == n.Output {
			return o.Unit.Symbol
		}
	}
	return ""
}
