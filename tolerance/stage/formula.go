package stage

// freeFormula is the kind whose parts, settings and outputs are the build
// file's own; it describes only what may be written.
var freeFormula = Kind{
	Name: "formula",
	Summary: "any other stage: parts and settings under your own names, " +
		"and outputs: {name: {expression, unit}} in plain arithmetic",
	Free: true,
	Sketch: `
 parts ─────────┐
 settings ──────┼── expressions ── outputs
 other stages ──┘
`,
	Fragment: `
ratio:
  kind: formula
  settings: {scale: 2}
  parts:
    sense: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
  outputs:
    total:   {expression: 5*volt*scale, unit: V}
    current: {expression: total/sense, unit: mA}
`,
	Limits: "Expressions name the stage's parts, settings and outputs, a condition's variable, temperature (K), and other stages' outputs as stage.output. " +
		"A plain number where a unit is needed is an error: write 10000*ohm. An output named like a signal's field is handed to the stages that take this one as input.",
	Source: "your own",
}
