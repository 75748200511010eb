package stage

import (
	"math"
	"math/rand/v2"
	"testing"
)

// bisect finds where a falling function of x crosses zero between two positive
// ends, by halving the logarithm until nothing is left to halve.
func bisect(low, high float64, f func(float64) float64) float64 {
	for range 200 {
		if x := math.Sqrt(low) * math.Sqrt(high); f(x) > 0 {
			low = x
		} else {
			high = x
		}
	}
	return math.Sqrt(low) * math.Sqrt(high)
}

// biasByHand solves the base loop written out from the drawing, apart from the
// kind's equations and its bracket.
func biasByHand(g map[string]float64) float64 {
	const boltzmann, charge = 1.380649e-23, 1.602176634e-19 // SI, exact
	thermal := boltzmann * g["temperature"] / charge
	foot := g["base_lower"] + g["bias"]
	open := g["negative"] + (g["positive"]-g["negative"])*foot/(g["base_upper"]+foot)
	source := g["base_upper"] * foot / (g["base_upper"] + foot)
	return bisect(1e-14, 10, func(i float64) float64 {
		base := open - i/g["transistor.beta"]*source
		vbe := g["transistor.vbe"] + g["transistor.vbe_slope"]*(g["temperature"]-298.15) + thermal*math.Log(i/1e-3)
		return base - vbe - (g["negative"] + i*(1+1/g["transistor.beta"])*g["emitter"])
	})
}

func TestJunctionBiasAgainstBisection(t *testing.T) {
	random := rand.New(rand.NewPCG(7, 11))
	c := newCircuit(t, "junction-mixer", 1)
	between := func(low, high float64) float64 { return low * math.Pow(high/low, random.Float64()) }
	for range 300 {
		g := with(examples["junction-mixer"],
			"base_upper", between(10e3, 1e6), "base_lower", between(5e3, 500e3), "bias", between(100, 50e3),
			"emitter", between(10, 10e3), "load", between(1e3, 20e3), "transistor.beta", between(40, 900),
			"transistor.vbe", between(0.55, 0.75), "temperature", between(253, 333),
			"positive", between(3, 30), "negative", -between(0.1, 30))
		want := biasByHand(g)
		if want < 2e-12 {
			continue // not driven on: the kind says 1 pA
		}
		got := c.at(t, g)
		near(t, "current", got["current"], want, 1e-9)
		collector := g["positive"] - want*g["load"]
		floor := g["negative"] + want*(1+1/g["transistor.beta"])*g["emitter"] + 0.2
		if (got["saturated"] == 1) != (collector < floor) && math.Abs(collector-floor) > 1e-6 {
			t.Errorf("saturated = %g with collector %g, floor %g", got["saturated"], collector, floor)
		}
		near(t, "collector", got["collector"], math.Max(collector, floor), 1e-7)
	}
}

func TestJunctionNotDrivenOn(t *testing.T) {
	got := evaluate(t, "junction-mixer", with(examples["junction-mixer"], "base_lower", 100, "bias", 0))
	if i := got["current"]; !(i > 0 && i < 1e-9) {
		t.Errorf("current = %g with the base at the negative rail", i)
	}
	near(t, "collector", got["collector"], 12, 1e-6)
	near(t, "saturated", got["saturated"], 0, 0)
}

// The base divider with a meter at the base and one at the collector, both to
// ground: the node's voltage satisfies Kirchhoff's current law.
func TestJunctionMeters(t *testing.T) {
	g := with(examples["junction-mixer"], "base_meter", 1e-7)
	got := evaluate(t, "junction-mixer", g)
	v := got["base_voltage"]
	sum := (12-v)/100e3 - (v+12)/44e3 - v*1e-7 - got["current"]/200
	if math.Abs(sum) > 1e-12 {
		t.Errorf("currents at the base sum to %g A", sum)
	}
	near(t, "base-emitter drop", v-got["emitter_voltage"], 0.65+got["thermal"]*math.Log(got["current"]/1e-3), 1e-9)
	g = with(examples["junction-mixer"], "meter", 1e-7)
	got = evaluate(t, "junction-mixer", g)
	v = got["collector"]
	near(t, "current into the collector", (12-v)/10e3-v*1e-7, got["current"], 1e-9)
}

func TestDetectorAgainstBisection(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 5))
	c := newCircuit(t, "envelope-detector", 1)
	conducting := 0
	for range 300 {
		g := with(examples["envelope-detector"], "in.level", 0.02+5*random.Float64(), "in.second_level", 0,
			"diode.drop", 0.2+0.5*random.Float64(), "diode.ideality", 1+random.Float64(),
			"load", 1e3*math.Pow(1000, random.Float64()), "temperature", 260+60*random.Float64(), "meter", 1e-7)
		resistance := 1 / (1/g["load"] + 1e-7)
		drop := func(volts float64) float64 {
			n := g["diode.ideality"] * 1.380649e-23 * g["temperature"] / 1.602176634e-19
			return g["diode.drop"] - 0.002*(g["temperature"]-298.15) + n*math.Log(volts/resistance/1e-3)
		}
		got := c.at(t, g)
		if drop(g["in.level"]) <= 0 || drop(g["in.level"]) >= g["in.level"] {
			near(t, "dc below the threshold", got["dc"], 0, 0)
			near(t, "conducts", got["conducts"], 0, 0)
			continue
		}
		conducting++
		want := bisect(1e-15, g["in.level"], func(v float64) float64 { return g["in.level"] - drop(v) - v })
		near(t, "dc", got["dc"], want, 1e-9)
		near(t, "conducts", got["conducts"], 1, 0)
	}
	if conducting < 100 {
		t.Errorf("only %d of 300 conducted", conducting)
	}
}
