package tape

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

func closeTo(t *testing.T, name string, x, got, want, tolerance float64) {
	t.Helper()
	if !near(got, want, tolerance) {
		t.Errorf("%s(%v) = %.17g, want %.17g: off by %.2g, allowed %.2g", name, x, got, want, math.Abs(got/want-1), tolerance)
	}
}

// Abramowitz & Stegun, Handbook of Mathematical Functions, table 9.8: e^−x·I₀
// and e^−x·I₁ to ten decimals, so to half a unit of the tenth.
func TestBesselTable(t *testing.T) {
	for _, row := range [][3]float64{
		{0.5, 0.6450352704, 0.1564208032},
		{1, 0.4657596076, 0.2079104153},
		{2, 0.3085083226, 0.2152692892},
		{5, 0.1835408126, 0.1639722669},
		{10, 0.1278333372, 0.1212626814},
		{20, 0.08978031188, 0.08750622218},
	} {
		x := row[0]
		if d := math.Abs(besselI0Scaled(x) - row[1]); !(d <= 0.5e-10) {
			t.Errorf("e^-x I0(%v) is %.10f, the table says %.10f", x, besselI0Scaled(x), row[1])
		}
		if d := math.Abs(besselI1Scaled(x) - row[2]); !(d <= 0.5e-10) {
			t.Errorf("e^-x I1(%v) is %.10f, the table says %.10f", x, besselI1Scaled(x), row[2])
		}
	}
}

// Made with scipy 1.10.1:
//
//	for x in xs: print("{%r, %r, %r}," % (x, special.i0e(x), special.i1e(x)))
//
// whose Chebyshev series promise 2e-15 or so; 1e-14 allows for that.
func TestBesselGrid(t *testing.T) {
	for _, row := range [][3]float64{
		{0.0, 1.0, 0.0},
		{1e-08, 0.9999999900000003, 4.999999950000002e-09},
		{0.001, 0.9990007495835156, 0.0004995003123542213},
		{0.1, 0.9071009257823011, 0.045298446808809324},
		{0.5, 0.64503527044915, 0.15642080318487173},
		{1.0, 0.46575960759364043, 0.2079104153497085},
		{1.5, 0.36743360905415834, 0.21903938742092574},
		{2.0, 0.308508322553671, 0.2152692892489377},
		{3.0, 0.24300035416182536, 0.19682671329730084},
		{4.5, 0.1941982776283823, 0.17095882229749212},
		{5.0, 0.18354081260932834, 0.16397226694454234},
		{7.5, 0.1483158300773955, 0.13804121154855414},
		{7.75, 0.14581227430891427, 0.13605110008033905},
		{8.0, 0.1434317818568503, 0.13414249329269812},
		{10.0, 0.1278333371634286, 0.1212626813844555},
		{12.5, 0.1140219294622889, 0.10936143099065089},
		{15.0, 0.1038995314488227, 0.10037417504516664},
		{17.3, 0.09663216179023557, 0.09379639227752906},
		{20.0, 0.089780311884826, 0.08750622218328867},
		{24.999, 0.08019839425680447, 0.07857763574776945},
		{25.0, 0.08019677354743669, 0.07857611331929278},
		{25.001, 0.08019515293634485, 0.07857459097915732},
		{30.0, 0.0731459464822373, 0.07191633059864755},
		{39.9, 0.06335803550042246, 0.06255897063316232},
		{40.0, 0.06327827987523532, 0.06248222907444206},
		{55.0, 0.053916898493938756, 0.05342447519519452},
		{99.5, 0.04004487039245707, 0.039843129120730285},
		{100.0, 0.03994437929909668, 0.03974415302513025},
		{150.0, 0.03260074788391805, 0.032491896388848945},
		{250.0, 0.025243969387054754, 0.025193430757117306},
		{399.0, 0.01997836052714038, 0.019953309261735303},
		{400.0, 0.019953356281939987, 0.01992839895890354},
		{500.0, 0.017845706500153165, 0.017827851852898053},
		{600.0, 0.01629014665630598, 0.016276565868339667},
		{700.0, 0.015081295651531355, 0.015070519444716846},
	} {
		closeTo(t, "I0", row[0], besselI0Scaled(row[0]), row[1], 1e-14)
		closeTo(t, "I1", row[0], besselI1Scaled(row[0]), row[2], 1e-14)
	}
}

