package build

import (
	"sync"

	"batchwright/bom/order"
	"batchwright/bom/part"
	"batchwright/tolerance/scatter"
)

// figure is how one input of a piece is drawn, but for its lot.
type figure struct {
	shape        part.Shape
	rho          float64
	centre, half float64
}

// baseFigure is nominal·(1 + tolerance·z). The nominal value is the input's
// centre and not part of an equation, so that parts of other values leave the
// equations as they are.
func baseFigure(p part.Parameter) figure {
	return figure{p.Shape, p.Correlation.Value, p.Value, p.HalfWidth()}
}

// coefficientFigure is a coefficient's mean and its spread. What humidity and
// age do to a part follows from its material as α does, so all three share the
// family's correlation for temperature.
func coefficientFigure(s part.Scatter, spread part.Spread) figure {
	return figure{s.Shape, s.Correlation.Temperature, spread.Value, spread.Spread}
}

// whole is the place a piece keeps between the limits of a law.
var whole = part.Spread{Spread: 1}

// commonness is the product-moment correlation of two pieces' z that share a lot.
func commonness(s part.Shape, rho float64) float64 {
	k := likeness{s, rho}
	if v, known := known.Load(k); known {
		return v.(float64)
	}
	v := scatter.Correlation(s, rho)
	known.Store(k, v)
	return v
}

// likeness is what the correlation of two pieces follows from; known keeps what
// was worked out, which takes longer than asking.
type likeness struct {
	shape part.Shape
	rho   float64
}

var known sync.Map

// PieceInputs are the inputs that a piece brings to a model, by parameter, as
// a model compiled with CompileOpen has them; those that are not needed there
// are given all the same. Lots are numbered by what is bought and not, as a
// model numbers them for its draws, by the first reference: two pieces share a
// lot wherever their inputs have the same number.
func PieceInputs(p part.Part) map[string]Input {
	list := pieceInputs{part: p, key: order.Key(p), inputs: map[string]Input{}}
	switch {
	case p.Type.Trimmer():
		list.add("low", baseFigure(p.Parameters[0]))
		list.add("high", baseFigure(p.Parameters[1]))
		list.addSurroundings("", p.Parameters[1].Scatter)
	case len(p.Parameters) == 1:
		list.add("value", baseFigure(p.Parameters[0]))
		list.addSurroundings("", p.Parameters[0].Scatter)
		list.add("bias", coefficientFigure(p.Parameters[0].Scatter, whole))
	default:
		for _, q := range p.Parameters {
			list.add(q.Name, baseFigure(q))
			list.addSurroundings(q.Name+" ", q.Scatter)
		}
	}
	return list.inputs
}

type pieceInputs struct {
	part   part.Part
	key    string
	inputs map[string]Input
}

// add adds one input.
func (l *pieceInputs) add(parameter string, f figure) {
	column := scatter.Column{Shape: f.shape, Lot: -1, Centre: f.centre, HalfWidth: f.half}
	in := Input{Ref: l.part.Ref, Parameter: parameter, Column: column}
	if !l.part.LotsMixed && f.rho > 0 {
		in.Lot, in.Rho = lot(l.key, parameter), f.rho
		in.Common = commonness(f.shape, f.rho)
	}
	l.inputs[parameter] = in
}

// addSurroundings adds what temperature, humidity and age do.
func (l *pieceInputs) addSurroundings(prefix string, s part.Scatter) {
	temperature := coefficientFigure(s, s.Temperature)
	if len(s.Law) > 0 {
		temperature = coefficientFigure(s, whole)
	}
	l.add(prefix+"temperature", temperature)
	l.add(prefix+"humidity", coefficientFigure(s, s.Humidity))
	l.add(prefix+"ageing", coefficientFigure(s, s.Ageing.Spread))
}
