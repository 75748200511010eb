package part

import (
	"fmt"
	"math"

	"batchwright/bom/document"
	"batchwright/bom/quantity"
)

// ScatterKeys are the keys by which a file says how a figure scatters.
var ScatterKeys = []string{
	"tolerance", "shape", "temperature_coefficient", "temperature_law",
	"humidity_coefficient", "ageing", "correlation",
}

// shapes are the words a file may name a shape by.
var shapes = []string{string(Normal), string(Uniform), string(Triangular), string(Bimodal)}

// ReadScatter reads the scatter keys present on mapping n over *s; what n does
// not say stays. A tolerance in per cent or ppm is a fraction of the value,
// one in the figure's own unit is absolute. Faults go to f.
func ReadScatter(f *document.Faults, n *document.Node, unit quantity.Unit, s *Scatter) {
	if n == nil || n.Kind != document.Mapping {
		return
	}
	if m := n.Get("tolerance"); m != nil {
		if t, absolute, ok := readTolerance(f, m, unit); ok {
			s.Tolerance, s.Absolute = t, absolute
		}
	}
	if m := n.Get("shape"); m != nil {
		if w, ok := f.Word(m, "a shape", shapes...); ok {
			s.Shape = Shape(w)
		}
	}
	if m := n.Get("temperature_coefficient"); m != nil {
		readSpread(f, m, quantity.PPMPerKelvin, &s.Temperature)
		s.Law = nil // a slope takes the place of the family's law
	}
	if m := n.Get("temperature_law"); m != nil {
		if law, ok := readLaw(f, m); ok {
			s.Law, s.Temperature = law, Spread{}
		}
		if c := n.Get("temperature_coefficient"); c != nil {
			f.Add(m, "both a temperature law and a temperature coefficient", "one of the two")
		}
	}
	if m := n.Get("humidity_coefficient"); m != nil {
		readSpread(f, m, quantity.PPMPerPercentRH, &s.Humidity)
	}
	if m := n.Get("ageing"); m != nil {
		readAgeing(f, m, &s.Ageing)
	}
	if m := n.Get("correlation"); m != nil {
		readCorrelation(f, m, &s.Correlation)
	}
}

// readTolerance reads "5 %", "30 ppm" (relative) or "3 mV" (absolute).
func readTolerance(f *document.Faults, n *document.Node, unit quantity.Unit) (t float64, absolute, ok bool) {
	expected := "a half width such as 5 %"
	if unit.Symbol != "" {
		expected += fmt.Sprintf(", or one in %s", unit.Symbol)
	}
	if n.Kind != document.Scalar {
		f.Add(n, "not a tolerance", expected)
		return 0, false, false
	}
	if q, err := quantity.Parse(n.Value, quantity.Percent); err == nil {
		if !(q.Value >= 0 && q.Value <= 1) {
			f.Add(n, "tolerance out of range", "0 % to 100 %")
			return 0, false, false
		}
		return q.Value, false, true
	}
	q, err := quantity.Parse(n.Value, unit)
	if err != nil {
		f.Add(n, "not a tolerance", expected)
		return 0, false, false
	}
	if !(q.Value >= 0) {
		f.Add(n, "tolerance below zero", expected)
		return 0, false, false
	}
	return q.Value, true, true
}

// readSpread reads a scalar, or a mapping of value and spread.
func readSpread(f *document.Faults, n *document.Node, unit quantity.Unit, s *Spread) {
	if n.Kind != document.Mapping {
		if q, ok := f.Quantity(n, unit); ok {
			*s = Spread{Value: q.Value}
		}
		return
	}
	if !f.Keys(n, "value", "spread") {
		return
	}
	readHalves(f, n, unit, s)
}

// readHalves reads the keys value and spread of n; one left out is zero.
func readHalves(f *document.Faults, n *document.Node, unit quantity.Unit, s *Spread) {
	var read Spread
	if m := n.Get("value"); m != nil {
		if q, ok := f.Quantity(m, unit); ok {
			read.Value = q.Value
		}
	}
	if m := n.Get("spread"); m != nil {
		q, ok := f.Quantity(m, unit)
		switch {
		case ok && q.Value < 0:
			f.Add(m, "spread below zero", "a half width of zero or more")
		case ok:
			read.Spread = q.Value
		}
	}
	*s = read
}

