package stage

import (
	"maps"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// Circuits of plausible values (invented), each in its working range.
func init() {
	incoming := map[string]float64{"in.level": 0.02, "in.frequency": 331e3, "in.second_level": 0.015,
		"in.second_frequency": 330e3, "in.tone_level": 0.01, "in.tone_frequency": 1e3, "in.tank_q": 70}
	add := func(kind string, changes map[string]float64) {
		examples[kind] = maps.Clone(incoming)
		maps.Copy(examples[kind], changes)
	}
	add("opamp-inverting", map[string]float64{"feedback": 47e3, "input": 10e3, "gain_trim": 3e3, "in.source_resistance": 1.2e3,
		"opamp.gbw": 3e6, "opamp.slew": 13e6, "opamp.offset": 1e-3, "opamp.headroom": 1.5,
		"positive": 12, "negative": -12, "in.dc": 0.05})
	add("common-emitter", map[string]float64{"base_upper": 47e3, "base_lower": 10e3, "emitter": 1e3, "bypass": 10e-9, "load": 4.7e3,
		"couple": 22e-9, "transistor.beta": 200, "transistor.vbe": 0.65, "transistor.vbe_slope": -0.002,
		"positive": 12, "in.source_resistance": 3e3, "in.level": 0.005, "in.second_level": 0.004})
	add("emitter-follower", map[string]float64{"base_upper": 100e3, "base_lower": 150e3, "emitter": 4.7e3, "couple": 2.2e-9,
		"transistor.beta": 200, "transistor.vbe": 0.65, "transistor.vbe_slope": -0.002,
		"positive": 12, "negative": -0.3, "in.source_resistance": 10e3})
	add("power-amp", map[string]float64{"gain_a": 10e3, "gain_b": 470, "output_c": 470e-6, "supply": 12, "headroom": 1.2,
		"in.level": 0.001, "in.second_level": 0.001, "in.tone_level": 0.1, "in.tone_frequency": 60})
}

// The network of an NPN transistor for small levels: node 1 the input behind
// the source, 2 the base, 3 the emitter, 4 the collector, of which the
// current β·i_b is a conductance with a direction.
func transistorNetwork(g map[string]float64, current, f float64) *network {
	thermal := 1.380649e-23 * g["temperature"] / 1.602176634e-19 // SI, exact
	transfer := current / thermal
	n := newNetwork(4)
	n.drive(1, 1, conductance(g["in.source_resistance"]))
	n.join(1, 2, susceptance(f, g["couple"]))
	n.join(2, 0, conductance(g["base_upper"])+conductance(g["base_lower"])+complex(g["base_meter"], 0))
	n.join(2, 3, complex(transfer/g["transistor.beta"], 0))
	n.join(3, 0, conductance(g["emitter"]))
	for node, sign := range map[int]float64{3: -1, 4: 1} {
		n.y[node][2] += complex(sign*transfer, 0)
		n.y[node][3] -= complex(sign*transfer, 0)
	}
	return n
}

func TestCommonEmitterAgainstNetwork(t *testing.T) {
	full := with(examples["common-emitter"], "temperature", 303.15)
	bare := with(full)
	delete(bare, "bypass")
	for name, given := range map[string]map[string]float64{"bypass": full, "no bypass": bare,
		"scope": with(full, "meter", 1e-7, "probe", 15e-12), "small couple": with(full, "couple", 30e-12),
		"meter at the base": with(full, "base_meter", 1e-5)} {
		got := evaluate(t, "common-emitter", given)
		gain := func(f float64) float64 {
			n := transistorNetwork(given, got["current"], f)
			n.join(3, 0, susceptance(f, given["bypass"]))
			n.join(4, 0, conductance(given["load"])+complex(given["meter"], 0)+susceptance(f, given["probe"]))
			return cmplx.Abs(n.solve(t)[4])
		}
		near(t, name+": gain", got["gain"], gain(331e3), 1e-11)
		near(t, name+": gain_at_tone", got["gain_at_tone"], gain(1e3), 1e-11)
		near(t, name+": output_level", got["output_level"], 0.005*gain(331e3), 1e-11)
		near(t, name+": second_level", got["second_level"], 0.004*gain(330e3), 1e-11)
		near(t, name+": tone_level", got["tone_level"], 0.01*gain(1e3), 1e-11)
	}
}

func TestEmitterFollowerAgainstNetwork(t *testing.T) {
	plain := with(examples["emitter-follower"], "temperature", 288.15)
	for name, given := range map[string]map[string]float64{"plain": plain,
		"scope": with(plain, "meter", 1e-7, "probe", 15e-12)} {
		got := evaluate(t, "emitter-follower", given)
		gain := func(f float64) float64 {
			n := transistorNetwork(given, got["current"], f)
			n.join(3, 0, complex(given["meter"], 0)+susceptance(f, given["probe"]))
			n.join(4, 0, 1e3) // the positive rail
			return cmplx.Abs(n.solve(t)[3])
		}
		near(t, name+": gain", got["gain"], gain(331e3), 1e-11)
		near(t, name+": second_level", got["second_level"], 0.015*gain(330e3), 1e-11)
		near(t, name+": gain_at_tone", got["gain_at_tone"], gain(1e3), 1e-11)
	}
}

// The output resistance is the voltage that 1 A into the emitter makes, with
// the input at rest and the coupling capacitor as good as a short.
func TestEmitterFollowerOutputResistance(t *testing.T) {
	given := with(examples["emitter-follower"], "couple", 1, "temperature", 298.15)
	got := evaluate(t, "emitter-follower", given)
	n := transistorNetwork(given, got["current"], 1e6)
	n.i[1], n.i[3] = 0, 1
	n.join(4, 0, 1e3)
	near(t, "output_resistance", got["output_resistance"], cmplx.Abs(n.solve(t)[3]), 1e-9)
	near(t, "source_resistance", got["source_resistance"], got["output_resistance"], 0)
	stiff := evaluate(t, "emitter-follower", with(given, "in.source_resistance", 0))
	re := stiff["thermal"] / stiff["current"]
	near(t, "stiff source", stiff["output_resistance"], 1/(1/4.7e3+201/(200*re)), 1e-12)
}

// A voltage across the input makes a current through the capacitor: seen far
// above both corners, the input resistance; at the input corner 3 dB less.
func TestTransistorInputAgainstNetwork(t *testing.T) {
	for _, kind := range []string{"common-emitter", "emitter-follower"} {
		given := with(examples[kind], "bypass", 1, "couple", 1e-6, "temperature", 298.15)
		if kind == "emitter-follower" {
			delete(given, "bypass")
		}
		got := evaluate(t, kind, given)
		into := func(f float64) float64 {
			n := transistorNetwork(given, got["current"], f)
			n.join(3, 0, susceptance(f, given["bypass"]))
			n.join(4, 0, 1e3)
			v := n.solve(t)
			return cmplx.Abs((1 - v[1]) / complex(given["in.source_resistance"], 0))
		}
		near(t, kind+" input_resistance", got["input_resistance"], 1/into(1e7)-given["in.source_resistance"], 1e-5)
		near(t, kind+" input_corner", into(got["input_corner"])/into(1e7), 1/math.Sqrt2, 1e-3)
	}
}

// With the coupling capacitor as good as a short, the bypass's own response
// is (1 + jx)/(1 + jf/corner) times the gain without it.
func TestBypassCorner(t *testing.T) {
	given := with(examples["common-emitter"], "couple", 1)
	got := evaluate(t, "common-emitter", given)
	corner := got["bypass_corner"]
	at := func(f float64) float64 {
		return evaluate(t, "common-emitter", with(given, "in.frequency", f))["gain"]
	}
	zero := 1 / (2 * math.Pi * 1e3 * 10e-9)
	without := evaluate(t, "common-emitter", with(given, "bypass", 0))["gain"]
	for _, f := range []float64{100, 5e3, corner, 3e5, 1e7} {
		want := without * math.Hypot(1, f/zero) / math.Hypot(1, f/corner)
		near(t, "gain", at(f), want, 1e-6)
	}
	delete(given, "bypass")
	near(t, "no bypass", evaluate(t, "common-emitter", given)["bypass_corner"], 0, 0)
}

// Far above the corners: −load·β/(r_π + (β+1)·R_E) without a bypass, −load/(V_T/I) with
// one, nothing at 0 Hz; a follower's 1 − r_e/R_E.
func TestTransistorGainLimits(t *testing.T) {
	given := with(examples["common-emitter"], "couple", 1, "in.source_resistance", 0)
	full := evaluate(t, "common-emitter", with(given, "bypass", 1))
	near(t, "bypassed", full["gain"], 4.7e3*full["current"]/full["thermal"], 1e-9)
	delete(given, "bypass")
	bare := evaluate(t, "common-emitter", given)
	near(t, "no bypass", bare["gain"], 4.7e3/1e3, 0.03) // r_e about 20 Ω, 1/β
	near(t, "no bypass, exactly", bare["gain"], 200*4.7e3/(200*bare["thermal"]/bare["current"]+201*1e3), 1e-9)
	silent := evaluate(t, "common-emitter", with(given, "in.frequency", 0, "couple", 1e-6))
	near(t, "0 Hz", silent["gain"], 0, 0)
	follower := evaluate(t, "emitter-follower", with(examples["emitter-follower"], "couple", 1, "in.source_resistance", 0))
	near(t, "follower", follower["gain"], 1/(1+follower["thermal"]/follower["current"]/4.7e3*200/201), 1e-9)
}

func TestAmplifierBiasAgainstBisection(t *testing.T) {
	random := rand.New(rand.NewPCG(13, 17))
	between := func(low, high float64) float64 { return low * math.Pow(high/low, random.Float64()) }
	for _, kind := range []string{"common-emitter", "emitter-follower"} {
		c := newCircuit(t, kind, 1)
		compared := 0
		for range 200 {
			g := with(examples[kind],
				"base_upper", between(10e3, 1e6), "base_lower", between(5e3, 500e3), "emitter", between(10, 10e3),
				"transistor.beta", between(40, 900), "transistor.vbe", between(0.55, 0.75), "temperature", between(253, 333),
				"positive", between(3, 30), "negative", -between(0.1, 30))
			want := biasByHand(g)
			if want < 2e-12 {
				continue
			}
			compared++
			got := c.at(t, g)
			near(t, kind+" current", got["current"], want, 1e-9)
			emitter := g["negative"] + want*(1+1/g["transistor.beta"])*g["emitter"]
			near(t, kind+" emitter_voltage", got["emitter_voltage"]-g["negative"], emitter-g["negative"], 1e-9)
			if kind == "common-emitter" {
				collector := math.Max(g["positive"]-want*g["load"], emitter+0.2)
				near(t, "collector", got["dc"], collector, 1e-7)
			} else {
				near(t, "dc", got["dc"], got["emitter_voltage"], 0)
			}
		}
		if compared < 100 {
			t.Errorf("%s: only %d of 200 conduct", kind, compared)
		}
	}
}

// R. L. Boylestad and L. Nashelsky, Electronic Devices and Circuit Theory
// (inputs and results from memory): an emitter follower with a base resistor of
// 220 kΩ to 12 V, 3.3 kΩ, β 100: r_e = 12.61 Ω, Z_o = 12.56 Ω, A_v = 0.996. A
// voltage divider of 56 kΩ and 8.2 kΩ at 22 V, 6.8 kΩ, 1.5 kΩ bypassed, β 90:
// r_e = 18.44 Ω, A_v = −368.76. The book takes 0.7 V, 26 mV, and in the second
// no base current; here 0.7 V at its current and V_T = 26 mV come by choice of
// vbe and temperature.
func TestTransistorExamples(t *testing.T) {
	warm := 0.026 * 1.602176634e-19 / 1.380649e-23 // kT/q = 26 mV
	common := map[string]float64{"temperature": warm, "transistor.vbe_slope": 0, "in.frequency": 1e5, "couple": 1}
	follower := with(common, "base_upper", 220e3, "base_lower", 1e15, "emitter", 3.3e3, "transistor.beta", 100,
		"transistor.vbe", 0.7-0.026*math.Log(2.042), "positive", 12)
	got := evaluate(t, "emitter-follower", follower)
	near(t, "r_e", 0.026/(got["current"]*1.01), 12.61, 1e-3)
	near(t, "Z_o", got["output_resistance"], 12.56, 1e-3)
	near(t, "A_v", got["gain"], 0.996, 1e-3)
	divider := with(common, "base_upper", 56e3, "base_lower", 8.2e3, "load", 6.8e3, "emitter", 1.5e3, "bypass", 1,
		"transistor.beta", 90, "transistor.vbe", 0.7-0.026*math.Log(1.41), "positive", 22)
	// Base current: 7.15 kΩ/90 beside 1.5 kΩ takes 5 % of the current; I_C is I_E/(1 + 1/90).
	got = evaluate(t, "common-emitter", divider)
	source := 56e3 * 8.2e3 / (56e3 + 8.2e3)
	exact := (22*8.2/64.2 - 0.7) / (source/90 + 1.5e3*91/90)
	near(t, "current", got["current"], exact, 1e-3)
	near(t, "A_v", got["gain"], 6.8e3*exact/0.026, 1e-3)
	near(t, "A_v of the book", got["gain"], 368.76, 0.07)
}

func TestCommonEmitterSaturates(t *testing.T) {
	got := evaluate(t, "common-emitter", with(examples["common-emitter"], "load", 33e3))
	near(t, "saturated", got["saturated"], 1, 0)
	near(t, "collector", got["collector"], got["emitter_voltage"]+0.2, 1e-12)
	near(t, "swing", got["swing"], 0, 0)
	near(t, "clips is not said twice", got["clips"], 0, 0)
}

// The nearer end decides: with 2 kΩ the collector is nearer the rail, and can go up by
// I·load; with 7 kΩ nearer the emitter. All levels shrink alike.
func TestTransistorStagesClip(t *testing.T) {
	loud := with(examples["common-emitter"], "in.level", 10, "in.second_level", 8, "in.tone_level", 6)
	up := evaluate(t, "common-emitter", with(loud, "load", 2e3))
	near(t, "to cut-off", up["swing"], up["current"]*2e3, 1e-12)
	down := evaluate(t, "common-emitter", with(loud, "load", 7e3))
	near(t, "to the emitter", down["swing"], down["collector"]-down["emitter_voltage"]-0.2, 1e-12)
	near(t, "sum", down["level"]+down["second_level"]+down["tone_level"], down["swing"], 1e-12)
	quiet := evaluate(t, "common-emitter", with(loud, "load", 7e3, "in.level", 0.0010, "in.second_level", 0.0008, "in.tone_level", 0.0006))
	near(t, "ratio kept", down["second_level"]/down["level"], quiet["second_level"]/quiet["level"], 1e-12)
	follower := with(examples["emitter-follower"], "in.level", 20)
	low := evaluate(t, "emitter-follower", with(follower, "base_lower", 50e3))
	near(t, "follower, down", low["swing"], low["emitter_voltage"]+0.3, 1e-12)
	high := evaluate(t, "emitter-follower", with(follower, "base_lower", 300e3))
	near(t, "follower, up", high["swing"], 12-0.2-high["emitter_voltage"], 1e-12)
	for name, got := range map[string]map[string]float64{"up": up, "down": down, "low": low, "high": high} {
		near(t, name+" clips", got["clips"], 1, 0)
	}
	near(t, "quiet", quiet["clips"], 0, 0)
}

// The op-amp is a source of GBW/(jf) times the difference at its inputs.
func TestInvertingOpampAgainstNetwork(t *testing.T) {
	given := examples["opamp-inverting"]
	got := evaluate(t, "opamp-inverting", given)
	transfer := func(f float64) float64 {
		n := newNetwork(2)
		n.drive(1, 1, conductance(given["input"]+given["in.source_resistance"]))
		n.join(1, 2, conductance(given["feedback"]+given["gain_trim"]))
		n.control(2, 1, 0, complex(0, -given["opamp.gbw"]/f))
		return cmplx.Abs(n.solve(t)[2])
	}
	near(t, "gain", got["gain"], transfer(331e3), 1e-12)
	near(t, "second_level", got["second_level"], 0.015*transfer(330e3), 1e-12)
	near(t, "tone_level", got["tone_level"], 0.01*transfer(1e3), 1e-12)
}

// 100 kΩ and 4.7 kΩ as in T. L. Floyd, Electronic Devices, Ex. 12.3: inverting,
// the gain is 100/4.7 = 21.27659574, the noise gain 22.27659574 and so the bandwidth of
// 3 MHz again 134670.4871 Hz. Full-power bandwidth: S. Sharma, Integrated
// Circuits, Ex. 2.18; M. S. Sivakumar, Linear Integrated Circuit, Ex. 5.31.
// (Inputs read in an open archive of textbook examples.)
func TestInvertingOpampExamples(t *testing.T) {
	given := map[string]float64{"feedback": 100e3, "input": 4.7e3, "opamp.gbw": 3e6, "opamp.slew": 1e9,
		"opamp.headroom": 1, "opamp.offset": 0, "positive": 12, "negative": -12, "in.level": 0.01}
	near(t, "gain at 0 Hz", evaluate(t, "opamp-inverting", given)["gain"], 21.27659574, 1e-9)
	got := evaluate(t, "opamp-inverting", with(given, "in.frequency", 134670.4871))
	near(t, "gain at the bandwidth", got["gain"], 21.27659574/math.Sqrt2, 1e-9)
	offset := evaluate(t, "opamp-inverting", with(given, "opamp.offset", 2e-3, "in.dc", 0.1))
	near(t, "dc", offset["dc"], 2e-3*22.27659574-0.1*21.27659574, 1e-9)
	trimmed := evaluate(t, "opamp-inverting", with(given, "feedback", 60e3, "gain_trim", 40e3, "input", 4e3, "in.source_resistance", 700))
	near(t, "trimmer and source", trimmed["gain"], 21.27659574, 1e-9)
	first := evaluate(t, "opamp-inverting", with(given, "opamp.slew", 303030.303, "in.frequency", 4019.064219))
	near(t, "12 V", first["slew_limit_level"], 12, 1e-9)
	second := evaluate(t, "opamp-inverting", with(given, "opamp.slew", 510e3, "in.frequency", 8116.902098))
	near(t, "10 V", second["slew_limit_level"], 10, 1e-9)
}

// Rails, slew rate, and neither; a single supply leaves nothing below 0 V.
func TestInvertingOpampLimits(t *testing.T) {
	base := with(examples["opamp-inverting"], "in.second_level", 0, "in.tone_level", 0, "in.dc", 0, "opamp.offset", 0)
	gain := evaluate(t, "opamp-inverting", base)["gain"]
	tests := map[string]struct {
		given               map[string]float64
		level, clips, slews float64
	}{
		"free":          {base, 0.02 * gain, 0, 0},
		"slew":          {with(base, "opamp.slew", 1e4), 1e4 / (2 * math.Pi * 331e3), 0, 1},
		"no slew limit": {with(base, "opamp.slew", 1e15, "in.level", 2), 2 * gain, 0, 0},
		"rails":         {with(base, "in.level", 20, "opamp.slew", 1e9), 10.5, 1, 0},
		"single supply": {with(base, "negative", 0), 0, 1, 0},
		"off the top":   {with(base, "in.dc", -4), 0, 1, 0},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			got := evaluate(t, "opamp-inverting", tt.given)
			near(t, "output_level", got["output_level"], tt.level, 1e-12)
			near(t, "clips", got["clips"], tt.clips, 0)
			near(t, "slews", got["slews"], tt.slews, 0)
		})
	}
	near(t, "dc at the top", evaluate(t, "opamp-inverting", with(base, "in.dc", -4))["dc"], 10.5, 1e-12)
}

