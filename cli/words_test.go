package cli

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/spread"
)

// One prefix and one number of decimals a row: the standard uncertainty shows
// two digits. Expected texts are worked out by hand from that rule.
func TestRow(t *testing.T) {
	for _, c := range []struct {
		name        string
		unit        string
		uncertainty float64
		figures     []float64
		symbol      string
		want        []string
	}{
		{"frequency", "Hz", 3100, []float64{329_177.4, 317_060, 342_110}, "kHz", []string{"329.2", "317.1", "342.1"}},
		{"trimmed to nothing", "Hz", 1.15, []float64{-1.2e-10, -2, 2}, "Hz", []string{"0.0", "-2.0", "2.0"}},
		{"volts", "V", 0.163, []float64{12.0004, 11.51, 12.49}, "V", []string{"12.00", "11.51", "12.49"}},
		{"no scatter", "V", 0, []float64{4.5, 4.5}, "V", []string{"4.5000", "4.5000"}},
		{"only rounding for scatter", "V", 4e-17, []float64{4.5}, "V", []string{"4.5000"}},
		{"nothing at all", "Hz", 0, []float64{0, 0}, "Hz", []string{"0", "0"}},
		{"plain number", "1", 0.01, []float64{0.5}, "", []string{"0.500"}},
		{"missing", "Hz", 10, []float64{1000, math.NaN(), math.Inf(1), math.Inf(-1)}, "kHz", []string{"1.000", "–", "∞", "-∞"}},
		{"uncertainty unknown", "Hz", math.NaN(), []float64{1234.5}, "kHz", []string{"1.2345"}},
		{"far wider than it is large", "Hz", 5e6, []float64{100}, "Hz", []string{"100"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := newRow(c.unit, c.uncertainty, c.figures...)
			var got []string
			for _, x := range c.figures {
				got = append(got, r.text(spread.Figure(x)))
			}
			if diff := cmp.Diff(c.want, got); diff != "" || r.symbol != c.symbol {
				t.Errorf("unit %q, want %q; figures\n%s", r.symbol, c.symbol, diff)
			}
		})
	}
}

func TestTolerance(t *testing.T) {
	for _, c := range []struct {
		want    string
		scatter part.Scatter
	}{
		{"±5 %", part.Scatter{Tolerance: 0.05}},
		{"±5 %", part.Scatter{Tolerance: 0.05, Shape: part.Normal}},
		{"±20 % uniform", part.Scatter{Tolerance: 0.2, Shape: part.Uniform}},
		{"±40 mV", part.Scatter{Tolerance: 0.04, Absolute: true}},
	} {
		if got := tolerance(c.scatter, quantity.Volt); got != c.want {
			t.Errorf("tolerance(%+v) = %q, want %q", c.scatter, got, c.want)
		}
	}
}

func TestSlug(t *testing.T) {
	for _, c := range []struct{ name, title, want string }{
		{"plain", "Lantern tone box", "lantern-tone-box"},
		{"path", "../../etc/passwd", "etc-passwd"},
		{"letters of other alphabets", "Gerät Nº 7 (Ω)", "gerät-nº-7-ω"},
		{"nothing to use", "…/…", "plan"},
		{"empty", "", "plan"},
		{"runs and ends", "--a   b--", "a-b"},
		{"long", "a123456789b123456789c123456789d123456789e123456789f123456789g", "a123456789b123456789c123456789d123456789e123456789f123456789"},
	} {
		t.Run(c.name, func(t *testing.T) {
			if got := slug(c.title); got != c.want {
				t.Errorf("slug(%q) = %q, want %q", c.title, got, c.want)
			}
		})
	}
}

func TestList(t *testing.T) {
	for _, c := range []struct {
		words []string
		want  string
	}{
		{nil, ""}, {[]string{"a"}, "a"}, {[]string{"a", "b"}, "a or b"}, {[]string{"a", "b", "c"}, "a, b or c"},
	} {
		if got := list(c.words); got != c.want {
			t.Errorf("list(%q) = %q, want %q", c.words, got, c.want)
		}
	}
}
