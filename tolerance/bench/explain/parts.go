package explain

import (
	"fmt"
	"math"
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/series"
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
)

// What an open joint, a missing part and a bridge of solder come to in the
// equations, which know no connection that is not there (common practice, no
// source): leakage across a board, a drop of solder.
const (
	openOhms      = 1e9
	openHenries   = 1e3
	bridgeOhms    = 0.01
	bridgeFarads  = 1 // passes every alternating signal; a steady voltage is not seen to fall
	bridgeHenries = 1e-9
)

// catalogue lists what may be wrong with the parts of a model.
type catalogue struct {
	model  *build.Model
	column map[[2]string]int // input by reference and parameter
	stage  map[string]string // of each reference
	faults []*fault
}

// partFaults lists every fault of a part, and of two exchanged, that changes an
// input of the model.
func partFaults(m *build.Model) []*fault {
	c := &catalogue{model: m, column: map[[2]string]int{}, stage: map[string]string{}}
	for i, in := range m.Inputs {
		c.column[[2]string{in.Ref, in.Parameter}] = i
	}
	for _, s := range m.Build.Stages {
		for _, p := range s.Places {
			for _, ref := range p.Refs() {
				c.stage[ref] = s.Name
			}
		}
	}
	parts := m.Build.Parts()
	for i := range parts {
		c.values(&parts[i])
		c.figures(&parts[i])
		c.families(&parts[i])
		for k := range parts[:i] {
			c.exchange(&parts[k], &parts[i])
		}
	}
	c.silent()
	return c.faults
}

// change is another figure for one parameter.
type change struct {
	parameter string
	value     float64
}

// add adds a fault of one part. The wrong piece is of another lot than the rest
// of its line; it scatters as the right one does, in proportion to its value.
func (c *catalogue) add(class Class, p *part.Part, words string, changes ...change) {
	f := &fault{class: class, ref: p.Ref, words: words, inputs: map[int]build.Input{}, pin: -1}
	for _, x := range changes {
		i, there := c.column[[2]string{p.Ref, x.parameter}]
		if !there {
			continue
		}
		in := c.model.Inputs[i]
		if in.Centre == x.value {
			continue
		}
		if in.Centre != 0 {
			in.HalfWidth *= math.Abs(x.value / in.Centre)
		}
		if class == Open || class == Shorted || class == Reversed || x.value == 0 {
			in.HalfWidth = 0
		}
		in.Centre, in.Lot, in.Rho, in.Common = x.value, -1, 0, 0
		f.inputs[i] = in
	}
	if len(f.inputs) > 0 {
		c.silence(f, p)
		c.faults = append(c.faults, f)
	}
}

// silence lets an oscillator stop whose coil is open or shorted, or across whose
// coil a capacitor is shorted: its equations take the level as given.
func (c *catalogue) silence(f *fault, p *part.Part) {
	shorted := f.class == Shorted && (p.Type == part.Capacitor || p.Type == part.TrimmerCapacitor)
	if p.Type == part.Coil && (f.class == Open || f.class == Shorted) || shorted {
		c.stop(f, c.stage[p.Ref])
	}
}

// stop takes an oscillator's level away; it says whether the stage is one.
func (c *catalogue) stop(f *fault, stage string) bool {
	i, there := c.column[[2]string{stage + ".level", "value"}]
	if there {
		in := c.model.Inputs[i]
		in.Centre, in.HalfWidth = 0, 0
		f.inputs[i] = in
	}
	return there
}

// doesNot is what is wrong with an oscillator that stands still.
const doesNot = "does not oscillate"

// silent are oscillators that do not oscillate, whatever the reason.
func (c *catalogue) silent() {
	for _, s := range c.model.Build.Stages {
		f := &fault{class: Open, ref: s.Name, words: doesNot, inputs: map[int]build.Input{}, pin: -1}
		if c.stop(f, s.Name) {
			c.faults = append(c.faults, f)
		}
	}
}

// values are the faults of a part's value: another decade, the neighbours in its
// series, open and shorted.
func (c *catalogue) values(p *part.Part) {
	switch p.Type {
	case part.Resistor:
		c.valued(p, quarterwatt)
		c.ends(p, openOhms, bridgeOhms)
	case part.Capacitor:
		c.valued(p, "E12")
		c.ends(p, 0, bridgeFarads)
		if p.Family == "aluminium-electrolytic" || p.Family == "tantalum" {
			c.add(Reversed, p, "the wrong way round", change{"value", bridgeFarads}) // it conducts
		}
	case part.Coil:
		c.valued(p, "E12")
		c.ends(p, openHenries, bridgeHenries)
	case part.TrimmerResistor:
		c.trimmer(p)
		c.ends(p, openOhms, bridgeOhms)
	case part.TrimmerCapacitor:
		c.trimmer(p)
		c.ends(p, 0, bridgeFarads)
	}
}

