package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// crystalOscillator runs a crystal between two load capacitors. Its frequency is
// fs·(1 + a1·Δ + a2·Δ² + a3·Δ³)·(1 + Cm/(2(C0 + CL))): the series resonance at
// the crystal's temperature, Δ kelvin above 25 °C, raised by the load
// CL = a·b/(a + b) + stray, farads. The pull p = Cm/(2(C0 + CL)) is the first
// term of √(1 + 2p), and too high by p²/2, which for p of 300 ppm is 0.05 ppm.
//
// The family's frequency is the series resonance. A crystal sold for a load is
// stamped with the frequency it has under that load.
//
// A crystal is a tank of high Q, and hands it on. The default is from memory: a
// loaded Q of 10 000 to 100 000 for AT cuts of some megahertz.
var crystalOscillator = Kind{
	Name:    "crystal",
	Summary: "oscillator on a quartz crystal with two load capacitors",
	Roles: []Role{
		{Name: "crystal", Type: part.Crystal, Summary: "the crystal; its frequency is that of its series resonance"},
		{Name: "load_a", Type: part.Capacitor, Summary: "capacitor from the crystal's first end to ground"},
		{Name: "load_b", Type: part.Capacitor, Summary: "capacitor from the crystal's second end to ground"},
		{Name: "tuner", Type: part.TrimmerCapacitor, Optional: true, Summary: "trimmer across load_b"},
	},
	Settings: []Setting{
		tankSettings[0],
		{Name: "stray", Unit: quantity.Farad, Default: "0 pF",
			Summary: "capacitance of wiring and amplifier across the crystal"},
		{Name: "sensor", Unit: quantity.Farad, Default: "0 pF",
			Summary: "further capacitance across the crystal"},
		{Name: "q", Unit: quantity.One, Default: "20000",
			Summary: "loaded Q of the crystal; counts for the lock range only"},
	},
	Equations: `
warmth = temperature - zero_celsius - 25*kelvin
resonance = crystal.frequency*(1 + crystal.cubic_a1*warmth + crystal.cubic_a2*warmth^2 + crystal.cubic_a3*warmth^3)
second_load = load_b + tuner + probe
load = load_a*second_load/(load_a + second_load) + stray + sensor
pull = crystal.motional_c/(2*(crystal.shunt_c + load))
frequency = resonance*(1 + pull)
level = level
tank_q = q
`,
	Outputs: append(slices.Clip(tankOutputs),
		Output{"pull", quantity.PPM, "share by which the load raises the series resonance"}),
	Points: []Point{
		{Name: "frequency", Reading: "frequency", Instrument: "counter",
			At: "second end of the crystal, to ground", Capacitance: "probe", Stiff: limited, Level: "level"},
		{Name: "level", Reading: "peak voltage", Instrument: "scope",
			At: "second end of the crystal, to ground", Capacitance: "probe", Stiff: limited},
	},
	Sketch: `
 first end ──┬──[crystal]──┬──────────┬── second end
          [load_a]      [load_b]   (tuner)
 0 V ────────┴─────────────┴──────────┘
`,
	Fragment: `
clock:
  kind: crystal
  settings: {stray: 3 pF, rise: 3 K}
  parts:
    crystal: {ref: Y1, value: 4 MHz, family: at-cut-crystal, tolerance: 30 ppm}
    load_a:  {ref: C1, value: 33 pF, family: c0g, tolerance: 5 %}
    load_b:  {ref: C2, same_as: clock.load_a}
`,
	Limits: "First order in the pull; fundamental mode, moderate drive; temperatures of the crystal's family. " +
		"The amplifier's phase moves the frequency by further parts in a million.",
	Source: "load pulling by the definitions of IEC 60122-1; cubic temperature law of the AT cut (from memory)",
}
