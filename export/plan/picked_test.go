package plan

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"batchwright/bom/offer"
	"batchwright/export/workbook"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
)

// lampPicks is what a search might have said of the lamps. Money counts in
// ten-thousandths.
func lampPicks() *pick.Result {
	coil := pick.Piece{Family: "drum-choke", Text: "1 mH", Tolerance: 0.05}
	return &pick.Result{
		ProvedCheapest: true, Candidates: 12, Examined: 9, Simulated: 3, CutByDominance: 1, CutByBound: 2, Total: 1_000_000,
		Choices: []pick.Choice{
			{Positions: []string{"half.upper", "half.lower"}, Refs: []string{"R1", "R2"}, Combine: "single", UnitCost: 450, Why: "the cheapest that is sold",
				Parts: []pick.Piece{{Family: "metal-film-100", Text: "10 kΩ", Tolerance: 0.01}}},
			{Positions: []string{"tank.coil"}, Refs: []string{"L1"}, Combine: "series", Lots: "mixed", UnitCost: 9700, Parts: []pick.Piece{coil, {Family: "ferrite-pot", Text: "22 uH", Tolerance: 0.1}}},
		},
		Binding: &pick.Binding{Target: "warm drift", Saving: 176_800, Tighter: "±2.7 kHz", Total: 1_045_800},
		Checks:  []pick.Check{{Target: "warm drift", Predicted: 0.996, Simulated: 0.9876}, {Target: "level", Predicted: 0.996, Simulated: 0.995}},
		Alternates: []pick.Alternate{{
			Refs: []string{"L1"}, Line: "drum-choke 1 mH ±5 %", More: -8100, Drifts: []pick.Moved{{Target: "warm drift", Unit: "Hz", From: 2400, To: 2600}},
			Instead: []pick.Choice{{Refs: []string{"L1"}, Combine: "parallel", Parts: []pick.Piece{coil, coil}}},
		}},
		Irreplaceable: []pick.Irreplaceable{{Refs: []string{"R1", "R2"}, Line: "metal-film-100 10 kΩ ±1 %", Why: "no choice without it meets every target"}},
	}
}

// The workbook has the words of the terminal, and a word on the chosen line
// that nothing can stand in for.
func TestPicked(t *testing.T) {
	w := lampWork(t)
	w.Pick = lampPicks()
	k := Compose(w).Picks
	want := workbook.Picks{
		Choices: []workbook.Picked{
			{Refs: "R1, R2", Part: "metal-film-100 10 kΩ ±1 %", UnitCost: 0.045, Why: "the cheapest that is sold"},
			{Refs: "L1", Part: "drum-choke 1 mH ±5 % + ferrite-pot 22 uH ±10 %, mixed lots", UnitCost: 0.97},
		},
		Proof:   ProofSentence(*w.Pick),
		Binding: "warm drift: without it the order would be 17.68 cheaper, to first order. A tenth tighter (±2.7 kHz) the order would cost 104.58, 4.58 more.",
		Checks:  []string{"warm drift: 99.6 % of the units to first order, 98.8 % in simulation, which counts."},
		Alternates: []workbook.Alternate{
			{Refs: "L1", Line: "drum-choke 1 mH ±5 %", Instead: "drum-choke 1 mH ±5 % ∥ drum-choke 1 mH ±5 %", More: -0.81, Drifts: "warm drift within 2.60 kHz instead of 2.40 kHz"},
			{Refs: "R1, R2", Line: "metal-film-100 10 kΩ ±1 %", Instead: "nothing: no choice without it meets every target", More: math.NaN()},
		},
		Note: AlternatesNote(w),
	}
	if d := cmp.Diff(want, k, cmpopts.EquateNaNs()); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
	for _, part := range []string{"12 combinations, 9 judged, 3 simulated", "1 dominated option and 2 partial combinations"} {
		if !strings.Contains(k.Proof, part) {
			t.Errorf("the proof has no %q: %s", part, k.Proof)
		}
	}
	if !strings.Contains(k.Note, " 400 units") || !strings.Contains(k.Note, "Demonstration prices, invented") {
		t.Errorf("the note has no units, or does not say whose prices: %s", k.Note)
	}
}

