package bench

import (
	"slices"

	"batchwright/tolerance/build"
)

// supplies are the kinds that make a steady voltage for others.
var supplies = []string{"fixed-regulator", "adjustable-regulator", "shunt-zener", "divider", "rail-decoupling"}

// order is how the bench goes through a build's stages.
type order struct {
	place map[string]int      // of each stage, from 0
	fed   map[string][]string // the stages that a stage takes something from, near and far
}

// newOrder puts supplies before what they feed and every stage before the
// next: each comes after all that it takes something from, supplies as soon as
// they can, and otherwise as the build file has them.
func newOrder(b *build.Build) order {
	o := order{place: map[string]int{}, fed: map[string][]string{}}
	for range b.Stages {
		var next *build.Stage
		for _, s := range b.Stages {
			if _, done := o.place[s.Name]; done || !o.ready(b, s) {
				continue
			}
			if next == nil || isSupply(s) && !isSupply(next) {
				next = s
			}
		}
		o.take(b, next)
	}
	return o
}

// ready says whether all that a stage takes something from has its place.
func (o order) ready(b *build.Build, s *build.Stage) bool {
	for _, name := range s.Needs() {
		if _, done := o.place[name]; !done && b.Stage(name) != nil {
			return false
		}
	}
	return true
}

func (o order) take(b *build.Build, s *build.Stage) {
	o.place[s.Name] = len(o.place)
	for _, name := range s.Needs() {
		if b.Stage(name) != nil {
			o.fed[s.Name] = append(append(o.fed[s.Name], name), o.fed[name]...)
		}
	}
}

func isSupply(s *build.Stage) bool { return slices.Contains(supplies, s.Kind.Name) }

// stages are a build's in bench order.
func (o order) stages(b *build.Build) []*build.Stage {
	list := slices.Clone(b.Stages)
	slices.SortFunc(list, func(x, y *build.Stage) int { return o.place[x.Name] - o.place[y.Name] })
	return list
}

// points are the indices of a model's points in bench order.
func (o order) points(m *build.Model) []int {
	list := make([]int, len(m.Points))
	for i := range list {
		list[i] = i
	}
	slices.SortStableFunc(list, func(x, y int) int { return o.place[m.Points[x].Stage.Name] - o.place[m.Points[y].Stage.Name] })
	return list
}
