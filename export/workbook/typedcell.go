package workbook

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
	"time"

	"github.com/xuri/excelize/v2"

	"batchwright/bom/quantity"
	"batchwright/tolerance/spread"
)

// readRow is a row of the grid with what its readings are judged by.
type readRow struct {
	benchRow
	label  string // as findings name it
	unit   quantity.Unit
	known  bool          // the unit
	window spread.Limits // SI
}

// rowOf adds unit and window to a row.
func (c *comparison) rowOf(r benchRow) readRow {
	for _, x := range c.plan.Readings {
		if !r.turn && x.Step == r.step {
			out := rowInUnit(r, x.Unit)
			out.window = x.Expected
			return out
		}
	}
	for _, t := range c.plan.Turns {
		if r.turn && t.Step == r.step {
			out := rowInUnit(r, t.Unit)
			out.label = "turn " + r.name
			out.window = spread.Limits{Low: spread.Figure(t.To - t.Within), High: spread.Figure(t.To + t.Within)}
			return out
		}
	}
	panic("workbook: a row that is neither a reading nor a trim")
}

// readRow reads one row of all units.
func (c *comparison) readRow(row int, r readRow, into *filling) {
	to := c.tracks.rows[row]
	if to == 0 {
		return
	}
	for u := 1; u <= c.plan.Units; u++ {
		col := c.tracks.cols[u]
		if col == 0 {
			continue
		}
		cell := c.there.sheet.at(to, col)
		if cell.empty() {
			continue
		}
		f := Finding{Sheet: c.there.sheet.name, Cell: at(col, to), Point: r.label, Unit: u, Found: cell.shown()}
		v, note, why := r.read(cell, func() bool { return dated(c.there.sheet.style(place{to, col})) })
		if why != "" {
			f.Kind, f.What = Unread, why
			c.note(f)
			continue
		}
		into.keep(u, v)
		if note != "" {
			f.Kind, f.What = Taken, note
			c.note(f)
		}
		if what := r.suspect(v); what != "" {
			f.Kind, f.What, f.Expected = Scaled, what, r.shownWindow()
			c.note(f)
		}
	}
}

// shownWindow is the window as the sheet shows it.
func (r readRow) shownWindow() string {
	one := func(v float64) string { return strconv.FormatFloat(v, 'f', r.decimals, 64) }
	return strings.TrimSpace(one(r.low) + " to " + one(r.high) + " " + r.symbol)
}

// read makes a value in SI of what was typed, a note where it took some
// reading, or says why it is none.
func (r readRow) read(c oneCell, isDate func() bool) (v float64, note, why string) {
	switch {
	case c.formula != "":
		return 0, "", "a formula; type the figure itself"
	case c.kind == excelize.CellTypeBool:
		return 0, "", "neither figure nor text"
	case c.kind == excelize.CellTypeError:
		return 0, "", "an error of the spreadsheet program"
	case c.kind == excelize.CellTypeDate:
		return 0, "", "a date"
	case !c.number():
		return r.readText(strings.TrimSpace(strings.ReplaceAll(clean(c.text), "\u2212", "-")))
	}
	typed, err := strconv.ParseFloat(c.text, 64)
	if err != nil || !finite(typed) {
		return 0, "", "no figure"
	}
	if isDate() {
		return 0, "", "a date: " + day(typed)
	}
	return r.si(typed), "", ""
}

var (
	plainDecimal = regexp.MustCompile(`^[+-]?([0-9]+([.,][0-9]*)?|[.,][0-9]+)$`)
	thousands    = regexp.MustCompile(`,[0-9]{3}$`)
	oneComma     = regexp.MustCompile(`^[^,]*[0-9],[0-9][^,]*$`)
	commaThree   = regexp.MustCompile(`,[0-9]{3}([^0-9]|$)`)
)

