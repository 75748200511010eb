package bench

import (
	"fmt"
	"math"
	"slices"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
	"batchwright/tolerance/spread"
)

// readingsHeader is the first line of a file of readings.
var readingsHeader = []string{"point", "unit", "reading"}

// ReadReadings reads readings of a batch, a CSV text with the columns
//
//	point,unit,reading
//	mixer.collector,7,-0.12 V
//
// in any order of lines. Every fault is complained of; readings are worth
// nothing if there is any.
func ReadReadings(file string, text []byte, readings []Reading, units int) (Filled, document.Complaints) {
	lines, complaints := document.ReadCSV(file, text, readingsHeader)
	if len(complaints) > 0 {
		return Filled{}, complaints
	}
	r := filler{readings: readings, units: units, lines: map[[2]int]int{}, values: make([][]spread.Figure, units)}
	for _, x := range readings {
		r.points = append(r.points, x.Point)
	}
	for _, line := range lines {
		r.line(line)
	}
	return r.filled(), r.faults.List()
}

// filler reads lines into units.
type filler struct {
	readings []Reading
	points   []string
	units    int
	faults   document.Faults
	lines    map[[2]int]int    // the line in which a point was read on a unit
	values   [][]spread.Figure // of each unit, by point; nil: nothing read
}

func (r *filler) line(line document.Row) {
	point, ok := r.faults.Word(line.Cells[0], "a test point", r.points...)
	unit, known := r.faults.Whole(line.Cells[1], 1, r.units)
	if !ok {
		return // without its point a reading has no unit
	}
	i := slices.Index(r.points, point)
	u, found := quantity.Find(r.readings[i].Unit)
	if !found {
		panic("bench: a reading in " + r.readings[i].Unit)
	}
	q, read := r.faults.Quantity(line.Cells[2], u)
	if !known {
		return
	}
	if first := r.lines[[2]int{i, unit}]; first > 0 {
		r.faults.Add(line.Cells[0], "read a second time", fmt.Sprintf("each point of a unit once; line %d has %s of unit %d", first, point, unit))
		return
	}
	r.lines[[2]int{i, unit}] = line.Line
	if read {
		r.keep(unit, i, q.Value)
	}
}

func (r *filler) keep(unit, point int, v float64) {
	if r.values[unit-1] == nil {
		r.values[unit-1] = slices.Repeat([]spread.Figure{spread.Figure(math.NaN())}, len(r.points))
	}
	r.values[unit-1][point] = spread.Figure(v)
}

func (r *filler) filled() Filled {
	f := Filled{Points: append([]string{}, r.points...), Units: []FilledUnit{}}
	for u, values := range r.values {
		if values != nil {
			f.Units = append(f.Units, FilledUnit{Unit: u + 1, Values: values})
		}
	}
	return f
}
