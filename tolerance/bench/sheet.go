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

// Sheet is what the bench does, in its order: trims and readings share one
// count of steps.
type Sheet struct {
	Turns    []Turn
	Readings []Reading
	Samples  []Sample // the targets at other conditions
}

// NewSheet puts trims and readings in the order the bench meets them and gives
// every reading its windows. Supplies come before what they feed, and each
// stage before the next. A stage's trims come before its readings; a reading
// that a later trim still moves waits until that trim is done, and so does all
// that a supply feeds while a reading of the supply waits. Trims keep the build
// file's order.
func NewSheet(m *build.Model, r *spread.Report) Sheet {
	s := sheet{model: m, report: r, order: newOrder(m.Build), placed: make([]bool, len(m.Points))}
	for place := range s.order.stages(m.Build) {
		s.turnsAt(place)
		s.readingsUpTo(place)
	}
	s.Samples = samples(m, r)
	return s.Sheet
}

type sheet struct {
	Sheet
	model  *build.Model
	report *spread.Report
	order  order
	turned int // trims done, in order
	placed []bool
	step   int
}

// turnsAt does the trims, in their order, whose watched stage has been met.
func (s *sheet) turnsAt(place int) {
	b := s.model.Build
	for s.turned < len(b.Trims) && s.order.place[b.Trims[s.turned].Output.Stage] <= place {
		s.step++
		s.Turns = append(s.Turns, s.turn(s.turned))
		s.turned++
		s.readingsUpTo(place - 1) // those of earlier stages that waited for it
	}
}

// readingsUpTo places the readings of the stages met that nothing holds up.
func (s *sheet) readingsUpTo(place int) {
	for _, i := range s.order.points(s.model) {
		p := s.model.Points[i]
		if s.placed[i] || s.order.place[p.Stage.Name] > place || s.moved(p) || s.unproved(p) {
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

// unproved says whether a supply that feeds the point has a reading to come.
func (s *sheet) unproved(p build.Point) bool {
	for i, other := range s.model.Points {
		if !s.placed[i] && isSupply(other.Stage) && slices.Contains(s.order.fed[p.Stage.Name], other.Stage.Name) {
			return true
		}
	}
	return false
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

// where is the place to hold the probe for a trim, if a test point reads the
// output; otherwise what the output is. Where the probe itself moves the
// reading by more than the trim may be off, that is said: the trim is on what
// is there without it.
func (s *sheet) where(t build.Trim) string {
	for i, p := range s.model.Points {
		q := p.Stage.Kind.Points[p.Index]
		if p.Stage.Name != t.Output.Stage || q.Name != t.Output.Output {
			continue
		}
		at := withReferences(q.At, p.Stage)
		if x := s.report.Readings[i]; math.Abs(float64(x.Nominal-x.Unloaded)) > t.Within {
			at += fmt.Sprintf("; with its probe there the %s shows %s on a nominal unit set to %s",
				p.Instrument.Name, shown(x.Nominal, p), shown(x.Unloaded, p))
		}
		return at
	}
	if i := noteAt(s.model, t.Output); i >= 0 {
		p := s.model.Points[i]
		return "count the note: " + withReferences(p.Stage.Kind.Points[p.Index].At, p.Stage)
	}
	for _, o := range s.model.Build.Stage(t.Output.Stage).Outputs {
		if o.Name == t.Output.Output {
			return t.Output.Stage + ": " + o.Summary
		}
	}
	return t.Output.Stage
}

// shown is a reading in words, with as many digits as the instrument has: the
// last is worth between a hundredth of its uncertainty and a tenth.
func shown(x spread.Figure, p build.Point) string {
	v := float64(x)
	digits := 2 + math.Floor(math.Log10(math.Abs(v)/Uncertainty(p.Instrument, v)))
	if !(digits >= 2 && digits < 7) { // also where there is no uncertainty
		digits = 6
	}
	return quantity.Format(v, p.Unit, int(digits))
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
	none := spread.Figure(math.NaN())
	r := Reading{
		Point: p.Stage.Name + "." + q.Name, Reading: q.Reading, Instrument: p.Instrument.Name,
		Condition: s.model.Build.Conditions[0].Name, Step: s.step, Unit: p.Unit.Symbol,
		Nominal: x.Nominal, Unloaded: x.Unloaded, Uncertainty: spread.Figure(Uncertainty(p.Instrument, float64(x.Nominal))),
		At: withReferences(q.At, p.Stage), Expected: widened(x.Low, x.High, p.Instrument, Uncertainty),
		ConsumerRisk: none, ProducerRisk: none, SpecificRisk: none,
		Note: s.note(i),
	}
	if x.Units == 0 {
		r.Why = "no simulated unit was good"
	}
	s.accept(&r, i)
	return r
}

// widened are limits let out by an instrument's uncertainty at each.
func widened(low, high spread.Figure, i build.Instrument, u func(build.Instrument, float64) float64) spread.Limits {
	return spread.Limits{Low: low - spread.Figure(u(i, float64(low))), High: high + spread.Figure(u(i, float64(high)))}
}

// accept gives a reading the window in which it proves the targets on its
// output at the reference condition, and that window's risks.
func (s *sheet) accept(r *Reading, i int) {
	p, x := s.model.Points[i], s.report.Readings[i]
	w := window{p.Instrument, Uncertainty, x.Loading, math.Inf(-1), math.Inf(1)}
	output := build.OutputName{Stage: p.Stage.Name, Output: p.Stage.Kind.Points[p.Index].Name}
	for _, t := range s.model.Build.Targets {
		if t.Trim < 0 && t.ChangeFrom < 0 && t.Output == output && slices.Contains(t.At, 0) {
			w.low, w.high = math.Max(w.low, t.Low), math.Min(w.high, t.High)
		}
	}
	if math.IsInf(w.low, -1) && math.IsInf(w.high, 1) {
		return
	}
	l, ok := w.accept(p.Instrument)
	if !ok {
		r.Why = w.tooCoarse()
		return
	}
	r.Accept = &l
	r.SpecificRisk = spread.Figure(w.specificRisk(l))
	if x.True != nil && x.True.Count() > 0 {
		risks := w.globalRisks(x.True, l)
		r.ConsumerRisk, r.ProducerRisk = spread.Figure(risks.Consumer), spread.Figure(risks.Producer)
	}
}
