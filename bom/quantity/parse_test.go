package quantity

import (
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// Expected figures are the literals of the same decimal text: reading is exact.
func TestParse(t *testing.T) {
	for _, c := range []struct {
		text string
		unit Unit
		want float64
	}{
		// Letter codes: values read in a public summary of IEC 60062:2016.
		{"R47", Ohm, 0.47}, {"4R7", Ohm, 4.7}, {"470R", Ohm, 470}, {"4K7", Ohm, 4700}, {"4k7", Ohm, 4700}, {"47K3", Ohm, 47300}, {"4M7", Ohm, 4.7e6},
		{"240R", Ohm, 240}, {"150k", Ohm, 150e3}, {"1T0", Ohm, 1e12}, {"3G3", Ohm, 3.3e9}, {"0R", Ohm, 0}, {"0R05", Ohm, 0.05},
		{"4p7", Farad, 4.7e-12}, {"n33", Farad, 330e-12}, {"100n", Farad, 100e-9}, {"33\u00b5", Farad, 33e-6}, {"3\u03bc3", Farad, 3.3e-6}, {"3u3", Farad, 3.3e-6}, {"m33", Farad, 0.33e-3}, {"1F0", Farad, 1},
		{"2u2F", Farad, 2.2e-6}, {"4k7Ω", Ohm, 4700}, {"5V1", Volt, 5.1}, {"4u7", Henry, 4.7e-6}, {"1m8", Henry, 1.8e-3}, {"4.7k", Ohm, 4700},
		// Symbols and their spellings.
		{"240 \u03a9", Ohm, 240}, {"240 \u2126", Ohm, 240}, {"240 ohm", Ohm, 240}, {"240 ohms", Ohm, 240}, {"240 Ohm", Ohm, 240}, {"4.7 kΩ", Ohm, 4700}, {"4.7 kohm", Ohm, 4700}, {"4.7 KΩ", Ohm, 4700}, {"10 MΩ", Ohm, 10e6}, {"5 mΩ", Ohm, 5e-3},
		{"470 uH", Henry, 470e-6}, {"470 \u00b5H", Henry, 470e-6}, {"470 \u03bcH", Henry, 470e-6}, {"470uH", Henry, 470e-6}, {"470\u00a0µH", Henry, 470e-6}, {"1.8 mH", Henry, 1.8e-3},
		{"1.5 nF", Farad, 1.5e-9}, {"220 pF", Farad, 220e-12}, {"0 pF", Farad, 0}, {"10 fF", Farad, 10e-15}, {"2.2e-10 F", Farad, 2.2e-10}, {"2.2E-4 µF", Farad, 2.2e-10},
		{"60 Hz", Hertz, 60}, {"332.1 kHz", Hertz, 332.1e3}, {"332.1 KHz", Hertz, 332.1e3}, {"3.579545 MHz", Hertz, 3.579545e6}, {"-2 Hz", Hertz, -2},
		{"-12 V", Volt, -12}, {"\u221212 V", Volt, -12}, {"+12 V", Volt, 12}, {"12V", Volt, 12}, {".5 V", Volt, 0.5}, {"5. V", Volt, 5}, {"-0.12 V", Volt, -0.12}, {"-120 mV", Volt, -0.12}, {"  12 V  ", Volt, 12},
		{"2 mA", Ampere, 2e-3}, {"250 mW", Watt, 0.25}, {"2 mS", Siemens, 2e-3}, {"0.5 A/V", Siemens, 0.5},
		{"40 cm", Metre, 0.4}, {"40 mm", Metre, 0.04}, {"10 ms", Second, 0.01}, {"1000 h", Hour, 3.6e6}, {"1000 h", Second, 3.6e6}, {"0 h", Hour, 0},
		{"23 °C", Celsius, 23}, {"23 degC", Celsius, 23}, {"23 \u2103", Celsius, 23}, {"-40 °C", Celsius, -40}, {"0 °C", Celsius, 0}, {"23°C", Celsius, 23}, {"3 K", Kelvin, 3}, {"3 mK", Kelvin, 3e-3},
		{"5 %", Percent, 0.05}, {"5%", Percent, 0.05}, {"±5 %", Percent, 0.05}, {"± 5 %", Percent, 0.05}, {"2.5 %", Percent, 0.025}, {"99.73 %", Percent, 0.9973}, {"100 ppm", Percent, 1e-4}, {"20 ppm", PPM, 20e-6}, {"50 ppb", PPM, 50e-9},
		{"0.5", One, 0.5}, {"-1", One, -1}, {"1e6", One, 1e6}, {"50 %", One, 0.5}, {"0", One, 0}, {"0e5", One, 0},
		{"30 ppm/K", PPMPerKelvin, 30e-6}, {"-200 ppm/K", PPMPerKelvin, -200e-6}, {"±30 ppm/°C", PPMPerKelvin, 30e-6}, {"30 ppm/degC", PPMPerKelvin, 30e-6}, {"0.01 %/K", PPMPerKelvin, 1e-4}, {"3e-5 1/K", PPMPerKelvin, 3e-5}, {"3e-5 /K", PerKelvin, 3e-5},
		{"-0.035 ppm/K²", PerKelvin2, -0.035e-6}, {"-0.035 ppm/K2", PerKelvin2, -0.035e-6}, {"-0.035 ppm/K^2", PerKelvin2, -0.035e-6}, {"1e-4 ppm/K³", PerKelvin3, 1e-10},
		{"100 ppm/% RH", PPMPerPercentRH, 0.01}, {"100 ppm/%RH", PPMPerPercentRH, 0.01}, {"100 ppm/%", PPMPerPercentRH, 0.01},
		{"-2 mV/K", VoltPerKelvin, -2e-3}, {"-2 mV/°C", VoltPerKelvin, -2e-3}, {"13 V/µs", VoltPerSecond, 13e6}, {"13 V/us", VoltPerSecond, 13e6}, {"0.5 V/s", VoltPerSecond, 0.5},
		{"-0.3 dB", Decibel, -0.3}, {"60 dB", Decibel, 60}, {"20 cents", Cent, 20}, {"1 cent", Cent, 1},
		// The ends of what is plausible.
		{"10 TΩ", Ohm, 10e12}, {"10 F", Farad, 10}, {"1e-6 Ω", Ohm, 1e-6}, {"-273.15 °C", Celsius, -273.15},
	} {
		got, err := Parse(c.text, c.unit)
		if err != nil {
			t.Errorf("Parse(%q, %s): %v", c.text, c.unit.Symbol, err)
			continue
		}
		want := Quantity{c.want, c.unit, strings.TrimSpace(c.text)}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("Parse(%q, %s): %s", c.text, c.unit.Symbol, diff)
		}
	}
}

