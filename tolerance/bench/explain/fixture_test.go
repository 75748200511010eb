package explain

import (
	"context"
	"math"
	"math/rand/v2"
	"sync"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/spread"
)

// fixture is an example, fitted, with its sheet and what explains it.
type fixture struct {
	name  string
	model *build.Model
	sheet bench.Sheet
	x     *explainer
}

var fixtures = sync.OnceValues(func() ([]fixture, error) {
	var list []fixture
	for _, name := range []string{"lantern", "nightowl", "shoreline"} {
		text, err := data.Examples.ReadFile("examples/" + name + ".yaml")
		if err != nil {
			return nil, err
		}
		open, err := build.Read(name+".yaml", text, nil)
		if err != nil {
			return nil, err
		}
		_, b, err := pick.Choose(context.Background(), open, pick.Options{Seed: 1, Units: 400})
		if err != nil {
			return nil, err
		}
		f, err := newFixture(name, b)
		if err != nil {
			return nil, err
		}
		list = append(list, f)
	}
	return list, nil
})

func newFixture(name string, b *build.Build) (fixture, error) {
	f := fixture{name: name}
	var err error
	if f.model, err = b.Compile(); err != nil {
		return f, err
	}
	r, err := spread.Analyse(context.Background(), f.model, spread.Options{Seed: 1, Units: 4000})
	if err != nil {
		return f, err
	}
	f.sheet = bench.NewSheet(f.model, r)
	f.x, err = newExplainer(context.Background(), f.model, f.sheet, pointNames(f.model), Options{Seed: 1})
	return f, err
}

func pointNames(m *build.Model) []string {
	var list []string
	for _, p := range m.Points {
		list = append(list, pointName(p))
	}
	return list
}

// examples are the three examples that the program carries.
func examples(t testing.TB) []fixture {
	t.Helper()
	list, err := fixtures()
	if err != nil {
		t.Fatal(err)
	}
	return list
}

// measure draws one batch of units under a fault, nil for none, from another
// seed than the explainer's, and reads them as a bench would: an instrument's
// error of gain is the same for every unit, that of its floor is not.
func (f fixture) measure(fa *fault, units int, seed uint64, lots func(lot, batch int) (float64, bool)) [][]float64 {
	model, inputs := f.model, f.model.Inputs
	if fa != nil && fa.pin >= 0 {
		model = f.x.pinned[fa.pin].model
		inputs = model.Inputs
	}
	if fa != nil {
		inputs = append([]build.Input(nil), inputs...)
		for i, in := range fa.inputs {
			inputs[i] = in
		}
	}
	source := scatter.Source{Seed: 7_000_000 + seed, Units: units, Lots: lots}
	columns := finite(spread.NewReader(model).Read(source, inputs, units).Points)
	random := rand.New(rand.NewPCG(seed, 77))
	for i, column := range columns {
		in := model.Points[i].Instrument
		gain := in.Accuracy * (2*random.Float64() - 1)
		for u := range column {
			column[u] += gain*column[u] + in.Floor*(2*random.Float64()-1)
		}
	}
	if fa != nil {
		columns = fa.apply(columns)
	}
	list := make([][]float64, units)
	for u := range list {
		for _, column := range columns {
			list[u] = append(list[u], column[u])
		}
	}
	return list
}

// rank says at which place among what can be told apart the true hypothesis is;
// far down if it is not named.
func (f fixture) rank(u Unit, truth int, alike float64) int {
	by := map[string]int{}
	for h, fa := range f.x.faults {
		by[fa.name()] = h + 1
	}
	var ahead []*picture
	for _, s := range u.Suspects {
		h := by[s.Ref+" "+s.Fault]
		p := f.x.pictures[h]
		if h == truth || p.apart(f.x.pictures[truth]) < alike {
			return len(ahead) + 1
		}
		known := false
		for _, q := range ahead {
			known = known || p.apart(q) < alike
		}
		if !known {
			ahead = append(ahead, p)
		}
	}
	return math.MaxInt
}
