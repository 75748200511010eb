package plan

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/order"
	"batchwright/export/workbook"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
)

// Trade is what `pick --frontier --json` prints.
type Trade struct {
	Build     string `json:"build"`
	Seed      uint64 `json:"seed"`
	Units     int    `json:"units"`
	Simulated int    `json:"simulated"` // units asked for, of each point
	pick.Trade
	Currency      string `json:"currency"`
	Book          string `json:"price_book"`
	Demonstration bool   `json:"demonstration"`

	Files []string `json:"files"` // written
}

// NewTrade joins a trade and what it is of.
func NewTrade(b *build.Build, seed uint64, simulated int, t *pick.Trade) Trade {
	return Trade{
		Build: b.Title, Seed: seed, Units: b.Units, Simulated: simulated, Trade: *t,
		Currency: b.Book.Currency, Book: b.Book.Name, Demonstration: b.Book.Demonstration, Files: []string{},
	}
}

// PointTexts are what each point of a trade takes: the first in full, the
// others where they differ from the one before.
func PointTexts(points []pick.TradePoint) []string {
	var list []string
	for i, p := range points {
		var words []string
		for k, c := range p.Choices {
			if i == 0 || ChoiceText(c) != ChoiceText(points[i-1].Choices[k]) {
				words = append(words, order.Runs(c.Refs)+" "+ChoiceText(c))
			}
		}
		list = append(list, strings.Join(words, "; "))
	}
	return list
}

// TradeSentence says what the columns of a trade mean and how sure it is that
// nothing is left out.
func TradeSentence(t Trade) string {
	what := "in the worst case"
	if t.Share > 0 {
		what = fmt.Sprintf("on %.4g %% of the units", 100*t.Share)
	}
	text := fmt.Sprintf("Each line is the cheapest choice whose change stays closer to none %s than on the line above, the other targets met; the money is the whole order's, spares included. %q asks: %s.", what, t.Target, t.Asked)
	switch {
	case len(t.Points) == 0:
		text = capital(t.Why) + "."
	case t.Complete:
		text += fmt.Sprintf(" Proved to first order: nothing efficient is left out (%d combinations judged in %d searches).", t.Examined, t.Searches)
	default:
		text += " " + capital(t.Why) + "."
	}
	if t.Beaten > 0 {
		text += fmt.Sprintf(" Left out, as steadier to first order but not in simulation: %s.", many(t.Beaten, "dearer choice"))
	}
	return text
}

// TradeCaution says whose prices these are.
func TradeCaution(t Trade) string {
	return PriceNote(order.Order{Demonstration: t.Demonstration})
}

// traded lays a trade out for the workbook; nil where there is none.
func traded(w Work) *workbook.Trade {
	t := w.Trade
	if t == nil {
		return nil
	}
	out := &workbook.Trade{Target: t.Target, Unit: t.Unit, Asked: t.Asked, Limit: TradeLimit(w.Build, t.Target)}
	with := PointTexts(t.Points)
	for i, x := range t.Points {
		out.Points = append(out.Points, workbook.TradePoint{
			Order: x.Total.Float(), Unit: x.PerUnit.Float(), Predicted: x.Predicted, Simulated: x.Simulated,
			Complying: x.Complying, Met: x.Met, Parts: with[i],
		})
	}
	out.Notes = []string{TradeSentence(NewTrade(w.Build, w.Seed, w.Simulate, t))}
	return out
}

// TradeLimit is the largest change to either side that a target allows; NaN
// for a target that the build does not have.
func TradeLimit(b *build.Build, target string) float64 {
	for _, t := range b.Targets {
		if t.Name == target {
			return math.Min(-t.Low, t.High)
		}
	}
	return math.NaN()
}
