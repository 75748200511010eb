package stage

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// checkFilter holds every level and the steady voltage that a filter hands on
// against the transfer of its drawing.
func checkFilter(t *testing.T, kind string, given map[string]float64, transfer func(f float64) complex128) {
	t.Helper()
	got := evaluate(t, kind, given)
	gain := func(f float64) float64 { return cmplx.Abs(transfer(f)) }
	near(t, "gain_at_carrier", got["gain_at_carrier"], gain(given["in.frequency"]), 1e-10)
	near(t, "gain_at_tone", got["gain_at_tone"], gain(given["in.tone_frequency"]), 1e-10)
	near(t, "level", got["level"], given["in.level"]*gain(given["in.frequency"]), 1e-10)
	near(t, "second_level", got["second_level"], given["in.second_level"]*gain(given["in.second_frequency"]), 1e-10)
	near(t, "tone_level", got["tone_level"], given["in.tone_level"]*gain(given["in.tone_frequency"]), 1e-10)
	near(t, "dc", got["dc"], given["in.dc"]*gain(1e-6), 1e-9)
}

// coilAdmittance is that of a coil without losses.
func coilAdmittance(hertz, henries float64) complex128 {
	return complex(0, -1/(2*math.Pi*hertz*henries))
}

func TestHighpassAgainstNetwork(t *testing.T) {
	bare := with(examples["rc-highpass"], "source", 700)
	for name, given := range map[string]map[string]float64{
		"bare":    bare,
		"no load": with(bare, "load", 0),
		"loaded":  with(bare, "meter", 1e-7, "probe", 100e-12, "series", 1e-9),
	} {
		t.Run(name, func(t *testing.T) {
			transfer := func(f float64) complex128 {
				n := newNetwork(2)
				n.drive(1, 1, conductance(given["in.source_resistance"]+given["source"]))
				n.join(1, 2, susceptance(f, given["series"]))
				n.join(2, 0, conductance(given["shunt"])+complex(given["meter"], 0)+susceptance(f, given["probe"]))
				if given["load"] > 0 {
					n.join(2, 0, conductance(given["load"]))
				}
				return n.solve(t)[2]
			}
			checkFilter(t, "rc-highpass", with(given, "in.dc", 0), transfer)
			near(t, "dc", evaluate(t, "rc-highpass", given)["dc"], 0, 0)
			if given["probe"] == 0 {
				corner := evaluate(t, "rc-highpass", given)["corner"]
				near(t, "3 dB at the corner", cmplx.Abs(transfer(corner))/cmplx.Abs(transfer(1e12)), 1/math.Sqrt2, 1e-9)
			}
		})
	}
}

// 10 kΩ and 10 nF by definition: 1591.549431 Hz, and the mirror image of the
// low-pass: 20·log10(√101) dB down at a tenth of the corner.
func TestHighpassExample(t *testing.T) {
	given := map[string]float64{"series": 10e-9, "shunt": 10e3, "in.tone_frequency": 159.1549431, "in.frequency": 1591.549431}
	got := evaluate(t, "rc-highpass", given)
	near(t, "corner", got["corner"], 1591.549431, 1e-9)
	near(t, "gain at a tenth of the corner in dB", 20*math.Log10(got["gain_at_tone"]), -20.04321374, 1e-9)
	near(t, "gain at the corner", got["gain_at_carrier"], 1/math.Sqrt2, 1e-9)
}

// A resistor across nothing else is a load, so the high-pass is a coupling.
func TestHighpassIsACoupling(t *testing.T) {
	given := with(examples["coupling"], "probe", 15e-12, "meter", 1e-7)
	delete(given, "capacitor")
	coupled := evaluate(t, "coupling", with(given, "capacitor", 470e-9))
	delete(given, "load")
	passed := evaluate(t, "rc-highpass", with(given, "series", 470e-9, "shunt", 10e3))
	for _, name := range []string{"corner", "level", "second_level", "tone_level", "source_resistance", "dc"} {
		near(t, name, passed[name], coupled[name], 1e-15)
	}
}

