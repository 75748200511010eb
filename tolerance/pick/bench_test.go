package pick

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"batchwright/data"
	"batchwright/tolerance/build"
)

func example(b *testing.B) *build.Build {
	text, err := data.Examples.ReadFile("examples/lantern.yaml")
	if err != nil {
		b.Fatal(err)
	}
	return read(b, string(text))
}

// BenchmarkChoose picks the embedded example's parts, simulated as `plan` does.
func BenchmarkChoose(b *testing.B) {
	x := example(b)
	for b.Loop() {
		if r, _, err := Choose(context.Background(), x, Options{Seed: 1, Units: 24_000, Alternates: 2}); err != nil || !r.ProvedCheapest {
			b.Fatal(r, err)
		}
	}
}

// BenchmarkTrade walks the example's whole trade, 6,000 units a point.
func BenchmarkTrade(b *testing.B) {
	x := example(b)
	for b.Loop() {
		if t, err := Efficient(context.Background(), x, Changes(x)[0], math.MaxInt64, Options{Seed: 1, Units: 6_000}); err != nil || !t.Complete {
			b.Fatal(t, err)
		}
	}
}

// twentyLines are twenty open resistors of different values, with some thirty
// candidates each, and three targets on all of them.
func twentyLines() string {
	values := []float64{1000, 1300, 1600, 2000, 2400, 3000, 3600, 4300, 5100, 6200, 7500, 9100, 1100, 1500, 1800, 2700, 3300, 3900, 4700, 5600}
	var parts, sum, up, down strings.Builder
	total, top, bottom := 0.0, 0.0, 0.0
	for i, v := range values {
		fmt.Fprintf(&parts, "      r%d: {part: resistor, ref: R%d, choose: {families: [metal-film-100, metal-film-25, carbon-film], tolerances: [0.1 %%, 0.5 %%, 1 %%, 2 %%, 5 %%], around: %g Ω, within: 8 %%, series: E96}}\n", i, i+1, v)
		fmt.Fprintf(&sum, "+r%d", i)
		total += v
		w := float64(1 + i%3)
		if i%2 == 0 {
			fmt.Fprintf(&up, "+%g*r%d", w, i)
			top += w * v
		} else {
			fmt.Fprintf(&down, "+%g*r%d", w, i)
			bottom += w * v
		}
	}
	return fmt.Sprintf(`
build: twenty lines
units: 24
conditions:
  bench: {temperature: 25 °C}
  warm:  {temperature: 45 °C}
stages:
  s:
    kind: formula
    parts:
%s    outputs: {total: {expression: "%s", unit: Ω}, ratio: {expression: "(%s)/(%s)"}}
targets:
  - {name: total, output: s.total, between: ["%.9g Ω", "%.9g Ω"], share: 80 %%}
  - {name: drift, output: s.total, change_from: bench, at: [warm], limit: "%.9g Ω", share: 80 %%}
  - {name: ratio, output: s.ratio, between: ["%.9g", "%.9g"], share: 80 %%}
`, parts.String(), sum.String()[1:], up.String()[1:], down.String()[1:], 0.995*total, 1.005*total, 0.0007*total, 0.995*top/bottom, 1.005*top/bottom)
}

// BenchmarkTwentyLines searches more combinations than can be looked at, for a
// minute at most, and says whether it proved the cheapest and, where not, how
// far below it the bound is.
func BenchmarkTwentyLines(b *testing.B) {
	x := read(b, twentyLines())
	c := chooserOf(b, x, Options{})
	least, most := math.MaxInt, 0
	for _, list := range c.fittings {
		least, most = min(least, len(list)), max(most, len(list))
	}
	proved, gap := 0.0, 0.0
	for b.Loop() {
		r, _, err := Choose(context.Background(), x, Options{Seed: 1, Units: 6_000, SearchFor: time.Minute})
		if err != nil {
			b.Fatal(err)
		}
		if gap = 1 - float64(r.Bound)/float64(r.Total); r.ProvedCheapest {
			proved = 1
		}
	}
	b.ReportMetric(proved, "proved")
	b.ReportMetric(100*gap, "%gap")
	b.ReportMetric(float64(least), "fewest-options")
	b.ReportMetric(float64(most), "most-options")
}
