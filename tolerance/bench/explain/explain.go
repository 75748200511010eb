// Package explain says what a filled test sheet means: which part is probably
// wrong on which unit, which buying lines are off, and what the units not built
// yet should come to. It knows nothing of workbooks.
//
// Every hypothesis is run through the equations of the whole build: as a block
// of simulated units with another part in place, trimmed as an assembler would,
// or with a trim left alone; readings on a wrong range or in a wrong row follow
// from healthy ones. What a unit then reads is a mixture of normal
// distributions, one for each way in which its trims end, and Bayes' theorem
// ranks the hypotheses. What is wrong with a unit is taken to be one thing.
package explain

import (
	"context"
	"fmt"
	"math"
	"strings"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// Options say how much is simulated.
type Options struct {
	Seed  uint64
	Units int // simulated under each fault; 0: 256
	Yield int // simulated of the units not read yet; 0: 20 000
	// Progress is called from several goroutines; nil: not called. It runs through
	// twice where a batch has narrowed its lots.
	Progress func(done, total int)
}

// Explain reviews what was read of some units of a batch. The model is that of
// the build as it is fitted; the sheet is the one that was filled. The error is
// the context's, or says which point the build does not have.
func Explain(ctx context.Context, m *build.Model, s bench.Sheet, f bench.Filled, o Options) (*Review, error) {
	x, err := newExplainer(ctx, m, s, f.Points, o)
	if err != nil {
		return nil, err
	}
	return x.review(ctx, f)
}

// explainer explains sheets of one build.
type explainer struct {
	*oracle
	options Options
	sheet   []bench.Reading // as Model.Points
	columns []int           // of Model.Points, by column of what was filled in
	limits  map[string]float64
	outputs map[*build.Model]*spread.Reader
	guesses map[int]guessed
	shares  *apportion
	felt    []lotLine
}

func newExplainer(ctx context.Context, m *build.Model, s bench.Sheet, points []string, o Options) (*explainer, error) {
	x := &explainer{options: o, limits: map[string]float64{}, outputs: map[*build.Model]*spread.Reader{}, guesses: map[int]guessed{}}
	if len(m.Points) == 0 {
		return nil, fmt.Errorf("explain: the build has no test point")
	}
	at := map[string]int{}
	for i, p := range m.Points {
		at[pointName(p)] = i
	}
	taken := map[string]bool{}
	for _, p := range points {
		i, there := at[p]
		if !there || taken[p] {
			return nil, fmt.Errorf("explain: point %q is not one of the build's, or is there twice", p)
		}
		taken[p] = true
		x.columns = append(x.columns, i)
	}
	x.sheet = make([]bench.Reading, len(m.Points))
	for _, r := range s.Readings {
		i, there := at[r.Point]
		if !there {
			return nil, fmt.Errorf("explain: the sheet reads %q, which is no point of the build", r.Point)
		}
		x.sheet[i] = r
	}
	for i, r := range x.sheet {
		if r.Point == "" {
			return nil, fmt.Errorf("explain: the sheet does not read %s", pointName(m.Points[i]))
		}
	}
	var err error
	x.oracle, err = newOracle(ctx, m, o)
	return x, err
}

// review explains each unit by itself, then the batch, then each unit again with
// what the batch says of the lots, and the units not read yet.
func (x *explainer) review(ctx context.Context, f bench.Filled) (*Review, error) {
	r, all, err := x.alone(ctx, f)
	if err != nil {
		return nil, err
	}
	if p := x.together(r, all); p != nil && p.mean != nil {
		if err := x.again(ctx, r, p, all); err != nil {
			return nil, err
		}
		if err := x.rest(ctx, r, p); err != nil {
			return nil, err
		}
	}
	r.note()
	return r, nil
}

// note remarks on a batch of which most units are accused: one fault in each is
// less likely than one in all.
func (r *Review) note() {
	accused, most := 0, ""
	count := map[string]int{}
	for _, u := range r.Units {
		if !u.Accused {
			continue
		}
		accused++
		name := strings.TrimSpace(u.Suspects[0].Ref + " " + u.Suspects[0].Fault)
		if count[name]++; count[name] > count[most] {
			most = name
		}
	}
	if 2*accused > len(r.Units) && len(r.Units) >= enoughUnits {
		r.Notes = append(r.Notes, fmt.Sprintf("%d of %d units are accused, so their readings count in the batch's averages; look first for what they share, such as a wrong reel: the first suspect in %d of them is %s",
			accused, len(r.Units), count[most], most))
	}
}

// alone explains each unit by itself; it also returns the readings.
func (x *explainer) alone(ctx context.Context, f bench.Filled) (*Review, [][]float64, error) {
	r := &Review{Units: []Unit{}, Notes: []string{}, Good: x.good()}
	r.Batch.Points, r.Batch.Lots, r.Batch.Unclear = []BatchPoint{}, []Lot{}, []Unclear{}
	var all [][]float64
	for _, u := range f.Units {
		if len(u.Values) != len(f.Points) {
			return nil, nil, fmt.Errorf("explain: unit %d has %d readings at %d points", u.Unit, len(u.Values), len(f.Points))
		}
		readings := x.readings(u)
		all = append(all, readings)
		r.Units = append(r.Units, x.unit(u.Unit, readings))
		if err := ctx.Err(); err != nil {
			return nil, nil, err
		}
	}
	return r, all, nil
}

// readings are a unit's as Model.Points; NaN where nothing was read.
func (x *explainer) readings(u bench.FilledUnit) []float64 {
	list := make([]float64, len(x.sheet))
	for i := range list {
		list[i] = math.NaN()
	}
	for k, i := range x.columns {
		if v := float64(u.Values[k]); !math.IsInf(v, 0) {
			list[i] = v
		}
	}
	return list
}
