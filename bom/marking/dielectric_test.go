package marking

import (
	"testing"

	"github.com/google/go-cmp/cmp"
)

// Industry pairs of a public table: P100 = M7G, NP0 = C0G, N030 = B2G,
// N075 = U1G, N150 = P2G, N330 = S2H, N470 = T2H, N750 = U2J, N1500 = P3K,
// N2200 = R3L; R2G by the rule. In ppm/K.
func TestReadClass1(t *testing.T) {
	for _, c := range []struct {
		code       string
		tc, spread float64
	}{
		{"C0G", 0, 30}, {"B2G", -30, 30}, {"U1G", -75, 30}, {"P2G", -150, 30}, {"S2H", -330, 60}, {"T2H", -470, 60},
		{"U2J", -750, 120}, {"P3K", -1500, 250}, {"R3L", -2200, 500}, {"M7G", 100, 30}, {"R2G", -220, 30},
	} {
		got, err := ReadClass1(c.code)
		if diff := cmp.Diff(Slope{c.tc / 1e6, c.spread / 1e6}, got, close12); err != nil || diff != "" {
			t.Errorf("%s: %v %s", c.code, err, diff)
		}
	}
	for code, reason := range map[string]string{
		"": "empty", "NP0": "a name, no code", "C4G": "4 is disputed", "C5G": "5 is in one list", "C9G": "9 is in one list",
		"C0A": "no spread A", "UJ": "the other alphabet", "X7R": "class 2",
	} {
		if got, err := ReadClass1(code); err == nil {
			t.Errorf("%q (%s) reads as %+v", code, reason, got)
		}
	}
}

// IEC 60384-8 and -21, class 1, by the names in use: P100, NP0, N033, N075,
// N150, N220, N330, N470, N750, N1500. CG is in a published table, the other
// pairs are from memory. In ppm/K.
func TestReadClass1IEC(t *testing.T) {
	for _, c := range []struct {
		name, code string
		tc, spread float64
	}{
		{"P100", "AG", 100, 30}, {"NP0", "CG", 0, 30}, {"N033", "HG", -33, 30}, {"N075", "LG", -75, 30}, {"N150", "PH", -150, 60},
		{"N220", "RH", -220, 60}, {"N330", "SH", -330, 60}, {"N470", "TH", -470, 60}, {"N750", "UJ", -750, 120}, {"N1500", "VK", -1500, 250},
	} {
		got, err := ReadClass1IEC(c.code)
		if diff := cmp.Diff(Slope{c.tc / 1e6, c.spread / 1e6}, got, close12); err != nil || diff != "" {
			t.Errorf("%s = %s: %v %s", c.name, c.code, err, diff)
		}
	}
	for _, code := range []string{"", "C0G", "BG", "CA"} {
		if got, err := ReadClass1IEC(code); err == nil {
			t.Errorf("%q reads as %+v", code, got)
		}
	}
}

// The linear law C(T) = C25·(1 + α·(T − 25 °C)) with the spread about α, in
// percent, worked by hand: U2J at 85 °C is −750 ppm/K · 60 K = −4.5 %, ±120 ·
// 60 = 0.72 %. C0G ±0.3 % over its range agrees with a published comparison.
func TestClass1Limits(t *testing.T) {
	for _, c := range []struct {
		code              string
		celsius           float64
		low, middle, high float64
	}{
		{"C0G", 125, -0.3, 0, 0.3}, {"C0G", -55, -0.24, 0, 0.24}, {"U2J", 85, -5.22, -4.5, -3.78},
		{"P2G", 45, -0.36, -0.3, -0.24}, {"S2H", 0, 0.675, 0.825, 0.975},
	} {
		s, err := ReadClass1(c.code)
		if err != nil {
			t.Fatal(err)
		}
		rise := c.celsius - 25
		a, b := 100*(s.Value-s.Spread)*rise, 100*(s.Value+s.Spread)*rise
		got := []float64{min(a, b), 100 * s.Value * rise, max(a, b)}
		if diff := cmp.Diff([]float64{c.low, c.middle, c.high}, got, close12); diff != "" {
			t.Errorf("%s at %v °C: %s", c.code, c.celsius, diff)
		}
	}
}

// EIA-198, class 2 letters, three public tables; Z is +10 °C and 7 is +125 °C,
// which one of them misprints.
func TestReadClass2(t *testing.T) {
	for code, want := range map[string]Class2{
		"X7R": {-55, 125, -0.15, 0.15}, "X5R": {-55, 85, -0.15, 0.15}, "X6S": {-55, 105, -0.22, 0.22},
		"X7S": {-55, 125, -0.22, 0.22}, "X7T": {-55, 125, -0.33, 0.22}, "X8R": {-55, 150, -0.15, 0.15},
		"Y5V": {-30, 85, -0.82, 0.22}, "Z5U": {10, 85, -0.56, 0.22}, "Y5U": {-30, 85, -0.56, 0.22},
	} {
		got, err := ReadClass2(code)
		if diff := cmp.Diff(want, got); err != nil || diff != "" {
			t.Errorf("%s: %v %s", code, err, diff)
		}
	}
	for _, code := range []string{"", "C0G", "X3R", "X7Q", "X7RR", "x7r"} {
		if got, err := ReadClass2(code); err == nil {
			t.Errorf("%q reads as %+v", code, got)
		}
	}
}
