package spread_test

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"regexp"
	"strings"
	"testing"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
	"batchwright/tolerance/stage"
)

// TestEveryKind gives the parts of every kind's fragment random values about
// those written and analyses them: nothing simulated may lie beyond the worst
// case, and no worst case beyond what is guaranteed.
func TestEveryKind(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 3))
	for _, name := range stage.Names() {
		k, _ := stage.Find(name)
		b, err := build.Read("test.yaml", []byte(around(k)), nil)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		for range 3 {
			for _, s := range b.Stages {
				for i := range s.Places {
					for j := range s.Places[i].Part.Parameters {
						s.Places[i].Part.Parameters[j].Value *= 0.95 + 0.1*rng.Float64()
					}
				}
			}
			m, err := b.Compile()
			if err != nil {
				t.Fatalf("%s: %v", name, err)
			}
			r, err := spread.Analyse(context.Background(), m, spread.Options{Seed: rng.Uint64(), Units: 400})
			if err != nil {
				t.Fatalf("%s: %v", name, err)
			}
			for _, o := range r.Outputs {
				holds(t, name, o)
			}
		}
	}
}

// holds asks that simulated ⊆ worst case ⊆ guaranteed, to rounding.
func holds(t *testing.T, kind string, o spread.OutputReport) {
	t.Helper()
	w := o.WorstCase
	slack := 1e-9 * (math.Abs(float64(w.Low)) + math.Abs(float64(w.High)))
	within := func(what string, v spread.Figure, low, high spread.Figure) {
		if float64(v) < float64(low)-slack || float64(v) > float64(high)+slack {
			t.Errorf("%s: %s at %s, %s is %v, outside %v to %v", kind, o.Output, o.Condition, what, v, low, high)
		}
	}
	within("nominal", o.Nominal, w.Low, w.High)
	for _, q := range spread.QuantileNames {
		within(q, o.Simulated.Quantiles[q], w.Low, w.High)
	}
	within("the worst low", w.Low, w.Guaranteed.Low, w.Guaranteed.High)
	within("the worst high", w.High, w.Guaranteed.Low, w.Guaranteed.High)
}

var takes = regexp.MustCompile(`(?m)^  in: (.*)$`)

// around is a build of a kind's fragment and an oscillator for each stage that
// it takes in.
func around(k *stage.Kind) string {
	text := "build: around\nunits: 4\nconditions: {bench: {temperature: 20 °C}, warm: {temperature: 40 °C}}\nstages:\n"
	if in := takes.FindStringSubmatch(k.Fragment); in != nil {
		for i, pair := range strings.Split(strings.Trim(in[1], "{}"), ",") {
			from := pair[strings.LastIndex(pair, ":")+1:]
			text += fmt.Sprintf("  %s: {kind: tuned-tank, parts: {coil: {ref: L%d, value: 1 mH, tolerance: 1 %%}, tank: {ref: C%d, value: %d pF}}}\n",
				strings.TrimSpace(from), 901+i, 901+i, 220+2*i)
		}
	}
	return text + "  " + strings.ReplaceAll(strings.Trim(k.Fragment, "\n"), "\n", "\n  ") + "\n"
}
