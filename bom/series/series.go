// Package series holds the preferred values of IEC 60063 and finds the one
// nearest to a figure, all those in a range, and pairs that make a figure up.
package series

import (
	"math"
	"slices"
	"strconv"
)

// equal is the relative distance at which two figures are one value.
const equal = 1e-9

// row is a series: integer mantissas over one decade, unit of them to 1.
type row struct {
	name      string
	mantissas []int
	places    int // decimal places of a mantissa
}

var rows = []row{
	{"E3", every(tenths[:], 8), 1},
	{"E6", every(tenths[:], 4), 1},
	{"E12", every(tenths[:], 2), 1},
	{"E24", tenths[:], 1},
	{"E48", every(hundredths[:], 4), 2},
	{"E96", every(hundredths[:], 2), 2},
	{"E192", hundredths[:], 2},
}

func every(all []int, n int) []int {
	var some []int
	for i := 0; i < len(all); i += n {
		some = append(some, all[i])
	}
	return some
}

func find(name string) (row, bool) {
	for _, r := range rows {
		if r.name == name {
			return r, true
		}
	}
	return row{}, false
}

// value is mantissa i in a decade: the float64 nearest to the decimal figure,
// so that 2.2 of the decade -10 is exactly 220e-12.
func (r row) value(i, decade int) float64 {
	v, _ := strconv.ParseFloat(strconv.Itoa(r.mantissas[i])+"e"+strconv.Itoa(decade-r.places), 64)
	return v
}

// Names lists the series, the coarsest first.
func Names() []string {
	names := make([]string, len(rows))
	for i, r := range rows {
		names[i] = r.name
	}
	return names
}

// Values are the mantissas of a series, from 1 to below 10.
func Values(name string) ([]float64, bool) {
	r, ok := find(name)
	if !ok {
		return nil, false
	}
	values := make([]float64, len(r.mantissas))
	for i := range values {
		values[i] = r.value(i, 0)
	}
	return values, true
}

// Between lists the values of a series from low to high, both included, in
// rising order. It is empty for an unknown series and where low is not positive.
func Between(name string, low, high float64) []float64 {
	r, ok := find(name)
	if !ok || !(low > 0) || !(high >= low) || math.IsInf(high, 1) {
		return nil
	}
	var values []float64
	for decade := decadeOf(low) - 1; decade <= decadeOf(high)+1; decade++ {
		for i := range r.mantissas {
			if v := r.value(i, decade); v >= low*(1-equal) && v <= high*(1+equal) {
				values = append(values, v)
			}
		}
	}
	return values
}

// decadeOf is the power of ten at or below x, or its neighbour where the
// logarithm rounds.
func decadeOf(x float64) int { return int(math.Floor(math.Log10(x))) }

// Nearest is the value of a series nearest to x by ratio; of two equally near
// the lower one. It is NaN for an unknown series and where x is not positive.
func Nearest(name string, x float64) float64 {
	low, high := neighbours(name, x)
	// x/low against high/x, without the square of x, which may overflow.
	if high/x < x/low {
		return high
	}
	return low
}

// neighbours are the last value of a series at or below x and the first above.
func neighbours(name string, x float64) (low, high float64) {
	r, ok := find(name)
	if !ok || !(x > 0) || math.IsInf(x, 1) {
		return math.NaN(), math.NaN()
	}
	low, high = math.NaN(), math.NaN()
	for decade := decadeOf(x) - 1; decade <= decadeOf(x)+1; decade++ {
		for i := range r.mantissas {
			v := r.value(i, decade)
			if v > x*(1+equal) {
				return low, v
			}
			low = v
		}
	}
	return low, high
}

// Contains reports whether x is a value of the series, but for rounding.
func Contains(name string, x float64) bool {
	n := Nearest(name, x)
	return math.Abs(n-x) <= equal*x
}

// Coarsest is the first series that has the value, or "".
func Coarsest(x float64) string {
	i := slices.IndexFunc(rows, func(r row) bool { return Contains(r.name, x) })
	if i < 0 {
		return ""
	}
	return rows[i].name
}
