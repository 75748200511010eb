package bench

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

func limits(low, high float64) spread.Limits {
	return spread.Limits{Low: spread.Figure(low), High: spread.Figure(high)}
}

// balls are the ball bearings of JCGM 106:2012, 9.5.4: out of round by a gamma
// distribution of mean 1 µm and standard deviation 0.5 µm, in quantiles.
func balls(n int) *spread.Histogram {
	g := distuv.Gamma{Alpha: 4, Beta: 4}
	x := make([]float64, n)
	for i := range x {
		x[i] = g.Quantile((float64(i) + 0.5) / float64(n))
	}
	h := spread.NewHistogram(1)
	h.AddColumn(x, nil)
	return h
}

func constant(u float64) func(float64) float64 { return func(float64) float64 { return u } }

func within(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s = %.9g, want %.9g to %.1g", what, got, want, relative)
	}
}

// The ball bearings: no more than 2 µm out of round, measured with a standard
// uncertainty of 0.25 µm. JCGM 106:2012, 9.5.4 prints 4.2 %, 0.8 % and, for
// the limit 1.672 µm, 0.1 %; the figures were worked out by Simpson's rule on
// the two integrals.
func TestGlobalRisksOfBallBearings(t *testing.T) {
	h := balls(400_000)
	free := GlobalRisks(h, limits(math.Inf(-1), 2), limits(math.Inf(-1), 2), constant(0.25))
	within(t, "consumer's risk", free.Consumer, 0.0080191119, 2e-4)
	within(t, "producer's risk", free.Producer, 0.0174445692, 2e-4)
	guarded := GlobalRisks(h, limits(math.Inf(-1), 2), limits(math.Inf(-1), 1.6718287716), constant(0.25))
	within(t, "guarded consumer's risk", guarded.Consumer, 0.001, 5e-4)
	within(t, "guarded producer's risk", guarded.Producer, 0.0754938763, 2e-4)
	if none := GlobalRisks(h, limits(math.Inf(-1), 2), limits(math.Inf(-1), 2), constant(1e-9)); none.Consumer+none.Producer > 1e-6 {
		t.Errorf("a perfect instrument errs: %+v", none)
	}
}

// Both limits, against a double sum over values and readings: normal values of
// standard deviation 1 about 0.3, limits −1.5 and 1.2, accepted −1.1 to 0.8, u
// of 0.2.
func TestGlobalRisksAgainstADoubleSum(t *testing.T) {
	const u, step = 0.2, 0.0025
	value, reading := distuv.Normal{Mu: 0.3, Sigma: 1}, distuv.Normal{Sigma: u}
	var want Risks
	for x := -6 + step/2; x < 6; x += step {
		accepted := 0.0
		for y := -1.1 + step/2; y < 0.8; y += step {
			accepted += reading.Prob(y-x) * step
		}
		if x < -1.5 || x > 1.2 {
			want.Consumer += value.Prob(x) * step * accepted
		} else {
			want.Producer += value.Prob(x) * step * (1 - accepted)
		}
	}
	column := make([]float64, 200_000)
	for i := range column {
		column[i] = value.Quantile((float64(i) + 0.5) / float64(len(column)))
	}
	h := spread.NewHistogram(0)
	h.AddColumn(column, nil)
	got := GlobalRisks(h, limits(-1.5, 1.2), limits(-1.1, 0.8), constant(u))
	within(t, "consumer's risk", got.Consumer, want.Consumer, 1e-3)
	within(t, "producer's risk", got.Producer, want.Producer, 1e-3)
}

// JCGM 106:2012, 7.4: a Zener diode that must be below −5.4 V reads −5.47 V
// with u = 0.05 V, and conforms with 0.92 (0.9192433408 worked out).
func TestConformance(t *testing.T) {
	within(t, "conformance", Conformance(-5.47, 0.05, math.Inf(-1), -5.4), 0.9192433408, 1e-9)
	within(t, "both limits", Conformance(0, 1, -1, 1), 0.6826894921370859, 1e-12) // one standard deviation
}

// A guard band of U leaves 1 − 1/2.5 = 0.6 of the limits where they are 2.5
// times as wide as U (the rule of ISO 14253-1), and at its edge 2.275 % miss
// the target, Φ(−2).
func TestGuardBandOfU(t *testing.T) {
	i := build.Instrument{Floor: math.Sqrt(3) / 2} // U = 1
	w := window{i, Uncertainty, spread.Loading{Scale: 1}, -2.5, 2.5}
	l, ok := w.accept(i)
	if !ok {
		t.Fatal("nothing is left")
	}
	within(t, "accept", float64(l.High)/2.5, 0.6, 1e-12)
	within(t, "accept", float64(l.Low)/-2.5, 0.6, 1e-12)
	within(t, "at the edge", w.specificRisk(l), 0.022750131948179, 1e-9) // and 1e-15 beyond the other limit
	w.low = math.Inf(-1)
	if l, ok := w.accept(i); !ok || !math.IsInf(float64(l.Low), -1) || l.High != 1.5 {
		t.Errorf("a limit on one side gives %+v, %v", l, ok)
	}
}

// What would do for 11.95 to 12.05 V with a floor of 2 mV, from
// 2·(a·(11.95 + 12.05) + 2·0.002)/√3 = 0.1: a = (0.1·√3/2 − 0.004)/24 = 0.344 %.
// A floor of 60 mV alone takes 4·0.06/√3 = 0.139 V of the 0.1 V.
func TestTooCoarse(t *testing.T) {
	w := window{build.Instrument{Name: "dmm", Accuracy: 0.005, Floor: 0.002}, Uncertainty, spread.Loading{Scale: 1}, 11.95, 12.05}
	if got, want := w.tooCoarse(), "the dmm is too coarse for the target: an accuracy of 0.34 % with the same floor would do"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	w.instrument.Floor = 0.06
	if got, want := w.tooCoarse(), "the dmm is too coarse for the target: its floor alone takes up the whole of it"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	w.loading.Uncertainty = 0.03 // 4·0.03 V are more than 0.1 V
	if got := w.tooCoarse(); got != "the dmm is too coarse for the target: no accuracy would do, since units differ too much in how far it pulls them" {
		t.Errorf("got %q", got)
	}
}

// The accepted window is put back into values: a meter that shows 0.9 of them
// with u = 0.18 errs as one that shows all with 0.2.
func TestRisksOfALoadedReading(t *testing.T) {
	h := balls(50_000)
	floor := func(u float64) build.Instrument { return build.Instrument{Floor: u * math.Sqrt(3)} } // U = 2u
	plain := window{floor(0.2), Uncertainty, spread.Loading{Scale: 1}, math.Inf(-1), 2}
	loaded := window{floor(0.18), Uncertainty, spread.Loading{Scale: 0.9, Shift: 0.05}, math.Inf(-1), 2}
	a, _ := plain.accept(plain.instrument)
	b, _ := loaded.accept(loaded.instrument)
	want, got := plain.globalRisks(h, a), loaded.globalRisks(h, b)
	within(t, "consumer's risk", got.Consumer, want.Consumer, 1e-9)
	within(t, "producer's risk", got.Producer, want.Producer, 1e-9)
	within(t, "accepted", float64(b.High), 0.9*2+0.05-0.36, 1e-12)
}
