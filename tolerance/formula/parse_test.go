package formula

import (
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// printed writes a tree with every bracket, to show how a text was read.
func printed(n Node) string {
	switch n := n.(type) {
	case *Number:
		text := strconv.FormatFloat(n.Value, 'g', -1, 64)
		if !strings.ContainsAny(text, ".e") {
			text += ".0"
		}
		return text
	case *Name:
		return n.Name
	case *Unary:
		return "(" + n.Operator + " " + printed(n.X) + ")"
	case *Binary:
		return "(" + printed(n.X) + " " + n.Operator + " " + printed(n.Y) + ")"
	case *Compare:
		return "(" + printed(n.X) + " " + n.Operator + " " + printed(n.Y) + ")"
	case *Conditional:
		return "(" + printed(n.If) + " ? " + printed(n.Then) + " : " + printed(n.Else) + ")"
	case *Call:
		parts := make([]string, len(n.Arguments))
		for i, a := range n.Arguments {
			parts[i] = printed(a)
		}
		return n.Function + "(" + strings.Join(parts, ", ") + ")"
	case *Root:
		return "root(" + n.Unknown + ", " + printed(n.Low) + ", " + printed(n.High) + ", " + printed(n.Residual) + ")"
	}
	return "?"
}

func TestParseReads(t *testing.T) {
	check := func(text, want string) {
		t.Helper()
		e, mistakes := Parse(text)
		if len(mistakes) > 0 {
			t.Errorf("%s: %v", text, mistakes)
			return
		}
		if got := printed(e.Root); got != want {
			t.Errorf("%s: read as %s, want %s", text, got, want)
		}
	}
	// Precedence and associativity as in written algebra.
	check("a + b * c ^ 2", "(a + (b * (c ^ 2.0)))")
	check("a - b - c", "((a - b) - c)")
	check("a / b * c", "((a / b) * c)")
	check("2 ^ 3 ^ 2", "(2.0 ^ (3.0 ^ 2.0))")
	check("-a ^ 2", "(- (a ^ 2.0))")
	check("2 ^ -a", "(2.0 ^ (- a))")
	check("+a", "a")
	check("a < b and not (c >= 1) or d != 0 ? a : b", "((((a < b) and (not (c >= 1.0))) or (d != 0.0)) ? a : b)")
	check("a > 0 ? 1 : a == 0 ? 2 : 3", "((a > 0.0) ? 1.0 : ((a == 0.0) ? 2.0 : 3.0))")
	check("a>0? .5:1", "((a > 0.0) ? 0.5 : 1.0)")
	// Names with a dot; `in` is an operator to the parser underneath.
	check("in.level + rails.voltage*transistor.beta", "(in.level + (rails.voltage * transistor.beta))")
	check("not (in.in > 0) ? in.not : x.in", "((not (in.in > 0.0)) ? in.not : x.in)")
	// Names that are functions of the parser underneath, called or not.
	check("filter + count*min(sum, map)", "(filter + (count * min(sum, map)))")
	check("abs (x)\n\t+ sqrt( y )", "(abs(x) + sqrt(y))")
	check("root(i, 1e-9, .1, ln(i) - root(j, 0, 1, j*i - x))", "root(i, 1e-09, 0.1, (ln(i) - root(j, 0.0, 1.0, ((j * i) - x))))")
	check("1E3 + 007 + 1.", "((1000.0 + 7.0) + 1.0)")
	check("a < b", "(a < b)")
}

func TestParsePlaces(t *testing.T) {
	e, mistakes := Parse("1 + in.level * (b < 2 ? c : -d)")
	if len(mistakes) > 0 {
		t.Fatal(mistakes)
	}
	at := func(n int) Place { return Place{Offset: n} }
	want := &Binary{at(2), "+", &Number{at(0), 1},
		&Binary{at(13), "*", &Name{at(4), "in.level"},
			&Conditional{at(16), &Compare{at(18), "<", &Name{at(16), "b"}, &Number{at(20), 2}}, &Name{at(24), "c"},
				&Unary{at(28), "-", &Name{at(29), "d"}}}}}
	if d := cmp.Diff(Node(want), e.Root); d != "" {
		t.Error(d)
	}
}

// TestParseRefuses has one row for everything that the parser underneath
// understands and that is no arithmetic, and for plain slips. The column counts
// from 1.
func TestParseRefuses(t *testing.T) {
	rows := []struct {
		name, text string
		column     int
		message    string // part of it
		expected   string // part of it
	}{
		{"nothing", " ", 1, "empty", "arithmetic"},
		{"array", "[1, 2]", 1, "not arithmetic", "round brackets"},
		{"map", "{a: 1}", 1, "not arithmetic", "round brackets"},
		{"index", "a[0]", 2, "not arithmetic", "round brackets"},
		{"slice", "a[1:2]", 2, "not arithmetic", "round brackets"},
		{"double quotes", `1 + "s"`, 5, "texts", "number"},
		{"single quotes", `'s'`, 1, "texts", "number"},
		{"backquotes", "`s`", 1, "texts", "number"},
		{"bytes", `b"s"`, 2, "texts", "number"},
		{"pipe", "a | abs()", 3, "not arithmetic", "or"},
		{"closure", "count(x, {# > 1})", 1, "unknown function", "sqrt"},
		{"pointer", "# + 1", 1, "not arithmetic", "numbers"},
		{"predicate", "filter(a, .x)", 1, "unknown function", "sqrt"},
		{"foreign function", "round(x)", 1, "unknown function", "sqrt"},
		{"assignment", "x = 3", 3, "nothing is assigned", "=="},
		{"let", "let x = 3; x", 1, "not arithmetic", "names"},
		{"sequence", "a; b", 2, "not arithmetic", "one expression"},
		{"if", "if a {1} else {2}", 1, "not arithmetic", "names"},
		{"nil coalescing", "a ?? b", 3, "unknown operator", "?"},
		{"elvis", "a ?: b", 3, "unknown operator", "?"},
		{"optional chain", "a?.b", 2, "unknown operator", "?"},
		{"in", "a in b", 3, "not arithmetic", "names"},
		{"not in", "a not in b", 7, "not arithmetic", "names"},
		{"matches", "a matches b", 3, "not arithmetic", "names"},
		{"contains", "a contains b", 3, "not arithmetic", "names"},
		{"startsWith", "a startsWith b", 3, "not arithmetic", "names"},
		{"endsWith", "a endsWith b", 3, "not arithmetic", "names"},
		{"method", "a.b(1)", 1, "cannot be called", "sqrt"},
		{"call of a call", "abs(x)(y)", 7, "cannot be read", "operator"},
		{"member of brackets", "(a).b", 4, "dot out of place", "in.level"},
		{"member of a call", "abs(a).b", 7, "dot out of place", "in.level"},
		{"two dots", "a.b.c", 1, "not a name", "one dot"},
		{"dot at the end", "a. + 1", 1, "not a name", "one dot"},
		{"range", "1..5", 1, "not a number", "plain number"},
		{"percent", "a % b", 3, "not arithmetic", "numbers"},
		{"double star", "a ** 2", 3, "unknown operator", "^"},
		{"ampersands", "a > 0 && b > 0", 7, "not arithmetic", "and"},
		{"bars", "a > 0 || b > 0", 7, "not arithmetic", "or"},
		{"exclamation", "!(a > 0)", 1, "not arithmetic", "not"},
		{"double colon", "::abs(x)", 1, "unknown operator", "?"},
		{"line remark", "a // b", 3, "remarks", "division"},
		{"block remark", "a /* b */", 3, "remarks", "division"},
		{"true", "true", 1, "not arithmetic", "names"},
		{"nil", "nil", 1, "not arithmetic", "names"},
		{"hexadecimal", "0x10", 1, "not a number", "plain number"},
		{"binary", "0b11", 1, "not a number", "plain number"},
		{"underscore in a number", "1_000", 1, "not a number", "plain number"},
		{"letter code", "x + 4k7", 5, "not a number", "4700*ohm"},
		{"unit glued on", "10kohm", 1, "not a number", "4700*ohm"},
		{"decimal comma", "max(1, 2) + 1,5", 14, "cannot be read", "operator"},
		{"micro sign", "1 + µ", 5, "unknown character", "1e-6*farad"},
		{"ohm sign", "10*Ω", 4, "unknown character", "10000*ohm"},
		{"times sign", "a × b", 3, "not arithmetic", "numbers"},
		{"too large", "1e999", 1, "out of range", "1e308"},
		{"too small", "1e-999", 1, "out of range", "1e-308"},
		{"too many digits", "12345678901234567890", 1, "too many digits", "1e20"},
		{"two values", "a b", 3, "cannot be read", "operator"},
		{"dangling operator", "a +", 4, "incomplete", "number"},
		{"dangling not", "not", 4, "incomplete", "number"},
		{"half a conditional", "a > 0 ? b", 10, "incomplete", "number"},
		{"open bracket", "1/(2*(3)", 3, "not closed", "pairs"},
		{"closing bracket", "1)", 2, "closing bracket", "pairs"},
		{"empty brackets", "()", 2, "cannot be read", "pairs"},
		{"chained comparison", "a < b < c", 7, "chained", "and"},
		{"condition as a number", "1 + (a < b)", 8, "condition stands where a number", "?"},
		{"number as a condition", "a ? b : c", 1, "number stands where a condition", "x > 0"},
		{"number under and", "a > 0 and b", 11, "number stands where a condition", "x > 0"},
		{"number under not", "1 - x > 0 and not a", 19, "number stands where a condition", "x > 0"},
		{"minus of a condition", "-(a > 0)", 5, "condition stands where a number", "?"},
		{"conditions as branches", "a > 0 ? b > 0 : 1", 11, "condition stands where a number", "?"},
		{"condition as an argument", "abs(a > 0)", 7, "condition stands where a number", "?"},
		{"too few arguments", "parallel(a)", 1, "wrong number", "parallel(a, b)"},
		{"no arguments", "min()", 1, "wrong number", "min(a, b)"},
		{"too many arguments", "sqrt(a, b)", 1, "wrong number", "sqrt(a)"},
		{"root of three", "root(i, 0, 1)", 1, "wrong number", "residual"},
		{"root of a number", "root(1, 0, 1, x)", 6, "plain name", "unknown"},
		{"root of a dotted name", "root(a.b, 0, 1, a.b)", 8, "plain name", "unknown"},
		{"root without its unknown", "root(i, 0, 1, x)", 15, "does not contain", "unknown"},
		{"root whose unknown is an inner one", "root(i, 0, 1, root(i, 0, 1, i))", 15, "does not contain", "unknown"},
		{"33 levels of brackets", strings.Repeat("(", 33) + "1" + strings.Repeat(")", 33), 33, "nested too deep", "32"},
		{"reserved half of a name", "let.x", 1, "reserved", "another name"},
	}
	for _, r := range rows {
		t.Run(r.name, func(t *testing.T) {
			e, mistakes := Parse(r.text)
			if e != nil || len(mistakes) == 0 {
				t.Fatalf("%s was accepted", r.text)
			}
			var seen []string
			for _, m := range mistakes {
				if m.Offset+1 == r.column && strings.Contains(m.Message, r.message) && strings.Contains(m.Expected, r.expected) {
					return
				}
				seen = append(seen, m.Error())
			}
			t.Errorf("%s: want column %d, …%s…, expected …%s…; got\n%s", r.text, r.column, r.message, r.expected, strings.Join(seen, "\n"))
		})
	}
}

func TestParseSuggests(t *testing.T) {
	_, mistakes := Parse("1/(2*pi*sqr(l*c))")
	want := Mistakes{{Offset: 8, Message: "unknown function", Found: "sqr",
		Expected: "one of sqrt, ln, log10, exp, abs, min, max, sin, cos, atan, parallel, bessel_i0_scaled, bessel_i1_scaled, root", Nearest: "sqrt"}}
	if d := cmp.Diff(want, mistakes); d != "" {
		t.Error(d)
	}
	if got, want := want[0].Error(), `column 9: unknown function: found "sqr", expected one of sqrt, ln`; !strings.HasPrefix(got, want) {
		t.Errorf("worded as %s, want %s…", got, want)
	}
}

// TestParseBounded feeds texts whose size or depth would bring a recursive
// reader down.
func TestParseBounded(t *testing.T) {
	for name, text := range map[string]string{
		"a million brackets":     strings.Repeat("(", 1e6),
		"a million minus signs":  strings.Repeat("-", 1e6) + "1",
		"a million nots":         strings.Repeat("not ", 1e6),
		"33 levels":              strings.Repeat("(", 33) + "1" + strings.Repeat(")", 33),
		"a sum of a million":     strings.Repeat("1+", 1e6) + "1",
		"brackets all unmatched": strings.Repeat(")", 1e6),
	} {
		t.Run(name, func(t *testing.T) {
			e, mistakes := Parse(text)
			if e != nil || len(mistakes) == 0 || len(mistakes) > 20 {
				t.Errorf("%d mistakes", len(mistakes))
			}
		})
	}
	for name, text := range map[string]string{
		"32 levels":      strings.Repeat("(", 32) + "1" + strings.Repeat(")", 32),
		"8000 signs":     strings.Repeat("-", 8000) + "1",
		"a tower":        strings.Repeat("2^", 3000) + "1",
		"a sum of 4000":  strings.Repeat("1+", 4000) + "1",
		"a conditional ": strings.Repeat("1>x?2:", 1000) + "1",
	} {
		t.Run(name, func(t *testing.T) {
			if e, mistakes := Parse(text); e == nil {
				t.Error(mistakes)
			}
		})
	}
}
