package build

import "slices"

// Pinned is the build with one trim not done: its trimmer stands at a share of
// its travel from 0 to 1, whatever the output it should have been turned by.
// Targets on that trim's reach are left out. The original is left as it was.
func (b *Build) Pinned(trim int, position float64) *Build {
	out := *b
	out.Stages = make([]*Stage, len(b.Stages))
	for i, s := range b.Stages {
		own := *s
		own.Places = slices.Clone(s.Places)
		out.Stages[i] = &own
	}
	t := b.Trims[trim]
	out.Place(t.Stage + "." + t.Role).Position = position
	out.Trims = slices.Delete(slices.Clone(b.Trims), trim, trim+1)
	out.Targets = nil
	for _, t := range b.Targets {
		if t.Trim == trim {
			continue
		}
		if t.Trim > trim {
			t.Trim--
		}
		out.Targets = append(out.Targets, t)
	}
	return &out
}
