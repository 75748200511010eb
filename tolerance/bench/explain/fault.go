package explain

import (
	"slices"
	"strings"

	"batchwright/tolerance/build"
)

// fault is one thing that may be wrong with a unit: other parts, a trim left
// alone, or the readings themselves.
type fault struct {
	class  Class
	ref    string
	words  string
	inputs map[int]build.Input // of the model, that others take the places of
	pin    int                 // of the bench's pins; -1: every trim was done
	scaled []int               // points read by a factor
	factor float64
	rows   [2]int // points read in each other's rows, where they differ
}

// name is the fault in words: "R5 ten times too large".
func (f *fault) name() string { return strings.TrimSpace(f.ref + " " + f.words) }

// measured says whether the unit itself is healthy and its readings are wrong.
func (f *fault) measured() bool { return f.class == Range || f.class == Exchanged }

// writes says what is written at a point: so many times the reading of which
// point.
func (f *fault) writes(point int) (factor float64, of int) {
	factor, of = 1, point
	switch point {
	case f.rows[0]:
		of = f.rows[1]
	case f.rows[1]:
		of = f.rows[0]
	}
	if slices.Contains(f.scaled, point) {
		factor = f.factor
	}
	return factor, of
}

// pin is a trim left at a share of its travel.
type pin struct {
	trim     int
	position float64
}
