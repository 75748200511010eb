package cli

import (
	"fmt"
	"math"
	"strconv"

	"github.com/urfave/cli/v2"

	"batchwright/export/table"
	"batchwright/tolerance/build"
)

// What a simulation takes where nothing is said, and at most. A unit costs some
// bytes for each target; the upper limit keeps them within a small computer.
const (
	defaultSeed     = 1
	defaultSimulate = 24_000
	mostSimulate    = 5_000_000
)

// The flags that several commands have. Values come as text, so that a wrong
// one is answered in our own words; each run has flags of its own.
func seedFlag() cli.Flag {
	return &cli.StringFlag{Name: "seed", Usage: "`N` from which every draw follows; same seed, same result", DefaultText: strconv.Itoa(defaultSeed)}
}

func simulateFlag() cli.Flag {
	return &cli.StringFlag{Name: "simulate", Usage: "at least `N` units, in whole batches", DefaultText: strconv.Itoa(defaultSimulate)}
}

func unitsFlag() cli.Flag {
	return &cli.StringFlag{Name: "units", Usage: "build `N` units instead of what the file says"}
}

func jsonFlag() cli.Flag {
	return &cli.BoolFlag{Name: "json", Usage: "print the result as JSON", DisableDefaultText: true}
}

// sizes are the numbers a simulation is run with.
type sizes struct {
	seed     uint64
	units    int // 0: as the file says
	simulate int
}

// readSizes reads --seed, --units and --simulate.
func readSizes(c *cli.Context) (sizes, error) {
	s := sizes{seed: defaultSeed, simulate: defaultSimulate}
	var err error
	if c.IsSet("seed") {
		if s.seed, err = whole(c, "seed", 0, math.MaxUint64); err != nil {
			return s, err
		}
	}
	if c.IsSet("units") {
		n, err := whole(c, "units", 1, build.MaxUnits)
		if err != nil {
			return s, err
		}
		s.units = int(n)
	}
	if c.IsSet("simulate") {
		n, err := whole(c, "simulate", 1, mostSimulate)
		if err != nil {
			return s, err
		}
		s.simulate = int(n)
	}
	return s, nil
}

// whole reads a flag that takes a whole number from low to high.
func whole(c *cli.Context, name string, low, high uint64) (uint64, error) {
	text := c.String(name)
	n, err := strconv.ParseUint(text, 10, 64)
	if err != nil || n < low || n > high {
		return 0, usage("--%s %q: expected a whole number from %d to %d", name, text, low, high)
	}
	return n, nil
}

// argument is a command's one argument, "" where it may be left out and is.
func argument(c *cli.Context, what string, optional bool) (string, error) {
	switch n := c.NArg(); {
	case n > 1:
		return "", usage("%s takes one %s, got %d: %q and %q", c.Command.Name, what, n, c.Args().Get(0), c.Args().Get(1))
	case n == 0 && optional:
		return "", nil
	case n == 0 || c.Args().First() == "":
		return "", usage("%s needs a %s: batchwright %s %s", c.Command.Name, what, c.Command.Name, c.Command.ArgsUsage)
	}
	return c.Args().First(), nil
}

// json prints a result as JSON. Figures that do not exist are null; a NaN that
// gets this far is a mistake of ours.
func (p *program) json(result any) error {
	if err := table.JSON(&p.out, result); err != nil {
		return fmt.Errorf("the result cannot be written as JSON: %w", err)
	}
	return nil
}