// besselBig sums the power series and e^x in 400 bits; no digit is lost, for
// all terms are positive. An independent way from the asymptotic series.
func besselBig(x float64, order int64) float64 {
	const bits = 400
	of := func(v float64) *big.Float { return new(big.Float).SetPrec(bits).SetFloat64(v) }
	sum := func(next func(term *big.Float, k int64)) *big.Float {
		s, term := of(1), of(1)
		for k := int64(1); term.Sign() != 0 && term.MantExp(nil) > s.MantExp(nil)-120; k++ {
			next(term, k)
			s.Add(s, term)
		}
		return s
	}
	q := of(x)
	q.Mul(q, q).Quo(q, of(4))
	series := sum(func(term *big.Float, k int64) {
		term.Mul(term, q).Quo(term, of(float64(k*(k+order))))
	})
	exponential := sum(func(term *big.Float, k int64) { term.Mul(term, of(x)).Quo(term, of(float64(k))) })
	if order == 1 {
		series.Mul(series, of(x)).Quo(series, of(2))
	}
	v, _ := series.Quo(series, exponential).Float64()
	return v
}

func TestBesselAgainstLongArithmetic(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	xs := []float64{1e-300, 1e-10, 0.999999, 1, 1.5451272579925421, 24.999999, 25, 39.99999, 40, 99.9999, 100, 399.999, 400, 700}
	for range 400 {
		xs = append(xs, 30*random.Float64(), 700*random.Float64())
	}
	for _, x := range xs {
		closeTo(t, "I0", x, besselI0Scaled(x), besselBig(x, 0), 3e-15)
		closeTo(t, "I1", x, besselI1Scaled(x), besselBig(x, 1), 3e-15)
	}
}

func TestBesselLimits(t *testing.T) {
	// x → 0: I₁/I₀ → x/2, by the power series (Abramowitz & Stegun 9.6.10).
	for _, x := range []float64{1e-300, 1e-30, 1e-9} {
		closeTo(t, "I1/I0", x, besselI1Scaled(x)/besselI0Scaled(x), x/2, 1e-15)
	}
	// x → ∞: √(2πx)·e^−x·I_ν → 1 − (4ν²−1)/(8x) (9.7.1); the next term is
	// below 1/x².
	for _, x := range []float64{1e8, 1e12, 1e300} {
		scale := math.Sqrt(2 * math.Pi * x)
		closeTo(t, "I0", x, scale*besselI0Scaled(x), 1+1/(8*x), 1e-15)
		closeTo(t, "I1", x, scale*besselI1Scaled(x), 1-3/(8*x), 1e-15)
	}
	for _, row := range []struct{ x, i0, i1 float64 }{
		{0, 1, 0}, {math.Inf(1), 0, 0}, {math.Inf(-1), 0, math.Copysign(0, -1)}, {math.NaN(), math.NaN(), math.NaN()},
	} {
		if i0, i1 := besselI0Scaled(row.x), besselI1Scaled(row.x); !near(i0, row.i0, 0) || !near(i1, row.i1, 0) {
			t.Errorf("at %v: %v and %v, want %v and %v", row.x, i0, i1, row.i0, row.i1)
		}
	}
}

func TestBesselSymmetry(t *testing.T) {
	for _, x := range []float64{0.1, 1, 7.7, 25, 300} {
		if besselI0Scaled(-x) != besselI0Scaled(x) {
			t.Errorf("I0 is not even at %v", x)
		}
		if besselI1Scaled(-x) != -besselI1Scaled(x) {
			t.Errorf("I1 is not odd at %v", x)
		}
	}
}

// The recurrence I₀ − I₂ = 2·I₁/x (9.6.26), with I₂ from its own series, and
// the derivative I₀′ = I₁ (9.6.27) by a central difference of fourth order.
func TestBesselIdentities(t *testing.T) {
	for _, x := range []float64{0.3, 1, 3, 9, 19} {
		i2, term := 0.0, x*x/8
		for k := 1.0; term > 1e-18*i2; k++ {
			i2 += term
			term *= x * x / 4 / (k * (k + 2))
		}
		closeTo(t, "I0-I2", x, besselI0Scaled(x)-i2*math.Exp(-x), 2*besselI1Scaled(x)/x, 1e-13*math.Max(1, x))
	}
	for _, x := range []float64{0.7, 2, 11, 24.99, 25.01, 60, 350} {
		const h = 1e-3 // truncation h⁴/30, rounding x·2⁻⁵²/h
		i0 := func(y float64) float64 { return besselI0Scaled(y) * math.Exp(y-x) }
		slope := (8*(i0(x+h)-i0(x-h)) - (i0(x+2*h) - i0(x-2*h))) / (12 * h)
		closeTo(t, "I0'", x, slope, besselI1Scaled(x), 2e-12+5e-13*x)
	}
}

func BenchmarkBessel(b *testing.B) {
	for name, top := range map[string]float64{"below 10": 10, "below 25": 25, "below 700": 700} {
		b.Run(name, func(b *testing.B) {
			x, dst := make([]float64, 256), make([]float64, 256)
			for i := range x {
				x[i] = top * float64(i) / 256
			}
			for b.Loop() {
				besselI0Value(dst, x, nil, nil)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/256, "ns/value")
		})
	}
}
