package build

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"batchwright/bom/document"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/bom/series"
)

// chooseKeys are the keys of an open position.
var chooseKeys = []string{"families", "tolerances", "values", "around", "within", "series", "combine", "lots"}

// readOpening reads what may be chosen for a part; nil where nothing is open.
func (r *reader) readOpening(s stageNode, p *Place, n *document.Node, family *part.Family) *Opening {
	at := n.Get("choose")
	if at == nil {
		return nil
	}
	if !r.Keys(at, chooseKeys...) && at.Kind != document.Mapping {
		return nil
	}
	o := Opening{Positions: []string{s.Name + "." + p.Role}, Type: p.Type, node: n}
	o.Families = r.readOpenFamilies(at, p.Type, family)
	o.Tolerances = r.readOpenTolerances(at, o.Families)
	o.Combines = r.readCombine(at.Get("combine"), p)
	o.Values = r.readOpenValues(at, p, &o)
	o.Lots = r.readOpenLots(at.Get("lots"))
	if o.paired() {
		r.reserve(p.Part.Ref)
		r.readPairValues(at, p, n, &o)
	}
	if len(o.Families) == 0 {
		return nil // complained of
	}
	r.build.Openings = append(r.build.Openings, o)
	return &r.build.Openings[len(r.build.Openings)-1]
}

// readOpenFamilies reads the families to choose from; the part's own where
// none are listed.
func (r *reader) readOpenFamilies(at *document.Node, t part.Type, family *part.Family) []string {
	list := at.Get("families")
	if list == nil {
		if family == nil {
			r.Add(at, "missing key families", "the families to choose from, or a family on the part")
			return nil
		}
		return []string{family.Name}
	}
	var names []string
	for _, n := range r.items(list, "families") {
		if f := r.familyOf(n, t); f != nil {
			names = append(names, f.Name)
		}
	}
	return names
}

// items are the entries of a list that must not be empty.
func (r *reader) items(n *document.Node, what string) []*document.Node {
	items, ok := r.Items(n)
	if ok && len(items) == 0 {
		r.Add(n, "empty list of "+what, "at least one")
	}
	return items
}

// readOpenTolerances reads the grades to choose from, each of which at least
// one family must be sold in.
func (r *reader) readOpenTolerances(at *document.Node, families []string) []float64 {
	list := at.Get("tolerances")
	if list == nil {
		return nil
	}
	var grades []float64
	for _, n := range r.items(list, "tolerances") {
		q, ok := r.Quantity(n, quantity.Percent)
		if !ok {
			continue
		}
		if !r.soldInAny(families, q.Value) {
			r.Add(n, "tolerance", fmt.Sprintf("a grade that one of %v is sold in", families))
			continue
		}
		grades = append(grades, q.Value)
	}
	return grades
}

func sold(f *part.Family, tolerance float64) bool {
	_, ok := f.Grade(tolerance)
	return ok
}

func (r *reader) soldInAny(families []string, tolerance float64) bool {
	for _, name := range families {
		if f, ok := r.build.Families.Family(name); ok && sold(f, tolerance) {
			return true
		}
	}
	return len(families) == 0
}

// readOpenValues reads the values to choose from, listed or around one; of a
// trimmer, the ranges.
func (r *reader) readOpenValues(at *document.Node, p *Place, o *Opening) []Worth {
	list, around := at.Get("values"), at.Get("around")
	switch {
	case list == nil && around == nil && !o.paired() && (at.Get("within") != nil || at.Get("series") != nil):
		r.Add(at, "within or series without around", "around: the value to stay near, or values: a list")
		return nil
	case list == nil && around == nil:
		return nil
	case !p.Single():
		r.Add(at, "values of a "+string(p.Type), "families and tolerances only")
		return nil
	case list != nil && r.besideValues(at):
		return nil
	case list == nil && p.Type.Trimmer():
		r.Add(around, "around a trimmer's range", "values: a list of ranges")
		return nil
	case list == nil:
		return r.readAround(at, around, p, o)
	}
	var values []Worth
	for _, n := range r.items(list, "values") {
		if w, ok := r.readWorth(n, p.Type); ok {
			values = append(values, w)
		}
	}
	return values
}

