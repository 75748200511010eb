package cli

import (
	"github.com/urfave/cli/v2"

	"batchwright/export/plan"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

func (p *program) spreadCommand() *cli.Command {
	return &cli.Command{
		Name:      "spread",
		Usage:     "every output at every condition: nominal, worst case, simulated; trims, targets, yield",
		ArgsUsage: "BUILD",
		Description: `Takes the parts as the file has them (an open position as the first it may be),
trims every unit as the bench will, and says where each output ends up. "-" reads
the build from standard input.

  batchwright spread tone-box.yaml
  batchwright spread tone-box.yaml --simulate 100000 --seed 2 --json`,
		Flags:  []cli.Flag{unitsFlag(), seedFlag(), simulateFlag(), jsonFlag()},
		Action: p.spread,
	}
}

func (p *program) spread(c *cli.Context) error {
	file, err := argument(c, "build file", false)
	if err != nil {
		return err
	}
	s, err := readSizes(c)
	if err != nil {
		return err
	}
	src, err := p.read(file, s.units)
	if err != nil {
		return err
	}
	m, err := src.Compile()
	if err != nil {
		return err
	}
	g := p.newProgress()
	defer g.stop()
	g.start("simulating")
	r, err := spread.Analyse(c.Context, m, spread.Options{Seed: s.seed, Units: s.simulate, Progress: g.at})
	if err != nil {
		return err
	}
	g.stop()
	sheet := bench.NewSheet(m, r)
	if c.Bool("json") {
		err = p.json(plan.NewSpread(r, sheet))
	} else {
		p.showSpread(src.Build, r)
	}
	if err != nil {
		return err
	}
	return missedTargets(r.Targets)
}
