package plan

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"batchwright/bom/order"
	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/bench/explain"
	"batchwright/tolerance/spread"
)

// VerdictWords puts a verdict on a unit in words.
func VerdictWords(v explain.Verdict) string {
	switch v {
	case explain.Improbable:
		return "unlikely together"
	case explain.Misses:
		return "not proved to meet a target"
	case explain.Incomplete:
		return "not read to the end"
	}
	return string(v)
}

// VerdictText is a unit's verdict, with what the word alone does not say.
func VerdictText(u ReviewUnit) string {
	switch words := VerdictWords(u.Verdict); {
	case u.Verdict == explain.Improbable:
		return "every reading is inside, but they are unlikely together: " + distanceText(u)
	case u.Accused && u.Verdict != explain.Outside:
		return words + ", but something is probably wrong"
	default:
		return words
	}
}

// distanceText says how far from good units all readings together are.
func distanceText(u ReviewUnit) string {
	return fmt.Sprintf("%.1f standard deviations from the middle of good units, of which 0.3 %% are further than %.1f", float64(u.Distance), float64(u.DistanceLimit))
}

// Odd is a reading that is outside a window, or a trim that was left where it
// does not belong, as the test sheet writes figures.
type Odd struct {
	Point, Reading, Symbol string
	Shows, Proves          string // the windows; Proves is "" without a target
	Beyond                 string // "above"
	Side                   string // "above what a good unit shows"
	Predicted              string // what the first suspect would read; "" without one
	Outside                bool   // of what a good unit shows
}

// Text is all of it in one line.
func (o Odd) Text() string {
	text := fmt.Sprintf("%s %s (%s", o.Point, strings.TrimSpace(o.Reading+" "+o.Symbol), o.Beyond)
	if o.Outside {
		return text + " " + o.Shows + ")"
	}
	return text + " " + o.Proves + ", which proves the target)"
}

// Odds are a unit's readings outside a window, in bench order, then its trims.
func Odds(s bench.Sheet, u ReviewUnit) []Odd {
	var list []Odd
	for i, p := range u.Points {
		if p.Inside && p.Accepted {
			continue
		}
		d := workbook.DigitsOf(s.Readings[i])
		o := Odd{Point: p.Point, Reading: d.Text(p.Reading), Symbol: d.Symbol(), Shows: d.Between(p.Expected), Outside: !p.Inside}
		if p.Accept != nil {
			o.Proves = d.Between(*p.Accept)
		}
		if u.Accused && len(u.Suspects) > 0 && u.Suspects[0].Class != explain.Other && finite(p.Predicted) {
			o.Predicted = d.Text(p.Predicted)
		}
		o.Beyond = side(p.Reading, p.Expected)
		o.Side = o.Beyond + " what a good unit shows"
		if p.Inside {
			o.Beyond = side(p.Reading, *p.Accept)
			o.Side = o.Beyond + " what proves the target"
		}
		list = append(list, o)
	}
	for i, t := range u.Trims {
		if !t.Inside {
			d := workbook.TurnDigits(s.Turns[i])
			list = append(list, Odd{Point: "turn " + t.Turn, Reading: d.Text(t.Reading), Symbol: d.Symbol(), Shows: d.Between(t.Within),
				Beyond: side(t.Reading, t.Within), Side: side(t.Reading, t.Within) + " where the trim belongs", Outside: true})
		}
	}
	return list
}

func finite(f spread.Figure) bool { return !math.IsNaN(float64(f)) && !math.IsInf(float64(f), 0) }

func side(v spread.Figure, l spread.Limits) string {
	if v < l.Low {
		return "below"
	}
	return "above"
}

// Likelihood writes a probability as people read it: whole percents, and
// bounds where it is next to certain.
func Likelihood(p spread.Figure) string {
	switch x := 100 * float64(p); {
	case math.IsNaN(x):
		return "–"
	case x > 99:
		return "> 99 %"
	case x < 1:
		return "< 1 %"
	default:
		return fmt.Sprintf("%.0f %%", x)
	}
}

