package tape

import (
	"flag"
	"fmt"
	"math"
	"os"
	"testing"

	"batchwright/tolerance/formula"
)

// TestMain fixes the seed of the random expressions, so that a failure comes
// again.
func TestMain(m *testing.M) {
	for name, value := range map[string]string{"rapid.seed": "20240607", "rapid.nofailfile": "true"} {
		if err := flag.Set(name, value); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
	}
	os.Exit(m.Run())
}

// near reports whether got is want to a relative tolerance; NaN is near NaN.
func near(got, want, tolerance float64) bool {
	if math.IsNaN(want) || math.IsInf(want, 0) || want == 0 {
		return got == want || math.IsNaN(got) && math.IsNaN(want)
	}
	return math.Abs(got-want) <= tolerance*math.Abs(want)
}

// rig is a graph with named inputs and the outputs of some expressions.
type rig struct {
	g       *Graph
	names   []string
	inputs  map[string]Ref
	program *Program
	lanes   int
	frame   *Frame
}

func newRig(names ...string) *rig {
	r := &rig{g: NewGraph(), names: names, inputs: map[string]Ref{}}
	for _, name := range names {
		r.inputs[name] = r.g.Input()
	}
	return r
}

func (r *rig) lower(t testing.TB, text string) Ref {
	t.Helper()
	e, mistakes := formula.Parse(text)
	if len(mistakes) > 0 {
		t.Fatalf("%s: %v", text, mistakes)
	}
	ref, err := r.g.Lower(e, func(name string) (Ref, bool) { ref, ok := r.inputs[name]; return ref, ok })
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return ref
}

// compile makes the program of some expressions.
func compile(t testing.TB, names []string, texts ...string) *rig {
	t.Helper()
	r := newRig(names...)
	outputs := make([]Ref, len(texts))
	for i, text := range texts {
		outputs[i] = r.lower(t, text)
	}
	r.use(outputs...)
	return r
}

func (r *rig) use(outputs ...Ref) {
	r.program = r.g.Program(outputs...)
	r.lanes = 16
	r.frame = r.program.NewFrame(r.lanes)
}

func grid(rows, columns int) [][]float64 {
	g := make([][]float64, rows)
	for i := range g {
		g[i] = make([]float64, columns)
	}
	return g
}

func columnsOf(v []float64) [][]float64 {
	g := grid(len(v), 1)
	for i, x := range v {
		g[i][0] = x
	}
	return g
}

// at evaluates the outputs at one point.
func (r *rig) at(v ...float64) []float64 {
	dst := grid(r.program.outputs, 1)
	r.program.Values(dst, columnsOf(v), r.frame)
	out := make([]float64, len(dst))
	for i := range dst {
		out[i] = dst[i][0]
	}
	return out
}

// slopes differentiates the outputs at one point along d.
func (r *rig) slopes(v, d []float64) []float64 {
	dst, ddst := grid(r.program.outputs, 1), grid(r.program.outputs, 1)
	r.program.Tangents(dst, ddst, columnsOf(v), columnsOf(d), r.frame)
	out := make([]float64, len(dst))
	for i := range dst {
		out[i] = ddst[i][0]
	}
	return out
}
