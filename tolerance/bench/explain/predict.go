package explain

import (
	"context"
	"fmt"
	"math"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"

	"gonum.org/v1/gonum/mat"

	"batchwright/bom/quantity"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
)

// How many units are simulated of a healthy build and under each fault, where
// the options say nothing.
const (
	healthyUnits = 4096
	faultyUnits  = 256
)

// oracle predicts readings.
type oracle struct {
	model      *build.Model
	seed       uint64
	units      int // under each fault
	reader     *spread.Reader
	pinned     []bound // builds with a trim left alone
	faults     []*fault
	prior      []float64  // of the healthy unit, then of each fault
	centre     []float64  // of each reading: the healthy mean
	scale      []float64  // and standard deviation
	pictures   []*picture // of the healthy unit, then of each fault
	healthy    sample
	drawn      [][]float64 // inputs of healthy units
	drawnUnits int
	lots       func(lot, batch int) (float64, bool) // what is known of the lots of each unit; nil: nothing
	scorers    map[string]*scorer
}

// bound is a model and what reads it.
type bound struct {
	model  *build.Model
	reader *spread.Reader
}

// sample is simulated healthy units.
type sample struct {
	points [][]float64 // loaded readings without the instruments' errors, SI
	ways   []int
}

// newOracle predicts what healthy and faulty units read.
func newOracle(ctx context.Context, m *build.Model, o Options) (*oracle, error) {
	k := &oracle{model: m, seed: o.Seed, units: o.Units, reader: spread.NewReader(m), scorers: map[string]*scorer{}}
	if k.units <= 0 {
		k.units = faultyUnits
	}
	k.faults = partFaults(m)
	trims, pins := trimFaults(m.Build)
	k.faults = append(append(append(k.faults, trims...), readingFaults(m)...), other())
	for _, p := range pins {
		pinned, err := m.Build.Pinned(p.trim, p.position).Compile()
		if err != nil {
			return nil, err
		}
		k.pinned = append(k.pinned, bound{pinned, spread.NewReader(pinned)})
	}
	k.weigh()
	k.healthy = k.simulate(nil, max(healthyUnits, k.units))
	k.standardise()
	return k, k.paint(ctx, o)
}

// knowing predicts what units of a batch read of whose lots something is known.
// The scale stays.
func (k *oracle) knowing(ctx context.Context, lots func(lot, batch int) (float64, bool), o Options) (*oracle, error) {
	known := *k
	known.lots, known.scorers = lots, map[string]*scorer{}
	known.drawn, known.drawnUnits = nil, 0
	known.healthy = known.simulate(nil, max(healthyUnits, k.units))
	return &known, known.paint(ctx, o)
}

// scorer is the one for readings at some points.
func (k *oracle) scorer(read []int) *scorer {
	key := fmt.Sprint(read)
	if k.scorers[key] == nil {
		k.scorers[key] = newScorer(k.pictures, read)
	}
	return k.scorers[key]
}

// weigh gives every fault its prior, and then leaves out those that no reading
// follows from: they look like a healthy unit, and their share is put to it.
func (k *oracle) weigh() {
	classes := make([]Class, len(k.faults))
	for i, f := range k.faults {
		classes[i] = f.class
	}
	seen := make([]bool, len(k.model.Inputs))
	for _, i := range k.reader.Inputs() {
		seen[i] = true
	}
	prior := priors(classes)
	healthy := 1.0
	var faults []*fault
	list := []float64{0}
	for i, f := range k.faults {
		if len(f.inputs) > 0 && !touches(f, seen) {
			continue
		}
		faults, list = append(faults, f), append(list, prior[i])
		healthy -= prior[i]
	}
	list[0] = healthy
	k.faults, k.prior = faults, list
}

func touches(f *fault, seen []bool) bool {
	for i := range f.inputs {
		if seen[i] {
			return true
		}
	}
	return false
}

// source draws each unit with lots of its own, since nobody knows the lots of a
// single one; or with lots from what is known of them.
func (k *oracle) source() scatter.Source { return scatter.Source{Seed: k.seed, Units: 1, Lots: k.lots} }

// simulate reads units under a fault; nil is none. The healthy draws are kept:
// a fault draws anew only what it changes.
func (k *oracle) simulate(f *fault, units int) sample {
	model, reader := k.at(f)
	in := k.drawn
	if model != k.model || len(in) == 0 || units > k.drawnUnits {
		in = reader.Draw(k.source(), model.Inputs, units)
	}
	if model == k.model && units > k.drawnUnits {
		k.drawn, k.drawnUnits = in, units
	}
	in = slices.Clone(in)
	for i, column := range in {
		if column != nil {
			in[i] = column[:units]
		}
	}
	if f != nil {
		for i, input := range f.inputs {
			if in[i] != nil {
				in[i] = make([]float64, units)
				k.source().Fill(in[i], input.Column, 0)
			}
		}
	}
	r := reader.Read(in, units)
	return sample{shown(model, r.Points), ways(r.Trims, units)}
}

// at is the model a fault is seen in, and its reader.
func (k *oracle) at(f *fault) (*build.Model, *spread.Reader) {
	if f != nil && f.pin >= 0 {
		return k.pinned[f.pin].model, k.pinned[f.pin].reader
	}
	return k.model, k.reader
}

// faulted is a model's inputs with what a fault changes.
func (f *fault) faulted(inputs []build.Input) []build.Input {
	inputs = slices.Clone(inputs)
	for i, in := range f.inputs {
		inputs[i] = in
	}
	return inputs
}

