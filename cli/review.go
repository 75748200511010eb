package cli

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"strconv"
	"strings"

	"github.com/urfave/cli/v2"

	"batchwright/export/plan"
	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/bench/explain"
	"batchwright/tolerance/pick"
)

func (p *program) reviewCommand() *cli.Command {
	return &cli.Command{
		Name:      "review",
		Usage:     "a filled test sheet read back: which units are as they should be, and what is probably wrong",
		ArgsUsage: "BUILD [WORKBOOK]",
		Description: `Reads the readings off a filled workbook, wherever its rows and columns were
moved to, and judges every unit by them; verdicts in the file are not looked at.
Of every unit that is not as it should be it says what is probably wrong, which
part or which reading, how probable that is, and what to read next; of the batch
which points are off, which lots, and what the units not read yet should yield.

A figure typed as text or with its unit is taken and named; what is no figure,
what fits only in another unit and every cell that says something else than the
plan is named by its cell.

The plan is made again to compare, so give the --units, --seed, --simulate and
--search-for that it was made with. A workbook of another plan is refused, with
what it was made with; --any-plan reads it all the same.

Without WORKBOOK, --readings takes the readings as a table, each with its unit:
a first line point,unit,reading, then lines such as mixer.collector,7,-0.12 V.

--workbook writes all of it into a new workbook: the verdicts, the readings, the
batch, and for every test point what good units were expected to read with the
readings on it. A file that is there is never replaced.

Exit code 1 says that a unit that was read is not as it should be: a reading
outside, all of them unlikely together, a fault more probable than none, a target
not proved, or not read to the end.

  batchwright review tone-box.yaml filled.xlsx
  batchwright review tone-box.yaml filled.xlsx --json
  batchwright review tone-box.yaml filled.xlsx --workbook reviewed.xlsx
  batchwright review tone-box.yaml --readings readings.csv`,
		Flags: []cli.Flag{
			&cli.StringFlag{Name: "readings", Usage: "take the readings from the table in `FILE.csv`"},
			&cli.StringFlag{Name: "workbook", Usage: "write what was found, with charts, into the new workbook `OUT.xlsx`"},
			&cli.BoolFlag{Name: "any-plan", Usage: "read a workbook of another plan, too", DisableDefaultText: true},
			searchFlag(), unitsFlag(), seedFlag(), simulateFlag(), jsonFlag(),
		},
		Action: p.review,
	}
}

// reviewed is a batch with what came back from the bench.
type reviewed struct {
	work   *plan.Work
	filled bench.Filled
	turned bench.Filled // where trims were left
	review plan.Review

	explained *explain.Review // nil: no reading was read
	file      string          // the workbook, or the table of readings
}

func (p *program) review(c *cli.Context) error {
	buildFile, sheetFile, err := reviewArguments(c)
	if err != nil {
		return err
	}
	if c.IsSet("workbook") {
		if err := newWorkbook(c.String("workbook")); err != nil {
			return err // before any work is done
		}
	}
	o, s, err := readPickOptions(c, planAlternates)
	if err != nil {
		return err
	}
	src, err := p.read(buildFile, s.units)
	if err != nil {
		return err
	}
	var r *reviewed
	if sheetFile != "" {
		r, err = p.reviewWorkbook(c.Context, src, o, sheetFile, c.Bool("any-plan"))
	} else {
		r, err = p.reviewReadings(c.Context, src, o, c.String("readings"))
	}
	if err != nil {
		return err
	}
	return p.handBack(c, r)
}

// handBack is where a review goes out.
func (p *program) handBack(c *cli.Context, r *reviewed) error {
	if len(r.review.Units) == 0 {
		return r.nothingRead()
	}
	if path := c.String("workbook"); path != "" {
		if err := r.write(path); err != nil {
			return err
		}
		r.review.Files = append(r.review.Files, path)
	}
	if c.Bool("json") {
		if err := p.json(r.review); err != nil {
			return err
		}
	} else {
		p.showReview(r)
	}
	return r.verdict()
}

// newWorkbook refuses the name of a workbook to be written that is none, or of
// one that is there.
func newWorkbook(path string) error {
	if err := unused(path); err != nil {
		return err
	}
	if !strings.EqualFold(filepath.Ext(path), ".xlsx") {
		return usage("--workbook %s: expected the name of a new file that ends in .xlsx", path)
	}
	return nil
}

// write puts the review into a new workbook.
func (r *reviewed) write(path string) error {
	var good map[string][]float64
	if r.explained != nil {
		good = r.explained.Good
	}
	var whole bytes.Buffer
	if err := workbook.WriteReviewed(&whole, plan.ComposeReviewed(*r.work, r.review, r.filled, r.turned, good, r.file)); err != nil {
		return &fault{exitFile, err}
	}
	return writeNew(path, whole.Bytes())
}

// reviewArguments are the build file and the workbook, "" where the readings
// come as a table.
func reviewArguments(c *cli.Context) (build, sheet string, err error) {
	build, sheet = c.Args().Get(0), c.Args().Get(1)
	switch n := c.NArg(); {
	case n > 2:
		err = usage("review takes a build file and a workbook, got %d: the third is %q", n, c.Args().Get(2))
	case build == "":
		err = usage("review needs a build file: batchwright review BUILD WORKBOOK")
	case sheet == "" && c.String("readings") == "":
		err = usage("review needs a workbook, or --readings FILE.csv: batchwright review BUILD WORKBOOK")
	case sheet != "" && c.IsSet("readings"):
		err = usage("--readings beside the workbook %s: expected one of the two", sheet)
	case c.Bool("any-plan") && sheet == "":
		err = usage("--any-plan without a workbook: a table of readings is of no plan")
	}
	return build, sheet, err
}

