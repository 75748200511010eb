package bench_test

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

var twoPoints = []bench.Reading{{Point: "mixer.collector", Unit: "V"}, {Point: "tank.frequency", Unit: "Hz"}}

func TestReadReadings(t *testing.T) {
	const text = "unit,point,reading\n# the second first\n3,tank.frequency,329.4 kHz\n3,mixer.collector,-120 mV\n1,mixer.collector,2V09\n"
	got, complaints := bench.ReadReadings("r.csv", []byte(text), twoPoints, 3)
	if len(complaints) > 0 {
		t.Fatal(complaints)
	}
	want := bench.Filled{Points: []string{"mixer.collector", "tank.frequency"}, Units: []bench.FilledUnit{
		{Unit: 1, Values: []spread.Figure{2.09, spread.Figure(math.NaN())}},
		{Unit: 3, Values: []spread.Figure{-0.12, 329.4e3}},
	}}
	if d := cmp.Diff(want, got, cmp.Comparer(func(a, b spread.Figure) bool { return a == b || math.IsNaN(float64(a)) && math.IsNaN(float64(b)) })); d != "" {
		t.Error(d)
	}
}

// TestReadReadingsFaults has every kind of fault in one file, all said at once.
func TestReadReadingsFaults(t *testing.T) {
	const text = `point,unit,reading
mixer.colector,1,2 V
mixer.collector,1,2.09
mixer.collector,2,"2,09 V"
mixer.collector,4,2 V
mixer.collector,3,2 V
mixer.collector,3,2.1 V
tank.frequency,1,2 V
tank.frequency,one,2 Hz
tank.frequency,2,
`
	_, complaints := bench.ReadReadings("r.csv", []byte(text), twoPoints, 3)
	const want = `r.csv:2:1: unknown test point: found "mixer.colector", expected a test point; nearest: mixer.collector
r.csv:3:19: a number without a unit: found "2.09", expected a voltage: 2.09 V
r.csv:4:19: a comma in a number; the decimal mark is a dot, and thousands are not marked: found "2,09 V", expected a voltage, such as 12 V
r.csv:5:17: out of range: found "4", expected a whole number from 1 to 3
r.csv:7:1: read a second time: found "mixer.collector", expected each point of a unit once; line 6 has mixer.collector of unit 3
r.csv:8:18: wrong unit: V is for a voltage: found "2 V", expected a frequency, such as 455 kHz
r.csv:9:16: no whole number: found "one", expected a whole number from 1 to 3
r.csv:10:18: nothing where a value belongs`
	if d := cmp.Diff(want, complaints.Error()); d != "" {
		t.Error(d)
	}
}
