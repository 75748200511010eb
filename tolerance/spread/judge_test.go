package spread_test

import (
	"context"
	"math"
	"slices"
	"testing"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// movingResistor moves by 1 kΩ·(1 + 0.1·z)·0.001/K·ΔT, z uniform: by 10 Ω·(1 +
// 0.1·z) at 35 °C and by −20 Ω·(1 + 0.1·z) at 5 °C.
const movingResistor = `
build: moving resistor
units: 10
conditions:
  bench: {temperature: 25 °C}
  warm:  {temperature: 35 °C}
  cold:  {temperature: 5 °C}
stages:
  s:
    kind: formula
    parts:
      r: {ref: R1, value: 1 kΩ, tolerance: 10 %, shape: uniform, temperature_coefficient: 1000 ppm/K}
      t: {ref: RV1, value: 0..2.05 kΩ}
    outputs: {r1: {expression: r, unit: Ω}, rest: {expression: "r-t", unit: Ω}, half: {expression: "t-2*r", unit: Ω}}
trims:
  - {turn: s.t, output: s.half, to: 0 Ω}
targets:
  - {name: moves, output: s.r1, change_from: bench, at: [warm, cold], between: [-21 Ω, 10.5 Ω], share: 70 %}
  - {name: corner, output: s.r1, change_from: bench, at: [warm, cold], limit: 21 Ω, by: worst-case}
  - {name: value, output: s.r1, between: [950 Ω, 2 kΩ], share: 90 %}
  - {name: rest moves, output: s.rest, change_from: bench, at: [warm], limit: 20 Ω, share: 60 %}
  - {name: reach, trim: s.t, share: 50 %}
`

// TestJudge holds the verdicts against the closed form above. A share p of
// units stays within 10·(0.9 + 0.2·p) Ω. The trim reaches where r <= 1.025 kΩ:
// on 62.5 %, all of which move by less than 10.25 Ω; of all units 60 % are
// then those up to z = 0.2.
func TestJudge(t *testing.T) {
	const units = 40_000 // a share is good to 0.0024 at one standard deviation, a few times √(p·q/40,000)
	m := compile(t, movingResistor)
	j, err := spread.Judge(context.Background(), m, spread.Options{Seed: 1, Units: units})
	if err != nil {
		t.Fatal(err)
	}
	moves := j.Targets[0]
	near(t, "half width at warm", moves.Changes[0].HalfWidth, 10*(0.9+0.2*0.7), 0.02)
	near(t, "half width at cold", moves.Changes[1].HalfWidth, 20*(0.9+0.2*0.7), 0.04)
	near(t, "share at warm", moves.Changes[0].Share, 0.75, 0.01)
	near(t, "share at cold", moves.Changes[1].Share, 0.75, 0.01)
	if c := moves.Changes[1]; c.Condition != "cold" || !c.Met || !(c.ShareInterval[0] < c.Share && c.Share < c.ShareInterval[1]) {
		t.Errorf("%+v", c)
	}
	corner := j.Targets[1]
	near(t, "worst half width at cold", corner.Changes[1].HalfWidth, 22, 1e-6)
	if corner.Met || corner.Changes[1].Met || !corner.Changes[0].Met || corner.WorstCase == nil {
		t.Errorf("%+v %+v", corner.TargetReport, corner.Changes)
	}
	if len(j.Targets[2].Changes) != 0 || j.Targets[2].Met {
		t.Errorf("%+v", j.Targets[2].TargetReport)
	}
	rest := j.Targets[3].Changes[0] // r − 2r moves by −r·0.01
	near(t, "half width of the rest", rest.HalfWidth, 10*(1+0.1*0.2), 0.02)
	near(t, "reach", j.Targets[4].Share, 0.625, 0.01)
	near(t, "trim", j.Trims[0].ReachedShare, 0.625, 0.01)
	for i, target := range j.Targets {
		sum := 0
		for _, n := range target.Complying {
			sum += n
		}
		near(t, target.Name, target.Share, float64(sum)/units, 1e-12)
		if len(target.Complying) != units/10 {
			t.Errorf("target %d has %d batches", i, len(target.Complying))
		}
	}
	sum := 0
	for _, n := range j.Good {
		sum += n
	}
	near(t, "yield", j.Yield.UnitShare, float64(sum)/units, 1e-12)
}

// A half width does not exist where too few units reach, and says so.
func TestJudgeOutOfReach(t *testing.T) {
	b, err := build.Read("test.yaml", []byte(movingResistor), nil)
	if err != nil {
		t.Fatal(err)
	}
	b.Targets[3].Share = 0.9
	m, err := b.CompileTargets()
	if err != nil {
		t.Fatal(err)
	}
	j, err := spread.Judge(context.Background(), m, spread.Options{Seed: 1, Units: 2000})
	if err != nil {
		t.Fatal(err)
	}
	if c := j.Targets[3].Changes[0]; !math.IsNaN(float64(c.HalfWidth)) || c.Why == "" || c.Met {
		t.Errorf("%+v", c)
	}
}

// What Judge says is what Analyse says, of the same draws.
func TestJudgeAgreesWithAnalyse(t *testing.T) {
	o := spread.Options{Seed: 3, Units: 3000}
	m := compile(t, movingResistor)
	r, err := spread.Analyse(context.Background(), m, o)
	if err != nil {
		t.Fatal(err)
	}
	b := *m.Build
	alone, err := b.CompileTargets()
	if err != nil {
		t.Fatal(err)
	}
	j, err := spread.Judge(context.Background(), alone, o)
	if err != nil {
		t.Fatal(err)
	}
	for i, target := range r.Targets {
		got := j.Targets[i].TargetReport
		if got.Share != target.Share || got.Met != target.Met || got.ShareInterval != target.ShareInterval || got.Why != target.Why {
			t.Errorf("%+v\n%+v", got, target)
		}
	}
	if r.Yield != j.Yield || !slices.Equal(r.Trims, j.Trims) || r.Simulation != j.Simulation {
		t.Errorf("%+v\n%+v", j.Yield, r.Yield)
	}
}
