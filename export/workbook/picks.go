package workbook

import "github.com/xuri/excelize/v2"

// Picks is how the parts were chosen, in words.
type Picks struct {
	Choices    []Picked
	Proof      string   // how sure it is that nothing else would do, and how many were looked at
	Binding    string   // which target costs most; "" where none is known to
	Checks     []string // where the search and the simulation disagree
	Alternates []Alternate
	Note       string // what the alternates rest on
}

// Picked is what was chosen for some positions.
type Picked struct {
	Refs, Part string
	UnitCost   float64 // in one unit
	Why        string
}

// Alternate is what to buy where a line is out of stock.
type Alternate struct {
	Refs, Line string
	Instead    string
	More       float64 // money of the order above what it is; NaN where there is nothing to buy instead
	Drifts     string  // how the changes come out then
}

// choices says which parts were picked and why.
func (p *page) choices(k Picks) {
	if len(k.Choices) == 0 {
		return
	}
	p.section("Parts that were chosen")
	p.heads("lllril", "For", "Part", "", "In one unit", "Why", "")
	text := look{bottom: hairline, wrap: true}
	small := text
	small.size, small.indent = 9, 1
	for _, c := range k.Choices {
		n := max(lines(clean(c.Part), p.wide(2, 3), 10, false), lines(clean(c.Why), p.wide(5, 6)-indented, 9, false), p.tallest(10, c.Refs))
		p.put(lineHeight(10, n), p.text(c.Refs, bolder(text)), p.text(c.Part, text), p.text("", text), p.number(c.UnitCost, eachFormat, text), p.text(c.Why, small), p.text("", small))
		p.merge(2, 3)
		p.merge(5, 6)
	}
	p.remark("Proof", k.Proof)
	p.remark("What binds", k.Binding)
	for i, s := range k.Checks {
		p.remark([]string{"First order", ""}[min(i, 1)], s)
	}
}

// remark writes a heading and a text beside it, both small; nothing for no text.
func (p *page) remark(heading, text string) {
	if clean(text) == "" {
		return
	}
	l := look{size: 9, ink: faded, wrap: true}
	n := lines(clean(text), p.wide(2, 6), 9, false)
	p.put(lineHeight(9, n), p.text(heading, bolder(l)), p.text(text, l), excelize.Cell{}, excelize.Cell{}, excelize.Cell{}, excelize.Cell{})
	p.merge(2, 6)
}

// alternates says what to buy where a line is out of stock.
func (p *page) alternates(k Picks) {
	if len(k.Alternates) == 0 {
		return
	}
	p.section("If a line is out of stock")
	heads := make([]string, 12)
	heads[0], heads[1], heads[2], heads[6], heads[7] = "References", "Out of stock", "Take instead", "Order "+p.currency(), "Changes then"
	p.heads("llilllri", heads...)
	p.merge(3, 6)
	p.merge(8, 12)
	for _, a := range k.Alternates {
		p.alternate(a)
	}
	p.paragraph(k.Note, 1, 12, look{size: 9, ink: faded})
}

// signedFormat shows a difference of money with its sign.
const signedFormat = "+#,##0.00_);−#,##0.00_);0.00_)"

func (p *page) alternate(a Alternate) {
	text := look{bottom: hairline, wrap: true}
	small := text
	small.size, small.indent = 9, 1
	padded := text
	padded.indent = 1
	n := max(p.tallest(10, a.Refs, a.Line), lines(clean(a.Instead), p.wide(3, 6)-indented, 10, false), lines(clean(a.Drifts), p.wide(8, 12)-indented, 9, false))
	cells := []excelize.Cell{p.text(a.Refs, bolder(text)), p.text(a.Line, text), p.text(a.Instead, padded), p.text("", text), p.text("", text), p.text("", text),
		p.number(a.More, signedFormat, text), p.text(a.Drifts, small)}
	for range 4 {
		cells = append(cells, p.text("", small))
	}
	p.put(lineHeight(10, n), cells...)
	p.merge(3, 6)
	p.merge(8, 12)
}

// currency is the order's, in brackets, for a heading.
func (p *page) currency() string {
	return "(" + or(clean(p.plan.Order.Currency), "no currency") + ")"
}
