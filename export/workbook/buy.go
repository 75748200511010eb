package workbook

import (
	"fmt"

	"batchwright/bom/offer"
	"batchwright/bom/order"

	"github.com/xuri/excelize/v2"
)

// The cells that the lines' formulas refer to.
const (
	unitsCell  = "$B$4"
	sparesCell = "$B$5"
)

// buy writes the shopping list and returns the cell of its total, or "" where
// there are no lines. Units and spares can be changed (after lifting the
// protection) and everything but the prices of one piece follows.
func (b *book) buy() string {
	s := setup{landscape: true, headRow: 8}
	p := b.open(buySheet, []float64{21, 27, 11, 10, 25, 8, 9, 8, 9, 9, 10, 12}, s)
	o := b.plan.Order
	p.heading(buySheet, "Everything "+plural(b.plan.Units, "unit")+" of "+or(clean(b.plan.Title), "this build")+" need, spares included")
	label, figure := look{ink: faded}, look{across: "left", bold: true}
	p.put(0, p.text("Units", label), p.number(float64(o.Units), "0", figure))
	p.put(0, p.text("Spares, percent", label), p.number(float64(o.SparesPercent), "0", figure))
	p.put(0, p.text("Prices", label), p.text(b.priceWords(), look{bold: true}))
	p.put(8)
	money := p.currency()
	head := p.heads("lllllrrrrrrr", "References", "Part", "Value", "Tolerance", "Marked", "Per unit", "Needed", "Spares", "Packs of", "Buy", "One piece "+money, "Price "+money)
	total, notes := "", []string(nil)
	if len(o.Lines) == 0 {
		p.nothing("There is nothing to buy.")
	} else {
		total, notes = p.buyLines(o, head)
	}
	p.alternates(b.plan.Picks)
	p.unoffered(o.Unoffered)
	if len(notes) > 0 {
		p.section("Notes")
		for _, n := range notes {
			p.paragraph(n, 1, 12, look{})
		}
	}
	p.close(s, head)
	return total
}

// priceWords says whose prices these are.
func (b *book) priceWords() string {
	book, note := clean(b.plan.Order.Book), clean(b.plan.PriceNote)
	switch {
	case b.plan.Order.Demonstration:
		return or(note, "demonstration prices, invented: ask your suppliers before you buy")
	case book == "" || note == "":
		return or(book+note, "no price book")
	}
	return book + "; " + note
}

// buyLines writes the lines and their sum.
func (p *page) buyLines(o order.Order, head int) (total string, notes []string) {
	for _, l := range o.Lines {
		if n := p.buyLine(l, o); n != "" {
			notes = append(notes, n)
		}
	}
	first, last := head+1, p.last
	sum, perUnit := offer.Money(0), offer.Money(0)
	for _, l := range o.Lines {
		sum += l.Price
		perUnit += l.Each * offer.Money(l.PerUnit)
	}
	cells := make([]excelize.Cell, 12)
	strong := look{bold: true, top: rule, bottom: rule}
	for i := range cells {
		cells[i] = p.text("", strong)
	}
	cells[0] = p.text(fmt.Sprintf("Total for %s", plural(o.Units, "unit")), strong)
	strong.across, strong.format = "right", moneyFormat
	cells[11] = p.agreed(fmt.Sprintf("SUM(L%d:L%d)", first, last), sum.Float(), o.Total.Float(), strong)
	row := p.put(20, cells...)
	quiet := look{ink: faded}
	cells = make([]excelize.Cell, 12)
	cells[0] = p.text("Parts of one unit at these prices, spares not counted", quiet)
	quiet.across, quiet.format = "right", moneyFormat
	cells[11] = p.agreed(fmt.Sprintf("SUMPRODUCT(F%d:F%d,K%d:K%d)", first, last, first, last), perUnit.Float(), o.PerUnit.Float(), quiet)
	p.put(0, cells...)
	return at(12, row), notes
}

