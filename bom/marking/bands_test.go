package marking

import (
	"math"
	"strings"
	"testing"

	"batchwright/bom/series"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// Table 1 of IEC 60062:2016 from three public charts, in percent and ppm/K; nil
// where a colour has no meaning. Grey as a tolerance is from memory: 0.05 % in
// older charts.
func TestColourTable(t *testing.T) {
	const no = none
	want := []struct {
		name                              string
		digit, multiplier, percent, slope float64
	}{
		{"black", 0, 1, no, 250}, {"brown", 1, 10, 1, 100}, {"red", 2, 100, 2, 50}, {"orange", 3, 1e3, 0.05, 15},
		{"yellow", 4, 1e4, 0.02, 25}, {"green", 5, 1e5, 0.5, 20}, {"blue", 6, 1e6, 0.25, 10}, {"violet", 7, 1e7, 0.1, 5},
		{"grey", 8, 1e8, 0.01, 1}, {"white", 9, 1e9, no, no}, {"gold", no, 0.1, 5, no}, {"silver", no, 0.01, 10, no}, {"pink", no, 0.001, no, no},
	}
	if len(want) != len(colours) {
		t.Fatalf("%d colours, want %d", len(colours), len(want))
	}
	for _, w := range want {
		t.Run(w.name, func(t *testing.T) {
			// One reading for each meaning, the other bands being plain.
			check := func(what string, bands []string, want float64, part func(Reading, float64) float64) {
				t.Helper()
				r, tc, err := ReadBands(bands)
				if want == no {
					if err == nil {
						t.Errorf("%s: %v reads as %+v", what, bands, r)
					}
					return
				}
				if got := part(r, tc); err != nil || math.Abs(got-want) > 1e-12*want {
					t.Errorf("%s: %v, want %v, %v", what, got, want, err)
				}
			}
			value := func(r Reading, _ float64) float64 { return r.Value }
			digit := no
			if w.digit != no {
				digit = 10 + int(w.digit)
			}
			check("digit", []string{"brown", w.name, "black"}, float64(digit), value)
			check("multiplier", []string{"brown", "black", w.name}, 10*w.multiplier, value)
			check("tolerance", []string{"brown", "black", "black", w.name}, w.percent, func(r Reading, _ float64) float64 { return 100 * r.High })
			check("slope", []string{"brown", "black", "black", "black", "brown", w.name}, w.slope, func(_ Reading, tc float64) float64 { return 1e6 * tc })
		})
	}
}

// The first four are from a public chart of IEC 60062, the fifth is the caption
// of an encyclopaedia's photograph, the last four are examples 2.4 to 2.7 of
// M. H. Tooley, Electronic Circuits: Fundamentals and Applications, their band
// lists from memory.
var bandCases = []struct {
	bands           string
	ohms, tolerance float64
}{
	{"brown black red gold", 1000, 0.05},
	{"yellow violet red gold", 4700, 0.05},
	{"red red orange gold", 22000, 0.05},
	{"brown black black gold brown", 10, 0.01},
	{"red red blue brown brown", 2260, 0.01},
	{"brown black red silver", 1000, 0.1},
	{"red violet orange gold", 27000, 0.05},
	{"green blue black gold", 56, 0.05},
	{"red green black", 25, 0.2},
}

func TestBandsBothWays(t *testing.T) {
	for _, c := range bandCases {
		t.Run(c.bands, func(t *testing.T) {
			got, tc, err := ReadBands(strings.Fields(c.bands))
			if err != nil || tc != 0 {
				t.Fatal(err, tc)
			}
			if diff := cmp.Diff(Reading{c.ohms, -c.tolerance, c.tolerance}, got, close12); diff != "" {
				t.Error(diff)
			}
			bands, ok := Bands(c.ohms, c.tolerance, 0)
			if text := strings.Join(bands, " "); !ok || text != c.bands {
				t.Errorf("Bands(%v, %v) = %q, %v", c.ohms, c.tolerance, text, ok)
			}
		})
	}
}

func TestBandsThatCannotBe(t *testing.T) {
	for _, c := range []struct {
		reason              string
		ohms, tolerance, tc float64
	}{
		{"2.5 % has no colour", 1000, 0.025, 0},
		{"no tolerance given", 1000, 0, 0},
		{"four figures", 1234, 0.01, 0},
		{"beyond white", 1e13, 0.05, 0},
		{"below pink", 1e-4, 0.05, 0},
		{"no such slope", 1000, 0.01, 75e-6},
		{"three figures without a band of tolerance", 1210, 0.2, 0},
		{"NaN", math.NaN(), 0.05, 0},
		{"NaN tolerance", 1000, math.NaN(), 0},
		{"negative", -1000, 0.05, 0},
	} {
		if got, ok := Bands(c.ohms, c.tolerance, c.tc); ok {
			t.Errorf("%s: %v", c.reason, got)
		}
	}
	for _, bands := range []string{"", "red", "red red", "gold red red red", "red gold red red", "red red red white", "red red mauve", "red red red red red red red"} {
		if got, _, err := ReadBands(strings.Fields(bands)); err == nil {
			t.Errorf("%q reads as %+v", bands, got)
		}
	}
}

func TestZeroOhmsIsOneBlackBand(t *testing.T) {
	bands, ok := Bands(0, 0.05, 0)
	got, _, err := ReadBands(bands)
	if !ok || err != nil || got.Value != 0 || len(bands) != 1 {
		t.Errorf("%v, %v, %+v, %v", bands, ok, got, err)
	}
}

func TestBandsReadBack(t *testing.T) {
	tolerances := []float64{0.0001, 0.0002, 0.0005, 0.001, 0.0025, 0.005, 0.01, 0.02, 0.05, 0.1}
	slopes := []float64{0, 250e-6, 100e-6, 50e-6, 25e-6, 20e-6, 15e-6, 10e-6, 5e-6, 1e-6}
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(series.Names()).Draw(t, "series")
		ohms := series.Nearest(name, math.Pow(10, rapid.Float64Range(0, 10).Draw(t, "decade")))
		tolerance := rapid.SampledFrom(tolerances).Draw(t, "tolerance")
		slope := rapid.SampledFrom(slopes).Draw(t, "slope")
		bands, ok := Bands(ohms, tolerance, slope)
		if !ok {
			t.Fatalf("no bands for %v ±%v, %v", ohms, tolerance, slope)
		}
		got, tc, err := ReadBands(bands)
		if err != nil || got != symmetric(ohms, tolerance) || tc != slope {
			t.Fatalf("%v ±%v, %v is %v, which reads as %+v, %v, %v", ohms, tolerance, slope, bands, got, tc, err)
		}
	})
}

