package spread

import (
	"context"

	"batchwright/tolerance/build"
)

// DriftRow is how far an output has moved from the reference condition at a
// temperature: nominal, and the central 95 % of the units that reached.
type DriftRow struct {
	Celsius            float64
	Low, Nominal, High Figure
}

// Drift moves an output's trimmed units from one temperature to another in
// even steps, all else as at the reference condition.
func Drift(ctx context.Context, b *build.Build, output build.OutputName, from, to float64, steps int, o Options) ([]DriftRow, error) {
	values := make([]float64, steps+1)
	for i := range values {
		values[i] = from + (to-from)*float64(i)/float64(steps)
	}
	swept, err := b.Sweep(output, build.Temperature, values)
	if err != nil {
		return nil, err
	}
	m, err := swept.CompileTargets()
	if err != nil {
		return nil, err
	}
	s, err := simulate(ctx, newNodes(m, nil, allTargets(m), false), o)
	if err != nil {
		return nil, err
	}
	rows := make([]DriftRow, len(values))
	for i, output := range m.Targets[0].Outputs {
		column := s.nodes.columnOf[output]
		h := s.outputs[column].histogram
		rows[i] = DriftRow{values[i], Figure(h.Quantile(0.025)), Figure(s.nominal[column]), Figure(h.Quantile(0.975))}
	}
	return rows, nil
}