// buyLine writes one line: needed, spares, packs and price as formulas. It
// returns a note where more is bought than the packs alone would explain.
func (p *page) buyLine(l order.Line, o order.Order) string {
	r := p.last + 1
	text, count := look{bottom: hairline, wrap: true}, look{bottom: hairline, across: "right", format: "0_)"}
	strong := count
	strong.bold = true
	pack := max(1, l.Multiple)
	packs := (l.Needed + l.Spares + pack - 1) / pack * pack
	buying, note := fmt.Sprintf("ROUNDUP((G%d+H%d)/I%d,0)*I%d", r, r, r, r), ""
	if l.Buy > packs {
		buying = fmt.Sprintf("MAX(%s,%d)", buying, l.Buy)
		packs = l.Buy
		note = fmt.Sprintf("%s: %d are bought rather than %d, because together they cost less.", order.Runs(l.Refs), l.Buy, (l.Needed+l.Spares+pack-1)/pack*pack)
	}
	price := count
	price.format = moneyFormat
	each := count
	each.format = eachFormat
	height := lineHeight(10, p.tallest(10, order.Runs(l.Refs), or(l.Title, l.Family), l.Text, "", l.Marking))
	p.put(height, p.text(order.Runs(l.Refs), bolder(text)), p.text(or(l.Title, l.Family), text), p.text(l.Text, text), p.text(within(l.Tolerance), text), p.text(l.Marking, text),
		p.number(float64(l.PerUnit), "0_)", count),
		p.agreed(fmt.Sprintf("F%d*%s", r, unitsCell), float64(l.PerUnit*o.Units), float64(l.Needed), count),
		p.agreed(fmt.Sprintf("ROUNDUP(G%d*%s/100,0)", r, sparesCell), float64((l.Needed*o.SparesPercent+99)/100), float64(l.Spares), count),
		p.number(float64(pack), "0_)", count),
		p.agreed(buying, float64(packs), float64(l.Buy), strong),
		p.number(l.Each.Float(), eachFormat, each),
		p.agreed(fmt.Sprintf("J%d*K%d", r, r), (l.Each*offer.Money(l.Buy)).Float(), l.Price.Float(), price))
	return note
}

// unoffered lists what the price book does not sell.
func (p *page) unoffered(missing []order.Line) {
	if len(missing) == 0 {
		return
	}
	p.section("Not in the price book: find these elsewhere, they are counted in no total")
	text, count := look{bottom: hairline, wrap: true}, look{bottom: hairline, across: "right"}
	for _, l := range missing {
		why := or(l.Why, "nobody in the price book sells it")
		n := max(p.tallest(10, order.Runs(l.Refs), or(l.Title, l.Family), l.Text, "", l.Marking), lines(clean(why), p.wide(9, 12), 9, false))
		p.put(lineHeight(10, n), p.text(order.Runs(l.Refs), bolder(text)), p.text(or(l.Title, l.Family), text), p.text(l.Text, text), p.text(within(l.Tolerance), text), p.text(l.Marking, text),
			p.number(float64(l.PerUnit), "0_)", count), p.number(float64(l.Needed), "0_)", count), p.number(float64(l.Spares), "0_)", count),
			p.text(why, look{size: 9, ink: faded, bottom: hairline, wrap: true, indent: 1}), p.text("", text), p.text("", text), p.text("", text))
		p.merge(9, 12)
	}
}

// agreed is a live formula where it gives what the plan says, and the plan's
// figure where it does not: a formula must never contradict the plan.
func (p *page) agreed(formula string, gives, plan float64, l look) excelize.Cell {
	if gives != plan {
		return p.number(plan, l.format, l)
	}
	return p.live(formula, plan, l)
}

const (
	moneyFormat = "#,##0.00_)"
	eachFormat  = "0.00##_)" // to a hundredth of a cent
)

// within is a tolerance as people write it; "" for none.
func within(tolerance float64) string {
	if !(tolerance > 0) {
		return ""
	}
	return "±" + percent(tolerance)
}

func bolder(l look) look {
	l.bold = true
	return l
}

// nothing says why a table has no rows.
func (p *page) nothing(why string) {
	p.span(20, 1, len(p.widths), p.text(why, look{italic: true, ink: faded}), look{})
}

// tallest is how many lines the tallest of a row's wrapped texts takes.
func (p *page) tallest(size float64, texts ...string) int {
	n := 1
	for i, t := range texts {
		n = max(n, lines(clean(t), p.widths[i], size, false))
	}
	return n
}
