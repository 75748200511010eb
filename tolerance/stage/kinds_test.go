package stage

import (
	"regexp"
	"slices"
	"strings"
	"testing"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
)

// fixedKinds are the kinds with equations; the test of the table asserts how many.
func fixedKinds() []*Kind {
	return slices.DeleteFunc(slices.Clone(table), func(k *Kind) bool { return k.Free })
}

func TestTableOfKinds(t *testing.T) {
	want := []string{"colpitts", "clapp", "hartley", "tuned-tank",
		"wien-bridge", "phase-shift", "schmitt-rc", "timer-astable", "crystal",
		"multiplier", "junction-mixer", "gate-mixer", "diode-ring",
		"opamp-noninverting", "opamp-inverting", "common-emitter", "emitter-follower", "power-amp",
		"envelope-detector", "level-tank", "rc-lowpass", "rc-highpass", "sallen-key-lowpass", "lc-lowpass", "coupling",
		"divider", "shunt-zener", "fixed-regulator",
		"adjustable-regulator", "rail-decoupling", "formula"}
	if got := Names(); !slices.Equal(got, want) {
		t.Errorf("Names() = %v, want %v", got, want)
	}
	for _, name := range want {
		if k, ok := Find(name); !ok || k.Name != name {
			t.Errorf("Find(%q) = %v, %v", name, k, ok)
		}
	}
	if k, ok := Find("colpits"); ok {
		t.Errorf("Find of a misspelt name found %s", k.Name)
	}
	for _, k := range fixedKinds() {
		if _, ok := examples[k.Name]; !ok {
			t.Errorf("no example circuit of %s", k.Name)
		}
	}
}

// Every equation adds up in its units: no volts to ohms, no bare number where
// a unit is needed, no circle, no name that nothing stands for.
func TestEquationsHaveConsistentDimensions(t *testing.T) {
	for _, k := range fixedKinds() {
		t.Run(k.Name, func(t *testing.T) {
			if len(k.EquationList()) == 0 {
				t.Fatal("no equations")
			}
			for name, mistakes := range k.Scope().Mistakes() {
				for _, m := range mistakes {
					t.Errorf("%s: column %d: %+v", name, m.Offset, m)
				}
			}
		})
	}
}

func TestOutputsFieldsAndPointsExistInTheirUnits(t *testing.T) {
	for _, k := range fixedKinds() {
		t.Run(k.Name, func(t *testing.T) {
			s := k.Scope()
			for _, o := range k.Outputs {
				if d, ok := s.Dimension(o.Name); !ok || d != o.Unit.Dimension {
					t.Errorf("output %s in %v: %v, %v", o.Name, o.Unit.Symbol, d, ok)
				}
			}
			for _, f := range Fields {
				if d, ok := s.Dimension(f.Name); ok && d != f.Unit.Dimension {
					t.Errorf("field %s in %v: %v, %v", f.Name, f.Unit.Symbol, d, ok)
				}
			}
			checkPoints(t, k)
		})
	}
}

// readings are what a test point may show, in which unit, with which instrument.
var readings = map[string]struct {
	unit       quantity.Unit
	instrument string
}{
	"dc voltage":   {quantity.Volt, "dmm"},
	"peak voltage": {quantity.Volt, "scope"},
	"frequency":    {quantity.Hertz, "counter"},
}

func checkPoints(t *testing.T, k *Kind) {
	t.Helper()
	for _, p := range k.Points {
		i := slices.IndexFunc(k.Outputs, func(o Output) bool { return o.Name == p.Name })
		if i < 0 {
			t.Errorf("point %s is no output", p.Name)
			continue
		}
		r, ok := readings[p.Reading]
		if !ok || r.instrument != p.Instrument || k.Outputs[i].Unit.Dimension != r.unit.Dimension {
			t.Errorf("point %+v: reading, instrument and unit do not go together", p)
		}
		if p.At == "" {
			t.Errorf("point %s does not say where the probe goes", p.Name)
		}
		for _, load := range []string{p.Conductance, p.Capacitance} {
			if load != "" && !names(k.Equations, load) {
				t.Errorf("point %s: load %s is in no equation", p.Name, load)
			}
		}
	}
}

