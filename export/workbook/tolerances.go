package workbook

import (
	"fmt"
	"math"
	"strings"

	"batchwright/tolerance/spread"
)

// tolerances writes every output at every condition.
func (b *book) tolerances() {
	s := setup{landscape: true, headRow: 5}
	p := b.open(tolerancesSheet, []float64{24, 17, 6, 10, 10, 10, 10, 10, 10, 10, 9, 46}, s)
	p.heading(tolerancesSheet, fmt.Sprintf("After every adjustment. Simulated: %s units in %s batches, seed %d.", whole(b.plan.Spread.Simulation.Units), whole(b.plan.Spread.Simulation.Batches), b.plan.Seed))
	p.overHeads()
	head := p.heads("lllrrrrrrrri", "Output", "Condition", "Unit", "Nominal", "least", "most", "Standard uncertainty", "0.5 %", "half", "99.5 %", "Reached", "Most of the scatter comes from")
	if len(b.plan.Spread.Outputs) == 0 {
		p.nothing("No output was analysed.")
	}
	var notes []string
	for i, o := range b.plan.Spread.Outputs {
		first := i == 0 || o.Output != b.plan.Spread.Outputs[i-1].Output
		if n := p.outputRow(o, first); n != "" {
			notes = append(notes, n)
		}
	}
	p.put(10)
	for _, n := range notes {
		p.paragraph(n, 1, 12, look{size: 9, ink: faded})
	}
	p.paragraph("Worst corner: every part at whichever end of its tolerance is worst, trims set again; found by search, so nothing worse was found. Standard uncertainty: first-order propagation (JCGM 100) with lot correlation, through the trims. "+
		"Simulated: the figure that 0.5 %, half and 99.5 % of the units stay below. Reached: units whose trims reached; the others are not in these figures, and count as missed in every target.", 1, 12, look{size: 9, ink: faded})
	p.close(s, head)
}

// overHeads names the groups of columns.
func (p *page) overHeads() {
	over := look{size: 9, bold: true, ink: copper, across: "center", bottom: rule}
	cells := row(12)
	cells[4], cells[5] = p.text("Worst corner", over), p.text("", over)
	cells[7], cells[8], cells[9] = p.text("Simulated units stay below", over), p.text("", over), p.text("", over)
	p.put(16, cells...)
	p.merge(5, 6)
	p.merge(8, 10)
}

// outputRow writes one output at one condition; first says that its name has
// not stood in the row before. It returns the reasons for figures that are
// missing.
func (p *page) outputRow(o spread.OutputReport, first bool) string {
	worst := spread.Limits{Low: spread.Figure(math.NaN()), High: spread.Figure(math.NaN())}
	var why []string
	if o.WorstCase != nil {
		worst = o.WorstCase.Limits
		why = append(why, clean(o.WorstCase.Why))
	}
	why = append(why, clean(o.RootSumSquare.Why), clean(o.Simulated.Why))
	q := func(at string) spread.Figure {
		if f, ok := o.Simulated.Quantiles[at]; ok {
			return f
		}
		return spread.Figure(math.NaN())
	}
	low, half, high := q("0.005"), q("0.5"), q("0.995")
	sc := windowScale(o.Unit, float64(o.RootSumSquare.StandardUncertainty)/2, largestOf(o.Nominal, worst.Low, worst.High, low, high), float64(high-low))
	condition := o.Condition
	if o.ChangeFrom != "" {
		condition = "change, " + o.ChangeFrom + " to " + o.Condition
	}
	edge := look{}
	name := ""
	if first {
		edge.top, name = hairline, o.Output
	}
	text, bold := edge, bolder(edge)
	text.wrap = true
	padded := text
	padded.indent = 1
	sources := contributions(o.Contributions)
	n := max(p.tallest(10, name, condition), lines(sources, p.widths[11]-indented, 10, false))
	f := sc.format()
	p.put(lineHeight(10, n), p.text(name, bold), p.text(condition, text), p.text(sc.symbol, text), p.number(sc.nearest(float64(o.Nominal)), f, bold),
		p.number(sc.below(float64(worst.Low)), f, edge), p.number(sc.above(float64(worst.High)), f, edge), p.number(sc.nearest(float64(o.RootSumSquare.StandardUncertainty)), f, edge),
		p.number(sc.nearest(float64(low)), f, edge), p.number(sc.nearest(float64(half)), f, edge), p.number(sc.nearest(float64(high)), f, edge),
		p.text(share(o.Simulated.ReachedShare), rightward(text)), p.text(sources, padded))
	return because(o.Output+", "+condition, why)
}

// because joins the reasons that are not empty, each once.
func because(what string, why []string) string {
	said := map[string]bool{"": true}
	var reasons []string
	for _, w := range why {
		if !said[w] {
			said[w] = true
			reasons = append(reasons, w)
		}
	}
	if len(reasons) == 0 {
		return ""
	}
	return what + ": " + strings.Join(reasons, "; ")
}

// contributions names the parts that matter: up to four, each worth a
// twentieth of the variance or more.
func contributions(from []spread.Contribution) string {
	var parts []string
	for _, c := range from {
		if len(parts) == 4 || !(float64(c.Share) >= 0.05) {
			continue
		}
		name := c.Ref
		if c.Parameter != "" && c.Parameter != "value" {
			name += " " + strings.ReplaceAll(c.Parameter, "_", " ")
		}
		parts = append(parts, fmt.Sprintf("%s %.0f\u00a0%%", name, float64(c.Share)*100))
	}
	return strings.Join(parts, ", ")
}

func rightward(l look) look {
	l.across = "right"
	return l
}
