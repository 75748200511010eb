package build

import (
	"fmt"
	"slices"
)

// Drifting are the outputs whose drift matters: those whose change a target
// limits, or that the last trim sets where no target does.
func (b *Build) Drifting() []OutputName {
	var list []OutputName
	for _, t := range b.Targets {
		if t.Trim < 0 && t.ChangeFrom >= 0 && !slices.Contains(list, t.Output) {
			list = append(list, t.Output)
		}
	}
	if n := len(b.Trims); len(list) == 0 && n > 0 {
		list = append(list, b.Trims[n-1].Output)
	}
	return list
}

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
