package spread_test

import (
	"context"
	"math"
	"testing"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// compile reads a build file's text and compiles it.
func compile(t testing.TB, text string) *build.Model {
	t.Helper()
	b, err := build.Read("test.yaml", []byte(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// analyse reads, compiles and analyses a build file's text.
func analyse(t testing.TB, text string, units int) *spread.Report {
	t.Helper()
	r, err := spread.Analyse(context.Background(), compile(t, text), spread.Options{Seed: 1, Units: units})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// find is the report of an output at a condition, or of its change from another.
func find(t testing.TB, r *spread.Report, output, condition, from string) spread.OutputReport {
	t.Helper()
	for _, o := range r.Outputs {
		if o.Output == output && o.Condition == condition && o.ChangeFrom == from {
			return o
		}
	}
	t.Fatalf("no output %s at %s from %q", output, condition, from)
	return spread.OutputReport{}
}

// near fails where got is further from want than tolerance.
func near(t testing.TB, what string, got spread.Figure, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(float64(got)-want) <= tolerance) {
		t.Errorf("%s = %.9g, want %.9g ± %.2g", what, float64(got), want, tolerance)
	}
}
