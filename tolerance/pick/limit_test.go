package pick

import (
	"context"
	"fmt"
	"runtime"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"batchwright/tolerance/pick/exact"
)

// twentyAlike are twenty open resistors that are bought on the same lines, with
// breaks and stocks: whatever is chosen for one changes what the others cost.
func twentyAlike() string {
	var parts, sum strings.Builder
	for i := range 20 {
		fmt.Fprintf(&parts, "      r%d: {part: resistor, ref: R%d, choose: {families: [metal-film-100, metal-film-25, carbon-film], tolerances: [1 %%, 2 %%, 5 %%], around: 1 kΩ, within: 12 %%, series: E24}}\n", i, i+1)
		fmt.Fprintf(&sum, "+%d*r%d", 1+i%7, i)
	}
	return `
build: twenty alike
units: 12
conditions:
  bench: {temperature: 25 °C}
  warm:  {temperature: 45 °C}
stages:
  s:
    kind: formula
    parts:
` + parts.String() + `    outputs: {x: {expression: "` + sum.String()[1:] + `", unit: Ω}, y: {expression: "r0*r1/r2+r3-r4+r5*r6/r7", unit: Ω}}
targets:
  - {name: x, output: s.x, between: [77.3 kΩ, 77.7 kΩ], share: 90 %}
  - {name: y, output: s.y, between: [2.09 kΩ, 2.13 kΩ], share: 90 %}
  - {name: drift, output: s.x, change_from: bench, at: [warm], limit: 60 Ω, share: 90 %}
`
}

// TestEndedEarly stops a search by time and by steps: a choice that simulation
// confirms, the bound that was proved, and why it is no more.
func TestEndedEarly(t *testing.T) {
	for name, o := range map[string]Options{
		"time":  {Seed: 1, Units: 400, SearchFor: 50 * time.Millisecond},
		"steps": {Seed: 1, Units: 400, limits: exact.Limits{Steps: 2000}},
	} {
		b := read(t, twentyAlike())
		r, fitted, err := Choose(context.Background(), b, o)
		if err != nil {
			t.Fatal(err)
		}
		if r.ProvedCheapest || r.Provided != "" || r.Binding != nil {
			t.Errorf("%s: proved %v, provided %q, binding %+v", name, r.ProvedCheapest, r.Provided, r.Binding)
		}
		if !strings.Contains(r.Why, "ran out of "+name) && !strings.Contains(r.Why, "the search ended ") {
			t.Errorf("%s: %q", name, r.Why)
		}
		if strings.Contains(r.Why, "no choice meets") && name == "steps" {
			t.Errorf("%s: found nothing: %s", name, r.Why)
		}
		if r.Bound > 0 && strings.Contains(r.Why, "nothing cheaper") && (!buildPasses(t, fitted, o) || r.Bound > r.Total || r.Bound <= 0) {
			t.Errorf("%s: total %v, bound %v, targets %+v", name, r.Total, r.Bound, r.Targets)
		}
	}
}

// TestSameResult runs searches again, on one processor and on several.
func TestSameResult(t *testing.T) {
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(0))
	texts := map[string]string{"tanks": tanks("80 Hz"), "pairs": tradeBuilds["pairs"]}
	for name, text := range texts {
		for _, few := range []int{0, 1} {
			var first *Result
			for _, n := range []int{1, 4} {
				runtime.GOMAXPROCS(n)
				r, _, err := Choose(context.Background(), read(t, text), Options{Seed: 7, Units: 480, Alternates: 1, few: few})
				if err != nil {
					t.Fatal(err)
				}
				r.Fittings = nil
				if first == nil {
					first = r
				}
				if d := cmp.Diff(first, r); d != "" {
					t.Errorf("%s on %d processors: %s", name, n, d)
				}
			}
		}
	}
}
