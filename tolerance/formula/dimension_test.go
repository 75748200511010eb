package formula

import (
	"slices"
	"strings"
	"testing"

	"batchwright/bom/quantity"

	"github.com/google/go-cmp/cmp"
)

// names is a scope given as a table.
type names map[string]quantity.Dimension

func (n names) Dimension(name string) (quantity.Dimension, bool) { d, ok := n[name]; return d, ok }

func (n names) Names() []string {
	list := make([]string, 0, len(n))
	for name := range n {
		list = append(list, name)
	}
	slices.Sort(list)
	return list
}

var bench = names{
	"coil": quantity.Henry.Dimension, "upper": quantity.Farad.Dimension, "lower": quantity.Farad.Dimension,
	"load": quantity.Ohm.Dimension, "in.level": quantity.Volt.Dimension, "supply": quantity.Volt.Dimension,
	"bias": quantity.Ampere.Dimension, "temperature": quantity.Kelvin.Dimension, "k": {}, "ratio": {},
	"frequency": quantity.Hertz.Dimension,
}

func TestCheckMeasures(t *testing.T) {
	check := func(text string, want quantity.Dimension) {
		t.Helper()
		e, mistakes := Parse(text)
		if len(mistakes) > 0 {
			t.Fatalf("%s: %v", text, mistakes)
		}
		got, mistakes := e.Check(bench)
		if len(mistakes) > 0 || got != want || PlaceOf(e.Root).Dimension != want {
			t.Errorf("%s: %s (root %s), want %s; %v", text, got, PlaceOf(e.Root).Dimension, want, mistakes)
		}
	}
	one := quantity.Dimension{}
	second := quantity.Second.Dimension
	// Henry times farad is a second squared (SI brochure, 9th edition, table 4).
	check("1/(2*pi*sqrt(coil*upper))", quantity.Hertz.Dimension)
	check("coil*upper", second.Mul(second))
	check("(coil*upper)^0.5", second)
	check("(coil*upper)^(1/2)", second)
	check("(coil*upper)^-0.5", quantity.Hertz.Dimension)
	check("sqrt(sqrt(coil*upper))^4", second.Mul(second))
	check("second^(1/3)*second^(2/3)", second)
	check("upper*lower/(upper+lower)", quantity.Farad.Dimension)
	check("parallel(load, 1e6*ohm)", quantity.Ohm.Dimension)
	check("supply/load", quantity.Ampere.Dimension)
	check("supply*bias", quantity.Watt.Dimension)
	check("1/load", quantity.Siemens.Dimension)
	check("boltzmann*temperature/charge", quantity.Volt.Dimension)
	check("temperature - zero_celsius", quantity.Kelvin.Dimension)
	check("boltzmann*temperature/charge*ln(bias/(1e-3*ampere))", quantity.Volt.Dimension)
	check("root(i, 1e-9*ampere, 0.1*ampere, supply - i*load)", quantity.Ampere.Dimension)
	check("root(i, 0, 0.1*ampere, supply - i*load)", quantity.Ampere.Dimension)
	check("root(x, 0, 1, root(y, 0, 1, y - x) - ratio)", one)
	check("frequency*load*upper", one)
	check("ratio^k", one)
	check("2^k", one)
	check("ratio^2.7", one)
	check("bessel_i1_scaled(k)/bessel_i0_scaled(k)", one)
	// A literal 0 fits anything, before and behind.
	check("max(0, supply)", quantity.Volt.Dimension)
	check("supply > 0 ? supply : 0", quantity.Volt.Dimension)
	check("supply < 0 ? 0 : supply", quantity.Volt.Dimension)
	check("0 + -0 + supply", quantity.Volt.Dimension)
	check("abs(min(0, bias))", quantity.Ampere.Dimension)
	check("0*supply", quantity.Volt.Dimension)
	check("0", one)
	check("supply > 0 and bias > 0", one)
}