// readText reads a figure that was typed as text.
func (r readRow) readText(text string) (v float64, note, why string) {
	if plainDecimal.MatchString(text) {
		if thousands.MatchString(text) {
			return 0, "", "a comma before three digits: a decimal comma, or thousands?"
		}
		typed, err := strconv.ParseFloat(strings.Replace(text, ",", ".", 1), 64)
		if err != nil || !finite(typed) {
			return 0, "", "no figure"
		}
		return r.si(typed), "typed as text; taken as " + strings.TrimSpace(strconv.FormatFloat(typed, 'f', -1, 64)+" "+r.symbol), ""
	}
	if !r.known {
		return 0, "", "text"
	}
	dotted := text
	if oneComma.MatchString(text) && !commaThree.MatchString(text) {
		dotted = strings.Replace(text, ",", ".", 1)
	}
	q, err := quantity.Parse(dotted, r.unit)
	if err != nil {
		var again error
		if q, again = quantity.Parse(dotted+r.unit.Symbol, r.unit); again != nil {
			return 0, "", "text that is no reading of " + article(r.unit)
		}
	}
	return q.Value, "typed with its unit; taken as " + quantity.Format(q.Value, r.unit, 0), ""
}

func article(u quantity.Unit) string {
	if u == quantity.One {
		return "a plain number"
	}
	return "a quantity in " + u.Symbol
}

// si is a figure of the row in SI: the number nearest to the decimal that was
// typed, its mark moved.
func (r readRow) si(typed float64) float64 {
	power := int(math.Round(math.Log10(r.by)))
	if v, err := strconv.ParseFloat(fmt.Sprintf("1e%d", power), 64); err != nil || v != r.by {
		return typed * r.by
	}
	mantissa, exponent, _ := strings.Cut(strconv.FormatFloat(typed, 'e', -1, 64), "e")
	e, _ := strconv.Atoi(exponent)
	v, _ := strconv.ParseFloat(fmt.Sprintf("%se%d", mantissa, e+power), 64)
	return v
}

// suspect says whether a value outside its window would be inside, had it been
// typed in a unit a thousand or a million times off, or is a date's number.
func (r readRow) suspect(v float64) string {
	low, high := float64(r.window.Low), float64(r.window.High)
	if !(low < high) || v >= low && v <= high {
		return ""
	}
	for _, by := range []float64{1e3, 1e-3, 1e6, 1e-6} {
		if !(v*by >= low && v*by <= high) || by < 1 && low < 0 && high > 0 {
			continue // about zero, anything fits that is made small
		}
		way := "below"
		if by < 1 {
			way = "above"
		}
		what := fmt.Sprintf("%.0f times %s what is expected", math.Max(by, 1/by), way)
		if scale, symbol := quantity.Prefixed(r.by*by, r.unit); r.known && math.Abs(scale/(r.by*by)-1) < 1e-9 && symbol != r.symbol {
			what += fmt.Sprintf("; typed in %s instead of %s?", symbol, r.symbol)
		}
		return what
	}
	typed, reach := v/r.by, high-low
	if math.Abs(typed-math.Round(typed)) < 1e-9 && typed >= firstDay && typed <= lastDay && !(v >= low-reach && v <= high+reach) {
		return "far from what is expected; the spreadsheet program may have made a date of it, " + day(math.Round(typed))
	}
	return ""
}

// The days of 2000 to 2099 as spreadsheet programs count them.
const firstDay, lastDay = 36526, 73050

// day is a date as a spreadsheet program counts days.
func day(serial float64) string {
	t, err := excelize.ExcelDateToTime(serial, false)
	if err != nil {
		return strconv.FormatFloat(serial, 'g', -1, 64)
	}
	if serial != math.Trunc(serial) {
		return t.Format("2006-01-02 15:04")
	}
	return t.Format(time.DateOnly)
}

// dated says whether a style shows a number as a date or a time: the built-in
// formats of ECMA-376 18.8.30, or one with letters of a date outside quotes.
func dated(s *excelize.Style) bool {
	switch {
	case s == nil:
		return false
	case s.CustomNumFmt != nil:
		return dateFormat(*s.CustomNumFmt)
	}
	n := s.NumFmt
	return n >= 14 && n <= 22 || n >= 27 && n <= 36 || n >= 45 && n <= 47 || n >= 50 && n <= 58
}

var notLetters = regexp.MustCompile(`"[^"]*"|\\.|_.|\*.|\[[^\]]*\]|(?i:general)|E[+-]`)

func dateFormat(format string) bool {
	return strings.ContainsAny(strings.ToLower(notLetters.ReplaceAllString(format, "")), "ymdhs")
}
