package build

import (
	"hash/fnv"
	"math"

	"batchwright/bom/part"
	"batchwright/tolerance/scatter"
	"batchwright/tolerance/tape"
)

// reference25 is the temperature that every coefficient is counted from, °C.
const reference25 = 25

// source is where a figure belongs: a part in a stage, or a setting.
type source struct {
	ref    string
	prefix string // of the parameter's name, for parts with several: "beta "
	line   string // buying line; "" shares no lot
	mixed  bool
	stage  *Stage
}

// placed is the value of a part in a role, or of one of its parameters.
func (c *compiler) placed(e *environment, s *Stage, p *Place, parameter string) tape.Ref {
	if parameter == "fitted" {
		return c.Graph.Constant(boolean(p.Fitted))
	}
	if !p.Fitted {
		return c.Graph.Constant(0)
	}
	if p.Paired() {
		return c.joined(p, c.single(e, s, p, p.Part), c.single(e, s, p, p.Second))
	}
	x := c.source(s, p.Part)
	if p.Type.Trimmer() {
		return c.trimmer(e, x, s, p)
	}
	if p.Geometry != nil {
		return c.shaped(e, x, p.Geometry, p.Part.Parameters[0].Scatter)
	}
	if len(p.Part.Parameters) == 1 {
		return c.single(e, s, p, p.Part)
	}
	for _, q := range p.Part.Parameters {
		if q.Name == parameter {
			x.prefix = q.Name + " "
			return c.element(e, x, q, q.Name)
		}
	}
	return c.Graph.Constant(math.NaN())
}

// source is where a part's figures belong.
func (c *compiler) source(s *Stage, p part.Part) source {
	return source{ref: p.Ref, line: c.lines[p.Ref], mixed: p.LotsMixed, stage: s}
}

// single is the value of a piece that has no other figure.
func (c *compiler) single(e *environment, s *Stage, p *Place, piece part.Part) tape.Ref {
	x := c.source(s, piece)
	return c.Graph.Mul(c.element(e, x, piece.Parameters[0], "value"), c.biased(e, x, p, piece))
}

