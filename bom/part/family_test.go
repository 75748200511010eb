package part

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/bom/quantity"
)

func family(t *testing.T, name string) *Family {
	t.Helper()
	f, ok := Embedded().Family(name)
	if !ok {
		t.Fatalf("no family %s", name)
	}
	return f
}

func TestFitResistor(t *testing.T) {
	got, err := family(t, "metal-film-50").Fit("R1", 4700, 0.005)
	if err != nil {
		t.Fatal(err)
	}
	want := Part{Ref: "R1", Type: Resistor, Family: "metal-film-50", Rated: 250, Parameters: []Parameter{{
		Name: "value", Unit: quantity.Ohm, Value: 4700, Scatter: Scatter{
			Tolerance: 0.005, Temperature: Spread{0, 50e-6},
			Ageing:      Ageing{Spread{0, 0.0004}, PerDecade},
			Correlation: Correlation{0.5, 0.7},
		},
	}}}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
	if got.Grade() != 0.005 || got.ValueText() != "4.7 kΩ" {
		t.Errorf("grade %g, text %q", got.Grade(), got.ValueText())
	}
}

// A piece of unknown grade is taken for the widest.
func TestFitWidestGrade(t *testing.T) {
	got, err := family(t, "polypropylene").Fit("C1", 220e-12, 0)
	if err != nil || got.Grade() != 0.10 {
		t.Errorf("grade %g, %v; want 10 %%", got.Grade(), err)
	}
}

// A film trimmer's high end has the grade's tolerance, its low end its own; a
// resistive trimmer starts at exactly nothing.
func TestFitTrimmer(t *testing.T) {
	got, err := family(t, "film-trimmer").FitRange("CT1", 4e-12, 34e-12, 0)
	if err != nil {
		t.Fatal(err)
	}
	s := Scatter{
		Temperature: Spread{-200e-6, 200e-6}, Humidity: Spread{100e-4, 50e-4},
		Ageing: Ageing{Spread{0, 0.002}, PerDecade}, Correlation: Correlation{0.5, 0.8},
	}
	low, high := s, s
	low.Tolerance, high.Tolerance = 0.2, 0.1
	want := Part{Ref: "CT1", Type: TrimmerCapacitor, Family: "film-trimmer", Rated: 100, Parameters: []Parameter{
		{"low", quantity.Farad, 4e-12, low}, {"high", quantity.Farad, 34e-12, high},
	}}
	if d := cmp.Diff(want, got, floats); d != "" {
		t.Error(d)
	}
	if got.Grade() != 0.1 || got.ValueText() != "4..34 pF" {
		t.Errorf("grade %g, text %q", got.Grade(), got.ValueText())
	}
	rv, err := family(t, "cermet-trimmer").FitRange("RV1", 0, 10e3, 0.2)
	if err != nil {
		t.Fatal(err)
	}
	if rv.Parameters[0].Tolerance != 0 || rv.Parameters[1].Tolerance != 0.2 || rv.ValueText() != "0..10 kΩ" {
		t.Errorf("%+v, text %q", rv.Parameters, rv.ValueText())
	}
}

// floats allows for the rounding of decimal prefixes.
var floats = cmp.Comparer(func(a, b float64) bool { return a == b || within(a, b, b) })

// An operational amplifier's offset is 0 V ± 6 mV: the tolerance is in volts.
func TestFitOpAmp(t *testing.T) {
	got, err := family(t, "jfet-opamp").Fit("U1", 0, 0)
	if err != nil {
		t.Fatal(err)
	}
	want := []Parameter{
		{"gbw", quantity.Hertz, 3e6, Scatter{Tolerance: 0.25, Temperature: Spread{-3000e-6, 1000e-6}, Correlation: Correlation{0.7, 0.8}}},
		{"slew", quantity.VoltPerSecond, 13e6, Scatter{Tolerance: 0.35, Temperature: Spread{0, 2000e-6}, Correlation: Correlation{0.7, 0.8}}},
		{"offset", quantity.Volt, 0, Scatter{Tolerance: 6e-3, Absolute: true, Correlation: Correlation{0.3, 0.3}}},
		{"headroom", quantity.Volt, 1.8, Scatter{Tolerance: 0.4, Absolute: true, Correlation: Correlation{0.8, 0.8}}},
	}
	if d := cmp.Diff(want, got.Parameters, floats); d != "" {
		t.Error(d)
	}
	if got.Grade() != 0 || got.ValueText() != "" {
		t.Errorf("grade %g, text %q", got.Grade(), got.ValueText())
	}
}

// A fixed regulator is bought by its output, an adjustable one has a reference
// and no value; a negative one keeps its sign.
func TestFitRegulators(t *testing.T) {
	names := func(p Part) (list []string) {
		for _, q := range p.Parameters {
			list = append(list, q.Name)
		}
		return list
	}
	fixed, err := family(t, "fixed-regulator-negative").Fit("U2", -12, 0.04)
	if err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff([]string{"output", "dropout", "output_slope"}, names(fixed)); d != "" {
		t.Error(d)
	}
	if m := fixed.Main(); m.Value != -12 || m.Tolerance != 0.04 || fixed.ValueText() != "-12 V" {
		t.Errorf("%+v, text %q", m, fixed.ValueText())
	}
	adjustable, err := family(t, "adjustable-regulator").Fit("U3", 0, 0)
	if err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff([]string{"reference", "adjust_current", "dropout", "output_slope"}, names(adjustable)); d != "" {
		t.Error(d)
	}
	if m := adjustable.Main(); m.Value != 1.25 || m.Tolerance != 0.04 {
		t.Errorf("%+v", m)
	}
	if adjustable.Grade() != 0 || adjustable.ValueText() != "" {
		t.Errorf("nobody buys by the reference, but grade %g, text %q", adjustable.Grade(), adjustable.ValueText())
	}
}