// SuspectGroup is what may be wrong with a unit, as far as its readings can
// tell: several where they cannot.
type SuspectGroup struct {
	Probability spread.Figure // of all together
	Suspects    []explain.Suspect
}

// worth is the probability below which a suspect is not worth naming.
const worth = 0.01

// SuspectGroups are a unit's suspects, those that its readings leave alike
// together, the most probable first. Those that are hardly possible are left
// out; of a unit that is accused one stays in any case.
func SuspectGroups(u ReviewUnit) []SuspectGroup {
	var list []SuspectGroup
	last := 0
	for i, s := range u.Suspects {
		if s.Probability < worth && !(u.Accused && i == 0) {
			continue
		}
		if s.Group != last {
			list, last = append(list, SuspectGroup{}), s.Group
		}
		g := &list[len(list)-1]
		g.Probability += s.Probability
		g.Suspects = append(g.Suspects, s)
	}
	return list
}

// HealthyText is what to say of the chance that nothing is wrong with a unit;
// "" where there is next to none.
func HealthyText(u ReviewUnit) string {
	switch {
	case !(u.Healthy >= worth):
		return ""
	case u.Verdict == explain.Outside && !u.Accused:
		return "nothing is wrong with it by itself: it is at the edge of what is expected, or the whole batch is off"
	}
	return "nothing is wrong with it"
}

// Text names the suspects of a group; with several, each with its own
// probability.
func (g SuspectGroup) Text() string {
	if len(g.Suspects) == 1 {
		return SuspectName(g.Suspects[0])
	}
	const most = 6
	var names []string
	for _, s := range g.Suspects[:min(len(g.Suspects), most)] {
		names = append(names, fmt.Sprintf("%s (%s)", SuspectName(s), Likelihood(s.Probability)))
	}
	text := strings.Join(names, ", or ")
	if more := len(g.Suspects) - most; more > 0 {
		text += fmt.Sprintf(", or %d more", more)
	}
	return text + "; these readings do not tell which"
}

// SuspectName is a suspect in words: "R5 ten times too large".
func SuspectName(s explain.Suspect) string { return strings.TrimSpace(s.Ref + " " + s.Fault) }

// FurtherText says which reading would tell two suspects apart, and what it
// would be under each.
func FurtherText(f explain.Further) string {
	if f.Expect == nil {
		return fmt.Sprintf("%s, to tell %s from %s", f.Reading, f.Between[0], f.Between[1])
	}
	return fmt.Sprintf("read %s: %s if %s, %s if %s", f.Reading,
		Figure(float64(f.Expect[0]), f.Unit), f.Between[0], Figure(float64(f.Expect[1]), f.Unit), f.Between[1])
}

// FurtherTexts are those of a unit, each once.
func FurtherTexts(u ReviewUnit) []string {
	var list []string
	seen := map[string]bool{}
	for _, f := range u.Further {
		// Measuring a part tells it from any number of others.
		if seen[f.Reading] && f.Expect == nil {
			continue
		}
		seen[f.Reading] = true
		list = append(list, FurtherText(f))
	}
	return list
}

// BatchOdd is a test point at which the batch is not as predicted.
type BatchOdd struct {
	Point, Mean, Expected, Symbol string
	What                          string
}

// BatchOdds are the points at which something holds of the whole batch.
func BatchOdds(s bench.Sheet, b ReviewBatch) []BatchOdd {
	var list []BatchOdd
	for i, p := range b.Points {
		if len(p.Remarks) == 0 {
			continue
		}
		d := workbook.DigitsOf(s.Readings[i]).Finer()
		list = append(list, BatchOdd{p.Point, d.Text(p.Mean), d.Text(p.ExpectedMean), d.Symbol(), remarkText(p, s.Readings[i].Unit)})
	}
	return list
}