// reviewWorkbook reads a filled workbook. That it is this plan's is settled
// before any work is done.
func (p *program) reviewWorkbook(ctx context.Context, src *source, o pick.Options, file string, anyPlan bool) (*reviewed, error) {
	text, err := openAtMost(file, workbook.LargestFile)
	if err != nil {
		return nil, err
	}
	returned, err := workbook.Open(text)
	if err != nil {
		return nil, &fault{exitInput, fmt.Errorf("%s: %w", file, err)}
	}
	defer returned.Close()
	asked := plan.Work{Text: src.text, Seed: o.Seed, Simulate: o.Units, Version: Version, Build: src.Build}
	if why := returned.Origin.Foreign(asked.Digest()); why != "" && !anyPlan {
		return nil, foreign(file, why, returned.Origin, asked)
	} else if why != "" {
		fmt.Fprintf(p.stderr, "batchwright: %s: %s; it is read all the same\n", harmless(file), harmless(why))
	}
	work, err := p.work(ctx, src, o, nil)
	if err != nil {
		return nil, err
	}
	back, err := returned.Read(plan.Compose(*work))
	if err != nil {
		return nil, &fault{exitInput, fmt.Errorf("%s: %w", file, err)}
	}
	r, err := p.explained(ctx, work, back.Filled, back.Turned, file)
	if err != nil {
		return nil, err
	}
	r.review.WithWorkbook(returned.Origin, back)
	return r, nil
}

// foreign refuses a workbook of another plan, and says what it was made with.
func foreign(file, why string, o workbook.Origin, asked plan.Work) error {
	lines := []string{file + ": " + why}
	if o.Seed+o.Units+o.Simulate+o.Version != "" {
		made := fmt.Sprintf("it was made by version %s with --seed %s --units %s --simulate %s", o.Version, o.Seed, o.Units, o.Simulate)
		if o.File != "" {
			made += " from " + o.File
		}
		lines = append(lines, made)
		lines = append(lines, difference(o, asked))
	}
	lines = append(lines, "--any-plan reads it all the same")
	return &fault{exitInput, errors.New(strings.Join(lines, "\n"))}
}

// difference says in what a workbook's run and this one differ.
func difference(o workbook.Origin, asked plan.Work) string {
	var list []string
	for _, x := range []struct{ what, theirs, ours string }{
		{"--seed", o.Seed, strconv.FormatUint(asked.Seed, 10)}, {"--units", o.Units, strconv.Itoa(asked.Build.Units)},
		{"--simulate", o.Simulate, strconv.Itoa(asked.Simulate)}, {"version", o.Version, asked.Version},
	} {
		if x.theirs != x.ours {
			list = append(list, x.what+" "+x.ours)
		}
	}
	if len(list) == 0 {
		return "this run has the same, so the build file is another one or was changed since"
	}
	return "this run has " + strings.Join(list, ", ")
}

// reviewReadings reads a table of readings. Its units and points are checked
// when the plan is made: it is the plan that says in which unit a point is read.
func (p *program) reviewReadings(ctx context.Context, src *source, o pick.Options, file string) (*reviewed, error) {
	text, err := open(file)
	if err != nil {
		return nil, err
	}
	work, err := p.work(ctx, src, o, nil)
	if err != nil {
		return nil, err
	}
	filled, complaints := bench.ReadReadings(file, text, work.Sheet.Readings, work.Build.Units)
	if len(complaints) > 0 {
		return nil, complaints
	}
	return p.explained(ctx, work, filled, bench.Filled{}, file)
}

// explained judges what was read and looks for what explains it.
func (p *program) explained(ctx context.Context, work *plan.Work, filled, turned bench.Filled, file string) (*reviewed, error) {
	r := &reviewed{work: work, filled: filled, turned: turned, file: file}
	if len(filled.Units) > 0 {
		g := p.newProgress()
		defer g.stop()
		g.start("explaining")
		var err error
		r.explained, err = explain.Explain(ctx, work.Model, workbook.ShownSheet(work.Sheet), filled, explain.Options{Seed: work.Seed, Progress: g.at})
		if err != nil {
			return nil, err
		}
	}
	r.review = plan.NewReview(*work, filled, turned, r.explained)
	return r, nil
}

// verdict is nil where every unit that was read is as it should be.
func (r *reviewed) verdict() error {
	var wrong []int
	for _, u := range r.review.Units {
		if !u.Good() {
			wrong = append(wrong, u.Unit)
		}
	}
	if len(wrong) == 0 {
		return nil
	}
	return missed("%d of %s read not as they should be: %s", len(wrong), count(len(r.review.Units), "unit"), unitRuns(wrong))
}

// nothingRead says so, with what was typed and could not be read.
func (r *reviewed) nothingRead() error {
	lines := []string{r.file + ": no reading was read"}
	if r.review.Workbook != nil {
		for _, f := range r.review.Workbook.Findings {
			if f.Kind == workbook.Unread && len(lines) <= mostFindings {
				lines = append(lines, fmt.Sprintf("%s: %s: %s", cellName(f.Sheet, f.Cell), f.What, strconv.Quote(f.Found)))
			}
		}
	}
	return &fault{exitInput, errors.New(strings.Join(lines, "\n"))}
}