// names says whether a word stands in a text as a name of its own.
func names(text, word string) bool {
	return regexp.MustCompile(`(^|[^\w.])` + regexp.QuoteMeta(word) + `\b`).MatchString(text)
}

func TestKindsDescribeThemselves(t *testing.T) {
	for _, k := range table {
		t.Run(k.Name, func(t *testing.T) {
			for what, text := range map[string]string{"summary": k.Summary, "limits": k.Limits, "source": k.Source} {
				if text == "" || strings.Contains(text, "\n") {
					t.Errorf("%s is empty or more than a line: %q", what, text)
				}
			}
			for _, r := range k.Roles {
				if r.Summary == "" || !slices.Contains(part.Types(), r.Type) {
					t.Errorf("role %+v: no summary, or no such type", r)
				}
				bought := r.Name == "input_c" || r.Name == "output_c" // a regulator's capacitors
				if !bought && !names(k.Equations, r.Name) {
					t.Errorf("role %s is in no equation", r.Name)
				}
			}
			for _, s := range k.Settings {
				if s.Summary == "" || !names(k.Equations, s.Name) && s.Name != "rise" {
					t.Errorf("setting %s has no summary or is in no equation", s.Name)
				}
			}
			for _, i := range k.Inputs {
				if i.Summary == "" || !strings.Contains(k.Equations, i.Name+".") {
					t.Errorf("input %s has no summary or is in no equation", i.Name)
				}
			}
			if len(k.Inputs) == 1 && k.Inputs[0].Name != "in" {
				t.Errorf("the only input is named %s, want in", k.Inputs[0].Name)
			}
		})
	}
}

func TestSettingsDefaultsParse(t *testing.T) {
	count := 0
	for _, k := range table {
		for _, s := range k.AllSettings() {
			if s.Default == "" {
				continue
			}
			count++
			if _, err := quantity.Parse(s.Default, s.Unit); err != nil {
				t.Errorf("%s.%s: %v", k.Name, s.Name, err)
			}
		}
		all := k.AllSettings()
		if last := all[len(all)-1]; last.Name != "rise" {
			t.Errorf("%s: last setting is %s, want rise", k.Name, last.Name)
		}
	}
	if count < 20 {
		t.Errorf("only %d defaults seen", count)
	}
}

// A name means one thing: role, setting, input, load, equation or constant.
func TestNamesAreUnique(t *testing.T) {
	for _, k := range table {
		t.Run(k.Name, func(t *testing.T) {
			seen := map[string]string{}
			add := func(what, name string) {
				if other, ok := seen[name]; ok && name != "level" { // a setting handed on
					t.Errorf("%s is both %s and %s", name, other, what)
				}
				if formula.Reserved(name) {
					t.Errorf("%s %s is a word of the language", what, name)
				}
				seen[name] = what
			}
			for _, r := range k.Roles {
				add("a role", r.Name)
			}
			for _, s := range k.AllSettings() {
				add("a setting", s.Name)
			}
			for _, i := range k.Inputs {
				add("an input", i.Name)
			}
			for _, e := range k.EquationList() {
				add("an equation", e.Name)
			}
			loads := map[string]bool{}
			for _, p := range k.Points {
				loads[p.Conductance], loads[p.Capacitance] = true, true
			}
			delete(loads, "")
			for l := range loads {
				add("a load", l)
			}
			outputs := map[string]bool{}
			for _, o := range k.Outputs {
				if outputs[o.Name] {
					t.Errorf("output %s twice", o.Name)
				}
				outputs[o.Name] = true
			}
		})
	}
}

