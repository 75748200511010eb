package stage

import (
	"maps"
	"math"
	"strings"
	"testing"

	"batchwright/bom/quantity"
	"batchwright/tolerance/tape"
)

// circuit is a kind's equations as a program of its own: every name that a
// build would supply is an input.
type circuit struct {
	kind    *Kind
	inputs  []string
	outputs []string
	program *tape.Program
	frame   *tape.Frame
}

// newCircuit lowers every equation of a kind.
func newCircuit(t testing.TB, name string, lanes int) *circuit {
	t.Helper()
	kind, ok := Find(name)
	if !ok {
		t.Fatalf("no kind %q", name)
	}
	c := &circuit{kind: kind}
	g := tape.NewGraph()
	refs := map[string]tape.Ref{}
	scope := kind.Scope()
	for _, n := range scope.Names() {
		if _, given := scope.given[n]; given {
			refs[n] = g.Input()
			c.inputs = append(c.inputs, n)
		}
	}
	lines := map[string]int{}
	for i, e := range kind.EquationList() {
		lines[e.Name] = i
	}
	var find func(string) (tape.Ref, bool)
	find = func(n string) (tape.Ref, bool) {
		if r, ok := refs[n]; ok {
			return r, true
		}
		i, ok := lines[n]
		if !ok {
			return 0, false
		}
		r, err := g.Lower(kind.EquationList()[i].Expression, find)
		if err != nil {
			t.Fatalf("%s: %s: %v", name, n, err)
		}
		refs[n] = r
		return r, true
	}
	var out []tape.Ref
	for _, e := range kind.EquationList() {
		r, err := g.Lower(e.Expression, find) // a setting hides its equation, so not by name
		if err != nil {
			t.Fatalf("%s: %s: %v", name, e.Name, err)
		}
		out = append(out, r)
		c.outputs = append(c.outputs, e.Name)
	}
	c.program = g.Program(out...)
	c.frame = c.program.NewFrame(lanes)
	return c
}

// fill is the value of every input: what is given, else a setting's default,
// 25 °C, `fitted` by whether any figure of the part is given, else 0.
func (c *circuit) fill(t testing.TB, given map[string]float64) []float64 {
	t.Helper()
	all := map[string]float64{"temperature": 298.15}
	for _, s := range c.kind.AllSettings() {
		if s.Default == "" {
			if _, ok := given[s.Name]; !ok {
				t.Fatalf("%s: setting %s has no default and is not given", c.kind.Name, s.Name)
			}
			continue
		}
		q, err := quantity.Parse(s.Default, s.Unit)
		if err != nil {
			t.Fatalf("%s: default of %s: %v", c.kind.Name, s.Name, err)
		}
		all[s.Name] = q.Value
	}
	for name := range given {
		head, _, _ := strings.Cut(name, ".")
		all[head+".fitted"] = 1
	}
	maps.Copy(all, given)
	values := make([]float64, len(c.inputs))
	for i, n := range c.inputs {
		values[i] = all[n]
	}
	for name := range given {
		if !contains(c.inputs, name) {
			t.Fatalf("%s: %q is not one of its inputs %v", c.kind.Name, name, c.inputs)
		}
	}
	return values
}

func contains(list []string, word string) bool {
	for _, w := range list {
		if w == word {
			return true
		}
	}
	return false
}

// at evaluates one unit.
func (c *circuit) at(t testing.TB, given map[string]float64) map[string]float64 {
	t.Helper()
	in := columns(c.fill(t, given))
	dst := columns(make([]float64, len(c.outputs)))
	c.program.Values(dst, in, c.frame)
	out := map[string]float64{}
	for i, n := range c.outputs {
		out[n] = dst[i][0]
	}
	return out
}

func columns(values []float64) [][]float64 {
	out := make([][]float64, len(values))
	for i, v := range values {
		out[i] = []float64{v}
	}
	return out
}

