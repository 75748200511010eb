package explain

import (
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

// apply does to columns of readings what the fault does to what is written.
func (f *fault) apply(points [][]float64) [][]float64 {
	out := make([][]float64, len(points))
	copy(out, points)
	for _, i := range f.scaled {
		out[i] = make([]float64, len(points[i]))
		for k, x := range points[i] {
			out[i][k] = f.factor * x
		}
	}
	out[f.rows[0]], out[f.rows[1]] = out[f.rows[1]], out[f.rows[0]]
	return out
}

// pin is a trim left at a share of its travel.
type pin struct {
	trim     int
	position float64
}
