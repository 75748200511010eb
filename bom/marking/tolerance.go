package marking

// grade is a tolerance letter: the limits as fractions.
type grade struct {
	letter    string
	low, high float64
}

// grades are the tolerance letters of IEC 60062:2016 on which public tables
// agree. P, V, W and Y mean different things in different lists, E too, and L
// is only recalled: they are refused, and never printed.
var grades = []grade{
	{"A", -0.0005, 0.0005}, {"B", -0.001, 0.001}, {"C", -0.0025, 0.0025}, {"D", -0.005, 0.005},
	{"F", -0.01, 0.01}, {"G", -0.02, 0.02}, {"H", -0.03, 0.03}, {"J", -0.05, 0.05},
	{"K", -0.1, 0.1}, {"M", -0.2, 0.2}, {"N", -0.3, 0.3},
	{"Q", -0.1, 0.3}, {"T", -0.1, 0.5}, {"S", -0.2, 0.5}, {"Z", -0.2, 0.8},
}

// absolutes are the letters that mean farads on capacitors below 10 pF
// (IEC 60062, public tables).
var absolutes = []struct {
	letter string
	farads float64
}{{"B", 0.1e-12}, {"C", 0.25e-12}, {"D", 0.5e-12}, {"F", 1e-12}, {"G", 2e-12}}

// smallCapacitor is where the absolute letters end.
const smallCapacitor = 10e-12

// toleranceLetter is the letter of a symmetric tolerance, "" where it has none.
func toleranceLetter(tolerance float64) string {
	for _, g := range grades {
		if g.low == -g.high && near(tolerance, g.high) {
			return g.letter
		}
	}
	return ""
}

// capacitorLetter is toleranceLetter for a capacitor of that value.
func capacitorLetter(farads, tolerance float64) string {
	if !(farads < smallCapacitor) {
		return toleranceLetter(tolerance)
	}
	for _, a := range absolutes {
		if near(tolerance*farads, a.farads) {
			return a.letter
		}
	}
	return toleranceLetterOnly(tolerance)
}

// toleranceLetterOnly is the letter of a tolerance below 10 pF that no absolute
// letter could be mistaken for.
func toleranceLetterOnly(tolerance float64) string {
	letter := toleranceLetter(tolerance)
	for _, a := range absolutes {
		if a.letter == letter {
			return ""
		}
	}
	return letter
}

// withTolerance completes a value with the meaning of its letter; capacitor says
// that some letters are absolute below 10 pF.
func withTolerance(value float64, letter string, capacitor bool) (Reading, bool) {
	if capacitor && value < smallCapacitor {
		for _, a := range absolutes {
			if a.letter == letter && value > 0 {
				return symmetric(value, a.farads/value), true
			}
		}
	}
	for _, g := range grades {
		if g.letter == letter {
			return Reading{value, g.low, g.high}, true
		}
	}
	return Reading{}, false
}
