package stage

import (
	"maps"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// vanishes fails unless a determinant of admittances changes its sign at f.
func vanishes(t *testing.T, what string, f float64, determinant func(float64) *mat.Dense) {
	t.Helper()
	below, above := mat.Det(determinant(f*(1-1e-9))), mat.Det(determinant(f*(1+1e-9)))
	if !(below*above < 0) {
		t.Errorf("%s: determinant goes from %g to %g about %.12g Hz", what, below, above, f)
	}
}

// The lossless tanks resonate where the determinant of their nodal matrix goes
// through zero: the clapp's nodes are the live end, the far end of series, the
// tap; the hartley's the live end and the tap of two coils with the mutual
// inductance M = k√(La·Lb), whose inverse matrix is the coils' admittance.
func TestTappedTanksAgainstNetwork(t *testing.T) {
	loads := []any{"pad", 27e-12, "sensor", 1.3e-12, "probe", 14e-12}
	g := with(examples["clapp"], loads...)
	vanishes(t, "clapp", evaluate(t, "clapp", g)["frequency"], func(f float64) *mat.Dense {
		w := 2 * math.Pi * f
		across := w*(g["pad"]+g["stray"]+g["sensor"]+g["probe"]) - 1/(w*g["coil"])
		series, upper, lower := w*(g["series"]+g["tuner"]), w*g["upper"], w*g["lower"]
		return mat.NewDense(3, 3, []float64{
			across + series, -series, 0,
			-series, series + upper, -upper,
			0, -upper, upper + lower,
		})
	})
	for _, k := range []float64{-0.4, 0, 0.3, 0.95} {
		h := with(with(examples["hartley"], loads...), "coupling", k)
		vanishes(t, "hartley", evaluate(t, "hartley", h)["frequency"], func(f float64) *mat.Dense {
			w := 2 * math.Pi * f
			a, b, m := h["coil_a"], h["coil_b"], k*math.Sqrt(h["coil_a"]*h["coil_b"])
			own, other, mutual := -b/(w*(a*b-m*m)), -a/(w*(a*b-m*m)), m/(w*(a*b-m*m))
			across := w * (h["tank"] + h["pad"] + h["tuner"] + h["stray"] + h["sensor"] + h["probe"])
			// currents through a (live end to tap) and b (tap to ground) by v1−v2 and v2
			return mat.NewDense(2, 2, []float64{
				own + across, mutual - own,
				mutual - own, own - 2*mutual + other,
			})
		})
	}
}

// Fed by 1 V at the computed frequency, the arms give a voltage in phase, and
// 1/needed_gain of it.
func TestWienBridgeAgainstNetwork(t *testing.T) {
	random := rand.New(rand.NewPCG(17, 19))
	c := newCircuit(t, "wien-bridge", 1)
	for range 100 {
		g := scattered(random, with(examples["wien-bridge"], "sensor", 5e-12))
		got := c.at(t, g)
		f := got["frequency"]
		n := newNetwork(2)
		n.drive(1, 1, conductance(g["series_r"]))
		n.join(1, 2, susceptance(f, g["series_c"]))
		n.join(2, 0, conductance(g["shunt_r"])+susceptance(f, g["shunt_c"]+g["stray"]+g["sensor"]))
		v := n.solve(t)[2]
		near(t, "phase", cmplx.Phase(v), 0, 1e-12)
		near(t, "transfer", real(v)*got["needed_gain"], 1, 1e-12)
	}
}

// Fed by 1 V at the computed frequency, the ladder gives a voltage turned half
// way round, and 1/needed_gain of it.
func TestPhaseShiftAgainstNetwork(t *testing.T) {
	random := rand.New(rand.NewPCG(23, 29))
	c := newCircuit(t, "phase-shift", 1)
	for range 100 {
		g := scattered(random, with(examples["phase-shift"], "sensor", 50e-12))
		got := c.at(t, g)
		f := got["frequency"]
		n := newNetwork(3)
		n.drive(1, 1, susceptance(f, g["c1"]))
		n.join(1, 0, conductance(g["r1"]))
		n.join(1, 2, susceptance(f, g["c2"]))
		n.join(2, 0, conductance(g["r2"]))
		n.join(2, 3, susceptance(f, g["c3"]))
		n.join(3, 0, conductance(g["r3"])+susceptance(f, g["stray"]+g["sensor"]))
		v := n.solve(t)[3]
		near(t, "phase", cmplx.Phase(-v), 0, 1e-10)
		near(t, "transfer", real(v)*got["needed_gain"], -1, 1e-10)
	}
}

// scattered multiplies every value by a factor between 1/5 and 5.
func scattered(random *rand.Rand, given map[string]float64) map[string]float64 {
	out := map[string]float64{}
	for _, name := range slices.Sorted(maps.Keys(given)) {
		out[name] = given[name] * math.Pow(5, 2*random.Float64()-1)
	}
	return out
}

// The crystal as a series circuit of Cm and its coil, with C0 across it, between
// two load capacitors: the lossless network resonates at fs·√(1 + 2p), which the
// kind's first order exceeds by p²/2.
func TestCrystalAgainstNetwork(t *testing.T) {
	g := with(examples["crystal"], "probe", 12e-12, "sensor", 1e-12)
	got := evaluate(t, "crystal", g)
	motional := g["crystal.motional_c"]
	coil := 1 / (math.Pow(2*math.Pi*got["resonance"], 2) * motional)
	exact := got["resonance"] * math.Sqrt(1+2*got["pull"])
	near(t, "first order", got["frequency"]/exact-1, got["pull"]*got["pull"]/2, 1e-3)
	// nodes: the two ends and the middle of the series circuit
	vanishes(t, "crystal", exact, func(f float64) *mat.Dense {
		w := 2 * math.Pi * f
		across := w * (g["crystal.shunt_c"] + g["stray"] + g["sensor"])
		cm, lm := w*motional, -1/(w*coil)
		return mat.NewDense(3, 3, []float64{
			across + cm + w*g["load_a"], -across, -cm,
			-across, across + lm + w*(g["load_b"]+g["tuner"]+g["probe"]), -lm,
			-cm, -lm, cm + lm,
		})
	})
}
