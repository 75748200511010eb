package spread

import (
	"math"

	"batchwright/tolerance/build"
	"batchwright/tolerance/tape"
)

// The central 99.73 % that a test sheet's window spans: ±3 standard deviations
// of a normal distribution.
const (
	readingLow  = 0.00135
	readingHigh = 0.99865
)

// readings are the distributions of what the bench will read on good units.
func (s *sample) readings(loads []load) []ReadingReport {
	m := s.nodes.model
	none := Figure(math.NaN())
	var list []ReadingReport
	for i, p := range m.Points {
		x := s.points[i]
		r := ReadingReport{
			Nominal: Figure(s.nominal[s.nodes.points+i]), Unloaded: Figure(loads[i].value),
			Low: x.low(), High: x.high(), Units: x.moments.Count(),
			Level: none, LevelLow: none, Loading: loads[i].Loading,
		}
		if at := s.nodes.levels[i]; at >= 0 {
			r.Level, r.LevelLow = Figure(s.nominal[s.nodes.points+at]), s.points[at].low()
		}
		if column, ok := s.columnOfPoint(p); ok {
			r.True = s.outputs[column].histogram
		}
		list = append(list, r)
	}
	return list
}

// sampleReports are the distributions of the samples on good units.
func (s *sample) sampleReports(loads []load) []SampleReport {
	var list []SampleReport
	loads = loads[len(s.nodes.model.Points):]
	for i := range s.nodes.model.Samples {
		at := s.nodes.samples + i
		x := s.points[at]
		list = append(list, SampleReport{Figure(s.nominal[s.nodes.points+at]), Figure(loads[i].value), x.low(), x.high(), x.moments.Count(), loads[i].Loading})
	}
	return list
}

// loads are those of the model's points and then of its samples.
func (s *sample) loads() []load {
	m := s.nodes.model
	var list []connection
	for _, p := range m.Points {
		list = append(list, connection{p.Loaded, p.Unloaded})
	}
	for _, x := range m.Samples {
		list = append(list, connection{x.Loaded, x.Unloaded})
	}
	return loadings(m, list)
}

func (s summary) low() Figure  { return Figure(s.histogram.Quantile(readingLow)) }
func (s summary) high() Figure { return Figure(s.histogram.Quantile(readingHigh)) }

// columnOfPoint is the column of the output that a point reads, at the
// reference condition.
func (s *sample) columnOfPoint(p build.Point) (int, bool) {
	name := build.OutputName{Stage: p.Stage.Name, Output: p.Stage.Kind.Points[p.Index].Name}
	for i, o := range s.nodes.model.Outputs {
		if o.Name == name && o.Condition == 0 && o.ChangeFrom < 0 {
			column, ok := s.nodes.columnOf[i]
			return column, ok
		}
	}
	return 0, false
}

// connection is a node with an instrument connected, and the same without.
type connection struct{ loaded, unloaded tape.Ref }

// load is what an instrument does, and the value without it.
type load struct {
	Loading
	value float64
}

// loadings are what the instruments do, to first order about a nominal unit:
// the line through it that tells the reading from the value best,
//
//	Scale = cov(reading, value)/var(value), Uncertainty = √var(reading − Scale·value)
//
// with lots and trims (JCGM 100:2008, 5.2.2); where the value does not scatter,
// Scale is 1.
func loadings(m *build.Model, connections []connection) []load {
	var refs []tape.Ref
	for _, c := range connections {
		refs = append(refs, c.loaded, c.unloaded)
	}
	l := Linearise(m, refs...)
	list := make([]load, len(connections))
	for i, c := range connections {
		reading, value := l.Values[2*i], l.Values[2*i+1]
		list[i] = load{Loading{Scale: 1}, value}
		if c.loaded == c.unloaded {
			continue
		}
		own := l.variance(2*i, 2*i+1, 0, 1)
		if scale := (l.variance(2*i, 2*i+1, 1, 1) - l.variance(2*i, 2*i+1, 1, -1)) / (4 * own); own > 0 && finite(scale) {
			list[i].Scale = scale
		}
		list[i].Shift = reading - list[i].Scale*value
		list[i].Uncertainty = math.Sqrt(math.Max(0, l.variance(2*i, 2*i+1, 1, -list[i].Scale)))
	}
	return list
}

// variance is the first-order variance of p·one + q·other.
func (l *Linear) variance(one, other int, p, q float64) float64 {
	slopes := make([]float64, len(l.Inputs))
	for i := range slopes {
		slopes[i] = p*l.Slopes[one][i] + q*l.Slopes[other][i]
	}
	sum := Linear{Inputs: l.Inputs, Slopes: [][]float64{slopes}}
	variance := 0.0
	for _, t := range sum.Terms(0) {
		variance += t.Variance
	}
	return variance
}
