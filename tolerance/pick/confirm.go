package pick

import (
	"fmt"
	"slices"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// trial is some targets that are simulated together, and what came of it for
// the choices on the lines that they depend on.
type trial struct {
	targets []int
	lines   []int
	seen    map[string]outcome
}

// outcome of a trial: the target that is not met, if one is not.
type outcome struct {
	failed bool
	by     spread.TargetReport
}

// makeTrials divides the targets by share into those that are cheap to simulate
// and the rest.
func (p *pictures) makeTrials(m *build.Model) {
	cheap, rest := spread.CheapFirst(m)
	for _, targets := range [][]int{cheap, rest} {
		if len(targets) > 0 {
			p.trials = append(p.trials, &trial{targets, p.linesOfTargets(targets), map[string]outcome{}})
		}
	}
}

// linesOfTargets are the openings that some targets depend on.
func (p *pictures) linesOfTargets(targets []int) []int {
	var lines []int
	for _, g := range p.groups {
		for _, k := range g.demands {
			if slices.Contains(targets, p.demands[k].target) {
				lines = append(lines, g.lines...)
			}
		}
	}
	slices.Sort(lines)
	return slices.Compact(lines)
}

// on names a choice's options on some lines.
func on(lines, choice []int) string {
	own := make([]int, len(lines))
	for k, i := range lines {
		own[k] = choice[i]
	}
	return fmt.Sprint(own)
}

// confirm simulates a choice: the targets that are cheap to simulate, then the
// others. Worst cases, which cost most, are searched last. Choices that differ
// only where a trial does not look share its outcome: every draw follows from
// seed and reference, so it would be the same to the bit.
func (c *chooser) confirm(choice []int) (bool, error) {
	for _, t := range c.pictures.trials {
		key := on(t.lines, choice)
		came, known := t.seen[key]
		if !known {
			var err error
			if came, err = c.try(choice, t.targets); err != nil {
				return false, err
			}
			t.seen[key] = came
		}
		if came.failed {
			return c.refuse(choice, came.by), nil
		}
	}
	m, err := c.compile(choice)
	if err != nil {
		return false, err
	}
	for _, t := range spread.JudgeWorstCases(m) {
		if !t.Met {
			return c.refuse(choice, t), nil
		}
	}
	return true, nil
}

// try simulates some targets on more and more units as long as they may still
// be met, at last on those of the report.
func (c *chooser) try(choice, targets []int) (outcome, error) {
	m, err := c.compile(choice)
	if err != nil {
		return outcome{}, err
	}
	for _, units := range []int{240, 960, 3840} {
		o := spread.Options{Seed: c.Seed ^ quickSeed, Units: min(c.Units, units)}
		came, err := c.simulate(m, targets, o, func(t spread.TargetReport) bool {
			return float64(t.ShareInterval[1]) >= t.Demand // it may still do
		})
		if came.failed || err != nil {
			return came, err
		}
	}
	o := spread.Options{Seed: c.Seed, Units: c.Units}
	return c.simulate(m, targets, o, func(t spread.TargetReport) bool { return t.Met })
}

// quickSeed keeps the draws of the quick simulations apart from those that
// confirm.
const quickSeed = 0x9e3779b97f4a7c15

// simulate looks for a target that a simulation does not meet.
func (c *chooser) simulate(m *build.Model, targets []int, o spread.Options, met func(spread.TargetReport) bool) (outcome, error) {
	reports, err := spread.JudgeShares(c.context, m, targets, o)
	if err != nil {
		return outcome{}, err
	}
	for _, t := range reports {
		if !met(t) {
			return outcome{true, t}, nil
		}
	}
	return outcome{}, nil
}

// refuse notes why a choice was refused.
func (c *chooser) refuse(choice []int, t spread.TargetReport) bool {
	text := fmt.Sprintf("%s on %.4g %% of the simulated units", t.Name, 100*float64(t.Share))
	if t.WorstCase != nil {
		text = t.Name + " in the worst case"
	}
	c.refused[fmt.Sprint(choice)] = text
	if c.Progress != nil {
		c.Progress(fmt.Sprintf("refused %d choices", len(c.refused)))
	}
	return false
}
