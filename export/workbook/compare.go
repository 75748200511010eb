package workbook

import (
	"batchwright/tolerance/spread"

	"github.com/xuri/excelize/v2"
)

// Compare is one part after another in the same positions, side by side.
type Compare struct {
	Below    string // what is exchanged, and what all cases share
	Currency string
	Drifts   []CompareDrift
	Changes  []CompareChange
	Targets  []string // whose shares are given
	Trims    []string
	Cases    []CompareCase
	Notes    []string
}

// CompareDrift is an output whose drift per kelvin is told.
type CompareDrift struct{ Output, Unit string }

// CompareChange is a target on a change at one of its conditions. Limit is the
// largest change that it allows to either side.
type CompareChange struct {
	Title, Unit string
	Limit       float64
}

// CompareCase is one choice of parts. Its lists are as long as those of Compare.
type CompareCase struct {
	Label        string
	Base         bool
	Drifts       []spread.PerKelvin
	Changes      []spread.Figure // half widths
	Targets      []spread.Figure // shares
	Missed       []bool          // of Targets
	Reached      []spread.Figure // of Trims
	Yield        spread.Figure
	Interval     [2]spread.Figure
	Difference   string  // of the yield from the base's, or that there is none
	Unit, Batch  float64 // money; NaN where the parts are not offered
	Size, Rated  string
	Verdict, Why string
}

// compareWide is how many columns stand beside the cases.
const compareWide = 12

// compareColumn is a column of a table of cases.
type compareColumn struct {
	head string
	cell func(*page, CompareCase, look) excelize.Cell
	span *cellSpan // where it was written, for a chart; nil: no matter
}

// cellSpan is a column's cells, one a case, beneath its heading.
type cellSpan struct{ column, first, last int }

// compare writes the cases side by side, with two charts.
func (b *book) compare() {
	c := b.plan.Compare
	if c == nil {
		return
	}
	s := setup{landscape: true, onePage: 1000}
	widths := []float64{30}
	for range compareWide {
		widths = append(widths, 13.5)
	}
	p := b.open(compareSheet, widths, s)
	p.heading(compareSheet, c.Below)
	var yield, limit cellSpan
	widthsOf := make([]cellSpan, len(c.Changes))
	p.compareTable("What each case does", c.yieldColumns(&yield), c.Cases)
	p.compareTable("How far it moves", c.driftColumns(widthsOf, &limit), c.Cases)
	p.compareVerdicts(c.Cases)
	p.compareCharts(c, yield, widthsOf, limit)
	p.put(6)
	for _, n := range append([]string{"Every case had the same draws. Lot to lot is what all units of a batch share, unit to unit what is each one's own, both as standard deviations of the drift for each kelvin at the reference. " +
		"A half width is what as many units stay within as the target asks. A difference is called one only where its 95 % interval, batch by batch, leaves out zero. Sizes are typical of each class."}, c.Notes...) {
		p.paragraph(n, 1, 1+compareWide, look{size: 9, ink: faded})
	}
	if b.plan.PriceNote != "" {
		p.paragraph("Money: "+b.plan.PriceNote+".", 1, 1+compareWide, look{size: 9, ink: faded})
	}
	p.close(s, 0)
}

// compareTable writes columns beside the cases, in as many tables as they need.
func (p *page) compareTable(title string, columns []compareColumn, cases []CompareCase) {
	for from := 0; from < len(columns); from += compareWide {
		part := columns[from:min(from+compareWide, len(columns))]
		if from == 0 {
			p.section(title)
		} else {
			p.put(6)
		}
		heads, across := []string{"Case"}, "l"
		for _, c := range part {
			heads, across = append(heads, c.head), across+"r"
		}
		first := p.heads(across, heads...) + 1
		for _, x := range cases {
			l := look{bottom: hairline, bold: x.Base}
			cells := []excelize.Cell{p.text(x.name(), l)}
			for _, c := range part {
				cells = append(cells, c.cell(p, x, l))
			}
			p.put(lineHeight(10, lines(x.name(), p.widths[0], 10, x.Base)), cells...)
		}
		for i, c := range part {
			if c.span != nil {
				*c.span = cellSpan{i + 2, first, p.last}
			}
		}
	}
}

// name is a case's label, the base's marked.
func (x CompareCase) name() string {
	if x.Base {
		return x.Label + " (base)"
	}
	return x.Label
}

// shareCell is a share as a figure, for a chart.
func shareCell(of func(CompareCase) spread.Figure) func(*page, CompareCase, look) excelize.Cell {
	return func(p *page, x CompareCase, l look) excelize.Cell {
		v, format := shareFigure(of(x))
		return p.number(v, format, l)
	}
}

// shareFigure is a share as a figure that reads 100 % or 0 % only where it is
// exactly that, and its format.
func shareFigure(f spread.Figure) (float64, string) {
	v := float64(f)
	switch {
	case v > 0.9995 && v < 1:
		return min(v, 0.9999), "0.00 %"
	case v < 0.0005 && v > 0:
		return max(v, 0.0001), "0.00 %"
	}
	return v, "0.0 %"
}

