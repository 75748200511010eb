package part

import (
	"fmt"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

// BiasPoint is one point of a bias law: under a steady voltage of Share of the
// rated one the relative change lies between Low and High (fractions).
type BiasPoint struct{ Share, Low, High float64 }

// BiasLimits are the relative changes between which a capacitor lies under a
// steady voltage of a share of its rated one: straight lines between the law's
// points, held beyond the last; none without a law.
func (s Scatter) BiasLimits(share float64) (low, high float64) {
	if len(s.Bias) == 0 {
		return 0, 0
	}
	return between(s.Bias, share)
}

func (p BiasPoint) limits() (at, low, high float64) { return p.Share, p.Low, p.High }

// mostBias is the largest share of the rated voltage that a law may speak of;
// ten times what a part is made for is a slip of the pen.
const mostBias = 10

// ReadBias reads the key bias_law, if n has it, over the law in *s. Only
// capacitors have one, so it is none of ScatterKeys. Faults go to f.
//
//	bias_law: [[0 %, 0 %], [50 %, -40 %, -10 %], [100 %, -70 %, -20 %]]
//
// Each point is [share of the rated voltage, change], or with the lowest and
// the highest change, between which a piece keeps to one place. Nominal is what
// is measured without a voltage, so the first point is [0 %, 0 %].
func ReadBias(f *document.Faults, n *document.Node, s *Scatter) {
	m := n.Get("bias_law")
	if m == nil {
		return
	}
	const expected = "points [share of the rated voltage, change] or [share, lowest, highest], the first [0 %, 0 %], in order of share"
	if m.Kind != document.Sequence || len(m.Items) < 2 {
		f.Add(m, "not a bias law", "two or more "+expected)
		return
	}
	var law []BiasPoint
	sound := true
	for i, item := range m.Items {
		p, ok := readBiasPoint(f, item, expected)
		switch {
		case ok && i == 0 && p != BiasPoint{}:
			f.Add(item, "bias law that does not start without a change at 0 V", expected)
			ok = false
		case ok && len(law) > 0 && !(p.Share > law[len(law)-1].Share):
			f.Add(item.Items[0], "share not above the one before", expected)
			ok = false
		}
		if sound = sound && ok; ok {
			law = append(law, p)
		}
	}
	if sound {
		s.Bias = law
	}
}

// readBias reads a family's law, which only capacitors have.
func (r *reader) readBias() {
	n := r.node.Get("bias_law")
	switch {
	case n == nil:
	case r.family.Type != Capacitor:
		r.complain(n, fmt.Sprintf("bias law of a %s", r.family.Type), "none: it belongs to capacitors")
	default:
		ReadBias(r.faults, r.node, &r.family.Scatter)
	}
}

// readBiasPoint reads one point.
func readBiasPoint(f *document.Faults, n *document.Node, expected string) (BiasPoint, bool) {
	if n.Kind != document.Sequence || len(n.Items) < 2 || len(n.Items) > 3 {
		f.Add(n, "not a point of a bias law", expected)
		return BiasPoint{}, false
	}
	share, ok := f.Quantity(n.Items[0], quantity.Percent)
	if ok && !(share.Value >= 0 && share.Value <= mostBias) {
		f.Add(n.Items[0], "share out of range", "0 % to 1000 % of the rated voltage")
		ok = false
	}
	changes, good := readChanges(f, n.Items[1:])
	for i, item := range n.Items[1:] {
		if good && !(changes[i] > -1) {
			f.Add(item, "change that leaves nothing", "more than -100 %")
			good = false
		}
	}
	if !ok || !good {
		return BiasPoint{}, false
	}
	if len(n.Items) == 2 {
		return BiasPoint{share.Value, changes[0], changes[0]}, true
	}
	if changes[0] > changes[1] {
		f.Add(n.Items[1], "lower limit above the upper one", expected)
		return BiasPoint{}, false
	}
	return BiasPoint{share.Value, changes[0], changes[1]}, true
}
