package build

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

// DefaultShare is the share of units that must comply where a target does not
// say.
const DefaultShare = 0.99

var targetKeys = []string{"name", "output", "trim", "change_from", "at", "limit", "between", "note", "share", "by"}

// readTargets reads the targets.
func (r *reader) readTargets(n *document.Node) {
	if n == nil {
		return
	}
	if n.Kind != document.Sequence {
		r.Add(n, "targets", "a list such as [{name: …, output: mixer.beat, at: [bench], between: [1 kHz, 4 kHz]}]")
		return
	}
	seen := map[string]bool{}
	for _, item := range n.Items {
		if r.Keys(item, targetKeys...) || item.Kind == document.Mapping {
			r.readTarget(item, seen)
		}
	}
}

func (r *reader) readTarget(n *document.Node, seen map[string]bool) {
	t := Target{Trim: -1, ChangeFrom: -1, Share: DefaultShare}
	if name := r.Need(n, "name", "what the target is called"); name != nil {
		t.Name = name.Value
		if seen[t.Name] {
			r.Add(name, "duplicate target", "a name that no other target has")
		}
		seen[t.Name] = true
	}
	r.readDemand(n, &t)
	switch trim, output := n.Get("trim"), n.Get("output"); {
	case trim != nil && output != nil:
		r.Add(output, "output beside trim", "one of the two")
	case trim != nil:
		r.readReach(n, trim, &t)
	case output != nil:
		r.readOutputTarget(n, output, &t)
	default:
		r.Add(n, "target of nothing", "output: STAGE.OUTPUT, or trim: STAGE.ROLE")
	}
}

// readDemand reads how many units must comply.
func (r *reader) readDemand(n *document.Node, t *Target) {
	by, share := n.Get("by"), n.Get("share")
	if by != nil {
		r.Word(by, "by: worst-case", "worst-case")
		t.WorstCase = true
		if share != nil {
			r.Add(share, "share beside by", "one of the two")
		}
	}
	if share != nil && r.read(share, quantity.Percent, &t.Share) && !(t.Share > 0 && t.Share <= 1) {
		r.Add(share, "share", "more than 0 %, at most 100 %")
	}
}

// readReach reads a target on a trim's reach.
func (r *reader) readReach(n, trim *document.Node, t *Target) {
	for _, key := range []string{"change_from", "at", "limit", "between", "note"} {
		if k := n.Get(key); k != nil {
			r.Add(k, key+" on a trim's reach", "only name, trim, share or by")
		}
	}
	stageName, role := position(trim.Value)
	t.Trim = r.build.TrimOf(stageName, role)
	if t.Trim < 0 {
		if r.broken["trim "+trim.Value] {
			return
		}
		var known []string
		for _, tr := range r.build.Trims {
			known = append(known, tr.Stage+"."+tr.Role)
		}
		r.Add(trim, "unknown trim", "STAGE.ROLE of a trimmer that a trim turns", known...)
		return
	}
	t.Output = OutputName{stageName, role}
	t.Low, t.High = 0, 1
	t.Asked = "the trimmer reaches on " + t.shareText()
	r.build.Targets = append(r.build.Targets, *t)
}

// readOutputTarget reads a target on an output or on its change.
func (r *reader) readOutputTarget(n, output *document.Node, t *Target) {
	var named, from bool
	t.Output, t.Unit, named = r.readOutputName(output)
	from = true
	if at := n.Get("change_from"); at != nil {
		t.ChangeFrom = r.readCondition(at)
		from = t.ChangeFrom >= 0
	}
	if !r.readAt(n, t) || !named || !from || !r.readLimits(n, t) {
		return
	}
	t.Asked = r.asked(t)
	r.build.Targets = append(r.build.Targets, *t)
}

