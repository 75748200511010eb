package formula

import (
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestParseEquationsReads(t *testing.T) {
	list, mistakes := ParseEquations(`
# a tank and its bias
	capacitance = upper*lower/(upper+lower) + pad   # series, then parallel
	frequency   = 1/(2*pi*sqrt(coil*capacitance))

	current = root(i, 1e-9*ampere, 0.1*ampere,
	               supply - i*load)
	saturated = current*load >= supply
`)
	if len(mistakes) > 0 {
		t.Fatal(mistakes)
	}
	type line struct {
		Name, Text string
		Line       int
	}
	var got []line
	for _, e := range list {
		got = append(got, line{e.Name, e.Expression.Text, e.Line})
	}
	want := []line{
		{"capacitance", "upper*lower/(upper+lower) + pad", 3},
		{"frequency", "1/(2*pi*sqrt(coil*capacitance))", 4},
		{"current", "root(i, 1e-9*ampere, 0.1*ampere,\n\t               supply - i*load)", 6},
		{"saturated", "current*load >= supply", 8},
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
}

func TestParseEquationsComplains(t *testing.T) {
	rows := []struct {
		name, text   string
		line, offset int
		message      string
	}{
		{"no equals sign", "a = 1\n  b + 2", 2, 2, "not an equation"},
		{"comparison in place of an equation", "a >= 1", 1, 0, "not a name for an equation"},
		{"no name", "= 3", 1, 0, "an equation without a name"},
		{"a name with a dot", "a.b = 3", 1, 0, "not a name for an equation"},
		{"a digit first", "2a = 3", 1, 0, "not a name for an equation"},
		{"a word of the language", "not = 3", 1, 0, "this word means something else in the language"},
		{"a function", "sqrt = 3", 1, 0, "this word means something else in the language"},
		{"twice", "a = 1\n a = 2", 2, 1, "this name has an equation already"},
		{"twice, wrong the first time", "a = 1 +\n a = 2", 2, 1, "this name has an equation already"},
		{"nothing behind", "a = ", 1, 4, "an empty expression"},
		{"a mistake in the expression", "a = 1\nb =  1 + [2]", 2, 9, "not arithmetic"},
		{"a mistake on a later line of it", "b = min(1,\n  x%2)", 2, 3, "not arithmetic"},
		{"an accent before the mistake", "b = 1 + é", 1, 8, "unknown character"},
		{"a bracket left open", "b = (1\nc = 2", 2, 2, "nothing is assigned inside an expression"},
	}
	for _, r := range rows {
		t.Run(r.name, func(t *testing.T) {
			list, mistakes := ParseEquations(r.text)
			if list != nil {
				t.Error("a list in spite of mistakes")
			}
			for _, m := range mistakes {
				if m.Line == r.line && m.Offset == r.offset && m.Message == r.message {
					return
				}
			}
			t.Errorf("want line %d, offset %d, %s; got\n%v", r.line, r.offset, r.message, mistakes)
		})
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"1/(2*pi*sqrt(coil*c))", "in.a<b and not(c>1)?a:-b^2", "root(i,0,1,i*i-x)", "a[1]", "filter(a, #)", "((((", "4k7", "é", "a\n+b", "$n.x", "in.x", "b'x'", "a<b<c"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		e, mistakes := Parse(text)
		if (e == nil) != (len(mistakes) > 0) {
			t.Fatalf("%q: %v with %v", text, e, mistakes)
		}
		length := len([]rune(text))
		for _, m := range mistakes {
			if m.Offset < 0 || m.Offset > length || m.Message == "" || m.Expected == "" {
				t.Errorf("%q: %+v", text, m)
			}
		}
		if e != nil {
			e.Check(bench)
			if again, mistakes := Parse(e.Text); again == nil {
				t.Errorf("%q: read once, then %v", text, mistakes)
			}
		}
	})
}

func FuzzParseEquations(f *testing.F) {
	f.Add("a = 1\n# b\nc = min(1,\n 2)")
	f.Add("= = =")
	f.Fuzz(func(t *testing.T, text string) {
		list, mistakes := ParseEquations(text)
		for _, e := range list {
			if e.Expression == nil || e.Name == "" || e.Line < 1 {
				t.Errorf("%q: %+v", text, e)
			}
		}
		for _, m := range mistakes {
			if m.Line < 1 || m.Offset < 0 {
				t.Errorf("%q: %+v", text, m)
			}
		}
	})
}
