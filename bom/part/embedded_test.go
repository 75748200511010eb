package part

import (
	"slices"
	"strings"
	"testing"

	"batchwright/data"
)

// wanted is what a planner must be able to name, with the type of each.
var wanted = map[string]Type{
	"carbon-film": Resistor, "metal-film-100": Resistor, "metal-film-50": Resistor, "metal-film-25": Resistor,
	"thin-film": Resistor, "wirewound": Resistor, "cermet-trimmer": TrimmerResistor,
	"c0g": Capacitor, "u2j": Capacitor, "p100": Capacitor, "n150": Capacitor,
	"x7r": Capacitor, "x5r": Capacitor, "y5v": Capacitor,
	"polypropylene": Capacitor, "polyester": Capacitor, "polystyrene": Capacitor, "pps": Capacitor, "mica": Capacitor,
	"aluminium-electrolytic": Capacitor, "tantalum": Capacitor,
	"film-trimmer": TrimmerCapacitor, "ceramic-trimmer": TrimmerCapacitor,
	"drum-choke": Coil, "powdered-iron-toroid": Coil, "ferrite-pot": Coil, "slug-tuned-can": Coil, "air-core": Coil,
	"small-signal-npn": Transistor, "small-signal-pnp": Transistor, "jfet-opamp": OpAmp, "bipolar-opamp": OpAmp,
	"signal-diode": Diode, "schottky-diode": Diode,
	"fixed-regulator": Regulator, "fixed-regulator-negative": Regulator, "adjustable-regulator": Regulator,
	"zener": Zener, "at-cut-crystal": Crystal,
}

func TestEmbeddedHasNoFault(t *testing.T) {
	c, complaints := read("families.yaml", data.Families)
	if len(complaints) > 0 {
		t.Fatal(complaints)
	}
	if n := len(c.Names()); n < 34 {
		t.Errorf("%d families, want at least 34", n)
	}
	for name, want := range wanted {
		f, ok := c.Family(name)
		if !ok {
			t.Errorf("no family %s", name)
		} else if f.Type != want {
			t.Errorf("%s is a %s, want a %s", name, f.Type, want)
		}
	}
}

// sized are the types whose families say how large their parts are.
var sized = map[Type]bool{Resistor: true, Capacitor: true, Coil: true, TrimmerResistor: true, TrimmerCapacitor: true}

// Every family is whole, and its source speaks of every figure that it gives.
func TestEmbeddedIsWholeAndSourced(t *testing.T) {
	c := Embedded()
	for _, name := range c.Names() {
		f, _ := c.Family(name)
		t.Run(name, func(t *testing.T) {
			if f.Title == name || f.Title == "" {
				t.Error("no title")
			}
			if !(f.MinCelsius < ReferenceCelsius && f.MaxCelsius > ReferenceCelsius) {
				t.Errorf("temperatures %g to %g", f.MinCelsius, f.MaxCelsius)
			}
			mentions(t, f, "temperatures", true)
			mentions(t, f, "voltage", f.Voltage != 0)
			mentions(t, f, "size: from memory", f.Size != "")
			if f.Size == "" && sized[f.Type] {
				t.Error("no size")
			}
			if f.HasValue() {
				checkValued(t, f)
			}
			for _, p := range f.Parameters {
				mentions(t, f, p.Name, p.Name != "low")
				mentions(t, f, "correlation", p.Correlation != Correlation{})
			}
			for _, p := range fitted(t, f).Parameters {
				checkScatter(t, p)
			}
		})
	}
}

// mentions fails if the source does not speak of a figure that the family has.
func mentions(t *testing.T, f *Family, figure string, has bool) {
	t.Helper()
	if has && !strings.Contains(f.Source, figure) {
		t.Errorf("the source does not say where %s comes from", figure)
	}
}

