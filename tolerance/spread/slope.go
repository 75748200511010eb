package spread

import (
	"fmt"
	"math"
	"slices"

	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
)

// PerKelvin is how an output of the trimmed units moves with the ambient
// temperature at the reference condition, to first order: the mean, and the
// standard deviations of what all units of a batch share, because their parts
// are of the same lots, and of what is each unit's own.
type PerKelvin struct {
	Output     string `json:"output"`
	Unit       string `json:"unit"` // of a kelvin
	Mean       Figure `json:"mean"`
	LotToLot   Figure `json:"lot_to_lot"`
	UnitToUnit Figure `json:"unit_to_unit"`
	Why        string `json:"why,omitempty"`
}

// DriftPerKelvin is the central difference over one kelvin about the reference
// condition, its error of second order:
//
//	(y(t + ½ K) − y(t − ½ K)) / 1 K
//
// and the first-order variance of the same, through the trims (JCGM 100:2008,
// 5.2.2), in two parts. With c·u the slope by an input times its standard
// deviation, and r the correlation of two pieces of its lot, units of one batch
// have in common
//
//	Σ_lots (Σ c·u·√r)²
//
// which is the covariance of any two of them; the rest is their own.
func DriftPerKelvin(b *build.Build, output build.OutputName) (PerKelvin, error) {
	at := slices.IndexFunc(b.Variables, func(v build.Variable) bool { return v.Name == build.Temperature })
	if at < 0 {
		return PerKelvin{}, fmt.Errorf("spread: a build without a temperature")
	}
	celsius := b.Conditions[0].Values[at]
	swept, err := b.Sweep(output, build.Temperature, []float64{celsius - 0.5, celsius + 0.5})
	if err != nil {
		return PerKelvin{}, err
	}
	m, err := swept.CompileTargets()
	if err != nil {
		return PerKelvin{}, err
	}
	ends := m.Targets[0].Outputs
	o := m.Outputs[ends[1]]
	if o.Unit.Offset != 0 { // a difference of temperatures is in kelvin
		o.Unit = quantity.Kelvin
	}
	l := Linearise(m, m.Graph.Sub(o.Node, m.Outputs[ends[0]].Node))
	shared, own := l.split(0)
	d := PerKelvin{Output: output.String(), Unit: o.Unit.Symbol, Mean: Figure(l.Values[0]),
		LotToLot: Figure(math.Sqrt(shared)), UnitToUnit: Figure(math.Sqrt(own))}
	if !finite(l.Values[0]) || math.IsNaN(shared) || math.IsNaN(own) {
		d.Why = "the output has no derivative at its nominal value"
	}
	return d, nil
}

// split divides a node's first-order variance into what the units of a batch
// share and what is each one's own.
func (l *Linear) split(node int) (shared, own float64) {
	lots := map[int]float64{}
	var order []int // of the lots, as first met: sums must not follow a map
	for i, x := range l.Inputs {
		cu := l.Slopes[node][i] * x.HalfWidth * math.Sqrt(scatter.Variance(x.Shape))
		if cu == 0 {
			continue
		}
		own += cu * cu
		if x.Lot < 0 {
			continue
		}
		if _, met := lots[x.Lot]; !met {
			order = append(order, x.Lot)
		}
		lots[x.Lot] += cu * math.Sqrt(x.Common)
		own -= cu * cu * x.Common
	}
	for _, lot := range order {
		shared += lots[lot] * lots[lot]
	}
	return shared, math.Max(own, 0) // rounding, where a lot is all
}
