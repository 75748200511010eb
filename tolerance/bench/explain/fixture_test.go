package explain

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"sync"
	"testing"

	"batchwright/data"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
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

// fitted says how the openings of each example are filled: as `pick` fills them
// with 2000 units (seed 1), written down to save its time.
var fitted = map[string][]want{
	"lantern": {
		{"powdered-iron-toroid", 0.05, "1.8 mH"}, {"polystyrene", 0.05, "220 pF"},
		{"film-trimmer", 0.1, "4..20 pF"}, {"x7r", 0.2, "2.2 nF"},
	},
	"nightowl": {
		{"air-core", 0.02, "10 uH"}, {"polystyrene", 0.05, "1 nF"}, {"c0g", 0.02, "300 pF"}, {"x7r", 0.2, "47 nF"},
	},
	"shoreline": {
		{"air-core", 0.02, "2.2 mH"}, {"c0g", 0.02, "680 pF"}, {"ceramic-trimmer", 0.1, "5..60 pF"}, {"x7r", 0.1, "10 nF"},
	},
}

// want is what an opening is filled with.
type want struct {
	family    string
	tolerance float64
	text      string
}

var fixtures = sync.OnceValues(func() ([]fixture, error) {
	var list []fixture
	for _, name := range []string{"lantern", "nightowl", "shoreline"} {
		text, err := data.Examples.ReadFile("examples/" + name + ".yaml")
		if err != nil {
			return nil, err
		}
		f, err := fit(name, string(text), fitted[name])
		if err != nil {
			return nil, err
		}
		list = append(list, f)
	}
	return list, nil
})

// fit reads a build and fills its openings.
func fit(name, text string, wanted []want) (fixture, error) {
	b, err := build.Read(name+".yaml", []byte(text), nil)
	if err != nil {
		return fixture{}, err
	}
	var choice []build.Fitting
	for i, o := range b.Openings {
		all := b.Fittings(o)
		k := slices.IndexFunc(all, func(f build.Fitting) bool {
			p := f.Pieces[0]
			return p.Family == wanted[i].family && p.Tolerance == wanted[i].tolerance && f.Text == wanted[i].text
		})
		if k < 0 {
			return fixture{}, fmt.Errorf("%s is not filled with %v", o.Positions[0], wanted[i])
		}
		choice = append(choice, all[k])
	}
	if b, err = b.Fit(choice); err != nil {
		return fixture{}, err
	}
	return newFixture(name, b)
}

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
	if fa != nil {
		model, _ = f.x.at(fa)
		inputs = fa.faulted(model.Inputs)
	}
	source := scatter.Source{Seed: 7_000_000 + seed, Units: units, Lots: lots}
	reader := spread.NewReader(model)
	columns := shown(model, reader.Read(reader.Draw(source, inputs, units), units).Points)
	random := rand.New(rand.NewPCG(seed, 77))
	for i, column := range columns {
		in := model.Points[i].Instrument
		gain := in.Accuracy * (2*random.Float64() - 1)
		for u := range column {
			column[u] += gain*column[u] + in.Floor*(2*random.Float64()-1)
		}
	}
	list := make([][]float64, units)
	for u := range list {
		for i, column := range columns {
			if fa != nil {
				factor, of := fa.writes(i)
				list[u] = append(list[u], factor*columns[of][u])
				continue
			}
			list[u] = append(list[u], column[u])
		}
	}
	return list
}

// rank says at which place among what can be told apart the true hypothesis is;
// far down if it is not named.
func (f fixture) rank(u Unit, truth int) int {
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

// filled is a sheet with the readings of some units, numbered from 1.
func filled(f fixture, units [][]float64) bench.Filled {
	out := bench.Filled{Points: pointNames(f.model)}
	for u, y := range units {
		v := make([]spread.Figure, len(y))
		for i := range y {
			v[i] = spread.Figure(y[i])
		}
		out.Units = append(out.Units, bench.FilledUnit{Unit: u + 1, Values: v})
	}
	return out
}

// batch reviews units as far as what they say together.
func (f fixture) batch(t testing.TB, y [][]float64) Batch {
	t.Helper()
	r, all, err := f.x.alone(context.Background(), filled(f, y))
	if err != nil {
		t.Fatal(err)
	}
	f.x.together(r, all)
	return r.Batch
}
