package bench_test

import (
	"math/rand/v2"
	"slices"
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
