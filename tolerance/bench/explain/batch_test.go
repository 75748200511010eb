package explain

import (
	"context"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
)

// TestRestByRejection holds what the units not read yet should come to against
// brute force: whole batches are drawn, read with the meter's errors, and kept
// where the first four units' readings are, in the mean, those that were read;
// of those kept the other units are judged. The mean is all that four readings
// of one lot say of it.
func TestRestByRejection(t *testing.T) {
	const read, batches = 4, 60_000
	f := small(t, dividers)
	f.x.options.Yield = 40_000
	m := f.model
	reader := spread.NewReader(m)
	units := 12
	in := reader.Draw(scatter.Source{Seed: 99, Units: units}, m.Inputs, units*batches)
	v := reader.Read(in, units*batches).Points
	for _, mean := range []float64{5.88, 6.0, 6.09} {
		random := rand.New(rand.NewPCG(5, 6))
		good, all := 0, 0
		for b := range batches {
			first := b * units
			var sum float64
			for u := range read {
				sum += (v[0][first+u] + 0.01*(2*random.Float64()-1)) / read
			}
			if math.Abs(sum-mean) > 0.004 {
				continue
			}
			for u := first + read; u < first+units; u++ {
				all++
				if v[0][u] >= 5.9 && v[0][u] <= 6.08 {
					good++
				}
			}
		}
		want := float64(good) / float64(all)
		y := make([][]float64, read)
		for u := range y {
			y[u] = []float64{mean, f.x.centre[1]}
		}
		r, err := f.x.review(context.Background(), filled(f, y))
		if err != nil {
			t.Fatal(err)
		}
		rest := r.Batch.Rest
		t.Logf("mean %.2f V: share %.3f, by rejection %.3f of %d; planned %.3f", mean, rest.Share, want, all, rest.Planned)
		if rest.Units != 36 || math.Abs(float64(rest.Share)-want) > 0.03 {
			t.Errorf("mean %.2f V: %d units, share %.3f, want 36 and %.3f", mean, rest.Units, rest.Share, want)
		}
		if math.Abs(float64(rest.Planned)-want) < 0.03 {
			t.Errorf("mean %.2f V: what is planned does as well: the test proves nothing", mean)
		}
	}
}

// TestLotByHand holds what four readings say of one lot against the scalar
// formulas. R1 is uniform ±5 %, of correlation 0.8, so that z of a piece
// follows its lot by √0.8·E[z·g] = √0.8/√π (E[(2Φ(g) − 1)·g] = 1/√π), and a
// reading moves by dV/dR1 = −V²/(10 V·R2) a ohm.
func TestLotByHand(t *testing.T) {
	f := small(t, uniform)
	y := make([][]float64, 4)
	for u := range y {
		y[u] = []float64{6.05, f.x.centre[1]}
	}
	r, err := f.x.review(context.Background(), filled(f, y))
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Batch.Lots) != 1 || r.Batch.Lots[0].Refs[0] != "R1" || r.Batch.Lots[0].Unit != "%" {
		t.Fatalf("lots %+v, want R1's", r.Batch.Lots)
	}
	effect := -6.0 * 6 / (10 * 15e3) * 500 * math.Sqrt(0.8/math.Pi) // V for one standard deviation
	slope1, slope2 := 6.0*6/(10*15e3), 6.0*(10-6)/(10*15e3)
	z := 1.0 / 3 // variance of a uniform z
	own := slope1*slope1*500*500*(z-0.8/math.Pi) +
		slope2*slope2*150*150*scatter.Variance("normal") + 0.01*0.01/3
	precision := 1 + effect*effect/(own/4)
	sd := 1 / math.Sqrt(precision)
	g := effect / (own / 4) * (6.05 - f.x.centre[0]) / precision
	lot := r.Batch.Lots[0]
	if math.Abs(float64(lot.Deviation)-g) > 0.03*math.Abs(g) || math.Abs(float64(lot.Score)-g/sd) > 0.05*math.Abs(g/sd) {
		t.Errorf("deviation %.4f, score %.3f, want %.4f and %.3f", lot.Deviation, lot.Score, g, g/sd)
	}
	// E[2Φ(√ρ·g + √(1−ρ)·e) − 1] = 2Φ(√ρ·g/√(2 − ρ)) − 1, of ±5 %.
	shift := 5 * math.Erf(math.Sqrt(0.8)*float64(lot.Deviation)/math.Sqrt(1.2)/math.Sqrt2)
	if math.Abs(float64(lot.Shift)-shift) > 1e-6 {
		t.Errorf("shift %.6f %%, want %.6f %%", lot.Shift, shift)
	}
	if !(lot.Interval[0] < lot.Shift && lot.Shift < lot.Interval[1]) {
		t.Errorf("interval %v about %v", lot.Interval, lot.Shift)
	}
}

