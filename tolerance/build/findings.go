package build

import "batchwright/tolerance/tape"

// Finding is one finding of a stage's kind at a condition.
type Finding struct {
	Stage     *Stage
	Index     int // of the kind's findings
	Condition int
	Node      tape.Ref // 1 where it happens, 0 elsewhere
	Trims     []int    // the trims it depends on
}

// compileFindings makes a node for every finding at every condition.
func (c *compiler) compileFindings(environments []*environment) {
	for _, s := range c.Build.Stages {
		for k, f := range s.Kind.Findings {
			for i, e := range environments {
				c.Findings = append(c.Findings, Finding{Stage: s, Index: k, Condition: i, Node: c.equation(e, s, f.Equation)})
			}
		}
	}
}