// shown is what instruments show of simulated readings, in their place: 0 for
// what has no finite value, and 0 for a frequency whose level, read in the same
// stage, is less than the counter needs.
func shown(m *build.Model, points [][]float64) [][]float64 {
	for _, column := range points {
		for u, x := range column {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				column[u] = 0
			}
		}
	}
	for i, p := range m.Points {
		least := p.Instrument.MinimumLevel
		if least == 0 || p.Unit.Dimension != quantity.Hertz.Dimension {
			continue
		}
		level := slices.IndexFunc(m.Points, func(q build.Point) bool { return q.Stage == p.Stage && q.Stage.Kind.Points[q.Index].Name == "level" })
		if level < 0 {
			continue
		}
		for u, x := range points[level] {
			if x < least {
				points[i][u] = 0
			}
		}
	}
	return points
}

// ways numbers how each unit's trims ended.
func ways(trims [][]int8, units int) []int {
	list := make([]int, units)
	for _, column := range trims {
		for i, end := range column {
			list[i] = 3*list[i] + int(end+3)%3 // 0 where all reached
		}
	}
	return list
}

// reached are the units whose trims all reached; all, if too few did.
func (s sample) reached() []int {
	var list, all []int
	for i, w := range s.ways {
		all = append(all, i)
		if w == 0 {
			list = append(list, i)
		}
	}
	if len(list) < fewest {
		return all
	}
	return list
}

// standardise finds the scale of each reading: that of healthy units whose
// trims reached.
func (k *oracle) standardise() {
	units := k.healthy.reached()
	k.centre = means(k.healthy.points, units)
	noise := k.noise(k.healthy.points)
	for i, column := range k.healthy.points {
		var sum float64
		for _, u := range units {
			sum += (column[u] - k.centre[i]) * (column[u] - k.centre[i])
		}
		sd := math.Sqrt(sum/float64(len(units)-1) + noise[i]*noise[i])
		if !(sd > 0) {
			sd = math.Max(math.Abs(k.centre[i]), 1)
		}
		k.scale = append(k.scale, sd)
	}
}

// noise is the standard deviation of each instrument's error over some readings.
func (k *oracle) noise(points [][]float64) []float64 {
	list := make([]float64, len(points))
	for i, column := range points {
		var sum float64
		for _, x := range column {
			u := bench.Uncertainty(k.model.Points[i].Instrument, x) / 2
			sum += u * u
		}
		list[i] = math.Sqrt(sum / float64(len(column)))
	}
	return list
}

// picture is what simulated units read, in scale.
func (k *oracle) picture(s sample) *picture {
	noise := k.noise(s.points)
	for i := range noise {
		noise[i] /= k.scale[i]
	}
	return newPicture(k.scaled(s.points), s.ways, noise)
}

// scaled puts columns into the scale of the pictures.
func (k *oracle) scaled(points [][]float64) [][]float64 {
	out := make([][]float64, len(points))
	for i, column := range points {
		out[i] = make([]float64, len(column))
		for u, y := range column {
			out[i][u] = (y - k.centre[i]) / k.scale[i]
		}
	}
	return out
}

// misread is the healthy picture with readings on a wrong range or in a wrong
// row. What is written at point i is factor·y of the point it comes from, so in
// scale it is a·z + b.
func (k *oracle) misread(f *fault) *picture {
	n := len(k.centre)
	from, a, b := make([]int, n), make([]float64, n), make([]float64, n)
	for i := range n {
		factor, source := f.writes(i)
		from[i] = source
		a[i] = factor * k.scale[source] / k.scale[i]
		b[i] = (factor*k.centre[source] - k.centre[i]) / k.scale[i]
	}
	p := &picture{}
	for _, d := range k.pictures[0].parts {
		mean, cov := make([]float64, n), mat.NewSymDense(n, nil)
		for i := range n {
			mean[i] = a[i]*d.mean[from[i]] + b[i]
			for j := range i + 1 {
				cov.SetSym(i, j, a[i]*a[j]*d.cov.At(from[i], from[j]))
			}
		}
		p.parts = append(p.parts, normal{d.weight, mean, cov})
	}
	p.overall()
	return p
}

// paint makes the picture of every hypothesis.
func (k *oracle) paint(ctx context.Context, o Options) error {
	k.pictures = make([]*picture, len(k.faults)+1)
	k.pictures[0] = k.picture(k.healthy)
	var next, done atomic.Int64
	var wait sync.WaitGroup
	for range min(max(1, runtime.GOMAXPROCS(0)), len(k.faults)) {
		wait.Add(1)
		go func() {
			defer wait.Done()
			for ctx.Err() == nil {
				i := int(next.Add(1)) - 1
				if i >= len(k.faults) {
					return
				}
				k.pictures[i+1] = k.paintFault(k.faults[i])
				if o.Progress != nil {
					o.Progress(int(done.Add(1)), len(k.faults))
				}
			}
		}()
	}
	wait.Wait()
	return ctx.Err()
}

func (k *oracle) paintFault(f *fault) *picture {
	switch {
	case f.class == Other:
		return k.paintOther()
	case f.measured():
		return k.misread(f)
	}
	return k.picture(k.simulate(f, k.units))
}

// inScale puts readings in SI into the scale of the pictures; NaN stays.
func (k *oracle) inScale(readings []float64) []float64 {
	list := make([]float64, len(readings))
	for i, x := range readings {
		list[i] = (x - k.centre[i]) / k.scale[i]
	}
	return list
}
