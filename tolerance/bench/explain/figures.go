package explain

import (
	"fmt"
	"math"

	"batchwright/bom/part"
)

// What a broken semiconductor comes to in the figures that the equations know
// (common practice, no source).
const (
	blockedVolts = 1e3  // a junction that never conducts
	shortedVolts = 1e-3 // and one that always does
	reverseBeta  = 2    // of a transistor with collector and emitter exchanged
	deadHertz    = 1    // gain-bandwidth of an amplifier that does not amplify
	pinnedVolts  = 1e3  // offset of one that stands at a rail
)

// regulated are the voltages that fixed regulators are sold for (common
// practice, no source).
var regulated = []float64{5, 6, 8, 9, 10, 12, 15, 18, 24}

// figures are the faults of parts that have several figures.
func (c *catalogue) figures(p *part.Part) {
	value := func(name string) float64 {
		if q := p.Parameter(name); q != nil {
			return q.Value
		}
		return 0
	}
	switch p.Type {
	case part.Transistor:
		c.add(Open, p, "missing or open", change{"vbe", blockedVolts}, change{"beta", 1})
		c.add(Shorted, p, "shorted from base to emitter", change{"vbe", shortedVolts}, change{"beta", 1})
		c.add(Reversed, p, "the wrong way round", change{"beta", reverseBeta})
		c.add(Figures, p, "with a tenth of its gain", change{"beta", value("beta") / 10})
	case part.Diode:
		c.add(Open, p, "missing or open", change{"drop", blockedVolts})
		c.add(Reversed, p, "the wrong way round", change{"drop", blockedVolts})
		c.add(Shorted, p, "shorted", change{"drop", shortedVolts}, change{"drop_slope", 0}, change{"ideality", 1e-3})
	case part.OpAmp:
		c.add(Open, p, "missing or without supply", change{"gbw", deadHertz}, change{"slew", deadHertz})
		c.add(Figures, p, "stuck at the positive rail", change{"offset", pinnedVolts})
		c.add(Figures, p, "stuck at the negative rail", change{"offset", -pinnedVolts})
		c.add(Figures, p, "a hundred times too slow", change{"gbw", value("gbw") / 100}, change{"slew", value("slew") / 100})
	case part.Regulator:
		c.regulator(p, value)
	case part.Zener:
		c.valuedFigure(p, "voltage", value("voltage"))
		c.add(Open, p, "missing or open", change{"voltage", blockedVolts})
		c.add(Shorted, p, "shorted", change{"voltage", shortedVolts})
		c.add(Reversed, p, "the wrong way round", change{"voltage", 0.7})
	case part.Crystal:
		f := value("frequency")
		c.add(Decade, p, "ten times too large", change{"frequency", 10 * f})
		c.add(Decade, p, "ten times too small", change{"frequency", f / 10})
		c.add(Figures, p, "half the frequency", change{"frequency", f / 2})
		c.add(Figures, p, "twice the frequency", change{"frequency", 2 * f})
	}
}

func (c *catalogue) regulator(p *part.Part, value func(string) float64) {
	if v := value("output"); v != 0 {
		c.add(Open, p, "missing or open", change{"output", v * 1e-6})
		c.add(Shorted, p, "shorted from input to output", change{"output", math.Copysign(blockedVolts, v)}, change{"dropout", 0})
		for _, x := range nextTo(regulated, math.Abs(v)) {
			x = math.Copysign(x, v)
			c.add(Neighbour, p, fmt.Sprintf("for %s instead of %s", part.Text(x, p.Main().Unit), p.ValueText()), change{"output", x})
		}
		return
	}
	v := value("reference")
	c.add(Open, p, "missing or open", change{"reference", v * 1e-6}, change{"adjust_current", 0})
	c.add(Shorted, p, "shorted from input to output", change{"reference", math.Copysign(blockedVolts, v)}, change{"dropout", 0})
}

func (c *catalogue) valuedFigure(p *part.Part, name string, v float64) {
	for _, x := range neighbours("E24", v) {
		c.add(Neighbour, p, fmt.Sprintf("%s instead of %s", part.Text(x, p.Main().Unit), p.ValueText()), change{name, x})
	}
}

// nextTo are the figures of a rising list just below and just above one.
func nextTo(list []float64, v float64) []float64 {
	var below, above []float64
	for _, x := range list {
		switch {
		case x < v*(1-1e-9):
			below = []float64{x}
		case x > v*(1+1e-9) && above == nil:
			above = []float64{x}
		}
	}
	return append(below, above...)
}
