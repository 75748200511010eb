package bench

import (
	"math"

	"batchwright/tolerance/spread"
)

// Conformance is the probability that what was measured as y with a standard
// uncertainty u lies between low and high, if nothing was known of it before
// (JCGM 106:2012, 7.3 and 7.4):
//
//	p = Φ((high − y)/u) − Φ((low − y)/u)
func Conformance(y, u, low, high float64) float64 {
	return normal((high-y)/u) - normal((low-y)/u)
}

// Risks are the global risks of accepting by measurement: the shares of all
// units that are accepted and do not conform, and that conform and are not
// accepted.
type Risks struct{ Consumer, Producer float64 }

// GlobalRisks are those of units that scatter as the histogram says, tolerated
// between the limits and accepted where they read between others, read with a
// normal error of standard uncertainty u, which may depend on the value (JCGM 106:2012, 9.5.2):
//
//	R_C = ∫_{outside} g(η)·P(accepted | η) dη, R_P = ∫_{inside} g(η)·(1 − P(accepted | η)) dη
//
// with P(accepted | η) = Φ((high − η)/u) − Φ((low − η)/u) of the accepted
// limits. Within a bin g is even, a bin across a limit is cut there, and P is
// integrated exactly, with the u of its middle. Units beyond all numbers neither conform nor are
// accepted.
func GlobalRisks(g *spread.Histogram, tolerated, accepted spread.Limits, u func(value float64) float64) Risks {
	var r Risks
	low, high := float64(tolerated.Low), float64(tolerated.High)
	for bin, n := range g.Bins() {
		share := float64(n) / float64(g.Count())
		for _, piece := range cutAt(bin, low, high) {
			weight := share
			if bin.High > bin.Low {
				weight *= (piece.High - piece.Low) / (bin.High - bin.Low)
			}
			middle := (piece.Low + piece.High) / 2
			p := meanAccepted(piece, accepted, u(middle))
			if middle >= low && middle <= high {
				r.Producer += weight * (1 - p)
			} else {
				r.Consumer += weight * p
			}
		}
	}
	return r
}

// cutAt cuts a bin where limits fall into it.
func cutAt(b spread.Bin, limits ...float64) []spread.Bin {
	pieces := []spread.Bin{b}
	for _, l := range limits {
		last := &pieces[len(pieces)-1]
		if l > last.Low && l < last.High {
			rest := spread.Bin{Low: l, High: last.High}
			last.High = l
			pieces = append(pieces, rest)
		}
	}
	return pieces
}

// meanAccepted is the mean of P(accepted | η) over a bin. The integral of Φ is
// G(t) = t·Φ(t) + φ(t); in a bin that is narrow beside u its middle will do,
// with an error of the order of (width/u)²/24.
func meanAccepted(b spread.Bin, accepted spread.Limits, u float64) float64 {
	below := func(limit float64) float64 { // mean of Φ((limit − η)/u)
		width := (b.High - b.Low) / u
		if math.IsInf(limit, 0) || width < 1e-3 {
			return normal((limit - (b.Low+b.High)/2) / u)
		}
		return (integral((limit-b.Low)/u) - integral((limit-b.High)/u)) / width
	}
	return below(float64(accepted.High)) - below(float64(accepted.Low))
}

func normal(t float64) float64 { return math.Erfc(-t/math.Sqrt2) / 2 }

// integral is that of the normal distribution function from −∞ to t.
func integral(t float64) float64 {
	if math.IsInf(t, 0) {
		return math.Max(t, 0)
	}
	return t*normal(t) + math.Exp(-t*t/2)/math.Sqrt(2*math.Pi)
}
