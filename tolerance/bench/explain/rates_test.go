package explain

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// draw picks the fault of the n-th unit: every other time each hypothesis is as
// probable as another, in between each class is.
func (f fixture) draw(n int, random *rand.Rand) int {
	if n%2 == 0 {
		return 1 + random.IntN(len(f.x.faults)-1) // not the last, which is none in particular
	}
	of := map[Class][]int{}
	var classes []Class
	for i, fa := range f.x.faults[:len(f.x.faults)-1] {
		if of[fa.class] == nil {
			classes = append(classes, fa.class)
		}
		of[fa.class] = append(of[fa.class], i+1)
	}
	list := of[classes[random.IntN(len(classes))]]
	return list[random.IntN(len(list))]
}

// tally counts how often the true fault is found.
type tally struct{ seen, first, three, exact int }

func (c *tally) add(rank int, exact bool) {
	c.seen++
	if rank == 1 {
		c.first++
	}
	if rank <= 3 {
		c.three++
	}
	if exact {
		c.exact++
	}
}

func (c tally) check(t *testing.T, what string) {
	t.Helper()
	n := float64(c.seen)
	t.Logf("%s: %d can be seen; first %.1f %%, among three %.1f %%; the very hypothesis first %.1f %%",
		what, c.seen, 100*float64(c.first)/n, 100*float64(c.three)/n, 100*float64(c.exact)/n)
	if !(float64(c.first) >= 0.8*n) || !(float64(c.three) >= 0.95*n) {
		t.Errorf("%s: of %d faults %d are first and %d among three; want 80 %% and 95 %%", what, c.seen, c.first, c.three)
	}
}

// TestFaultsAreFound draws a fault for each of 500 units over the three examples,
// simulates the unit with all its parts, lots, trims and instruments at random,
// and looks where the true one is ranked. Readings can tell it at all where it
// is predicted more than 3 combined standard deviations from a healthy unit
// (see apart); hypotheses that are predicted within 1 of each other count as
// one. Faults of parts and trims are also counted without those of reading,
// which are easy.
func TestFaultsAreFound(t *testing.T) {
	var all, parts tally
	random := rand.New(rand.NewPCG(1, 2))
	fixtures := examples(t)
	for n := range 500 {
		f := fixtures[n%len(fixtures)]
		h := f.draw(n, random)
		fault := f.x.faults[h-1]
		if !(f.x.pictures[h].apart(f.x.pictures[0]) > 3) {
			continue
		}
		u := f.x.unit(1, f.measure(fault, 1, uint64(n), nil)[0])
		exact := len(u.Suspects) > 0 && u.Suspects[0].Ref == fault.ref && u.Suspects[0].Fault == fault.words
		rank := f.rank(u, h)
		all.add(rank, exact)
		if !fault.measured() {
			parts.add(rank, exact)
		}
		if rank > 3 {
			t.Logf("%s: %s is missed: %s, %+v", f.name, fault.name(), u.Verdict, u.Suspects)
		}
	}
	all.check(t, "all faults")
	parts.check(t, "parts and trims")
	if all.seen < 300 || parts.seen < 150 {
		t.Errorf("%d and %d faults prove little", all.seen, parts.seen)
	}
}

// TestHealthyUnits reads more than 2000 units in batches with nothing wrong: at
// most 1 % are accused, and about as many as asked for are unlikely.
func TestHealthyUnits(t *testing.T) {
	units, accused := 0, 0
	verdicts := map[Verdict]int{}
	for _, f := range examples(t) {
		for b := range 30 {
			for _, y := range f.measure(nil, 24, uint64(9000+b), nil) {
				u := f.x.unit(1, y)
				units++
				verdicts[u.Verdict]++
				if u.Accused {
					accused++
				}
			}
		}
	}
	t.Logf("%d units: %d accused, %v", units, accused, verdicts)
	if units < 2000 || accused*100 > units {
		t.Errorf("%d of %d healthy units are accused, want at most 1 %%", accused, units)
	}
	// 0.3 % of 2160 is 6.5; lots of 90 batches cluster them.
	if n := verdicts[Improbable]; n < 1 || n > 22 {
		t.Errorf("%d of %d healthy units are unlikely, want some 0.3 %%", n, units)
	}
}