// Example 2.24 of M. H. Tooley, Electronic Circuits: Fundamentals and
// Applications: 150 pF, 2 %, 100 V; the list of stripes is from memory.
func TestReadStripes(t *testing.T) {
	got, volts, err := ReadStripes([]string{"brown", "green", "brown", "red", "brown"})
	if err != nil || volts != 100 {
		t.Fatal(volts, err)
	}
	if diff := cmp.Diff(Reading{150e-12, -0.02, 0.02}, got, close12); diff != "" {
		t.Error(diff)
	}
	// From memory, so this only detects change.
	for stripes, want := range map[string][2]float64{"black brown": {0.2, 100}, "white red": {0.1, 250}, "green yellow": {0.05, 400}, "brown brown": {0.01, 100}} {
		got, volts, err := ReadStripes(strings.Fields("brown green brown " + stripes))
		if err != nil || got.High != want[0] || got.Low != -want[0] || volts != want[1] {
			t.Errorf("%s: %+v, %v, %v", stripes, got, volts, err)
		}
	}
	for _, bad := range []string{"brown green brown red", "brown green brown mauve brown", "brown green brown red gold", "gold green brown red brown"} {
		if got, _, err := ReadStripes(strings.Fields(bad)); err == nil {
			t.Errorf("%q reads as %+v", bad, got)
		}
	}
}
