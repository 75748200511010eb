package exact

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

// graded is a problem like a shop's: each line has grades from wide and cheap
// to narrow and dear, with a nominal shift of its own each, and the demands
// weigh the lines differently. merge > 0 lets lines share offers.
func graded(seed uint64, lines, options, demands int, worst bool) *Problem {
	r := rand.New(rand.NewPCG(seed, 23))
	p := &Problem{Base: 100}
	typical := make([]Effect, demands)
	weights := make([]float64, demands)
	for range lines {
		for q := range weights {
			weights[q] = r.NormFloat64()
		}
		var l Line
		price := 5 + 35*r.Float64() // cents
		for j := range options {
			spread := math.Exp(-3 * float64(j) / float64(options-1) * (0.8 + 0.4*r.Float64()))
			o := Option{Alone: true, Floor: int64(price*math.Pow(spread, -0.7)) + int64(r.IntN(3))}
			shift := 0.3 * spread * r.NormFloat64()
			for q := range weights {
				s := spread * weights[q]
				o.Effects = append(o.Effects, Effect{Mean: shift * weights[q], Variance: s * s / 9, Half: math.Abs(s)})
			}
			if j == options/2 {
				for q := range typical {
					typical[q].add(o.Effects[q])
				}
			}
			l.Options = append(l.Options, o)
		}
		p.Lines = append(p.Lines, l)
	}
	for _, t := range typical {
		d := Demand{Share: 0.99, WorstCase: worst}
		reach := 2.6 * math.Sqrt(t.Variance)
		if worst {
			reach = t.Half
		}
		d.Low, d.High = t.Mean-reach, t.Mean+reach
		p.Demands = append(p.Demands, d)
	}
	return p
}

// BenchmarkCheapest reports, besides the time, the share of instances proved
// within the default limits, the partial choices cut and the longest time. Of
// 20 lines with 40 options and three demands each of the 20 instances is to be
// proved in less than 2 s on one core:
//
//	go test -run '^$' -bench 'Cheapest/20x40/.*=3' -benchtime 20x -cpu 1
func BenchmarkCheapest(b *testing.B) {
	for _, size := range []struct{ lines, options int }{{4, 12}, {8, 10}, {12, 10}, {20, 40}} {
		for demands := 1; demands <= 3; demands++ {
			for _, worst := range []bool{false, true} {
				kind := "share"
				if worst {
					kind = "worst"
				}
				b.Run(fmt.Sprintf("%dx%d/%s=%d", size.lines, size.options, kind, demands), func(b *testing.B) {
					proved, cut, longest := 0, 0, time.Duration(0)
					for n := range b.N {
						start := time.Now()
						out, err := graded(uint64(n%20), size.lines, size.options, demands, worst).Cheapest(context.Background(), Limits{})
						if err != nil {
							b.Fatal(err)
						}
						if out.Proved {
							proved++
						}
						cut += out.CutByBound
						longest = max(longest, time.Since(start))
					}
					b.ReportMetric(float64(proved)/float64(b.N), "proved")
					b.ReportMetric(float64(cut)/float64(b.N), "cut/op")
					b.ReportMetric(float64(longest.Microseconds())/1e3, "max-ms")
				})
			}
		}
	}
}
