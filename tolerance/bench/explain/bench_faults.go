package explain

import (
	"fmt"

	"gonum.org/v1/gonum/mat"

	"batchwright/tolerance/build"
)

// trimFaults are trims left alone or at an end, each a build of its own.
func trimFaults(b *build.Build) (faults []*fault, pins []pin) {
	for i, t := range b.Trims {
		name := t.Stage + "." + t.Role
		for _, at := range []struct {
			position float64
			words    string
		}{{0.5, "not done, left in the middle"}, {0, "left at its low end"}, {1, "left at its high end"}} {
			faults = append(faults, &fault{class: NotTrimmed, ref: name, words: at.words, pin: len(pins)})
			pins = append(pins, pin{i, at.position})
		}
	}
	return faults, pins
}

// ranges are the factors by which a wrong range or prefix misreads.
var ranges = []struct {
	factor float64
	words  string
}{
	{10, "read ten times too large"}, {0.1, "read ten times too small"},
	{1000, "read a thousand times too large"}, {0.001, "read a thousand times too small"},
}

// readingFaults are readings taken on the wrong range, at one point or at all of
// an instrument, and two of one unit written in each other's rows.
func readingFaults(m *build.Model) []*fault {
	var list []*fault
	of := map[string][]int{}
	for i, p := range m.Points {
		of[p.Instrument.Name] = append(of[p.Instrument.Name], i)
		for _, r := range ranges {
			list = append(list, &fault{class: Range, ref: pointName(p), words: r.words, pin: -1, scaled: []int{i}, factor: r.factor})
		}
		for k, q := range m.Points[:i] {
			if p.Unit.Symbol == q.Unit.Symbol {
				list = append(list, &fault{class: Exchanged, ref: pointName(q) + " and " + pointName(p),
					words: "in each other's rows", pin: -1, rows: [2]int{k, i}})
			}
		}
	}
	for _, in := range m.Build.Instruments {
		if points := of[in.Name]; len(points) > 1 {
			for _, r := range ranges {
				list = append(list, &fault{class: Range, ref: in.Name, words: fmt.Sprintf("%s at every point", r.words),
					pin: -1, scaled: points, factor: r.factor})
			}
		}
	}
	return list
}

// pointName is a test point as a sheet names it.
func pointName(p build.Point) string { return p.Stage.Name + "." + p.Stage.Kind.Points[p.Index].Name }

// other stands for all that no hypothesis is about, such as two faults at once.
func other() *fault {
	return &fault{class: Other, words: "something else: no single fault here reads like this", pin: -1}
}

// wide is how many times a healthy unit's standard deviation the readings of a
// unit with some other fault scatter, each by itself (a choice, no source).
const wide = 10

// paintOther is the picture of some other fault: about the healthy means, wide,
// and with no reading tied to another.
func (k *oracle) paintOther() *picture {
	n := len(k.centre)
	cov := mat.NewSymDense(n, nil)
	for i := range n {
		cov.SetSym(i, i, wide*wide)
	}
	p := &picture{parts: []normal{{1, make([]float64, n), cov}}}
	p.overall()
	return p
}
