package build

import (
	"fmt"
	"slices"
)

// Sweep is the build with a condition added for each value of a variable, the
// rest as in the reference, and one target that asks how an output changes
// from the reference to them. The values are as conditions hold them: degrees
// Celsius, fractions, seconds.
func (b *Build) Sweep(output OutputName, variable string, values []float64) (*Build, error) {
	v := b.variable(variable)
	s := b.Stage(output.Stage)
	if v < 0 || s == nil {
		return nil, fmt.Errorf("build: no variable %q or no stage %q", variable, output.Stage)
	}
	o, ok := s.output(output.Output)
	if !ok {
		return nil, fmt.Errorf("build: no output %s", output)
	}
	out := *b
	out.Conditions = slices.Clone(b.Conditions)
	target := Target{Name: "sweep", Output: output, Unit: o.Unit, Trim: -1, ChangeFrom: 0}
	for _, x := range values {
		at := slices.Clone(b.Conditions[0].Values)
		at[v] = x
		target.At = append(target.At, len(out.Conditions))
		out.Conditions = append(out.Conditions, Condition{fmt.Sprintf("%s %g", variable, x), at})
	}
	out.Targets = []Target{target}
	return &out, nil
}