// visible says whether readings of 24 units narrow a lot enough to be sure of a
// deviation of two: the expected score of one,
//
//	2·(1 − s²)/s,  s the lot's standard deviation after them,
//
// is then 3.5, of which the threshold is 2.
func visible(s float64) bool { return s <= 0.45 }

// TestShiftedLots puts one line's lot 2 standard deviations off, in 10 batches
// of 24 for each line that can be seen, and looks for it in the review.
func TestShiftedLots(t *testing.T) {
	seen, covered, batches := 0, 0, 0
	for _, f := range examples(t) {
		p := f.learned(f.measure(nil, 24, 1, nil))
		for k, l := range p.lots {
			if !visible(math.Sqrt(p.cov.At(k, k))) {
				continue
			}
			seen++
			found := 0
			for b := range 10 {
				off := 2.0 - 4*float64(b%2)
				y := f.measure(nil, 24, uint64(100+b), func(lot, batch int) (float64, bool) { return off, lot == l.number })
				r := f.batch(t, y)
				batches++
				name := f.x.lotName(l)
				i := slices.IndexFunc(r.Lots, func(x Lot) bool {
					return x.Parameter == name.Parameter && slices.Equal(x.Refs, name.Refs)
				})
				if i < 0 || float64(r.Lots[i].Deviation)*off <= 0 {
					continue
				}
				found++
				if x := r.Lots[i].Deviation95; float64(x[0]) <= off && off <= float64(x[1]) {
					covered++
				}
			}
			if found < 9 {
				t.Errorf("%s: the lot of %v %s is found in %d of 10 batches", f.name, f.x.lotName(l).Refs, f.x.lotName(l).Parameter, found)
			}
		}
	}
	t.Logf("%d lines seen; of %d batches %d have an interval that holds the deviation", seen, batches, covered)
	if seen < 6 {
		t.Errorf("%d lines can be seen: the test proves little", seen)
	}
	// Of deviations as large as 2 fewer than 95 % are covered: what is learned is
	// drawn towards the centre.
	if covered*100 < 80*batches {
		t.Errorf("%d of %d intervals hold the deviation", covered, batches)
	}
}

// learned is what a batch's readings say of the lots, all units counted.
func (f fixture) learned(y [][]float64) *learned {
	r := &Review{Units: make([]Unit, len(y))}
	g := f.x.gather(r, y)
	f.x.within()
	for i := range f.x.sheet {
		g.read = append(g.read, i)
	}
	return f.x.learn(g)
}

// TestQuietBatches counts remarks on batches in which nothing is wrong: of each
// sort, one batch in twenty or fewer.
func TestQuietBatches(t *testing.T) {
	const batches = 60
	for _, f := range examples(t) {
		count := map[string]int{}
		for b := range batches {
			r := f.batch(t, f.measure(nil, f.model.Build.Units, uint64(500+b), nil))
			had := map[string]bool{}
			for _, p := range r.Points {
				for _, word := range p.Remarks {
					had[word] = true
				}
			}
			for word := range had {
				count[word]++
			}
		}
		t.Logf("%s: of %d batches %v have a remark", f.name, batches, count)
		for word, n := range count {
			if n > 8 { // 3 expected at most; Poisson: more than 8 once in 260
				t.Errorf("%s: %d of %d quiet batches have a remark %q", f.name, n, batches, word)
			}
		}
	}
}

// TestShiftedBatch reads batches whose coils are all 3.5 standard deviations of
// lots off. In the first of them in which a unit by itself looks as if it had a
// wrong part, none does with what the batch says of the lot.
func TestShiftedBatch(t *testing.T) {
	f := examples(t)[1]
	lines := f.x.lines()
	k := slices.IndexFunc(lines, func(l lotLine) bool {
		name := f.x.lotName(l)
		return name.Refs[0] == "L2" && name.Parameter == "value"
	})
	for b := range 20 {
		y := f.measure(nil, 24, uint64(700+b), func(lot, batch int) (float64, bool) { return 3.5, lot == lines[k].number })
		if !slices.ContainsFunc(y, func(y []float64) bool { return f.x.unit(1, y).Accused }) {
			continue
		}
		r, err := f.x.review(context.Background(), filled(f, y))
		if err != nil {
			t.Fatal(err)
		}
		for _, u := range r.Units {
			if u.Accused {
				t.Errorf("unit %d is accused: %+v", u.Unit, u.Suspects)
			}
		}
		return
	}
	t.Error("no unit is accused by itself: the test proves nothing")
}
