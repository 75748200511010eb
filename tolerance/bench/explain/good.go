package explain

import (
	"math"

	"batchwright/tolerance/bench"
)

// good are what good units read, by point: the simulated units whose trims
// reach, with errors as large as their instruments may make. A unit is the same
// in every column.
func (x *explainer) good() map[string][]float64 {
	errors := x.errors()
	out := map[string][]float64{}
	for i, column := range x.healthy.points {
		list := []float64{}
		for _, u := range x.healthy.reached() {
			limit := math.Sqrt(3) * bench.Uncertainty(x.model.Points[i].Instrument, column[u]) / 2
			list = append(list, column[u]+limit*errors[i][u])
		}
		out[pointName(x.model.Points[i])] = list
	}
	return out
}
