package series

import (
	"math"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

func TestValuesArePublished(t *testing.T) {
	// The names and counts are the numbers in the names: E192 has 192 values.
	counts := map[string]int{"E3": 3, "E6": 6, "E12": 12, "E24": 24, "E48": 48, "E96": 96, "E192": 192}
	if len(published) != len(counts) || len(Names()) != len(counts) {
		t.Fatalf("%d published series, %d names, want %d", len(published), len(Names()), len(counts))
	}
	for _, name := range Names() {
		t.Run(name, func(t *testing.T) {
			got, ok := Values(name)
			if !ok || len(got) != counts[name] {
				t.Fatalf("Values(%q) has %d values, %v; want %d", name, len(got), ok, counts[name])
			}
			if diff := cmp.Diff(published[name], got); diff != "" {
				t.Error(diff)
			}
		})
	}
	if got, ok := Values("E13"); ok {
		t.Errorf("Values(E13) = %v", got)
	}
}

// Sums of the integer mantissas over one decade, computed from the listings of
// IEC 60063:2015 by themselves.
func TestChecksums(t *testing.T) {
	for _, c := range []struct {
		name  string
		scale float64
		want  int
	}{{"E24", 10, 901}, {"E48", 100, 18313}, {"E96", 100, 37070}, {"E192", 100, 74599}} {
		values, _ := Values(c.name)
		sum := 0
		for _, v := range values {
			sum += int(math.Round(v * c.scale))
		}
		if sum != c.want {
			t.Errorf("%s: sum %d, want %d", c.name, sum, c.want)
		}
	}
}

// The entries that differ from 10^(i/n) rounded half up, [published, by rule].
func TestIrregularEntries(t *testing.T) {
	for _, c := range []struct {
		name  string
		scale float64
		want  [][2]float64
	}{
		{"E3", 10, [][2]float64{{4.7, 4.6}}},
		{"E6", 10, [][2]float64{{3.3, 3.2}, {4.7, 4.6}}},
		{"E12", 10, [][2]float64{{2.7, 2.6}, {3.3, 3.2}, {3.9, 3.8}, {4.7, 4.6}, {8.2, 8.3}}},
		{"E24", 10, [][2]float64{{2.7, 2.6}, {3, 2.9}, {3.3, 3.2}, {3.6, 3.5}, {3.9, 3.8}, {4.3, 4.2}, {4.7, 4.6}, {8.2, 8.3}}},
		{"E48", 100, nil},
		{"E96", 100, nil},
		{"E192", 100, [][2]float64{{9.2, 9.19}}}, // 10^(185/192) = 9.194787
	} {
		values, _ := Values(c.name)
		var got [][2]float64
		for i, v := range values {
			rule := math.Floor(math.Pow(10, float64(i)/float64(len(values)))*c.scale+0.5) / c.scale
			if rule != v {
				got = append(got, [2]float64{v, rule})
			}
		}
		if diff := cmp.Diff(c.want, got); diff != "" {
			t.Errorf("%s: %s", c.name, diff)
		}
	}
}

func TestNesting(t *testing.T) {
	contains := func(outer, inner string) bool {
		values, _ := Values(inner)
		return !slices.ContainsFunc(values, func(v float64) bool { return !Contains(outer, v) })
	}
	for _, c := range [][2]string{{"E6", "E3"}, {"E12", "E6"}, {"E24", "E12"}, {"E96", "E48"}, {"E192", "E96"}} {
		if !contains(c[0], c[1]) {
			t.Errorf("%s does not contain %s", c[0], c[1])
		}
	}
	e24, _ := Values("E24")
	in := func(name string, want bool) []float64 {
		return slices.DeleteFunc(slices.Clone(e24), func(v float64) bool { return Contains(name, v) != want })
	}
	for _, c := range []struct {
		what      string
		got, want []float64
	}{
		{"E24 values missing from E192", in("E192", false), []float64{2.2, 2.7, 3, 3.3, 3.6, 3.9, 4.3, 5.1, 5.6, 6.2, 6.8, 8.2, 9.1}},
		{"E24 values in E96", in("E96", true), []float64{1, 1.1, 1.3, 1.5, 2, 7.5}},
		{"E24 values in E48", in("E48", true), []float64{1, 1.1, 7.5}},
	} {
		if diff := cmp.Diff(c.want, c.got); diff != "" {
			t.Errorf("%s: %s", c.what, diff)
		}
	}
}

// The largest and smallest half gap |b−a|/(b+a) between neighbours, in percent,
// the step to the next decade included. Computed from the listings.
func TestHalfGaps(t *testing.T) {
	want := map[string][2]float64{
		"E3": {37.5, 36.0544}, "E6": {20, 17.5}, "E12": {11.1111, 8.3333}, "E24": {7.1429, 3.2258},
		"E48": {2.5937, 2.1148}, "E96": {1.4815, 0.8772}, "E192": {0.9709, 0.304},
	}
	for _, name := range Names() {
		values := Between(name, 1, 10)
		gaps := [2]float64{0, math.Inf(1)}
		for i := 1; i < len(values); i++ {
			g := 100 * (values[i] - values[i-1]) / (values[i] + values[i-1])
			gaps = [2]float64{max(gaps[0], g), min(gaps[1], g)}
		}
		if diff := cmp.Diff(want[name], gaps, cmpopts.EquateApprox(1e-3, 0)); diff != "" {
			t.Errorf("%s: %s", name, diff)
		}
	}
}

func TestNearest(t *testing.T) {
	for _, c := range []struct {
		name    string
		x, want float64
		reason  string
	}{
		{"E24", 4990, 5100, "between 4700 and 5100"},
		{"E96", 3000, 3010, "an E24 value that E96 lacks"},
		{"E192", 9195, 9200, "the irregular value"},
		{"E96", 159.15, 158, "1/(2π·1 ms)"},
		{"E24", 1591.55, 1600, "1/(2π·100 µs)"},
		{"E24", 2.87e-9, 3e-9, "by ratio the upper one"},
		{"E24", 98900, 100000, "the next decade"},
		{"E24", 9545, 10000, "nearest by ratio, though 9100 is by difference"},
		{"E24", 6.33257e-10, 6.2e-10, "a small figure"},
		{"E96", 6.33257e-10, 6.34e-10, "a small figure"},
		{"E3", 1, 1, "a decade's own start"},
		{"E3", 0.999999, 1, "just below a decade"},
		{"E6", 8.2462, 6.8, "just below √68 = 8.24621, the middle by ratio"},
		{"E6", 8.2463, 10, "just above it"},
	} {
		if got := Nearest(c.name, c.x); got != c.want {
			t.Errorf("Nearest(%s, %v) = %v, want %v: %s", c.name, c.x, got, c.want, c.reason)
		}
	}
	for _, x := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if got := Nearest("E24", x); !math.IsNaN(got) {
			t.Errorf("Nearest(E24, %v) = %v, want NaN", x, got)
		}
	}
	if got := Nearest("E7", 1); !math.IsNaN(got) {
		t.Errorf("Nearest(E7, 1) = %v, want NaN", got)
	}
}

