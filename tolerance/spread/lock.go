package spread

import (
	"math"
	"slices"

	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/stage"
)

// LockRange compares a mixer's lock range at a condition with the lowest note
// wanted of it. Within the lock range the oscillators pull into step, and there
// is no note. As it falls in proportion to 10^(−isolation/20), isolation must
// grow by 20·log10(lock range/lowest note) decibels where the note is inside.
type LockRange struct {
	Stage      string `json:"stage"`
	Condition  string `json:"condition"`
	LockRange  Figure `json:"lock_range"`  // 99.5 % of the units stay below; the worst case where none was trimmed
	LowestNote Figure `json:"lowest_note"` // of the targets and trims on the beat; without any, the nominal beat at the reference
	Decibels   int    `json:"decibels"`    // by which isolation must grow; 0 where the note is outside
	Why        string `json:"why,omitempty"`
}

// noNote is a beat that nobody means for a note, Hz: a trim to 0 Hz leaves less.
const noNote = 1e-3

// lockRanges are those of every stage that has a beat and a lock range.
func lockRanges(m *build.Model, outputs []OutputReport) []LockRange {
	var list []LockRange
	for _, s := range m.Build.Stages {
		if !frequencyOf(s, "beat") || !frequencyOf(s, "lock_range") {
			continue
		}
		note := lowestNote(m.Build, s.Name, outputs)
		for _, o := range outputs {
			if o.Output == s.Name+".lock_range" && o.ChangeFrom == "" {
				list = append(list, newLockRange(s.Name, note, o))
			}
		}
	}
	return list
}

// frequencyOf says whether a stage has an output of that name in hertz.
func frequencyOf(s *build.Stage, name string) bool {
	return slices.ContainsFunc(s.Outputs, func(o stage.Output) bool {
		return o.Name == name && o.Unit.Dimension == quantity.Hertz.Dimension
	})
}

// lowestNote is the lowest that a target wants of a stage's beat, or of its
// offset to one side of zero, or that a trim sets either to; without one, the
// nominal beat at the reference; NaN where that is none.
func lowestNote(b *build.Build, stageName string, outputs []OutputReport) float64 {
	note := math.NaN()
	want := func(n build.OutputName, low, high float64) {
		if n.Stage != stageName || n.Output != "beat" && n.Output != "offset" {
			return
		}
		if n.Output == "offset" && high < 0 {
			low = -high
		}
		if low > noNote && !(low > note) {
			note = low
		}
	}
	for _, t := range b.Targets {
		if t.Trim < 0 && t.ChangeFrom < 0 {
			want(t.Output, t.Low, t.High)
		}
	}
	for _, t := range b.Trims {
		want(t.Output, t.To, t.To)
	}
	for _, o := range outputs {
		if math.IsNaN(note) && o.Output == stageName+".beat" && o.Condition == b.Conditions[0].Name && o.ChangeFrom == "" && o.Nominal > noNote {
			return float64(o.Nominal)
		}
	}
	return note
}

// newLockRange compares one condition's lock range with the lowest note.
func newLockRange(stageName string, note float64, o OutputReport) LockRange {
	l := LockRange{Stage: stageName, Condition: o.Condition, LockRange: o.Simulated.Quantiles["0.995"], LowestNote: Figure(note)}
	if math.IsNaN(float64(l.LockRange)) && o.WorstCase != nil {
		l.LockRange = o.WorstCase.High
	}
	switch {
	case math.IsNaN(float64(l.LockRange)):
		l.Why = "the lock range has no value"
	case math.IsNaN(note):
		l.Why = "no target asks for a note, and at rest there is none"
	}
	l.Decibels = moreIsolation(float64(l.LockRange), note)
	return l
}

// moreIsolation is by how many whole decibels isolation must grow for a lock
// range not to reach a note; 0 where it does not. A hair over a whole number is
// taken as rounding.
func moreIsolation(lockRange, note float64) int {
	if !(lockRange > note) || !(note > 0) || math.IsInf(lockRange, 1) {
		return 0
	}
	return int(max(1, math.Ceil(20*math.Log10(lockRange/note)-1e-9)))
}
