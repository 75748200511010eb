package part

import (
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

// parse reads text over the embedded catalogue.
func parse(text string) (*Catalogue, document.Complaints) {
	n, complaints := document.Parse("own.yaml", []byte(text))
	if len(complaints) > 0 {
		return nil, complaints
	}
	c := Embedded()
	var f document.Faults
	c.Read(n, &f)
	return c, f.List()
}

// mustParse is parse of a text that has no fault.
func mustParse(t *testing.T, text string) *Catalogue {
	t.Helper()
	c, complaints := parse(text)
	if len(complaints) > 0 {
		t.Fatal(complaints)
	}
	return c
}

// The example of the file's description: a new family, and one that stands in
// place of the embedded one.
func TestReadAddsAndReplaces(t *testing.T) {
	c := mustParse(t, `
families:
  polyester: {part: capacitor, title: Polyester film, tolerances: [5 %, 10 %], values: 1 nF..10 uF, series: E12,
    temperature_coefficient: {value: 400 ppm/K, spread: 200 ppm/K}, correlation: {value: 0.5, temperature: 0.7}, source: "typical of class"}
  glass: {part: capacitor, tolerances: 2 %, values: 1 pF..1 nF, temperature_coefficient: 140 ppm/K, ageing: {spread: 0.1 %, per: 1000 h}}
`)
	got, _ := c.Family("polyester")
	want := &Family{
		Name: "polyester", Type: Capacitor, Title: "Polyester film",
		Grades: []Grade{{0.05, "E12"}, {0.10, "E12"}}, Low: 1e-9, High: 10e-6,
		Scatter: Scatter{Temperature: Spread{400e-6, 200e-6}, Correlation: Correlation{0.5, 0.7}},
		Source:  "typical of class",
	}
	if d := cmp.Diff(want, got, floats); d != "" {
		t.Error(d)
	}
	got, _ = c.Family("glass")
	want = &Family{
		Name: "glass", Type: Capacitor, Title: "glass", Grades: []Grade{{0.02, ""}}, Low: 1e-12, High: 1e-9,
		Scatter: Scatter{Temperature: Spread{Value: 140e-6}, Ageing: Ageing{Spread{0, 0.001}, PerThousandHours}},
	}
	if d := cmp.Diff(want, got, floats); d != "" {
		t.Error(d)
	}
	if names := c.Names(); names[len(names)-1] != "glass" || len(names) != len(Embedded().Names())+1 {
		t.Errorf("names end in %s, %d of them", names[len(names)-1], len(names))
	}
}

// An entry without `part` amends: what it does not say stays.
func TestReadAmends(t *testing.T) {
	c := mustParse(t, `
families:
  c0g: {tolerances: [0.5 %, 5 %]}
  x7r: {temperature_coefficient: {value: -100 ppm/K, spread: 300 ppm/K}}
  jfet-opamp: {parameters: {offset: {tolerance: 1 mV}}}
  film-trimmer: {parameters: {low: {tolerance: 5 %}}}
`)
	before, _ := Embedded().Family("c0g")
	want := *before
	want.Grades = []Grade{{0.005, ""}, {0.05, "E24"}}
	got, _ := c.Family("c0g")
	if d := cmp.Diff(&want, got); d != "" {
		t.Error(d)
	}
	x7r, _ := c.Family("x7r")
	if len(x7r.Scatter.Law) != 0 || x7r.Scatter.Temperature != (Spread{-100e-6, 300e-6}) {
		t.Errorf("a slope given leaves the law in place: %+v", x7r.Scatter)
	}
	amp, _ := c.Family("jfet-opamp")
	if p := amp.Parameters[2]; p.Name != "offset" || p.Tolerance != 1e-3 || !p.Absolute || p.Correlation.Value != 0.3 {
		t.Errorf("%+v", p)
	}
	trimmer, _ := c.Family("film-trimmer")
	if p, err := trimmer.FitRange("CT1", 4e-12, 34e-12, 0); err != nil || p.Parameters[0].Tolerance != 0.05 || p.Parameters[1].Tolerance != 0.1 {
		t.Errorf("%+v, %v", p.Parameters, err)
	}
	if again, _ := Embedded().Family("jfet-opamp"); again.Parameters[2].Tolerance != 6e-3 {
		t.Error("an amendment reached the embedded family")
	}
}

// Every fault is found in one pass, with its place and the nearest word.
func TestReadComplains(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"not a family file", "[1, 2]", "own.yaml:1:1"},
		{"unknown key at the top", "familie: {}\nfamilies: {}", "own.yaml:1:1 families"},
		{"no mapping of families", "families: [c0g]", "own.yaml:1:11"},
		{"unknown key", "families: {c0g: {tolerance: [1 %]}}", "own.yaml:1:18 tolerances"},
		{"unknown type", "families: {a: {part: capaciter}}", "own.yaml:1:22 capacitor"},
		{"new family without part", "families: {cog: {values: 1 pF..2 pF}}", "own.yaml:1:12 c0g"},
		{"wrong unit", "families: {c0g: {values: 1 Ω..2 Ω}}", "own.yaml:1:26"},
		{"range from zero", "families: {c0g: {values: 0 pF..2 pF}}", "own.yaml:1:26"},
		{"range below zero", "families: {c0g: {values: -2 pF..-1 pF}}", "own.yaml:1:26"},
		{"range that falls", "families: {c0g: {values: 3 pF..2 pF}}", "own.yaml:1:26"},
		{"tolerance beyond 100 %", "families: {c0g: {tolerances: [101 %]}}", "own.yaml:1:31"},
		{"tolerance twice", "families: {c0g: {tolerances: [1 %, 1 %]}}", "own.yaml:1:36"},
		{"unknown series", "families: {c0g: {series: E42}}", "own.yaml:1:26 E12"},
		{"series too few", "families: {c0g: {series: [E24]}}", "own.yaml:1:26"},
		{"negative spread", "families: {c0g: {temperature_coefficient: {value: 0 ppm/K, spread: -30 ppm/K}}}", "own.yaml:1:68"},
		{"unknown shape", "families: {c0g: {shape: normel}}", "own.yaml:1:25 normal"},
		{"ageing without clock", "families: {c0g: {ageing: {value: 1 %}}}", "own.yaml:1:26"},
		{"correlation above one", "families: {c0g: {correlation: {value: 1.5}}}", "own.yaml:1:39"},
		{"law of one point", "families: {x7r: {temperature_law: [[25, 0 %]]}}", "own.yaml:1:35"},
		{"law out of order", "families: {x7r: {temperature_law: [[25, 0 %], [-55, 15 %]]}}", "own.yaml:1:48"},
		{"law beyond all limits", "families: {x7r: {temperature_law: [[-55, 120 %], [25, 0 %]]}}", "own.yaml:1:42"},
		{"law upside down", "families: {x7r: {temperature_law: [[-55, 15 %, -15 %], [25, 0 %]]}}", "own.yaml:1:42"},
		{"law and slope", "families: {x7r: {temperature_law: [[-55, 15 %], [25, 0 %]], temperature_coefficient: 1 ppm/K}}", "own.yaml:1:35"},
		{"bias law of a resistor", "families: {carbon-film: {bias_law: [[0 %, 0 %], [50 %, -25 %]]}}", "own.yaml:1:36"},
		{"bias law of a trimmer", "families: {film-trimmer: {bias_law: [[0 %, 0 %], [50 %, -25 %]]}}", "own.yaml:1:37"},
		{"bias law of one point", "families: {x7r: {bias_law: [[0 %, 0 %]]}}", "own.yaml:1:28"},
		{"bias law that starts late", "families: {x7r: {bias_law: [[50 %, -25 %], [100 %, -50 %]]}}", "own.yaml:1:29"},
		{"bias law that starts with a change", "families: {x7r: {bias_law: [[0 %, -5 %], [100 %, -50 %]]}}", "own.yaml:1:29"},
		{"bias law out of order", "families: {x7r: {bias_law: [[0 %, 0 %], [50 %, -25 %], [50 %, -50 %]]}}", "own.yaml:1:57"},
		{"bias law of a share below nothing", "families: {x7r: {bias_law: [[0 %, 0 %], [-50 %, -25 %]]}}", "own.yaml:1:42"},
		{"bias law in volts", "families: {x7r: {bias_law: [[0 %, 0 %], [5 V, -25 %]]}}", "own.yaml:1:42"},
		{"bias law that leaves nothing", "families: {x7r: {bias_law: [[0 %, 0 %], [100 %, -100 %, -5 %]]}}", "own.yaml:1:49"},
		{"bias law upside down", "families: {x7r: {bias_law: [[0 %, 0 %], [100 %, -5 %, -50 %]]}}", "own.yaml:1:49"},
		{"bias law of four", "families: {x7r: {bias_law: [[0 %, 0 %], [100 %, -5 %, -4 %, -3 %]]}}", "own.yaml:1:41"},
		{"bias law without a voltage", "families: {a: {part: capacitor, values: 1 nF..1 uF, tolerances: 5 %, bias_law: [[0 %, 0 %], [50 %, -5 %]]}}", "own.yaml:1:15"},
		{"unknown parameter", "families: {jfet-opamp: {parameters: {slow: {value: 1 V/s}}}}", "own.yaml:1:38 slew"},
		{"values of an op-amp", "families: {jfet-opamp: {values: 1 V..2 V}}", "own.yaml:1:33"},
		{"values missing", "families: {a: {part: resistor}}", "own.yaml:1:15"},
		{"tolerances missing", "families: {a: {part: resistor, values: 1 Ω..10 Ω}}", "own.yaml:1:15"},
		{"parameter missing", "families: {a: {part: transistor, parameters: {beta: {value: 100}}}}", "own.yaml:1:15"},
		{"parameter without value", "families: {a: {part: transistor, parameters: {beta: {}, vbe: {value: 0.6 V}, vbe_slope: {value: -2 mV/K}}}}", "own.yaml:1:53"},
		{"regulator with neither", "families: {a: {part: regulator}}", "own.yaml:1:15"},
		{"regulator with both", "families: {fixed-regulator: {parameters: {reference: {value: 1 V}}}}", "own.yaml:1:29"},
		{"tolerances of a reference", "families: {adjustable-regulator: {tolerances: [4 %]}}", "own.yaml:1:34"},
		{"rated voltage", "families: {c0g: {voltage: -5 V}}", "own.yaml:1:27"},
		{"a list for a title", "families: {c0g: {title: [a]}}", "own.yaml:1:25"},
		{"a space in a name", "families: {\"c 0 g\": {part: capacitor}}", "own.yaml:1:12"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, complaints := parse(c.text)
			if len(complaints) == 0 {
				t.Fatal("no complaint")
			}
			got := fmt.Sprintf("%s:%d:%d", complaints[0].File, complaints[0].Line, complaints[0].Column)
			if complaints[0].Nearest != "" {
				got += " " + complaints[0].Nearest
			}
			if got != c.want {
				t.Errorf("at %s, want %s: %v", got, c.want, complaints)
			}
			if complaints[0].Expected == "" && !strings.Contains(complaints[0].Message, "belongs") {
				t.Errorf("does not say what was expected: %v", complaints[0])
			}
		})
	}
}