// TestPointsByHand holds a point's figures against sums by hand.
func TestPointsByHand(t *testing.T) {
	f := small(t, uniform)
	c := f.x.centre
	var y [][]float64
	for u := range 10 {
		y = append(y, []float64{c[0] + 0.004*float64(u), c[1] + 0.05*float64(2*(u%2)-1)})
	}
	r, err := f.x.review(context.Background(), filled(f, y))
	if err != nil {
		t.Fatal(err)
	}
	a, b := r.Batch.Points[0], r.Batch.Points[1]
	if math.Abs(float64(a.Slope)-0.004) > 1e-9 || !strings.Contains(strings.Join(a.Remarks, " "), "trend") {
		t.Errorf("slope %v, remarks %v, want 0.004 and a trend", a.Slope, a.Remarks)
	}
	if math.Abs(float64(a.Mean)-(c[0]+0.018)) > 1e-9 || math.Abs(float64(a.ExpectedMean)-6) > 0.02 {
		t.Errorf("mean %v of %v", a.Mean, a.ExpectedMean)
	}
	// s² = 10·0.05²/9; a reading's own variance: R3 and R4 are ±2 % normal, of no
	// lot: (V(10−V)/10)²·2·(0.02/3 truncated)², and the floor.
	v := 10 * 4.7 / 26.7
	own := math.Pow(v*(10-v)/10, 2)*2*0.02*0.02*scatter.Variance("normal") + 0.01*0.01/3
	ratio := math.Sqrt(10 * 0.05 * 0.05 / 9 / own)
	if math.Abs(float64(b.SpreadRatio)-ratio) > 0.03*ratio || strings.Join(b.Remarks, " ") != "spread" {
		t.Errorf("spread ratio %.4f, remarks %v, want %.4f and spread alone", b.SpreadRatio, b.Remarks, ratio)
	}
	score := 0.0
	if math.Abs(float64(b.ShiftScore)-score) > 1e-6 {
		t.Errorf("shift score %v, want 0", b.ShiftScore)
	}
	score = 0.018 / math.Sqrt(math.Pow(6.0*6/(10*15e3)*500, 2)*0.8/math.Pi+
		(math.Pow(6.0*6/(10*15e3)*500, 2)*(1.0/3-0.8/math.Pi)+math.Pow(6.0*4/(10*15e3)*150, 2)*scatter.Variance("normal")+0.01*0.01/3)/10)
	if math.Abs(float64(a.ShiftScore)-score) > 0.05*score {
		t.Errorf("shift score %.4f, want %.4f", a.ShiftScore, score)
	}
}

// TestUnclearLots reads a tank's frequency alone, which both its coil and its
// capacitor move: no reading says which line is off.
func TestUnclearLots(t *testing.T) {
	f := small(t, `
build: tank
units: 20
conditions: {bench: {temperature: 25 °C}}
instruments: {scope: {accuracy: 50 %}}
stages:
  a:
    kind: tuned-tank
    parts:
      coil: {ref: L1, value: 1 mH, tolerance: 5 %, correlation: {value: 0.9, temperature: 0}}
      tank: {ref: C1, value: 150 pF, tolerance: 5 %, correlation: {value: 0.9, temperature: 0}}
`)
	y := f.measure(nil, 20, 3, func(lot, batch int) (float64, bool) { return 2, true })
	r, err := f.x.review(context.Background(), filled(f, y))
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Batch.Lots) != 0 || len(r.Batch.Unclear) != 1 {
		t.Fatalf("lots %+v, unclear %+v, want one pair and no line", r.Batch.Lots, r.Batch.Unclear)
	}
	u := r.Batch.Unclear[0]
	if names := u.Lots[0].Refs[0] + u.Lots[1].Refs[0]; names != "L1C1" && names != "C1L1" {
		t.Errorf("between %s", names)
	}
}

// TestLotThatAnotherCouldBe has the capacitors' lot off by 2.6 of its standard
// deviations. What the readings feel of the coils' is 10/6 of that, so it is the
// coils' lot that is named, off by some 2.6·(6·10)/(10² + 6²) = 1.15 ± 0.51; but
// the capacitors' would only have to be off by 1.15·(10/6) = 1.9, and that has to
// be said. With capacitors of 3 % it would be 2.6·30/109·(10/3) = 2.4 of theirs,
// and of 1 % beyond what a lot may be.
func TestLotThatAnotherCouldBe(t *testing.T) {
	for _, c := range []struct {
		tolerance string
		g         float64
		unclear   int
	}{{"6 %", 2.6, 1}, {"1 %", 15, 0}} {
		f := small(t, `
build: tank
units: 20
conditions: {bench: {temperature: 25 °C}}
instruments: {scope: {accuracy: 50 %}}
stages:
  a:
    kind: tuned-tank
    settings: {stray: 0 pF}
    parts:
      coil: {ref: L1, value: 1 mH, tolerance: 10 %, correlation: {value: 0.97, temperature: 0}}
      tank: {ref: C1, value: 150 pF, tolerance: `+c.tolerance+`, correlation: {value: 0.97, temperature: 0}}
`)
		capacitors := -1
		for _, l := range f.x.lines() {
			if f.x.lotName(l).Refs[0] == "C1" {
				capacitors = l.number
			}
		}
		y := f.measure(nil, 20, 3, func(lot, batch int) (float64, bool) {
			if lot == capacitors {
				return c.g, true
			}
			return 0, true
		})
		r, err := f.x.review(context.Background(), filled(f, y))
		if err != nil {
			t.Fatal(err)
		}
		if len(r.Batch.Lots) != 1 || r.Batch.Lots[0].Refs[0] != "L1" || len(r.Batch.Unclear) != c.unclear {
			t.Errorf("%s: lots %+v, unclear %+v, want L1 and %d pairs", c.tolerance, r.Batch.Lots, r.Batch.Unclear, c.unclear)
		}
	}
}