func TestParseRefuses(t *testing.T) {
	const ohms, farads = "a resistance, such as 4.7 kΩ", "a capacitance, such as 220 pF"
	const volts, share = "a voltage, such as 12 V", "a share, such as 5 %"
	const comma = "a comma in a number; the decimal mark is a dot, and thousands are not marked"
	for _, c := range []struct {
		text             string
		unit             Unit
		reason, expected string
	}{
		{"240", Ohm, "a number without a unit", "a resistance: 240R or 240 Ω"},
		{"2.4", Ohm, "a number without a unit", "a resistance: 2.4 Ω"},
		{"0", Farad, "a number without a unit", "a capacitance: 0 pF, 0 nF or another unit"},
		{"470", Henry, "a number without a unit", "an inductance: 470 µH, 470 mH or another unit"},
		{"5", Percent, "a number without a unit", "a share: 5 %"},
		{"23", Celsius, "a number without a unit", "a temperature: 23 °C"},
		{"12", Volt, "a number without a unit", "a voltage: 12 V"},
		{"4,7 kΩ", Ohm, comma, ohms}, {"4,7", Ohm, comma, ohms}, {"24,000 Ω", Ohm, comma, ohms}, {"1,5", One, comma, "a plain number, such as 0.5"},
		{"5 Hz", Ohm, "wrong unit: Hz is for a frequency", ohms},
		{"5 %", Ohm, "wrong unit: % is for a share", ohms},
		{"5 kg", Ohm, "wrong unit: kg is kg", ohms},
		{"5 V²", Ohm, "wrong unit: V² is kg²·m⁴/(s⁶·A²)", ohms},
		{"3 K", Celsius, "wrong unit: K is for a temperature difference", "a temperature, such as 23 °C"},
		{"23 °C", Kelvin, "wrong unit: °C is for a temperature", "a temperature difference, such as 3 K"},
		{"3 dB", One, "wrong unit: dB is for a level", "a plain number, such as 0.5"},
		{"3 dB", Percent, "wrong unit: dB is for a level", share},
		{"5 %", Decibel, "wrong unit: % is for a share", "a level, such as -3 dB"},
		{"100 ppm/K", PPMPerPercentRH, "wrong unit: ppm/K is for a temperature coefficient", "a humidity coefficient, such as 100 ppm/% RH"},
		{"100 ppm/% RH", Percent, "wrong unit: ppm/% RH is for a humidity coefficient", share},
		{"4p7", Ohm, "wrong unit: 4p7 is the letter code of a capacitance", ohms},
		{"4k7", Farad, "wrong unit: 4k7 is the letter code of a resistance", farads},
		{"R47", Farad, "wrong unit: R47 is the letter code of a resistance", farads},
		{"4R7", Henry, "wrong unit: 4R7 is the letter code of a resistance", "an inductance, such as 470 µH"},
		{"150k", Hertz, "wrong unit: 150k is the letter code of a resistance", "a frequency, such as 455 kHz"},
		{"5V1", Ohm, "wrong unit: 5V1 is the letter code of a voltage", ohms},
		{"4.7 mm", Ohm, "wrong unit: mm is for a length", ohms},
		{"100m", Ohm, "wrong unit: m is for a length", ohms},
		{"NaN", Ohm, "not a finite number", ohms}, {"nan Ω", Ohm, "not a finite number", ohms}, {".nan", Ohm, "not a finite number", ohms},
		{"inf", Volt, "not a finite number", volts}, {"-Inf V", Volt, "not a finite number", volts}, {"∞ V", Volt, "not a finite number", volts}, {"+.inf", One, "not a finite number", "a plain number, such as 0.5"},
		{"1e400 V", Volt, "absurdly large", volts}, {"1e99999999999999999999 V", Volt, "absurdly large", volts},
		{"1e-400 V", Volt, "absurdly small", volts}, {"1e-99999999999999999999 V", Volt, "absurdly small", volts},
		{"5 MF", Farad, "absurdly large", farads}, {"11 F", Farad, "absurdly large", farads}, {"1e-19 F", Farad, "absurdly small", farads},
		{"11 TΩ", Ohm, "absurdly large", ohms}, {"1e-7 Ω", Ohm, "absurdly small", ohms},
		{"2 THz", Hertz, "absurdly large", "a frequency, such as 455 kHz"}, {"1e5 H", Henry, "absurdly large", "an inductance, such as 470 µH"},
		{"-300 °C", Celsius, "below absolute zero or absurdly hot", "a temperature, such as 23 °C"}, {"2001 °C", Celsius, "below absolute zero or absurdly hot", "a temperature, such as 23 °C"},
		{"", Ohm, "nothing where a quantity is needed", ohms}, {"  ", Ohm, "nothing where a quantity is needed", ohms},
		{strings.Repeat("1", 101), Ohm, "too long for a quantity", ohms}, {"1 \xff", Ohm, "not valid UTF-8", ohms},
		{"5 parsec", Volt, "unknown unit parsec", volts}, {"23 C", Celsius, "unknown unit C; a degree sign is missing (°C or degC)", "a temperature, such as 23 °C"},
		{"5 C", Volt, "unknown unit C", volts}, {"23 X", Celsius, "unknown unit X", "a temperature, such as 23 °C"},
		{"1 000 V", Volt, "a gap in a number", volts}, {"kΩ", Ohm, "a unit without a number", ohms}, {"lots", Ohm, "not a number with a unit", ohms},
		{"1.2.3 V", Volt, "not a number with a unit", volts}, {"--1 V", Volt, "not a number with a unit", volts}, {"±-1 V", Volt, "not a number with a unit", volts}, {"0x10 V", Volt, "unknown unit x10 V", volts},
		{"1_000 V", Volt, "unknown unit _000 V", volts}, {"12 V DC", Volt, "unknown unit V DC", volts}, {"-4k7", Ohm, "unknown unit k7", ohms}, {"5 %%", Percent, "unknown unit %%", share},
		{"4.7k7", Ohm, "unknown unit k7", ohms}, {"1 kkΩ", Ohm, "unknown unit kkΩ", ohms}, {"1 k%", Percent, "unknown unit k%", share}, {"5 dB/K", Decibel, "unknown unit dB/K", "a level, such as -3 dB"},
	} {
		got, err := Parse(c.text, c.unit)
		var e *Error
		if !errors.As(err, &e) {
			t.Errorf("Parse(%q, %s) = %+v, %v", c.text, c.unit.Symbol, got, err)
			continue
		}
		if diff := cmp.Diff(&Error{c.text, c.expected, c.reason}, e); diff != "" {
			t.Errorf("Parse(%q, %s): %s", c.text, c.unit.Symbol, diff)
		}
	}
}