func TestBetween(t *testing.T) {
	for _, c := range []struct {
		reason    string
		name      string
		low, high float64
		want      []float64
	}{
		{"both ends in", "E6", 100e-12, 1e-9, []float64{100e-12, 150e-12, 220e-12, 330e-12, 470e-12, 680e-12, 1e-9}},
		{"exact decimal figures", "E12", 220e-12, 270e-12, []float64{220e-12, 270e-12}},
		{"over a decade's end", "E3", 4, 25, []float64{4.7, 10, 22}},
		{"nothing there", "E3", 3, 4, nil},
		{"backwards", "E3", 4, 3, nil},
		{"zero has no decade", "E3", 0, 3, nil},
		{"NaN", "E3", math.NaN(), 3, nil},
		{"unknown", "E5", 1, 3, nil},
	} {
		if diff := cmp.Diff(c.want, Between(c.name, c.low, c.high)); diff != "" {
			t.Errorf("%s: %s", c.reason, diff)
		}
	}
}

func TestCoarsest(t *testing.T) {
	for _, c := range []struct {
		x    float64
		want string
	}{{2200, "E3"}, {3300, "E6"}, {1800, "E12"}, {5.1, "E24"}, {1.21e3, "E48"}, {9.31, "E96"}, {9.2, "E192"}, {1234, ""}} {
		if got := Coarsest(c.x); got != c.want {
			t.Errorf("Coarsest(%v) = %q, want %q", c.x, got, c.want)
		}
	}
}