func boolean(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

// trimmer is the value at the trimmer's setting: between its two ends, each
// with its own tolerance, moved together by temperature and age.
func (c *compiler) trimmer(e *environment, x source, s *Stage, p *Place) tape.Ref {
	g := c.Graph
	low, high := p.Part.Parameters[0], p.Part.Parameters[1]
	from, to := c.base(x, low, "low"), c.base(x, high, "high")
	setting := g.Constant(p.Position)
	if i := c.Build.TrimOf(s.Name, p.Role); i >= 0 {
		setting = e.settings[i]
	}
	v := g.Add(from, g.Mul(setting, g.Sub(to, from)))
	return g.Mul(v, c.surround(e, x, high.Scatter))
}

// element is a parameter at the stage's own temperature and age:
//
//	nominal·(1 + tolerance·z1)·(1 + α·Δ)·(1 + η·ΔH)·(1 + a·g(age))
func (c *compiler) element(e *environment, x source, p part.Parameter, name string) tape.Ref {
	return c.Graph.Mul(c.base(x, p, name), c.surround(e, x, p.Scatter))
}

// base is a parameter as it is delivered, at 25 °C, 50 % humidity and new.
func (c *compiler) base(x source, p part.Parameter, name string) tape.Ref {
	return c.input(x.ref, name, c.column(x, name, baseFigure(p)))
}

// surround is the factor by which temperature, humidity and age change a part.
func (c *compiler) surround(e *environment, x source, s part.Scatter) tape.Ref {
	g := c.Graph
	factor := c.thermal(e, x, s)
	if s.Humidity != (part.Spread{}) || c.open[x.ref] {
		eta := c.coefficient(x, "humidity", s, s.Humidity)
		factor = g.Mul(factor, c.onePlus(eta, g.Constant(c.variableNamed(e, Humidity)-0.5)))
	}
	if s.Ageing.Spread != (part.Spread{}) || c.open[x.ref] {
		a := c.coefficient(x, "ageing", s, s.Ageing.Spread)
		factor = g.Mul(factor, c.onePlus(a, g.Constant(elapsed(s.Ageing.Per, c.variableNamed(e, Age)))))
	}
	return factor
}

// thermal is 1 + α·Δ, or 1 + the law's change where the family has a law.
func (c *compiler) thermal(e *environment, x source, s part.Scatter) tape.Ref {
	g := c.Graph
	single := x.line != "" && x.prefix == "" // its derivative by α is always wanted
	if !single && !c.open[x.ref] && len(s.Law) == 0 && s.Temperature == (part.Spread{}) {
		return g.Constant(1)
	}
	delta := g.Add(g.Constant(c.variableNamed(e, Temperature)-reference25), c.rise(e, x.stage))
	if len(s.Law) == 0 {
		return c.onePlus(c.coefficient(x, "temperature", s, s.Temperature), delta)
	}
	z := c.coefficient(x, "temperature", s, whole)
	celsius := g.Add(delta, g.Constant(reference25))
	at := func(p part.LawPoint) float64 { return p.Celsius }
	middle := interpolate(g, s.Law, celsius, at, func(p part.LawPoint) float64 { return (p.Low + p.High) / 2 })
	half := interpolate(g, s.Law, celsius, at, func(p part.LawPoint) float64 { return (p.High - p.Low) / 2 })
	return g.Add(g.Constant(1), g.Add(middle, g.Mul(z, half)))
}

// onePlus is 1 + a·b.
func (c *compiler) onePlus(a, b tape.Ref) tape.Ref {
	return c.Graph.Add(c.Graph.Constant(1), c.Graph.Mul(a, b))
}

// coefficient is an input such as α.
func (c *compiler) coefficient(x source, name string, s part.Scatter, spread part.Spread) tape.Ref {
	return c.input(x.ref, x.prefix+name, c.column(x, name, coefficientFigure(s, spread)))
}

// interpolate is the piecewise linear law through the points, level beyond
// the first and the last:
//
//	y = y0 + Σ slope_i·(clamp(t, t_i, t_i+1) − t_i)
func interpolate[P any](g *tape.Graph, law []P, t tape.Ref, at, y func(P) float64) tape.Ref {
	sum := g.Constant(y(law[0]))
	for i := 1; i < len(law); i++ {
		a, b := law[i-1], law[i]
		slope := (y(b) - y(a)) / (at(b) - at(a))
		within := g.Max(g.Constant(at(a)), g.Min(g.Constant(at(b)), t))
		sum = g.Add(sum, g.Mul(g.Constant(slope), g.Sub(within, g.Constant(at(a)))))
	}
	return sum
}

// elapsed is g(age): decades of hours since one hour, or thousands of hours.
func elapsed(per part.Clock, seconds float64) float64 {
	hours := seconds / 3600
	if per == part.PerThousandHours {
		return hours / 1000
	}
	if hours <= 1 {
		return 0
	}
	return math.Log10(hours)
}

// column is how one input of a piece is drawn. Pieces on one buying line share
// a lot, one draw a batch for each parameter.
func (c *compiler) column(x source, name string, f figure) scatter.Column {
	out := scatter.Column{
		Shape: f.shape, Lot: -1, Stream: stream(x.ref, x.prefix+name), Centre: f.centre, HalfWidth: f.half,
	}
	if x.line != "" && !x.mixed && f.rho > 0 {
		out.Lot, out.Rho = lot(c.lots[x.line], x.prefix+name), f.rho
	}
	return out
}

// input is the graph's input for a parameter of a piece, made on first use.
func (c *compiler) input(ref, parameter string, column scatter.Column) tape.Ref {
	k := ref + "|" + parameter
	if v, ok := c.inputs[k]; ok {
		return v
	}
	v := c.Graph.Input()
	c.inputs[k] = v
	in := Input{Ref: ref, Parameter: parameter, Column: column}
	if column.Lot >= 0 {
		in.Common = commonness(column.Shape, column.Rho)
	}
	c.Inputs = append(c.Inputs, in)
	return v
}

// stream numbers the draws of a parameter of a piece. It follows from the
// names alone, so that one part more or another family changes no other draw.
func stream(ref, parameter string) uint64 {
	h := fnv.New64a()
	h.Write([]byte(ref + "|" + parameter))
	return h.Sum64()
}

// lot numbers the draws that a buying line's pieces share.
func lot(first, parameter string) int {
	return int(stream("lot of "+first, parameter) >> 2)
}