// What a wrong unit is said to be for, and what is expected, for every unit.
func TestEveryUnitIsNamed(t *testing.T) {
	for _, c := range []struct {
		unit              Unit
		symbol, noun, own string
	}{
		{Percent, "%", "a share", "5 %"}, {PPM, "ppm", "a share", "30 ppm"}, {PPMPerKelvin, "ppm/K", "a temperature coefficient", "30 ppm/K"},
		{PPMPerPercentRH, "ppm/% RH", "a humidity coefficient", "100 ppm/% RH"}, {Ohm, "\u03a9", "a resistance", "4.7 k\u03a9"}, {Siemens, "S", "a conductance", "2 mS"},
		{Farad, "F", "a capacitance", "220 pF"}, {Henry, "H", "an inductance", "470 µH"}, {Volt, "V", "a voltage", "12 V"}, {Ampere, "A", "a current", "2 mA"},
		{Watt, "W", "a power", "250 mW"}, {Hertz, "Hz", "a frequency", "455 kHz"}, {Second, "s", "a time", "10 ms"}, {Hour, "h", "a time", "1000 h"}, {Metre, "m", "a length", "40 cm"},
		{Kelvin, "K", "a temperature difference", "3 K"}, {Celsius, "°C", "a temperature", "23 °C"}, {VoltPerKelvin, "V/K", "a voltage slope", "-2 mV/K"}, {VoltPerSecond, "V/s", "a slew rate", "13 V/µs"},
		{Decibel, "dB", "a level", "-3 dB"}, {Cent, "cents", "a musical interval", "20 cents"}, {PerKelvin, "1/K", "a temperature coefficient", "30 ppm/K"},
		{PerKelvin2, "1/K²", "a second-order temperature coefficient", "-0.035 ppm/K²"}, {PerKelvin3, "1/K³", "a third-order temperature coefficient", "0.0001 ppm/K³"},
	} {
		other := Volt
		if c.unit == Volt {
			other = Ohm
		}
		_, err := Parse("5 "+c.symbol, other)
		var e *Error
		if want := "wrong unit: " + c.symbol + " is for " + c.noun; !errors.As(err, &e) || e.Reason != want {
			t.Errorf("%v, want %s", err, want)
		}
		_, err = Parse("lots", c.unit)
		if want := c.noun + ", such as " + c.own; !errors.As(err, &e) || e.Expected != want {
			t.Errorf("%v, want %s", err, want)
		}
	}
}

