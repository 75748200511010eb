package stage

import (
	"slices"

	"batchwright/bom/part"
	"batchwright/bom/quantity"
)

// junctionMixer is one transistor whose base sees both carriers.
//
// Bias. The base divider, with the bias trimmer in series with its lower arm, is
// a Thévenin source; the collector current solves
//
//	V_th − V₋ = I_C·(R_th/β + (1 + 1/β)·R_E) + V_BE(1 mA, T) + V_T·ln(I_C/1 mA)
//
// The root is bracketed by physics: with no junction drop the current would be
// `most`; the drop at `most` is more than the true drop, so `least`, by that drop, is
// below the root, and `more`, by the drop at `least`, above it again.
// A base that is not driven on gives 1 pA. A collector that would fall below
// the emitter + 0.2 V stays there and `saturated` is 1; `current` is then still
// what the bias asks for.
//
// Drive. Both oscillators are stiff sources behind their coupling capacitors;
// at either frequency the other capacitor and the base's resistance divide.
// The emitter resistor, not bypassed, stretches the exponential: x = v/(V_T +
// I_C·R_E). Levels follow from e^(x·cos θ) = I₀(x) + 2·I₁(x)·cos θ + … .
// `swing` is the downward peak of the whole waveform, e^(x1+x2)/(I₀(x1)·I₀(x2))
// times the current less the mean, as far as the collector can go; it `clips`
// where it would go further. A transistor that carries less than 1 µA is
// `starved` (common practice, no source).
//
// Instruments. A meter on the collector divides with the load, a scope's
// capacitance shunts it; a meter on the base joins the divider, one on the
// emitter joins its resistor. All are held to ground, 0 V.
var junctionMixer = Kind{
	Name:    "junction-mixer",
	Summary: "one transistor whose exponential junction mixes two carriers fed to its base",
	Roles: []Role{
		{Name: "base_upper", Type: part.Resistor, Summary: "from the positive rail to the base"},
		{Name: "base_lower", Type: part.Resistor, Summary: "from the base towards the negative rail"},
		{Name: "bias", Type: part.TrimmerResistor, Optional: true, Summary: "trimmer in series with base_lower"},
		{Name: "emitter", Type: part.Resistor, Summary: "from the emitter to the negative rail"},
		{Name: "load", Type: part.Resistor, Summary: "from the positive rail to the collector"},
		{Name: "transistor", Type: part.Transistor, Summary: "NPN, common emitter"},
		{Name: "couple_carrier", Type: part.Capacitor, Summary: "from the carrier's oscillator to the base"},
		{Name: "couple_signal", Type: part.Capacitor, Summary: "from the signal's oscillator to the base"},
	},
	Inputs: mixerInputs,
	Settings: []Setting{
		{Name: "positive", Unit: quantity.Volt, Summary: "positive rail"},
		{Name: "negative", Unit: quantity.Volt, Default: "0 V", Summary: "negative rail, or ground"},
		isolation,
	},
	Equations: junctionFoot + junctionBias + restingCollector + junctionDrive + mixing,
	Outputs: slices.Concat(mixerOutputs, []Output{
		{"collector", quantity.Volt, "steady collector voltage"},
		{"saturated", quantity.One, "1 where the collector has come down to the emitter"},
		{"current", quantity.Ampere, "collector current"},
		{"base_voltage", quantity.Volt, "steady base voltage"},
		{"emitter_voltage", quantity.Volt, "steady emitter voltage"},
		{"swing", quantity.Volt, "peak of the whole waveform at the collector, downwards"},
	}),
	Points: []Point{
		{Name: "base_voltage", Reading: "dc voltage", Instrument: "dmm",
			At: "base of the transistor, to ground", Conductance: "base_meter"},
		{Name: "emitter_voltage", Reading: "dc voltage", Instrument: "dmm",
			At: "end of emitter at the transistor, to ground", Conductance: "emitter_meter"},
		{Name: "collector", Reading: "dc voltage", Instrument: "dmm",
			At: "collector of the transistor, to ground", Conductance: "meter"},
		{Name: "swing", Reading: "peak voltage", Instrument: "scope",
			At: "collector of the transistor, to ground, AC coupled", Conductance: "meter", Capacitance: "probe"},
	},
	Findings: []Finding{
		{"saturated", "the transistor is saturated; lower the bias, or make load smaller"},
		{"starved", "the base does not turn the transistor on: less than 1 µA flows; raise the bias"},
		{"clips", "the waveform at the collector clips against the emitter; lower the levels that come in, or let the collector rest higher"},
	},
	Sketch: `
 positive ─────────────────────┬─────────────┐
                          [base_upper]     [load]
                               │             ├── out
 carrier ──[couple_carrier]────┼──────[transistor]
 signal ───[couple_signal]─────┤             │
                          [base_lower]       │
                             (bias)      [emitter]
 negative ─────────────────────┴─────────────┘
`,
	Fragment: `
mixer:
  kind: junction-mixer
  in: {carrier: fixed, signal: moving}
  settings: {positive: 12 V, negative: -12 V}
  parts:
    base_upper:     {ref: R1, value: 100 kΩ, family: metal-film-100, tolerance: 1 %}
    base_lower:     {ref: R2, value: 39 kΩ, family: metal-film-100, tolerance: 1 %}
    emitter:        {ref: R3, value: 4.7 kΩ, family: metal-film-100, tolerance: 1 %}
    load:           {ref: R4, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    transistor:     {ref: Q1, family: small-signal-npn}
    couple_carrier: {ref: C1, value: 22 pF, family: c0g, tolerance: 5 %}
    couple_signal:  {ref: C2, same_as: mixer.couple_carrier}
`,
	Limits: "NPN, active region, base current by a constant beta; the carriers do not shift the bias; " +
		"transistor capacitances and transit time neglected, so carriers up to about 1 MHz; levels mean nothing while saturated.",
	Source: "harmonics of the exponential junction: K. K. Clarke and D. T. Hess, Communication Circuits, 1971 (from memory); " +
		mixingSource,
}

