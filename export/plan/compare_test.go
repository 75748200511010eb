package plan

import (
	"context"
	"encoding/json"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"batchwright/export/workbook"
	"batchwright/tolerance/build"
	"batchwright/tolerance/compare"
	"batchwright/tolerance/spread"
)

// lampCompared compares the tank's capacitor, which the book offers in c0g and
// polystyrene, but not of 221 pF.
func lampCompared(t *testing.T) *compare.Result {
	t.Helper()
	b, err := build.Read("lamp.yaml", []byte(lamp), nil)
	if err != nil {
		t.Fatal(err)
	}
	r, err := compare.Cases(b, compare.Options{At: []string{"tank.tank"}, Families: []string{"c0g", "polystyrene"},
		Values: []build.Worth{{Low: 220e-12, High: 220e-12, Text: "220 pF"}, {Low: 221e-12, High: 221e-12, Text: "221 pF"}}})
	if err != nil {
		t.Fatal(err)
	}
	if err := r.Run(context.Background(), spread.Options{Seed: 3, Units: 400}, nil); err != nil {
		t.Fatal(err)
	}
	return r
}

// Money of parts that nobody offers is null and says why; NaN is nowhere.
func TestNewComparison(t *testing.T) {
	r := lampCompared(t)
	text, err := json.Marshal(NewComparison(r))
	if err != nil {
		t.Fatal(err)
	}
	var c Comparison
	if err := json.Unmarshal(text, &c); err != nil {
		t.Fatal(err)
	}
	if len(c.Cases) != 4 || !c.Cases[0].Base || !c.Invented {
		t.Fatalf("%s", text)
	}
	first, second := c.Cases[0], c.Cases[1]
	if first.UnitCost == nil || *first.UnitCost != r.Cases[0].Order.PerUnit || *first.BatchCost != r.Cases[0].Order.Total || first.NotOffered != "" {
		t.Errorf("offered: %+v", first)
	}
	if second.UnitCost != nil || second.BatchCost != nil || !strings.Contains(second.NotOffered, "does not offer it") {
		t.Errorf("not offered: %+v", second)
	}
	if first.Targets[0].Difference.Share != 0 || len(first.Targets[0].Changes) != 1 || first.Targets[0].Changes[0].Condition != "warm" {
		t.Errorf("%+v", first.Targets)
	}
	if second.Targets[0].Difference != r.Cases[1].Targets[0] || second.Yield.Difference != r.Cases[1].Yield {
		t.Errorf("%+v", second)
	}
}

// The workbook's comparison has the result's figures in their places.
func TestComparedForWorkbook(t *testing.T) {
	if compared(nil) != nil {
		t.Error("a comparison of nothing")
	}
	r := lampCompared(t)
	r.LeftOut = []compare.LeftOut{{Label: "mica ±7 %", Why: "mica is not sold in 7 %"}}
	r.Cases[2].Beyond = []string{"oven"}
	r.Cases[2].Yield = compare.Difference{Share: -0.0125, Shown: true}
	c := compared(r)
	if want := "Other parts at tank.tank (C1). 4 cases, each on the same 400 simulated units, seed 3."; c.Below != want {
		t.Errorf("%q, want %q", c.Below, want)
	}
	if diff := cmp.Diff([]workbook.CompareChange{{Title: "warm drift, warm", Unit: "Hz", Limit: 3000}}, c.Changes); diff != "" {
		t.Error(diff)
	}
	if c.Notes[len(c.Notes)-1] != "Left out: mica ±7 %: mica is not sold in 7 %." || c.Trims[0] != "tank.tuner" || c.Targets[0] != "warm drift" {
		t.Errorf("%+v", c)
	}
	j := r.Cases[2].Judgement
	want := workbook.CompareCase{
		Label: "polystyrene 220 pF ±5 %", Drifts: r.Cases[2].Drifts, Changes: []spread.Figure{j.Targets[0].Changes[0].HalfWidth},
		Targets: []spread.Figure{j.Targets[0].Share}, Missed: []bool{!j.Targets[0].Met}, Reached: []spread.Figure{j.Trims[0].ReachedShare},
		Yield: j.Yield.UnitShare, Interval: j.Yield.Interval, Difference: "-1.25",
		Unit: r.Cases[2].Order.PerUnit.Float(), Batch: r.Cases[2].Order.Total.Float(),
		Size: "11 × 5 mm roll", Rated: "-40 to 70 °C, exceeded at oven", Verdict: string(r.Cases[2].Verdict), Why: r.Cases[2].Why,
	}
	if diff := cmp.Diff(want, c.Cases[2]); diff != "" {
		t.Error(diff)
	}
	if base := c.Cases[0]; !base.Base || base.Difference != "–" {
		t.Errorf("%+v", base)
	}
	if !cmp.Equal(c.Cases[1].Unit, math.NaN(), cmpopts.EquateNaNs()) || c.Cases[1].Difference != "none shown" {
		t.Errorf("%+v", c.Cases[1])
	}
}