// Why a search found nothing better stands once: with the choices in the
// proof, without any among the findings.
func TestWhyOnce(t *testing.T) {
	w := lampWork(t)
	w.Pick = lampPicks()
	w.Pick.ProvedCheapest, w.Pick.Why = false, "the search ended early"
	for name, choices := range map[string][]pick.Choice{"with choices": w.Pick.Choices, "without": nil} {
		w.Pick.Choices = choices
		p := Compose(w)
		all := p.Picks.Proof + strings.Join(p.Findings, "\n")
		if n := strings.Count(strings.ToLower(all), "the search ended early"); n != 1 {
			t.Errorf("%s: said %d times: %s", name, n, all)
		}
	}
}

// The target of the lamps allows 3 kHz either way; what the second point does
// not change is not said again.
func TestTraded(t *testing.T) {
	w := lampWork(t)
	if Compose(w).Trade != nil {
		t.Error("a trade out of nothing")
	}
	coil := pick.Choice{Refs: []string{"L1"}, Combine: "single", Parts: []pick.Piece{{Family: "drum-choke", Text: "1 mH", Tolerance: 0.05}}}
	other := coil
	other.Parts = []pick.Piece{{Family: "ferrite-pot", Text: "1 mH", Tolerance: 0.05}}
	film := pick.Choice{Refs: []string{"C1"}, Combine: "single", Parts: []pick.Piece{{Family: "c0g", Text: "220 pF"}}}
	w.Trade = &pick.Trade{Target: "warm drift", Asked: "asked so", Unit: "Hz", Share: 0.95, Complete: true, Examined: 7, Searches: 3, Points: []pick.TradePoint{
		{Choices: []pick.Choice{coil, film}, Total: offer.Money(100_000), PerUnit: 20_000, Predicted: 3100, Simulated: 3200, Complying: 0.91},
		{Choices: []pick.Choice{other, film}, Total: offer.Money(123_400), PerUnit: 25_000, Predicted: 2100, Simulated: 2200, Complying: 1, Met: true},
	}}
	want := &workbook.Trade{
		Target: "warm drift", Unit: "Hz", Asked: "asked so", Limit: 3000,
		Points: []workbook.TradePoint{
			{Order: 10, Unit: 2, Predicted: 3100, Simulated: 3200, Complying: 0.91, Parts: "L1 drum-choke 1 mH ±5 %; C1 c0g 220 pF"},
			{Order: 12.34, Unit: 2.5, Predicted: 2100, Simulated: 2200, Complying: 1, Met: true, Parts: "L1 ferrite-pot 1 mH ±5 %"},
		},
		Notes: []string{TradeSentence(NewTrade(w.Build, w.Seed, w.Simulate, w.Trade))},
	}
	if d := cmp.Diff(want, Compose(w).Trade); d != "" {
		t.Errorf("(-want +got):\n%s", d)
	}
}

// Of limits that are not alike either way the closer one counts; one that is
// open does not.
func TestTradeLimit(t *testing.T) {
	b := &build.Build{Targets: []build.Target{{Name: "even", Low: -3, High: 3}, {Name: "closer below", Low: -2, High: 3}, {Name: "open below", Low: math.Inf(-1), High: 5}}}
	for name, want := range map[string]float64{"even": 3, "closer below": 2, "open below": 5} {
		if got := TradeLimit(b, name); got != want {
			t.Errorf("%s: %v, want %v", name, got, want)
		}
	}
	if got := TradeLimit(b, "none"); !math.IsNaN(got) {
		t.Errorf("a target that is not there allows %v", got)
	}
}
