package pick

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"batchwright/bom/offer"
	"batchwright/tolerance/build"
)

// pictureMeets judges a choice by its linear picture, one target or none left
// out.
func pictureMeets(t *testing.T, c *chooser, choice []int, without int) bool {
	t.Helper()
	for q, d := range c.pictures.demands {
		j, ok := c.demand(choice, q)
		if !ok {
			t.Fatal("no picture")
		}
		e := d.Demand
		e.Share = math.Max(0, e.Share-j.slack)
		if d.target != without && !e.Holds(j.Mean, j.Variance, j.Half) {
			return false
		}
	}
	return true
}

// bindingByForce drops each target in turn among all choices, cheapest first,
// and puts a tighter one in the place of that which saves most.
func bindingByForce(t *testing.T, c *chooser, list [][]int) *Binding {
	price := func(choice []int) int64 {
		b, err := c.fit(choice)
		if err != nil {
			t.Fatal(err)
		}
		money, _ := orderOf(c, b)
		return money
	}
	all := price(cheapestOf(t, c, list, func(x []int) bool { return pictureMeets(t, c, x, -1) }))
	binding, saving := -1, int64(0)
	for target := range c.build.Targets {
		if less := all - price(cheapestOf(t, c, list, func(x []int) bool { return pictureMeets(t, c, x, target) })); less > saving {
			binding, saving = target, less
		}
	}
	if binding < 0 {
		return nil
	}
	tight := *c.build
	tight.Targets = append([]build.Target(nil), tight.Targets...)
	tight.Targets[binding] = byHand(tight.Targets[binding])
	out := &Binding{Target: c.build.Targets[binding].Name, Saving: offer.Money(saving), Out: true}
	choice := cheapestOf(t, c, list, func(x []int) bool {
		b, err := c.fit(x)
		if err != nil {
			t.Fatal(err)
		}
		b.Targets = tight.Targets
		return buildPasses(t, b, c.Options)
	})
	if choice != nil {
		out.Total, out.Out = offer.Money(price(choice)), false
	}
	return out
}

// byHand draws a window in by a tenth of its half width at each end, and takes
// a tenth of the units that may miss a trim's reach away.
func byHand(t build.Target) build.Target {
	if t.Trim >= 0 {
		t.Share += (1 - t.Share) / 10
		return t
	}
	w := (t.High - t.Low) / 20
	t.Low, t.High = t.Low+w, t.High-w
	return t
}

// TestBindingByForce compares with dropping and tightening among all choices.
func TestBindingByForce(t *testing.T) {
	bound, out := 0, 0
	builds := slices.Clone(bruteBuilds)
	builds = append(builds, bruteBuild{"tanks", strings.Replace(strings.ReplaceAll(tanks("LIMIT"), "%", "%%"), "LIMIT", "%s", 1), "", []string{"250 Hz", "200 Hz", "130 Hz", "110 Hz", "90 Hz", "70 Hz"}})
	for _, v := range builds {
		for _, limit := range v.limits {
			t.Run(v.name+" "+limit, func(t *testing.T) {
				b, o := readAt(t, fmt.Sprintf(v.text, limit), v.prices), Options{Seed: 3, Units: 480}
				r, _, err := Choose(context.Background(), b, o)
				if err != nil {
					t.Fatal(err)
				}
				if !r.ProvedCheapest {
					return
				}
				c := chooserOf(t, b, o)
				want, got := bindingByForce(t, c, byMoney(t, c)), r.Binding
				if (want == nil) != (got == nil) {
					t.Fatalf("binding %+v, want %+v", got, want)
				}
				if want == nil {
					return
				}
				bound++
				if want.Out {
					out++
				}
				if want.Target != got.Target || want.Saving != got.Saving || want.Total != got.Total || want.Out != got.Out || got.Tighter == "" {
					t.Errorf("binding %+v, want %+v", got, want)
				}
			})
		}
	}
	if bound < 6 {
		t.Errorf("%d of the builds are bound by a target, %d out of reach: the test proves little", bound, out)
	}
}

// TestNothingBinds asks for what the cheapest parts do.
func TestNothingBinds(t *testing.T) {
	b := read(t, tanks("100 kHz"))
	b.Targets[0].Share, b.Targets[1].Share = 0.5, 0.01
	r, _, err := Choose(context.Background(), b, Options{Seed: 1, Units: 400})
	if err != nil || !r.ProvedCheapest || r.Binding != nil {
		t.Errorf("%+v binds, %v", r.Binding, err)
	}
}

// TestTighter draws limits of each kind in by a tenth.
func TestTighter(t *testing.T) {
	inf := math.Inf(1)
	for _, v := range []struct {
		low, high, wantLow, wantHigh float64
	}{
		{-60, 60, -54, 54},     // ±60: ±54
		{100, 200, 105, 195},   // 150 ± 50: ± 45
		{-inf, 10, -inf, 9},    // at most 10
		{-inf, -10, -inf, -11}, // at most −10: a tenth of itself further in
		{20, inf, 22, inf},
		{-20, inf, -18, inf},
	} {
		got := tighter(build.Target{Trim: -1, Low: v.low, High: v.high, Share: 0.9})
		if got.Low != v.wantLow || got.High != v.wantHigh || got.Share != 0.9 {
			t.Errorf("%v to %v becomes %v to %v, want %v to %v", v.low, v.high, got.Low, got.High, v.wantLow, v.wantHigh)
		}
	}
	if got := tighter(build.Target{Trim: 0, Low: 0, High: 1, Share: 0.9}); !near(got.Share, 0.91) || got.Low != 0 || got.High != 1 {
		t.Errorf("a trim's reach on 90 %% becomes %+v, want 91 %%", got)
	}
}
