package cli

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"unicode"

	"github.com/urfave/cli/v2"

	"batchwright/bom/order"
	"batchwright/export/plan"
	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/compare"
	"batchwright/tolerance/pick"
	"batchwright/tolerance/spread"
)

func (p *program) planCommand() *cli.Command {
	return &cli.Command{
		Name:      "plan",
		Usage:     "the whole job: pick the parts, prove them, order them, write the workbook",
		ArgsUsage: "[BUILD]",
		Description: `Fills every open position with the cheapest parts that meet the targets,
simulates whole batches of the result, orders the parts and writes a workbook
named after the build's title. Without BUILD it plans the embedded example; "-"
reads the build from standard input.

--cards adds a sheet "Cards": one page for every unit, with all that is read and
turned on it and room to write, to be printed and laid beside the unit.

--compare STAGE.ROLE adds a sheet "Compare": other parts in the place of those
that were picked, as compare has it, with the same --families, --tolerances,
--values and --lots; with none of them, the families that an open position lists.

--frontier adds a sheet "Trade": every efficient trade between the order's price
and the steadiness of the first change that a target limits, or of --target NAME.

  batchwright plan
  batchwright plan tone-box.yaml --units 12 --out plans
  batchwright plan tone-box.yaml --cards --out plans
  batchwright plan tone-box.yaml --compare fixed.upper --out plans`,
		Flags: append([]cli.Flag{
			&cli.StringFlag{Name: "out", Usage: "write the workbook into folder `DIR`", Value: "."},
			&cli.BoolFlag{Name: "cards", Usage: "add a sheet with a page for every unit, to be filled in by hand"},
			&cli.StringSliceFlag{Name: "compare", Usage: "add a sheet with other parts at `STAGE.ROLE`, several with commas"},
			&cli.BoolFlag{Name: "frontier", Usage: "add a sheet with every efficient trade between price and steadiness", DisableDefaultText: true},
			targetFlag(), searchFlag(), unitsFlag(), seedFlag(), simulateFlag(), jsonFlag(),
		}, caseFlags()...),
		Action: p.plan,
	}
}

func (p *program) plan(c *cli.Context) error {
	file, err := argument(c, "build file", true)
	if err != nil {
		return err
	}
	o, s, err := readPickOptions(c, planAlternates)
	if err != nil {
		return err
	}
	if err := usableFolder(c.String("out")); err != nil {
		return err
	}
	src, err := p.read(file, s.units)
	if err != nil {
		return err
	}
	if file == "" {
		fmt.Fprintf(p.stderr, "batchwright: no build file named; planning the embedded example, %s\n", src.Title)
	}
	cases, err := readPlanCases(c, src.Build)
	if err != nil {
		return err
	}
	t, err := readTrade(c, src.Build)
	if err != nil {
		return err
	}
	work, err := p.work(c.Context, src, o, cases)
	if err != nil {
		return err
	}
	if t.frontier {
		if work.Trade, err = p.efficient(c, src.Build, t, o); err != nil {
			return err
		}
	}
	work.Cards = c.Bool("cards")
	path, err := p.save(c.String("out"), file, src.Title, plan.Compose(*work))
	if err != nil {
		return err
	}
	if c.Bool("json") {
		err = p.json(plan.NewResult(*work, path))
	} else {
		p.showPlan(*work, path)
	}
	if err != nil {
		return err
	}
	return verdict(work)
}

// work does the whole job but for the writing.
func (p *program) work(ctx context.Context, src *source, o pick.Options, cases *compare.Options) (*plan.Work, error) {
	g := p.newProgress()
	defer g.stop()
	w := &plan.Work{File: src.File, Text: src.text, Seed: o.Seed, Simulate: o.Units, Version: Version}
	g.start("picking parts")
	o.Progress = g.say
	var err error
	w.Pick, w.Build, err = pick.Choose(ctx, src.Build, o)
	if err != nil {
		return nil, err
	}
	if w.Model, err = w.Build.Compile(); err != nil {
		return nil, err
	}
	g.start("simulating")
	simulated := spread.Options{Seed: o.Seed, Units: o.Units, Progress: g.at}
	if w.Report, err = spread.Analyse(ctx, w.Model, simulated); err != nil {
		return nil, err
	}
	g.start("drifting")
	if w.Drifts, err = plan.Drifts(ctx, w.Build, simulated); err != nil {
		return nil, err
	}
	if w.Compared, err = compared(ctx, w.Build, cases, simulated, g); err != nil {
		return nil, err
	}
	w.Sheet = bench.NewSheet(w.Model, w.Report)
	w.Order = order.New(w.Build.Parts(), w.Build.Units, w.Build.Spares, w.Build.Book, w.Build.Families)
	return w, ctx.Err()
}

