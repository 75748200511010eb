package exact

import (
	"context"
	"encoding/json"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize/convex/lp"
)

// An instance is a problem in whole numbers: an option is its cost and, for
// each demand, mean and half width. Optimum is nil where nothing meets the
// demands.
type instance struct {
	Name    string
	Optimum *int64
	Limits  [][2]int64
	Lines   [][][]int64
}

func (n *instance) problem() *Problem {
	p := &Problem{}
	for _, l := range n.Limits {
		p.Demands = append(p.Demands, Demand{Low: float64(l[0]), High: float64(l[1]), WorstCase: true})
	}
	for _, line := range n.Lines {
		var l Line
		for _, figures := range line {
			o := Option{Floor: figures[0], Alone: true}
			for q := range n.Limits {
				o.Effects = append(o.Effects, Effect{Mean: float64(figures[1+2*q]), Half: float64(figures[2+2*q])})
			}
			l.Options = append(l.Options, o)
		}
		p.Lines = append(p.Lines, l)
	}
	return p
}

// The optima of testdata/worst-case.json are an integer-programming solver's
// (the file names it; testdata/make.py made it).
func TestCheapestEqualsSolver(t *testing.T) {
	raw, err := os.ReadFile("testdata/worst-case.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Instances []instance }
	if err := json.Unmarshal(raw, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Instances) < 24 {
		t.Fatalf("%d instances, expected 24 at least", len(file.Instances))
	}
	for _, n := range file.Instances {
		t.Run(n.Name, func(t *testing.T) {
			if testing.Short() && len(n.Lines) > 20 {
				t.Skip("larger than a short test")
			}
			out, err := n.problem().Cheapest(context.Background(), Limits{})
			switch {
			case err != nil:
				t.Fatal(err)
			case !out.Proved:
				t.Errorf("not proved: %+v", out)
			case n.Optimum == nil && out.Choice != nil:
				t.Errorf("found %d, the solver nothing", out.Cost)
			case n.Optimum != nil && (out.Choice == nil || out.Cost != *n.Optimum):
				t.Errorf("found %v at %d, the solver %d", out.Choice, out.Cost, *n.Optimum)
			}
		})
	}
}

// randomInstance draws costs to 40 and effects to some tens, with limits about
// what the middle options come to.
func randomInstance(seed uint64) *instance {
	r := rand.New(rand.NewPCG(seed, 31))
	n := &instance{}
	demands := 1 + r.IntN(2)
	means, halves := make([]int64, demands), make([]int64, demands)
	for range 2 + r.IntN(4) {
		var line [][]int64
		for range 2 + r.IntN(4) {
			figures := []int64{int64(1 + r.IntN(40))}
			for range demands {
				figures = append(figures, int64(r.IntN(21)-10), int64(5+r.IntN(60)/int(figures[0])))
			}
			line = append(line, figures)
		}
		for q := range demands {
			means[q] += line[0][1+2*q]
			halves[q] += line[0][2+2*q]
		}
		n.Lines = append(n.Lines, line)
	}
	for q := range demands {
		wide := int64(float64(halves[q]) * (0.8 + 2*r.Float64()))
		n.Limits = append(n.Limits, [2]int64{means[q] - wide, means[q] + wide})
	}
	return n
}

// relaxed solves an instance with its options free to be mixed, by gonum's
// simplex in standard form, a slack for each limit.
func (n *instance) relaxed() (value float64, x []float64, err error) {
	columns := 0
	for _, l := range n.Lines {
		columns += len(l)
	}
	slacks := 2 * len(n.Limits)
	rows := len(n.Lines) + slacks
	a, b, c := mat.NewDense(rows, columns+slacks, nil), make([]float64, rows), make([]float64, columns+slacks)
	at := 0
	for i, line := range n.Lines {
		b[i] = 1
		for _, figures := range line {
			c[at] = float64(figures[0])
			a.Set(i, at, 1)
			for q := range n.Limits {
				mean, half := float64(figures[1+2*q]), float64(figures[2+2*q])
				a.Set(len(n.Lines)+2*q, at, mean+half)
				a.Set(len(n.Lines)+2*q+1, at, half-mean)
			}
			at++
		}
	}
	for q, l := range n.Limits {
		for side, limit := range []int64{l[1], -l[0]} {
			k := 2*q + side
			a.Set(len(n.Lines)+k, columns+k, 1)
			b[len(n.Lines)+k] = float64(limit)
		}
	}
	value, x, err = lp.Simplex(c, a, b, 1e-10, nil)
	return value, slices.Clip(x)[:min(len(x), columns)], err
}

// The optimum is never below the linear relaxation's, and is it where the
// relaxation mixes nothing. The tableau of the search comes to the same bound.
func TestCheapestAgainstLinearRelaxation(t *testing.T) {
	above, whole, hopeless, failed := 0, 0, 0, 0
	for seed := range draws(2000) {
		n := randomInstance(seed)
		p := n.problem()
		out, err := p.Cheapest(context.Background(), Limits{})
		if err != nil || !out.Proved {
			t.Fatalf("seed %d: %v, %+v", seed, err, out)
		}
		value, x, err := n.relaxed()
		switch {
		case err == lp.ErrInfeasible:
			hopeless++
			if out.Choice != nil {
				t.Fatalf("seed %d: found %v where no mixture meets the limits", seed, out.Choice)
			}
			if bound := p.mixedBound(); !(bound > 1e12) {
				t.Fatalf("seed %d: tableau's bound %v where no mixture meets the limits", seed, bound)
			}
			continue
		case err != nil:
			failed++
			continue
		}
		if bound := p.mixedBound(); math.Abs(bound-value) > 1e-6*value {
			t.Fatalf("seed %d: tableau's bound %v, gonum's %v", seed, bound, value)
		}
		if out.Choice != nil && float64(out.Cost) < value-1e-6*value {
			t.Fatalf("seed %d: %v at %d, below the relaxation's %v", seed, out.Choice, out.Cost, value)
		}
		mixes := slices.ContainsFunc(x, func(v float64) bool { return v > 1e-9 && v < 1-1e-9 })
		switch {
		case mixes:
			above++
		case out.Choice == nil || math.Abs(float64(out.Cost)-value) > 1e-6*value:
			t.Fatalf("seed %d: %v at %d, but the relaxation mixes nothing at %v", seed, out.Choice, out.Cost, value)
		default:
			whole++
		}
	}
	t.Logf("%d mixed, %d whole, %d hopeless, %d not solved by gonum", above, whole, hopeless, failed)
	if above < 200 || whole < 150 || hopeless < 25 || failed > 20 {
		t.Errorf("%d mixed, %d whole, %d hopeless, %d not solved: the draw no longer covers all cases", above, whole, hopeless, failed)
	}
}

// mixedBound is the search's own bound by linear relaxation of the whole, where
// sums of floors above 1e12 are of no interest.
func (p *Problem) mixedBound() float64 {
	d := &dive{s: newSearch(p, Limits{}.filled()), want: 1, lattice: p.lattice(p.all()), dearest: 1e12, best: make([]int, len(p.Lines))}
	q := &piece{kept: p.all(), bound: math.Inf(-1), r: p.relax(p.all())}
	q.mixed = newTableau(q.r)
	d.mix(q)
	return q.bound
}
