package quantity

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

func TestDimensionString(t *testing.T) {
	root := func(d Dimension, n int) Dimension {
		r, ok := d.Pow(1, n)
		if !ok {
			t.Fatalf("no %dth root of %v", n, d)
		}
		return r
	}
	for _, c := range []struct {
		d    Dimension
		want string
	}{
		{Dimension{}, "1"}, {Ohm.Dimension, "Ω"}, {Volt.Dimension.Div(Ampere.Dimension), "Ω"}, {Henry.Dimension.Mul(Farad.Dimension), "s²"},
		{root(Henry.Dimension.Mul(Farad.Dimension), 2), "s"}, {Volt.Dimension.Div(Kelvin.Dimension), "V/K"}, {Dimension{}.Div(Second.Dimension), "Hz"},
		{Dimension{}.Div(Kelvin.Dimension), "1/K"}, {Watt.Dimension.Mul(Second.Dimension), "kg·m²/s²"}, {Watt.Dimension.Mul(Second.Dimension).Div(Kelvin.Dimension), "kg·m²/(s²·K)"},
		{root(Kelvin.Dimension, 2), "K^(1/2)"}, {root(Kelvin.Dimension, 3), "K^(1/3)"}, {root(si(0, 3, 0, 0, 0), 4), "m^(3/4)"}, {root(Dimension{}.Div(Hertz.Dimension), 12), "s^(1/12)"}, {si(0, 12, 0, 0, 0), "m¹²"},
	} {
		if got := c.d.String(); got != c.want {
			t.Errorf("%v: %q, want %q", [5]int16(c.d), got, c.want)
		}
	}
}

func TestPow(t *testing.T) {
	for _, c := range []struct {
		reason   string
		d        Dimension
		num, den int
		want     Dimension
		ok       bool
	}{
		{"a square", Kelvin.Dimension, 2, 1, si(0, 0, 0, 0, 2), true},
		{"an inverse", Kelvin.Dimension, -1, 1, si(0, 0, 0, 0, -1), true},
		{"both signs turned", Kelvin.Dimension, -2, -1, si(0, 0, 0, 0, 2), true},
		{"to the power zero", Volt.Dimension, 0, 5, Dimension{}, true},
		{"a half", Kelvin.Dimension, 1, 2, Dimension{0, 0, 0, 0, 6}, true},
		{"two thirds", Kelvin.Dimension, 2, 3, Dimension{0, 0, 0, 0, 8}, true},
		{"a fifth is no twelfth", Kelvin.Dimension, 1, 5, Dimension{}, false},
		{"a fifth of nothing is nothing", Dimension{}, 1, 5, Dimension{}, true},
		{"den of zero", Kelvin.Dimension, 1, 0, Dimension{}, false},
		{"too large for the exponent", Kelvin.Dimension, 5000, 1, Dimension{}, false},
		{"absurdly large", Kelvin.Dimension, math.MaxInt, 1, Dimension{}, false},
		{"absurdly small", Kelvin.Dimension, math.MinInt, 1, Dimension{}, false},
	} {
		if got, ok := c.d.Pow(c.num, c.den); ok != c.ok || ok && got != c.want {
			t.Errorf("%s: %v, %v, want %v, %v", c.reason, got, ok, c.want, c.ok)
		}
	}
}

// The laws of exponents, on small ones.
func TestDimensionLaws(t *testing.T) {
	dimension := rapid.Custom(func(t *rapid.T) Dimension {
		var d Dimension
		for i := range d {
			d[i] = twelfths * rapid.Int16Range(-6, 6).Draw(t, "exponent")
		}
		return d
	})
	rapid.Check(t, func(t *rapid.T) {
		a, b := dimension.Draw(t, "a"), dimension.Draw(t, "b")
		if a.Mul(b) != b.Mul(a) || a.Mul(b).Div(b) != a {
			t.Fatal("a·b = b·a or a·b/b = a fails")
		}
		square, ok := a.Pow(2, 1)
		root, rooted := square.Pow(1, 2)
		if !ok || !rooted || square != a.Mul(a) || root != a {
			t.Fatal("√(a²) = a fails")
		}
	})
}

// Ohm's law and its kin tie the units to each other.
func TestUnitsAgree(t *testing.T) {
	one := Dimension{}
	for _, c := range []struct {
		law  string
		a, b Dimension
	}{
		{"V = A·Ω", Volt.Dimension, Ampere.Dimension.Mul(Ohm.Dimension)},
		{"W = V·A", Watt.Dimension, Volt.Dimension.Mul(Ampere.Dimension)},
		{"S = 1/Ω", Siemens.Dimension, one.Div(Ohm.Dimension)},
		{"F = s/Ω", Farad.Dimension, Second.Dimension.Div(Ohm.Dimension)},
		{"H = Ω·s", Henry.Dimension, Ohm.Dimension.Mul(Second.Dimension)},
		{"Hz = 1/s", Hertz.Dimension, one.Div(Second.Dimension)},
		{"V/K", VoltPerKelvin.Dimension, Volt.Dimension.Div(Kelvin.Dimension)},
		{"V/s", VoltPerSecond.Dimension, Volt.Dimension.Div(Second.Dimension)},
	} {
		if c.a != c.b {
			t.Errorf("%s: %v, %v", c.law, c.a, c.b)
		}
	}
}

// The names equations know, in the order of the table.
func TestWords(t *testing.T) {
	var words []string
	for _, u := range Words() {
		if u.Scale != 1 || u.Offset != 0 || u.Dimension.String() != u.Symbol {
			t.Errorf("%s cannot be a constant: %+v", u.Word, u)
		}
		words = append(words, u.Word+" "+u.Symbol)
	}
	want := []string{"ohm \u03a9", "siemens S", "farad F", "henry H", "volt V", "ampere A", "watt W", "hertz Hz", "second s", "metre m", "kelvin K"}
	if diff := cmp.Diff(want, words); diff != "" {
		t.Error(diff)
	}
}