func TestReadFindsAllFaults(t *testing.T) {
	_, complaints := parse(`
families:
  a: {part: capaciter}
  c0g:
    values: 1 Ω..2 Ω
    tolerances: [1 %, 400 %]
    colour: blue
  jfet-opamp:
    parameters:
      offset: {tolerance: 3 mA}
      slew: {value: fast}
`)
	var lines []string
	for _, c := range complaints {
		lines = append(lines, fmt.Sprint(c.Line))
	}
	if got := strings.Join(lines, " "); got != "3 5 6 7 10 11" {
		t.Errorf("complaints on lines %s, want 3 5 6 7 10 11:\n%v", got, complaints)
	}
}

func TestReadScatter(t *testing.T) {
	before := Scatter{Tolerance: 0.1, Shape: Uniform, Temperature: Spread{1e-6, 2e-6}, Humidity: Spread{1, 2}, Correlation: Correlation{0.1, 0.2}}
	for _, c := range []struct {
		name, text string
		unit       quantity.Unit
		change     func(*Scatter)
	}{
		{"nothing said", "{value: 3}", quantity.Volt, func(*Scatter) {}},
		{"relative", "{tolerance: 5 %}", quantity.Volt, func(s *Scatter) { s.Tolerance = 0.05 }},
		{"relative with a sign", "{tolerance: ±5 %}", quantity.Volt, func(s *Scatter) { s.Tolerance = 0.05 }},
		{"relative in ppm", "{tolerance: 30 ppm}", quantity.Hertz, func(s *Scatter) { s.Tolerance = 30e-6 }},
		{"absolute", "{tolerance: 3 mV}", quantity.Volt, func(s *Scatter) { s.Tolerance, s.Absolute = 3e-3, true }},
		{"absolute plain number", "{tolerance: 20}", quantity.One, func(s *Scatter) { s.Tolerance, s.Absolute = 20, true }},
		{"shape", "{shape: bimodal}", quantity.Volt, func(s *Scatter) { s.Shape = Bimodal }},
		{"coefficient alone", "{temperature_coefficient: -200 ppm/K}", quantity.Volt, func(s *Scatter) { s.Temperature = Spread{Value: -200e-6} }},
		{"coefficient and spread", "{temperature_coefficient: {value: -200 ppm/K, spread: 50 ppm/K}}", quantity.Volt, func(s *Scatter) { s.Temperature = Spread{-200e-6, 50e-6} }},
		{"humidity", "{humidity_coefficient: {value: 70 ppm/% RH, spread: 30 ppm/% RH}}", quantity.Volt, func(s *Scatter) { s.Humidity = Spread{70e-4, 30e-4} }},
		{"ageing", "{ageing: {value: 0.1 %, spread: 0.2 %, per: decade}}", quantity.Volt, func(s *Scatter) { s.Ageing = Ageing{Spread{1e-3, 2e-3}, PerDecade} }},
		{"correlation", "{correlation: {value: 0.5, temperature: 0.8}}", quantity.Volt, func(s *Scatter) { s.Correlation = Correlation{0.5, 0.8} }},
		{"law, symmetric", "{temperature_law: [[-55, -15 %], [25, 0 %], [125, -15 %]]}", quantity.Farad, func(s *Scatter) {
			s.Temperature, s.Law = Spread{}, []LawPoint{{-55, -0.15, 0.15}, {25, 0, 0}, {125, -0.15, 0.15}}
		}},
		{"law, lopsided", "{temperature_law: [[-30 °C, -82 %, 22 %], [25 °C, 0 %]]}", quantity.Farad, func(s *Scatter) {
			s.Temperature, s.Law = Spread{}, []LawPoint{{-30, -0.82, 0.22}, {25, 0, 0}}
		}},
	} {
		t.Run(c.name, func(t *testing.T) {
			n, complaints := document.Parse("part.yaml", []byte(c.text))
			if len(complaints) > 0 {
				t.Fatal(complaints)
			}
			got, want := before, before
			c.change(&want)
			var f document.Faults
			ReadScatter(&f, n, c.unit, &got)
			if list := f.List(); len(list) > 0 {
				t.Fatal(list)
			}
			if d := cmp.Diff(want, got, floats); d != "" {
				t.Error(d)
			}
		})
	}
}

