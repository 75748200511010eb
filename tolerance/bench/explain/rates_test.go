package explain

import (
	"fmt"
	"math/rand/v2"
	"testing"
	"time"
)

func TestMeasureRates(t *testing.T) {
	t0 := time.Now()
	list := examples(t)
	fmt.Println("fixtures", time.Since(t0))
	for _, alike := range []float64{1, 3} {
		first, third, seen, exact, total := 0, 0, 0, 0, 0
		classes := map[Class][3]int{}
		random := rand.New(rand.NewPCG(1, 2))
		for n := range 500 {
			f := list[n%3]
			h := 1 + random.IntN(len(f.x.faults))
			fa := f.x.faults[h-1]
			total++
			y := f.measure(fa, 1, uint64(n), nil)[0]
			if f.x.pictures[h].apart(f.x.pictures[0]) <= 3 {
				continue
			}
			u := f.x.unit(1, y)
			seen++
			r := f.rank(u, h, alike)
			if len(u.Suspects) > 0 && u.Suspects[0].Ref+" "+u.Suspects[0].Fault == fa.name() {
				exact++
			}
			c := classes[fa.class]
			c[2]++
			if r == 1 {
				first++
				c[0]++
			}
			if r <= 3 {
				third++
				c[1]++
			} else if alike == 3 {
				fmt.Printf("%s %s: %s %s apart %.1f healthy %.3g", f.name, fa.name(), fa.class, u.Verdict, f.x.pictures[h].apart(f.x.pictures[0]), u.Healthy)
				for _, s := range u.Suspects[:min(3, len(u.Suspects))] {
					fmt.Printf(" | %s %s %.3g", s.Ref, s.Fault, s.Probability)
				}
				fmt.Println()
			}
			classes[fa.class] = c
		}
		fmt.Println("alike", alike, "total", total, "seen", seen, "first", float64(first)/float64(seen), "three", float64(third)/float64(seen), "exact", float64(exact)/float64(seen), classes)
	}
	for _, f := range list {
		verdicts := map[Verdict]int{}
		accused := 0
		n := 0
		for b := range 60 {
			for _, y := range f.measure(nil, 24, uint64(9000+b), nil) {
				u := f.x.unit(1, y)
				verdicts[u.Verdict]++
				n++
				if u.Accused {
					accused++
				}
			}
		}
		fmt.Println(f.name, "faults", len(f.x.faults), "healthy", n, "accused", accused, verdicts)
	}
	fmt.Println("all", time.Since(t0))
}
