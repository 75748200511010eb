package plan

import (
	"fmt"
	"strings"

	"batchwright/bom/quantity"
	"batchwright/tolerance/spread"
)

// FindingSentences say what happens in some unit and nobody may miss: a
// sentence for each finding of each stage, over all conditions.
func FindingSentences(r *spread.Report) []string {
	var list []string
	conditions := countConditions(r)
	for _, group := range groups(r.Findings, func(f spread.Finding) string { return f.Stage + "." + f.Finding }) {
		what, todo, _ := strings.Cut(group[0].Text, "; ")
		text := fmt.Sprintf("%s: %s %s", group[0].Stage, what, where(group, conditions))
		if short := mostUntrimmed(group); short > 0 {
			text += fmt.Sprintf(" (not counting the %s whose trims do not reach)", Share(short))
		}
		if todo != "" {
			text += "; " + todo
		}
		list = append(list, text+".")
	}
	return list
}

// where says on what share of the units a finding happens at which conditions,
// those with the same printed share together.
func where(group []spread.Finding, conditions int) string {
	var shares []string
	at := map[string][]string{}
	for _, f := range group {
		s := Share(f.Share)
		if at[s] == nil {
			shares = append(shares, s)
		}
		at[s] = append(at[s], f.Condition)
	}
	if len(shares) == 1 && len(group) == conditions && conditions > 1 {
		return "on " + shares[0] + " of the units at every condition"
	}
	var words []string
	for _, s := range shares {
		words = append(words, "on "+s+" of the units at "+strings.Join(at[s], ", "))
	}
	return strings.Join(words, ", ")
}

// mostUntrimmed is the largest share of units that a group leaves out.
func mostUntrimmed(group []spread.Finding) spread.Figure {
	var most spread.Figure
	for _, f := range group {
		most = max(most, f.UntrimmedShare)
	}
	return most
}

// countConditions is at how many conditions a report gives outputs.
func countConditions(r *spread.Report) int {
	seen := map[string]bool{}
	for _, o := range r.Outputs {
		seen[o.Condition] = true
	}
	return len(seen)
}

// LockSentences compare each mixer's lock range, at the condition where it is
// widest, with the lowest note wanted of it.
func LockSentences(r *spread.Report) []string {
	var list []string
	for _, group := range groups(r.LockRanges, func(l spread.LockRange) string { return l.Stage }) {
		widest := group[0]
		for _, l := range group {
			if l.LockRange > widest.LockRange {
				widest = l
			}
		}
		list = append(list, lockSentence(widest))
	}
	return list
}

func lockSentence(l spread.LockRange) string {
	hertz := func(f spread.Figure) string { return quantity.Format(float64(f), quantity.Hertz, 3) }
	if !(l.LockRange >= 0) || !(l.LowestNote > 0) {
		text := fmt.Sprintf("%s: the oscillators pull into step below %s (at %s)", l.Stage, hertz(l.LockRange), l.Condition)
		if l.Why != "" {
			text += "; " + l.Why
		}
		return text + "."
	}
	if l.Decibels > 0 {
		return fmt.Sprintf("%s: the lowest note wanted, %s, is inside the lock range, %s at %s, where the oscillators pull into step and there is no note; isolation must grow by %d dB.",
			l.Stage, hertz(l.LowestNote), hertz(l.LockRange), l.Condition, l.Decibels)
	}
	return fmt.Sprintf("%s: the oscillators pull into step below %s at most (at %s); the lowest note wanted, %s, is clear of that.",
		l.Stage, hertz(l.LockRange), l.Condition, hertz(l.LowestNote))
}

// groups divides a list into runs of neighbours with the same name.
func groups[T any](list []T, name func(T) string) [][]T {
	var out [][]T
	for i, x := range list {
		if i == 0 || name(x) != name(list[i-1]) {
			out = append(out, nil)
		}
		out[len(out)-1] = append(out[len(out)-1], x)
	}
	return out
}
