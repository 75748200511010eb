package compare

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// Cases lays out a comparison: every combination of what the options name, in
// their order, that some family sells. The base is what the build has in the
// positions now; where it is none of the combinations it stands first. The
// error says what of the options is wrong.
func Cases(b *build.Build, o Options) (*Result, error) {
	r := &Result{Build: b, outputs: o.Outputs}
	if len(r.outputs) == 0 {
		r.outputs = b.Drifting()
	}
	if err := r.findLines(o); err != nil {
		return nil, err
	}
	if n := max(len(o.Families), 1) * max(len(o.Values), 1) * max(len(o.Tolerances), 1) * max(len(o.Lots), 1); n > Most {
		return nil, fmt.Errorf("%d cases: expected at most %d", n, Most)
	}
	base := Case{Base: true, build: b}
	r.describe(&base, o)
	r.base = -1
	for _, x := range combinations(o) {
		c, err := r.fit(x, o)
		switch {
		case err != nil:
			r.LeftOut = append(r.LeftOut, LeftOut{wish(x, base), err.Error()})
		case r.base < 0 && c.same(&base):
			c.Base = true
			r.base = len(r.Cases)
			r.Cases = append(r.Cases, c)
		case !slices.ContainsFunc(r.Cases, func(d Case) bool { return c.same(&d) }):
			r.Cases = append(r.Cases, c)
		}
	}
	if r.base < 0 {
		r.base = 0
		r.Cases = slices.Insert(r.Cases, 0, base)
	}
	if len(r.Cases) < 2 {
		return nil, errors.New(r.nothing(o))
	}
	r.note()
	return r, nil
}

// Listed are the families that the openings of some positions list.
func Listed(b *build.Build, at []string) []string {
	var families []string
	for _, position := range at {
		line := b.Line(position)
		for _, o := range b.Openings {
			if line != nil && o.Positions[0] == line[0] {
				for _, f := range o.Families {
					families = addNew(families, f)
				}
			}
		}
	}
	return families
}

// nothing says why there is nothing to compare.
func (r *Result) nothing(o Options) string {
	text := "only " + r.Cases[0].Label + ", which the build has now: expected something else to compare it with"
	for _, l := range r.LeftOut {
		text += fmt.Sprintf("; %s is left out: %s", l.Label, l.Why)
	}
	return text
}

// findLines finds the buying lines of the positions.
func (r *Result) findLines(o Options) error {
	for _, position := range o.At {
		line := r.Build.Line(position)
		if line == nil {
			return fmt.Errorf("nothing is fitted at %q", position)
		}
		if slices.ContainsFunc(r.Lines, func(l Line) bool { return l.Positions[0] == line[0] }) {
			continue
		}
		p := r.Build.Place(line[0])
		switch {
		case p.Geometry != nil:
			return fmt.Errorf("%s is wound, not bought", line[0])
		case r.Type != "" && p.Type != r.Type:
			return fmt.Errorf("%s is a %s and %s a %s: expected parts of one type", r.Lines[0].Positions[0], r.Type, line[0], p.Type)
		case !p.Paired() && p.Part.Family == "" && len(o.Families) == 0 && len(o.Values)+len(o.Tolerances) > 0:
			return fmt.Errorf("%s has no family: expected some to compare it with", line[0])
		}
		r.Type = p.Type
		l := Line{Positions: line}
		for _, at := range line {
			l.Refs = append(l.Refs, r.Build.Place(at).Refs()...)
		}
		r.Lines = append(r.Lines, l)
	}
	if len(r.Lines) == 0 {
		return errors.New("no position: expected STAGE.ROLE of a part")
	}
	return nil
}

// combinations are the product of what the options name.
func combinations(o Options) []build.Refitting {
	var list []build.Refitting
	for _, family := range orZero(o.Families) {
		for _, worth := range orZero(o.Values) {
			for _, tolerance := range orZero(o.Tolerances) {
				for _, lots := range orZero(o.Lots) {
					list = append(list, build.Refitting{Family: family, Worth: worth, Tolerance: tolerance, Lots: lots})
				}
			}
		}
	}
	return list
}

// orZero is a list, or one zero value where it is empty.
func orZero[T any](list []T) []T {
	if len(list) == 0 {
		return make([]T, 1)
	}
	return list
}

// fit makes a case of a combination.
func (r *Result) fit(x build.Refitting, o Options) (Case, error) {
	var positions []string
	for _, l := range r.Lines {
		positions = append(positions, l.Positions[0])
	}
	b, err := r.Build.Refit(positions, x)
	c := Case{build: b}
	if err == nil {
		r.describe(&c, o)
	}
	return c, err
}

// same says whether two cases have the same parts, drawn alike from lots.
func (c *Case) same(d *Case) bool {
	return slices.EqualFunc(c.parts, d.parts, func(p, q part.Part) bool {
		return order.Key(p) == order.Key(q) && p.LotsMixed == q.LotsMixed
	})
}

