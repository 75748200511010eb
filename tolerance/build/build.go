// Package build reads a build file: the stages of one instrument in signal
// order, the conditions it meets, its trims and targets. Everything is checked
// against the kinds and families, and every fault is reported with its place in
// the file. A Build that was read is wired and complete; Compile turns it into
// one straight-line program for all its conditions.
package build

import (
	"batchwright/bom/document"
	"batchwright/bom/offer"
	"batchwright/bom/part"
	"batchwright/bom/quantity"
	"batchwright/tolerance/formula"
	"batchwright/tolerance/stage"
)

// Build is one instrument and the batch it is planned for.
type Build struct {
	File        string
	Title       string
	Units       int
	Spares      int // percent of what is needed
	Book        *offer.Book
	Families    *part.Catalogue
	Instruments []Instrument
	Variables   []Variable
	Conditions  []Condition // the first is the reference
	Stages      []*Stage    // in signal order
	Trims       []Trim      // in the order the bench does them
	Targets     []Target
	Openings    []Opening // buying lines still to be chosen
}

// Variable is what a condition sets: the four that every build has, and those
// of the user's own.
type Variable struct {
	Name string
	Unit quantity.Unit
}

// The variables that parts feel. Temperature is in degrees Celsius, humidity a
// fraction, age in seconds, warmup from 0 (just switched on) to 1 (settled).
const (
	Temperature = "temperature"
	Warmup      = "warmup"
	Humidity    = "humidity"
	Age         = "age"
)

// Condition is one set of surroundings; Values follow Build.Variables.
type Condition struct {
	Name   string
	Values []float64
}

// Stage is one stage of the instrument, wired.
type Stage struct {
	Name     string
	Kind     *stage.Kind
	Wires    []Wire
	Settings []Setting
	Places   []Place
	Formulas []formula.Equation // of a formula stage
	Outputs  []stage.Output     // the kind's, or a formula stage's own
}

// Wire connects a kind's input to the stage it comes from.
type Wire struct{ Input, From string }

// Setting is a figure that is not bought: a reference to a condition's
// variable or to another stage's output, or a parameter that may scatter.
type Setting struct {
	Name      string
	Reference string
	Geometry  *Geometry // nil but for a figure given by a shape
	part.Parameter
}

// Place is a role of a stage and the part in it.
type Place struct {
	Role     string
	Type     part.Type
	Fitted   bool
	Part     part.Part // the first of two where Combine says so
	Second   part.Part // the other
	Combine  Combine
	Geometry *Geometry      // of a coil given by its winding, nil for others
	Quantity string         // the value as the file says it
	SameAs   string         // the position whose buying line this shares; "" for its own
	Position float64        // of a trimmer that no trim turns, 0..1
	Across   *Setting       // the steady voltage across a capacitor; nil for none
	resolved bool           // SameAs has been followed to the deciding part
	node     *document.Node // where it is written
}

// Trim is one adjustment: turn a trimmer until an output reads To.
type Trim struct {
	Stage, Role string
	Output      OutputName
	Unit        quantity.Unit
	To, Within  float64
	Condition   int
}

// OutputName is a stage's output.
type OutputName struct{ Stage, Output string }

// String is the name as a build file writes it.
func (n OutputName) String() string { return n.Stage + "." + n.Output }

// Target is a demand on an output, its change, or on a trimmer's reach.
type Target struct {
	Name       string
	Output     OutputName
	Unit       quantity.Unit
	Trim       int   // index of the trim whose reach is asked; -1 for an output
	ChangeFrom int   // condition the change is counted from; -1 for the output itself
	At         []int // conditions, each of which must comply
	Low, High  float64
	Share      float64 // of the units that must comply
	WorstCase  bool    // every corner must comply instead
	Asked      string  // the demand in words
	limits     string  // and its limits
}

// Opening is a buying line to be chosen: every position in it takes the same.
type Opening struct {
	Positions  []string // "fixed.upper"; the first holds the `choose`
	Type       part.Type
	Families   []string
	Tolerances []float64 // empty: every grade its family sells
	Values     []Worth   // empty: as written
	Combines   []Combine // how pieces may make up the value; empty: one piece
	Lots       []bool    // whether pieces may come from mixed lots; empty: as written
	pairs      pairValues
	node       *document.Node // the first position's part
}

// Worth is what a part is bought by: a value, or a trimmer's range.
type Worth struct {
	Low, High float64 // SI; equal but for a trimmer
	Text      string  // as people write it
}

// Stage finds a stage by name.
func (b *Build) Stage(name string) *Stage {
	for _, s := range b.Stages {
		if s.Name == name {
			return s
		}
	}
	return nil
}

// Place finds a position such as "fixed.upper".
func (b *Build) Place(position string) *Place {
	for _, s := range b.Stages {
		for i := range s.Places {
			if s.Name+"."+s.Places[i].Role == position {
				return &s.Places[i]
			}
		}
	}
	return nil
}

// Parts lists every fitted part in signal order.
func (b *Build) Parts() []part.Part {
	var parts []part.Part
	for _, s := range b.Stages {
		for _, p := range s.Places {
			parts = append(parts, p.Pieces()...)
		}
	}
	return parts
}

// TrimOf finds the trim that turns the trimmer in a role, or -1.
func (b *Build) TrimOf(stageName, role string) int {
	for i, t := range b.Trims {
		if t.Stage == stageName && t.Role == role {
			return i
		}
	}
	return -1
}

// variable finds a condition variable's index, or -1.
func (b *Build) variable(name string) int {
	for i, v := range b.Variables {
		if v.Name == name {
			return i
		}
	}
	return -1
}

// condition finds a condition's index, or -1.
func (b *Build) condition(name string) int {
	for i, c := range b.Conditions {
		if c.Name == name {
			return i
		}
	}
	return -1
}

// output finds an output of a stage.
func (s *Stage) output(name string) (stage.Output, bool) {
	for _, o := range s.Outputs {
		if o.Name == name {
			return o, true
		}
	}
	return stage.Output{}, false
}

// place finds a role of a stage.
func (s *Stage) place(role string) *Place {
	for i := range s.Places {
		if s.Places[i].Role == role {
			return &s.Places[i]
		}
	}
	return nil
}

// setting finds a setting of a stage.
func (s *Stage) setting(name string) *Setting {
	for i := range s.Settings {
		if s.Settings[i].Name == name {
			return &s.Settings[i]
		}
	}
	return nil
}
