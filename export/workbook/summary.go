package workbook

import (
	"fmt"

	"batchwright/tolerance/spread"

	"github.com/xuri/excelize/v2"
)

// summary writes the first page: what the plan is, whether it does what was
// asked, what it costs, how its parts were chosen, and the state of the bench.
func (b *book) summary(total string, verdicts tally) {
	s := setup{onePage: 1150} // about 70 % of full size, still easy to read
	p := b.open(summarySheet, []float64{21, 22, 21, 11, 25, 20}, s)
	p.span(34, 1, 6, p.text(cut(clean(b.plan.Title), 120), look{size: 22, bold: true, down: "bottom"}), look{})
	p.span(18, 1, 6, p.text(fmt.Sprintf("Batch of %s · plan %s · seed %d · %s", plural(b.plan.Units, "unit"), b.plan.short(), b.plan.Seed, or(clean(b.plan.File), "no file")), look{ink: faded, bottom: heavy}), look{bottom: heavy})
	p.put(10)
	p.keyFigures(total)
	p.targets()
	p.yield()
	p.benchState(verdicts)
	p.choices(b.plan.Picks)
	p.findings()
	p.contents()
	p.close(s, 0)
}

// keyFigures are the four figures people ask for first.
func (p *page) keyFigures(total string) {
	o := p.plan.Order
	met := 0
	for _, t := range p.plan.Spread.Targets {
		if t.Met {
			met++
		}
	}
	label := look{size: 9, ink: faded, fill: tint, top: rule}
	figure := look{size: 16, bold: true, fill: tint, bottom: rule}
	money := figure
	money.format = "#,##0.00"
	cost := p.number(o.Total.Float(), money.format, leftward(money))
	if total != "" {
		cost = p.live(fmt.Sprintf("'%s'!%s", buySheet, total), o.Total.Float(), leftward(money))
	}
	currency := ""
	if c := clean(o.Currency); c != "" {
		currency = ", " + c
	}
	p.put(18, p.text("Targets met", label), p.text("Good units expected", label), p.text("Parts to buy"+currency, label), p.text("", label), p.text("Parts of one unit"+currency, label), p.text("", label))
	p.merge(3, 4)
	p.merge(5, 6)
	state := figure
	if met < len(p.plan.Spread.Targets) {
		state.ink = brick
	}
	p.put(27, p.text(fmt.Sprintf("%d of %d", met, len(p.plan.Spread.Targets)), state), p.text(share(p.plan.Spread.Yield.UnitShare), figure), cost, p.text("", figure), p.number(o.PerUnit.Float(), money.format, leftward(money)), p.text("", figure))
	p.merge(3, 4)
	p.merge(5, 6)
	p.paragraph("Prices: "+p.priceWords(), 1, 6, look{size: 9, ink: faded})
}

// targets lists what was asked and whether it is met.
func (p *page) targets() {
	p.section("Targets")
	if len(p.plan.Spread.Targets) == 0 {
		p.nothing("The build names no target: nothing was judged.")
		return
	}
	p.heads("llllil", "Target", "Asked", "", "Verdict", "Units that comply", "Worst corner")
	for _, t := range p.plan.Spread.Targets {
		p.target(t)
	}
}

func (p *page) target(t spread.TargetReport) {
	text := look{bottom: hairline, wrap: true}
	verdict, word := look{bottom: hairline, bold: true, ink: moss}, "met"
	if !t.Met {
		verdict, word = look{bottom: hairline, bold: true, ink: brick, fill: rose}, "MISSED"
	}
	padded := text
	padded.indent = 1
	complies := share(t.Share)
	if i := interval(t.ShareInterval[0], t.ShareInterval[1]); i != "" {
		complies += "  (" + i + ")"
	}
	worst := p.plan.worst(t)
	n := max(p.tallest(10, t.Name, "", "", "", complies+"  ", worst), lines(clean(t.Name), p.widths[0], 10, true), lines(clean(t.Asked), p.wide(2, 3), 10, false))
	p.put(lineHeight(10, n), p.text(t.Name, bolder(text)), p.text(t.Asked, text), p.text("", text), p.text(word, verdict), p.text(complies, padded), p.text(worst, text))
	p.merge(2, 3)
	if t.Why != "" {
		p.paragraph(clean(t.Name)+": "+clean(t.Why), 1, 6, look{size: 9, ink: faded})
	}
}

// worst writes a target's worst case in one unit, rounded outward.
func (p Plan) worst(t spread.TargetReport) string {
	if t.WorstCase == nil || !finite(float64(t.WorstCase.Low)) || !finite(float64(t.WorstCase.High)) {
		return "–"
	}
	unit := ""
	for _, o := range p.Spread.Outputs {
		if o.Output == t.Output {
			unit = o.Unit
			break
		}
	}
	largest := largestOf(t.WorstCase.Low, t.WorstCase.High)
	sc := scaleOf(unit, largest, powerBelow(largest/100))
	low, high := sc.below(float64(t.WorstCase.Low))*sc.by, sc.above(float64(t.WorstCase.High))*sc.by
	return fmt.Sprintf("%s … %s %s", sc.text(low), sc.text(high), sc.symbol)
}

