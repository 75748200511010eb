package stage

import (
	"strings"
	"testing"
)

// What a stage takes in and merely hands on, or renames, arrives unchanged.
func TestSignalsHandedOn(t *testing.T) {
	in := map[string]float64{"in.frequency": 331e3, "in.second_frequency": 330e3, "in.tone_frequency": 1e3, "in.tank_q": 70}
	pair := map[string]float64{"carrier.frequency": 331e3, "signal.frequency": 330e3}
	tests := map[string]struct {
		changes map[string]float64
		want    string
		values  []float64
	}{
		"opamp-noninverting": {in, "frequency second_frequency tone_frequency tank_q", []float64{331e3, 330e3, 1e3, 70}},
		"rc-lowpass":         {in, "frequency second_frequency tone_frequency tank_q", []float64{331e3, 330e3, 1e3, 70}},
		"coupling":           {in, "frequency second_frequency tone_frequency tank_q", []float64{331e3, 330e3, 1e3, 70}},
		"rc-highpass":        {in, "frequency second_frequency tone_frequency tank_q", []float64{331e3, 330e3, 1e3, 70}},
		"sallen-key-lowpass": {in, "frequency second_frequency tone_frequency tank_q", []float64{331e3, 330e3, 1e3, 70}},
		"lc-lowpass":         {in, "frequency second_frequency tone_frequency tank_q", []float64{331e3, 330e3, 1e3, 70}},
		"level-tank":         {in, "frequency second_frequency tone_frequency tank_q", []float64{331e3, 330e3, 1e3, 70}},
		"envelope-detector": {map[string]float64{"in.frequency": 331e3, "in.tone_frequency": 1e3},
			"frequency tone_frequency", []float64{331e3, 1e3}},
		"rail-decoupling": {map[string]float64{"in.frequency": 331e3, "in.source_resistance": 7},
			"frequency source_resistance", []float64{331e3, 107}},
		"multiplier":     {pair, "frequency second_frequency tone_frequency", []float64{331e3, 330e3, 1e3}},
		"junction-mixer": {pair, "frequency second_frequency tone_frequency source_resistance", []float64{331e3, 330e3, 1e3, 10e3}},
		"colpitts":       {map[string]float64{"q": 65, "level": 1.7}, "tank_q level", []float64{65, 1.7}},
		"tuned-tank":     {map[string]float64{"q": 65, "level": 1.7}, "tank_q level", []float64{65, 1.7}},
	}
	for kind, tt := range tests {
		t.Run(kind, func(t *testing.T) {
			given := with(examples[kind])
			for name, v := range tt.changes {
				given[name] = v
			}
			got := evaluate(t, kind, given)
			for i, name := range strings.Fields(tt.want) {
				near(t, name, got[name], tt.values[i], 1e-15)
			}
		})
	}
}

// A level that is an output under another name is the level handed on, and a
// supply's voltage is its steady voltage.
func TestOutputsHandedOn(t *testing.T) {
	tests := []struct{ kind, field, output string }{
		{"multiplier", "level", "carrier_level"},
		{"junction-mixer", "level", "carrier_level"},
		{"junction-mixer", "dc", "collector"},
		{"opamp-noninverting", "level", "output_level"},
		{"divider", "dc", "voltage"},
		{"shunt-zener", "dc", "voltage"},
		{"fixed-regulator", "dc", "voltage"},
		{"adjustable-regulator", "dc", "voltage"},
	}
	for _, tt := range tests {
		got := evaluate(t, tt.kind, examples[tt.kind])
		near(t, tt.kind+" "+tt.field, got[tt.field], got[tt.output], 0)
	}
	ripple := evaluate(t, "envelope-detector", examples["envelope-detector"])
	near(t, "envelope-detector level", ripple["level"], ripple["ripple"]/2, 0)
}

// Thévenin's resistances, from the drawings: of the divider 12 kΩ, 4.7 kΩ and
// the 100 kΩ load in parallel; of the filters what they come from in series
// with their own, in parallel with the load; of the detector the load in
// parallel with the diode's slope n·V_T/I; of the Zener its own and series.
func TestSourceResistances(t *testing.T) {
	thermal := 1.8 * 0.02569257912 // n·kT/q at 25 °C
	detector := evaluate(t, "envelope-detector", examples["envelope-detector"])
	tests := map[string]float64{
		"divider":           1 / (1/12e3 + 1/4.7e3 + 1/100e3),
		"rc-lowpass":        1 / (1/13e3 + 1/220e3),
		"coupling":          1 / (1/3e3 + 1/10e3),
		"rc-highpass":       1 / (1/3e3 + 1/47e3 + 1/220e3),
		"lc-lowpass":        1 / (1/50.0 + 1/1e3),
		"shunt-zener":       1 / (1/330.0 + 1/12.0),
		"envelope-detector": 1 / (1/100e3 + detector["dc"]/100e3/thermal),
	}
	for kind, want := range tests {
		near(t, kind, evaluate(t, kind, examples[kind])["source_resistance"], want, 1e-9)
	}
}
