package pick

import (
	"fmt"
	"slices"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// trial is some targets that are put to the test together, by share or by
// worst case, and what came of it for the choices on the lines that they depend
// on.
type trial struct {
	targets []int
	worst   bool
	lines   []int
	seen    map[string]outcome
}

// outcome of a trial: the reports on its targets, and which is not met, or -1.
type outcome struct {
	reports []spread.TargetReport
	failed  int
}

// makeTrials divides the targets into those by share that are cheap to
// simulate, the rest of those, and the worst cases, which cost most.
func (c *chooser) makeTrials(m *build.Model) {
	cheap, rest := spread.CheapFirst(m)
	var worst []int
	for t, target := range m.Build.Targets {
		if target.WorstCase {
			worst = append(worst, t)
		}
	}
	for k, targets := range [][]int{cheap, rest, worst} {
		if len(targets) > 0 {
			c.trials = append(c.trials, &trial{targets, k == 2, c.linesOfTargets(targets), map[string]outcome{}})
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

// confirm puts a choice to every trial. Choices that differ only where a trial
// does not look share its outcome: every draw follows from seed and reference,
// so it would be the same to the bit.
func (c *chooser) confirm(choice []int) (bool, error) {
	name := fmt.Sprint(choice)
	if why, known := c.answers[name]; known {
		return why == "", nil
	}
	for _, t := range c.trials {
		came, err := c.outcome(t, choice)
		if err != nil {
			return false, err
		}
		if came.failed >= 0 {
			c.refuse(name, came.reports[came.failed], t.worst)
			return false, nil
		}
	}
	c.answers[name] = ""
	return true, nil
}

// outcome is what a trial says of a choice.
func (c *chooser) outcome(t *trial, choice []int) (outcome, error) {
	key := on(t.lines, choice)
	if came, known := t.seen[key]; known {
		return came, nil
	}
	b, err := c.fit(choice)
	if err != nil {
		return outcome{}, err
	}
	m, err := b.CompileTargets()
	if err != nil {
		return outcome{}, err
	}
	var came outcome
	if t.worst {
		came = judgedBy(spread.JudgeWorstCases(m), func(t spread.TargetReport) bool { return t.Met })
	} else if came, err = c.try(m, t.targets); err != nil {
		return outcome{}, err
	}
	t.seen[key] = came
	return came, nil
}

// reports are a trial's reports on a choice, on as many units as the report is
// to have even where fewer were enough to refuse it.
func (c *chooser) reports(t *trial, choice []int) ([]spread.TargetReport, error) {
	came, err := c.outcome(t, choice)
	if err != nil || t.worst || came.failed < 0 {
		return came.reports, err
	}
	b, err := c.fit(choice)
	if err != nil {
		return nil, err
	}
	m, err := b.CompileTargets()
	if err != nil {
		return nil, err
	}
	return spread.JudgeShares(c.context, m, t.targets, spread.Options{Seed: c.Seed, Units: c.Units})
}

// try simulates some targets on more and more units as long as they may still
// be met, at last on those of the report.
func (c *chooser) try(m *build.Model, targets []int) (outcome, error) {
	for _, units := range []int{240, 960, 3840} {
		if quickGain*units > c.Units {
			break // it would take about as long as the report's own
		}
		o := spread.Options{Seed: c.Seed ^ quickSeed, Units: units}
		came, err := c.simulate(m, targets, o, func(t spread.TargetReport) bool {
			upper := float64(t.ShareInterval[1])
			return upper+doubt*(upper-float64(t.Share)) >= t.Demand // it may still do
		})
		if err != nil || came.failed >= 0 {
			return came, err
		}
	}
	o := spread.Options{Seed: c.Seed, Units: c.Units}
	return c.simulate(m, targets, o, func(t spread.TargetReport) bool { return t.Met })
}

// quickGain is how many times more units the report must have for a quick
// simulation to be worth its time.
const quickGain = 4

// quickSeed keeps the draws of the quick simulations apart from those that
// confirm.
const quickSeed = 0x9e3779b97f4a7c15

// doubt is how far beyond its interval, in parts of what that reaches above the
// share, a quick simulation must miss to refuse a choice: by some three standard
// deviations, so that what the report would pass is hardly ever refused.
const doubt = 0.5

// simulate looks for a target that a simulation does not meet.
func (c *chooser) simulate(m *build.Model, targets []int, o spread.Options, met func(spread.TargetReport) bool) (outcome, error) {
	reports, err := spread.JudgeShares(c.context, m, targets, o)
	if err != nil {
		return outcome{}, err
	}
	return judgedBy(reports, met), nil
}

// judgedBy is the outcome by the first report that is not met.
func judgedBy(reports []spread.TargetReport, met func(spread.TargetReport) bool) outcome {
	return outcome{reports, slices.IndexFunc(reports, func(t spread.TargetReport) bool { return !met(t) })}
}

// refuse notes why a choice was refused.
func (c *chooser) refuse(name string, t spread.TargetReport, worst bool) {
	c.answers[name] = fmt.Sprintf("%s on %.4g %% of the simulated units", t.Name, 100*float64(t.Share))
	if worst {
		c.answers[name] = t.Name + " in the worst case"
	}
	c.refusals++
	if c.Progress != nil {
		c.Progress(fmt.Sprintf("refused %d choices", c.refusals))
	}
}
