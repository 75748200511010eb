package spread

import (
	"context"
	"runtime"
	"sync"
	"sync/atomic"

	"batchwright/tolerance/scatter"
)

// run is how many units one job simulates: sums are kept per run and merged in
// the order of the runs, so that the number of workers changes no bit.
const run = 16 * lanes

// Options say how much is simulated.
type Options struct {
	Seed     uint64
	Units    int                   // at least; rounded up to whole batches
	Workers  int                   // 0: one for each processor
	Progress func(done, total int) // called from several goroutines; nil: not called
	// Lots gives what is known of a batch's lots: see scatter.Source.
	Lots func(lot, batch int) (g float64, ok bool)
}

// batches is how many whole batches hold the units asked for.
func (o Options) batches(units int) int { return (o.Units + units - 1) / units }

// sample is what a simulation leaves behind: sums, histograms and, for each
// target, which units comply; no unit's values but where they are asked for.
type sample struct {
	nodes     *nodes
	batches   int
	units     int // in all
	nominal   []float64
	outputs   []summary   // as nodes.outputs
	settings  []summary   // as nodes.trims
	points    []summary   // over good units; as the columns from nodes.points
	short     [][2]int    // of each trim: units that ran out at setting 0, at 1
	near      [][2]int    // and those that reached within a tenth of setting 0, of 1
	happened  [][]int     // [of nodes.findings][batch] in how many units; nil: in none
	untrimmed []int       // of nodes.findings: units in which a trim it depends on did not reach
	comply    [][]bool    // [of nodes.targets][unit]
	good      []bool      // units that meet every one of those
	values    [][]float64 // [column][unit] of nodes.kept; NaN where a trim did not reach
}

// summary is the distribution of one column.
type summary struct {
	centre    float64 // of the histogram
	moments   Moments
	histogram *Histogram
}

// job is one run's own results.
type job struct {
	outputs, settings, points []Moments
	short, near               [][2]int
	happened                  [][]batchCount // of nodes.findings
	untrimmed                 []int
}

// simulate runs whole batches through the program. It stops early, with the
// context's error, when the context ends.
func simulate(ctx context.Context, n *nodes, o Options) (*sample, error) {
	units := n.model.Build.Units
	s := newSample(n, o.batches(units), units)
	jobs := make([]job, (s.units+run-1)/run)
	workers := o.Workers
	if workers == 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	var next, done atomic.Int64
	var wait sync.WaitGroup
	var merge sync.Mutex
	for range min(workers, len(jobs)) {
		wait.Add(1)
		go func() {
			defer wait.Done()
			w := s.newWorker(scatter.Source{Seed: o.Seed, Units: units, Lots: o.Lots})
			for ctx.Err() == nil {
				i := int(next.Add(1)) - 1
				if i >= len(jobs) {
					break
				}
				jobs[i] = w.job(i * run)
				if o.Progress != nil {
					o.Progress(int(done.Add(1)), len(jobs))
				}
			}
			merge.Lock()
			defer merge.Unlock()
			w.mergeHistograms(s)
		}()
	}
	wait.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	s.mergeJobs(jobs)
	return s, nil
}

func newSample(n *nodes, batches, units int) *sample {
	s := &sample{nodes: n, batches: batches, units: batches * units, nominal: n.nominal()}
	for column := range n.outputs {
		s.outputs = append(s.outputs, newSummary(s.nominal[column]))
	}
	for k := range n.trims {
		s.settings = append(s.settings, newSummary(s.nominal[n.trimColumn(k)]))
	}
	for column := n.points; column < n.happen; column++ {
		s.points = append(s.points, newSummary(s.nominal[column]))
	}
	s.short, s.near = make([][2]int, len(n.trims)), make([][2]int, len(n.trims))
	s.happened, s.untrimmed = make([][]int, len(n.findings)), make([]int, len(n.findings))
	s.comply = make([][]bool, len(n.targets))
	for i := range s.comply {
		s.comply[i] = make([]bool, s.units)
	}
	s.good = make([]bool, s.units)
	s.values = make([][]float64, len(n.outputs))
	for _, column := range n.kept {
		s.values[column] = make([]float64, s.units)
	}
	return s
}

// newSummary is an empty summary about a nominal value.
func newSummary(nominal float64) summary {
	if !finite(nominal) {
		nominal = 0
	}
	return summary{centre: nominal, histogram: NewHistogram(nominal)}
}

// mergeJobs joins the runs' sums in their order.
func (s *sample) mergeJobs(jobs []job) {
	for _, j := range jobs {
		mergeMoments(s.outputs, j.outputs)
		mergeMoments(s.settings, j.settings)
		mergeMoments(s.points, j.points)
		for i := range j.short {
			s.short[i][0] += j.short[i][0]
			s.short[i][1] += j.short[i][1]
			s.near[i][0] += j.near[i][0]
			s.near[i][1] += j.near[i][1]
		}
		s.mergeFindings(j)
	}
}

func mergeMoments(into []summary, from []Moments) {
	for i := range from {
		into[i].moments.Merge(&from[i])
	}
}
