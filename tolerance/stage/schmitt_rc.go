package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// schmittRC is an inverting Schmitt gate, or comparator with hysteresis, that
// charges and discharges a capacitor at its input through a resistor from its
// output. With thresholds u and l as fractions of the supply, the output is high
// for RC·ln((1−l)/(1−u)) and low for RC·ln(u/l), in seconds. A comparator
// between ±V whose divider feeds back the share β has u = (1+β)/2, l = (1−β)/2.
//
// The thresholds have no default: they differ from maker to maker and change
// with the supply. Where they are not 0 < l < u < 1 it is `at_rest`, and the
// frequency is 0.
var schmittRC = Kind{
	Name:    "schmitt-rc",
	Summary: "RC oscillator on one inverting Schmitt gate",
	Roles: []Role{
		{Name: "timing_r", Type: part.Resistor, Summary: "from the gate's output to its input"},
		{Name: "timing_c", Type: part.Capacitor, Summary: "from the gate's input to the lower rail"},
	},
	Settings: append(rcSettings("timing_c"),
		Setting{Name: "supply", Unit: quantity.Volt, Summary: "voltage between the rails of the gate"},
		Setting{Name: "upper_threshold", Unit: quantity.One,
			Summary: "input at which the output falls, as a fraction of the supply"},
		Setting{Name: "lower_threshold", Unit: quantity.One,
			Summary: "input at which the output rises, as a fraction of the supply"},
	),
	Equations: `
oscillates = lower_threshold > 0 and lower_threshold < upper_threshold and upper_threshold < 1
at_rest = oscillates < 1
upper = oscillates > 0 ? upper_threshold : 2/3
lower = oscillates > 0 ? lower_threshold : 1/3
high_share = ln((1 - lower)/(1 - upper))
low_share = ln(upper/lower)
frequency = oscillates/(timing_r*(timing_c + stray + sensor)*(high_share + low_share))
duty = oscillates*high_share/(high_share + low_share)
average = supply*duty
level = level
`,
	Outputs: append(slices.Clip(tankOutputs),
		Output{"duty", quantity.One, "share of the time during which the output is high"},
		Output{"average", quantity.Volt, "average of the output, above the lower rail"},
	),
	Points: append(rcPoints("output of the gate, to the lower rail"),
		Point{Name: "average", Reading: "dc voltage", Instrument: "dmm", At: "output of the gate, to the lower rail", Stiff: driven}),
	Findings: []Finding{{"at_rest", "the thresholds are not in order between the rails, and nothing oscillates; " +
		"give them as fractions of the supply, the lower below the upper"}},
	Sketch: `
          ┌──────[timing_r]──────┐
          ├──[inverting gate]────┴── out
     [timing_c]
 0 V ─────┴──
`,
	Fragment: `
square:
  kind: schmitt-rc
  settings:
    supply: 5 V
    upper_threshold: {value: 0.58, tolerance: 5 %}
    lower_threshold: {value: 0.37, tolerance: 5 %}
  parts:
    timing_r: {ref: R1, value: 100 kΩ, family: metal-film-100, tolerance: 1 %}
    timing_c: {ref: C1, value: 1 nF, family: c0g, tolerance: 5 %}
`,
	Limits: "The output reaches both rails and switches at once, and the input draws no current; " +
		"the level is what is taken of it, by a divider or a coupling.",
	Source: "exponential charging between two thresholds, circuit analysis; with a comparator: M. S. Sivakumar, " +
		"Linear Integrated Circuit, Ex. 13.7 (inputs and method read in an open archive of textbook examples)",
}
