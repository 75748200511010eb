package explain

// Class is a kind of fault.
type Class string

// The classes.
const (
	Open       Class = "open"      // missing, or a joint that does not conduct
	Neighbour  Class = "neighbour" // the next preferred value
	Decade     Class = "decade"    // ten times too large or too small
	Swapped    Class = "swapped"   // exchanged with another of its type
	Shorted    Class = "shorted"   // a bridge of solder
	Reversed   Class = "reversed"  // the wrong way round
	Family     Class = "family"    // the right value of another family
	Figures    Class = "figures"   // a transistor, amplifier or regulator far off its figures
	NotTrimmed Class = "trim"      // a trim not done
	Range      Class = "range"     // an instrument on the wrong range
	Exchanged  Class = "exchanged" // two readings in each other's rows
	Other      Class = "other"     // none of these
)

// faulty is the share of units taken to have a fault before anything is read
// (common practice in a hand-soldered batch, no source).
const faulty = 0.05

// weights divide the faulty units among the classes; within a class every
// hypothesis is as probable as another. Common practice, no source: a joint or
// a missing part comes first, then what the eye mixes up, then what a bridge or
// a wrong polarity does; a hand at the meter errs about as often as a trim is
// forgotten.
var weights = []struct {
	class  Class
	weight float64
}{
	{Open, 26}, {Neighbour, 15}, {Decade, 15}, {Swapped, 12}, {Shorted, 8}, {Reversed, 8},
	{Figures, 5}, {NotTrimmed, 4}, {Range, 3}, {Exchanged, 2}, {Family, 1}, {Other, 1},
}

// priors are the probabilities of hypotheses of some classes, 1 − faulty being
// left for the healthy unit.
func priors(classes []Class) []float64 {
	count := map[Class]int{}
	for _, c := range classes {
		count[c]++
	}
	var sum float64
	share := map[Class]float64{}
	for _, w := range weights {
		if count[w.class] > 0 {
			sum += w.weight
			share[w.class] = w.weight / float64(count[w.class])
		}
	}
	list := make([]float64, len(classes))
	for i, c := range classes {
		list[i] = faulty * share[c] / sum
	}
	return list
}
