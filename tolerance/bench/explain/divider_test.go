package explain

import (
	"context"
	"encoding/json"
	"math"
	"runtime"
	"slices"
	"strings"
	"testing"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
)

// dividers are two dividers of unlike resistors, so that a part faults one
// reading and an exchange both. The meter loads nothing; its error is a floor.
const dividers = `
build: two dividers
units: 40
instruments:
  dmm: {resistance: 0 Ω, accuracy: 0 %, floor: 10 mV}
conditions: {bench: {temperature: 25 °C, supply: 10 V}}
stages:
  a:
    kind: divider
    settings: {input: supply}
    parts:
      upper: {ref: R1, value: 10 kΩ, tolerance: 10 %, correlation: {value: 0.8, temperature: 0}}
      lower: {ref: R2, value: 15 kΩ, tolerance: 1 %}
  b:
    kind: divider
    settings: {input: supply}
    parts:
      upper: {ref: R3, value: 22 kΩ, tolerance: 2 %}
      lower: {ref: R4, value: 4.7 kΩ, tolerance: 2 %}
targets:
  - {name: level, output: a.voltage, at: [bench], between: [5.9 V, 6.08 V], share: 50 %}
`

// uniform is the same with R1 uniform over ±5 %.
var uniform = strings.Replace(dividers, "10 kΩ, tolerance: 10 %", "10 kΩ, tolerance: 5 %, shape: uniform", 1)

