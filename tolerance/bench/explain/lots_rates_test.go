package explain

import (
	"context"
	"fmt"
	"math"
	"testing"

	"batchwright/tolerance/bench"
	"batchwright/tolerance/spread"
)

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

func TestMeasureLots(t *testing.T) {
	for _, f := range examples(t) {
		f.x.options.Yield = 24
		// how well each lot is seen by 24 healthy units
		r := &Review{}
		var all [][]float64
		for _, y := range f.measure(nil, 24, 1, nil) {
			all = append(all, y)
			r.Units = append(r.Units, Unit{Unit: len(all)})
		}
		g := f.x.gather(r, all)
		f.x.within()
		for i := range f.x.sheet {
			g.read = append(g.read, i)
		}
		p := f.x.learn(g)
		for k, l := range p.lots {
			sd := math.Sqrt(p.cov.At(k, k))
			if sd > 0.6 {
				continue
			}
			found, covered, near := 0, 0, 0
			const n = 40
			for b := range n {
				sign := 2.0
				if b%2 == 1 {
					sign = -2
				}
				y := f.measure(nil, 24, uint64(100+b), func(lot, batch int) (float64, bool) { return sign, lot == l.number })
				rv, err := f.x.review(context.Background(), filled(f, y))
				if err != nil {
					t.Fatal(err)
				}
				for _, x := range rv.Batch.Lots {
					if x.Refs[0] == f.model.Inputs[l.inputs[0]].Ref && x.Parameter == f.model.Inputs[l.inputs[0]].Parameter {
						found++
						if float64(x.Deviation95[0]) <= sign && float64(x.Deviation95[1]) >= sign {
							covered++
						}
					}
				}
				near += len(rv.Batch.Unclear)
			}
			fmt.Println(f.name, f.x.lotName(l), "sd", sd, "found", float64(found)/n, "covered", float64(covered)/n, "unclear", near)
		}
	}
}
