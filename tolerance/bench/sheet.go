package bench

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// Sheet is what the bench does, in its order: trims and readings share one
// count of steps.
type Sheet struct {
	Turns    []Turn
	Readings []Reading
}

// NewSheet puts trims and readings in the order the bench meets them and gives
// every reading its windows. A stage's trims come before its readings; a
// reading that a later trim still moves waits until that trim is done.
func NewSheet(m *build.Model, r *spread.Report) Sheet {
	s := sheet{model: m, report: r, placed: make([]bool, len(m.Points))}
	for i := range m.Build.Stages {
		s.turnsAt(i)
		s.readingsUpTo(i)
	}
	return s.Sheet
}

type sheet struct {
	Sheet
	model  *build.Model
	report *spread.Report
	turned int // trims done, in order
	placed []bool
	step   int
}

// turnsAt does the trims, in their order, whose watched stage has been met.
func (s *sheet) turnsAt(stage int) {
	b := s.model.Build
	for s.turned < len(b.Trims) && stageIndex(b, b.Trims[s.turned].Output.Stage) <= stage {
		s.step++
		s.Turns = append(s.Turns, s.turn(s.turned))
		s.turned++
		s.readingsUpTo(stage - 1) // those of earlier stages that waited for it
	}
}

// readingsUpTo places the readings of the stages met that no later trim moves.
func (s *sheet) readingsUpTo(stage int) {
	for i, p := range s.model.Points {
		if s.placed[i] || stageIndex(s.model.Build, p.Stage.Name) > stage || s.moved(p) {
			continue
		}
		s.placed[i] = true
		s.step++
		s.Readings = append(s.Readings, s.reading(i))
	}
}

// moved says whether a trim still to come moves the point.
func (s *sheet) moved(p build.Point) bool {
	for _, t := range p.Trims {
		if t >= s.turned {
			return true
		}
	}
	return false
}

func stageIndex(b *build.Build, name string) int {
	for i, s := range b.Stages {
		if s.Name == name {
			return i
		}
	}
	return -1
}

// turn describes a trim.
func (s *sheet) turn(i int) Turn {
	b := s.model.Build
	t := b.Trims[i]
	l := spread.Linearise(s.model, s.model.Trims[i].AtLow, s.model.Trims[i].AtHigh)
	return Turn{
		Step: s.step, Turn: t.Stage + "." + t.Role, Ref: b.Place(t.Stage + "." + t.Role).Part.Ref,
		Watch: t.Output.String(), At: s.where(t), Unit: t.Unit.Symbol, To: t.To, Within: t.Within,
		Condition: b.Conditions[t.Condition].Name, Rises: l.Values[1] > l.Values[0],
	}
}

// where is the place to hold the probe for a trim, if one of the watched
// stage's test points reads the output; otherwise what the output is. Where the
// probe itself moves the reading by more than the trim may be off, that is said:
// the trim is on what is there without it.
func (s *sheet) where(t build.Trim) string {
	for i, p := range s.model.Points {
		q := p.Stage.Kind.Points[p.Index]
		if p.Stage.Name != t.Output.Stage || q.Name != t.Output.Output {
			continue
		}
		at := withReferences(q.At, p.Stage)
		shown, there := s.report.Readings[i].Nominal, s.report.Readings[i].Unloaded
		if math.Abs(float64(shown-there)) > t.Within {
			at += fmt.Sprintf("; with its probe there the %s shows %s on a nominal unit set to %s",
				p.Instrument.Name, quantity.Format(float64(shown), p.Unit, 6), quantity.Format(float64(there), p.Unit, 6))
		}
		return at
	}
	for _, o := range s.model.Build.Stage(t.Output.Stage).Outputs {
		if o.Name == t.Output.Output {
			return t.Output.Stage + ": " + o.Summary
		}
	}
	return t.Output.Stage
}

// withReferences puts each part's reference before its role: "collector of the
// transistor" becomes "collector of Q1 (transistor)"; of two pieces both stand
// there, "R6A + R6B (load)".
func withReferences(text string, s *build.Stage) string {
	words := strings.FieldsFunc(text, func(r rune) bool { return !(r == '_' || r >= '0' && r <= '9' || r >= 'A' && r <= 'z') })
	for _, w := range words {
		for _, p := range s.Places {
			if p.Role == w && p.Fitted {
				named := p.Label() + " (" + w + ")"
				if with := strings.Replace(text, "the "+w, named, 1); with != text {
					text = with
				} else {
					text = strings.Replace(text, w, named, 1)
				}
			}
		}
	}
	return text
}

// reading gives a point its windows.
func (s *sheet) reading(i int) Reading {
	p := s.model.Points[i]
	x := s.report.Readings[i]
	q := p.Stage.Kind.Points[p.Index]
	u := Uncertainty(p.Instrument, float64(x.Nominal))
	r := Reading{
		Point: p.Stage.Name + "." + q.Name, Reading: q.Reading, Instrument: p.Instrument.Name,
		Condition: s.model.Build.Conditions[0].Name, Step: s.step, Unit: p.Unit.Symbol,
		Nominal: x.Nominal, Unloaded: x.Unloaded, Uncertainty: spread.Figure(u),
		At: withReferences(q.At, p.Stage),
		Expected: spread.Limits{
			Low:  x.Low - spread.Figure(Uncertainty(p.Instrument, float64(x.Low))),
			High: x.High + spread.Figure(Uncertainty(p.Instrument, float64(x.High))),
		},
	}
	if x.Units == 0 {
		r.Why = "no simulated unit was good"
	}
	s.accept(&r, p, q.Name)
	return r
}

// Uncertainty is an instrument's expanded uncertainty (k = 2) at a reading:
// its accuracy and floor are limits of error, taken as rectangular (JCGM
// 100:2008, 4.3.7), so
//
//	U = 2·(accuracy·|reading| + floor)/√3
func Uncertainty(i build.Instrument, reading float64) float64 {
	return 2 * (i.Accuracy*math.Abs(reading) + i.Floor) / math.Sqrt(3)
}

// accept draws in the limits of the targets on the point's output at the
// reference condition by the uncertainty there (guard band w = U, JCGM
// 106:2012, 8.3.2).
func (s *sheet) accept(r *Reading, p build.Point, output string) {
	low, high := math.Inf(-1), math.Inf(1)
	for _, t := range s.model.Build.Targets {
		if t.Trim < 0 && t.ChangeFrom < 0 && t.Output == (build.OutputName{Stage: p.Stage.Name, Output: output}) && atReference(t) {
			low, high = math.Max(low, t.Low), math.Min(high, t.High)
		}
	}
	if math.IsInf(low, -1) && math.IsInf(high, 1) {
		return
	}
	r.Accept = &spread.Limits{
		Low:  spread.Figure(low + Uncertainty(p.Instrument, low)),
		High: spread.Figure(high - Uncertainty(p.Instrument, high)),
	}
	if !(r.Accept.Low < r.Accept.High) {
		r.Accept, r.Why = nil, "the instrument is too coarse for the target"
	}
}

func atReference(t build.Target) bool {
	for _, i := range t.At {
		if i == 0 {
			return true
		}
	}
	return false
}
