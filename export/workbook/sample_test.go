package workbook

import (
	"fmt"
	"math"
	"slices"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

// sample is a plan as the rest of the program might hand it over: invented
// figures of the right size, one of everything that can be missing.
func sample(units int) Plan {
	return Plan{
		Title: "Lantern tone box", Units: units, Seed: 1, File: "lantern.yaml", Digest: "7f3a19c2d4e5b60718293a4b5c6d7e8f", Version: "0.1.0",
		Findings:   []string{"The film capacitor's slope cancels most of the coil's: the note moves less than with a part that has no slope."},
		Conditions: slices.Clone(sampleConditions), Order: sampleOrder(units), Picks: samplePicks(), Positions: slices.Clone(samplePositions),
		Turns: slices.Clone(sampleTurns), Readings: sampleReadings(), Spread: sampleSpread(units), Drifts: []Drift{sampleDrift(), sampleLevel()},
		Basis: []Basis{
			{"Part figures", "Tolerances, slopes and lot correlations are typical of each class of part, not anyone's guarantee.", "families file, a source on every row"},
			{"Lots", "Pieces bought on one line share a lot across the batch.", ""},
			{"Temperature", "Every part of a stage has the stage's temperature: ambient, and the stage's own rise once it is warm.", ""},
		},
		Cautions: []string{
			"A soldering iron burns; solder fumes are to be drawn away from the face.",
			"Electrolytic capacitors the wrong way round burst. Check polarity twice before power.",
			"Use a certified mains supply and keep out of it. Work on the mains is for qualified people and under local electrical codes.",
		},
		Advice: map[string]string{"amplifier.gain": "Check R7 and R8 against the parts list: one of them a decade off is the usual reason."},
	}
}

var sampleConditions = []Condition{
	{"bench", "23 °C, supply 12 V, hand away, warmed up, 50 % relative humidity"},
	{"hand near", "hand 1.5 pF"},
}

func euros(ten4 int) offer.Money { return offer.Money(ten4) }

// sampleOrder keeps to the arithmetic of package order: needed, spares of 10 %
// rounded up, packs.
func sampleOrder(units int) order.Order {
	o := order.Order{Currency: "EUR", Units: units, SparesPercent: 10, Book: "demonstration book", Demonstration: true}
	add := func(refs []string, title, text string, tolerance float64, marking string, multiple, jump int, each offer.Money) {
		l := order.Line{Refs: refs, Title: title, Text: text, Tolerance: tolerance, Marking: marking, PerUnit: len(refs), Multiple: multiple, Each: each}
		l.Needed = l.PerUnit * units
		l.Spares = (l.Needed*10 + 99) / 100
		l.Buy = max((l.Needed+l.Spares+multiple-1)/multiple*multiple, jump)
		l.Price = l.Each * offer.Money(l.Buy)
		o.Total += l.Price
		o.PerUnit += l.Each * offer.Money(l.PerUnit)
		o.Lines = append(o.Lines, l)
	}
	add([]string{"C1", "C2", "C3", "C4"}, "Polystyrene film", "220 pF", 0.025, "220pH, 221H, or 220 with its tolerance", 10, 0, euros(3140))
	add([]string{"C5", "C6", "C7", "C8", "C9"}, "X7R ceramic", "100 nF", 0.10, "104K", 25, 0, euros(420))
	add([]string{"CT1"}, "Film trimmer capacitor", "4..34 pF", 0, "colour of the body: by maker", 1, 0, euros(6200))
	add([]string{"L1", "L2"}, "Drum choke", "1.80 mH", 0.05, "182J", 1, 0, euros(4850))
	add([]string{"Q1", "Q2", "Q3"}, "Small-signal NPN transistor", "", 0, "type number; flat side towards the mark on the board", 1, 100, euros(350))
	add([]string{"R1", "R2", "R5", "R6", "R7", "R8"}, "Metal film, 50 ppm/K", "10.0 kΩ", 0.01, "brown black black red brown", 50, 0, euros(123))
	add([]string{"R3", "R4"}, "Metal film, 50 ppm/K", "4.70 kΩ", 0.01, "yellow violet black brown brown", 50, 0, euros(123))
	add([]string{"RV1", "RV2"}, "Cermet trimmer", "0..10 kΩ", 0.10, "103", 5, 0, euros(5400))
	add([]string{"U1"}, "JFET-input op-amp", "", 0, "type number", 1, 0, euros(7900))
	o.Unoffered = []order.Line{{Refs: []string{"D1"}, Title: "Schottky diode", PerUnit: 1, Needed: units, Spares: (units*10 + 99) / 100, Why: "no row of the price book sells family schottky"}}
	return o
}

func samplePicks() Picks {
	return Picks{
		Choices: []Picked{
			{Refs: "C1–C4", Part: "c0g 180 pF ±5 % ∥ polystyrene 39 pF ±2.5 %, mixed lots", UnitCost: 1.256, Why: "Its −120 ppm/K takes back two thirds of the coil's +180 ppm/K; C0G of the same price drifts 61 Hz where 40 Hz is asked."},
			{Refs: "L1, L2", Part: "drum-choke 1.80 mH ±5 %", UnitCost: 0.97, Why: "With 10 % the tuner runs short on 3.1 % of the units."},
		},
		Proof:   "Proved: nothing cheaper meets the targets. 20736 combinations, 4112 judged, 7 simulated; 3 dominated options and 12 partial combinations ruled out unseen.",
		Binding: "warm-up drift: without it the order would be 17.68 cheaper, to first order. A tenth tighter (±36 Hz) the order would cost 226.95, 4.58 more.",
		Checks:  []string{"corner: 98.1 % of the units to first order, 99.9 % in simulation, which counts."},
		Alternates: []Alternate{
			{Refs: "C1–C4", Line: "polystyrene 220 pF ±2.5 %", Instead: "c0g 220 pF ±2 % for C1–C4; polypropylene 100 nF ±5 % for C5", More: 31.8, Drifts: "warm-up drift within 38.4 Hz instead of 24.2 Hz, room drift within 62 Hz instead of 55 Hz"},
			{Refs: "L1, L2", Line: "drum-choke 1.80 mH ±5 %", Instead: "none was found that meets every target", More: math.NaN()},
		},
		Note: "Each was put to the same simulation as the choice itself, of 24000 units, and meets every target.",
	}
}

var samplePositions = []Position{
	{"rails", "fixed-regulator", "U2", "regulator", "12.0 V", "Fixed regulator", "±4 %", "type number", ""},
	{"rails", "fixed-regulator", "C9", "output capacitor", "100 nF", "X7R ceramic", "±10 %", "104K", "as close to the regulator as it goes"},
	{"fixed", "colpitts", "L1", "coil", "1.80 mH", "Drum choke", "±5 %", "182J", ""},
	{"fixed", "colpitts", "C1", "upper capacitor", "220 pF", "Polystyrene film", "±2.5 %", "220pH, 221H, or 220 with its tolerance", "same lot as C2–C4"},
	{"fixed", "colpitts", "C2", "lower capacitor", "220 pF", "Polystyrene film", "±2.5 %", "220pH, 221H, or 220 with its tolerance", ""},
	{"fixed", "colpitts", "CT1", "tuner", "4..34 pF", "Film trimmer capacitor", "", "colour of the body: by maker", "trimmer, set in step 7"},
	{"moving", "colpitts", "L2", "coil", "1.80 mH", "Drum choke", "±5 %", "182J", ""},
	{"moving", "colpitts", "C3", "upper capacitor", "220 pF", "Polystyrene film", "±2.5 %", "220pH, 221H, or 220 with its tolerance", ""},
	{"moving", "colpitts", "C4", "lower capacitor", "220 pF", "Polystyrene film", "±2.5 %", "220pH, 221H, or 220 with its tolerance", ""},
	{"mixer", "junction-mixer", "Q1", "transistor", "", "Small-signal NPN transistor", "", "type number; flat side towards the mark on the board", ""},
	{"mixer", "junction-mixer", "R3", "collector resistor", "4.70 kΩ", "Metal film, 50 ppm/K", "±1 %", "yellow violet black brown brown", ""},
	{"mixer", "junction-mixer", "RV1", "bias trimmer", "0..10 kΩ", "Cermet trimmer", "±10 %", "103", "trimmer, set in step 4"},
	{"amplifier", "opamp-noninverting", "U1", "op-amp", "", "JFET-input op-amp", "", "type number", ""},
	{"amplifier", "opamp-noninverting", "R7", "ground resistor", "10.0 kΩ", "Metal film, 50 ppm/K", "±1 %", "brown black black red brown", ""},
	{"amplifier", "opamp-noninverting", "RV2", "gain trimmer", "0..10 kΩ", "Cermet trimmer", "±10 %", "103", "trimmer, set in step 9"},
}

var sampleTurns = []bench.Turn{
	{Step: 4, Turn: "mixer.bias", Ref: "RV1", Watch: "mixer.collector", At: "collector of Q1, to ground", Unit: "V", To: 0, Within: 0.1, Condition: "bench"},
	{Step: 7, Turn: "fixed.tuner", Ref: "CT1", Watch: "mixer.offset", At: "output of the mixer, C12 and ground", Unit: "Hz", To: 0, Within: 2, Condition: "bench", Rises: true},
	{Step: 9, Turn: "amplifier.gain", Ref: "RV2", Watch: "amplifier.output", At: "pin 6 of U1, to ground", Unit: "V", To: 1.5, Within: 0.05, Condition: "bench", Rises: true},
}

func limits(low, high float64) spread.Limits {
	return spread.Limits{Low: spread.Figure(low), High: spread.Figure(high)}
}

func sampleReadings() []bench.Reading {
	r := func(step int, point, reading, instrument, condition, unit, at string, nominal, low, high, u float64) bench.Reading {
		none := spread.Figure(math.NaN())
		return bench.Reading{ConsumerRisk: none, ProducerRisk: none, SpecificRisk: none, Step: step, Point: point, Reading: reading, Instrument: instrument, Condition: condition, Unit: unit, At: at,
			Nominal: spread.Figure(nominal), Unloaded: spread.Figure(nominal), Expected: limits(low, high), Uncertainty: spread.Figure(u)}
	}
	rows := []bench.Reading{
		r(1, "rails.voltage", "dc voltage", "dmm", "bench", "V", "output of U2, to ground", 12, 11.5137, 12.4871, 0.062),
		r(2, "fixed.frequency", "frequency", "counter", "bench", "Hz", "emitter of Q2, through the probe, to ground", 332118.4, 316250.3, 349871.9, 6.64),
		r(3, "mixer.base", "dc voltage", "dmm", "bench", "V", "base of Q1, to ground", 0.6593, 0.6121, 0.7064, 0.0053),
		r(5, "mixer.collector", "dc voltage", "dmm", "bench", "V", "collector of Q1, to ground", 0, -0.1184, 0.1184, 0.002),
		r(6, "moving.frequency", "frequency", "counter", "bench", "Hz", "emitter of Q3, through the probe, to ground", 331702.1, 315801.2, 349411.4, 6.63),
		r(8, "mixer.offset", "frequency", "counter", "bench", "Hz", "output of the mixer, C12 and ground", 0, -5.2, 5.2, 0.01),
		r(10, "amplifier.output", "peak voltage", "scope", "bench", "V", "pin 6 of U1, to ground", 1.5, 1.38, 1.62, 0.055),
		r(11, "detector.level", "dc voltage", "dmm", "bench", "V", "across R9, the side that is not ground", 0.0412, 0.0311, 0.0537, 0.0022),
		r(12, "detector.corner", "frequency", "scope", "bench", "Hz", "not measured directly", math.NaN(), math.NaN(), math.NaN(), math.NaN()),
		r(13, "mixer.beat", "frequency", "counter", "hand near", "Hz", "output of the mixer, C12 and ground", 2212, 1410, 3120, 0.05),
		r(14, "output.level", "peak voltage", "scope", "hand near", "V", "output jack, tip to sleeve", 0.912, 0.741, 1.083, 0.037),
	}
	rows[8].Why = "the detector has no output when the beat is at zero"
	accept, tight := limits(1000.05, 3999.95), limits(0.83, 1.02)
	rows[9].Accept = &accept
	rows[10].Accept = &tight
	return rows
}

func figures(low, half, high float64) map[string]spread.Figure {
	f := func(v float64) spread.Figure { return spread.Figure(v) }
	return map[string]spread.Figure{"0.005": f(low), "0.025": f(low + (half-low)/4), "0.5": f(half), "0.975": f(high - (high-half)/4), "0.995": f(high)}
}

func sampleSpread(units int) spread.Report {
	out := func(name, condition, from, unit string, nominal, low, high, u float64, sources ...spread.Contribution) spread.OutputReport {
		half := (high - low) / 2
		return spread.OutputReport{Output: name, Condition: condition, ChangeFrom: from, Unit: unit, Nominal: spread.Figure(nominal),
			WorstCase: &spread.WorstCase{Limits: limits(low, high), Searched: "guided"}, RootSumSquare: spread.RootSumSquare{StandardUncertainty: spread.Figure(u)},
			Simulated:     spread.Simulated{Mean: spread.Figure(nominal), StandardDeviation: spread.Figure(u), Quantiles: figures(nominal-half/2, nominal, nominal+half/2), ReachedShare: 0.9987},
			Contributions: sources}
	}
	part := func(ref, parameter string, share float64) spread.Contribution {
		return spread.Contribution{Ref: ref, Parameter: parameter, Share: spread.Figure(share)}
	}
	r := spread.Report{Build: "Lantern tone box", Seed: 1, Simulation: spread.Simulation{Batches: 1000, Units: 1000 * units},
		Outputs: []spread.OutputReport{
			out("fixed.frequency", "bench", "", "Hz", 332118.4, 309871, 356210, 5310, part("L1", "value", 0.71), part("C1", "value", 0.14), part("C2", "value", 0.13)),
			out("fixed.frequency", "cool hall", "bench", "Hz", 112.2, -310, 540, 61, part("L1", "temperature_coefficient", 0.52), part("C1", "temperature_coefficient", 0.31), part("fixed", "stray", 0.08)),
			out("mixer.offset", "bench", "", "Hz", 0, -2, 2, 1.15, part("fixed.tuner", "setting", 1)),
			out("mixer.offset", "switch on", "bench", "Hz", -12.4, -88, 61, 11.7, part("L1", "temperature_coefficient", 0.44), part("L2", "temperature_coefficient", 0.44)),
			out("mixer.beat", "hand near", "", "Hz", 2212, 1310, 3310, 231, part("fixed", "stray", 0.5), part("L1", "value", 0.31)),
			out("detector.level", "bench", "", "V", 0.0412, 0.028, 0.059, 0.0031, part("D1", "drop", 0.81), part("R9", "value", 0.07)),
			out("detector.corner", "bench", "", "Hz", 4823, 4201, 5602, 188, part("C11", "value", 0.9)),
			out("amplifier.gain", "bench", "", "1", 21, 20.1, 21.9, 0.3, part("R7", "value", 0.5), part("R8", "value", 0.5)),
		},
		Trims: []spread.TrimReport{
			{Turn: "mixer.bias", ReachedShare: 1, Setting: spread.TrimSetting{Nominal: 0.47, Mean: 0.47, P01: 0.31, P99: 0.64}},
			{Turn: "fixed.tuner", ReachedShare: 0.9987, ShortLow: 0.0002, ShortHigh: 0.0011, Setting: spread.TrimSetting{Nominal: 0.52, Mean: 0.51, P01: 0.09, P99: 0.93}},
		},
		Targets: []spread.TargetReport{
			{Name: "warm-up drift", Output: "mixer.offset", Asked: "|change from bench| ≤ 40 Hz at switch on, for 99 % of units", Met: true, Share: 0.9962, ShareInterval: [2]spread.Figure{0.9951, 0.9971}, WorstCase: &spread.Limits{Low: -88, High: 61}},
			{Name: "playing range", Output: "mixer.beat", Asked: "between 1 kHz and 4 kHz with the hand near, for 99 % of units", Met: true, Share: 0.9999, ShareInterval: [2]spread.Figure{0.9996, 1}, WorstCase: &spread.Limits{Low: 1310, High: 3310}},
			{Name: "corner", Output: "detector.corner", Asked: "between 4.3 kHz and 8 kHz in every corner", Met: false, Share: 0.9991, ShareInterval: [2]spread.Figure{0.9986, 0.9995}, WorstCase: &spread.Limits{Low: 4201, High: 5602}, Why: "C11 at its low end and R9 at its high end give 4.20 kHz"},
			{Name: "every unit tunes", Output: "fixed.tuner", Asked: "the trimmer reaches on 99.5 % of units", Met: true, Share: 0.9987, ShareInterval: [2]spread.Figure{0.998, 0.9992}},
		},
		Yield: spread.YieldReport{UnitShare: 0.9948, Interval: [2]spread.Figure{0.9931, 0.9962}, Batch: spread.BatchReport{Units: units, MedianGood: spread.Figure(units), P05Good: spread.Figure(max(0, units-1)), AllGoodShare: 0.884}},
		Notes: []string{"The worst corner of mixer.offset was searched from 12 starts over 31 parameters; no bound proves that nothing lies beyond it."},
	}
	r.Outputs[6].WorstCase.Why = "searched over nine parameters, guided"
	return r
}

func sampleDrift() Drift {
	band := limits(-40, 40)
	d := Drift{Title: "Change of the beat, from the bench at 23 °C", Output: "mixer.offset", Unit: "Hz", Meaning: "Low and high: 99 % of the units lie between. The trimmers stay as they were set at 23 °C.", Target: "room-to-room drift", Limits: &band}
	for c := 8.0; c <= 38; c += 2.5 {
		x := c - 23
		d.Rows = append(d.Rows, DriftRow{c, spread.Figure(0.3*x - 1.9*math.Abs(x) - 1), spread.Figure(0.3 * x), spread.Figure(0.3*x + 2.1*math.Abs(x) + 1)})
	}
	return d
}

func sampleLevel() Drift {
	d := Drift{Title: "Level at the output", Output: "output.level", Unit: "V", Meaning: "Low and high: 99 % of the units lie between."}
	for c := 8.0; c <= 38; c += 5 {
		d.Rows = append(d.Rows, DriftRow{c, spread.Figure(0.78 - c*0.001), spread.Figure(0.93 - c*0.0008), spread.Figure(1.09 - c*0.0006)})
	}
	d.Rows[2].Low = spread.Figure(math.NaN())
	return d
}

// long repeats the sample's bench list until it has about n rows.
func long(p Plan, n int) Plan {
	var readings []bench.Reading
	for i := 0; len(readings) < n; i++ {
		r := sampleReadings()[i%11]
		r.Step, r.Point = 20+i, fmt.Sprintf("%s%d", r.Point, i)
		readings = append(readings, r)
	}
	p.Readings = append(p.Readings, readings...)
	return p
}