// yieldColumns are yield, money, and the shares on targets and trims.
func (c *Compare) yieldColumns(yield *cellSpan) []compareColumn {
	currency := ""
	if s := clean(c.Currency); s != "" {
		currency = ", " + s
	}
	money := func(of func(CompareCase) float64) func(*page, CompareCase, look) excelize.Cell {
		return func(p *page, x CompareCase, l look) excelize.Cell { return p.number(of(x), "#,##0.00", l) }
	}
	list := []compareColumn{
		{"Good units", shareCell(func(x CompareCase) spread.Figure { return x.Yield }), yield},
		{"95 % from", shareCell(func(x CompareCase) spread.Figure { return x.Interval[0] }), nil},
		{"to", shareCell(func(x CompareCase) spread.Figure { return x.Interval[1] }), nil},
		{"Points from base", func(p *page, x CompareCase, l look) excelize.Cell {
			l.across = "right"
			return p.text(x.Difference, l)
		}, nil},
		{"Parts of a unit" + currency, money(func(x CompareCase) float64 { return x.Unit }), nil},
		{"Batch" + currency, money(func(x CompareCase) float64 { return x.Batch }), nil},
	}
	for t, title := range c.Targets {
		list = append(list, compareColumn{clean(title), func(p *page, x CompareCase, l look) excelize.Cell {
			v, format := shareFigure(x.Targets[t])
			if x.Missed[t] {
				l.fill, l.ink, format = rose, brick, `"✗ "`+format
			}
			return p.number(v, format, l)
		}, nil})
	}
	for t, title := range c.Trims {
		list = append(list, compareColumn{clean(title) + " reaches", shareCell(func(x CompareCase) spread.Figure { return x.Reached[t] }), nil})
	}
	return list
}

// driftColumns are drifts per kelvin and half widths, the latter also as a
// share of what their targets allow.
func (c *Compare) driftColumns(widths []cellSpan, limit *cellSpan) []compareColumn {
	var list []compareColumn
	for i, d := range c.Drifts {
		of := []func(spread.PerKelvin) spread.Figure{
			func(d spread.PerKelvin) spread.Figure { return d.Mean },
			func(d spread.PerKelvin) spread.Figure { return d.LotToLot },
			func(d spread.PerKelvin) spread.Figure { return d.UnitToUnit },
		}
		var all []spread.Figure
		for _, x := range c.Cases {
			all = append(all, of[0](x.Drifts[i]), of[1](x.Drifts[i]), of[2](x.Drifts[i]))
		}
		sc := scaleOf(d.Unit, largestOf(all...), powerBelow(largestOf(all...)/200))
		for k, head := range []string{clean(d.Output) + ", " + sc.symbol + " a kelvin", "lot to lot ±", "unit to unit ±"} {
			list = append(list, compareColumn{head, figureCell(sc, func(x CompareCase) spread.Figure { return of[k](x.Drifts[i]) }), nil})
		}
	}
	limited := false
	for i, change := range c.Changes {
		all := []spread.Figure{spread.Figure(change.Limit)}
		for _, x := range c.Cases {
			all = append(all, x.Changes[i])
		}
		sc := scaleOf(change.Unit, largestOf(all...), powerBelow(largestOf(all...)/200))
		list = append(list, compareColumn{clean(change.Title) + ": within ±" + sc.symbol, figureCell(sc, func(x CompareCase) spread.Figure { return x.Changes[i] }), nil})
		if !(change.Limit > 0) {
			continue
		}
		limited = true
		list = append(list, compareColumn{clean(change.Title) + ", of ±" + sc.text(change.Limit) + " " + sc.symbol, func(p *page, x CompareCase, l look) excelize.Cell {
			return p.number(float64(x.Changes[i])/change.Limit, "0 %", l)
		}, &widths[i]})
	}
	if limited {
		list = append(list, compareColumn{"Limit", func(p *page, _ CompareCase, l look) excelize.Cell {
			l.ink = faded
			return p.number(1, "0 %", l)
		}, limit})
	}
	return list
}

// figureCell is a figure in a column's unit.
func figureCell(sc scale, of func(CompareCase) spread.Figure) func(*page, CompareCase, look) excelize.Cell {
	return func(p *page, x CompareCase, l look) excelize.Cell {
		return p.number(sc.nearest(float64(of(x))), sc.format(), l)
	}
}

// compareVerdicts writes size, rating, and why each case wins or loses.
func (p *page) compareVerdicts(cases []CompareCase) {
	p.section("Why")
	heads := make([]string, 1+compareWide)
	heads[0], heads[1], heads[4], heads[6], heads[7] = "Case", "Size", "Rated", "Verdict", "Why"
	p.heads("", heads...)
	p.merge(2, 4)
	p.merge(5, 6)
	p.merge(8, 1+compareWide)
	for _, x := range cases {
		l := look{bottom: hairline, wrap: true, bold: x.Base}
		words := make([]string, 1+compareWide)
		words[0], words[1], words[4], words[6], words[7] = x.name(), x.Size, x.Rated, x.Verdict, x.Why
		var cells []excelize.Cell
		for _, s := range words {
			cells = append(cells, p.text(s, l))
		}
		n := max(lines(x.name(), p.widths[0], 10, x.Base), lines(clean(x.Size), p.wide(2, 4), 10, x.Base),
			lines(clean(x.Rated), p.wide(5, 6), 10, x.Base), lines(clean(x.Why), p.wide(8, 1+compareWide), 10, x.Base))
		p.put(lineHeight(10, n), cells...)
		p.merge(2, 4)
		p.merge(5, 6)
		p.merge(8, 1+compareWide)
	}
}
