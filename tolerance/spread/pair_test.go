package spread_test

import (
	"fmt"
	"io/fs"
	"math"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
	"batchwright/tolerance/tape"
)

// alike is what two deviations of a lot have in common: uniform ones that a
// copula of ½ joins correlate by (6/π)·asin(¼), see package scatter.
var alike = 6 / math.Pi * math.Asin(0.25)

// TestPairVariance compares the first-order uncertainty of a pair, and of it with
// its follower, with the sum by hand
//
//	u² = Σ c_i²·u_i² + 2·Σ c_i·u_i·c_j·u_j·r   over pieces i < j of one line,
//
// u_i = v_i·5 %/√3. Values in pF; c is 1 where they add up, (v/v_i)² where their
// reciprocals do: 100 and 300 make 75, 0.5625 and 0.0625.
func TestPairVariance(t *testing.T) {
	u := func(v float64) float64 { return v * 0.05 / math.Sqrt(3) }
	square := func(x float64) float64 { return x * x }
	for _, c := range []struct {
		name, pair, expression string
		want                   float64 // u²
	}{
		{"two alike in parallel", "parallel: [100, 100]", "x", 2 * square(u(100)) * (1 + alike)},
		{"two alike from mixed lots", "parallel: [100, 100], lots: mixed", "x", 2 * square(u(100))},
		{"two different in parallel", "parallel: [100, 300]", "x", square(u(100)) + square(u(300))},
		{"two alike in series", "series: [100, 100]", "x", 2 * square(u(100)/4) * (1 + alike)},
		{"two different in series", "series: [100, 300]", "x", square(0.5625*u(100)) + square(0.0625*u(300))},
		{"four alike", "parallel: [100, 100]", "x + y", 4*square(u(100)) + 12*square(u(100))*alike},
		{"a pair less its follower", "parallel: [100, 100]", "x - y", 4*square(u(100)) + 2*square(u(100))*alike*(1+1-4)},
		{"two lines of two", "parallel: [100, 300]", "x + y", 2 * (square(u(100)) + square(u(300))) * (1 + alike)},
		{"a difference of two lines", "parallel: [100, 300]", "x - y", 2 * (square(u(100)) + square(u(300))) * (1 - alike)},
		{"two lines from mixed lots", "parallel: [100, 300], lots: mixed", "x + y", 2 * (square(u(100)) + square(u(300)))},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := analyse(t, pairText(c.pair, c.expression), 100)
			y := find(t, r, "own.z", "bench", "")
			near(t, "u in pF", y.RootSumSquare.StandardUncertainty*1e12, math.Sqrt(c.want), 1e-9)
		})
	}
}

// pairText is a build of a pair at C1 and its follower at C2; its pieces are
// given by their values in pF.
func pairText(pair, expression string) string {
	var a, b float64
	var combine, rest string
	if n, _ := fmt.Sscanf(pair, "parallel: [%g, %g]%s", &a, &b, &rest); n >= 2 {
		combine = "parallel"
	} else if n, _ := fmt.Sscanf(pair, "series: [%g, %g]", &a, &b); n == 2 {
		combine = "series"
	}
	lots := ""
	if rest != "" {
		lots = ", lots: mixed"
	}
	piece := func(v float64) string {
		return fmt.Sprintf("{value: %g pF, tolerance: 5 %%, shape: uniform, temperature_coefficient: {value: 0 ppm/K, spread: 60 ppm/K}, correlation: {value: 0.5, temperature: 0.5}}", v)
	}
	return fmt.Sprintf(`build: a pair
units: 10
conditions: {bench: {temperature: 25 °C}, warm: {temperature: 35 °C}}
stages:
  own:
    kind: formula
    parts:
      x: {ref: C1, %s: [%s, %s]%s}
      y: {ref: C2, same_as: own.x}
    outputs: {z: {expression: %s + 0*y, unit: F}}
targets:
  - {name: drift, output: own.z, change_from: bench, at: [warm], limit: 1 pF, share: 50 %%}
`, combine, piece(a), piece(b), lots, expression)
}