// A tolerance says what it may be written in.
func TestToleranceComplaints(t *testing.T) {
	for _, text := range []string{"3 mA", "101 %", "-5 %", "-3 mV", "[5 %]", "5", "five"} {
		n, _ := document.Parse("part.yaml", []byte("{tolerance: "+text+"}"))
		var f document.Faults
		var s Scatter
		ReadScatter(&f, n, quantity.Volt, &s)
		list := f.List()
		if len(list) != 1 || list[0].Column != 13 || !strings.Contains(list[0].Expected, "%") {
			t.Errorf("%s: %v", text, list)
		}
		if d := cmp.Diff(Scatter{}, s); d != "" {
			t.Errorf("%s is read all the same: %s", text, d)
		}
	}
}

// Grades come tightest first, however a file lists them, each with its series.
func TestReadSortsGrades(t *testing.T) {
	c := mustParse(t, "families: {glass: {part: capacitor, tolerances: [10 %, 1 %, 5 %], series: [E12, E96, E24], values: 1 pF..1 nF}}")
	f, _ := c.Family("glass")
	if d := cmp.Diff([]Grade{{0.01, "E96"}, {0.05, "E24"}, {0.10, "E12"}}, f.Grades, floats); d != "" {
		t.Error(d)
	}
}

// A series alone amends every grade, and the embedded family keeps its own.
func TestReadAmendsSeries(t *testing.T) {
	f, _ := mustParse(t, "families: {c0g: {series: E6}}").Family("c0g")
	for _, g := range f.Grades {
		if g.Series != "E6" {
			t.Errorf("%+v", g)
		}
	}
	if again, _ := Embedded().Family("c0g"); again.Grades[0].Series != "E24" {
		t.Error("an amendment reached the embedded family")
	}
}