// evaluate gives the value of every equation of a kind for one unit.
func evaluate(t testing.TB, kind string, given map[string]float64) map[string]float64 {
	t.Helper()
	return newCircuit(t, kind, 1).at(t, given)
}

// with is a copy of given with some values changed: name, value, name, value…
func with(given map[string]float64, changes ...any) map[string]float64 {
	out := maps.Clone(given)
	for i := 0; i < len(changes); i += 2 {
		switch v := changes[i+1].(type) {
		case float64:
			out[changes[i].(string)] = v
		case int:
			out[changes[i].(string)] = float64(v)
		}
	}
	return out
}

// scaled is a copy of given with the named values multiplied.
func scaled(given map[string]float64, by float64, names ...string) map[string]float64 {
	out := maps.Clone(given)
	for _, n := range names {
		out[n] *= by
	}
	return out
}

// near fails unless got is want within a relative tolerance (of want; absolute
// where want is 0).
func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	size := math.Abs(want)
	if size == 0 {
		size = 1
	}
	if !(math.Abs(got-want) <= tolerance*size) {
		t.Errorf("%s = %.12g, want %.12g within %g", what, got, want, tolerance)
	}
}

// examples are circuits of plausible values (invented), each in its working
// range, for the tests that need any circuit at all.
var examples = map[string]map[string]float64{
	"tuned-tank":    {"coil": 1e-3, "tank": 220e-12, "tuner": 12e-12, "stray": 8e-12},
	"colpitts":      {"coil": 1.8e-3, "upper": 220e-12, "lower": 220e-12, "tuner": 15e-12, "stray": 8e-12},
	"clapp":         {"coil": 1.8e-3, "upper": 1e-9, "lower": 1.5e-9, "series": 120e-12, "tuner": 15e-12, "stray": 8e-12},
	"hartley":       {"coil_a": 1e-3, "coil_b": 220e-6, "tank": 150e-12, "tuner": 15e-12, "stray": 8e-12, "coupling": 0.3},
	"wien-bridge":   {"series_r": 10e3, "series_c": 10e-9, "shunt_r": 12e3, "shunt_c": 8.2e-9, "stray": 15e-12},
	"phase-shift":   {"r1": 10e3, "r2": 12e3, "r3": 15e3, "c1": 1.2e-9, "c2": 1e-9, "c3": 680e-12, "stray": 12e-12},
	"schmitt-rc":    {"timing_r": 100e3, "timing_c": 1e-9, "stray": 10e-12, "supply": 5, "upper_threshold": 0.58, "lower_threshold": 0.37},
	"timer-astable": {"charge_r": 2.2e3, "discharge_r": 4.7e3, "timing_c": 22e-9, "stray": 20e-12},
	"crystal": {"crystal.frequency": 4e6, "crystal.motional_c": 15e-15, "crystal.shunt_c": 4e-12,
		"crystal.cubic_a1": -0.2e-6, "crystal.cubic_a2": 0.4e-9, "crystal.cubic_a3": 0.11e-9,
		"load_a": 33e-12, "load_b": 22e-12, "tuner": 15e-12, "stray": 3e-12, "temperature": 308.15},
	"multiplier": {"carrier.level": 1, "carrier.frequency": 331e3, "carrier.tank_q": 80,
		"signal.level": 0.8, "signal.frequency": 330.2e3, "couple_carrier": 10e-12, "couple_signal": 12e-12},
	"junction-mixer": {"base_upper": 100e3, "base_lower": 39e3, "bias": 5e3, "emitter": 4.7e3, "load": 10e3,
		"transistor.beta": 200, "transistor.vbe": 0.65, "transistor.vbe_slope": -0.002,
		"couple_carrier": 22e-12, "couple_signal": 22e-12, "positive": 12, "negative": -12,
		"carrier.level": 1, "carrier.frequency": 331e3, "carrier.tank_q": 80,
		"signal.level": 0.8, "signal.frequency": 330.2e3},
	"opamp-noninverting": {"feedback": 47e3, "ground": 10e3, "gain_trim": 1e3,
		"opamp.gbw": 3e6, "opamp.slew": 13e6, "opamp.offset": 1e-3, "opamp.headroom": 1.5,
		"positive": 12, "negative": -12, "in.level": 0.2, "in.frequency": 331e3,
		"in.second_level": 0.15, "in.second_frequency": 330e3, "in.tone_level": 0.02, "in.tone_frequency": 1e3, "in.dc": 0.05},
	"envelope-detector": {"diode.drop": 0.6, "diode.drop_slope": -0.002, "diode.ideality": 1.8, "load": 100e3, "hold": 330e-12,
		"in.level": 2, "in.second_level": 0.8, "in.frequency": 331e3, "in.second_frequency": 330e3, "in.tone_frequency": 1e3},
	"rc-lowpass": {"series": 10e3, "shunt": 4.7e-9, "load": 220e3, "in.source_resistance": 3e3, "in.dc": 1.5,
		"in.level": 0.05, "in.frequency": 331e3, "in.second_level": 0.04, "in.second_frequency": 330e3,
		"in.tone_level": 0.7, "in.tone_frequency": 1e3},
	"coupling": {"capacitor": 470e-9, "load": 10e3, "in.source_resistance": 3e3, "in.dc": 1.5,
		"in.level": 0.05, "in.frequency": 331e3, "in.second_level": 0.04, "in.second_frequency": 330e3,
		"in.tone_level": 0.7, "in.tone_frequency": 1e3},
	"rc-highpass": {"series": 4.7e-9, "shunt": 47e3, "load": 220e3, "in.source_resistance": 3e3, "in.dc": 1.5,
		"in.level": 0.05, "in.frequency": 331e3, "in.second_level": 0.04, "in.second_frequency": 330e3,
		"in.tone_level": 0.7, "in.tone_frequency": 1e3},
	"sallen-key-lowpass": {"r1": 10e3, "r2": 12e3, "c1": 6.8e-9, "c2": 3.3e-9, "in.source_resistance": 3e3, "in.dc": 1.5,
		"in.level": 0.05, "in.frequency": 331e3, "in.second_level": 0.04, "in.second_frequency": 330e3,
		"in.tone_level": 0.7, "in.tone_frequency": 1e3},
	"lc-lowpass": {"coil": 10e-3, "shunt": 22e-9, "load": 1e3, "in.source_resistance": 50, "in.dc": 1.5,
		"in.level": 0.05, "in.frequency": 331e3, "in.second_level": 0.04, "in.second_frequency": 330e3,
		"in.tone_level": 0.7, "in.tone_frequency": 1e3},
	"level-tank": {"coil": 1e-3, "tank": 200e-12, "tuner": 20e-12, "damping": 47e3, "stray": 8e-12, "load": 470e3,
		"in.source_resistance": 1e3, "in.level": 1, "in.frequency": 340e3, "in.second_level": 0.3, "in.second_frequency": 320e3,
		"in.tone_level": 0.2, "in.tone_frequency": 20e3, "in.dc": 0.5},
	"shunt-zener": {"series": 330, "zener.voltage": 9.1, "zener.resistance": 12, "zener.voltage_slope": 5e-3,
		"input": 15, "load_current": 5e-3, "test_current": 5e-3, "temperature": 303.15},
	"divider":         {"upper": 12e3, "lower": 4.7e3, "input": 12, "load": 100e3},
	"fixed-regulator": {"regulator.output": 12, "regulator.dropout": 2, "regulator.output_slope": -0.001, "input_c": 330e-9, "output_c": 100e-9, "input": 18},
	"adjustable-regulator": {"regulator.reference": 1.25, "regulator.adjust_current": 50e-6, "regulator.dropout": 2,
		"regulator.output_slope": -5e-5, "upper": 240, "lower": 1.8e3, "trim": 250, "input": 18},
	"rail-decoupling": {"series": 100, "capacitor": 10e-6, "in.frequency": 331e3, "in.level": 1e-3, "in.dc": 12},
}
