package stage

import (
	"math"
	"slices"
	"testing"

	"batchwright/tolerance/tape"
)

// stepped are equations whose derivative is 0 or undefined where they step.
var stepped = []string{"saturated", "conducts", "unregulated", "polarity"}

// Every equation's derivative by every input agrees with a central difference,
// and exists also where an input is 0 (an instrument not connected, a part not
// fitted, a beat of 0 Hz).
func TestTangentsAgreeWithDifferences(t *testing.T) {
	for _, k := range fixedKinds() {
		t.Run(k.Name, func(t *testing.T) {
			c := newCircuit(t, k.Name, 1)
			values := c.fill(t, examples[k.Name])
			for i, name := range c.inputs {
				step := math.Abs(values[i]) * 1e-5
				if step == 0 {
					checkTangentExists(t, c, values, i)
					continue
				}
				high, low := moved(c, values, i, step), moved(c, values, i, -step)
				base, slope := c.tangent(values, i)
				for o, out := range c.outputs {
					want := (high[o] - low[o]) / (2 * step)
					scale := math.Max(math.Abs(base[o]/values[i]), math.Abs(want))
					if !slices.Contains(stepped, out) && !(math.Abs(slope[o]-want) <= 1e-6*scale+1e-300) {
						t.Errorf("d %s/d %s = %g, by differences %g", out, name, slope[o], want)
					}
				}
			}
		})
	}
}

func checkTangentExists(t *testing.T, c *circuit, values []float64, input int) {
	t.Helper()
	_, slope := c.tangent(values, input)
	for o, out := range c.outputs {
		if slope[o] != slope[o] || math.IsInf(slope[o], 0) {
			t.Errorf("d %s/d %s = %g at 0", out, c.inputs[input], slope[o])
		}
	}
}

// moved evaluates with one input moved.
func moved(c *circuit, values []float64, input int, by float64) []float64 {
	in := columns(values)
	in[input][0] += by
	dst := columns(make([]float64, len(c.outputs)))
	c.program.Values(dst, in, c.frame)
	return flat(dst)
}

// tangent is every output and its derivative by one input.
func (c *circuit) tangent(values []float64, input int) (base, slope []float64) {
	n := len(c.outputs)
	dst, ddst := columns(make([]float64, n)), columns(make([]float64, n))
	din := columns(make([]float64, len(values)))
	din[input][0] = 1
	c.program.Tangents(dst, ddst, columns(values), din, c.frame)
	return flat(dst), flat(ddst)
}

func flat(columns [][]float64) []float64 {
	out := make([]float64, len(columns))
	for i, c := range columns {
		out[i] = c[0]
	}
	return out
}

// Bounds over a small box about each example hold its corners' values.
func TestBoundsHoldValues(t *testing.T) {
	for _, k := range fixedKinds() {
		t.Run(k.Name, func(t *testing.T) {
			c := newCircuit(t, k.Name, 1)
			values := c.fill(t, examples[k.Name])
			box := make([]tape.Interval, len(values))
			low, high := make([]float64, len(values)), make([]float64, len(values))
			for i, v := range values {
				low[i], high[i] = v-math.Abs(v)*1e-3, v+math.Abs(v)*1e-3
				box[i] = tape.Interval{Low: low[i], High: high[i]}
			}
			bounds := c.program.Bounds(box)
			for _, corner := range [][]float64{low, values, high} {
				for o, v := range moved(c, corner, 0, 0) {
					if !(bounds[o].Low <= v && v <= bounds[o].High) {
						t.Errorf("%s = %g outside %+v", c.outputs[o], v, bounds[o])
					}
				}
			}
		})
	}
}