func TestErrorText(t *testing.T) {
	_, err := Parse("5 Hz", Ohm)
	want := `wrong unit: Hz is for a frequency: found "5 Hz", expected a resistance, such as 4.7 kΩ`
	if err == nil || err.Error() != want {
		t.Errorf("%v\nwant %s", err, want)
	}
}

// Every unit's own bounds hold, one step of a float beyond them too, and its
// example reads.
func TestBounds(t *testing.T) {
	for _, k := range table {
		t.Run(k.unit.Symbol, func(t *testing.T) {
			if _, err := Parse(k.example, k.unit); err != nil {
				t.Error(err)
			}
			if k.unit == Celsius {
				return
			}
			for _, v := range []float64{k.low, k.high, -k.high, 0} {
				if _, err := k.within(v, "x"); err != nil {
					t.Errorf("%v: %v", v, err)
				}
			}
			for _, v := range []float64{math.Nextafter(k.low, 0), math.Nextafter(k.high, math.Inf(1)), math.Inf(1), math.Inf(-1), math.NaN()} {
				if q, err := k.within(v, "x"); err == nil {
					t.Errorf("%v passes as %+v", v, q)
				}
			}
		})
	}
}

func TestParseRange(t *testing.T) {
	for _, c := range []struct {
		text      string
		unit      Unit
		low, high float64
	}{
		{"5..30 pF", Farad, 5e-12, 30e-12}, {"4..34 pF", Farad, 4e-12, 34e-12}, {"5 pF..30 pF", Farad, 5e-12, 30e-12}, {"1 nF..10 uF", Farad, 1e-9, 10e-6},
		{"0..10 kohm", Ohm, 0, 10e3}, {"1k..10M", Ohm, 1e3, 10e6}, {"10R..1M", Ohm, 10, 1e6}, {" 5 .. 30pF ", Farad, 5e-12, 30e-12}, {"0.5..1.5 pF", Farad, 0.5e-12, 1.5e-12},
		{"10..20V", Volt, 10, 20}, {"-15..15 V", Volt, -15, 15}, {"5..5 pF", Farad, 5e-12, 5e-12}, {"0.2..0.8", One, 0.2, 0.8}, {"10..20 %", Percent, 0.1, 0.2}, {"900 pF..1 nF", Farad, 900e-12, 1e-9},
	} {
		low, high, err := ParseRange(c.text, c.unit)
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if low.Value != c.low || high.Value != c.high {
			t.Errorf("%q: %v to %v, want %v to %v", c.text, low.Value, high.Value, c.low, c.high)
		}
	}
}

