package marking

import "fmt"

// Slope is a temperature coefficient and the half width about it, in 1/K.
type Slope struct{ Value, Spread float64 }

// ppm makes a Slope from figures in millionths per kelvin.
func ppm(value, spread float64) Slope { return Slope{value / 1e6, spread / 1e6} }

// The letters of the class 1 code of EIA-198, as quoted from J. R. Barnes,
// Robust Electronic Design Reference Book, chapter 8, and two public tables.
var (
	eiaFigures = map[byte]float64{'C': 0, 'B': 0.3, 'L': 0.8, 'A': 0.9, 'M': 1, 'P': 1.5, 'R': 2.2, 'S': 3.3, 'T': 4.7, 'V': 5.6, 'U': 7.5}
	// Digits 4, 5 and 9 are left out: −10000, 1 and 10000 in the book, but 4 is
	// 1 in a widely copied table, and the others are in no other.
	eiaMultipliers = map[byte]float64{'0': -1, '1': -10, '2': -100, '3': -1000, '6': 10, '7': 100, '8': 1000}
	classSpreads   = map[byte]float64{'G': 30, 'H': 60, 'J': 120, 'K': 250, 'L': 500, 'M': 1000, 'N': 2500}
)

// ReadClass1 reads a three-character class 1 code of EIA-198: "C0G", "U2J".
func ReadClass1(code string) (Slope, error) {
	if len(code) != 3 {
		return Slope{}, fmt.Errorf("found %q, expected a class 1 code of three characters, such as C0G", code)
	}
	figure, ok := eiaFigures[code[0]]
	if !ok {
		return Slope{}, fmt.Errorf("unknown letter of a class 1 code: found %q in %q", code[:1], code)
	}
	multiplier, ok := eiaMultipliers[code[1]]
	if !ok {
		return Slope{}, fmt.Errorf("unknown or disputed digit of a class 1 code: found %q in %q, expected 0 to 3 or 6 to 8", code[1:2], code)
	}
	spread, ok := classSpreads[code[2]]
	if !ok {
		return Slope{}, fmt.Errorf("unknown letter of a class 1 code: found %q in %q", code[2:], code)
	}
	value := figure * multiplier
	if figure == 0 {
		value = 0 // not minus zero
	}
	return ppm(value, spread), nil
}

// The first letters of the class 1 code of IEC 60384-8 and -21. C is read in a
// published table; the others are from memory. The alphabet is not that of
// EIA-198: P is −150 here and 1.5 times a power of ten there.
var iecFigures = map[byte]float64{'A': 100, 'C': 0, 'H': -33, 'L': -75, 'P': -150, 'R': -220, 'S': -330, 'T': -470, 'U': -750, 'V': -1500}

// ReadClass1IEC reads a two-letter class 1 code of IEC 60384: "CG", "UJ".
func ReadClass1IEC(code string) (Slope, error) {
	if len(code) != 2 {
		return Slope{}, fmt.Errorf("found %q, expected a class 1 code of two letters, such as CG", code)
	}
	value, ok := iecFigures[code[0]]
	spread, known := classSpreads[code[1]]
	if !ok || !known {
		return Slope{}, fmt.Errorf("unknown letter of a class 1 code: found %q", code)
	}
	return ppm(value, spread), nil
}

// Class2 is what a class 2 code promises: the change of capacitance from that
// at 25 °C stays from Low to High (fractions) between two temperatures.
type Class2 struct{ MinCelsius, MaxCelsius, Low, High float64 }

// The letters of the class 2 code of EIA-198, from three public tables, one of
// which misprints Z and 7; 9 is from memory.
var (
	coldest = map[byte]float64{'X': -55, 'Y': -30, 'Z': 10}
	hottest = map[byte]float64{'2': 45, '4': 65, '5': 85, '6': 105, '7': 125, '8': 150, '9': 200}
	changes = map[byte][2]float64{
		'A': {-0.01, 0.01}, 'B': {-0.015, 0.015}, 'C': {-0.022, 0.022}, 'D': {-0.033, 0.033},
		'E': {-0.047, 0.047}, 'F': {-0.075, 0.075}, 'P': {-0.1, 0.1}, 'R': {-0.15, 0.15},
		'S': {-0.22, 0.22}, 'T': {-0.33, 0.22}, 'U': {-0.56, 0.22}, 'V': {-0.82, 0.22},
	}
)

// ReadClass2 reads a three-character class 2 code of EIA-198: "X7R".
func ReadClass2(code string) (Class2, error) {
	if len(code) != 3 {
		return Class2{}, fmt.Errorf("found %q, expected a class 2 code of three characters, such as X7R", code)
	}
	low, cold := coldest[code[0]]
	high, hot := hottest[code[1]]
	change, ok := changes[code[2]]
	if !cold || !hot || !ok {
		return Class2{}, fmt.Errorf("unknown letter of a class 2 code: found %q, expected one of XYZ, of 2 4 5 6 7 8 9 and of ABCDEFPRSTUV", code)
	}
	return Class2{low, high, change[0], change[1]}, nil
}