// readAgeing reads {value, spread, per}.
func readAgeing(f *document.Faults, n *document.Node, a *Ageing) {
	if !f.Keys(n, "value", "spread", "per") {
		return
	}
	readHalves(f, n, quantity.Percent, &a.Spread)
	per := n.Get("per")
	if per == nil {
		f.Add(n, "ageing does not say per what", "per: decade, or per: 1000 h")
		return
	}
	if w, ok := f.Word(per, "an ageing clock", string(PerDecade), string(PerThousandHours)); ok {
		a.Per = Clock(w)
	}
}

// readCorrelation reads {value, temperature}; one left out is zero.
func readCorrelation(f *document.Faults, n *document.Node, c *Correlation) {
	if !f.Keys(n, "value", "temperature") {
		return
	}
	var read Correlation
	for _, k := range []struct {
		key string
		to  *float64
	}{{"value", &read.Value}, {"temperature", &read.Temperature}} {
		m := n.Get(k.key)
		if m == nil {
			continue
		}
		q, ok := f.Quantity(m, quantity.One)
		switch {
		case ok && !(q.Value >= 0 && q.Value <= 1):
			f.Add(m, "correlation out of range", "0 (pieces have nothing in common) to 1 (a lot is all alike)")
		case ok:
			*k.to = q.Value
		}
	}
	*c = read
}

// readLaw reads a list of [°C, limit] (symmetric) or [°C, low, high].
func readLaw(f *document.Faults, n *document.Node) ([]LawPoint, bool) {
	const expected = "points [°C, limit] or [°C, low, high] in order of temperature"
	if n.Kind != document.Sequence || len(n.Items) < 2 {
		f.Add(n, "not a temperature law", "two or more "+expected)
		return nil, false
	}
	var law []LawPoint
	sound := true
	for _, item := range n.Items {
		p, ok := readLawPoint(f, item, expected)
		if ok && len(law) > 0 && !(p.Celsius > law[len(law)-1].Celsius) {
			f.Add(item.Items[0], "temperature not above the one before", expected)
			ok = false
		}
		if !ok {
			sound = false
			continue
		}
		law = append(law, p)
	}
	return law, sound
}

// readLawPoint reads one point.
func readLawPoint(f *document.Faults, n *document.Node, expected string) (LawPoint, bool) {
	if n.Kind != document.Sequence || len(n.Items) < 2 || len(n.Items) > 3 {
		f.Add(n, "not a point of a temperature law", expected)
		return LawPoint{}, false
	}
	celsius, ok := readCelsius(f, n.Items[0])
	limits, good := readChanges(f, n.Items[1:])
	if !ok || !good {
		return LawPoint{}, false
	}
	if len(n.Items) == 2 {
		half := math.Abs(limits[0])
		return LawPoint{Celsius: celsius, Low: -half, High: half}, true
	}
	if limits[0] > limits[1] {
		f.Add(n.Items[1], "lower limit above the upper one", expected)
		return LawPoint{}, false
	}
	return LawPoint{Celsius: celsius, Low: limits[0], High: limits[1]}, true
}

// readChanges reads one or two relative changes.
func readChanges(f *document.Faults, items []*document.Node) (changes [2]float64, ok bool) {
	ok = true
	for i, item := range items {
		q, good := f.Quantity(item, quantity.Percent)
		if good && !(q.Value >= -1 && q.Value <= 1) {
			f.Add(item, "limit out of range", "-100 % to 100 %")
			good = false
		}
		changes[i] = q.Value
		ok = ok && good
	}
	return changes, ok
}

// readCelsius reads a temperature with its unit, or the bare number of degrees
// that a law's points are written in.
func readCelsius(f *document.Faults, n *document.Node) (float64, bool) {
	if n.Kind == document.Scalar {
		if q, err := quantity.Parse(n.Value, quantity.One); err == nil && q.Value >= -273.15 && q.Value <= 1000 {
			return q.Value, true
		}
	}
	q, ok := f.Quantity(n, quantity.Celsius)
	return q.Value, ok
}
