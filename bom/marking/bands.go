package marking

import (
	"fmt"
	"strconv"
	"strings"
)

// colour is a row of the colour code. none marks what the colour does not mean.
type colour struct {
	name      string
	digit     int
	power     int // of ten
	tolerance float64
	slope     float64 // temperature coefficient, 1/K
}

const none = -99

// colours is table 1 of IEC 60062:2016, as three public charts print it, but
// for grey as a tolerance, which is recalled: older charts say 0.05 %. Orange
// and yellow were 3 % and 4 % in old charts.
var colours = []colour{
	{"black", 0, 0, none, 250e-6},
	{"brown", 1, 1, 0.01, 100e-6},
	{"red", 2, 2, 0.02, 50e-6},
	{"orange", 3, 3, 0.0005, 15e-6},
	{"yellow", 4, 4, 0.0002, 25e-6},
	{"green", 5, 5, 0.005, 20e-6},
	{"blue", 6, 6, 0.0025, 10e-6},
	{"violet", 7, 7, 0.001, 5e-6},
	{"grey", 8, 8, 0.0001, 1e-6},
	{"white", 9, 9, none, none},
	{"gold", none, -1, 0.05, none},
	{"silver", none, -2, 0.1, none},
	{"pink", none, -3, none, none},
}

// withoutBand is the tolerance of a resistor that has no band for it.
const withoutBand = 0.2

func colourBy(fits func(colour) bool) (string, bool) {
	for _, c := range colours {
		if fits(c) {
			return c.name, true
		}
	}
	return "", false
}

// Bands are the colours on a resistor, in words: two figures from 5 % on and
// three below, the power of ten, the tolerance (none for 20 %) and, where tc
// (1/K) is not 0, the temperature coefficient behind three figures. It reports
// false where the bands cannot say it. Zero ohms is one black band.
func Bands(ohms, tolerance, tc float64) ([]string, bool) {
	if ohms == 0 {
		return []string{"black"}, true
	}
	most := 3
	if _, _, two := figures(ohms, 2); two && tolerance > 0.045 && tc == 0 {
		most = 2
	}
	digits, exponent, ok := figures(ohms, most)
	if !ok || most == 3 && near(tolerance, withoutBand) {
		return nil, false
	}
	for len(digits) < most {
		digits += "0"
	}
	bands := make([]string, 0, 6)
	for _, d := range digits {
		bands = append(bands, colours[d-'0'].name)
	}
	add := func(fits func(colour) bool) bool {
		name, ok := colourBy(fits)
		bands = append(bands, name)
		return ok
	}
	ok = add(func(c colour) bool { return c.power == exponent-most+1 })
	if !near(tolerance, withoutBand) {
		ok = add(func(c colour) bool { return near(tolerance, c.tolerance) }) && ok
	}
	if tc != 0 {
		ok = add(func(c colour) bool { return near(tc, c.slope) }) && ok
	}
	if !ok {
		return nil, false
	}
	return bands, true
}

// ReadBands reads one, three, four, five or six bands in words: ohms with the
// tolerance, and the temperature coefficient in 1/K, 0 where there is none.
func ReadBands(bands []string) (r Reading, tc float64, err error) {
	count := len(bands)
	if count == 1 && bands[0] == "black" {
		return Reading{}, 0, nil
	}
	if count < 3 || count > 6 {
		return Reading{}, 0, fmt.Errorf("found %d bands, expected 3 to 6, or one of black", count)
	}
	figures := 2
	if count >= 5 {
		figures = 3
	}
	var digits strings.Builder
	for i, name := range bands[:figures] {
		c, err := readBand(i, name, "a figure", func(c colour) bool { return c.digit != none })
		if err != nil {
			return Reading{}, 0, err
		}
		digits.WriteString(strconv.Itoa(c.digit))
	}
	power, err := readBand(figures, bands[figures], "a power of ten", func(c colour) bool { return c.power != none })
	if err != nil {
		return Reading{}, 0, err
	}
	r = symmetric(scaled(digits.String(), power.power), withoutBand)
	if count > 3 {
		c, err := readBand(figures+1, bands[figures+1], "a tolerance", func(c colour) bool { return c.tolerance != none })
		if err != nil {
			return Reading{}, 0, err
		}
		r = symmetric(r.Value, c.tolerance)
	}
	if count == 6 {
		c, err := readBand(5, bands[5], "a temperature coefficient", func(c colour) bool { return c.slope != none })
		if err != nil {
			return Reading{}, 0, err
		}
		tc = c.slope
	}
	return r, tc, nil
}

// readBand finds a colour that has the meaning asked for at its place.
func readBand(place int, name, what string, fits func(colour) bool) (colour, error) {
	for _, c := range colours {
		if c.name == name && fits(c) {
			return c, nil
		}
	}
	var names []string
	for _, c := range colours {
		if fits(c) {
			names = append(names, c.name)
		}
	}
	return colour{}, fmt.Errorf("band %d: found %q, expected %s: %s", place+1, name, what, strings.Join(names, ", "))
}
