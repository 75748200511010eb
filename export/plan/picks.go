package plan

import (
	"fmt"
	"math"
	"strings"

	"batchwright/bom/offer"
	"batchwright/bom/order"
	"batchwright/bom/quantity"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
)

// ChoiceText is what was picked: "polystyrene 220 pF ±2.5 %", of two pieces
// each: "c0g 180 pF ±5 % ∥ polystyrene 39 pF ±2.5 %".
func ChoiceText(c pick.Choice) string {
	var pieces []string
	for _, p := range c.Parts {
		pieces = append(pieces, pieceText(p))
	}
	text := strings.Join(pieces, build.Combine(c.Combine).Sign())
	if c.Lots == "mixed" {
		text += ", mixed lots"
	}
	return text
}

func pieceText(p pick.Piece) string {
	text := strings.TrimSpace(p.Family + " " + p.Text)
	if p.Tolerance > 0 {
		text += " ±" + quantity.Format(p.Tolerance, quantity.Percent, 0)
	}
	return text
}

// ProofSentence says how the picks were found and how sure it is that nothing
// cheaper would do.
func ProofSentence(r pick.Result) string {
	how := "Not proved to be the cheapest"
	switch {
	case r.Searched != "":
		how = steadiestSentence(r)
	case r.ProvedCheapest && r.Why != "":
		how = capital(r.Why)
	case r.ProvedCheapest:
		how = "Proved: nothing cheaper meets the targets; every cheaper choice misses one, to first order with room to spare or in simulation"
	case r.Why != "":
		how = capital(r.Why)
	}
	if r.Provided != "" {
		how += ". " + capital(r.Provided)
	}
	return fmt.Sprintf("%s. %s, %d judged, %d simulated; %s and %s ruled out unseen.", how, candidates(r),
		r.Examined, r.Simulated, many(r.CutByDominance, "dominated option"), many(r.CutByBound, "partial combination"))
}

// steadiestSentence says how the steadiest at a price was found.
func steadiestSentence(r pick.Result) string {
	text := capital(r.Searched)
	if r.Why != "" {
		return text + " that was found: " + r.Why
	}
	return text + "; proved to first order: no other choice within it that meets the other targets is steadier"
}

// candidates is how many combinations exist.
func candidates(r pick.Result) string {
	if r.Candidates == math.MaxInt {
		return "Countless combinations"
	}
	return many(r.Candidates, "combination")
}

// many counts things in words: "1 option", "3 options".
func many(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

func capital(s string) string { return strings.ToUpper(s[:1]) + s[1:] }

// BindingSentence says which target costs most, and what a tighter one would.
func BindingSentence(r pick.Result) string {
	b := r.Binding
	switch {
	case b == nil && (len(r.Choices) == 0 || r.Total == 0 || !r.ProvedCheapest):
		return ""
	case b == nil:
		return "No target does, to first order: dropping any one of them would make nothing cheaper."
	}
	text := fmt.Sprintf("%s: without it the order would be %v cheaper, to first order.", b.Target, b.Saving)
	if b.Unknown {
		return text + fmt.Sprintf(" What it would cost a tenth tighter (%s) was not found in time.", b.Tighter)
	}
	if b.Out {
		return text + fmt.Sprintf(" A tenth tighter (%s) it is out of reach of every choice.", b.Tighter)
	}
	return text + fmt.Sprintf(" A tenth tighter (%s) the order would cost %v, %s.", b.Tighter, b.Total, difference(b.Total-r.Total))
}

// difference is how much dearer something is.
func difference(m offer.Money) string {
	switch {
	case m > 0:
		return fmt.Sprintf("%v more", m)
	case m < 0:
		return fmt.Sprintf("%v less", -m)
	}
	return "no more"
}

// Signed is a difference of money with its sign.
func Signed(m offer.Money) string {
	if m < 0 {
		return "−" + (-m).String()
	}
	return "+" + m.String()
}

// apart is how far the picture's share and the simulation's must be from each
// other to be worth a word.
const apart = 0.005

// CheckSentences say where the linear picture that the search used and the
// simulation disagree, and by how much.
func CheckSentences(r pick.Result) []string {
	var list []string
	for _, c := range r.Checks {
		p, s := float64(c.Predicted), float64(c.Simulated)
		if math.Abs(p-s) > apart {
			list = append(list, fmt.Sprintf("%s: %s of the units to first order, %s in simulation, which counts.", c.Target, Share(c.Predicted), Share(c.Simulated)))
		}
	}
	return list
}

// RemainSentences say what is left of the changes that targets limit, and
// whose the spread is.
func RemainSentences(r pick.Result) []string {
	var list []string
	for _, m := range r.Remains {
		var from []string
		for _, s := range m.Sources {
			from = append(from, fmt.Sprintf("%s %s %s", s.Ref, s.Parameter, Share(s.Share)))
		}
		text := fmt.Sprintf("%s at %s: mean %s, standard deviation %s", m.Target, m.Condition,
			Figure(float64(m.Mean), m.Unit), Figure(float64(m.Deviation), m.Unit))
		if len(from) > 0 && float64(m.Deviation) > 0 {
			text += "; the spread is " + strings.Join(from, ", ")
		}
		list = append(list, text+".")
	}
	return list
}

// Figure is a figure of three digits with its unit.
func Figure(x float64, symbol string) string {
	if unit, ok := quantity.Find(symbol); ok {
		return quantity.Format(x, unit, 3)
	}
	return strings.TrimSpace(fmt.Sprintf("%.3g %s", x, symbol))
}

// AlternateInstead is what to take where a line is out of stock.
func AlternateInstead(a pick.Alternate) string {
	var words []string
	for _, c := range a.Instead {
		text := ChoiceText(c)
		if len(a.Instead) > 1 {
			text += " for " + order.Runs(c.Refs)
		}
		words = append(words, text)
	}
	return strings.Join(words, "; ")
}

// moved is how much of itself a drift must change by to be worth a word.
const moved = 0.01

// AlternateDrifts says how the changes come out then.
func AlternateDrifts(a pick.Alternate) string {
	var words []string
	for _, d := range a.Drifts {
		if math.Abs(float64(d.To-d.From)) <= moved*math.Abs(float64(d.From)) {
			continue
		}
		words = append(words, fmt.Sprintf("%s within %s instead of %s", d.Target, Figure(float64(d.To), d.Unit), Figure(float64(d.From), d.Unit)))
	}
	if len(words) == 0 && len(a.Drifts) > 0 {
		return "drifts no different"
	}
	return strings.Join(words, ", ")
}
