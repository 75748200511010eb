// Package stage holds the circuit kinds a build file can name. A kind
// describes itself: roles, settings, test points and its equations as text in
// the language of package formula. Help, validation, workbook rows and the
// simulation all follow from that one description.
package stage

import (
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
)

// Kind is one circuit topology.
type Kind struct {
	Name     string
	Summary  string // one line
	Roles    []Role
	Inputs   []Input
	Settings []Setting
	// Equations is one `name = expression` a line, each name once, in the
	// units of SI. Names known in it: the roles (a part's value; `role.name`
	// for one of several parameters; `role.fitted`, 1 or 0), the settings, the
	// names of earlier and later lines, `input.field` (see Fields),
	// `temperature` (the stage's own, K), the loads named by Points, and the
	// physical constants of package formula. A role or setting hides the
	// equation of its own name: `level = level` hands the setting on.
	Equations string
	Outputs   []Output
	Points    []Point
	Findings  []Finding
	// Sketch is a small drawing of where the roles sit, [needed] or (optional),
	// of at most 60 columns and 9 lines.
	Sketch string
	// Fragment is the stage's entry in a build file, with every role, input and
	// setting that must be given; the stages named after `in` are others'.
	Fragment string
	Limits   string // limits of validity
	Source   string
	// Free says that roles, settings and outputs are the build file's own.
	Free bool

	parsed func() []formula.Equation // Equations, parsed once; set by the table
}

// Role is a place a part goes.
type Role struct {
	Name     string
	Type     part.Type
	Optional bool // an unfitted part is worth 0
	Summary  string
}

// Input is a signal taken from an earlier stage.
type Input struct {
	Name, Summary string
	Optional      bool // not wired, it carries zero in every field
}

// Setting is a figure that is not bought.
type Setting struct {
	Name    string
	Unit    quantity.Unit
	Default string       // as a build file would say it; "" must be given
	Scatter part.Scatter // of the default
	Summary string
}

// Output is a result people see.
type Output struct {
	Name    string
	Unit    quantity.Unit
	Summary string
}

// Point is a test point: where a bench instrument is held, and what it shows.
type Point struct {
	Name       string // of the output whose value is read
	Reading    string // "dc voltage", "peak voltage", "frequency"
	Instrument string // "dmm", "scope", "counter"
	At         string // where the probe goes, in words with roles: "collector of the transistor, to ground"
	// Conductance and Capacitance name the equation variables (S, F; 0 but
	// while this point is read) through which the instrument loads the node.
	Conductance, Capacitance string
	// Stiff is why the part of a load that they do not name changes nothing.
	// A steady voltage need not say that capacitance leaves it alone.
	Stiff string
	// Level names the equation for the peak level (V) at the node, where that
	// is not the reading itself: some instruments need a least level.
	Level string
}

// Finding is something a stage does that its user must not miss: it clips, it
// does not conduct.
type Finding struct {
	Equation string // worth 1 where it happens, 0 elsewhere
	Text     string // what happens, and after a semicolon what to do
}

// Field is a quantity that a stage hands to the next: the equation of that
// name, or zero where the stage has none.
type Field struct {
	Name    string
	Unit    quantity.Unit
	Summary string
}

// Fields are what a signal carries from stage to stage. Levels are peak volts.
var Fields = []Field{
	{"frequency", quantity.Hertz, "carrier frequency"},
	{"level", quantity.Volt, "carrier level"},
	{"second_frequency", quantity.Hertz, "the other carrier's frequency, after a mixer"},
	{"second_level", quantity.Volt, "the other carrier's level"},
	{"tone_frequency", quantity.Hertz, "frequency of the audible difference"},
	{"tone_level", quantity.Volt, "level of the audible difference"},
	{"dc", quantity.Volt, "steady voltage"},
	{"source_resistance", quantity.Ohm, "resistance the signal comes from"},
	{"tank_q", quantity.One, "loaded Q of the tank the carrier comes from; 0 where there is no tank"},
}
