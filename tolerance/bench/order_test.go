package bench_test

import (
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// feeds says whether a stage takes something from another, near or far.
func feeds(b *build.Build, from, to string) bool {
	for _, name := range b.Stage(to).Needs() {
		if b.Stage(name) != nil && (name == from || feeds(b, from, name)) {
			return true
		}
	}
	return false
}

// The three examples, as they stand and with their stages in thirty other
// orders: everything once, a reading after the trims that move it, a supply's
// reading before those of all it feeds, and a reading that no trim holds up
// before those of the stages after it.
func TestSuppliesBeforePowerGoesFurther(t *testing.T) {
	makesRail := []string{"fixed-regulator", "adjustable-regulator", "shunt-zener", "divider", "rail-decoupling"}
	for _, name := range []string{"lantern", "nightowl", "shoreline"} {
		text, err := data.Examples.ReadFile("examples/" + name + ".yaml")
		if err != nil {
			t.Fatal(err)
		}
		for seed := range uint64(31) {
			b, err := build.Read(name, text, nil)
			if err != nil {
				t.Fatal(err)
			}
			if seed > 0 {
				rand.New(rand.NewPCG(seed, 0)).Shuffle(len(b.Stages), func(i, j int) { b.Stages[i], b.Stages[j] = b.Stages[j], b.Stages[i] })
			}
			m, err := b.Compile()
			if err != nil {
				t.Fatal(err)
			}
			s := bench.NewSheet(m, &spread.Report{Readings: make([]spread.ReadingReport, len(m.Points)), Samples: make([]spread.SampleReport, len(m.Samples))})
			if len(s.Readings) != len(m.Points) || len(s.Turns) != len(b.Trims) || len(s.Readings) == 0 {
				t.Fatalf("%s: %d of %d readings, %d of %d trims", name, len(s.Readings), len(m.Points), len(s.Turns), len(b.Trims))
			}
			step, trims := map[string]int{}, map[string][]int{}
			for _, r := range s.Readings {
				step[r.Point] = r.Step
			}
			for _, p := range m.Points {
				trims[p.Stage.Name+"."+p.Stage.Kind.Points[p.Index].Name] = p.Trims
			}
			for i, p := range m.Points {
				first := p.Stage.Name + "." + p.Stage.Kind.Points[p.Index].Name
				for _, turn := range p.Trims {
					if s.Turns[turn].Step > step[first] {
						t.Errorf("%s, order %d: %s is read before %s is turned", name, seed, first, s.Turns[turn].Turn)
					}
				}
				for _, q := range m.Points[i+1:] {
					first, second, from, to := first, q.Stage.Name+"."+q.Stage.Kind.Points[q.Index].Name, p.Stage, q.Stage
					if feeds(b, to.Name, from.Name) {
						first, second, from, to = second, first, to, from
					}
					if !feeds(b, from.Name, to.Name) || !slices.Contains(makesRail, from.Kind.Name) && len(trims[first]) > 0 {
						continue
					}
					if step[first] > step[second] {
						t.Errorf("%s, order %d: %s is read after %s", name, seed, first, second)
					}
				}
			}
		}
	}
}

// steps are the points and trims of a sheet in order.
func steps(s bench.Sheet) string {
	list := make([]string, len(s.Readings)+len(s.Turns))
	for _, r := range s.Readings {
		list[r.Step-1] = r.Point
	}
	for _, x := range s.Turns {
		list[x.Step-1] = "turn " + x.Turn
	}
	return strings.Join(list, ", ")
}

// A supply that stands last in the file and needs nothing is read first.
func TestSuppliesAsSoonAsTheyCan(t *testing.T) {
	last := `  spare:
    kind: divider
    settings: {input: supply}
    parts:
      upper: {ref: R8, value: 1 MΩ}
      lower: {ref: R9, value: 1 MΩ}
trims:`
	s := measured(t, 100, "  - {name: half, output: half.voltage, at: [bench], between: [5 V, 7 V]}\n", "trims:", last)
	if got := steps(s); !strings.HasPrefix(got, "half.voltage, spare.voltage, a.level") {
		t.Errorf("got %s", got)
	}
}

// The drop in a rail waits for the trim of what draws the current, and with it
// a stage behind the rail that the current does not move.
func TestFedStagesWaitForTheirSupply(t *testing.T) {
	b, err := build.Read("rail.yaml", []byte(`
build: rail
units: 2
conditions: {bench: {temperature: 25 °C}}
stages:
  sink:
    kind: formula
    parts: {turn: {part: trimmer-resistor, ref: RV1, value: 0..1 kΩ}}
    outputs: {current: {expression: 1*volt/(turn + 500*ohm), unit: A}}
  rail:
    kind: rail-decoupling
    settings: {load_current: sink.current}
    parts:
      series: {ref: R1, value: 100 Ω}
      capacitor: {ref: C1, value: 10 uF}
  behind:
    kind: coupling
    in: rail
    settings: {load: 10 kΩ}
    parts: {capacitor: {ref: C2, value: 100 nF}}
  late:
    kind: formula
    outputs: {seen: {expression: sink.current, unit: A}}
trims: [{turn: sink.turn, output: late.seen, to: 1 mA, within: 1 uA}]
`), nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	s := bench.NewSheet(m, &spread.Report{Readings: make([]spread.ReadingReport, len(m.Points))})
	if got, want := steps(s), "turn sink.turn, rail.drop, behind.tone_level"; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}
