package spread_test

import (
	"context"
	"math"
	"testing"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// A trimmer that must be set to a value spread evenly over its travel ends
// evenly over it: a tenth of the units within a tenth of either end, half of
// them below the middle. Where the value goes from half the travel below it to
// half of it above, a quarter runs out at either end, and a tenth of the other
// half, 5 % of all, reaches near it.
func TestNearTheEnds(t *testing.T) {
	for _, tt := range []struct {
		travel              string
		short, near, median float64
	}{
		{"0..100 Ω", 0, 0.1, 0.5},
		{"25..75 Ω", 0.25, 0.05, 0.5},
	} {
		b, err := build.Read("near.yaml", []byte(`
build: near
units: 10
conditions: {bench: {temperature: 25 °C}}
stages:
  one:
    kind: formula
    settings: {wanted: {value: 50, tolerance: 100 %, shape: uniform}}
    parts:
      turn: {ref: RV1, value: `+tt.travel+`, part: trimmer-resistor}
    outputs:
      off: {expression: turn/ohm - wanted}
trims: [{turn: one.turn, output: one.off, to: 0, within: 0.001}]
`), nil)
		if err != nil {
			t.Fatal(err)
		}
		m, err := b.Compile()
		if err != nil {
			t.Fatal(err)
		}
		const n = 40_000
		r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: 1, Units: n})
		if err != nil {
			t.Fatal(err)
		}
		x := r.Trims[0]
		for what, pair := range map[string][2]float64{
			"short low": {float64(x.ShortLow), tt.short}, "short high": {float64(x.ShortHigh), tt.short},
			"near low": {float64(x.NearLow), tt.near}, "near high": {float64(x.NearHigh), tt.near},
			"median": {float64(x.Setting.Median), tt.median},
		} {
			if !(math.Abs(pair[0]-pair[1]) < 4*math.Sqrt(0.25/n)) { // four standard errors of a share
				t.Errorf("%s: %s = %g, want %g", tt.travel, what, pair[0], pair[1])
			}
		}
	}
}
