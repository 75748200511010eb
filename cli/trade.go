package cli

import (
	"bytes"
	"context"
	"fmt"
	"math"
	"strings"

	"github.com/urfave/cli/v2"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/export/chart"
	"batchwright/export/plan"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
)

// tradeSimulate is how many units each point of a trade is simulated with
// where nothing is said: there are many of them.
const tradeSimulate = 6_000

// tradeFlags are those by which money is traded for steadiness.
func tradeFlags() []cli.Flag {
	return []cli.Flag{
		&cli.StringFlag{Name: "within", Usage: "not the cheapest but the steadiest for which the whole order costs at most `PRICE`"},
		&cli.BoolFlag{Name: "frontier", Usage: "every efficient trade between the order's price and steadiness", DisableDefaultText: true},
		&cli.StringFlag{Name: "chart", Usage: "with --frontier: draw the trade into a new SVG `FILE`"},
		targetFlag(),
	}
}

func targetFlag() cli.Flag {
	return &cli.StringFlag{Name: "target", Usage: "whose steadiness is meant: the `NAME` of a target on a change; the first if left out"}
}

// tradeChoice is what --within, --frontier and --target ask for.
type tradeChoice struct {
	within   offer.Money // 0: not asked
	frontier bool
	target   string
}

// readTrade reads the flags. Without any of them it asks for nothing.
func readTrade(c *cli.Context, b *build.Build) (tradeChoice, error) {
	t := tradeChoice{frontier: c.Bool("frontier"), target: c.String("target")}
	if c.IsSet("within") {
		money, err := offer.ParseMoney(c.String("within"))
		if err != nil || money <= 0 {
			return t, usage("--within %q: expected what the whole order may cost, such as 230 or 229.50", c.String("within"))
		}
		t.within = money
	}
	switch {
	case t.frontier && t.within > 0:
		return t, usage("--within beside --frontier: expected one of the two")
	case !t.frontier && c.IsSet("chart"):
		return t, usage("--chart without --frontier: only the trade is drawn")
	case c.IsSet("chart") && unused(c.String("chart")) != nil:
		return t, unused(c.String("chart")) // before any work is done
	case t.frontier && c.IsSet("write"):
		return t, usage("--write beside --frontier: expected a single choice to write, as --within finds")
	case !t.frontier && t.within == 0 && c.IsSet("target"):
		return t, usage("--target without --frontier or --within: the cheapest parts meet every target")
	case !t.frontier && t.within == 0:
		return t, nil
	}
	return t, t.findTarget(b)
}

// findTarget checks whose steadiness is meant.
func (t *tradeChoice) findTarget(b *build.Build) error {
	names := pick.Changes(b)
	if len(names) == 0 {
		return usage("%s names no target on a change: expected one with change_from, whose steadiness is then meant", b.File)
	}
	if t.target == "" {
		t.target = names[0]
	}
	for _, name := range names {
		if name == t.target {
			return nil
		}
	}
	return unknownWord("target on a change", t.target, names)
}

// trade prints every efficient trade.
func (p *program) trade(c *cli.Context, b *build.Build, t tradeChoice, o pick.Options) error {
	if !c.IsSet("simulate") {
		o.Units = tradeSimulate
	}
	found, err := p.efficient(c, b, t, o)
	if err != nil {
		return err
	}
	result := plan.NewTrade(b, o.Seed, o.Units, found)
	if path := c.String("chart"); path != "" {
		if err := drawTrade(path, b, result); err != nil {
			return err
		}
		result.Files = append(result.Files, path)
	}
	if c.Bool("json") {
		return p.json(result)
	}
	p.showTrade(result)
	return nil
}

// drawTrade writes a drawing of the trade as a new file.
func drawTrade(path string, b *build.Build, t plan.Trade) error {
	f := chart.Frame{Title: b.Title, Currency: t.Currency, Limit: plan.TradeLimit(b, t.Target)}
	if note := plan.TradeCaution(t); note != "" {
		f.Notes = append(f.Notes, note)
	}
	var drawing bytes.Buffer
	if err := chart.Trade(&drawing, t.Trade, f); err != nil {
		return missed("%v", err)
	}
	return writeNew(path, drawing.Bytes())
}

// efficient finds every efficient trade.
func (p *program) efficient(c *cli.Context, b *build.Build, t tradeChoice, o pick.Options) (*pick.Trade, error) {
	g := p.newProgress()
	defer g.stop()
	g.start("trading")
	o.Progress = g.say
	return pick.Efficient(c.Context, b, t.target, math.MaxInt64, o)
}

// steadiest picks the steadiest parts at a price.
func (p *program) steadiest(ctx context.Context, b *build.Build, t tradeChoice, o pick.Options) (plan.Pick, error) {
	g := p.newProgress()
	defer g.stop()
	g.start("picking parts")
	o.Progress = g.say
	r, fitted, err := pick.Steadiest(ctx, b, t.target, t.within, o)
	if err != nil {
		return plan.Pick{}, err
	}
	bought := order.New(fitted.Parts(), fitted.Units, fitted.Spares, fitted.Book, fitted.Families)
	return plan.NewPick(fitted, o.Seed, r, bought), nil
}

// showTrade prints a trade.
func (p *program) showTrade(t plan.Trade) {
	currency := t.Currency
	if currency != "" {
		currency = ", " + currency
	}
	p.line("%s: %s, seed %d, each point simulated with %d units", t.Build, count(t.Units, "unit"), t.Seed, t.Simulated)
	var rows [][]string
	with := plan.PointTexts(t.Points)
	for i, point := range t.Points {
		met := "missed"
		if point.Met {
			met = "met"
		}
		rows = append(rows, []string{
			point.Total.String(), plan.Figure(float64(point.Predicted), t.Unit), plan.Figure(float64(point.Simulated), t.Unit),
			plan.Share(point.Complying), met, with[i],
		})
	}
	p.section(fmt.Sprintf("%s against money", t.Target), []string{"order" + currency, "1st order", "simulated", "comply", "target", "with (below: instead)"}, rows)
	p.paragraph("read so", plan.TradeSentence(t))
	p.paragraph("mind", plan.TradeCaution(t))
	if len(t.Files) > 0 {
		p.line("\nwrote %s", strings.Join(t.Files, ", "))
	}
}