// A trimmer's end that says nothing of its tolerance has the grade's.
func TestReadTrimmerEndWithoutTolerance(t *testing.T) {
	c := mustParse(t, `families: {piston: {part: trimmer-capacitor, tolerances: [5 %, 10 %], values: 1 pF..30 pF,
  temperature_coefficient: 50 ppm/K, parameters: {low: {temperature_coefficient: 90 ppm/K}}}}`)
	f, _ := c.Family("piston")
	p, err := f.FitRange("CT1", 1e-12, 10e-12, 0.05)
	if err != nil {
		t.Fatal(err)
	}
	want := []Parameter{
		{"low", quantity.Farad, 1e-12, Scatter{Tolerance: 0.05, Temperature: Spread{Value: 90e-6}}},
		{"high", quantity.Farad, 10e-12, Scatter{Tolerance: 0.05, Temperature: Spread{Value: 50e-6}}},
	}
	if d := cmp.Diff(want, p.Parameters, floats); d != "" {
		t.Error(d)
	}
}

// FuzzRead holds that a family file of whatever kind is either read or
// complained of, and that what was read can be placed.
func FuzzRead(f *testing.F) {
	f.Add("families: {polyester: {part: capacitor, tolerances: [5 %, 10 %], values: 1 nF..10 uF, series: E12}}")
	f.Add("families: {x7r: {temperature_law: [[-55, -15 %], [25, 0 %]]}, jfet-opamp: {parameters: {offset: {tolerance: 1 mV}}}}")
	f.Add("families: {x7r: {bias_law: [[0 %, 0 %], [50 %, -40 %, -10 %]], voltage: 16 V}}")
	f.Add("families: {fixed-regulator: {parameters: {reference: {value: 1 V}}}}")
	f.Add("families: {a: {part: trimmer-resistor, tolerances: 10 %, values: 1 Ω..1 kΩ, parameters: {low: {tolerance: 2 Ω}}}}")
	f.Fuzz(func(t *testing.T, text string) {
		c, complaints := parse(text)
		if len(complaints) > 0 {
			return
		}
		for _, name := range c.Names() {
			family, _ := c.Family(name)
			p := fitted(t, family)
			if len(p.Parameters) == 0 {
				t.Errorf("%s has no figures", name)
			}
		}
	})
}