// junctionFoot is the lower arm of the base divider.
const junctionFoot = `
base_foot = base_lower + bias
`

const junctionDrive = `
carrier_rate = 2*pi*carrier.frequency
signal_rate = 2*pi*signal.frequency
base_input = parallel(base_resistance, transistor.beta*thermal/current + (transistor.beta + 1)*emitter)
coupled = couple_carrier + couple_signal
carrier_drive = carrier.level*carrier_rate*couple_carrier/sqrt((carrier_rate*coupled)^2 + 1/base_input^2)
signal_drive = signal.level*signal_rate*couple_signal/sqrt((signal_rate*coupled)^2 + 1/base_input^2)
carrier_x = carrier_drive/(thermal + emitter*current)
signal_x = signal_drive/(thermal + emitter*current)
carrier_mean = bessel_i0_scaled(carrier_x)
signal_mean = bessel_i0_scaled(signal_x)
carrier_ratio = bessel_i1_scaled(carrier_x)/carrier_mean
signal_ratio = bessel_i1_scaled(signal_x)/signal_mean
carrier_load = load/sqrt((1 + load*meter)^2 + (carrier_rate*load*probe)^2)
signal_load = load/sqrt((1 + load*meter)^2 + (signal_rate*load*probe)^2)
carrier_level = 2*current*carrier_ratio*carrier_load
second_level = 2*current*signal_ratio*signal_load
tone_level = 2*current*carrier_ratio*signal_ratio*load/(1 + load*meter)
swing_wanted = current*(1/(carrier_mean*signal_mean) - 1)*carrier_load
swing = min(swing_wanted, collector - floor)
clips = resting >= floor and swing_wanted > collector - floor
`
