package workbook

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// The rule is windowScale's: U/5, or W/1000 if coarser, never above W/20.
func TestWindowScale(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		name, unit string
		u, largest float64
		windows    []float64
		want       scale
	}{
		{"12 V to 62 mV: U/5 is 12 mV, a hundredth", "V", 0.062, 12.49, []float64{0.97}, scale{1, "V", 2}},
		{"332 kHz to 6.6 Hz in a 34 kHz window: W/1000 is 34 Hz, ten hertz", "Hz", 6.64, 349871, []float64{33621}, scale{1e3, "kHz", 2}},
		{"the same in a 200 Hz window: U/5 is 1.3 Hz, one hertz", "Hz", 6.64, 332200, []float64{200}, scale{1e3, "kHz", 3}},
		{"a window narrower than the instrument: W/20 is 0.25 mV", "V", 0.1, 1, []float64{0.005}, scale{1, "V", 4}},
		{"the narrower window decides", "V", 0.005, 2, []float64{1, 0.02}, scale{1, "V", 3}},
		{"nothing known: four digits", "V", nan, 1.5, []float64{nan}, scale{1, "V", 3}},
		{"nothing at all", "V", nan, nan, nil, scale{1, "V", 0}},
		{"a ratio has no unit", "1", 0.05, 21, []float64{2}, scale{1, "", 2}},
		{"a unit nobody knows stays as it is", "furlong", 0.05, 2100, []float64{2}, scale{1, "furlong", 2}},
	} {
		t.Run(c.name, func(t *testing.T) {
			got := windowScale(c.unit, c.u, c.largest, c.windows...)
			if d := cmp.Diff(c.want, got, cmp.AllowUnexported(scale{})); d != "" {
				t.Errorf("(-want +got):\n%s", d)
			}
		})
	}
}

func TestRounding(t *testing.T) {
	s := scale{1e3, "kHz", 2}
	for _, c := range []struct {
		name string
		got  float64
		want float64
	}{
		{"below", s.below(316259.9), 316.25},
		{"above", s.above(316250.1), 316.26},
		{"nearest", s.nearest(316255.1), 316.26},
		{"below, negative goes away from zero", s.below(-1), -0.01},
		{"above, negative goes to zero and loses its sign", s.above(-1), 0},
		{"a decimal that binary cannot hold stays", s.above(0.29 * 1e3), 0.29},
		{"a decimal that binary cannot hold stays below", s.below(0.57 * 1e3), 0.57},
	} {
		if c.got != c.want || math.Signbit(c.got) != math.Signbit(c.want) {
			t.Errorf("%s: %v, want %v", c.name, c.got, c.want)
		}
	}
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		if got := s.below(v); !math.IsNaN(got) {
			t.Errorf("%v became %v", v, got)
		}
	}
}

// For any figures: outward limits hold the true ones, within one step; what is
// stored is exactly what its printed digits read back as.
func TestRoundingHolds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.Float64Range(-1e6, 1e6).Draw(t, "v")
		s := scale{math.Pow(10, float64(rapid.IntRange(-12, 6).Draw(t, "by"))), "V", rapid.IntRange(0, 6).Draw(t, "decimals")}
		v *= s.by
		step := math.Pow(10, -float64(s.decimals))
		low, high, x := s.below(v), s.above(v), v/s.by
		slack := 2e-6*step + 1e-12*math.Abs(x)
		if !(low <= x+slack && high >= x-slack && high-low <= step*(1+1e-6)+1e-9) {
			t.Fatalf("%v is not within [%v, %v]", x, low, high)
		}
		back, err := strconv.ParseFloat(strconv.FormatFloat(low, 'f', s.decimals, 64), 64)
		if err != nil || back != low {
			t.Fatalf("%v prints as %v", low, back)
		}
	})
}

func TestFormatHasTheDecimals(t *testing.T) {
	for decimals, want := range map[int]string{0: "0_)", 2: "0.00_)"} {
		if got := (scale{1, "V", decimals}).format(); got != want {
			t.Errorf("%d decimals: %s, want %s", decimals, got, want)
		}
	}
	if got := (scale{1, "V", 1}).text(math.NaN()); strings.ContainsAny(got, "NaN") {
		t.Errorf("NaN is shown as %s", got)
	}
}

// A reading far off is no slip of the unit where the window holds zero: made a
// thousand times smaller, anything would be inside.
func TestNoOtherUnitAboutZero(t *testing.T) {
	for _, c := range []struct {
		name      string
		low, high float64
		v         float64
		suspect   bool
	}{
		{"about zero", -0.1, 0.1, -5.3, false}, {"a thousand times too large", 4.4, 4.6, 4500, true}, {"a thousand times too small", 4.4, 4.6, 0.0045, true},
	} {
		r := rowInUnit(benchRow{scale: scale{by: 1, symbol: "V"}}, "V")
		r.window = limits(c.low, c.high)
		if got := r.suspect(c.v); (got != "") != c.suspect {
			t.Errorf("%s: %q", c.name, got)
		}
	}
}
