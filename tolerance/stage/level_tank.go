package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// levelTank is a tank fed through a resistor. Off its resonance it passes less,
// so an oscillator or a tank that a hand moves becomes a level that a hand
// moves. With R = damping and what the signal comes from, G the conductance
// across the tank and D = 1 + R·G
//
//	|H(f)| = 1/(D·√(1 + q²·(f/f0 − f0/f)²)), f0 = 1/(2π√(LC)), q = R/D·√(C/L)
//
// written so that 0 Hz, which the coil shorts, has gain 0 and a finite slope.
// The source's resistance handed on is the size of the impedance at the
// carrier, R·|H|.
var levelTank = Kind{
	Name:    "level-tank",
	Summary: "tuned circuit off resonance, which turns a change of frequency into a change of level",
	Roles: []Role{
		{Name: "coil", Type: part.Coil, Summary: "the tank's coil"},
		{Name: "tank", Type: part.Capacitor, Summary: "capacitor across the coil"},
		{Name: "tuner", Type: part.TrimmerCapacitor, Optional: true, Summary: "trimmer across the coil"},
		{Name: "damping", Type: part.Resistor, Summary: "from the input to the tank; with it the Q falls"},
	},
	Inputs: []Input{{Name: "in", Summary: "an oscillator"}},
	Settings: []Setting{
		{Name: "stray", Unit: quantity.Farad, Default: "0 pF", Summary: "capacitance of wiring and coil across the tank"},
		{Name: "sensor", Unit: quantity.Farad, Default: "0 pF",
			Summary: "further capacitance across the tank, such as a hand near a plate"},
		{Name: "load", Unit: quantity.Ohm, Default: "0 ohm",
			Summary: "resistance across the tank, the coil's losses included; 0 stands for none"},
	},
	Equations: `
resistance = in.source_resistance + damping
load_conductance = (load > 0 ? 1/load : 0) + meter
capacitance = tank + tuner + stray + sensor + probe
divided = 1 + resistance*load_conductance
f0 = 1/(2*pi*sqrt(coil*capacitance))
q = resistance/divided*sqrt(capacitance/coil)
gain_at_carrier = in.frequency*f0/(divided*sqrt((in.frequency*f0)^2 + (q*(in.frequency^2 - f0^2))^2))
gain_at_second = in.second_frequency*f0/(divided*sqrt((in.second_frequency*f0)^2 + (q*(in.second_frequency^2 - f0^2))^2))
gain_at_tone = in.tone_frequency*f0/(divided*sqrt((in.tone_frequency*f0)^2 + (q*(in.tone_frequency^2 - f0^2))^2))
` + filtered + `dc = 0*volt
source_resistance = resistance*gain_at_carrier
tank_q = in.tank_q
`,
	Outputs: []Output{
		{"f0", quantity.Hertz, "resonance of the tank"},
		{"q", quantity.One, "loaded Q of the tank"},
		{"gain_at_carrier", quantity.One, "share of the carrier that is left"},
		{"level", quantity.Volt, "peak level of the carrier across the tank"},
	},
	Points: []Point{
		{Name: "level", Reading: "peak voltage", Instrument: "scope",
			At: "live end of the coil, to ground", Conductance: "meter", Capacitance: "probe"},
	},
	Sketch: `
  in ──[damping]──┬────────┬─────────┬─── out
               [coil]   [tank]    (tuner)
 0 V ─────────────┴────────┴─────────┴───
`,
	Fragment: `
loudness:
  kind: level-tank
  in: moving
  settings: {stray: 8 pF}
  parts:
    coil:    {ref: L1, value: 1.8 mH, family: drum-choke, tolerance: 5 %}
    tank:    {ref: C1, value: 120 pF, family: c0g, tolerance: 5 %}
    damping: {ref: R1, value: 100 kΩ, family: metal-film-100, tolerance: 1 %}
`,
	Limits: "Coil without losses unless they are in load; what follows takes its current through the tank's impedance, " +
		"so a stage that draws any belongs in load.",
	Source: "definition: 1/√(1 + Q²(f/f0 − f0/f)²) of a parallel tank fed through a resistor",
}
