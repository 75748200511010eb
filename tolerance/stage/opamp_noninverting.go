package stage

import "batchwright/bom/part"

// opampNoninverting multiplies everything that comes in by the gain at its own
// frequency, A₀/√(1 + (f·A₀/GBW)²).
//
// Limits. The steady output stays within the rails less the headroom. What is
// left on the nearer side is the room for the peak of the whole waveform, the
// sum of carrier, second carrier and tone, since all three peak together once
// in every beat. The steepest slope, 2π·Σ f·level, may not exceed the slew
// rate. If either is exceeded, all levels shrink in one proportion, so that
// their sum just fits: the ratio of the carriers, on which the depth of the
// envelope rests, is kept. With one carrier this is the smallest of gain·level,
// slew/(2πf) and the room. In truth a clipped pair loses depth and gains
// harmonics: a stage that limits should be redesigned, and the levels are then
// for seeing that it does.
//
// The output is stiff, so no instrument changes what is there.
var opampNoninverting = Kind{
	Name:    "opamp-noninverting",
	Summary: "op-amp amplifier that does not invert, with gain-bandwidth, slew rate and rails",
	Roles: []Role{
		{Name: "feedback", Type: part.Resistor, Summary: "from the output to the inverting input"},
		{Name: "ground", Type: part.Resistor, Summary: "from the inverting input towards ground"},
		{Name: "gain_trim", Type: part.TrimmerResistor, Optional: true, Summary: "trimmer in series with ground"},
		{Name: "opamp", Type: part.OpAmp, Summary: "the amplifier"},
	},
	Inputs:   []Input{{Name: "in", Summary: "what is amplified"}},
	Settings: rails,
	Equations: `
noise_gain = 1 + feedback/(ground + gain_trim)
low_gain = noise_gain
dc_wanted = (in.dc + opamp.offset)*noise_gain
` + opampLimits + railShare + amplified,
	Outputs:  opampOutputs,
	Points:   opampPoints,
	Findings: opampFindings,
	Sketch: `
                     ┌───────┐
 in ─────────────────┤ +     │
                     │ opamp ├──┬── out
                 ┌───┤ -     │  │
                 │   └───────┘  │
                 ├──[feedback]──┘
              [ground]
             (gain_trim)
                0 V
`,
	Fragment: `
amp:
  kind: opamp-noninverting
  in: mixer
  settings: {positive: 12 V, negative: -12 V}
  parts:
    feedback: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
    ground:   {ref: R2, value: 4.7 kΩ, family: metal-film-100, tolerance: 1 %}
    opamp:    {ref: U1, family: jfet-opamp}
`,
	Limits: "One-pole op-amp, input currents neglected, no capacitor under ground (steady voltage is amplified too); " +
		"levels of a stage that clips or slews are rough.",
	Source: "gain: T. L. Floyd, Electronic Devices, Ex. 12.3; slew limit: M. S. Sivakumar, Linear Integrated Circuit, Ex. 5.31 " +
		"(inputs and methods read in an open archive of textbook examples)",
}
