package tape

import (
	"math"
	"slices"
	"testing"
	"time"
)

// The benchmarks report ns per unit and, beside it, what a loop written by hand
// for the same equations takes in the same run.

const benchLanes = 256

var sink float64

func benchProgram(b *testing.B, r *rig, centre []float64, byHand func(in [][]float64, dst []float64)) {
	in, dst := grid(len(centre), benchLanes), grid(r.program.outputs, benchLanes)
	for i, c := range centre {
		for k := range benchLanes {
			in[i][k] = c * (1 + 0.05*math.Sin(float64(k*(i+1))))
		}
	}
	f := r.program.NewFrame(benchLanes)
	out, ddst := make([]float64, benchLanes), grid(r.program.outputs, benchLanes)
	// All three take turns, and medians are compared: whatever else the machine
	// does then hits them alike.
	ways := []func(){
		func() { r.program.Values(dst, in, f) },
		func() { byHand(in, out) },
		func() { r.program.Tangents(dst, ddst, in, in, f) },
	}
	took := make([][]float64, len(ways))
	for b.Loop() {
		for w, run := range ways {
			begin := time.Now()
			run()
			took[w] = append(took[w], float64(time.Since(begin).Nanoseconds())/benchLanes)
		}
	}
	median := func(v []float64) float64 { slices.Sort(v); return v[len(v)/2] }
	tape, hand, tangents := median(took[0]), median(took[1]), median(took[2])
	sink += out[0]
	b.ReportMetric(tape, "ns/unit")
	b.ReportMetric(tape/hand, "of-by-hand")
	b.ReportMetric(tangents/tape, "tangents-of-values")
}

func BenchmarkTapeColpitts(b *testing.B) {
	r := compile(b, []string{"coil", "upper", "lower", "pad", "tuner", "stray"},
		"1/(2*pi*sqrt(coil*(upper*lower/(upper+lower) + pad + tuner + stray)))")
	benchProgram(b, r, []float64{1.8e-3, 220e-12, 220e-12, 10e-12, 15e-12, 8e-12}, func(in [][]float64, dst []float64) {
		for i := range dst {
			u, l := in[1][i], in[2][i]
			dst[i] = 1 / (2 * math.Pi * math.Sqrt(in[0][i]*(u*l/(u+l)+in[3][i]+in[4][i]+in[5][i])))
		}
	})
}

// junction is a transistor's collector current: base divider, emitter
// resistor, exponential junction.
const junction = "root(i, 1e-9, 0.1, v - i/beta*r - 0.6 - vt*ln(i/1e-3) - i*(1+1/beta)*e)"

func junctionByHand(v, beta, r, vt, e float64) float64 {
	at := func(i float64) float64 { return v - i/beta*r - 0.6 - vt*math.Log(i/1e-3) - i*(1+1/beta)*e }
	// Newton from above: the residual is convex and falling.
	i := (v - 0.6) / (r/beta + e)
	for range 20 {
		step := at(i) / (r/beta + vt/i + (1+1/beta)*e)
		i += step
		if math.Abs(step) < 1e-14*i {
			break
		}
	}
	return i
}

func BenchmarkTapeRoot(b *testing.B) {
	r := compile(b, []string{"v", "beta", "r", "vt", "e"}, junction)
	benchProgram(b, r, []float64{2.2, 180, 12e3, 0.0259, 1.5e3}, func(in [][]float64, dst []float64) {
		for i := range dst {
			dst[i] = junctionByHand(in[0][i], in[1][i], in[2][i], in[3][i], in[4][i])
		}
	})
}

// The bias is trimmed until the collector stands at a given voltage: a root in
// a root.
func BenchmarkTapeNestedRoots(b *testing.B) {
	r := compile(b, []string{"v", "beta", "r", "vt", "e"},
		"root(s, 0.5, 2, 1.2e-3 - root(i, 1e-9, 0.1, v*s - i/beta*r - 0.6 - vt*ln(i/1e-3) - i*(1+1/beta)*e))")
	benchProgram(b, r, []float64{2.2, 180, 12e3, 0.0259, 1.5e3}, func(in [][]float64, dst []float64) {
		for i := range dst {
			// The outer unknown has a closed form; by hand one would see it.
			beta, vt := in[1][i], in[3][i]
			const c = 1.2e-3
			dst[i] = (c/beta*in[2][i] + 0.6 + vt*math.Log(c/1e-3) + c*(1+1/beta)*in[4][i]) / in[0][i]
		}
	})
}

func BenchmarkTapeBounds(b *testing.B) {
	r := compile(b, []string{"v", "beta", "r", "vt", "e"}, junction)
	box := []Interval{{2.1, 2.3}, {100, 300}, {11e3, 13e3}, {0.0255, 0.0265}, {1.4e3, 1.6e3}}
	for b.Loop() {
		r.program.Bounds(box)
	}
}
