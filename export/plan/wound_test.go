package plan

import (
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
)

// TestWound: a coil that is made and not bought says how it is wound, and
// nothing is printed on it. 100 turns of 2.7 mm radius, 9 mm long: Wheeler's
// 1e-6/0.0254·100²·2.7e-3²/(9·2.7e-3 + 10·9e-3) = 25.11 µH.
func TestWound(t *testing.T) {
	b, err := build.Read("wound.yaml", []byte(`build: Wound
units: 2
conditions: {bench: {}}
stages:
  tank:
    kind: tuned-tank
    parts:
      coil: {ref: L1, winding: {turns: {value: 100, tolerance: 0.5}, diameter: {value: 5.4 mm, tolerance: 0.2 %}, length: 9 mm}}
      tank: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}
`), nil)
	if err != nil {
		t.Fatal(err)
	}
	got := positions(Work{Build: b, Sheet: bench.Sheet{}})[0]
	want := workbook.Position{
		Stage: "tank", Kind: "tuned-tank", Role: "coil", Ref: "L1", Value: "25.11 µH", Family: "wound, not bought",
		Note: "wound: turns 100 ±0.5, diameter 5.4 mm ±0.2 %, length 9 mm",
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
}