func TestCheckComplains(t *testing.T) {
	rows := []struct {
		name, text string
		want       Mistake
	}{
		{"volts and ohms", "supply + load", Mistake{Offset: 9, Message: "these do not go together with +", Found: "Ω", Expected: "V"}},
		{"a bare number of ohms", "load + 10000", Mistake{Offset: 7, Message: "these do not go together with +", Found: "1", Expected: "Ω, as in 10000*ohm"}},
		{"a bare number first", "10000 + load", Mistake{Offset: 0, Message: "these do not go together with +", Found: "1", Expected: "Ω, as in 10000*ohm"}},
		{"a bare product", "load - 2*5000", Mistake{Offset: 7, Message: "these do not go together with -", Found: "1", Expected: "Ω, as in 10000*ohm"}},
		{"a plain number wanted", "ratio + supply", Mistake{Offset: 8, Message: "these do not go together with +", Found: "V", Expected: "a plain number"}},
		{"one is no zero", "supply > 1 ? supply : 0", Mistake{Offset: 9, Message: "these do not go together with >", Found: "1", Expected: "V, as in 1*volt"}},
		{"branches", "k > 0 ? supply : load", Mistake{Offset: 17, Message: "these do not go together with :", Found: "Ω", Expected: "V"}},
		{"zero times something is no zero", "supply + 0*load", Mistake{Offset: 9, Message: "these do not go together with +", Found: "Ω", Expected: "V"}},
		{"function of two", "min(supply, load)", Mistake{Offset: 12, Message: "these do not go together with min", Found: "Ω", Expected: "V"}},
		{"logarithm", "ln(supply)", Mistake{Offset: 3, Message: "ln takes a plain number", Found: "V", Expected: "a ratio of two alike quantities"}},
		{"sine", "k*sin(frequency)", Mistake{Offset: 6, Message: "sin takes a plain number", Found: "Hz", Expected: "a ratio of two alike quantities"}},
		{"Bessel function", "bessel_i0_scaled(supply)", Mistake{Offset: 17, Message: "bessel_i0_scaled takes a plain number", Found: "V", Expected: "a ratio of two alike quantities"}},
		{"exponent", "2^supply", Mistake{Offset: 2, Message: "an exponent with a dimension", Found: "V", Expected: "a plain number"}},
		{"varying exponent", "supply^k", Mistake{Offset: 7, Message: "the exponent of V varies", Expected: "a constant exponent, or a base that is a plain number"}},
		{"odd exponent", "supply^0.123", Mistake{Offset: 7, Message: "an exponent that no dimension can take", Found: "0.123", Expected: "a multiple of 1/12 up to 20"}},
		{"exponent of nothing", "supply^(0/0)", Mistake{Offset: 8, Message: "an exponent that no dimension can take", Found: "NaN", Expected: "a multiple of 1/12 up to 20"}},
		{"runaway", "((supply^20)^20)", Mistake{Offset: 12, Message: "the dimension grows beyond sense", Expected: "exponents up to 60"}},
		{"unknown name", "in.levle*2", Mistake{Offset: 0, Message: "unknown name", Found: "in.levle", Expected: "a part, a setting, an earlier result or a unit", Nearest: "in.level"}},
		{"unknown unit", "load + 10*ohn", Mistake{Offset: 10, Message: "unknown name", Found: "ohn", Expected: "a part, a setting, an earlier result or a unit", Nearest: "ohm"}},
		{"unknown unknown", "root(current, 0, 1, curent*current)", Mistake{Offset: 20, Message: "unknown name", Found: "curent", Expected: "a part, a setting, an earlier result or a unit", Nearest: "current"}},
		{"the unknown outside", "root(i, 0, 1, i - k) + i", Mistake{Offset: 23, Message: "unknown name", Found: "i", Expected: "a part, a setting, an earlier result or a unit"}},
		{"the unknown in an end", "root(i, 0, i, i - k)", Mistake{Offset: 11, Message: "unknown name", Found: "i", Expected: "a part, a setting, an earlier result or a unit"}},
		{"ends of a root", "root(i, 0.1*volt, bias, i*load)", Mistake{Offset: 18, Message: "these do not go together with as the ends of a root", Found: "A", Expected: "V"}},
		{"unknown with a meaning", "root(k, 0, 1, k - ratio)", Mistake{Offset: 0, Message: "the unknown of this root has a meaning already", Found: "k", Expected: "a name of its own"}},
		{"unknown like a unit", "root(ohm, 0, 1, ohm - ratio)", Mistake{Offset: 0, Message: "the unknown of this root has a meaning already", Found: "ohm", Expected: "a name of its own"}},
		{"unknown twice", "root(i, 0, 1, root(i, 0, 1, i) - i)", Mistake{Offset: 14, Message: "the unknown of this root has a meaning already", Found: "i", Expected: "a name of its own"}},
		{"inside the residual", "root(i, 0, 1*ampere, supply - i)", Mistake{Offset: 30, Message: "these do not go together with -", Found: "A", Expected: "V"}},
	}
	for _, r := range rows {
		t.Run(r.name, func(t *testing.T) {
			e, mistakes := Parse(r.text)
			if len(mistakes) > 0 {
				t.Fatal(mistakes)
			}
			_, mistakes = e.Check(bench)
			for i := range mistakes {
				if r.want.Found == "" {
					mistakes[i].Found = ""
				}
				if r.want.Nearest == "" {
					mistakes[i].Nearest = ""
				}
			}
			if d := cmp.Diff(Mistakes{r.want}, mistakes); d != "" {
				t.Error(d)
			}
		})
	}
}

// One wrong name must not be followed by complaints about everything around it.
func TestCheckComplainsOnce(t *testing.T) {
	e, _ := Parse("sqrt(nonsense*coil + 1*second)*2 > 0 ? supply - nonsense2/load*3 + supply : 0")
	_, mistakes := e.Check(bench)
	var found []string
	for _, m := range mistakes {
		found = append(found, m.Found)
	}
	if d := cmp.Diff([]string{"nonsense", "nonsense2"}, found); d != "" {
		t.Errorf("%v\n%s", mistakes, d)
	}
	if s := mistakes.Error(); strings.Count(s, "\n") != 1 {
		t.Errorf("not a line each: %q", s)
	}
}

// The scope's names win over constants: a role may be called like a unit.
func TestScopeHidesConstants(t *testing.T) {
	e, _ := Parse("charge")
	got, mistakes := e.Check(names{"charge": quantity.Ohm.Dimension})
	if got != quantity.Ohm.Dimension || len(mistakes) > 0 {
		t.Errorf("%v %v", got, mistakes)
	}
}

// The values are the exact ones of the SI brochure, 9th edition, table 1.
func TestConstants(t *testing.T) {
	for name, want := range map[string]float64{
		"boltzmann": 1.380649e-23, "charge": 1.602176634e-19, "zero_celsius": 273.15, "ohm": 1, "farad": 1, "hertz": 1,
	} {
		if c, ok := ConstantNamed(name); !ok || c.Value != want {
			t.Errorf("%s is %v, want %v", name, c.Value, want)
		}
	}
	seen := map[string]bool{}
	for _, c := range Constants() {
		if seen[c.Name] || c.Summary == "" {
			t.Errorf("constant %q: twice or without a summary", c.Name)
		}
		seen[c.Name] = true
		if _, mistakes := Parse(c.Name); len(mistakes) > 0 {
			t.Errorf("constant %q cannot be written: %v", c.Name, mistakes)
		}
	}
	if len(seen) < 12 {
		t.Errorf("only %d constants", len(seen))
	}
}
