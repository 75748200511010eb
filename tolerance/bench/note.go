package bench

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// note is what the instrument does to a reading, and whether what is there is
// enough for it.
func (s *sheet) note(i int) string {
	var words []string
	p, x := s.model.Points[i], s.report.Readings[i]
	if u := Uncertainty(p.Instrument, float64(x.Nominal)); math.Abs(float64(x.Nominal-x.Unloaded)) > u {
		text := fmt.Sprintf("the %s itself moves this: a nominal unit has %s, it shows %s", p.Instrument.Name, shown(x.Unloaded, p), shown(x.Nominal, p))
		words = append(words, text+s.buffered(i))
	}
	least := p.Instrument.MinimumLevel
	enough := quantity.Format(least, quantity.Volt, 0)
	volts := func(v spread.Figure) string { return quantity.Format(float64(v), quantity.Volt, 3) }
	switch {
	case !p.Levelled:
	case float64(x.Level) < least:
		words = append(words, fmt.Sprintf("the %s needs a peak of %s, and a nominal unit has %s here", p.Instrument.Name, enough, volts(x.Level)))
	case float64(x.LevelLow) < least:
		words = append(words, fmt.Sprintf("the %s needs a peak of %s, and a weak unit has as little as %s here", p.Instrument.Name, enough, volts(x.LevelLow)))
	}
	return strings.Join(words, "; ")
}

// buffers are the kinds whose output repeats what comes in, out of reach of a
// probe.
var buffers = []string{"emitter-follower", "common-emitter", "opamp-noninverting", "opamp-inverting"}

// buffered offers the output of a stage that repeats an oscillator, where that
// has the level that the counter needs.
func (s *sheet) buffered(i int) string {
	p := s.model.Points[i]
	if p.Stage.Kind.Points[p.Index].Reading != "frequency" {
		return ""
	}
	for k, other := range s.model.Points {
		q := other.Stage.Kind.Points[other.Index]
		if !slices.Contains(buffers, other.Stage.Kind.Name) || q.Reading != "peak voltage" || !takes(other.Stage, p.Stage.Name) ||
			!(float64(s.report.Readings[k].Low) >= p.Instrument.MinimumLevel) {
			continue
		}
		return fmt.Sprintf("; at the %s (%s) it shows the frequency without pulling it",
			withReferences(q.At, other.Stage), other.Stage.Name)
	}
	return ""
}

// takes says whether a stage's only signal comes straight from another.
func takes(s *build.Stage, from string) bool { return len(s.Wires) == 1 && s.Wires[0].From == from }

// noteAt is the point at which a counter hears a mixer's beat; -1 where the
// output is none, or the mixer's signal has no point.
func noteAt(m *build.Model, name build.OutputName) int {
	if name.Output != "beat" && name.Output != "offset" {
		return -1
	}
	for i, p := range m.Points {
		q := p.Stage.Kind.Points[p.Index]
		if p.Stage.Name == name.Stage && !p.Stage.Kind.Free && q.Reading == "peak voltage" {
			return i
		}
	}
	return -1
}