// checkValued checks what a family sold by value must say.
func checkValued(t *testing.T, f *Family) {
	t.Helper()
	if !(f.Low < f.High) {
		t.Errorf("values %g to %g", f.Low, f.High)
	}
	if len(f.Grades) == 0 {
		t.Error("no grades")
	}
	for i, g := range f.Grades {
		if !slices.Contains(seriesNames, g.Series) || !(g.Tolerance > 0) {
			t.Errorf("grade %d is %+v", i, g)
		}
		if i > 0 && g.Tolerance <= f.Grades[i-1].Tolerance {
			t.Errorf("grade %d is no wider than the one before", i)
		}
	}
	s := f.Scatter
	moves := s.Temperature != Spread{} || len(s.Law) > 0
	if !moves && f.Type != Crystal && f.Name != "zener-low" { // those two have it among their parameters
		t.Error("no temperature coefficient, and no law")
	}
	if s.Correlation.Value == 0 || s.Correlation.Temperature == 0 {
		t.Errorf("lot correlation %+v", s.Correlation)
	}
	if s.Ageing.Per == "" {
		t.Error("no word of ageing")
	}
	mentions(t, f, "temperature coefficient", s.Temperature != Spread{})
	mentions(t, f, "temperature law", len(s.Law) > 0)
	mentions(t, f, "bias law", len(s.Bias) > 0)
	mentions(t, f, "humidity", s.Humidity != Spread{})
	for _, figure := range []string{"tolerances", "ageing", "correlation", "values"} {
		mentions(t, f, figure, true)
	}
}

// checkScatter checks one figure for what no real part could have.
func checkScatter(t *testing.T, p Parameter) {
	t.Helper()
	if !p.Absolute && !(p.Tolerance >= 0 && p.Tolerance <= 0.5) {
		t.Errorf("%s: tolerance %g", p.Name, p.Tolerance)
	}
	if p.Absolute && p.Value != 0 && p.Tolerance > max(p.Value, -p.Value) {
		t.Errorf("%s: tolerance %g of %g may change its sign", p.Name, p.Tolerance, p.Value)
	}
	for _, rho := range []float64{p.Correlation.Value, p.Correlation.Temperature} {
		if !(rho >= 0 && rho < 1) {
			t.Errorf("%s: correlation %g", p.Name, rho)
		}
	}
	if !(p.Temperature.Spread >= 0 && p.Humidity.Spread >= 0 && p.Ageing.Spread.Spread >= 0) {
		t.Errorf("%s: a spread below zero: %+v", p.Name, p.Scatter)
	}
	// No part of a tone box moves by more than itself from 0 to 50 °C.
	for _, celsius := range []float64{0, 50} {
		if low, high := p.Limits(celsius); low <= -1 || high >= 1 {
			t.Errorf("%s: changes by %g to %g at %g °C", p.Name, low, high, celsius)
		}
	}
}

// fitted places some part of the family.
func fitted(t *testing.T, f *Family) Part {
	t.Helper()
	var p Part
	var err error
	switch {
	case f.Type.Trimmer():
		p, err = f.FitRange("X1", 0, f.High, 0)
	case f.HasValue():
		p, err = f.Fit("X1", f.High, 0)
	default:
		p, err = f.Fit("X1", 0, 0)
	}
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// Each call of Embedded gives a catalogue of its own.
func TestEmbeddedIsNotShared(t *testing.T) {
	a, b := Embedded(), Embedded()
	n := len(b.Names())
	a.add(&Family{Name: "unobtainium", Type: Coil})
	a.add(&Family{Name: "c0g", Type: Coil})
	if _, ok := b.Family("unobtainium"); ok || len(b.Names()) != n {
		t.Error("a family added to one catalogue appears in another")
	}
	b.add(&Family{Name: "eternium", Type: Coil})
	if names := a.Names(); names[len(names)-1] != "unobtainium" {
		t.Errorf("the last family of one catalogue is %s, added to another", names[len(names)-1])
	}
	if f, _ := b.Family("c0g"); f.Type != Capacitor {
		t.Error("a family replaced in one catalogue is replaced in another")
	}
}

func TestOfType(t *testing.T) {
	got := Embedded().OfType(OpAmp)
	if !slices.Equal(got, []string{"jfet-opamp", "bipolar-opamp", "audio-opamp"}) {
		t.Errorf("op-amps: %v", got)
	}
}
