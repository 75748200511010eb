package spread_test

import (
	"context"
	"testing"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// fitted is the embedded example with the parts that its plan picks.
func fitted(t testing.TB) *build.Model {
	t.Helper()
	b := example(t).Build
	want := []struct {
		family    string
		tolerance float64
		text      string
	}{
		{"powdered-iron-toroid", 0.05, "1.8 mH"}, {"polystyrene", 0.05, "220 pF"},
		{"film-trimmer", 0.1, "4..34 pF"}, {"x7r", 0.2, "2.2 nF"},
	}
	var choice []build.Fitting
	for i, o := range b.Openings {
		for _, f := range b.Fittings(o) {
			if f.Pieces[0].Family == want[i].family && f.Pieces[0].Tolerance == want[i].tolerance && f.Text == want[i].text {
				choice = append(choice, f)
			}
		}
	}
	fitted, err := b.Fit(choice)
	if err != nil {
		t.Fatal(err)
	}
	m, err := fitted.Compile()
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// TestExampleAgainstNumpy compares the example's beat with an independent
// simulation of 4000 batches, testdata/lantern.py. Tolerances are four standard
// errors: of a standard deviation some 1.5 % where lots are shared, of a share
// four times its interval's quarter.
func TestExampleAgainstNumpy(t *testing.T) {
	r, err := spread.Analyse(context.Background(), fitted(t), spread.Options{Seed: 11, Units: 48_000})
	if err != nil {
		t.Fatal(err)
	}
	y := find(t, r, "mixer.offset", "switch on", "bench")
	near(t, "warm-up, mean", y.Simulated.Mean, 0.944, 0.6)
	near(t, "warm-up, standard deviation", y.Simulated.StandardDeviation, 10.63, 0.25)
	near(t, "warm-up, 2.5 %", y.Simulated.Quantiles["0.025"], -18.81, 0.8)
	near(t, "warm-up, 97.5 %", y.Simulated.Quantiles["0.975"], 22.99, 0.8)
	y = find(t, r, "mixer.offset", "cool hall", "bench")
	near(t, "cool hall, mean", y.Simulated.Mean, -26.07, 1.0)
	near(t, "cool hall, standard deviation", y.Simulated.StandardDeviation, 17.76, 0.6)
	y = find(t, r, "mixer.offset", "hand near", "")
	near(t, "hand near, mean", y.Simulated.Mean, 1759.2, 3)
	near(t, "hand near, standard deviation", y.Simulated.StandardDeviation, 35.88, 1.0)
	y = find(t, r, "fixed.frequency", "bench", "")
	near(t, "frequency, mean", y.Simulated.Mean, 329352, 300)
	near(t, "frequency, standard deviation", y.Simulated.StandardDeviation, 3653, 180)
	for name, want := range map[string]float64{"warm-up drift": 0.99342, "room drift": 0.99608, "playing range": 0.99964, "every unit tunes": 0.99964} {
		for _, target := range r.Targets {
			if target.Name == name {
				near(t, name, target.Share, want, 0.0025)
			}
		}
	}
	near(t, "tuner's mean setting", r.Trims[1].Setting.Mean, 0.2944, 0.008)
}
