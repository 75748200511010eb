package cli

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"github.com/urfave/cli/v2"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/export/plan"
	"batchwright/tolerance/build"
	"batchwright/tolerance/compare"
	"batchwright/tolerance/spread"
)

func (p *program) compareCommand() *cli.Command {
	return &cli.Command{
		Name:      "compare",
		Usage:     "one part after another in the same positions, side by side: drift, reach, yield, price",
		ArgsUsage: "BUILD",
		Description: `Puts one part after another into the positions that --at names, all of one type,
and says of each case how it drifts per kelvin and over every target's
conditions, whether the trimmers reach, the yield, the price, and in one clause
why it wins or loses against the base: what the file has there now. Positions
that are the same_as one of them follow it. Open positions that are not named
are taken as spread takes them.

The cases are every combination of --families, --tolerances, --values and
--lots that is sold, 60 at most; what is left out stays as the base has it, and
with none of the four an open position is compared in the families it lists.
Without --tolerances a family is taken in the base's grade; where it is not sold
in that, in its next wider grade, else in its widest.

Every case gets the same draws, so that differences are of the parts: they are
taken batch by batch, with their 95 % interval, and called none where that does
not leave out zero. Lot to lot is what all units of a batch share, unit to unit
what is each one's own; both are standard deviations. Exit code 1 says that no
case meets every target.

  batchwright compare tone-box.yaml --at fixed.upper --families c0g,polypropylene,polystyrene
  batchwright compare tone-box.yaml --at fixed.upper,moving.upper --tolerances 1%,5% --lots one,mixed
  batchwright compare tone-box.yaml --at fixed.coil --families drum-choke,ferrite-pot --json`,
		Flags: append(append([]cli.Flag{
			&cli.StringSliceFlag{Name: "at", Usage: "exchange the parts at `STAGE.ROLE`, several with commas"},
		}, caseFlags()...),
			&cli.StringFlag{Name: "output", Usage: "tell the drift per kelvin of `STAGE.OUTPUT`", DefaultText: "those whose change a target limits, else the last trim's"},
			unitsFlag(), seedFlag(), compareSimulateFlag(), jsonFlag()),
		Action: p.compare,
	}
}

// caseFlags say what is compared.
func caseFlags() []cli.Flag {
	return []cli.Flag{
		&cli.StringSliceFlag{Name: "families", Usage: "put parts of each `FAMILY` there, several with commas"},
		&cli.StringSliceFlag{Name: "tolerances", Usage: "in each grade `T`, such as 1%,5%"},
		&cli.StringSliceFlag{Name: "values", Usage: "of each value `V`, such as 180pF,220pF; of trimmers the ranges"},
		&cli.StringSliceFlag{Name: "lots", Usage: "drawn from `one,mixed` lots"},
	}
}

func compareSimulateFlag() cli.Flag {
	return &cli.StringFlag{Name: "simulate", Usage: "at least `N` units of each case, in whole batches", DefaultText: fmt.Sprint(compare.Units)}
}

func (p *program) compare(c *cli.Context) error {
	file, err := argument(c, "build file", false)
	if err != nil {
		return err
	}
	s, err := readSizes(c)
	if err != nil {
		return err
	}
	if !c.IsSet("simulate") {
		s.simulate = compare.Units
	}
	if !c.IsSet("at") {
		return usage("compare needs --at STAGE.ROLE: the position whose part is exchanged")
	}
	src, err := p.read(file, s.units)
	if err != nil {
		return err
	}
	o, err := readCases(c, "at", src.Build)
	if err != nil {
		return err
	}
	r, err := compare.Cases(src.Build, o)
	if err != nil {
		return usage("--at %s: %w", strings.Join(o.At, ","), err)
	}
	g := p.newProgress()
	defer g.stop()
	so := spread.Options{Seed: s.seed, Units: s.simulate, Progress: g.at}
	if err := r.Run(c.Context, so, g.start); err != nil {
		return err
	}
	g.stop()
	if c.Bool("json") {
		err = p.json(plan.NewComparison(r))
	} else {
		p.showComparison(r)
	}
	if err == nil && !r.AnyMeetsAll() {
		err = missed("no case meets every target")
	}
	return err
}