// R. L. Boylestad and L. Nashelsky, Electronic Devices and Circuit Theory,
// Ex. 12.8: 30 V either way into 16 Ω, here 60 V on one supply: 28.125 W.
// An open archive of textbook examples, "Special Purpose Amplifiers", Ex. 10.3:
// 10 W into 8 Ω is a peak of √(2·10·8) V, and with a gain of 50 asks for √80/50 V rms.
func TestPowerAmpExamples(t *testing.T) {
	given := map[string]float64{"gain_a": 49e3, "gain_b": 1e3, "output_c": 1, "supply": 60, "speaker": 16}
	near(t, "clip_power", evaluate(t, "power-amp", given)["clip_power"], 28.125, 1e-12)
	got := evaluate(t, "power-amp", with(given, "supply", 30, "speaker", 8,
		"in.tone_level", math.Sqrt(80)/50*math.Sqrt2, "in.tone_frequency", 1e3))
	near(t, "gain", got["gain"], 50, 1e-12)
	near(t, "tone_level", got["tone_level"], 12.649110640673518, 1e-7)
	near(t, "tone_power", got["tone_power"], 10, 1e-7)
	near(t, "clip_level", got["clip_level"], 15, 0)
	near(t, "clips", got["clips"], 0, 0)
	loud := evaluate(t, "power-amp", with(given, "supply", 30, "headroom", 1, "in.tone_level", 1, "in.tone_frequency", 1e3))
	near(t, "swing", loud["swing"], 14, 1e-12)
	near(t, "tone_power at clipping", loud["tone_power"], loud["clip_power"], 1e-7)
	near(t, "clips", loud["clips"], 1, 0)
	three := evaluate(t, "power-amp", with(given, "in.level", 1, "in.second_level", 0.5, "in.tone_level", 2,
		"in.frequency", 1e6, "in.second_frequency", 1e6, "in.tone_frequency", 1e6))
	near(t, "three that together reach the supply", three["level"]+three["second_level"]+three["tone_level"], 30, 1e-9)
	near(t, "alike", three["second_level"], 30*0.5/3.5, 1e-9)
}

