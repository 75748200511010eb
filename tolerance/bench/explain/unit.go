package explain

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
)

// improbable is the share of healthy units that are further from the middle
// than one that is inside every window may be.
const improbable = 0.003

// least is the probability below which a suspect is not named, unless it is
// among the first three.
const least = 0.01

// unit reviews one unit's readings, NaN where nothing was read.
func (x *explainer) unit(number int, readings []float64) Unit {
	u := Unit{Unit: number, Suspects: []Suspect{}}
	scaled := x.inScale(readings)
	var read []int
	for i, y := range readings {
		u.Points = append(u.Points, x.point(i, y, scaled[i]))
		if !math.IsNaN(y) {
			read = append(read, i)
		}
	}
	if len(read) > 0 {
		u.Distance = spread.Figure(x.distance(read, scaled))
	}
	u.DistanceLimit = spread.Figure(x.limit(read))
	u.Verdict = u.verdict(len(read) == len(readings))
	x.accuse(&u, x.oracle, readings)
	return u
}

// accuse weighs the hypotheses by what an oracle predicts, and names suspects.
func (x *explainer) accuse(u *Unit, k *oracle, readings []float64) {
	var read []int
	for i, y := range readings {
		u.Points[i].Predicted = nil
		if !math.IsNaN(y) {
			read = append(read, i)
		}
	}
	probabilities := k.prior
	if len(read) > 0 {
		probabilities = posterior(k.prior, k.scorer(read).logarithms(k.inScale(readings)))
	}
	u.Healthy = spread.Figure(probabilities[0])
	u.Accused = !(probabilities[0] >= 0.5)
	u.Suspects, u.Further = []Suspect{}, nil
	if u.Accused || u.Verdict == Outside || u.Verdict == Improbable {
		x.suspect(u, k, read, probabilities)
	}
}

// point is the verdict on one reading.
func (x *explainer) point(i int, reading, scaled float64) UnitPoint {
	r := x.sheet[i]
	p := UnitPoint{Point: r.Point, Reading: spread.Figure(reading), Inside: true, Accepted: true, Score: spread.Figure(scaled)}
	if !math.IsNaN(reading) {
		p.Inside = within(r.Expected, reading)
		p.Accepted = r.Accept == nil || within(*r.Accept, reading)
	}
	return p
}

func within(l spread.Limits, reading float64) bool {
	// A window of which nothing is known excludes nothing.
	return !(reading < float64(l.Low)) && !(reading > float64(l.High))
}

// verdict is the worst that holds.
func (u *Unit) verdict(complete bool) Verdict {
	has := func(f func(UnitPoint) bool) bool { return slices.ContainsFunc(u.Points, f) }
	switch {
	case has(func(p UnitPoint) bool { return !p.Inside }):
		return Outside
	case !(u.Distance <= u.DistanceLimit):
		return Improbable
	case has(func(p UnitPoint) bool { return !p.Accepted }):
		return Misses
	case !complete:
		return Incomplete
	}
	return Inside
}

// distance is the Mahalanobis distance of some readings, in scale, from a
// healthy unit's means, over the healthy units whose trims reach.
func (x *explainer) distance(read []int, scaled []float64) float64 {
	s := x.scorer(read)
	return s.parts[0][0].distance(s.pick(scaled), make([]float64, len(read))) // the first way: every trim reached
}

// limit is the distance that a share `improbable` of simulated healthy units
// exceed, read with errors as large as their instruments may make.
func (x *explainer) limit(read []int) float64 {
	key := fmt.Sprint(read)
	if v, known := x.limits[key]; known || len(read) == 0 {
		return v
	}
	errors := x.errors()
	var distances []float64
	y := make([]float64, len(x.sheet))
	for _, u := range x.healthy.reached() {
		for i, column := range x.healthy.points {
			limit := math.Sqrt(3) * bench.Uncertainty(x.model.Points[i].Instrument, column[u]) / 2
			y[i] = column[u] + limit*errors[i][u]
		}
		distances = append(distances, x.distance(read, x.inScale(y)))
	}
	slices.Sort(distances)
	at := int(math.Ceil((1-improbable)*float64(len(distances)))) - 1
	x.limits[key] = distances[at]
	return distances[at]
}

// errors are draws of each instrument's error, uniform within ±1.
func (x *explainer) errors() [][]float64 {
	units := len(x.healthy.ways)
	list := make([][]float64, len(x.sheet))
	for i := range list {
		list[i] = make([]float64, units)
		scatter.Source{Seed: x.seed, Units: units}.Fill(list[i],
			scatter.Column{Shape: "uniform", Lot: -1, HalfWidth: 1, Stream: readingStream + uint64(i)}, 0)
	}
	return list
}

// readingStream numbers the draws of instruments' errors; those of parts follow
// from their names.
const readingStream = 1 << 40

// suspect names what may be wrong: hypotheses that the readings leave alike in
// one group, the groups in the order of their probability.
func (x *explainer) suspect(u *Unit, k *oracle, read []int, probabilities []float64) {
	var order []int // of hypotheses
	for h := 1; h < len(probabilities); h++ {
		order = append(order, h)
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(probabilities[b], probabilities[a]) })
	keep := 0
	for keep < len(order) && (keep < 3 || probabilities[order[keep]] >= least) {
		keep++
	}
	groups := k.group(order[:keep], read)
	sum := func(g []int) (p float64) {
		for _, h := range g {
			p += probabilities[h]
		}
		return p
	}
	slices.SortStableFunc(groups, func(a, b []int) int { return cmp.Compare(sum(b), sum(a)) })
	for n, g := range groups {
		for _, h := range g {
			f := x.faults[h-1]
			u.Suspects = append(u.Suspects, Suspect{Ref: f.ref, Fault: f.words, Class: f.class,
				Probability: spread.Figure(probabilities[h]), Group: n + 1})
		}
	}
	first := k.pictures[groups[0][0]]
	for i := range u.Points {
		v := spread.Figure(first.mean[i]*x.scale[i] + x.centre[i])
		u.Points[i].Predicted = &v
	}
	x.tell(u, groups, read, probabilities)
}

// alike is the distance of two predictions below which no reading tells them
// apart: that of their noise.
const alike = 1

// group puts together hypotheses, the most probable first, whose predictions at
// the points that were read are alike the first one's of a group.
func (k *oracle) group(order, read []int) [][]int {
	var groups [][]int
next:
	for _, h := range order {
		for i, g := range groups {
			if k.pictures[g[0]].at(read).apart(k.pictures[h].at(read)) < alike {
				groups[i] = append(g, h)
				continue next
			}
		}
		groups = append(groups, []int{h})
	}
	return groups
}

// at is a picture's mean and covariance at some of its points.
func (p *picture) at(read []int) *picture {
	if len(read) == len(p.mean) {
		return p
	}
	q := &picture{mean: make([]float64, len(read)), cov: mat.NewSymDense(len(read), nil)}
	for a, i := range read {
		q.mean[a] = p.mean[i]
		for b, j := range read[:a+1] {
			q.cov.SetSym(a, b, p.cov.At(i, j))
		}
	}
	return q
}