func small(t testing.TB, text string) fixture {
	t.Helper()
	f, err := fit("small", text, nil)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// find is a hypothesis by its name.
func (f fixture) find(t testing.TB, name string) int {
	t.Helper()
	for i, fa := range f.x.faults {
		if fa.name() == name {
			return i + 1
		}
	}
	t.Fatalf("no hypothesis %q", name)
	return 0
}

// TestPredictions holds what hypotheses predict against Ohm's law.
func TestPredictions(t *testing.T) {
	f := small(t, dividers)
	v := func(upper, lower float64) float64 { return 10 * lower / (upper + lower) }
	for name, want := range map[string][2]float64{
		"R1 ten times too large":                       {v(100e3, 15e3), v(22e3, 4.7e3)},
		"R1 ten times too small":                       {v(1e3, 15e3), v(22e3, 4.7e3)},
		"R1 8.2 kΩ instead of 10 kΩ":                   {v(8.2e3, 15e3), v(22e3, 4.7e3)}, // E12
		"R1 12 kΩ instead of 10 kΩ":                    {v(12e3, 15e3), v(22e3, 4.7e3)},
		"R2 missing or open":                           {10, v(22e3, 4.7e3)},
		"R2 shorted":                                   {0, v(22e3, 4.7e3)},
		"R4 missing or open":                           {v(10e3, 15e3), 10},
		"R1 and R2 exchanged":                          {v(15e3, 10e3), v(22e3, 4.7e3)},
		"R2 and R4 exchanged":                          {v(10e3, 4.7e3), v(22e3, 15e3)},
		"dmm read ten times too large at every point":  {10 * v(10e3, 15e3), 10 * v(22e3, 4.7e3)},
		"b.voltage read a thousand times too small":    {v(10e3, 15e3), v(22e3, 4.7e3) / 1000},
		"a.voltage and b.voltage in each other's rows": {v(22e3, 4.7e3), v(10e3, 15e3)},
	} {
		p := f.x.pictures[f.find(t, name)]
		for i := range want {
			got := p.mean[i]*f.x.scale[i] + f.x.centre[i]
			// The mean over 256 units of some 2 % each, and its curvature.
			if !(math.Abs(got-want[i]) <= 0.005*math.Abs(want[i])+0.002) {
				t.Errorf("%s: reading %d is predicted at %.5g, want %.5g", name, i, got, want[i])
			}
		}
	}
	// What is read on a wrong range or in a wrong row scatters with it.
	healthy := f.x.pictures[0].cov
	ten := f.x.pictures[f.find(t, "dmm read ten times too large at every point")].cov
	rows := f.x.pictures[f.find(t, "a.voltage and b.voltage in each other's rows")].cov
	ratio := f.x.scale[1] / f.x.scale[0]
	for _, x := range [][2]float64{
		{ten.At(0, 0), 100 * healthy.At(0, 0)}, {ten.At(1, 1), 100 * healthy.At(1, 1)},
		{rows.At(0, 0), ratio * ratio * healthy.At(1, 1)}, {rows.At(1, 1), healthy.At(0, 0) / ratio / ratio},
	} {
		if math.Abs(x[0]/x[1]-1) > 1e-6 {
			t.Errorf("variance %v, want %v", x[0], x[1])
		}
	}
	// 4 resistors: 2 decades, 2 neighbours, open and shorted each; 6 pairs; 4 ranges
	// at 2 points and at both; 1 pair of rows; and something else.
	if n, want := len(f.x.faults), 4*6+6+3*4+1+1; n != want {
		t.Errorf("%d hypotheses, want %d", n, want)
	}
}

// TestBayesByHand holds posteriors against the theorem written out. Two
// readings with unit variance, uncorrelated; the healthy unit reads (0, 0), the
// fault (3, 0), the readings are (3, 0). With 8 degrees of freedom the scale is
// 6/8, the squared distance from the healthy mean 9/0.75 = 12, and the heights
// differ by (1 + 12/8)^(10/2) = 2.5^5 = 97.65625. From 5 % before,
//
//	0.05·97.65625/(0.95 + 0.05·97.65625) = 0.83713
func TestBayesByHand(t *testing.T) {
	at := func(x, y float64) *picture {
		return newPicture([][]float64{{x, x}, {y, y}}, []int{0, 0}, []float64{1, 1})
	}
	s := newScorer([]*picture{at(0, 0), at(3, 0)}, []int{0, 1})
	p := posterior([]float64{0.95, 0.05}, s.logarithms([]float64{3, 0}))
	if want := 0.05 * 97.65625 / (0.95 + 0.05*97.65625); math.Abs(p[1]-want) > 1e-8 || math.Abs(p[0]+p[1]-1) > 1e-12 {
		t.Errorf("the fault has %.9f, want %.9f", p[1], want)
	}
	// Of the second reading alone nothing is learned.
	s = newScorer([]*picture{at(0, 0), at(3, 0)}, []int{1})
	if p := posterior([]float64{0.95, 0.05}, s.logarithms([]float64{3, 0})); math.Abs(p[1]-0.05) > 1e-12 {
		t.Errorf("the fault has %.9f after a reading that does not tell, want 0.05", p[1])
	}
	// The density of one reading is Student's t: at 0, with unit variance and 8
	// degrees of freedom, Γ(4.5)/(Γ(4)·√(8π·0.75)) = 11.6317284/(6·4.3416075) = 0.446524.
	one := newScorer([]*picture{at(0, 0)}, []int{0})
	if got := math.Exp(one.logarithms([]float64{0, 0})[0]); math.Abs(got-0.446524) > 1e-5 {
		t.Errorf("the density at the mean is %.6f, want 0.446524", got)
	}
}

// TestPriors holds that 5 % of units are faulty, and that a class's share is
// divided evenly.
func TestPriors(t *testing.T) {
	p := priors([]Class{Open, Open, Decade})
	// 26 and 15 of 41 parts of 5 %.
	for i, want := range []float64{0.05 * 13 / 41, 0.05 * 13 / 41, 0.05 * 15 / 41} {
		if math.Abs(p[i]-want) > 1e-15 {
			t.Errorf("prior %d is %.6f, want %.6f", i, p[i], want)
		}
	}
	var sum float64
	for _, w := range weights {
		sum += w.weight
	}
	if sum != 100 {
		t.Errorf("the weights add up to %g, want 100", sum)
	}
}

// TestPictureByWays holds a picture of two ways against means and variances by
// hand: 20 units at −1 ± 1 (the way 0), 20 at 9 ± 3.
func TestPictureByWays(t *testing.T) {
	var column []float64
	var ways []int
	for i := range 40 {
		sign := float64(2*(i%2) - 1)
		if i < 20 {
			column, ways = append(column, -1+sign), append(ways, 0)
		} else {
			column, ways = append(column, 9+3*sign), append(ways, 2)
		}
	}
	p := newPicture([][]float64{column}, ways, []float64{0.5})
	// Sums of squares 20 and 180, average within (20+180)/38; ν = 3.
	all := 200.0 / 38
	for k, want := range []struct{ mean, own float64 }{{-1, 20}, {9, 180}} {
		d := p.parts[k]
		variance := (want.own+3*all)/22 + 0.25 + grain*grain
		if d.weight != 0.5 || d.mean[0] != want.mean || math.Abs(d.cov.At(0, 0)-variance) > 1e-12 {
			t.Errorf("way %d: %v %v %v, want ½, %v, %v", k, d.weight, d.mean[0], d.cov.At(0, 0), want.mean, variance)
		}
	}
	within := (p.parts[0].cov.At(0, 0) + p.parts[1].cov.At(0, 0)) / 2
	if p.mean[0] != 4 || math.Abs(p.cov.At(0, 0)-(within+25)) > 1e-12 {
		t.Errorf("overall %v ± %v, want 4 ± %v", p.mean[0], p.cov.At(0, 0), within+25)
	}
}

// TestDistances holds Mahalanobis distances against Gauss elimination on the
// readings in volts and hertz, with means and covariances of the same simulated
// units summed anew.
func TestDistances(t *testing.T) {
	f := examples(t)[0]
	n := len(f.x.sheet)
	units := f.x.healthy.reached()
	mean := make([]float64, n)
	for i := range mean {
		for _, u := range units {
			mean[i] += f.x.healthy.points[i][u] / float64(len(units))
		}
	}
	for _, y := range f.measure(nil, 5, 3, nil) {
		var read []int
		for i := range n {
			read = append(read, i)
		}
		a := make([][]float64, n)
		for i := range a {
			a[i] = make([]float64, n+1)
			for j := range n {
				for _, u := range units {
					a[i][j] += (f.x.healthy.points[i][u] - mean[i]) * (f.x.healthy.points[j][u] - mean[j]) / float64(len(units)-1)
				}
			}
			var noise float64
			for _, v := range f.x.healthy.points[i] {
				u := bench.Uncertainty(f.model.Points[i].Instrument, v) / 2
				noise += u * u / float64(len(f.x.healthy.points[i]))
			}
			a[i][i] += noise
			a[i][n] = y[i] - mean[i]
		}
		x := eliminate(a)
		var want float64
		for i := range x {
			want += x[i] * (y[i] - mean[i])
		}
		want = math.Sqrt(want)
		// The picture draws covariances a little towards the average over all
		// ways: by ν/N = 20/4096.
		if got := f.x.distance(read, f.x.inScale(y)); !(math.Abs(got-want) < 0.01*want) {
			t.Errorf("distance %.5f, want %.5f", got, want)
		}
	}
}

// eliminate solves a system by Gauss elimination with pivots, each row scaled;
// the last column is the right side.
func eliminate(a [][]float64) []float64 {
	n := len(a)
	for i := range a {
		size := a[i][i]
		for j := range a[i] {
			a[i][j] /= size
		}
	}
	for k := range n {
		p := k
		for i := k; i < n; i++ {
			if math.Abs(a[i][k]) > math.Abs(a[p][k]) {
				p = i
			}
		}
		a[k], a[p] = a[p], a[k]
		for i := k + 1; i < n; i++ {
			m := a[i][k] / a[k][k]
			for j := k; j <= n; j++ {
				a[i][j] -= m * a[k][j]
			}
		}
	}
	x := make([]float64, n)
	for k := n - 1; k >= 0; k-- {
		x[k] = a[k][n]
		for j := k + 1; j < n; j++ {
			x[k] -= a[k][j] * x[j]
		}
		x[k] /= a[k][k]
	}
	return x
}

// TestSheet explains a sheet of the dividers whose answers are plain.
func TestSheet(t *testing.T) {
	f := small(t, dividers)
	nan := math.NaN()
	y := [][]float64{
		{6.0, 1.76},   // healthy
		{1.304, 1.76}, // R1 ten times too large: 15/115 of 10 V
		{1.76, 6.0},   // in each other's rows
		{nan, 1.76},   // not read
		{nan, nan},    // nothing read
		{6.075, 1.76}, // a healthy unit outside its target
		{10, 1.76},    // R2 open, or R1 shorted
		{5, 5},        // nothing does that
	}
	r, err := Explain(context.Background(), f.model, f.sheet, filled(f, y), Options{Seed: 1})
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []struct {
		verdict Verdict
		first   string // in the first group
	}{
		{Inside, ""}, {Outside, "R1 ten times too large"}, {Outside, "a.voltage and b.voltage in each other's rows"},
		{Incomplete, ""}, {Incomplete, ""}, {Misses, ""}, {Outside, "R1 shorted"},
		{Outside, "something else: no single fault here reads like this"},
	} {
		u := r.Units[i]
		if u.Verdict != want.verdict {
			t.Errorf("unit %d is %s, want %s", i+1, u.Verdict, want.verdict)
		}
		if got := firsts(u); want.first != "" && (!u.Accused || !slices.Contains(got, want.first)) {
			t.Errorf("unit %d: suspects %+v, want %s first", i+1, u.Suspects, want.first)
		}
	}
	// The fourth and fifth tell little or nothing: what was known before stays.
	if h := float64(r.Units[4].Healthy); math.Abs(h-f.x.prior[0]) > 1e-12 {
		t.Errorf("a unit of which nothing was read is healthy by %.4f, want %.4f", h, f.x.prior[0])
	}
	// R2 open and R1 shorted read the same, and only a meter on the part tells.
	u := r.Units[6]
	if got := firsts(u); !slices.Equal(slices.Sorted(slices.Values(got)), []string{"R1 shorted", "R2 missing or open"}) {
		t.Errorf("suspects %+v, want R2 open and R1 shorted alone in the first group", u.Suspects)
	}
	if len(u.Further) == 0 || u.Further[0].Reading != "measure "+u.Suspects[0].Ref+" out of circuit" {
		t.Errorf("further %+v, want a part measured out of circuit", u.Further)
	}
	if _, err := json.Marshal(r); err != nil {
		t.Error(err)
	}
}

// firsts are the suspects of the first group.
func firsts(u Unit) []string {
	var list []string
	for _, s := range u.Suspects {
		if s.Group == 1 {
			list = append(list, strings.TrimSpace(s.Ref+" "+s.Fault))
		}
	}
	return list
}

// TestFurther reads 0 V at the end of three dividers in a row, of which the first
// two were not read: the lower resistor of any is shorted, or the upper open.
// Between the first divider and the others its voltage tells, 0 V or 6 V, and
// better than the second's, which scatters more.
func TestFurther(t *testing.T) {
	text := strings.Replace(dividers, "settings: {input: supply}\n    parts:\n      upper: {ref: R3", "settings: {input: a.voltage}\n    parts:\n      upper: {ref: R3", 1)
	f := small(t, strings.Replace(text, "targets:", `  c:
    kind: divider
    settings: {input: b.voltage}
    parts:
      upper: {ref: R5, value: 10 kΩ, tolerance: 2 %}
      lower: {ref: R6, value: 33 kΩ, tolerance: 2 %}
targets:`, 1))
	u := f.x.unit(1, []float64{math.NaN(), math.NaN(), 0})
	told := 0
	for _, x := range u.Further {
		own := func(name string) bool { return strings.HasPrefix(name, "R1") || strings.HasPrefix(name, "R2") }
		if own(x.Between[0]) == own(x.Between[1]) {
			continue
		}
		told++
		if x.Reading != "a.voltage at bench" || x.Unit != "V" || x.Expect == nil {
			t.Fatalf("%+v, want a.voltage at bench", x)
		}
		low, high := math.Min(float64(x.Expect[0]), float64(x.Expect[1])), math.Max(float64(x.Expect[0]), float64(x.Expect[1]))
		if math.Abs(low) > 0.001 || math.Abs(high-6) > 0.02 {
			t.Errorf("expect %v, want 0 V and 6 V", *x.Expect)
		}
	}
	if told == 0 {
		t.Errorf("suspects %+v are not told apart: %+v", u.Suspects, u.Further)
	}
}

// TestRefusals names what does not fit.
func TestRefusals(t *testing.T) {
	f := small(t, dividers)
	for name, x := range map[string]struct {
		filled bench.Filled
		says   string
	}{
		"unknown point":  {bench.Filled{Points: []string{"a.voltag"}}, "a.voltag"},
		"point twice":    {bench.Filled{Points: []string{"a.voltage", "a.voltage"}}, "a.voltage"},
		"too few values": {bench.Filled{Points: []string{"a.voltage"}, Units: []bench.FilledUnit{{Unit: 3}}}, "unit 3"},
	} {
		_, err := Explain(context.Background(), f.model, f.sheet, x.filled, Options{Seed: 1, Units: 32})
		if err == nil || !strings.Contains(err.Error(), x.says) {
			t.Errorf("%s: %v, want an error that names %s", name, err, x.says)
		}
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Explain(ctx, f.model, f.sheet, filled(f, nil), Options{}); err == nil {
		t.Error("a context that has ended is no error")
	}
}

// TestProcessors holds that the number of processors changes no byte.
func TestProcessors(t *testing.T) {
	f := examples(t)[2]
	y := f.measure(nil, 8, 4, nil)
	y[3] = f.measure(f.x.faults[40], 1, 2, nil)[0]
	var texts []string
	for _, n := range []int{1, 4} {
		before := runtime.GOMAXPROCS(n)
		r, err := Explain(context.Background(), f.model, f.sheet, filled(f, y), Options{Seed: 9, Units: 64, Yield: 200})
		runtime.GOMAXPROCS(before)
		if err != nil {
			t.Fatal(err)
		}
		text, err := json.Marshal(r)
		if err != nil {
			t.Fatal(err)
		}
		texts = append(texts, string(text))
	}
	if texts[0] != texts[1] {
		t.Error("one processor and four do not agree")
	}
}

// TestOtherEquations holds faults against builds whose files have them written
// in, compiled anew: the first-order readings are the same.
func TestOtherEquations(t *testing.T) {
	f := small(t, dividers)
	for name, swap := range map[string][2]string{
		"R1 ten times too large":      {"ref: R1, value: 10 kΩ", "ref: R1, value: 100 kΩ"},
		"R4 3.9 kΩ instead of 4.7 kΩ": {"ref: R4, value: 4.7 kΩ", "ref: R4, value: 3.9 kΩ"},
	} {
		b, err := build.Read("other.yaml", []byte(strings.Replace(dividers, swap[0], swap[1], 1)), nil)
		if err != nil {
			t.Fatal(err)
		}
		m, err := b.Compile()
		if err != nil {
			t.Fatal(err)
		}
		r := spread.NewReader(m)
		source := scatter.Source{Seed: 1, Units: 1}
		want := r.Read(r.Draw(source, m.Inputs, 64), 64).Points
		got := f.x.simulate(f.x.faults[f.find(t, name)-1], 64).points
		for i := range want {
			for u := range want[i] {
				// A piece that is wrong is of no lot; what is drawn differs by that
				// alone where the right one has a lot.
				if strings.HasPrefix(name, "R4") && got[i][u] != want[i][u] {
					t.Fatalf("%s: unit %d reads %g, want %g", name, u, got[i][u], want[i][u])
				}
			}
			if a, b := means(got, span(64))[i], means(want, span(64))[i]; math.Abs(a-b) > 0.02*b {
				t.Errorf("%s: mean %g, want %g", name, a, b)
			}
		}
	}
}

func span(n int) []int {
	var list []int
	for i := range n {
		list = append(list, i)
	}
	return list
}

// TestSeenFaults holds that what no reading feels is no hypothesis, and that its
// share of the faulty is the healthy unit's: the readings cannot accuse it.
func TestSeenFaults(t *testing.T) {
	f := examples(t)[0]
	for _, fa := range f.x.faults {
		if fa.ref == "C1" || fa.ref == "C5" { // decoupling, in no equation of a reading
			t.Errorf("%s is a hypothesis", fa.name())
		}
	}
	var sum float64
	for _, p := range f.x.prior {
		sum += p
	}
	if math.Abs(sum-1) > 1e-12 || !(f.x.prior[0] > 1-faulty && f.x.prior[0] < 1) {
		t.Errorf("priors add up to %v, the healthy unit's is %v", sum, f.x.prior[0])
	}
	for _, class := range []Class{Open, Neighbour, Decade, Swapped, Shorted, Reversed, Family, Figures, NotTrimmed, Range, Exchanged, Other} {
		if !slices.ContainsFunc(f.x.faults, func(fa *fault) bool { return fa.class == class }) {
			t.Errorf("no hypothesis is %s", class)
		}
	}
}

// TestColumns gives the points in another order: the review is the same.
func TestColumns(t *testing.T) {
	f := small(t, dividers)
	y := [][]float64{{6.01, 1.77}, {1.3, 1.76}}
	one, err := Explain(context.Background(), f.model, f.sheet, filled(f, y), Options{Seed: 1})
	if err != nil {
		t.Fatal(err)
	}
	turned := filled(f, y)
	slices.Reverse(turned.Points)
	for _, u := range turned.Units {
		slices.Reverse(u.Values)
	}
	two, err := Explain(context.Background(), f.model, f.sheet, turned, Options{Seed: 1})
	if err != nil {
		t.Fatal(err)
	}
	a, _ := json.Marshal(one)
	b, _ := json.Marshal(two)
	if string(a) != string(b) {
		t.Errorf("the order of the points counts:\n%s\n%s", a, b)
	}
}

// TestSilence reads 0 Hz and 0 V at an oscillator: it does not oscillate, its
// coil is open or shorted, or a capacitor across it is; which, no reading tells.
func TestSilence(t *testing.T) {
	f := examples(t)[0]
	y := f.measure(f.x.faults[f.find(t, "L1 missing or open")-1], 1, 3, nil)[0]
	for i, p := range f.model.Points {
		if p.Stage.Name == "fixed" && y[i] > 0.02 { // a scope's floor is 10 mV, a counter's 1 Hz
			if p.Unit.Symbol != "Hz" || y[i] > 1 {
				t.Errorf("%s reads %v", pointName(p), y[i])
			}
		}
	}
	got := firsts(f.x.unit(1, y))
	for _, want := range []string{"L1 missing or open", "C6 shorted", "C7 shorted", "CT1 shorted", "fixed does not oscillate"} {
		if !slices.Contains(got, want) {
			t.Errorf("suspects %v, want %s among the first", got, want)
		}
	}
}

// TestPins holds a trim left at an end against the value that the model itself
// has for the output at that end: the collector, which the meter's 10 MΩ across
// 10 kΩ move by a thousandth.
func TestPins(t *testing.T) {
	f := examples(t)[0]
	l := spread.Linearise(f.model, f.model.Trims[0].AtLow, f.model.Trims[0].AtHigh)
	i := slices.Index(pointNames(f.model), "mixer.collector")
	var got []float64
	for k, end := range []string{"low", "high"} {
		p := f.x.pictures[f.find(t, "mixer.bias left at its "+end+" end")]
		v := p.mean[i]*f.x.scale[i] + f.x.centre[i]
		got = append(got, v)
		if want := l.Values[k] + f.model.Build.Trims[0].To; math.Abs(v-want) > 0.2 {
			t.Errorf("left at its %s end the collector is at %v, want %v", end, v, want)
		}
	}
	if math.Abs(got[0]-got[1]) < 2 {
		t.Errorf("both ends read alike, %v: the test proves nothing", got)
	}
}

// TestAbsurdReadings holds that a reading beyond all reason is outside and has
// probabilities like any other.
func TestAbsurdReadings(t *testing.T) {
	f := small(t, dividers)
	for _, y := range []float64{1e300, -math.MaxFloat64, 1e12, math.SmallestNonzeroFloat64} {
		u := f.x.unit(1, []float64{y, 1.76})
		if u.Verdict != Outside || !u.Accused || !(u.Healthy < 1e-3) || !(u.Suspects[0].Probability > 0.1) {
			t.Errorf("%g V: %+v", y, u)
		}
	}
}

// TestFurtherAtTheBench holds that a reading where the unit is goes before a
// better one elsewhere.
func TestFurtherAtTheBench(t *testing.T) {
	f := examples(t)[1]
	a, b := f.find(t, "R6 ten times too small"), f.find(t, "R4 and R5 exchanged")
	read := span(len(f.x.sheet))
	got := f.x.further(a, b, read)
	if !strings.HasSuffix(got.Reading, " at bench") || got.Expect == nil || !(got.Score > enough) {
		t.Errorf("%+v, want a reading at the bench", got)
	}
	if best, _ := f.x.telling(f.x.guess(a), f.x.guess(b), func(o build.Output) bool { return !f.x.isRead(o, read) }); f.model.Outputs[best].Condition == 0 {
		t.Error("the best reading is at the bench: the test proves nothing")
	}
}

// TestShown holds what instruments show of what has no value, and of a frequency
// whose level is below the 100 mV that a counter needs.
func TestShown(t *testing.T) {
	m := examples(t)[0].model
	points := make([][]float64, len(m.Points))
	for i := range points {
		points[i] = []float64{math.NaN(), math.Inf(-1), 5, 5}
	}
	names := pointNames(m)
	frequency, level := slices.Index(names, "fixed.frequency"), slices.Index(names, "fixed.level")
	points[level] = []float64{1, 1, 0.09, 0.11}
	shown(m, points)
	if got := points[frequency]; !slices.Equal(got, []float64{0, 0, 0, 5}) {
		t.Errorf("the counter shows %v, want 0, 0, 0, 5", got)
	}
	if got := points[0]; !slices.Equal(got, []float64{0, 0, 5, 5}) {
		t.Errorf("the meter shows %v, want 0, 0, 5, 5", got)
	}
	// Ends of two trims as digits to the base 3: reached 0, high 1, low 2.
	if got := ways([][]int8{{0, 1, -1, 0}, {0, 0, 1, -1}}, 4); !slices.Equal(got, []int{0, 3, 7, 2}) {
		t.Errorf("ways %v, want 0, 3, 7, 2", got)
	}
}