// Whatever the figure, the nearest value is in the series, and no other value
// near it is nearer by ratio.
func TestNearestIsNearest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(Names()).Draw(t, "series")
		x := math.Pow(10, rapid.Float64Range(-15, 12).Draw(t, "decade"))
		got := Nearest(name, x)
		if !Contains(name, got) {
			t.Fatalf("%v is not in %s", got, name)
		}
		for _, v := range Between(name, x/4, x*4) {
			if math.Abs(math.Log(v/x)) < math.Abs(math.Log(got/x))*(1-1e-9)-1e-12 {
				t.Fatalf("%v is nearer to %v than %v", v, x, got)
			}
		}
		if Nearest(name, got) != got {
			t.Fatalf("Nearest(%v) moves", got)
		}
	})
}

func TestPairs(t *testing.T) {
	for _, c := range []struct {
		reason string
		series string
		target float64
		join   Join
		want   Pair
	}{
		{"two thirds and one third", "E3", 320, Adding, Pair{220, 100, Adding, 320, 0}},
		{"twins by adding", "E12", 2000, Adding, Pair{1000, 1000, Adding, 2000, 0}},
		{"twins by reciprocals", "E12", 500, Reciprocal, Pair{1000, 1000, Reciprocal, 500, 0}},
		{"near a value: 10 kΩ beside 470 kΩ is 9791.7 Ω", "E3", 9791.666666666666, Reciprocal, Pair{10000, 470000, Reciprocal, 9791.666666666666, 0}},
	} {
		got := Pairs(c.series, c.target, c.join, 5)
		if len(got) == 0 {
			t.Errorf("%s: no pairs", c.reason)
			continue
		}
		if diff := cmp.Diff(c.want, got[0], cmpopts.EquateApprox(1e-12, 1e-12)); diff != "" {
			t.Errorf("%s: %s", c.reason, diff)
		}
	}
	if got := Pairs("E24", math.NaN(), Adding, 3); got != nil {
		t.Errorf("Pairs of NaN: %v", got)
	}
}

// No pair found by trying all of them is nearer.
func TestPairsAreNearest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		join := rapid.SampledFrom([]Join{Adding, Reciprocal}).Draw(t, "join")
		target := math.Pow(10, rapid.Float64Range(-1, 1).Draw(t, "decade"))
		got := Pairs("E6", target, join, 1)
		if len(got) != 1 {
			t.Fatal("no pair")
		}
		for _, p := range Pairs("E6", target, join, 40) {
			// The lesser share of the sum of values or of reciprocals, to the target's.
			share := min(p.First, p.Second) / target
			if join == Reciprocal {
				share = target / max(p.First, p.Second)
			}
			if share < 1e-3*(1-1e-6) || p.Value != join.Of(p.First, p.Second) {
				t.Fatalf("%+v is no pair", p)
			}
		}
		all := Between("E6", target/900, target*900)
		for _, a := range all {
			for _, b := range all {
				if e := math.Abs(join.Of(a, b)/target - 1); e < math.Abs(got[0].Error)-1e-12 {
					t.Fatalf("%v and %v miss by %v, %+v", a, b, e, got[0])
				}
			}
		}
	})
}
