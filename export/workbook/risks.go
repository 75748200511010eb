package workbook

import (
	"fmt"
	"math"

	"batchwright/tolerance/bench"
)

// risks writes how often each window in which a target is proved decides
// wrongly.
func (p *page) risks() {
	first := true
	for _, r := range p.plan.Readings {
		if r.Accept == nil || !finite(float64(r.SpecificRisk)) {
			continue
		}
		if first {
			first = false
			p.section("Risks of the windows that prove a target")
		}
		p.fact(r.Point, riskWords(r), "Global risks: JCGM 106:2012, 9.5.2; at the edge: 7.3")
	}
}

// riskWords puts a window's risks in words.
func riskWords(r bench.Reading) string {
	row := readingRow(r)
	text := fmt.Sprintf("Between %s and %s %s. ", row.text(row.acceptLow*row.by), row.text(row.acceptHigh*row.by), row.symbol)
	if finite(float64(r.ConsumerRisk)) {
		text += fmt.Sprintf("Of all simulated units whose trims reached, %s are accepted and miss the target (consumer's risk), %s meet it and are not accepted (producer's risk). ",
			chance(float64(r.ConsumerRisk)), chance(float64(r.ProducerRisk)))
	}
	return text + fmt.Sprintf("A unit that reads the very edge misses it with %s.", chance(float64(r.SpecificRisk)))
}

// chance is a small share in words: two digits of a percentage, or how small
// it is.
func chance(x float64) string {
	switch {
	case x == 0:
		return "none"
	case x < 1e-6:
		return "less than 0.0001\u00a0%"
	case x > 0.9999:
		return "more than 99.99\u00a0%"
	}
	decimals := max(0, 1-int(math.Floor(math.Log10(100*x))))
	return fmt.Sprintf("%.*f\u00a0%%", decimals, 100*x)
}
