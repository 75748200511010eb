package pick

import (
	"testing"

	"batchwright/tolerance/spread"
)

// TestJudge sums up 3·a − 2·b of a uniform a = 1 kΩ ± 10 % and a uniform
// b = 2 kΩ ± 5 %, each piece apart: half width 3·100 + 2·100 Ω, variance
// (300² + 200²)/3 Ω², of which a makes 9/13.
func TestJudge(t *testing.T) {
	b := read(t, `
build: sum
units: 10
conditions: {bench: {}}
stages:
  s:
    kind: formula
    parts:
      a: {ref: R1, value: 1 kΩ, tolerance: 10 %, shape: uniform}
      b: {ref: R2, value: 2 kΩ, tolerance: 5 %, shape: uniform}
    outputs: {y: {expression: 3 * a - 2 * b, unit: Ω}}
`)
	m, err := b.Compile()
	if err != nil {
		t.Fatal(err)
	}
	got := judge(spread.Linearise(m, m.Outputs[0].Node), 0)
	share := 9.0 / 13
	for _, v := range []struct {
		what      string
		got, want float64
	}{
		{"mean", got.Mean, -1000},
		{"variance", got.Variance, (300*300 + 200*200) / 3.0},
		{"half width", got.Half, 500 * halfSlack},
		{"slack", got.slack, shareSlack + boundedSlack*share*share},
	} {
		if !near(v.got, v.want) {
			t.Errorf("%s is %v, want %v", v.what, v.got, v.want)
		}
	}
}
