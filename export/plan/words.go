package plan

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"batchwright/bom/order"
	"batchwright/bom/quantity"
	"batchwright/export/workbook"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// conditions puts the surroundings in words: the reference in full, of the
// others what differs from it.
func conditions(b *build.Build) []workbook.Condition {
	var list []workbook.Condition
	for i, c := range b.Conditions {
		var words []string
		for j, v := range b.Variables {
			if i == 0 || c.Values[j] != b.Conditions[0].Values[j] {
				words = append(words, variable(v, c.Values[j]))
			}
		}
		text := strings.Join(words, ", ")
		if text == "" {
			text = "as " + b.Conditions[0].Name
		}
		list = append(list, workbook.Condition{Name: c.Name, Text: text})
	}
	return list
}

// variable puts one figure of the surroundings in words.
func variable(v build.Variable, x float64) string {
	text := quantity.Format(x, v.Unit, 0)
	switch v.Name {
	case build.Temperature:
		return text
	case build.Humidity:
		return text + " relative humidity"
	case build.Age:
		return text + " old"
	case build.Warmup:
		switch x {
		case 0:
			return "just switched on"
		case 1:
			return "warmed up"
		}
		return quantity.Format(x, quantity.Percent, 2) + " warmed up"
	}
	return strings.ReplaceAll(v.Name, "_", " ") + " " + text
}

// findings are sentences for the first page, beside the verdicts and the yield,
// which it has already.
func findings(w Work) []string {
	var list []string
	if w.Pick.Why != "" && len(w.Pick.Choices) == 0 { // otherwise the proof has it
		list = append(list, w.Pick.Why)
	}
	if n := len(w.Order.Unoffered); n > 0 {
		var refs []string
		for _, l := range w.Order.Unoffered {
			refs = append(refs, order.Runs(l.Refs))
		}
		list = append(list, "Not offered by the price book, and in no total: "+strings.Join(refs, ", ")+".")
	}
	list = append(list, FindingSentences(w.Report)...)
	return append(list, LockSentences(w.Report)...) // the workbook adds the report's notes
}

// YieldSentence says how many units come out good.
func YieldSentence(y spread.YieldReport) string {
	b := y.Batch
	return fmt.Sprintf(
		"%s of the units meet every target (%s to %s at %.0f %% confidence). In half of all batches at least %.0f of %d units do, in 95 %% of them at least %.0f; in %s of them every unit does.",
		Share(y.UnitShare), Share(y.Interval[0]), Share(y.Interval[1]), 100*spread.Confidence,
		float64(b.MedianGood), b.Units, float64(b.P05Good), Share(b.AllGoodShare))
}

// Share writes a fraction as a percentage that reads 100 % or 0 % only where it
// is exactly that.
func Share(f spread.Figure) string {
	x := 100 * float64(f)
	switch {
	case math.IsNaN(x):
		return "–"
	case x == 0 || x == 100:
		return fmt.Sprintf("%.0f %%", x)
	case x > 99.95:
		return fmt.Sprintf("%.2f %%", min(x, 99.99))
	case x < 0.05:
		return fmt.Sprintf("%.2f %%", max(x, 0.01))
	}
	return fmt.Sprintf("%.1f %%", x)
}

// advice says, for each trim, what to look at when it does not reach.
func advice(w Work) map[string]string {
	out := map[string]string{}
	for _, t := range w.Sheet.Turns {
		name, _, _ := strings.Cut(t.Turn, ".")
		s := w.Build.Stage(name)
		var refs []string
		for _, p := range s.Places {
			refs = append(refs, p.Refs()...)
		}
		refs = slices.DeleteFunc(refs, func(ref string) bool { return ref == t.Ref })
		if len(refs) == 0 {
			continue
		}
		out[t.Turn] = fmt.Sprintf("%s. Check %s against the parts list first: a wrong value or a bad joint is likelier. If they are right, leave it at the end that comes nearest and write the reading down.",
			rarity(w.Report, t.Turn), order.Runs(refs))
	}
	return out
}

// rarity says how often sound parts leave a trim short.
func rarity(r *spread.Report, turn string) string {
	for _, t := range r.Trims {
		if short := 1 - t.ReachedShare; t.Turn == turn && short > 0 {
			return fmt.Sprintf("With sound parts it falls short on %s of units", Share(short))
		}
	}
	return "With sound parts it reached on every simulated unit"
}
