package build

import (
	"batchwright/bom/document"
	"batchwright/bom/quantity"
	"batchwright/data"
)

// Instrument is a bench instrument as its makers describe one.
type Instrument struct {
	Name         string
	Resistance   float64 // Ω across the point; 0 for one that loads nothing by itself
	Capacitance  float64 // F across the point
	Accuracy     float64 // fraction of the reading, a limit of error
	Floor        float64 // a further limit of error, in the reading's unit
	Through      string  // the instrument whose probe it hangs on
	MinimumLevel float64 // V peak that it needs; 0: any
}

// Instrument finds an instrument by name.
func (b *Build) Instrument(name string) (Instrument, bool) {
	for _, i := range b.Instruments {
		if i.Name == name {
			return i, true
		}
	}
	return Instrument{}, false
}

// Load is the resistance and capacitance an instrument puts across a point,
// its own or those of the instrument whose probe it uses.
func (b *Build) Load(i Instrument) (resistance, capacitance float64) {
	for range b.Instruments { // a chain is no longer than the list
		if i.Through == "" {
			break
		}
		i, _ = b.Instrument(i.Through)
	}
	return i.Resistance, i.Capacitance
}

// readInstruments loads the embedded instruments and the user's over them.
func (r *reader) readInstruments(n *document.Node) {
	root, faults := document.Parse("instruments", data.Instruments)
	r.AddAll(faults)
	if len(faults) == 0 {
		r.readInstrumentTable(root.Get("instruments"))
	}
	if n != nil {
		r.readInstrumentTable(n)
	}
}

// readInstrumentTable reads a mapping of names to instruments.
func (r *reader) readInstrumentTable(n *document.Node) {
	if n.Kind != document.Mapping {
		r.Add(n, "instruments", "a mapping of names to instruments")
		return
	}
	for _, p := range n.Pairs {
		r.readInstrument(p)
	}
	for _, p := range n.Pairs {
		if t := p.Value.Get("through"); t != nil {
			r.Word(t, "an instrument", r.instrumentNames()...)
		}
	}
}

// readInstrument reads one instrument; what it leaves unsaid is as it was.
func (r *reader) readInstrument(p document.Pair) {
	n := p.Value
	if !r.Keys(n, "resistance", "capacitance", "accuracy", "floor", "through", "minimum", "title", "source") &&
		n.Kind != document.Mapping {
		return
	}
	at := r.instrumentAt(p.Key.Value)
	r.read(n.Get("resistance"), quantity.Ohm, &at.Resistance)
	r.read(n.Get("capacitance"), quantity.Farad, &at.Capacitance)
	r.read(n.Get("accuracy"), quantity.Percent, &at.Accuracy)
	r.read(n.Get("minimum"), quantity.Volt, &at.MinimumLevel)
	if f := n.Get("floor"); f != nil {
		if q, err := anyQuantity(f); err == nil {
			at.Floor = q.Value
		} else {
			r.Add(f, "floor", "a value with a unit, such as 2 mV")
		}
	}
	if t := n.Get("through"); t != nil {
		at.Through = t.Value
	}
}

// read reads a quantity over *v where the key is there.
func (r *reader) read(n *document.Node, unit quantity.Unit, v *float64) bool {
	if n == nil {
		return false
	}
	q, ok := r.Quantity(n, unit)
	if ok {
		*v = q.Value
	}
	return ok
}

// instrumentAt finds an instrument to change, adding it if it is new.
func (r *reader) instrumentAt(name string) *Instrument {
	list := &r.build.Instruments
	for i := range *list {
		if (*list)[i].Name == name {
			return &(*list)[i]
		}
	}
	*list = append(*list, Instrument{Name: name})
	return &(*list)[len(*list)-1]
}

func (r *reader) instrumentNames() []string {
	var names []string
	for _, i := range r.build.Instruments {
		names = append(names, i.Name)
	}
	return names
}