// Capacitor and speaker, driven stiffly.
func TestPowerAmpAgainstNetwork(t *testing.T) {
	given := examples["power-amp"]
	got := evaluate(t, "power-amp", given)
	pass := func(f float64) float64 {
		n := newNetwork(1)
		n.drive(1, 1, susceptance(f, given["output_c"]))
		n.join(1, 0, conductance(8))
		return cmplx.Abs(n.solve(t)[1])
	}
	gain := 1 + 10e3/470
	near(t, "tone_level", got["tone_level"], 0.1*gain*pass(60), 1e-12)
	near(t, "gain_at_tone", got["gain_at_tone"], gain*pass(60), 1e-12)
	near(t, "output_level", got["output_level"], 1e-3*gain*pass(331e3), 1e-12)
	near(t, "second_level", got["second_level"], 1e-3*gain*pass(330e3), 1e-12)
	near(t, "3 dB at the corner", pass(got["corner"]), 1/math.Sqrt2, 1e-12)
	near(t, "corner", got["corner"], 1/(2*math.Pi*8*470e-6), 1e-12)
	near(t, "rest_voltage", got["rest_voltage"], 6, 0)
	near(t, "dc", got["dc"], 0, 0)
	near(t, "tone_power", got["tone_power"], got["tone_level"]*got["tone_level"]/16, 1e-12)
	near(t, "headroom takes all", evaluate(t, "power-amp", with(given, "headroom", 7))["clip_level"], 0, 0)
}
