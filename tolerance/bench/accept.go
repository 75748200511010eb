package bench

import (
	"fmt"
	"math"

	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// Uncertainty is an instrument's expanded uncertainty (k = 2) at a reading:
// its accuracy and floor are limits of error, taken as rectangular (JCGM
// 100:2008, 4.3.7), so
//
//	U = 2·(accuracy·|reading| + floor)/√3
func Uncertainty(i build.Instrument, reading float64) float64 {
	return 2 * (i.Accuracy*math.Abs(reading) + i.Floor) / math.Sqrt(3)
}

// changeUncertainty is that of the difference of two readings of one
// instrument. What is wrong in proportion is alike in both and stays in
// proportion to the change; the floors are not.
//
//	U = 2·(accuracy·|change| + √2·floor)/√3
func changeUncertainty(i build.Instrument, change float64) float64 {
	i.Floor *= math.Sqrt2
	return Uncertainty(i, change)
}

// window is how far a target's limits lie from what may be accepted.
type window struct {
	instrument  build.Instrument
	uncertainty func(build.Instrument, float64) float64
	loading     spread.Loading
	low, high   float64 // the target's, infinite where there is none
}

// tolerated are the target's limits as the instrument would show them.
func (w window) tolerated() spread.Limits {
	low, high := w.loading.Reading(w.low), w.loading.Reading(w.high)
	return spread.Limits{Low: spread.Figure(math.Min(low, high)), High: spread.Figure(math.Max(low, high))}
}

// guard is the expanded uncertainty (k = 2) of what a reading says of the value
// without the instrument:
//
//	w = √(U² + (2·u_loading)²)
func (w window) guard(i build.Instrument, reading float64) float64 {
	if math.IsInf(reading, 0) {
		return 0
	}
	return math.Hypot(w.uncertainty(i, reading), 2*w.loading.Uncertainty)
}

// accept draws the limits in by the guard band (JCGM 106:2012, 8.3.2: w = U);
// ok is false where nothing is left.
func (w window) accept(i build.Instrument) (l spread.Limits, ok bool) {
	l = w.tolerated()
	l.Low += spread.Figure(w.guard(i, float64(l.Low)))
	l.High -= spread.Figure(w.guard(i, float64(l.High)))
	return l, l.Low < l.High
}

// tooCoarse says which accuracy would leave something: the largest that does
// with the same floor, found by halving, since the guard bands grow with it;
// written with two digits, rounded down.
func (w window) tooCoarse() string {
	with := func(accuracy float64) bool {
		i := w.instrument
		i.Accuracy = accuracy
		_, ok := w.accept(i)
		return ok
	}
	text := "the " + w.instrument.Name + " is too coarse for the target: "
	if !with(0) {
		if i := w.instrument; i.Floor > 0 && w.loading.Uncertainty == 0 {
			return text + "its floor alone takes up the whole of it"
		}
		return text + "no accuracy would do, since units differ too much in how far it pulls them"
	}
	low, high := 0.0, w.instrument.Accuracy
	for range 100 {
		if middle := (low + high) / 2; with(middle) {
			low = middle
		} else {
			high = middle
		}
	}
	unit := quantity.Percent
	if low < 0.0005 {
		unit = quantity.PPM
	}
	digit := math.Pow(10, math.Floor(math.Log10(low))-1)
	return text + fmt.Sprintf("an accuracy of %s with the same floor would do", quantity.Format(math.Floor(low/digit*(1+1e-12))*digit, unit, 2))
}

// specificRisk is the larger of the chances of missing the target at either
// end of what is accepted.
func (w window) specificRisk(accepted spread.Limits) float64 {
	t, most := w.tolerated(), 0.0
	for _, end := range [][2]spread.Figure{{t.Low, accepted.Low}, {t.High, accepted.High}} {
		if limit, edge := float64(end[0]), float64(end[1]); !math.IsInf(edge, 0) {
			most = math.Max(most, 1-Conformance(edge, w.guard(w.instrument, limit)/2, float64(t.Low), float64(t.High)))
		}
	}
	return most
}

// globalRisks are those of the values without the instrument, with what is
// accepted put in their terms.
func (w window) globalRisks(g *spread.Histogram, accepted spread.Limits) Risks {
	back := func(reading spread.Figure) spread.Figure {
		return (reading - spread.Figure(w.loading.Shift)) / spread.Figure(w.loading.Scale)
	}
	low, high := back(accepted.Low), back(accepted.High)
	return GlobalRisks(g, spread.Limits{Low: spread.Figure(w.low), High: spread.Figure(w.high)},
		spread.Limits{Low: min(low, high), High: max(low, high)}, func(value float64) float64 {
			return w.guard(w.instrument, w.loading.Reading(value)) / 2 / math.Abs(w.loading.Scale)
		})
}