// yield says how many units, and how many of a batch, meet every target.
func (p *page) yield() {
	y := p.plan.Spread.Yield
	p.section("What to expect of the batch")
	if !finite(float64(y.UnitShare)) {
		p.nothing("Nothing was simulated.")
		return
	}
	line := "Units that meet every target: " + share(y.UnitShare)
	if i := interval(y.Interval[0], y.Interval[1]); i != "" {
		line += " (" + i + ", batches taken as they come)"
	}
	p.fact2("One unit", line+".")
	b := y.Batch
	if finite(float64(b.MedianGood)) {
		p.fact2("One batch", batchWords(b))
	}
	sim := p.plan.Spread.Simulation
	p.fact2("Simulated", fmt.Sprintf("%s units in %s batches, each batch with lots of its own.", whole(sim.Units), whole(sim.Batches)))
}

// batchWords says how many good units a batch has.
func batchWords(b spread.BatchReport) string {
	if b.MedianGood < 1 {
		return fmt.Sprintf("At least half of all batches have no good unit among %d.", b.Units)
	}
	return fmt.Sprintf("Half of all batches have %.0f or more good units of %d, 19 in 20 have %.0f or more. Batches without a bad unit: %s.", float64(b.MedianGood), b.Units, float64(b.P05Good), share(b.AllGoodShare))
}

// benchState counts the verdicts on the test sheet as it is filled in.
func (p *page) benchState(v tally) {
	p.section("On the bench")
	label, figure := look{size: 9, ink: faded}, look{bold: true, across: "left", format: "0", bottom: hairline}
	p.put(0, p.text("Good", label), p.text("Built right, misses a target", label), p.text("To check", label), p.text("Begun", label), p.text("Not begun", label))
	cells := row(6)
	for i, word := range []string{good, misses, check, begun} {
		cells[i] = p.live(fmt.Sprintf(`COUNTIF(%s,"%s")`, v, word), 0, figure)
	}
	r := p.last + 1
	cells[4] = p.live(fmt.Sprintf("COLUMNS(%s)-SUM(A%d:D%d)", v, r, r), p.plan.Units, figure)
	p.put(0, cells...)
}

func (p *page) findings() {
	all := append(append([]string{}, p.plan.Findings...), p.plan.Spread.Notes...)
	if len(all) > 0 {
		p.section("Worth knowing")
		for _, f := range all {
			p.paragraph("• "+capital(clean(f)), 1, 6, look{})
		}
	}
	if len(p.plan.Cautions) > 0 {
		p.section("Before you switch on")
		for _, c := range p.plan.Cautions {
			p.paragraph("• "+c, 1, 6, look{})
		}
	}
}

// contents leads to the other sheets, two to a row.
func (p *page) contents() {
	p.section("In this workbook")
	list := [][2]string{
		{buySheet, "what to order, in packs, with prices"}, {tolerancesSheet, "every output at every condition"},
		{stagesSheet, "what goes where, and its marking"}, {driftSheet, "movement with temperature"},
		{trimsSheet, "adjustments in bench order"}, {basisSheet, "assumptions, sources, limits"},
		{testSheet, "what every meter should show"},
	}
	if p.plan.has(compareSheet) {
		list = append(list, [2]string{compareSheet, "other parts in the same places"})
	}
	if p.plan.has(tradeSheet) {
		list = append(list, [2]string{tradeSheet, "what steadier would cost"})
	}
	if len(p.plan.Samples) > 0 {
		list = append(list, [2]string{samplesSheet, "targets at other conditions"})
	}
	if p.plan.Cards {
		list = append(list, [2]string{cardsSheet, "a page for every unit"})
	}
	if len(list)%2 > 0 {
		list = append(list, [2]string{})
	}
	name, text := look{bold: true, ink: copper}, look{}
	for i := 0; i < len(list); i += 2 {
		left, right := list[i], list[i+1]
		r := p.put(0, p.text(left[0], name), p.text(left[1], text), excelize.Cell{}, p.text(right[0], name), p.text(right[1], text))
		p.link(at(1, r), left[0])
		p.link(at(4, r), right[0])
	}
}

// link makes a cell lead to a sheet.
func (p *page) link(cell, sheet string) {
	if sheet != "" {
		p.keep(p.file.SetCellHyperLink(p.name, cell, "'"+sheet+"'!A1", "Location"))
	}
}

// fact2 writes a heading and a text over the other columns.
func (p *page) fact2(heading, text string) {
	l := look{wrap: true}
	n := lines(clean(text), p.wide(2, 6), 10, false)
	p.put(lineHeight(10, n), p.text(heading, bolder(l)), p.text(text, l), excelize.Cell{}, excelize.Cell{}, excelize.Cell{}, excelize.Cell{})
	p.merge(2, 6)
}

func leftward(l look) look {
	l.across = "left"
	return l
}
