package stage

import (
	"fmt"
	"math"
	"testing"
)

// Every point says what each half of a load does: it is named in an equation,
// or the point says why it changes nothing.
func TestPointsSayHowTheyAreLoaded(t *testing.T) {
	for _, k := range fixedKinds() {
		for _, p := range k.Points {
			whole := p.Conductance != "" && (p.Capacitance != "" || p.Reading == "dc voltage")
			if whole == (p.Stiff != "") {
				t.Errorf("%s.%s: conductance %q, capacitance %q and stiff %q do not make one account of a load",
					k.Name, p.Name, p.Conductance, p.Capacitance, p.Stiff)
			}
			if p.Level != "" && !names(k.Equations, p.Level) {
				t.Errorf("%s.%s: level %s is in no equation", k.Name, p.Name, p.Level)
			}
			if p.Reading == "frequency" && p.Level == "" {
				t.Errorf("%s.%s: nothing says how strong what the counter counts is", k.Name, p.Name)
			}
		}
	}
}

// unmoved are loads that have an equation and leave the reading alone in the
// example, each for a reason of its own.
var unmoved = map[string]string{
	"envelope-detector.tone_level meter": "the output follows the envelope whatever its load, as long as the diode conducts",
	"envelope-detector.tone_level probe": "as above",
	"colpitts.level probe":               "limiting brings the level back",
	"clapp.level probe":                  "as above",
	"hartley.level probe":                "as above",
	"tuned-tank.level probe":             "as above",
	"crystal.level probe":                "as above",
}

// A load from the node to ground pulls a voltage towards 0 V and an oscillator
// down: 1 µS and 15 pF each on its own, in every kind's example. The two where
// capacitance may raise a level, since it tunes, are named.
func TestLoadsPullTheRightWay(t *testing.T) {
	tunes := map[string]bool{"level-tank.level probe": true, "lc-lowpass.tone_level probe": true}
	for _, k := range fixedKinds() {
		for _, p := range k.Points {
			bare := evaluate(t, k.Name, examples[k.Name])[p.Name]
			for load, size := range map[string]float64{p.Conductance: 1e-6, p.Capacitance: 15e-12} {
				if load == "" {
					continue
				}
				what := fmt.Sprintf("%s.%s %s", k.Name, p.Name, load)
				loaded := evaluate(t, k.Name, with(examples[k.Name], load, size))[p.Name]
				switch _, still := unmoved[what]; {
				case still:
					if loaded != bare {
						t.Errorf("%s moves from %g to %g, should not", what, bare, loaded)
					}
				case tunes[what]:
					if loaded == bare {
						t.Errorf("%s does not move", what)
					}
				case !(math.Abs(loaded) < math.Abs(bare)):
					t.Errorf("%s moves from %g to %g, should fall", what, bare, loaded)
				}
			}
		}
	}
}

// 15 pF across a tank of 145 pF that runs at 330 kHz bring it to
// √(145/160) = 0.951972 of that, 314.15 kHz: 4.8 % down.
func TestProbeAcrossATank(t *testing.T) {
	const f, c, probe = 330e3, 145e-12, 15e-12
	coil := 1 / (math.Pow(2*math.Pi*f, 2) * c)
	loaded := evaluate(t, "tuned-tank", map[string]float64{"coil": coil, "tank": c, "probe": probe})["frequency"]
	near(t, "loaded", loaded, f*math.Sqrt(145.0/160), 1e-12)
	near(t, "loaded by hand", loaded, 314150.8, 1e-6)
}

// A meter at an emitter is a resistor Rm to ground: by Thévenin it and the
// emitter resistor R to the rail V are R·Rm/(R+Rm) to V·Rm/(R+Rm). The
// currents into the emitter then add up: I·(1+1/β) = (Ve−V)/R + Ve/Rm.
func TestMeterAtAnEmitter(t *testing.T) {
	const meter = 1e-4 // S: 10 kΩ, coarse enough to matter
	for _, name := range []string{"junction-mixer", "common-emitter", "emitter-follower"} {
		given := with(examples[name], "emitter_meter", meter)
		e := evaluate(t, name, given)
		ve := e["emitter_voltage"]
		want := (ve-given["negative"])/given["emitter"] + ve*meter
		near(t, name, e["current"]*(1+1/given["transistor.beta"]), want, 1e-9)
		near(t, name+" junction", e["base_voltage"]-ve, e["junction"]+e["thermal"]*math.Log(e["current"]/1e-3), 1e-7)
	}
}