// readAt reads the conditions a target holds at: the reference where an
// output's target does not say, every other condition where a change's does not.
func (r *reader) readAt(n *document.Node, t *Target) bool {
	at := n.Get("at")
	if at == nil {
		if t.ChangeFrom < 0 {
			t.At = []int{0}
			return true
		}
		for i := range r.build.Conditions {
			if i != t.ChangeFrom {
				t.At = append(t.At, i)
			}
		}
		return true
	}
	for _, item := range r.items(at, "conditions") {
		i := r.readCondition(item)
		if i < 0 {
			return false
		}
		if i == t.ChangeFrom {
			r.Add(item, "change from a condition to itself", "another condition")
			return false
		}
		t.At = append(t.At, i)
	}
	return len(t.At) > 0
}

// readLimits reads `limit: X`, |value| at most X, or `between: [low, high]`.
func (r *reader) readLimits(n *document.Node, t *Target) bool {
	limit, between := n.Get("limit"), n.Get("between")
	switch {
	case limit != nil && between != nil:
		r.Add(between, "between beside limit", "one of the two")
		return false
	case limit != nil:
		return r.readLimit(n, limit, t)
	case between != nil:
		return r.readBetween(between, t)
	}
	r.Add(n, "target without limits", "limit: X, or between: [low, high]")
	return false
}

// readLimit reads a limit in the output's unit, or in cents at a note.
func (r *reader) readLimit(n, limit *document.Node, t *Target) bool {
	note := n.Get("note")
	if note == nil {
		if !r.read(limit, t.Unit, &t.High) {
			return false
		}
		if !(t.High > 0) {
			r.Add(limit, "limit", "more than zero")
			return false
		}
		t.Low = -t.High
		return true
	}
	var c, f float64
	if !r.read(limit, quantity.Cent, &c) || !r.read(note, quantity.Hertz, &f) {
		return false
	}
	if t.Unit.Dimension != quantity.Hertz.Dimension || t.ChangeFrom < 0 || !(c > 0 && f > 0) {
		r.Add(limit, "limit in cents", "more than zero, on the change of a frequency")
		return false
	}
	t.Low, t.High = centsAbove(f, -c), centsAbove(f, c)
	t.limits = fmt.Sprintf("at most ±%s at %s (%s to %s)", quantity.Format(c, quantity.Cent, 0),
		quantity.Format(f, quantity.Hertz, 0), quantity.Format(t.Low, t.Unit, 4), quantity.Format(t.High, t.Unit, 4))
	return true
}

func (r *reader) readBetween(n *document.Node, t *Target) bool {
	if n.Kind != document.Sequence || len(n.Items) != 2 {
		r.Add(n, "between", "two values, [low, high]")
		return false
	}
	if !r.read(n.Items[0], t.Unit, &t.Low) || !r.read(n.Items[1], t.Unit, &t.High) {
		return false
	}
	if !(t.Low < t.High) {
		r.Add(n.Items[1], "between", "a high above the low")
		return false
	}
	return true
}

// asked puts a target into words.
func (r *reader) asked(t *Target) string {
	var at []string
	for _, i := range t.At {
		at = append(at, r.build.Conditions[i].Name)
	}
	what := t.Output.String()
	if t.limits == "" {
		t.limits = limitText(t.Low, t.High, t.Unit)
	}
	if t.ChangeFrom >= 0 {
		what = "change of " + what + " from " + r.build.Conditions[t.ChangeFrom].Name + " to"
	} else {
		what += " at"
	}
	return fmt.Sprintf("%s %s %s on %s", what, strings.Join(at, ", "), t.limits, t.shareText())
}

// limitText puts two limits into words.
func limitText(low, high float64, u quantity.Unit) string {
	if math.Abs(low+high) <= 1e-12*high {
		return "at most ±" + quantity.Format(high, u, 0)
	}
	return "from " + quantity.Format(low, u, 0) + " to " + quantity.Format(high, u, 0)
}

// shareText puts the demanded share into words.
func (t *Target) shareText() string {
	if t.WorstCase {
		return "every corner"
	}
	return quantity.Format(t.Share, quantity.Percent, 0) + " of the units"
}
