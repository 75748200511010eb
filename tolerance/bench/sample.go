package bench

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// Sample is a target at a condition other than the reference, as a test.
// Expected and Accept are as a Reading's, of the change where the target is on
// one. Conditions that a bench does not easily make are tested on some of the
// units only.
type Sample struct {
	Target      string         `json:"target"`
	Output      string         `json:"output"`
	Condition   string         `json:"condition"`
	ChangeFrom  string         `json:"change_from,omitempty"`
	Needs       string         `json:"needs,omitempty"` // what is more than a bench has; "" where it has all
	Every       int            `json:"every"`           // 1 unit in so many
	Instrument  string         `json:"instrument"`      // "" where no test point reads the output
	At          string         `json:"at"`
	Unit        string         `json:"unit"`
	Nominal     spread.Figure  `json:"nominal"`
	Unloaded    spread.Figure  `json:"unloaded"`
	Expected    spread.Limits  `json:"expected"`
	Accept      *spread.Limits `json:"accept"`
	Uncertainty spread.Figure  `json:"uncertainty"`
	Why         string         `json:"why,omitempty"`
}

// easyWarmth is how many kelvin off the reference a room can be brought to
// without more ado (common practice, no source).
const easyWarmth = 5

// samples are the tests of the targets at other conditions.
func samples(m *build.Model, r *spread.Report) []Sample {
	var list []Sample
	for i, s := range m.Samples {
		list = append(list, sampled(m, s, r.Samples[i]))
	}
	return list
}

func sampled(m *build.Model, s build.Sample, x spread.SampleReport) Sample {
	b := m.Build
	t := b.Targets[s.Target]
	out := Sample{
		Target: t.Name, Output: t.Output.String(), Condition: b.Conditions[s.Condition].Name, Every: 1,
		Nominal: x.Nominal, Unloaded: x.Unloaded, Needs: needs(b, s.Condition), Unit: t.Unit.Symbol,
	}
	if t.ChangeFrom >= 0 {
		out.ChangeFrom = b.Conditions[t.ChangeFrom].Name
		if out.Needs == "" {
			out.Needs = needs(b, t.ChangeFrom)
		}
	}
	if out.Needs != "" {
		out.Every = oneIn(b.Units)
	}
	i, at, ok := reads(m, s, t.Output)
	out.Instrument, out.At = i.Name, at
	u := Uncertainty
	if t.ChangeFrom >= 0 {
		u = changeUncertainty
	}
	out.Uncertainty = spread.Figure(u(i, float64(x.Nominal)))
	out.Expected = widened(x.Low, x.High, i, u)
	if x.Units == 0 {
		out.Why = "no simulated unit was good"
	}
	if !ok {
		out.Why = "no test point reads this: the limits are the target's and the simulation's own"
	}
	w := window{i, u, x.Loading, t.Low, t.High}
	if l, some := w.accept(i); some {
		out.Accept = &l
	} else {
		out.Why = w.tooCoarse()
	}
	return out
}

// reads is the instrument that reads an output and where; without one ok is
// false, and nothing is added to its limits.
func reads(m *build.Model, s build.Sample, name build.OutputName) (i build.Instrument, at string, ok bool) {
	if s.Point >= 0 {
		p := m.Points[s.Point]
		return p.Instrument, withReferences(p.Stage.Kind.Points[p.Index].At, p.Stage), true
	}
	if k := noteAt(m, name); k >= 0 {
		p := m.Points[k]
		at := withReferences(p.Stage.Kind.Points[p.Index].At, p.Stage)
		if name.Output == "offset" {
			at += "; a counter shows no sign: what matters is the carrier's frequency less the signal's"
		}
		i, ok = m.Build.Instrument("counter")
		return i, at, ok
	}
	for _, o := range m.Build.Stage(name.Stage).Outputs {
		if o.Name == name.Output {
			at = name.Stage + ": " + o.Summary
		}
	}
	return build.Instrument{}, at, false
}

// needs says what of a condition a bench does not easily make: another
// temperature, another humidity, age. Supplies, warm-up and a build's own
// variables are a matter of a moment.
func needs(b *build.Build, condition int) string {
	var words []string
	for j, v := range b.Variables {
		warmer := "colder"
		is, was := b.Conditions[condition].Values[j], b.Conditions[0].Values[j]
		if is > was {
			warmer = "warmer"
		}
		switch {
		case is == was:
		case v.Name == build.Temperature && math.Abs(is-was) > easyWarmth:
			words = append(words, fmt.Sprintf("%s, %s %s than the bench", quantity.Format(is, v.Unit, 0),
				quantity.Format(math.Round(math.Abs(is-was)*1e6)/1e6, quantity.Kelvin, 0), warmer))
		case v.Name == build.Humidity:
			words = append(words, quantity.Format(is, v.Unit, 0)+" relative humidity")
		case v.Name == build.Age:
			words = append(words, "an age of "+quantity.Format(is, v.Unit, 0))
		}
	}
	return strings.Join(words, "; ")
}

// oneIn is 1 unit in so many that √n + 1 of n are tested (common practice of
// incoming inspection, no source).
func oneIn(units int) int {
	return max(1, units/min(units, int(math.Ceil(math.Sqrt(float64(units))))+1))
}