// TestPairDriftVariance is that of a change over 10 K: v_i·10 K·60 ppm/K/√3 of
// each piece, alike in a lot as the values are.
func TestPairDriftVariance(t *testing.T) {
	u := func(v float64) float64 { return v * 10 * 60e-6 / math.Sqrt(3) }
	for pair, want := range map[string]float64{
		"parallel: [100, 100]":              2 * u(100) * u(100) * (1 + alike),
		"parallel: [100, 300]":              u(100)*u(100) + u(300)*u(300),
		"parallel: [100, 100], lots: mixed": 2 * u(100) * u(100),
	} {
		y := find(t, analyse(t, pairText(pair, "x"), 100), "own.z", "warm", "bench")
		near(t, pair+", u in pF", y.RootSumSquare.StandardUncertainty*1e12, math.Sqrt(want), 1e-9)
	}
}

// TestPairSimulated draws pairs in lots: the simulated deviation is the
// first-order one, a sum being linear. 4000 batches of 10, of which a half is
// common to the batch, are worth some 4000 draws: four standard errors of 1.1 %.
func TestPairSimulated(t *testing.T) {
	for _, pair := range []string{"parallel: [100, 100]", "parallel: [100, 300]", "parallel: [100, 100], lots: mixed"} {
		y := find(t, analyse(t, pairText(pair, "x"), 40_000), "own.z", "bench", "")
		want := float64(y.RootSumSquare.StandardUncertainty)
		near(t, pair, y.Simulated.StandardDeviation, want, 0.045*want)
	}
}

// TestOpenModelIsTheSame compares a model with every term that a part may have
// with one that has those needed only, for every example: the same outputs and
// the same first-order variance, but for rounding.
func TestOpenModelIsTheSame(t *testing.T) {
	files, err := fs.Glob(data.Examples, "examples/*.yaml")
	if err != nil || len(files) < 3 {
		t.Fatalf("%d examples: %v", len(files), err)
	}
	for _, file := range files {
		t.Run(file, func(t *testing.T) {
			text, err := fs.ReadFile(data.Examples, file)
			if err != nil {
				t.Fatal(err)
			}
			b, err := build.Read(file, text, nil)
			if err != nil {
				t.Fatal(err)
			}
			every, open := map[string]bool{}, map[string]bool{}
			for _, p := range b.Parts() {
				every[p.Ref] = true
			}
			for _, o := range b.Openings {
				for _, position := range o.Positions {
					open[b.Place(position).Part.Ref] = true
				}
			}
			plain, err := b.CompileTargets()
			if err != nil {
				t.Fatal(err)
			}
			for _, refs := range []map[string]bool{open, every} {
				m, err := b.CompileOpen(refs)
				if err != nil {
					t.Fatal(err)
				}
				if len(m.Inputs) <= len(plain.Inputs) {
					t.Errorf("%d inputs with every term, %d without", len(m.Inputs), len(plain.Inputs))
				}
				compareModels(t, plain, m)
			}
		})
	}
}

// compareModels holds two models of one build against each other.
func compareModels(t *testing.T, a, b *build.Model) {
	t.Helper()
	if len(a.Outputs) != len(b.Outputs) || len(a.Outputs) == 0 {
		t.Fatalf("%d and %d outputs", len(a.Outputs), len(b.Outputs))
	}
	picture := func(m *build.Model) (*spread.Linear, []float64) {
		var refs []tape.Ref
		for _, o := range m.Outputs {
			refs = append(refs, o.Node)
		}
		l := spread.Linearise(m, refs...)
		variances := make([]float64, len(refs))
		for k := range refs {
			for _, term := range l.Terms(k) {
				variances[k] += term.Variance
			}
		}
		return l, variances
	}
	p, u := picture(a)
	q, v := picture(b)
	for k, o := range a.Outputs {
		scale := math.Abs(p.Values[k])
		if o.ChangeFrom >= 0 { // a difference of large numbers, rounded as they are
			scale = 1e6
		}
		if !(math.Abs(p.Values[k]-q.Values[k]) <= 1e-9*scale) || !(math.Abs(v[k]/u[k]-1) <= 1e-6) || !(u[k] > 0) {
			t.Errorf("%s at %d from %d: %.12g and %.12g, variances %.9g and %.9g", o.Name, o.Condition, o.ChangeFrom, p.Values[k], q.Values[k], u[k], v[k])
		}
	}
}