func TestParseRangeRefuses(t *testing.T) {
	const farads = "a range of capacitance, such as 0..220 pF"
	for _, c := range []struct {
		text             string
		unit             Unit
		reason, expected string
	}{
		{"5 pF", Farad, "no range: two dots are missing", farads},
		{"5-30 pF", Farad, "no range: two dots are missing", farads},
		{"30..5 pF", Farad, "the range runs backwards", farads},
		{"5...30 pF", Farad, "too many dots", farads},
		{"5..10..30 pF", Farad, "too many dots", farads},
		{"..30 pF", Farad, "nothing where a quantity is needed", "a capacitance, such as 220 pF"},
		{"5 pF..", Farad, "nothing where a quantity is needed", "a capacitance, such as 220 pF"},
		{"5..30", Farad, "a number without a unit", "a capacitance: 30 pF, 30 nF or another unit"},
		{"1..10k", Ohm, "a number without a unit", "a resistance: 1R or 1 Ω"},
		{"5 V..30 pF", Farad, "wrong unit: V is for a voltage", "a capacitance, such as 220 pF"},
		{"5..30 V", Farad, "wrong unit: V is for a voltage", "a capacitance, such as 220 pF"},
		{"0,5..30 pF", Farad, "a comma in a number; the decimal mark is a dot, and thousands are not marked", farads},
		{"NaN..30 pF", Farad, "not a finite number", "a capacitance, such as 220 pF"},
		{"", Farad, "nothing where a quantity is needed", farads},
	} {
		_, _, err := ParseRange(c.text, c.unit)
		var e *Error
		if !errors.As(err, &e) {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if e.Reason != c.reason || e.Expected != c.expected {
			t.Errorf("%q: %q, %q\nwant %q, %q", c.text, e.Reason, e.Expected, c.reason, c.expected)
		}
	}
}

// What is printed in full reads back as the same float64, for every unit.
func TestFormatReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		k := rapid.SampledFrom(table).Draw(t, "unit")
		low := max(k.low, 1e-9)
		if k.low < 1e-9 {
			low = k.low
		}
		v := low * math.Pow(k.high/low, rapid.Float64Range(0.001, 0.999).Draw(t, "place"))
		if k.unit == Celsius {
			v = rapid.Float64Range(-273, 2000).Draw(t, "celsius")
		} else if rapid.Bool().Draw(t, "negative") {
			v = -v
		}
		text := Format(v, k.unit, 0)
		got, err := Parse(text, k.unit)
		if err != nil {
			t.Fatalf("%v prints as %q: %v", v, text, err)
		}
		if relative := math.Abs(got.Value-v) / math.Abs(v); v != 0 && relative > 4e-16 {
			t.Fatalf("%v prints as %q, which reads as %v", v, text, got.Value)
		}
	})
}

func FuzzParse(f *testing.F) {
	for _, seed := range []string{"4k7", "R47", "4.7 kΩ", "±5 %", "-0.3 dB", "30 ppm/K", "1e400 V", "\xff", "100 ppm/% RH", "1/K^3", "23 °C", "0e5 V", "µ", "1 ////", "1 ·*·"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		for _, k := range table {
			q, err := Parse(text, k.unit)
			var e *Error
			switch {
			case err != nil && !errors.As(err, &e):
				t.Errorf("%q: %T", text, err)
			case err == nil && (math.IsNaN(q.Value) || math.IsInf(q.Value, 0) || math.Abs(q.Value) > max(k.high, 2000)):
				t.Errorf("%q as %s: %v", text, k.unit.Symbol, q.Value)
			}
		}
		Find(text)
	})
}

func FuzzParseRange(f *testing.F) {
	for _, seed := range []string{"5..30 pF", "1 nF..10 uF", "0..10 kohm", "..", "1....2 V", "5..4 V", "1..R47"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		for _, u := range []Unit{Farad, Ohm, Celsius, One} {
			low, high, err := ParseRange(text, u)
			if err == nil && !(low.Value <= high.Value) {
				t.Errorf("%q: %v to %v", text, low.Value, high.Value)
			}
		}
	})
}