// describe says what the parts of a case are.
func (r *Result) describe(c *Case, o Options) {
	limits := spread.Limits{Low: spread.Figure(math.Inf(-1)), High: spread.Figure(math.Inf(1))}
	c.Lots = build.OneLot
	for _, l := range r.Lines {
		for _, p := range c.build.Place(l.Positions[0]).Pieces() {
			c.addPiece(p, &limits)
		}
	}
	c.Sizes = slices.DeleteFunc(c.Sizes, func(s string) bool { return s == "" })
	if !math.IsInf(float64(limits.Low), 0) {
		c.Temperatures = &limits
		c.Beyond = beyond(c.build, limits)
	}
	c.Label = c.label(o)
}

// addPiece adds what a part of a case is, and the temperatures it stands.
func (c *Case) addPiece(p part.Part, limits *spread.Limits) {
	c.parts = append(c.parts, p)
	c.Families = addNew(c.Families, p.Family)
	c.Values = addNew(c.Values, p.ValueText())
	if g := p.Grade(); g > 0 || p.Type.Trimmer() {
		c.Tolerances = addNew(c.Tolerances, g)
	}
	if p.LotsMixed {
		c.Lots = build.MixedLots
	}
	f, ok := c.build.Families.Family(p.Family)
	if !ok {
		return
	}
	c.Sizes = addNew(c.Sizes, f.Size)
	if f.MinCelsius != 0 || f.MaxCelsius != 0 {
		limits.Low, limits.High = max(limits.Low, spread.Figure(f.MinCelsius)), min(limits.High, spread.Figure(f.MaxCelsius))
	}
}

// beyond are the conditions whose ambient temperature is outside limits.
func beyond(b *build.Build, limits spread.Limits) []string {
	at := slices.IndexFunc(b.Variables, func(v build.Variable) bool { return v.Name == build.Temperature })
	var list []string
	for _, c := range b.Conditions {
		if t := c.Values[at]; !(t >= float64(limits.Low) && t <= float64(limits.High)) {
			list = append(list, c.Name)
		}
	}
	return list
}

func addNew[T comparable](list []T, x T) []T {
	if slices.Contains(list, x) {
		return list
	}
	return append(list, x)
}

// label names a case by what varies: "polystyrene 220 pF ±2.5 %, mixed lots".
func (c *Case) label(o Options) string {
	var families, values, tolerances []string
	for _, f := range c.Families {
		if f == "" {
			f = "no family"
		}
		families = append(families, f)
	}
	for _, t := range c.Tolerances {
		tolerances = append(tolerances, "±"+quantity.Format(t, quantity.Percent, 0))
	}
	if len(o.Values) > 0 {
		values = c.Values
	}
	text := strings.Join(families, "/")
	for _, words := range [][]string{values, tolerances} {
		if s := strings.Join(words, "/"); s != "" {
			text += " " + s
		}
	}
	if len(o.Lots) > 0 {
		text += lotsText[c.Lots]
	}
	return text
}

var lotsText = map[build.Lots]string{build.OneLot: ", one lot", build.MixedLots: ", mixed lots"}

// wish names a combination that cannot be had.
func wish(x build.Refitting, base Case) string {
	if x.Family == "" {
		x.Family = strings.Join(base.Families, "/")
	}
	text := strings.TrimRight(x.Family+" "+x.Worth.Text, " ")
	if x.Tolerance != 0 {
		text += " ±" + quantity.Format(x.Tolerance, quantity.Percent, 0)
	}
	return text + lotsText[x.Lots]
}

// note says what else holds for every case.
func (r *Result) note() {
	for _, l := range r.Lines {
		if keys := r.Build.Overrides(l.Positions[0]); len(keys) > 0 {
			r.Notes = append(r.Notes, fmt.Sprintf("%s is written on %s and holds for every case", strings.Join(keys, ", "), l.Positions[0]))
		}
	}
	for _, open := range r.Build.Openings {
		at := open.Positions[0]
		p := r.Build.Place(at).Part
		if slices.ContainsFunc(r.Lines, func(l Line) bool { return l.Positions[0] == at }) {
			r.Notes = append(r.Notes, fmt.Sprintf("%s is still open; the base takes it as %s", at, p.Family))
			continue
		}
		r.Notes = append(r.Notes, fmt.Sprintf("%s is still open; taken as %s here", at, p.Family))
	}
}

// exchanged says whether an order's line has a part that the cases exchange.
func (r *Result) exchanged(l order.Line) bool {
	return slices.ContainsFunc(r.Lines, func(own Line) bool {
		return slices.ContainsFunc(l.Refs, func(ref string) bool { return slices.Contains(own.Refs, ref) })
	})
}

// unoffered says which other parts are in no price.
func (r *Result) unoffered() []string {
	var refs []string
	for _, l := range r.Base().Order.Unoffered {
		if !r.exchanged(l) {
			refs = append(refs, l.Refs...)
		}
	}
	if len(refs) == 0 {
		return nil
	}
	return []string{"not offered by the price book, and in no price: " + order.Runs(refs)}
}
