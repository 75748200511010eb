package stage

import "batchwright/bom/part"

// opampInverting multiplies what comes in by −Rf/Ri. Levels are peaks and have
// no sign, so `gain` is the size, Rf/Ri; only the steady voltage shows that the
// stage inverts: dc = −in.dc·Rf/Ri + V_os·noise gain.
//
// Rf is feedback with gain_trim in series. Ri is input with the resistance that
// the signal comes from in series, since the op-amp's inverting input stands at
// 0 V. The bandwidth is that of the noise gain 1 + Rf/Ri:
// (Rf/Ri)/√(1 + (f·(1 + Rf/Ri)/GBW)²). Limits are those of opamp-noninverting.
var opampInverting = Kind{
	Name:    "opamp-inverting",
	Summary: "op-amp amplifier that inverts, with gain-bandwidth, slew rate and rails",
	Roles: []Role{
		{Name: "feedback", Type: part.Resistor, Summary: "from the output to the inverting input"},
		{Name: "input", Type: part.Resistor, Summary: "from what comes in to the inverting input"},
		{Name: "gain_trim", Type: part.TrimmerResistor, Optional: true, Summary: "trimmer in series with feedback"},
		{Name: "opamp", Type: part.OpAmp, Summary: "the amplifier"},
	},
	Inputs:   []Input{{Name: "in", Summary: "what is amplified"}},
	Settings: rails,
	Equations: `
low_gain = (feedback + gain_trim)/(input + in.source_resistance)
noise_gain = 1 + low_gain
dc_wanted = opamp.offset*noise_gain - in.dc*low_gain
` + opampLimits + railShare + amplified,
	Outputs:  opampOutputs,
	Points:   opampPoints,
	Findings: opampFindings,
	Sketch: `
             ┌──[feedback]──(gain_trim)──┐
             │   ┌───────┐               │
 in ─[input]─┴───┤ -     │               │
                 │ opamp ├───────────────┴── out
 0 V ────────────┤ +     │
                 └───────┘
`,
	Fragment: `
amp:
  kind: opamp-inverting
  in: mixer
  settings: {positive: 12 V, negative: -12 V}
  parts:
    feedback: {ref: R1, value: 47 kΩ, family: metal-film-100, tolerance: 1 %}
    input:    {ref: R2, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    opamp:    {ref: U1, family: jfet-opamp}
`,
	Limits: "One-pole op-amp, input currents neglected, non-inverting input at 0 V (with one supply the output rests at its bottom); " +
		"levels of a stage that clips or slews are rough.",
	Source: "definition: ideal op-amp with gain GBW/(jf); slew limit: M. S. Sivakumar, Linear Integrated Circuit, Ex. 5.31 " +
		"(inputs and method read in an open archive of textbook examples)",
}
