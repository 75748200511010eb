package stage

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// network is a circuit as nodal admittances; node 0 is ground. Built here from
// the drawing alone, it checks the linear kinds independently.
type network struct {
	y [][]complex128
	i []complex128
}

func newNetwork(nodes int) *network {
	n := &network{y: make([][]complex128, nodes+1), i: make([]complex128, nodes+1)}
	for k := range n.y {
		n.y[k] = make([]complex128, nodes+1)
	}
	return n
}

// join puts an admittance between two nodes.
func (n *network) join(a, b int, y complex128) {
	n.y[a][a] += y
	n.y[b][b] += y
	n.y[a][b] -= y
	n.y[b][a] -= y
}

// drive feeds a node from a voltage through an admittance.
func (n *network) drive(a int, volts, y complex128) {
	n.y[a][a] += y
	n.i[a] += volts * y
}

// control makes node out carry gain times (plus − minus): its row says so.
func (n *network) control(out, minus int, plus, gain complex128) {
	for k := range n.y[out] {
		n.y[out][k] = 0
	}
	n.y[out][out] = 1 / gain
	n.y[out][minus] += 1
	n.i[out] = plus
}

// solve gives every node's voltage: the complex system as a real one of twice
// the size.
func (n *network) solve(t *testing.T) []complex128 {
	t.Helper()
	size := len(n.y) - 1
	a := mat.NewDense(2*size, 2*size, nil)
	b := mat.NewVecDense(2*size, nil)
	for r := range size {
		for c := range size {
			y := n.y[r+1][c+1]
			a.Set(r, c, real(y))
			a.Set(r, c+size, -imag(y))
			a.Set(r+size, c, imag(y))
			a.Set(r+size, c+size, real(y))
		}
		b.SetVec(r, real(n.i[r+1]))
		b.SetVec(r+size, imag(n.i[r+1]))
	}
	var x mat.VecDense
	if err := x.SolveVec(a, b); err != nil {
		t.Fatal(err)
	}
	v := make([]complex128, size+1)
	for k := range size {
		v[k+1] = complex(x.AtVec(k), x.AtVec(k+size))
	}
	return v
}

func conductance(ohms float64) complex128 { return complex(1/ohms, 0) }

func susceptance(hertz, farads float64) complex128 {
	return complex(0, 2*math.Pi*hertz*farads)
}

// A lossless tank resonates where the determinant of its nodal matrix goes
// through zero.
func TestTanksAgainstNetwork(t *testing.T) {
	determinant := func(f float64, g map[string]float64) float64 {
		s := func(farads float64) float64 { return 2 * math.Pi * f * farads }
		coil := -1 / (2 * math.Pi * f * g["coil"])
		across := s(g["pad"] + g["tuner"] + g["stray"] + g["sensor"] + g["probe"])
		return mat.Det(mat.NewDense(2, 2, []float64{
			coil + across + s(g["upper"]), -s(g["upper"]),
			-s(g["upper"]), s(g["upper"]) + s(g["lower"]),
		}))
	}
	given := with(examples["colpitts"], "pad", 27e-12, "sensor", 1.3e-12, "probe", 14e-12, "lower", 470e-12)
	f := evaluate(t, "colpitts", given)["frequency"]
	below, above := determinant(f*(1-1e-9), given), determinant(f*(1+1e-9), given)
	if !(below < 0 && above > 0) {
		t.Errorf("determinant goes from %g to %g about %g Hz", below, above, f)
	}
}

func TestLowpassAgainstNetwork(t *testing.T) {
	given := with(examples["rc-lowpass"], "source", 1.2e3, "meter", 1e-7, "probe", 15e-12)
	got := evaluate(t, "rc-lowpass", given)
	transfer := func(f float64) float64 {
		n := newNetwork(2)
		n.drive(1, 1, conductance(given["in.source_resistance"]+given["source"]))
		n.join(1, 2, conductance(given["series"]))
		n.join(2, 0, susceptance(f, given["shunt"]+given["probe"]))
		n.join(2, 0, conductance(given["load"])+complex(given["meter"], 0))
		return cmplx.Abs(n.solve(t)[2])
	}
	near(t, "gain_at_carrier", got["gain_at_carrier"], transfer(given["in.frequency"]), 1e-12)
	near(t, "gain_at_tone", got["gain_at_tone"], transfer(given["in.tone_frequency"]), 1e-12)
	near(t, "level", got["level"], given["in.level"]*transfer(given["in.frequency"]), 1e-12)
	near(t, "tone_level", got["tone_level"], given["in.tone_level"]*transfer(given["in.tone_frequency"]), 1e-12)
	near(t, "second_level", got["second_level"], given["in.second_level"]*transfer(given["in.second_frequency"]), 1e-12)
	near(t, "dc", got["dc"], given["in.dc"]*transfer(0), 1e-12)
	near(t, "3 dB at the corner", transfer(got["corner"])/transfer(0), 1/math.Sqrt2, 1e-12)
}

