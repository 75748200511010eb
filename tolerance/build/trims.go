package build

import (
	"math"
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

// readTrims reads the trims in the order the bench does them.
func (r *reader) readTrims(n *document.Node) {
	if n == nil {
		return
	}
	if n.Kind != document.Sequence {
		r.Add(n, "trims", "a list such as [{turn: mixer.bias, output: mixer.collector, to: 0 V}]")
		return
	}
	for _, item := range n.Items {
		if r.Keys(item, "turn", "output", "to", "within", "at") || item.Kind == document.Mapping {
			r.readTrim(item)
		}
	}
}

func (r *reader) readTrim(n *document.Node) {
	var t Trim
	if turn := n.Get("turn"); turn != nil {
		r.broken["trim "+turn.Value] = true // until it is read
	}
	turn := r.Need(n, "turn", "STAGE.ROLE of a trimmer")
	output := r.Need(n, "output", "STAGE.OUTPUT to watch")
	to := r.Need(n, "to", "the value to bring it to")
	if turn == nil || output == nil || to == nil {
		return
	}
	turns := r.readTurn(turn, &t)
	var ok bool
	if t.Output, t.Unit, ok = r.readOutputName(output); !ok || !turns {
		return
	}
	r.read(to, t.Unit, &t.To)
	if at := n.Get("within"); at != nil && r.read(at, t.Unit, &t.Within) && !(t.Within >= 0) {
		r.Add(at, "within", "zero or more")
	}
	if at := n.Get("at"); at != nil {
		t.Condition = max(0, r.readCondition(at))
	}
	r.broken["trim "+turn.Value] = false
	r.build.Trims = append(r.build.Trims, t)
}

// readTurn reads the trimmer that a trim turns.
func (r *reader) readTurn(n *document.Node, t *Trim) bool {
	p := r.build.Place(n.Value)
	if p == nil || !p.Fitted {
		r.Add(n, "unknown trimmer", "STAGE.ROLE of a trimmer", r.trimmers()...)
		return false
	}
	if !p.Type.Trimmer() {
		r.Add(n, "trim on something that is not a trimmer",
			"a trimmer; "+n.Value+" is a "+string(p.Type), r.trimmers()...)
		return false
	}
	t.Stage, t.Role = position(n.Value)
	if r.build.TrimOf(t.Stage, t.Role) >= 0 {
		r.Add(n, "trimmer turned twice", "one trim for each trimmer")
		return false
	}
	return true
}

// trimmers lists the fitted trimmers.
func (r *reader) trimmers() []string {
	var names []string
	for _, s := range r.build.Stages {
		for _, p := range s.Places {
			if p.Fitted && p.Type.Trimmer() {
				names = append(names, s.Name+"."+p.Role)
			}
		}
	}
	return names
}

// readOutputName reads STAGE.OUTPUT.
func (r *reader) readOutputName(n *document.Node) (OutputName, quantity.Unit, bool) {
	stageName, output, _ := strings.Cut(n.Value, ".")
	if s := r.build.Stage(stageName); s != nil {
		if o, ok := s.output(output); ok {
			return OutputName{stageName, output}, o.Unit, true
		}
	}
	if !r.broken[stageName] {
		r.Add(n, "unknown output", "STAGE.OUTPUT", r.outputNames()...)
	}
	return OutputName{}, quantity.Unit{}, false
}

// readCondition reads a condition's name; -1 where there is none such.
func (r *reader) readCondition(n *document.Node) int {
	var names []string
	for _, c := range r.build.Conditions {
		names = append(names, c.Name)
	}
	word, _ := r.Word(n, "a condition", names...)
	return r.build.condition(word)
}

// centsAbove is how far a frequency some cents above a note lies from it; 1200
// cents are an octave.
func centsAbove(note, cents float64) float64 { return note * (math.Exp2(cents/1200) - 1) }
