package part

import (
	"testing"

	"github.com/google/go-cmp/cmp"
)

// What steady voltage leaves of class 2 capacitors, three component application
// notes; typical, and no limits. Which letters the first two have is not said:
// both X7R and X5R must span them. 28 % is 1.3 µF of 4.7 µF.
func TestBiasSpansPublished(t *testing.T) {
	for _, c := range []struct {
		name        string
		families    []string
		share, left float64
	}{
		{"10 µF 10 V 0805 at 5 V", []string{"x7r", "x5r"}, 5. / 10, 0.5},
		{"10 µF 10 V 1206 at 5 V", []string{"x7r", "x5r"}, 5. / 10, 0.93},
		{"4.7 µF 25 V X5R 0805 at 25 V", []string{"x5r"}, 25. / 25, 0.15},
		{"4.7 µF 25 V X5R 0603 at 10 V", []string{"x5r"}, 10. / 25, 0.2765957447},
		{"C0G at its rated voltage", []string{"c0g", "u2j", "polypropylene", "mica"}, 1, 1},
	} {
		for _, name := range c.families {
			low, high := family(t, name).Scatter.BiasLimits(c.share)
			if !(1+low <= c.left && c.left <= 1+high) {
				t.Errorf("%s, %s: %g left, the law has %g to %g", c.name, name, c.left, 1+low, 1+high)
			}
		}
	}
}

// Class 2 families lose to voltage, the more of it the more; nothing else does.
func TestOnlyClass2HasBias(t *testing.T) {
	class2 := map[string]bool{"x7r": true, "x7s": true, "x5r": true, "y5v": true, "z5u": true}
	all := Embedded()
	for _, name := range all.Names() {
		f := family(t, name)
		if got := len(f.Scatter.Bias) > 0; got != class2[name] {
			t.Errorf("%s: a bias law is there: %v", name, got)
		}
		for i, p := range f.Scatter.Bias {
			if i > 0 && !(-1 < p.Low && p.Low < p.High && p.High < f.Scatter.Bias[i-1].High) {
				t.Errorf("%s: point %d is %+v", name, i, p)
			}
		}
	}
}

// At the points, between them and beyond; (share, low, high) by hand.
func TestBiasLimits(t *testing.T) {
	s := Scatter{Bias: []BiasPoint{{}, {0.5, -0.4, -0.1}, {1, -0.7, -0.2}}}
	for _, c := range []struct{ share, low, high float64 }{
		{0, 0, 0}, {0.25, -0.2, -0.05}, {0.5, -0.4, -0.1}, {0.8, -0.58, -0.16}, {1, -0.7, -0.2}, {2, -0.7, -0.2},
	} {
		low, high := s.BiasLimits(c.share)
		near(t, "low", low, c.low, 1e-15)
		near(t, "high", high, c.high, 1e-15)
	}
	if low, high := (Scatter{}).BiasLimits(1); low != 0 || high != 0 {
		t.Errorf("without a law %g to %g", low, high)
	}
}

// A point of one change is exact; a law given stands in the family's place, and
// the rest of the family stays.
func TestReadBias(t *testing.T) {
	c := mustParse(t, "families: {x7r: {bias_law: [[0 %, 0 %], [50 %, -25 %], [100 %, -60 %, -40 %]], voltage: 16 V}}")
	got, _ := c.Family("x7r")
	want := *family(t, "x7r")
	want.Voltage = 16
	want.Scatter.Bias = []BiasPoint{{}, {0.5, -0.25, -0.25}, {1, -0.6, -0.4}}
	if d := cmp.Diff(&want, got, floats); d != "" {
		t.Error(d)
	}
	if p, err := got.Fit("C1", 100e-9, 0.1); err != nil || p.Rated != 16 {
		t.Errorf("rated %g V, %v", p.Rated, err)
	}
}

// A rating that is not the family's is part of what is bought.
func TestBought(t *testing.T) {
	f := family(t, "x7r")
	p, err := f.Fit("C1", 100e-9, 0.1)
	if err != nil {
		t.Fatal(err)
	}
	if got := p.Bought(f); got != "100 nF" {
		t.Errorf("at the family's rating %q", got)
	}
	p.Rated = 16
	if got := p.Bought(f); got != "100 nF, 16 V" {
		t.Errorf("at another %q", got)
	}
	if got := p.Bought(nil); got != "100 nF, 16 V" {
		t.Errorf("without a family %q", got)
	}
}