// quarterwatt is the series that a drawer of resistors or coils is filled from
// (common practice, no source).
const quarterwatt = "E12"

// valued are other values of a part that has one.
func (c *catalogue) valued(p *part.Part, drawer string) {
	v := p.Main().Value
	c.add(Decade, p, "ten times too large", change{"value", 10 * v})
	c.add(Decade, p, "ten times too small", change{"value", v / 10})
	for _, x := range neighbours(drawer, v) {
		c.add(Neighbour, p, fmt.Sprintf("%s instead of %s", part.Text(x, p.Main().Unit), p.ValueText()), change{"value", x})
	}
}

// neighbours are the preferred values next to one: of a series where it holds
// the value, else of the coarsest that does, else of E96.
func neighbours(name string, v float64) []float64 {
	if !series.Contains(name, v) {
		if name = series.Coarsest(v); name == "" {
			name = "E96"
		}
	}
	var list []float64
	below, above := series.Between(name, v/2.3, v*(1-1e-6)), series.Between(name, v*(1+1e-6), v*2.3)
	if len(below) > 0 {
		list = append(list, below[len(below)-1])
	}
	if len(above) > 0 {
		list = append(list, above[0])
	}
	return list
}

// trimmer are other ranges of a trimmer: those of another decade, and half and
// twice, which is how trimmers are stepped.
func (c *catalogue) trimmer(p *part.Part) {
	low, high := p.Parameters[0].Value, p.Parameters[1].Value
	by := func(class Class, words string, factor float64) {
		c.add(class, p, words, change{"low", low * factor}, change{"high", high * factor})
	}
	by(Decade, "ten times too large", 10)
	by(Decade, "ten times too small", 0.1)
	by(Neighbour, "twice the value", 2)
	by(Neighbour, "half the value", 0.5)
}

// ends are a part that is missing or open, and one that is bridged.
func (c *catalogue) ends(p *part.Part, open, bridge float64) {
	all := func(v float64) []change { return []change{{"value", v}, {"low", v}, {"high", v}} }
	c.add(Open, p, "missing or open", all(open)...)
	c.add(Shorted, p, "shorted", all(bridge)...)
}

// exchange is two pieces of a type in each other's places, if they differ.
func (c *catalogue) exchange(a, b *part.Part) {
	if a.Type != b.Type {
		return
	}
	f := &fault{class: Swapped, ref: a.Ref + " and " + b.Ref, words: "exchanged", inputs: map[int]build.Input{}, pin: -1}
	differ := false
	take := func(to, from *part.Part) {
		fresh := build.PieceInputs(*from)
		for _, name := range names(fresh) {
			i, there := c.column[[2]string{to.Ref, name}]
			if !there || name != "value" && (lawful(to) || lawful(from)) {
				continue
			}
			in := c.model.Inputs[i]
			column := fresh[name].Column
			if k, own := c.column[[2]string{from.Ref, name}]; own {
				column = c.model.Inputs[k].Column
			}
			column.Stream = in.Stream
			differ = differ || column.Centre != in.Centre
			in.Column = column
			f.inputs[i] = in
		}
	}
	take(a, b)
	take(b, a)
	if differ {
		c.faults = append(c.faults, f)
	}
}

// names are a piece's parameters in order.
func names(inputs map[string]build.Input) []string {
	var list []string
	for name := range inputs {
		list = append(list, name)
	}
	slices.Sort(list)
	return list
}

// lawful says whether a part's temperature input is a place between the limits
// of a law, and not a coefficient.
func lawful(p *part.Part) bool { return len(p.Main().Law) > 0 }

// families is the right value of the family that scatters most of those that
// sell it: the worst that the wrong drawer can do.
func (c *catalogue) families(p *part.Part) {
	if p.Type != part.Capacitor && p.Type != part.Coil && p.Type != part.Resistor || p.Family == "" {
		return
	}
	i, there := c.column[[2]string{p.Ref, "value"}]
	if !there {
		return
	}
	worst, widest := (*part.Family)(nil), c.model.Inputs[i].HalfWidth*1.5
	var column scatter.Column
	for _, name := range c.model.Build.Families.OfType(p.Type) {
		f, _ := c.model.Build.Families.Family(name)
		other, err := f.Fit(p.Ref, p.Main().Value, 0)
		if err != nil {
			continue
		}
		if in := build.PieceInputs(other)["value"]; in.HalfWidth > widest {
			worst, widest, column = f, in.HalfWidth, in.Column
		}
	}
	if worst == nil {
		return
	}
	in := c.model.Inputs[i]
	column.Stream, column.Lot, column.Rho = in.Stream, -1, 0
	in.Column = column
	c.faults = append(c.faults, &fault{class: Family, ref: p.Ref, words: "of another family, such as " + worst.Name,
		inputs: map[int]build.Input{i: in}, pin: -1})
}
