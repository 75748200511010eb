package workbook

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"batchwright/bom/order"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// trims writes the adjustments in the order of the bench.
func (b *book) trims() {
	s := setup{landscape: true, headRow: 4}
	p := b.open(trimsSheet, []float64{6, 9, 17, 18, 26, 11, 7, 9, 9, 12, 13, 12, 14, 46}, s)
	p.heading(trimsSheet, "In bench order: each adjustment stands where the test sheet comes to it. Later ones may lean on earlier ones; do not change the order.")
	head := p.heads("llllllrrrcccci", "Step", "Trimmer", "Turns", "Watch", "Hold the probe at", "Condition", "Unit", "Set to", "Within ±", "Turned up, the reading", "Usually ends at", "Within 10 % of an end", "Runs short", "If it does not reach")
	turns := slices.Clone(b.plan.Turns)
	slices.SortStableFunc(turns, func(x, y bench.Turn) int { return x.Step - y.Step })
	for _, t := range turns {
		p.trim(t)
	}
	if len(turns) == 0 {
		p.nothing("This build has nothing to adjust.")
	} else {
		p.put(10)
		p.paragraph(fmt.Sprintf("Usually ends at: the middle of the simulated units, and where 98 of 100 end, as a share of the trimmer's travel. Within 10 %% of an end: the share of units that reach there. Runs short: the share of %s simulated units whose trimmer ends before the reading is right.", whole(b.plan.Spread.Simulation.Units)), 1, 14, look{size: 9, ink: faded})
	}
	p.close(s, head)
}

func (p *page) trim(t bench.Turn) {
	report := p.plan.trimReport(t.Turn)
	sc := windowScale(t.Unit, t.Within/2, largestOf(spread.Figure(t.To), spread.Figure(t.Within)))
	rises := "falls"
	if t.Rises {
		rises = "rises"
	}
	advice := or(clean(p.plan.Advice[t.Turn]), p.plan.advice(t))
	text, figure := look{bottom: hairline, wrap: true}, look{bottom: hairline, bold: true}
	middle := text
	middle.across = "center"
	padded := text
	padded.indent = 1
	n := max(p.tallest(10, "", t.Ref, t.Turn, t.Watch, t.At, t.Condition, "", "", "", "", ends(report), nearEnds(report), short(report)), lines(advice, p.widths[13]-indented, 10, false))
	p.put(lineHeight(10, n), p.number(float64(t.Step), "0", look{bottom: hairline, bold: true, across: "left"}), p.text(t.Ref, bolder(text)), p.text(t.Turn, text), p.text(t.Watch, text), p.text(t.At, text),
		p.text(t.Condition, text), p.text(sc.symbol, rightward(text)), p.number(sc.nearest(t.To), sc.format(), figure), p.number(sc.nearest(t.Within), sc.format(), look{bottom: hairline}),
		p.text(rises, middle), p.text(ends(report), middle), p.text(nearEnds(report), middle), p.text(short(report), middle), p.text(advice, padded))
}

// trimReport is what the simulation says of a trim; its figures do not exist
// where it says nothing.
func (p Plan) trimReport(turn string) spread.TrimReport {
	for _, r := range p.Spread.Trims {
		if r.Turn == turn {
			return r
		}
	}
	none := spread.Figure(math.NaN())
	return spread.TrimReport{Turn: turn, ReachedShare: none, ShortLow: none, ShortHigh: none, NearLow: none, NearHigh: none,
		Setting: spread.TrimSetting{Nominal: none, Mean: none, Median: none, P01: none, P99: none}, Why: "not simulated"}
}

// ends is where the trimmer usually ends.
func ends(r spread.TrimReport) string {
	low, high := float64(r.Setting.P01), float64(r.Setting.P99)
	if !finite(low) || !finite(high) {
		return "–"
	}
	span := fmt.Sprintf("%.0f–%.0f\u00a0%%", low*100, high*100)
	if middle := float64(r.Setting.Median); finite(middle) {
		return fmt.Sprintf("%.0f\u00a0%%, %s", middle*100, span)
	}
	return span
}

// nearEnds says how many trimmers reach close to an end, and to which.
func nearEnds(r spread.TrimReport) string { return atWhichEnd(r.NearLow, r.NearHigh) }

// short says how many trimmers run out, and at which end.
func short(r spread.TrimReport) string { return atWhichEnd(r.ShortLow, r.ShortHigh) }

// atWhichEnd puts the shares of units at either end in words.
func atWhichEnd(atLow, atHigh spread.Figure) string {
	low, high := float64(atLow), float64(atHigh)
	if !finite(low) || !finite(high) {
		return "–"
	}
	if low+high == 0 {
		return "none seen"
	}
	side := "both ends"
	if low > 9*high {
		side = "at 0\u00a0%"
	}
	if high > 9*low {
		side = "at 100\u00a0%"
	}
	return share(atLow+atHigh) + ", " + side
}

// advice is what to do where a trim does not reach, said from what is known
// of any trimmer: which parts to look at.
func (p Plan) advice(t bench.Turn) string {
	var refs []string
	stage := stageOf(t.Turn)
	for _, q := range p.Positions {
		if q.Stage == stage && q.Ref != t.Ref {
			refs = append(refs, q.Ref)
		}
	}
	var b strings.Builder
	b.WriteString("Leave it at the end that comes nearest and write the reading down.")
	if len(refs) > 0 {
		fmt.Fprintf(&b, " Compare %s with the parts list, then try another piece of each, the ones with the widest tolerance first.", order.Runs(refs))
	} else {
		b.WriteString(" Compare the stage's parts with the parts list.")
	}
	return b.String()
}