// readCases reads what is compared where; positions is the flag that says
// where. All that is wrong is said at once.
func readCases(c *cli.Context, positions string, b *build.Build) (compare.Options, error) {
	r := caseReader{build: b}
	r.At = r.words(c, positions, "position", fittedPositions(b))
	if len(r.At) > 0 {
		t := b.Place(r.At[0]).Type
		r.Families = r.words(c, "families", "family of a "+string(t), b.Families.OfType(t))
		r.readValues(c, t)
	}
	r.readTolerances(c)
	for _, word := range r.words(c, "lots", "kind of lots", []string{string(build.OneLot), string(build.MixedLots)}) {
		r.Lots = append(r.Lots, build.Lots(word))
	}
	r.readOutput(c)
	if len(r.faults) > 0 {
		return r.Options, &fault{exitInput, errors.Join(r.faults...)}
	}
	if len(r.Families)+len(r.Tolerances)+len(r.Values)+len(r.Lots) == 0 {
		r.Families = compare.Listed(b, r.At)
	}
	return r.Options, nil
}

// caseReader reads flags and keeps what is wrong with them.
type caseReader struct {
	compare.Options
	build  *build.Build
	faults []error
}

func (r *caseReader) fault(err error) { r.faults = append(r.faults, err) }

// words reads a list of known words, with commas or spaces between.
func (r *caseReader) words(c *cli.Context, flag, what string, known []string) []string {
	var list []string
	for _, text := range c.StringSlice(flag) {
		for _, word := range strings.Fields(text) {
			if !slices.Contains(known, word) {
				r.fault(fmt.Errorf("--%s: %w", flag, unknownWord(what, word, known)))
				continue
			}
			list = append(list, word)
		}
	}
	if c.IsSet(flag) && len(list) == 0 && len(r.faults) == 0 {
		r.fault(usage("--%s needs a %s", flag, what))
	}
	return list
}

func (r *caseReader) readTolerances(c *cli.Context) {
	for _, text := range c.StringSlice("tolerances") {
		q, err := quantity.Parse(text, quantity.Percent)
		switch {
		case err != nil:
			r.fault(fmt.Errorf("--tolerances: %w", err))
		case !(q.Value > 0 && q.Value <= 1):
			r.fault(usage("--tolerances %q: expected more than 0 %%, at most 100 %%", text))
		default:
			r.Tolerances = append(r.Tolerances, q.Value)
		}
	}
}

func (r *caseReader) readValues(c *cli.Context, t part.Type) {
	for _, text := range c.StringSlice("values") {
		w, err := build.ParseWorth(text, t)
		if err != nil {
			r.fault(fmt.Errorf("--values: %w", err))
			continue
		}
		r.Values = append(r.Values, w)
	}
}

func (r *caseReader) readOutput(c *cli.Context) {
	if !c.IsSet("output") {
		return
	}
	var known []string
	for _, s := range r.build.Stages {
		for _, o := range s.Outputs {
			n := build.OutputName{Stage: s.Name, Output: o.Name}
			if n.String() == c.String("output") {
				r.Outputs = []build.OutputName{n}
				return
			}
			known = append(known, n.String())
		}
	}
	r.fault(fmt.Errorf("--output: %w", unknownWord("output", c.String("output"), known)))
}

// fittedPositions are the positions that have a part.
func fittedPositions(b *build.Build) []string {
	var list []string
	for _, s := range b.Stages {
		for _, place := range s.Places {
			if place.Fitted {
				list = append(list, s.Name+"."+place.Role)
			}
		}
	}
	return list
}

// readPlanCases reads what a plan is to compare; nil where nothing is.
func readPlanCases(c *cli.Context, b *build.Build) (*compare.Options, error) {
	if !c.IsSet("compare") {
		for _, f := range caseFlags() {
			if name := f.Names()[0]; c.IsSet(name) {
				return nil, usage("--%s needs --compare STAGE.ROLE: where the parts are exchanged", name)
			}
		}
		return nil, nil
	}
	o, err := readCases(c, "compare", b)
	if err != nil {
		return nil, err
	}
	if _, err := compare.Cases(b, o); err != nil { // before any work is done
		return nil, usage("--compare %s: %w", strings.Join(o.At, ","), err)
	}
	return &o, nil
}

// compared compares other parts with those that were picked; nil where nothing
// is to be compared.
func compared(ctx context.Context, b *build.Build, cases *compare.Options, o spread.Options, g *progress) (*compare.Result, error) {
	if cases == nil {
		return nil, nil
	}
	r, err := compare.Cases(b, *cases)
	if err != nil {
		return nil, usage("--compare %s: %w", strings.Join(cases.At, ","), err)
	}
	o.Units = min(o.Units, compare.Units)
	return r, r.Run(ctx, o, g.start)
}
