package offer

import (
	"encoding/json"
	"testing"

	"pgregory.net/rapid"
)

func TestMoneyText(t *testing.T) {
	for _, c := range []struct {
		name             string
		m                Money
		total, each, out string
	}{
		{"nothing", 0, "0.00", "0.00", "0"},
		{"smallest", 1, "0.00", "0.0001", "0.0001"},
		{"half a hundredth rounds up", 50, "0.01", "0.005", "0.005"},
		{"just under half rounds down", 49, "0.00", "0.0049", "0.0049"},
		{"three decimals", 340, "0.03", "0.034", "0.034"},
		{"two decimals", 12_3400, "12.34", "12.34", "12.34"},
		{"whole", 70_0000, "70.00", "70.00", "70"},
		{"carries into the whole", 9_9950, "10.00", "9.995", "9.995"},
		{"below zero", -12_3456, "-12.35", "-12.3456", "-12.3456"},
		{"below zero and above minus one", -500, "-0.05", "-0.05", "-0.05"},
	} {
		t.Run(c.name, func(t *testing.T) {
			b, err := json.Marshal(c.m)
			if err != nil || c.m.String() != c.total || c.m.Each() != c.each || string(b) != c.out {
				t.Errorf("%d: total %s, each %s, JSON %s, %v; want %s, %s, %s", c.m, c.m, c.m.Each(), b, err, c.total, c.each, c.out)
			}
		})
	}
}

// What is written is read back exactly.
func TestMoneyRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := Money(rapid.Int64Range(-1e17, 1e17).Draw(t, "m"))
		b, err := json.Marshal(m)
		if err != nil {
			t.Fatal(err)
		}
		var back Money
		if err := json.Unmarshal(b, &back); err != nil || back != m {
			t.Fatalf("%d written as %s reads as %d, %v", m, b, back, err)
		}
	})
}

func TestParseMoneyRefuses(t *testing.T) {
	for _, text := range []string{"", ".", "5.", ".5", "-1", "+1", "1,5", "0.00001", "1e3", "NaN", " 1", "99999999999999999999", "0x1"} {
		if m, err := ParseMoney(text); err == nil {
			t.Errorf("%q is read as %s", text, m)
		}
	}
}