// verdict is nil where everything was picked and every target is met.
func verdict(w *plan.Work) error {
	if err := missedTargets(w.Report.Targets); err != nil {
		return err
	}
	if len(w.Pick.Choices) == 0 && w.Pick.Why != "" {
		return missed("%s", w.Pick.Why)
	}
	return nil
}

// missedTargets is nil where every target is met; otherwise it names those
// that are not.
func missedTargets(targets []spread.TargetReport) error {
	var names []string
	for _, t := range targets {
		if !t.Met {
			names = append(names, t.Name)
		}
	}
	if len(names) == 0 {
		return nil
	}
	return missed("%d of %s missed: %s", len(names), count(len(targets), "target"), strings.Join(names, ", "))
}

// usableFolder refuses an output folder that cannot become one, before any
// work is done.
func usableFolder(folder string) error {
	if folder == "" {
		return usage("--out needs a folder")
	}
	info, err := os.Stat(folder)
	if err == nil && !info.IsDir() {
		return &fault{exitFile, fmt.Errorf("cannot write into %s: it is a file, expected a folder", folder)}
	}
	return nil // one that is not there is made when there is something to put in it
}

// save writes the workbook, whole or not at all, and returns its path.
func (p *program) save(folder, buildFile, title string, w workbook.Plan) (string, error) {
	if err := os.MkdirAll(folder, 0o755); err != nil {
		return "", unwritable(folder, err)
	}
	path := filepath.Join(folder, slug(title)+".xlsx")
	if sameFile(path, buildFile) {
		return "", usage("the workbook %s would replace the build file: give --out another folder", path)
	}
	if err := p.keepPrevious(path, w); err != nil {
		return "", err
	}
	if err := workbook.Save(path, w); err != nil {
		return "", &fault{exitFile, err}
	}
	return path, nil
}

// keepPrevious moves a workbook that stands in the way, and is not the very one
// about to be written, to a name of its own: readings may have been typed into
// it.
func (p *program) keepPrevious(path string, w workbook.Plan) error {
	old, err := os.ReadFile(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return &fault{exitFile, err}
	}
	var fresh bytes.Buffer
	if err := workbook.Write(&fresh, w); err != nil {
		return &fault{exitFile, err}
	}
	if bytes.Equal(old, fresh.Bytes()) {
		return nil
	}
	stem := strings.TrimSuffix(path, ".xlsx")
	for i := 1; ; i++ {
		aside := fmt.Sprintf("%s.previous-%d.xlsx", stem, i)
		if _, err := os.Lstat(aside); !errors.Is(err, fs.ErrNotExist) {
			continue
		}
		if err := os.Rename(path, aside); err != nil {
			return &fault{exitFile, err}
		}
		fmt.Fprintf(p.stderr, "batchwright: %s was there already; it is now %s\n", path, aside)
		return nil
	}
}

func sameFile(a, b string) bool {
	one, err := os.Stat(a)
	if err != nil {
		return false
	}
	other, err := os.Stat(b)
	return err == nil && os.SameFile(one, other)
}

// slug is a title as a file name: letters and digits in lower case, anything
// else a hyphen.
func slug(title string) string {
	const longest = 60 // letters; some file systems allow 255 bytes
	var out []rune
	for _, r := range strings.ToLower(title) {
		if len(out) == longest {
			break
		}
		switch {
		case unicode.IsLetter(r) || unicode.IsDigit(r):
			out = append(out, r)
		case len(out) > 0 && out[len(out)-1] != '-':
			out = append(out, '-')
		}
	}
	name := strings.Trim(string(out), "-")
	if name == "" {
		return "plan"
	}
	return name
}