func TestCouplingAgainstNetwork(t *testing.T) {
	transfer := func(given map[string]float64, f float64) float64 {
		n := newNetwork(2)
		n.drive(1, 1, conductance(given["in.source_resistance"]+given["source"]))
		n.join(1, 2, susceptance(f, given["capacitor"]))
		n.join(2, 0, conductance(given["load"])+complex(given["meter"], 0)+susceptance(f, given["probe"]))
		return cmplx.Abs(n.solve(t)[2])
	}
	bare := with(examples["coupling"], "source", 700)
	corner := evaluate(t, "coupling", bare)["corner"]
	near(t, "corner", corner, 1/(2*math.Pi*13.7e3*470e-9), 1e-12)
	near(t, "3 dB at the corner", transfer(bare, corner)/transfer(bare, 1e9), 1/math.Sqrt2, 1e-9)
	loaded := with(bare, "meter", 1e-7, "probe", 100e-12, "capacitor", 1e-9)
	for name, given := range map[string]map[string]float64{"bare": bare, "loaded": loaded} {
		got := evaluate(t, "coupling", given)
		near(t, name+" carrier", got["level"], given["in.level"]*transfer(given, given["in.frequency"]), 1e-12)
		near(t, name+" second", got["second_level"], given["in.second_level"]*transfer(given, given["in.second_frequency"]), 1e-12)
		near(t, name+" tone", got["tone_level"], given["in.tone_level"]*transfer(given, given["in.tone_frequency"]), 1e-12)
		near(t, name+" dc", got["dc"], 0, 0)
	}
}

func TestDividerAgainstNetwork(t *testing.T) {
	given := with(examples["divider"], "meter", 1e-7)
	n := newNetwork(1)
	n.drive(1, complex(given["input"], 0), conductance(given["upper"]))
	n.join(1, 0, conductance(given["lower"])+conductance(given["load"])+complex(given["meter"], 0))
	got := evaluate(t, "divider", given)
	near(t, "voltage", got["voltage"], real(n.solve(t)[1]), 1e-12)
	near(t, "current", got["current"], (given["input"]-got["voltage"])/given["upper"], 1e-12)
}

// The op-amp is a source of GBW/(jf) times the difference at its inputs.
func TestOpampAgainstNetwork(t *testing.T) {
	given := examples["opamp-noninverting"]
	transfer := func(f float64) float64 {
		n := newNetwork(2)
		n.join(1, 0, conductance(given["ground"]+given["gain_trim"]))
		n.join(1, 2, conductance(given["feedback"]))
		n.control(2, 1, 1, complex(0, -given["opamp.gbw"]/f))
		return cmplx.Abs(n.solve(t)[2])
	}
	got := evaluate(t, "opamp-noninverting", given)
	near(t, "gain", got["gain"], transfer(given["in.frequency"]), 1e-12)
	near(t, "second_level", got["second_level"], 0.15*transfer(given["in.second_frequency"]), 1e-12)
	near(t, "tone_level", got["tone_level"], 0.02*transfer(given["in.tone_frequency"]), 1e-12)
}

// One carrier at a time: the other's oscillator is stiff, a short to ground.
func TestJunctionDriveAgainstNetwork(t *testing.T) {
	given := with(examples["junction-mixer"], "couple_signal", 15e-12)
	got := evaluate(t, "junction-mixer", given)
	beta, thermal := given["transistor.beta"], got["thermal"]
	drive := func(f, level float64, from, other string) float64 {
		n := newNetwork(1)
		n.drive(1, complex(level, 0), susceptance(f, given[from]))
		n.join(1, 0, susceptance(f, given[other]))
		n.join(1, 0, conductance(given["base_upper"])+conductance(given["base_lower"]+given["bias"]))
		n.join(1, 0, conductance(beta*thermal/got["current"]+(beta+1)*given["emitter"]))
		return cmplx.Abs(n.solve(t)[1])
	}
	near(t, "carrier_drive", got["carrier_drive"], drive(331e3, 1, "couple_carrier", "couple_signal"), 1e-12)
	near(t, "signal_drive", got["signal_drive"], drive(330.2e3, 0.8, "couple_signal", "couple_carrier"), 1e-12)
	// x_i = v_i/(V_T·(1 + R_E·I_C/V_T))
	near(t, "carrier_x", got["carrier_x"],
		got["carrier_drive"]/(thermal*(1+given["emitter"]*got["current"]/thermal)), 1e-12)
	near(t, "signal_x", got["signal_x"],
		got["signal_drive"]/(thermal*(1+given["emitter"]*got["current"]/thermal)), 1e-12)
}

// A scope across the load: load, meter and probe in parallel.
func TestJunctionLoadAgainstNetwork(t *testing.T) {
	given := examples["junction-mixer"]
	c := newCircuit(t, "junction-mixer", 1)
	bare, held := c.at(t, given), c.at(t, with(given, "meter", 1e-7, "probe", 15e-12))
	n := newNetwork(1)
	n.join(1, 0, conductance(given["load"])+complex(1e-7, 0)+susceptance(331e3, 15e-12))
	n.i[1] = 1
	share := cmplx.Abs(n.solve(t)[1]) / given["load"]
	near(t, "carrier_level", held["carrier_level"]/bare["carrier_level"], share, 1e-12)
	n = newNetwork(1)
	n.join(1, 0, conductance(given["load"])+complex(1e-7, 0)+susceptance(330.2e3, 15e-12))
	n.i[1] = 1
	near(t, "second_level", held["second_level"]/bare["second_level"], cmplx.Abs(n.solve(t)[1])/given["load"], 1e-12)
	near(t, "tone_level", held["tone_level"]/bare["tone_level"], 1/(1+1e-7*given["load"]), 1e-12)
	near(t, "swing", held["swing"]/bare["swing"], share, 1e-12)
}

func TestMultiplierCouplingAgainstNetwork(t *testing.T) {
	given := with(examples["multiplier"], "input_resistance", 47e3)
	got := evaluate(t, "multiplier", given)
	in := func(f, level, farads float64) float64 {
		n := newNetwork(1)
		n.drive(1, complex(level, 0), susceptance(f, farads))
		n.join(1, 0, conductance(47e3))
		return cmplx.Abs(n.solve(t)[1])
	}
	near(t, "tone_level", got["tone_level"], in(331e3, 1, 10e-12)*in(330.2e3, 0.8, 12e-12)/20, 1e-12)
}