// readWorth reads a value more than zero, or a trimmer's range.
func (r *reader) readWorth(n *document.Node, t part.Type) (Worth, bool) {
	w := Worth{Text: n.Value}
	if t.Trimmer() {
		low, high, err := quantity.ParseRange(n.Value, t.Unit())
		if n.Kind != document.Scalar || err != nil || !(low.Value >= 0 && low.Value < high.Value) {
			r.Add(n, "trimmer's range", "two values with a unit, low..high, such as 4..34 pF or 0..10 kΩ")
			return w, false
		}
		w.Low, w.High = low.Value, high.Value
		return w, true
	}
	if !r.read(n, t.Unit(), &w.High) {
		return w, false
	}
	if !(w.High > 0) {
		r.Add(n, "value", "more than zero")
		return w, false
	}
	w.Low = w.High
	return w, true
}

// readAround reads `around: 220 pF, within: 10 %, series: E24`.
func (r *reader) readAround(at, around *document.Node, p *Place, o *Opening) []Worth {
	var centre, within float64
	name := "E24"
	ok := r.readCentre(around, p.Type, &centre)
	if at.Get("within") == nil && o.paired() {
		within = pairWithin
	} else if n := r.Need(at, "within", "how far from it, such as 10 %"); !r.readWithin(n, &within) {
		ok = false
	}
	if n := at.Get("series"); n != nil {
		name, _ = r.Word(n, "a series", series.Names()...)
	}
	if !ok || name == "" {
		return nil
	}
	values := series.Between(name, centre*(1-within), centre*(1+within))
	if len(values) == 0 && o.paired() && !slices.Contains(o.Combines, Single) {
		values = []float64{centre} // what two pieces are to come to
	}
	if len(values) == 0 {
		r.Add(around, "around", "a value with "+name+" values within "+quantity.Format(within, quantity.Percent, 3)+" of it")
		return nil
	}
	sortByDistance(values, centre)
	list := make([]Worth, len(values))
	for i, v := range values {
		list[i] = Worth{v, v, part.Text(v, p.Type.Unit())}
	}
	return list
}

// besideValues complains of what says how to find values where they are listed.
func (r *reader) besideValues(at *document.Node) bool {
	found := false
	for _, key := range []string{"around", "within", "series"} {
		if n := at.Get(key); n != nil {
			r.Add(n, key+" beside values", "values: a list, or around: one to stay near")
			found = true
		}
	}
	return found
}

// readCentre reads the value to stay near.
func (r *reader) readCentre(n *document.Node, t part.Type, centre *float64) bool {
	if !r.read(n, t.Unit(), centre) {
		return false
	}
	if !(*centre > 0) {
		r.Add(n, "value", "more than zero")
		return false
	}
	return true
}

// readWithin reads how far from it.
func (r *reader) readWithin(n *document.Node, within *float64) bool {
	if n == nil || !r.read(n, quantity.Percent, within) {
		return false // complained of
	}
	if !(*within >= 0 && *within < 1) {
		r.Add(n, "within", "a share of the value from 0 % to below 100 %")
		return false
	}
	return true
}

// sortByDistance puts the value nearest to the centre by ratio first, since
// the first is what an unchosen position is taken to hold.
func sortByDistance(values []float64, centre float64) {
	slices.SortFunc(values, func(a, b float64) int {
		return cmp.Compare(math.Abs(math.Log(a/centre)), math.Abs(math.Log(b/centre)))
	})
}

// readCombine reads how pieces may make up the part.
func (r *reader) readCombine(n *document.Node, p *Place) []Combine {
	if n == nil {
		return nil
	}
	var list []Combine
	for _, item := range r.items(n, "combine") {
		word, ok := r.Word(item, "a combination", combines...)
		switch c := Combine(word); {
		case !ok:
		case c != Single && !joinable(p.Type):
			r.Add(item, word+" of a "+string(p.Type), "single: only resistors, capacitors and coils make up pairs")
		case slices.Contains(list, c):
			r.Add(item, "combination named twice", "each once")
		default:
			list = append(list, c)
		}
	}
	return list
}

// paired says whether two pieces may fill an opening.
func (o Opening) paired() bool {
	return slices.Contains(o.Combines, Parallel) || slices.Contains(o.Combines, InSeries)
}

// readOpenLots reads whether pieces may come from one lot or from mixed ones.
func (r *reader) readOpenLots(n *document.Node) []bool {
	if n == nil {
		return nil
	}
	var list []bool
	for _, item := range r.items(n, "lots") {
		word, ok := r.Word(item, "lots: mixed or one", "mixed", "one")
		switch mixed := word == "mixed"; {
		case !ok:
		case slices.Contains(list, mixed):
			r.Add(item, "lots named twice", "each once")
		default:
			list = append(list, mixed)
		}
	}
	return list
}
