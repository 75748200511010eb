package stage

import (
	"math"
	"math/rand/v2"
	"testing"
)

// zenerByHand finds the output by halving: the current that series leaves over
// falls, and what the diode takes rises, with the voltage.
func zenerByHand(g map[string]float64) (volts, amperes float64) {
	knee := g["zener.voltage"] + g["zener.voltage_slope"]*(g["temperature"]-298.15) - g["zener.resistance"]*g["test_current"]
	diode := func(v float64) float64 { return math.Max(0, (v-knee)/g["zener.resistance"]) }
	left := func(v float64) float64 { return (g["input"]-v)/g["series"] - g["load_current"] - v*g["meter"] }
	if left(0) < 0 {
		return 0, 0
	}
	low, high := 0.0, g["input"]
	for range 200 {
		if v := (low + high) / 2; left(v) > diode(v) {
			low = v
		} else {
			high = v
		}
	}
	return low, diode(low)
}

func TestZenerAgainstBisection(t *testing.T) {
	random := rand.New(rand.NewPCG(29, 31))
	between := func(low, high float64) float64 { return low * math.Pow(high/low, random.Float64()) }
	c := newCircuit(t, "shunt-zener", 1)
	count := map[string]int{}
	for range 300 {
		g := with(examples["shunt-zener"], "series", between(50, 5e3), "zener.voltage", between(2.4, 24),
			"zener.resistance", between(1, 100), "zener.voltage_slope", 0.02*random.Float64()-0.01, "input", between(3, 40),
			"load_current", between(1e-4, 2e-2), "test_current", between(1e-4, 1e-2), "temperature", 260+60*random.Float64(), "meter", 1e-6)
		volts, amperes := zenerByHand(g)
		got := c.at(t, g)
		near(t, "voltage", got["voltage"], volts, 1e-9)
		if math.Abs(got["zener_current"]-amperes) > 1e-11 {
			t.Errorf("zener_current = %g, want %g", got["zener_current"], amperes)
		}
		near(t, "zener_dissipation", got["zener_dissipation"], got["voltage"]*got["zener_current"], 1e-12)
		near(t, "series_dissipation", got["series_dissipation"], (g["input"]-got["voltage"])*(g["input"]-got["voltage"])/g["series"], 1e-12)
		near(t, "unregulated", got["unregulated"], boolean(amperes == 0), 0)
		switch {
		case amperes > 0:
			count["regulates"]++
		case volts > 0:
			count["sinks"]++
		default:
			count["nothing"]++
		}
	}
	if count["regulates"] < 30 || count["sinks"] < 30 || count["nothing"] < 5 {
		t.Errorf("not every case seen: %v", count)
	}
}

func boolean(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

// What the input delivers is what the load takes and what both turn to heat.
func TestZenerPowerBalance(t *testing.T) {
	g := examples["shunt-zener"]
	for name, given := range map[string]map[string]float64{"regulates": g, "sinks": with(g, "input", 10)} {
		got := evaluate(t, "shunt-zener", given)
		delivered := given["input"] * (given["input"] - got["voltage"]) / given["series"]
		near(t, name, got["zener_dissipation"]+got["series_dissipation"]+got["voltage"]*given["load_current"], delivered, 1e-12)
	}
}

// By hand: 330 Ω from 12 V to 9.1 V with no resistance is 8.787879 mA, 2 mA of
// which go to the load. At its test current a diode shows its stated voltage.
func TestZenerLimits(t *testing.T) {
	given := map[string]float64{"series": 330, "zener.voltage": 9.1, "input": 12, "load_current": 2e-3}
	tests := map[string]struct {
		given   map[string]float64
		voltage float64
		current float64
	}{
		"no resistance": {given, 9.1, 2.9/330 - 2e-3},
		"test current":  {with(given, "zener.resistance", 20, "test_current", 2.9/330-2e-3), 9.1, 2.9/330 - 2e-3},
		"warm":          {with(given, "zener.voltage_slope", 5e-3, "temperature", 318.15), 9.2, 2.8/330 - 2e-3},
		"negative rail": {with(given, "input", -12), -9.1, 2.9/330 - 2e-3},
		"too much load": {with(given, "load_current", 10e-3), 8.7, 0},
		"far too much":  {with(given, "load_current", 1), 0, 0},
		"negative sink": {with(given, "load_current", 10e-3, "input", -12), -8.7, 0},
		"input too low": {with(given, "input", 5), 4.34, 0},
	}
	for name, tt := range tests {
		t.Run(name, func(t *testing.T) {
			got := evaluate(t, "shunt-zener", tt.given)
			near(t, "voltage", got["voltage"], tt.voltage, 1e-12)
			near(t, "zener_current", got["zener_current"], tt.current, 1e-12)
		})
	}
	near(t, "source_resistance where it sinks", evaluate(t, "shunt-zener", tests["input too low"].given)["source_resistance"], 330, 0)
}