func TestFitCrystal(t *testing.T) {
	got, err := family(t, "at-cut-crystal").Fit("X1", 4e6, 30e-6)
	if err != nil {
		t.Fatal(err)
	}
	if m := got.Main(); m.Name != "frequency" || m.Value != 4e6 || m.Tolerance != 30e-6 || got.ValueText() != "4 MHz" {
		t.Errorf("%+v, text %q", m, got.ValueText())
	}
	a3 := got.Parameter("cubic_a3")
	if a3 == nil || !within(a3.Value, 0.11e-9, 0.11e-9) || a3.Unit != quantity.PerKelvin3 {
		t.Errorf("cubic_a3 = %+v", a3)
	}
}

func TestFitRefuses(t *testing.T) {
	fit := func(name string, value, tolerance float64) error {
		_, err := family(t, name).Fit("X1", value, tolerance)
		return err
	}
	span := func(name string, low, high float64) error {
		_, err := family(t, name).FitRange("X1", low, high, 0)
		return err
	}
	for _, c := range []struct {
		name string
		err  error
		want string
	}{
		{"value beyond the range", fit("c0g", 1e-6, 0), "c0g is sold from 1 pF to 100 nF, not 1 µF"},
		{"grade not sold", fit("c0g", 220e-12, 0.025), "c0g is not sold in 2.5 %: expected one of 1 %, 2 %, 5 %, 10 %"},
		{"grade nearly sold", fit("c0g", 220e-12, 0.0501), "c0g is not sold in 5.01 %: expected one of 1 %, 2 %, 5 %, 10 %"},
		{"value of a transistor", fit("small-signal-npn", 100, 0), "small-signal-npn has no value to choose"},
		{"grade of a transistor", fit("small-signal-npn", 0, 0.1), "small-signal-npn is not sold by tolerance"},
		{"one value for a trimmer", fit("film-trimmer", 10e-12, 0), "a trimmer-capacitor needs a range, not one value"},
		{"range for a capacitor", span("c0g", 1e-12, 2e-12), "a capacitor has one value, not a range"},
		{"range that falls", span("film-trimmer", 34e-12, 4e-12), "a trimmer's range runs from a low to a higher value, not from 34 pF to 4 pF"},
		{"trimmer beyond the range", span("film-trimmer", 4e-12, 1e-9), "film-trimmer is sold from 1 pF to 150 pF, not 1 nF"},
		{"crystal's grades in ppm", fit("at-cut-crystal", 4e6, 1e-3), "at-cut-crystal is not sold in 0.1 %: expected one of 20 ppm, 30 ppm, 50 ppm"},
	} {
		if c.err == nil || c.err.Error() != c.want {
			t.Errorf("%s: %v, want %s", c.name, c.err, c.want)
		}
	}
}

// A family sells its end values, whatever prefix they were written with.
func TestFitEnds(t *testing.T) {
	for _, v := range []float64{1e-12, math.Nextafter(1e-12, 0), 100e-9, math.Nextafter(100e-9, 1)} {
		if _, err := family(t, "c0g").Fit("C1", v, 0); err != nil {
			t.Error(err)
		}
	}
}

func TestText(t *testing.T) {
	for _, c := range []struct {
		v    float64
		u    quantity.Unit
		want string
	}{
		{4700, quantity.Ohm, "4.7 kΩ"}, {2.2 * 1e-10, quantity.Farad, "220 pF"}, {1.8e-3, quantity.Henry, "1.8 mH"},
		{0, quantity.Ohm, "0 Ω"}, {-12, quantity.Volt, "-12 V"}, {200, quantity.One, "200"}, {3.579545e6, quantity.Hertz, "3.579545 MHz"},
	} {
		if got := Text(c.v, c.u); got != c.want {
			t.Errorf("Text(%g, %s) = %q, want %q", c.v, c.u.Symbol, got, c.want)
		}
	}
}

// 4.7 pF ± 0.25 pF is bought as 5.32 %.
func TestGradeOfAbsoluteTolerance(t *testing.T) {
	for _, value := range []float64{4.7e-12, -4.7e-12} {
		p := Part{Type: Capacitor, Parameters: []Parameter{{
			Name: "value", Unit: quantity.Farad, Value: value, Scatter: Scatter{Tolerance: 0.25e-12, Absolute: true},
		}}}
		near(t, "grade", p.Grade(), 0.25/4.7, 1e-12)
	}
}

// Every type names its figures, and only once.
func TestTypes(t *testing.T) {
	types := Types()
	if len(types) != 11 || types[0] != Resistor || types[10] != Crystal {
		t.Errorf("types: %v", types)
	}
	for _, typ := range types {
		seen := map[string]bool{}
		for _, p := range typ.Parameters() {
			if seen[p.Name] || p.Name == "" || p.Value != 0 {
				t.Errorf("%s: %+v", typ, p)
			}
			seen[p.Name] = true
		}
		if len(seen) == 0 || typ.Unit() != typ.Parameters()[0].Unit {
			t.Errorf("%s has %d figures, unit %s", typ, len(seen), typ.Unit().Symbol)
		}
	}
	if n := len(Type("valve").Parameters()); n != 0 || Type("valve").Unit() != quantity.One {
		t.Errorf("a type that is none has %d figures", n)
	}
}