// The buffer's output is the voltage at its input, on a node of its own.
func TestSallenKeyAgainstNetwork(t *testing.T) {
	random := rand.New(rand.NewPCG(13, 17))
	between := func(low, high float64) float64 { return low * math.Pow(high/low, random.Float64()) }
	for range 50 {
		given := with(examples["sallen-key-lowpass"], "r1", between(1e3, 100e3), "r2", between(1e3, 100e3),
			"c1", between(100e-12, 100e-9), "c2", between(100e-12, 100e-9), "source", between(1, 1e3))
		transfer := func(f float64) complex128 {
			n := newNetwork(3)
			n.drive(1, 1, conductance(given["r1"]+given["source"]+given["in.source_resistance"]))
			n.join(1, 2, conductance(given["r2"]))
			n.join(2, 0, susceptance(f, given["c2"]))
			n.join(1, 3, susceptance(f, given["c1"]))
			n.y[3] = []complex128{0, 0, -1, 1} // v3 − v2 = 0, whatever current that takes
			return n.solve(t)[3]
		}
		checkFilter(t, "sallen-key-lowpass", given, transfer)
		got := evaluate(t, "sallen-key-lowpass", given)
		near(t, "3 dB at the corner", cmplx.Abs(transfer(got["corner"])), 1/math.Sqrt2, 1e-9)
		near(t, "q, the gain at f0", cmplx.Abs(transfer(got["f0"])), got["q"], 1e-9)
		near(t, "quarter turn at f0", cmplx.Phase(transfer(got["f0"])), -math.Pi/2, 1e-9)
	}
}

// Equal resistors and c1 twice c2: Q is 1/√2, the corner f0 = 1/(2π·√2·R·c2).
// Equal parts: Q ½, both poles at 1/RC, where √(√2 − 1) of it is 3 dB down.
func TestSallenKeyLimits(t *testing.T) {
	flat := evaluate(t, "sallen-key-lowpass", map[string]float64{"r1": 10e3, "r2": 10e3, "c1": 20e-9, "c2": 10e-9})
	near(t, "q", flat["q"], math.Sqrt2/2, 1e-14)
	near(t, "f0", flat["f0"], 1591.549431/math.Sqrt2, 1e-9)
	near(t, "corner", flat["corner"], flat["f0"], 1e-14)
	equal := evaluate(t, "sallen-key-lowpass", map[string]float64{"r1": 10e3, "r2": 10e3, "c1": 10e-9, "c2": 10e-9})
	near(t, "q of equal parts", equal["q"], 0.5, 1e-15)
	near(t, "corner of equal parts", equal["corner"], 1591.549431*math.Sqrt(math.Sqrt2-1), 1e-9)
	// c1 small: r1 + r2 and c2 alone, with no digits lost.
	slow := evaluate(t, "sallen-key-lowpass", map[string]float64{"r1": 5e3, "r2": 5e3, "c1": 1e-18, "c2": 10e-9})
	near(t, "corner without c1", slow["corner"], 1591.549431, 1e-7)
	// r1 and what stands ahead of it are one resistor.
	split := map[string]float64{"r1": 6e3, "source": 3e3, "in.source_resistance": 1e3, "r2": 10e3, "c1": 20e-9, "c2": 10e-9}
	near(t, "corner with a source", evaluate(t, "sallen-key-lowpass", split)["corner"], flat["corner"], 1e-14)
}

func TestLCLowpassAgainstNetwork(t *testing.T) {
	random := rand.New(rand.NewPCG(19, 23))
	between := func(low, high float64) float64 { return low * math.Pow(high/low, random.Float64()) }
	for range 50 {
		given := with(examples["lc-lowpass"], "coil", between(1e-4, 1e-1), "shunt", between(1e-10, 1e-7),
			"load", between(100, 100e3), "source", between(1, 1e4), "meter", 1e-7, "probe", 15e-12)
		transfer := func(f float64) complex128 {
			n := newNetwork(2)
			n.drive(1, 1, conductance(given["source"]+given["in.source_resistance"]))
			n.join(1, 2, coilAdmittance(f, given["coil"]))
			n.join(2, 0, susceptance(f, given["shunt"]+given["probe"]))
			n.join(2, 0, conductance(given["load"])+complex(given["meter"], 0))
			return n.solve(t)[2]
		}
		checkFilter(t, "lc-lowpass", given, transfer)
		got := evaluate(t, "lc-lowpass", given)
		near(t, "3 dB at the corner", cmplx.Abs(transfer(got["corner"]))/cmplx.Abs(transfer(1e-3)), 1/math.Sqrt2, 1e-8)
		near(t, "quarter turn at f0", cmplx.Phase(transfer(got["f0"])), -math.Pi/2, 1e-8)
		near(t, "q, the gain at f0", cmplx.Abs(transfer(got["f0"]))/cmplx.Abs(transfer(1e-3)), got["q"], 1e-8)
	}
}

