package cli

import (
	"context"
	"time"

	"github.com/urfave/cli/v2"

	"batchwright/bom/order"
	"batchwright/export/plan"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
)

// pickAlternates is how many ways out `pick` looks for where a line is out of
// stock, planAlternates how many `plan` does.
const (
	pickAlternates = 2
	planAlternates = 1
)

func (p *program) pickCommand() *cli.Command {
	return &cli.Command{
		Name:      "pick",
		Usage:     "the cheapest parts that meet the targets, proved, and what each of them is there for",
		ArgsUsage: "BUILD",
		Description: `Fills every open position with the cheapest parts that meet the targets and says
which target binds, what a tighter one would cost and what to buy where a line is
out of stock. Every choice printed is confirmed by simulation.

--within PRICE asks for the steadiest instead: of a target on a change, the
smallest half width that its share of the units stays within, at what the whole
order may cost. --frontier prints every efficient trade between the two.

  batchwright pick tone-box.yaml
  batchwright pick tone-box.yaml --frontier
  batchwright pick tone-box.yaml --within 230
  batchwright pick tone-box.yaml --write chosen.yaml`,
		Flags: append(tradeFlags(),
			&cli.StringFlag{Name: "write", Usage: "write the build file with its choices filled in to `FILE`"},
			searchFlag(), unitsFlag(), seedFlag(), simulateFlag(), jsonFlag(),
		),
		Action: p.pick,
	}
}

func (p *program) pick(c *cli.Context) error {
	file, err := argument(c, "build file", false)
	if err != nil {
		return err
	}
	o, s, err := readPickOptions(c, pickAlternates)
	if err != nil {
		return err
	}
	written := c.String("write")
	if c.IsSet("write") {
		if err := unused(written); err != nil { // before any work is done
			return err
		}
	}
	src, err := p.read(file, s.units)
	if err != nil {
		return err
	}
	t, err := readTrade(c, src.Build)
	if err != nil {
		return err
	}
	if t.frontier {
		return p.trade(c, src.Build, t, o)
	}
	var result plan.Pick
	if t.within > 0 {
		result, err = p.steadiest(c.Context, src.Build, t, o)
	} else {
		result, err = p.cheapest(c.Context, src.Build, o)
	}
	if err != nil {
		return err
	}
	if written != "" {
		if err := p.writeChosen(written, src, &result); err != nil {
			return err
		}
	}
	if c.Bool("json") {
		err = p.json(result)
	} else {
		p.showPick(result)
	}
	if err != nil {
		return err
	}
	return pickVerdict(result)
}

// cheapest picks the cheapest parts.
func (p *program) cheapest(ctx context.Context, b *build.Build, o pick.Options) (plan.Pick, error) {
	g := p.newProgress()
	defer g.stop()
	g.start("picking parts")
	o.Progress = g.say
	r, fitted, err := pick.Choose(ctx, b, o)
	if err != nil {
		return plan.Pick{}, err
	}
	bought := order.New(fitted.Parts(), fitted.Units, fitted.Spares, fitted.Book, fitted.Families)
	return plan.NewPick(fitted, o.Seed, r, bought), nil
}

// writeChosen writes the build file with its openings filled, as a new file.
func (p *program) writeChosen(path string, src *source, r *plan.Pick) error {
	if len(r.Pick.Fittings) != len(src.Openings) {
		return missed("%s; nothing was written", r.Pick.Why)
	}
	text, err := src.FilledIn(src.text, r.Pick.Fittings)
	if err != nil {
		return err
	}
	if err := writeNew(path, text); err != nil {
		return err
	}
	r.Files = append(r.Files, path)
	return nil
}

// pickVerdict is nil where everything was picked and every target is met.
func pickVerdict(r plan.Pick) error {
	if err := missedTargets(r.Targets); err != nil {
		return err
	}
	if len(r.Picks) == 0 && r.Pick.Why != "" {
		return missed("%s", r.Pick.Why)
	}
	return nil
}

// defaultSearch is how long parts are searched for at most.
const defaultSearch = time.Minute

func searchFlag() cli.Flag {
	return &cli.StringFlag{Name: "search-for", Usage: "end a search after `TIME` with the best found so far", DefaultText: defaultSearch.String()}
}

// readPickOptions reads the flags that a search has.
func readPickOptions(c *cli.Context, alternates int) (pick.Options, sizes, error) {
	s, err := readSizes(c)
	if err != nil {
		return pick.Options{}, s, err
	}
	o := pick.Options{Seed: s.seed, Units: s.simulate, Alternates: alternates, SearchFor: defaultSearch}
	if c.IsSet("search-for") {
		text := c.String("search-for")
		o.SearchFor, err = time.ParseDuration(text)
		if err != nil || o.SearchFor <= 0 {
			return o, s, usage("--search-for %q: expected a time above zero, such as 30s or 5m", text)
		}
	}
	return o, s, nil
}