// TestFewUnits has nothing to say of a batch of three.
func TestFewUnits(t *testing.T) {
	f := small(t, dividers)
	r, err := f.x.review(context.Background(), filled(f, [][]float64{{6, 1.76}, {6, 1.76}, {6, 1.76}, {1, 1.76}}))
	if err != nil {
		t.Fatal(err)
	}
	if r.Batch.Counted != 3 || len(r.Batch.Points) != 0 || r.Batch.Why == "" || r.Batch.Rest != nil {
		t.Errorf("%+v, want nothing but why", r.Batch)
	}
}

// TestTrendByHand: of y = 2, 4, 5, 4, 5 over 1..5 the slope is 6/10, the squares
// about the line 2.4, t = 0.6/√(2.4/3/10) = 2.1213. With 3 degrees of freedom the
// chance of a t as far from 0 is 1 − (2/π)·(atan a + a/(1 + a²)), a = t/√3, 0.1240.
func TestTrendByHand(t *testing.T) {
	slope, score, p := trend([]float64{1, 2, 3, 4, 5}, []float64{2, 4, 5, 4, 5})
	a := 0.6 / math.Sqrt(0.08) / math.Sqrt(3)
	want := 1 - 2/math.Pi*(math.Atan(a)+a/(1+a*a))
	if math.Abs(slope-0.6) > 1e-12 || math.Abs(score-0.6/math.Sqrt(0.08)) > 1e-12 || math.Abs(p-want) > 1e-9 {
		t.Errorf("slope %v, t %v, p %v, want 0.6, %v, %v", slope, score, p, 0.6/math.Sqrt(0.08), want)
	}
	if _, score, p := trend([]float64{1, 2, 3}, []float64{4, 4, 4}); !math.IsNaN(score) || !math.IsNaN(p) {
		t.Errorf("readings that are all the same have t %v, p %v", score, p)
	}
}

// TestDraws holds the mean and the covariance of many drawn lots against what
// was learned.
func TestDraws(t *testing.T) {
	f := examples(t)[0]
	p := f.learned(f.measure(nil, 24, 6, nil))
	const n = 20_000
	draw := p.draws(3, n)
	columns := make([][]float64, len(p.lots))
	for k, l := range p.lots {
		for b := range n {
			g, ok := draw(l.number, b)
			if !ok {
				t.Fatal("a lot that was learned is not drawn")
			}
			columns[k] = append(columns[k], g)
		}
	}
	if _, ok := draw(12345, 0); ok {
		t.Error("a lot that nobody knows is drawn")
	}
	if len(p.lots) < 5 {
		t.Fatalf("%d lots prove little", len(p.lots))
	}
	mean := means(columns, span(n))
	cov := products(columns, span(n), mean)
	for i := range columns {
		if math.Abs(mean[i]-p.mean.AtVec(i)) > 0.03 {
			t.Errorf("lot %d: mean %v, want %v", i, mean[i], p.mean.AtVec(i))
		}
		for j := range columns {
			if got := cov.At(i, j) / (n - 1); math.Abs(got-p.cov.At(i, j)) > 0.05 {
				t.Errorf("lots %d, %d: covariance %v, want %v", i, j, got, p.cov.At(i, j))
			}
		}
	}
}

// TestWrongReel reads ten units that all have the same wrong resistor.
func TestWrongReel(t *testing.T) {
	f := small(t, dividers)
	r, err := f.x.review(context.Background(), filled(f, f.measure(f.x.faults[f.find(t, "R4 ten times too large")-1], 10, 3, nil)))
	if err != nil {
		t.Fatal(err)
	}
	if r.Batch.Counted != 10 || len(r.Notes) != 1 || !strings.Contains(r.Notes[0], "of them is R") || !strings.Contains(r.Notes[0], "10 of 10") {
		t.Errorf("counted %d, notes %v", r.Batch.Counted, r.Notes)
	}
}
