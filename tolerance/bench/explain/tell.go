package explain

import "batchwright/tolerance/build"
import "batchwright/tolerance/spread"

type outputReader struct {
	reader *spread.Reader
	m      *build.Model
}

func (x *explainer) tell(u *Unit, groups [][]int, read []int, probabilities []float64) {}
