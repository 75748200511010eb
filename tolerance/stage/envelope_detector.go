package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// envelopeDetector is a diode that charges a capacitor to the peaks and a
// resistor that empties it.
//
// The steady output stands on both sides of
//
//	dc = carrier − V_D,  V_D = drop(1 mA, T) + n·V_T·ln(I/1 mA),  I = dc/load
//
// V_D at the current of the full carrier level is more than the true V_D, so
// `least`, the level less that, is below the root, and `highest`, by the drop
// at `least`, above it: a bracket of some hundredths of a volt. The diode
// conducts where the carrier exceeds its drop at that current; otherwise (also
// where the load asks for less than the diode's own leakage, drop below 0)
// there is no output.
//
// The stronger of the two carriers is the one whose peaks are followed, the
// weaker modulates it: for m = weaker/stronger the envelope's fundamental is
// weaker·(1 − m²/8) to the second order. A steady voltage or an audible
// component that arrives with the carriers is taken as blocked.
//
// Handed on: the tone; the ripple, half its height being the peak of what is
// left of the carrier; and as the source resistance the load in parallel with
// the diode's mean slope resistance n·V_T/I.
//
// An instrument across the load joins it, its capacitance joins hold.
var envelopeDetector = Kind{
	Name:    "envelope-detector",
	Summary: "diode, resistor and capacitor that follow the peaks of a beating carrier",
	Roles: []Role{
		{Name: "diode", Type: part.Diode, Summary: "in series, from the input to the output"},
		{Name: "load", Type: part.Resistor, Summary: "from the output to ground"},
		{Name: "hold", Type: part.Capacitor, Summary: "from the output to ground"},
	},
	Inputs: []Input{{Name: "in", Summary: "the carriers whose envelope is wanted"}},
	Equations: `
warmth = temperature - zero_celsius - 25*kelvin
thermal = diode.ideality*boltzmann*temperature/charge
resistance = 1/(1/load + meter)
capacitance = hold + probe
corner = 1/(2*pi*resistance*capacitance)
stronger = max(in.level, in.second_level)
weaker = min(in.level, in.second_level)
depth = stronger > 0 ? weaker/stronger : 0
tiny = 1e-9*volt
per_volt = 1/(0.001*ampere*resistance)
junction = diode.drop + diode.drop_slope*warmth
full_drop = junction + thermal*ln(max(stronger, tiny)*per_volt)
conducts = full_drop > 0 and stronger > full_drop
least = max(stronger - max(full_drop, 0), tiny)
highest = min(max(stronger - junction - thermal*ln(least*per_volt), least), max(stronger, tiny))
held = root(v, least, highest, stronger - v - junction - thermal*ln(v*per_volt))
dc = conducts > 0 ? held : 0
tone_level = conducts > 0 ? weaker*(1 - depth^2/8) : 0
ripple = in.frequency > 0 ? dc/(in.frequency*resistance*capacitance) : 0
clip_frequency = sqrt(1 - depth^2)/(2*pi*resistance*capacitance*depth)
silent = conducts < 1
lags = conducts > 0 and in.tone_frequency > clip_frequency
frequency = in.frequency
level = ripple/2
tone_frequency = in.tone_frequency
source_resistance = conducts > 0 ? parallel(resistance, thermal*resistance/held) : resistance
`,
	Outputs: []Output{
		{"corner", quantity.Hertz, "corner of load and hold"},
		{"dc", quantity.Volt, "steady output voltage"},
		{"tone_level", quantity.Volt, "peak level of the note"},
		{"ripple", quantity.Volt, "carrier left on the output, peak to peak"},
		{"clip_frequency", quantity.Hertz, "note above which the output cannot fall as fast as the envelope"},
		{"conducts", quantity.One, "1 where the carrier opens the diode"},
	},
	Points: []Point{
		{Name: "dc", Reading: "dc voltage", Instrument: "dmm",
			At: "across load", Conductance: "meter"},
		{Name: "tone_level", Reading: "peak voltage", Instrument: "scope",
			At: "across load, AC coupled", Conductance: "meter", Capacitance: "probe"},
	},
	Findings: []Finding{
		{"silent", "the carrier does not open the diode, and nothing comes out; raise the level that comes in, or take a diode with less drop"},
		{"lags", "the output cannot fall as fast as the envelope and clips the note; make hold or load smaller, or the two carriers less equal"},
	},
	Sketch: `
  in ──[diode]──┬─────────┬── out
              [load]    [hold]
 0 V ───────────┴─────────┴──
`,
	Fragment: `
detector:
  kind: envelope-detector
  in: amp
  parts:
    diode: {ref: D1, family: signal-diode}
    load:  {ref: R1, value: 47 kΩ, family: metal-film-100, tolerance: 1 %}
    hold:  {ref: C1, value: 470 pF, family: c0g, tolerance: 5 %}
`,
	Limits: "Carrier well above the diode's drop, ripple small, note below clip_frequency, weaker carrier at most as strong as the other; " +
		"near the threshold a real diode turns on gradually.",
	Source: "diagonal clipping: D. Chattopadhyay and P. C. Rakshit, Electronics Fundamentals and Applications, Ex. 12.9.6, " +
		"with the exact √(1−m²) (inputs read in an open archive of textbook examples); envelope of two carriers: Fourier series of √(A²+B²+2AB·cos)",
}