// R. Blake, Electronic Communication Systems, Ex. 2.1, p. 50 (archive): 25 µH
// and 50 pF, 4501581.581 Hz; a load of √(L/C)/√2 makes it the flattest, a
// light one leaves Q = R·√(C/L).
func TestLCLowpassExample(t *testing.T) {
	given := map[string]float64{"coil": 25e-6, "shunt": 50e-12, "load": math.Sqrt(25e-6/50e-12) / math.Sqrt2}
	got := evaluate(t, "lc-lowpass", given)
	near(t, "f0", got["f0"], 4501581.581, 1e-9)
	near(t, "q", got["q"], 1/math.Sqrt2, 1e-14)
	near(t, "corner", got["corner"], 4501581.581, 1e-9)
	near(t, "q of a light load", evaluate(t, "lc-lowpass", with(given, "load", 1e6))["q"], 1e6*math.Sqrt(50e-12/25e-6), 1e-12)
	near(t, "dc", evaluate(t, "lc-lowpass", with(given, "in.dc", 3, "load", 200, "source", 100))["dc"], 2, 1e-15)
}

func TestLevelTankAgainstNetwork(t *testing.T) {
	for name, given := range map[string]map[string]float64{
		"plain":  with(examples["level-tank"], "load", 0),
		"loaded": with(examples["level-tank"], "sensor", 1.5e-12, "meter", 1e-7, "probe", 15e-12),
	} {
		t.Run(name, func(t *testing.T) {
			tank := func(f float64) complex128 {
				y := coilAdmittance(f, given["coil"]) + complex(given["meter"], 0) +
					susceptance(f, given["tank"]+given["tuner"]+given["stray"]+given["sensor"]+given["probe"])
				if given["load"] > 0 {
					y += conductance(given["load"])
				}
				return y
			}
			fed := given["damping"] + given["in.source_resistance"]
			transfer := func(f float64) complex128 {
				n := newNetwork(1)
				n.drive(1, 1, conductance(fed))
				n.join(1, 0, tank(f))
				return n.solve(t)[1]
			}
			checkFilter(t, "level-tank", with(given, "in.dc", 0), transfer)
			got := evaluate(t, "level-tank", given)
			near(t, "dc", got["dc"], 0, 0)
			near(t, "no turn at f0", cmplx.Phase(transfer(got["f0"])), 0, 1e-9)
			n := newNetwork(1) // what 1 A into the tank raises
			n.join(1, 0, conductance(fed))
			n.join(1, 0, tank(given["in.frequency"]))
			n.i[1] = 1
			near(t, "source_resistance", got["source_resistance"], cmplx.Abs(n.solve(t)[1]), 1e-12)
		})
	}
}

// R. Blake, Electronic Communication Systems, Ex. 2.1, p. 50 (archive): 25 µH,
// 50 pF and a Q of 15 resonate at 4501581.581 Hz, 300105.4387 Hz wide. The
// width lies between the two frequencies f0·(√(1 + 1/4Q²) ± 1/2Q) where half
// the power is left.
func TestLevelTankExample(t *testing.T) {
	given := map[string]float64{"coil": 25e-6, "tank": 50e-12, "damping": 15 * math.Sqrt(25e-6/50e-12), "in.level": 2}
	root := math.Sqrt(1 + 1.0/900)
	high, low := 4501581.581*(root+1.0/30), 4501581.581*(root-1.0/30)
	near(t, "width", high-low, 300105.4387, 1e-9)
	got := evaluate(t, "level-tank", with(given, "in.frequency", high))
	near(t, "f0", got["f0"], 4501581.581, 1e-9)
	near(t, "q", got["q"], 15, 1e-14)
	near(t, "level above", got["level"], math.Sqrt2, 1e-9)
	near(t, "level below", evaluate(t, "level-tank", with(given, "in.frequency", low))["level"], math.Sqrt2, 1e-9)
	near(t, "level at resonance", evaluate(t, "level-tank", with(given, "in.frequency", got["f0"]))["level"], 2, 1e-15)
	// 1/√(1 + Q²(f/f0 − f0/f)²) at an octave: 1/√(1 + 15²·1.5²)
	octave := evaluate(t, "level-tank", with(given, "in.frequency", 2*got["f0"]))
	near(t, "gain an octave up", octave["gain_at_carrier"], 1/math.Sqrt(1+225*2.25), 1e-13)
	near(t, "level at 0 Hz", evaluate(t, "level-tank", given)["level"], 0, 0)
	// A load as large as what feeds it halves the level at resonance, and the Q.
	halved := evaluate(t, "level-tank", with(given, "load", given["damping"], "in.frequency", got["f0"]))
	near(t, "level into a load", halved["level"], 1, 1e-14)
	near(t, "q into a load", halved["q"], 7.5, 1e-14)
}