// Without its optional parts, inputs and instruments a stage still has every
// output, and with them too.
func TestExamplesEvaluateWithAndWithoutOptionalParts(t *testing.T) {
	for _, k := range fixedKinds() {
		t.Run(k.Name, func(t *testing.T) {
			c := newCircuit(t, k.Name, 1)
			full := with(examples[k.Name])
			bare := with(full)
			for _, r := range k.Roles {
				if r.Optional {
					delete(bare, r.Name)
				}
			}
			for which, given := range map[string]map[string]float64{"full": full, "bare": bare} {
				for name, v := range c.at(t, given) {
					if v != v || v-v != 0 {
						t.Errorf("%s: %s = %g", which, name, v)
					}
				}
			}
		})
	}
}

func TestFieldsHandedOn(t *testing.T) {
	tests := map[string]string{ // the fields each kind hands on
		"colpitts":             "frequency level tank_q",
		"tuned-tank":           "frequency level tank_q",
		"clapp":                "frequency level tank_q",
		"hartley":              "frequency level tank_q",
		"wien-bridge":          "frequency level",
		"phase-shift":          "frequency level",
		"schmitt-rc":           "frequency level",
		"timer-astable":        "frequency level",
		"crystal":              "frequency level tank_q",
		"multiplier":           "frequency level second_frequency second_level tone_frequency tone_level dc",
		"junction-mixer":       "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance",
		"gate-mixer":           "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance",
		"diode-ring":           "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance",
		"opamp-inverting":      "frequency level second_frequency second_level tone_frequency tone_level dc tank_q",
		"common-emitter":       "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance tank_q",
		"emitter-follower":     "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance tank_q",
		"power-amp":            "frequency level second_frequency second_level tone_frequency tone_level dc tank_q",
		"opamp-noninverting":   "frequency level second_frequency second_level tone_frequency tone_level dc tank_q",
		"envelope-detector":    "frequency level tone_frequency tone_level dc source_resistance",
		"rc-lowpass":           "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance tank_q",
		"coupling":             "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance tank_q",
		"level-tank":           "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance tank_q",
		"rc-highpass":          "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance tank_q",
		"sallen-key-lowpass":   "frequency level second_frequency second_level tone_frequency tone_level dc tank_q",
		"lc-lowpass":           "frequency level second_frequency second_level tone_frequency tone_level dc source_resistance tank_q",
		"divider":              "dc source_resistance",
		"shunt-zener":          "dc source_resistance",
		"fixed-regulator":      "dc",
		"adjustable-regulator": "dc",
		"rail-decoupling":      "frequency level dc source_resistance",
		"formula":              "",
	}
	for _, k := range table {
		var got []string
		for _, f := range Fields {
			if slices.ContainsFunc(k.EquationList(), func(e formula.Equation) bool { return e.Name == f.Name }) {
				got = append(got, f.Name)
			}
		}
		if s := strings.Join(got, " "); s != tests[k.Name] {
			t.Errorf("%s hands on %q, want %q", k.Name, s, tests[k.Name])
		}
	}
}

// A circle and an unknown name are found, each at the equation that has it.
func TestScopeFindsMistakes(t *testing.T) {
	tests := map[string]struct{ equations, wrong string }{
		"circle":  {"a = b + 1\nb = a*2\n", "a b"},
		"unknown": {"a = pi*wrong\nb = 2*pi\n", "a"},
		"units":   {"a = temperature + 1*volt\nb = temperature\n", "a"},
		"none":    {"a = 2*b\nb = 3*c\nc = 4\n", ""},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			k := Kind{Name: name, Equations: tt.equations}
			var wrong []string
			for e := range k.Scope().Mistakes() {
				wrong = append(wrong, e)
			}
			slices.Sort(wrong)
			if got := strings.Join(wrong, " "); got != tt.wrong {
				t.Errorf("mistakes at %q, want %q", got, tt.wrong)
			}
		})
	}
}
