package marking

import (
	"math"
	"testing"

	"batchwright/bom/part"
	"batchwright/bom/series"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

// close12 compares figures that differ by rounding alone.
var close12 = cmpopts.EquateApprox(1e-12, 0)

type codeCase struct {
	code   string
	want   Reading
	source string
}

func checkCodes(t *testing.T, read func(string) (Reading, error), cases []codeCase) {
	t.Helper()
	for _, c := range cases {
		got, err := read(c.code)
		if err != nil {
			t.Errorf("%s: %v", c.code, err)
			continue
		}
		if diff := cmp.Diff(c.want, got, close12); diff != "" {
			t.Errorf("%s (%s): %s", c.code, c.source, diff)
		}
	}
}

const (
	standard = "IEC 60062:2016, as printed in a public summary of the code"
	recalled = "IEC 60062:2016, example from memory"
	tooley   = "M. H. Tooley, Electronic Circuits: Fundamentals and Applications, examples 2.9 to 2.11 and 2.23; the marked strings from memory"
	guides   = "public marking guides"
)

func TestReadResistance(t *testing.T) {
	checkCodes(t, ReadResistance, []codeCase{
		{"R47", Reading{Value: 0.47}, standard}, {"4R7", Reading{Value: 4.7}, standard},
		{"470R", Reading{Value: 470}, standard}, {"4K7", Reading{Value: 4700}, standard},
		{"47K", Reading{Value: 47000}, standard}, {"47K3", Reading{Value: 47300}, standard},
		{"470K", Reading{Value: 470000}, standard}, {"4M7", Reading{Value: 4.7e6}, standard},
		{"R10", Reading{Value: 0.1}, recalled}, {"R33", Reading{Value: 0.33}, recalled},
		{"1R0", Reading{Value: 1}, recalled}, {"10R", Reading{Value: 10}, recalled},
		{"100R", Reading{Value: 100}, recalled}, {"1K0", Reading{Value: 1000}, recalled},
		{"1k0", Reading{Value: 1000}, "lower-case k is common practice"},
		{"10K", Reading{Value: 10000}, recalled}, {"1M0", Reading{Value: 1e6}, recalled},
		{"10M", Reading{Value: 1e7}, recalled}, {"3G3", Reading{Value: 3.3e9}, recalled},
		{"1T0", Reading{Value: 1e12}, recalled}, {"33R2", Reading{Value: 33.2}, recalled},
		{"3K32", Reading{Value: 3320}, recalled}, {"59R04", Reading{Value: 59.04}, recalled},
		{"590R4", Reading{Value: 590.4}, recalled}, {"5K904", Reading{Value: 5904}, recalled},
		{"4R7K", Reading{4.7, -0.1, 0.1}, tooley}, {"330RG", Reading{330, -0.02, 0.02}, tooley},
		{"R22M", Reading{0.22, -0.2, 0.2}, tooley},
		{"103", Reading{Value: 10000}, recalled}, {"R10", Reading{Value: 0.1}, recalled},
		{"472", Reading{Value: 4700}, recalled}, {"1002", Reading{Value: 10000}, recalled},
		{"4991", Reading{Value: 4990}, recalled}, {"49R9", Reading{Value: 49.9}, recalled},
		{"0R05", Reading{Value: 0.05}, recalled}, {"000", Reading{Value: 0}, recalled},
		{"100", Reading{Value: 10}, "digits: 10 with no zeros, unlike 100R"},
		{"100R001", Reading{Value: 100.001}, "six digits"},
		{"47KM", Reading{47000, -0.2, 0.2}, "the last letter is the tolerance"},
	})
}

func TestReadCapacitance(t *testing.T) {
	checkCodes(t, ReadCapacitance, []codeCase{
		{"p33", Reading{Value: 0.33e-12}, recalled}, {"3p3", Reading{Value: 3.3e-12}, recalled},
		{"4p7", Reading{Value: 4.7e-12}, recalled}, {"33p", Reading{Value: 33e-12}, recalled},
		{"330p", Reading{Value: 330e-12}, recalled}, {"n33", Reading{Value: 330e-12}, recalled},
		{"3n3", Reading{Value: 3.3e-9}, recalled}, {"33n", Reading{Value: 33e-9}, recalled},
		{"100n", Reading{Value: 100e-9}, recalled}, {"330n", Reading{Value: 330e-9}, recalled},
		{"\u00b533", Reading{Value: 0.33e-6}, recalled}, {"3\u03bc3", Reading{Value: 3.3e-6}, recalled},
		{"33u", Reading{Value: 33e-6}, "u for µ is common practice"}, {"330µ", Reading{Value: 330e-6}, recalled},
		{"m33", Reading{Value: 0.33e-3}, recalled}, {"3m3", Reading{Value: 3.3e-3}, recalled},
		{"1F0", Reading{Value: 1}, standard},
		{"103K", Reading{10e-9, -0.1, 0.1}, tooley},
		{"104", Reading{Value: 100e-9}, guides}, {"103", Reading{Value: 10e-9}, guides},
		{"105", Reading{Value: 1e-6}, guides}, {"107", Reading{Value: 100e-6}, guides},
		{"100", Reading{Value: 10e-12}, guides + ": not 100 pF"}, {"1R0", Reading{Value: 1e-12}, guides},
		{"R50", Reading{Value: 0.5e-12}, guides}, {"102", Reading{Value: 1e-9}, guides},
		{"101", Reading{Value: 100e-12}, guides}, {"4R7", Reading{Value: 4.7e-12}, "by the same rule"},
		{"104K", Reading{100e-9, -0.1, 0.1}, guides},
		{"221F", Reading{220e-12, -0.01, 0.01}, "F behind three digits is the tolerance"},
		{"224Z", Reading{220e-9, -0.2, 0.8}, "asymmetric letter"},
		{"4p7C", Reading{4.7e-12, -0.25 / 4.7, 0.25 / 4.7}, "absolute below 10 pF"},
		{"10pC", Reading{10e-12, -0.0025, 0.0025}, "relative from 10 pF on"},
	})
}

func TestReadInductance(t *testing.T) {
	checkCodes(t, ReadInductance, []codeCase{
		{"4R7", Reading{Value: 4.7e-6}, "an encyclopaedia's page on the code calls it non-standard practice"},
		{"471K", Reading{470e-6, -0.1, 0.1}, "common practice, no source"},
		{"182J", Reading{1.8e-3, -0.05, 0.05}, "common practice, no source"},
	})
}

func TestUnreadableCodes(t *testing.T) {
	for _, c := range []struct {
		code, reason string
		read         func(string) (Reading, error)
	}{
		{"", "nothing", ReadResistance}, {"R", "a letter alone", ReadResistance}, {"4p7", "a capacitor's letter", ReadResistance},
		{"4K7K2", "two letters", ReadResistance}, {"4K7P", "P is disputed", ReadResistance}, {"4K7V", "V is disputed", ReadResistance},
		{"4K7W", "W is disputed", ReadResistance}, {"4K7Y", "Y is disputed", ReadResistance}, {"4K7E", "E is disputed", ReadResistance},
		{"109", "9 as a power is disputed", ReadResistance}, {"12345", "five digits", ReadResistance}, {"-4R7", "a sign", ReadResistance}, {"1000R001", "seven digits", ReadResistance},
		{"4k7", "a resistor's letter", ReadCapacitance}, {"1002", "four digits", ReadCapacitance}, {"µ", "a letter alone", ReadCapacitance},
		{"\xff", "no UTF-8", ReadCapacitance}, {"4n7", "a capacitor's letter", ReadInductance},
	} {
		if got, err := c.read(c.code); err == nil {
			t.Errorf("%q (%s) reads as %+v", c.code, c.reason, got)
		}
	}
}

// The letters on which public tables of IEC 60062:2016 agree, in percent.
func TestToleranceLetters(t *testing.T) {
	for _, c := range []struct {
		letters   string
		low, high []float64
		code      string
		read      func(string) (Reading, error)
		scale     float64
	}{
		{"ABCDFGHJKMN", []float64{-0.05, -0.1, -0.25, -0.5, -1, -2, -3, -5, -10, -20, -30},
			[]float64{0.05, 0.1, 0.25, 0.5, 1, 2, 3, 5, 10, 20, 30}, "47R", ReadResistance, 100},
		{"QTSZ", []float64{-10, -10, -20, -20}, []float64{30, 50, 50, 80}, "47µ", ReadCapacitance, 100},
		// Below 10 pF, in picofarads of a part of 2 pF.
		{"BCDFG", []float64{-0.1, -0.25, -0.5, -1, -2}, []float64{0.1, 0.25, 0.5, 1, 2}, "2p0", ReadCapacitance, 2},
	} {
		var low, high []float64
		for _, letter := range c.letters {
			r, err := c.read(c.code + string(letter))
			if err != nil {
				t.Errorf("%s%c: %v", c.code, letter, err)
			}
			low, high = append(low, r.Low*c.scale), append(high, r.High*c.scale)
		}
		if diff := cmp.Diff([][]float64{c.low, c.high}, [][]float64{low, high}, close12); diff != "" {
			t.Errorf("%s: %s", c.letters, diff)
		}
	}
}

func TestCode(t *testing.T) {
	for _, c := range []struct {
		reason           string
		t                part.Type
		value, tolerance float64
		want             string
	}{
		{"kilohms", part.Resistor, 4700, 0.01, "4K7F"},
		{"a zero behind a lone figure", part.Resistor, 1000, 0.05, "1K0J"},
		{"tens", part.Resistor, 10000, 0.1, "10KK"},
		{"hundreds", part.Resistor, 470, 0.02, "470RG"},
		{"below an ohm", part.Resistor, 0.47, 0.05, "R47J"},
		{"hundredths of an ohm", part.Resistor, 0.05, 0, "R05"},
		{"four figures", part.Resistor, 59.04, 0.001, "59R04B"},
		{"five figures", part.Resistor, 59.043, 0.001, ""},
		{"beyond the letters", part.Resistor, 1e15, 0.05, ""},
		{"no tolerance letter for 2.5 %", part.Capacitor, 220e-12, 0.025, "220p"},
		{"picofarads", part.Capacitor, 220e-12, 0.05, "220pJ"},
		{"nanofarads", part.Capacitor, 1.5e-9, 0.1, "1n5K"},
		{"microfarads", part.Capacitor, 330e-6, 0.2, "330µM"},
		{"absolute tolerance", part.Capacitor, 4.7e-12, 0.25 / 4.7, "4p7C"},
		{"1 % of 4.7 pF has no letter, F being 1 pF", part.Capacitor, 4.7e-12, 0.01, "4p7"},
		{"5 % of 4.7 pF has", part.Capacitor, 4.7e-12, 0.05, "4p7J"},
		{"no code for a coil", part.Coil, 1e-3, 0.05, ""},
		{"220 F would read as 22 pF of 1 %", part.Capacitor, 220, 0, ""},
		{"NaN", part.Resistor, math.NaN(), 0.05, ""},
		{"zero", part.Resistor, 0, 0.05, ""},
		{"infinite", part.Capacitor, math.Inf(1), 0.05, ""},
	} {
		if got := Code(c.t, c.value, c.tolerance); got != c.want {
			t.Errorf("%s: Code(%s, %v, %v) = %q, want %q", c.reason, c.t, c.value, c.tolerance, got, c.want)
		}
	}
}

func TestDigits(t *testing.T) {
	for _, c := range []struct {
		reason string
		got    string
		want   string
	}{
		{"220 pF", Digits(220e-12), "221"}, {"10 pF is 100", Digits(10e-12), "100"}, {"100 pF is 101", Digits(100e-12), "101"},
		{"4.7 pF", Digits(4.7e-12), "4R7"}, {"1 pF", Digits(1e-12), "1R0"}, {"half a picofarad", Digits(0.5e-12), "R50"},
		{"hundredths", Digits(0.05e-12), "R05"}, {"thousandths do not fit", Digits(0.005e-12), ""},
		{"three figures do not fit", Digits(249e-12), ""}, {"100 µF", Digits(100e-6), "107"}, {"10 mF does not fit", Digits(10e-3), ""},
		{"470 µH", CoilDigits(470e-6), "471"}, {"1.8 mH", CoilDigits(1.8e-3), "182"},
		{"4.7 kΩ of 5 %", ChipDigits(4700, 0.05), "472"}, {"4.7 kΩ of 1 %", ChipDigits(4700, 0.01), "4701"},
		{"4.99 kΩ", ChipDigits(4990, 0.01), "4991"}, {"4.99 kΩ of 5 %", ChipDigits(4990, 0.05), "4991"}, {"49.9 Ω", ChipDigits(49.9, 0.01), "49R9"},
		{"a link", ChipDigits(0, 0.05), "000"}, {"0.1 Ω", ChipDigits(0.1, 0.05), "R10"}, {"NaN", Digits(math.NaN()), ""},
	} {
		if c.got != c.want {
			t.Errorf("%s: %q, want %q", c.reason, c.got, c.want)
		}
	}
}

// The letters are from memory; the rule is that 01 is 100 and 96 is 976.
func TestReadChip96(t *testing.T) {
	for code, want := range map[string]float64{"01A": 100, "01C": 10000, "18C": 15000, "24B": 1740, "68X": 49.9, "96F": 97600000, "30Y": 2} {
		if got, ok := ReadChip96(code); !ok || math.Abs(got-want) > 1e-9*want {
			t.Errorf("%s: %v, %v, want %v", code, got, ok, want)
		}
	}
	for _, code := range []string{"00A", "97A", "01Q", "1A", "A01", "01AA", ""} {
		if got, ok := ReadChip96(code); ok {
			t.Errorf("%q reads as %v", code, got)
		}
	}
}

// Every preferred value in every decade survives the way onto the part and back.
func TestCodesReadBack(t *testing.T) {
	tolerances := []float64{0, 0.0005, 0.001, 0.0025, 0.005, 0.01, 0.02, 0.03, 0.05, 0.1, 0.2, 0.3}
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(series.Names()).Draw(t, "series")
		capacitor := rapid.Bool().Draw(t, "capacitor")
		low, high, kind, read := 0.1, 1e11, part.Resistor, ReadResistance
		if capacitor {
			low, high, kind, read = 10e-12, 0.1, part.Capacitor, ReadCapacitance
		}
		value := series.Nearest(name, low*math.Pow(high/low, rapid.Float64Range(0, 1).Draw(t, "place")))
		tolerance := rapid.SampledFrom(tolerances).Draw(t, "tolerance")
		code := Code(kind, value, tolerance)
		got, err := read(code)
		if err != nil {
			t.Fatalf("%v ±%v is %q: %v", value, tolerance, code, err)
		}
		if got.Value != value || math.Abs(got.High-tolerance) > 1e-12 || math.Abs(got.Low+tolerance) > 1e-12 {
			t.Fatalf("%v ±%v is %q, which reads as %+v", value, tolerance, code, got)
		}
	})
}

func TestDigitsReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		value := series.Nearest("E24", 1e-13*math.Pow(10, rapid.Float64Range(0, 9).Draw(t, "decades")))
		code := Digits(value)
		got, err := ReadCapacitance(code)
		if err != nil || got.Value != value {
			t.Fatalf("%v is %q, which reads as %+v, %v", value, code, got, err)
		}
	})
}

func FuzzReadCodes(f *testing.F) {
	for _, seed := range []string{"4K7F", "220pJ", "221J", "100", "R47", "µ33", "\xffp", "4R7C", "000"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, code string) {
		for _, read := range []func(string) (Reading, error){ReadResistance, ReadCapacitance, ReadInductance} {
			if r, err := read(code); err == nil && !(r.Value >= 0 && r.Low <= 0 && r.High >= 0 && !math.IsInf(r.Value, 0)) {
				t.Errorf("%q reads as %+v", code, r)
			}
		}
		ReadChip96(code)
	})
}
