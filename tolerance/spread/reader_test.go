package spread

import (
	"testing"

	"batchwright/data"
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
)

// TestReader holds columns of readings against the simulation's own sums: the
// same units, read the same, and trims that end where it says.
func TestReader(t *testing.T) {
	text, err := data.Examples.ReadFile("examples/lantern.yaml")
	if err != nil {
		t.Fatal(err)
	}
	b, err := build.Read("lantern.yaml", text, nil)
	if err != nil {
		t.Fatal(err)
	}
	b.Trims[0].To, b.Trims[1].To = -2.3, 8000 // out of reach for some
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	const units = 24 * 20
	r := NewReader(m, 3)
	source := scatter.Source{Seed: 5, Units: m.Build.Units}
	got := r.Read(r.Draw(source, m.Inputs, units), units)
	n := newNodes(m, []int{3}, nil, true)
	c := n.newColumns(units)
	for _, i := range n.program.Inputs() {
		source.Fill(c.in[i], m.Inputs[i].Column, 0)
	}
	n.program.Values(c.out, c.in, c.frame)
	count := map[int8]int{}
	for u := range units {
		for i := range m.Points {
			if got.Points[i][u] != c.out[n.points+i][u] {
				t.Fatalf("unit %d, point %d: %v, want %v", u, i, got.Points[i][u], c.out[n.points+i][u])
			}
		}
		if got.Outputs[0][u] != c.out[0][u] {
			t.Fatalf("unit %d: %v, want %v", u, got.Outputs[0][u], c.out[0][u])
		}
		for k := range n.trims[:2] { // setting errors bring some back that are just out of reach, the third far
			at := n.trimColumn(k)
			setting := c.out[at][u]
			count[got.Trims[k][u]]++
			switch end := got.Trims[k][u]; {
			case end == 0 && !reached(c.out[at+1][u], c.out[at+2][u]), end == -1 && setting > 0.05, end == 1 && setting < 0.95:
				t.Errorf("unit %d, trim %d: setting %v is said to be at end %d", u, k, setting, end)
			}
		}
	}
	if count[-1] < 20 || count[0] < 20 || count[1] < 20 {
		t.Errorf("trims end %v: the test proves little", count)
	}
}
