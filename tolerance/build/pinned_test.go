package build_test

import (
	"math"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// TestPinned leaves the first example's tuner, 4 to 20 pF, at a quarter of its
// travel: the tank has 4 + 16/4 = 8 pF of it. What the other trims do stays, and
// so does the build itself.
func TestPinned(t *testing.T) {
	text, err := data.Examples.ReadFile("examples/lantern.yaml")
	if err != nil {
		t.Fatal(err)
	}
	b, err := build.Read("lantern.yaml", text, nil)
	if err != nil {
		t.Fatal(err)
	}
	trims, targets := len(b.Trims), len(b.Targets)
	pinned := b.Pinned(1, 0.25)
	if pinned.TrimOf("fixed", "tuner") >= 0 || len(pinned.Trims) != trims-1 || pinned.Trims[1] != b.Trims[2] {
		t.Errorf("trims %v", pinned.Trims)
	}
	if len(b.Trims) != trims || len(b.Targets) != targets || b.Place("fixed.tuner").Position != 0.5 {
		t.Error("the original has changed")
	}
	// The target on its reach is gone, the later ones point where they did.
	names := map[string]string{}
	for _, x := range pinned.Targets {
		if x.Trim >= 0 {
			names[x.Name] = pinned.Trims[x.Trim].Role
		}
	}
	if len(pinned.Targets) != targets-1 || names["every unit biases"] != "bias" || names["every unit reaches its level"] != "gain_trim" {
		t.Errorf("targets %v", names)
	}
	m, err := pinned.Compile()
	if err != nil {
		t.Fatal(err)
	}
	low, high := b.Place("fixed.tuner").Part.Parameters[0].Value, b.Place("fixed.tuner").Part.Parameters[1].Value
	// 220 pF twice in series, 7 pF of stray, what is left of the tuner; at 27 °C
	// temperature coefficients move it by less than 2 parts in 1000.
	c := 110e-12 + 7e-12 + low + (high-low)/4
	want := 1 / (2 * math.Pi * math.Sqrt(1.8e-3*c))
	for _, o := range m.Outputs {
		if o.Name.String() == "fixed.frequency" && o.Condition == 0 {
			if got := spread.Linearise(m, o.Node).Values[0]; math.Abs(got/want-1) > 2e-3 {
				t.Errorf("frequency %v, want %v", got, want)
			}
		}
	}
}