func remarkText(p ReviewBatchPoint, unit string) string {
	var words []string
	for _, r := range p.Remarks {
		switch r {
		case "shifted":
			side := "above"
			if p.ShiftScore < 0 {
				side = "below"
			}
			words = append(words, fmt.Sprintf("the mean is %.1f standard deviations of such means %s", math.Abs(float64(p.ShiftScore)), side))
		case "spread":
			words = append(words, fmt.Sprintf("%.1f times as far apart as expected", float64(p.SpreadRatio)))
		case "trend":
			sign := ""
			if p.Slope > 0 {
				sign = "+"
			}
			words = append(words, "drifts by "+sign+Figure(float64(p.Slope), unit)+" from unit to unit")
		}
	}
	return strings.Join(words, "; ")
}

// LotSentences say which buying lines are off their centre, and which of two
// may be.
func LotSentences(b ReviewBatch) []string {
	var list []string
	for _, l := range b.Lots {
		list = append(list, fmt.Sprintf("The lot of %s is off its centre by %s (95 %%: %s to %s), %.1f times the usual scatter of lots.",
			lotName(l.Refs, l.Parameter), signed(l.Shift, l.Unit), signed(l.Interval[0], l.Unit), signed(l.Interval[1], l.Unit), math.Abs(float64(l.Deviation))))
	}
	for _, u := range b.Unclear {
		list = append(list, fmt.Sprintf("The lot of %s or that of %s is off its centre, or both are: the readings feel only the two together. Measure some pieces of either.",
			lotName(u.Lots[0].Refs, u.Lots[0].Parameter), lotName(u.Lots[1].Refs, u.Lots[1].Parameter)))
	}
	return list
}

// lotName names a buying line and, where it is not the part's value, which
// figure of it is meant.
func lotName(refs []string, parameter string) string {
	return order.Runs(refs) + " (" + strings.ReplaceAll(parameter, "_", " ") + ")"
}

func signed(f spread.Figure, unit string) string { return fmt.Sprintf("%+.3g %s", float64(f), unit) }

// RestSentences say what the units not read yet should come to.
func RestSentences(b ReviewBatch) []string {
	r := b.Rest
	if r == nil {
		return nil
	}
	text := fmt.Sprintf("The %s not read yet: %s should meet every target (%s to %s); before the readings it was %s.",
		many(r.Units, "unit"), Share(r.Share), Share(r.Interval[0]), Share(r.Interval[1]), Share(r.Planned))
	if r.Units == 1 {
		text = fmt.Sprintf("The unit not read yet meets every target with %s (%s to %s); before the readings it was %s.",
			Share(r.Share), Share(r.Interval[0]), Share(r.Interval[1]), Share(r.Planned))
	}
	list := []string{text}
	for _, t := range r.Targets {
		if math.Abs(float64(t.Share-t.Planned)) >= 0.005 {
			list = append(list, fmt.Sprintf("%s: %s instead of %s.", t.Name, Share(t.Share), Share(t.Planned)))
		}
	}
	return list
}

// BatchSentences say over which units the batch was judged, or why it was not,
// and whether anything is odd about it.
func BatchSentences(r Review) []string {
	list := listed(r.Notes)
	b := r.Batch
	if b.Why != "" {
		return append(list, capital(b.Why)+".")
	}
	if b.Counted == 0 {
		return list
	}
	over := fmt.Sprintf("Averages are over %s", many(b.Counted, "unit"))
	if left := len(r.Units) - b.Counted; left > 0 {
		over += fmt.Sprintf("; %d with a probable fault or without readings left out", left)
	}
	list = append(list, over+".")
	odd := slices.ContainsFunc(b.Points, func(p ReviewBatchPoint) bool { return len(p.Remarks) > 0 })
	if !odd && len(b.Lots)+len(b.Unclear) == 0 {
		list = append(list, "Nothing is odd about the batch: its means, spreads and lots are as planned.")
	}
	return list
}
