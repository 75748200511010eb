package quantity

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestFormat(t *testing.T) {
	for _, c := range []struct {
		v      float64
		unit   Unit
		digits int
		want   string
	}{
		{220e-12, Farad, 3, "220 pF"}, {4700, Ohm, 3, "4.70 kΩ"}, {-12, Volt, 3, "-12.0 V"}, {0.0125, Percent, 3, "1.25 %"},
		{220e-12, Farad, 0, "220 pF"}, {4700, Ohm, 0, "4.7 kΩ"}, {1e-9, Farad, 0, "1 nF"}, {0.47, Ohm, 0, "470 mΩ"},
		{999.96, Ohm, 4, "1.000 kΩ"}, {999.94, Ohm, 4, "999.9 Ω"}, {999.9999, Ohm, 0, "999.9999 Ω"},
		{224e-12, Farad, 2, "224 pF"}, {332.1e3, Hertz, 4, "332.1 kHz"}, {332.1e3, Hertz, 7, "332.1000 kHz"}, {0.3, Hertz, 3, "0.300 Hz"},
		{30e-6, PPMPerKelvin, 3, "30.0 ppm/K"}, {-200e-6, PPMPerKelvin, 0, "-200 ppm/K"}, {30e-6, PerKelvin, 0, "30 ppm/K"}, {-0.035e-6, PerKelvin2, 0, "-0.035 ppm/K²"}, {0.01, PPMPerPercentRH, 0, "100 ppm/% RH"},
		{23, Celsius, 3, "23.0 °C"}, {-5, Celsius, 0, "-5 °C"}, {3, Kelvin, 2, "3.0 K"}, {3.6e6, Hour, 0, "1000 h"}, {1800, Hour, 0, "0.5 h"}, {3600, Second, 0, "3600 s"},
		{-3, Decibel, 2, "-3.0 dB"}, {0.001, Decibel, 0, "0.001 dB"}, {20, Cent, 0, "20 cents"}, {0.5, One, 3, "0.500"}, {1234567, One, 3, "1234567"}, {1e-9, One, 0, "1e-9"}, {1.5e-9, One, 3, "1.50e-9"}, {1e20, One, 0, "1e20"},
		{13e6, VoltPerSecond, 3, "13.0 V/µs"}, {-2e-3, VoltPerKelvin, 3, "-2.00 mV/K"}, {4.7e-6, Farad, 3, "4.70 µF"},
		{0, Volt, 3, "0 V"}, {math.Copysign(0, -1), Volt, 3, "0 V"}, {math.NaN(), Volt, 3, "–"}, {math.Inf(1), Volt, 3, "∞ V"}, {math.Inf(-1), Volt, 3, "-∞ V"},
		{1e-18, Farad, 3, "0.00100 fF"}, {1e15, Ohm, 0, "1000 TΩ"}, {5e-324, Volt, 0, "5e-315 nV"}, {math.MaxFloat64, Volt, 2, "1.8e305 kV"},
		{12345, Unit{Symbol: "kHz", Scale: 1e3, Dimension: Hertz.Dimension}, 3, "12.3 kHz"},
		{7200, Unit{Symbol: "min", Scale: 60, Dimension: Second.Dimension}, 0, "120 min"},
	} {
		if got := Format(c.v, c.unit, c.digits); got != c.want {
			t.Errorf("Format(%v, %s, %d) = %q, want %q", c.v, c.unit.Symbol, c.digits, got, c.want)
		}
	}
}

func TestFormatRange(t *testing.T) {
	for _, c := range []struct {
		low, high float64
		unit      Unit
		want      string
	}{
		{4e-12, 34e-12, Farad, "4..34 pF"}, {0, 10e3, Ohm, "0..10 kΩ"}, {500, 1e3, Ohm, "0.5..1 kΩ"}, {0.2, 0.8, One, "0.2..0.8"}, {-15, 15, Volt, "-15..15 V"},
	} {
		got := FormatRange(c.low, c.high, c.unit, 0)
		if got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
		low, high, err := ParseRange(got, c.unit)
		if err != nil || low.Value != c.low || high.Value != c.high {
			t.Errorf("%q reads as %v to %v, %v", got, low.Value, high.Value, err)
		}
	}
}

func TestPrefixed(t *testing.T) {
	for _, c := range []struct {
		v      float64
		unit   Unit
		scale  float64
		symbol string
	}{
		{332.1e3, Hertz, 1e3, "kHz"}, {-332.1e3, Hertz, 1e3, "kHz"}, {220e-12, Farad, 1e-12, "pF"}, {1e-6, Farad, 1e-6, "µF"}, {0, Farad, 1, "F"}, {math.NaN(), Volt, 1, "V"}, {math.Inf(1), Volt, 1, "V"},
		{0.05, Percent, 0.01, "%"}, {23, Celsius, 1, "°C"}, {60, Decibel, 1, "dB"}, {3.6e6, Hour, 3600, "h"}, {30e-6, PPMPerKelvin, 1e-6, "ppm/K"}, {1, Unit{Symbol: "kHz", Scale: 1e3}, 1e3, "kHz"},
	} {
		if scale, symbol := Prefixed(c.v, c.unit); scale != c.scale || symbol != c.symbol {
			t.Errorf("Prefixed(%v, %s) = %v, %q, want %v, %q", c.v, c.unit.Symbol, scale, symbol, c.scale, c.symbol)
		}
	}
}

func TestFind(t *testing.T) {
	for _, c := range []struct {
		text string
		want Unit
	}{
		{"Hz", Hertz}, {"%", Percent}, {"°C", Celsius}, {"degC", Celsius}, {"\u2126", Ohm}, {"ohm", Ohm}, {"1", One}, {"dB", Decibel}, {"cent", Cent}, {"cents", Cent}, {"h", Hour}, {"ppm/K", PPMPerKelvin}, {"K", Kelvin},
		{"V/K", VoltPerKelvin}, {"V/s", VoltPerSecond}, {"/K", PerKelvin}, {"1/K^3", PerKelvin3}, {"ppm/%RH", PPMPerPercentRH}, {" V ", Volt}, {"volt", Volt}, {"1/s", Hertz},
		{"kHz", Unit{Symbol: "kHz", Scale: 1e3, Dimension: Hertz.Dimension}}, {"mV", Unit{Symbol: "mV", Scale: 1e-3, Dimension: Volt.Dimension}}, {"mV/K", Unit{Symbol: "mV/K", Scale: 1e-3, Dimension: VoltPerKelvin.Dimension}},
		{"cm²", Unit{Symbol: "cm²", Scale: 1e-4, Dimension: si(0, 2, 0, 0, 0)}}, {"V·s", Unit{Symbol: "V·s", Scale: 1, Dimension: si(1, 2, -2, -1, 0)}}, {"m/h", Unit{Symbol: "m/h", Scale: 1.0 / 3600, Dimension: si(0, 1, -1, 0, 0)}},
	} {
		got, ok := Find(c.text)
		if diff := cmp.Diff(c.want, got); !ok || diff != "" {
			t.Errorf("Find(%q): %v %s", c.text, ok, diff)
		}
	}
	for _, text := range []string{"", "x", "kk", "V V", "V//K", "/", "V/", "%%", "°C/V", "dB²", "V·dB", "V·°C", "V/dB", "% RH·V", "V·% RH", "V/% RH²", "k", "Hz^9", "2"} {
		if got, ok := Find(text); ok {
			t.Errorf("Find(%q) = %+v", text, got)
		}
	}
}
