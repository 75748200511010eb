package quantity

import (
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
)

// prefix is one of the powers of ten of the International System (BIPM, The
// International System of Units, 9th edition, table 7).
type prefix struct {
	text  string
	power int
}

// The first spelling of a power is the one that is printed.
var prefixes = []prefix{
	{"f", -15}, {"p", -12}, {"n", -9}, {"\u00b5", -6}, {"u", -6}, {"\u03bc", -6}, {"m", -3},
	{"", 0}, {"k", 3}, {"M", 6}, {"G", 9}, {"T", 12},
}

func prefixText(power int) string {
	for _, p := range prefixes {
		if p.power == power {
			return p.text
		}
	}
	panic("quantity: no prefix for the power " + strconv.Itoa(power))
}

// sort keeps apart what has one dimension and may not be mixed: a share, a
// level and an interval are all plain numbers.
type sort int

const (
	plain sort = iota
	absolute
	level
	interval
	humidity
)

func sortOf(u Unit) sort {
	switch u.Symbol {
	case Celsius.Symbol:
		return absolute
	case Decibel.Symbol:
		return level
	case Cent.Symbol:
		return interval
	case PPMPerPercentRH.Symbol:
		return humidity
	}
	return plain
}

// symbol is one unit as people write it.
type symbol struct {
	text      string
	dimension Dimension
	power     int     // of ten, in SI
	factor    float64 // what is no power of ten
	sort      sort
	prefixes  string // "all", "" for none, "centi" for all and c, "K" for all and a capital kilo
}

var symbols = []symbol{
	{"\u03a9", Ohm.Dimension, 0, 1, plain, "K"}, // Greek capital omega
	{"\u2126", Ohm.Dimension, 0, 1, plain, "K"}, // ohm sign
	{"ohm", Ohm.Dimension, 0, 1, plain, "K"},
	{"ohms", Ohm.Dimension, 0, 1, plain, "K"},
	{"Ohm", Ohm.Dimension, 0, 1, plain, "K"},
	{"S", Siemens.Dimension, 0, 1, plain, "all"},
	{"F", Farad.Dimension, 0, 1, plain, "all"},
	{"H", Henry.Dimension, 0, 1, plain, "all"},
	{"V", Volt.Dimension, 0, 1, plain, "all"},
	{"A", Ampere.Dimension, 0, 1, plain, "all"},
	{"W", Watt.Dimension, 0, 1, plain, "all"},
	{"J", Watt.Dimension.Mul(Second.Dimension), 0, 1, plain, "all"},
	{"Hz", Hertz.Dimension, 0, 1, plain, "K"},
	{"s", Second.Dimension, 0, 1, plain, "all"},
	{"h", Second.Dimension, 0, 3600, plain, ""},
	{"m", Metre.Dimension, 0, 1, plain, "centi"},
	{"kg", si(1, 0, 0, 0, 0), 0, 1, plain, ""},
	{"K", Kelvin.Dimension, 0, 1, plain, "all"},
	{"°C", Kelvin.Dimension, 0, 1, absolute, ""},
	{"\u2103", Kelvin.Dimension, 0, 1, absolute, ""}, // degree Celsius in one sign
	{"degC", Kelvin.Dimension, 0, 1, absolute, ""},
	{"dB", Dimension{}, 0, 1, level, ""},
	{"cent", Dimension{}, 0, 1, interval, ""},
	{"cents", Dimension{}, 0, 1, interval, ""},
	{"%", Dimension{}, -2, 1, plain, ""},
	{"ppm", Dimension{}, -6, 1, plain, ""},
	{"ppb", Dimension{}, -9, 1, plain, ""},
	{"1", Dimension{}, 0, 1, plain, ""},
	{"% RH", Dimension{}, -2, 1, humidity, ""},
	{"%RH", Dimension{}, -2, 1, humidity, ""},
}

// measure is a unit as read: SI = x · factor · 10^power.
type measure struct {
	dimension Dimension
	power     int
	factor    float64
	sort      sort
}

// readSymbol reads a unit: factors joined by "·" or "*", then any number of
// "/factor", each with a prefix and a whole exponent: "mV/K", "ppm/K²", "1/K^3".
// A unit that is no plain factor stands alone, but for "/°C" and "/% RH".
func readSymbol(text string) (measure, bool) {
	m := measure{factor: 1}
	if text == "" || len(text) > 40 {
		return m, false
	}
	if s, power, exponent, ok := readFactor(text); ok && s.sort != plain {
		return measure{s.dimension, power, s.factor, s.sort}, exponent == 1 && s.sort != humidity
	}
	if text[0] == '/' {
		text = "1" + text // "/K"
	}
	for i, part := range strings.Split(text, "/") {
		sign := 1
		if i > 0 {
			sign = -1
		}
		for _, word := range strings.Split(strings.ReplaceAll(part, "*", "·"), "·") {
			if !m.times(strings.TrimSpace(word), sign) {
				return m, false
			}
		}
	}
	return m, true
}

// times multiplies m by the unit named word, to the power of sign and of the
// word's own exponent.
func (m *measure) times(word string, sign int) bool {
	s, power, exponent, ok := readFactor(word)
	if !ok {
		return false
	}
	exponent *= sign
	d, ok := s.dimension.Pow(exponent, 1)
	if !ok {
		return false
	}
	m.dimension = m.dimension.Mul(d)
	m.power += (s.power + power) * exponent
	if s.factor != 1 {
		m.factor *= math.Pow(s.factor, float64(exponent))
	}
	switch {
	case s.sort == humidity, s.text == "%" && sign < 0:
		m.sort = humidity // "ppm/%": there is nothing else a share is taken of
		return sign < 0 && exponent == -1
	case s.sort == absolute:
		return sign < 0 // "ppm/°C": a difference, the same as per kelvin
	}
	return s.sort == plain
}

// readFactor reads one symbol with its prefix and exponent.
func readFactor(word string) (s symbol, power, exponent int, ok bool) {
	bare, exponent := splitExponent(word)
	for _, s := range symbols {
		rest, found := strings.CutSuffix(bare, s.text)
		if !found {
			continue
		}
		if p, ok := s.prefix(rest); ok {
			return s, p, exponent, true
		}
	}
	return symbol{}, 0, 0, false
}

// prefix reads what stands before the symbol.
func (s symbol) prefix(text string) (power int, ok bool) {
	switch {
	case text == "":
		return 0, true
	case s.prefixes == "":
		return 0, false
	case text == "c" && s.prefixes == "centi":
		return -2, true
	case text == "K" && s.prefixes == "K":
		return 3, true // no prefix of the SI, but common practice
	}
	for _, p := range prefixes {
		if p.text == text {
			return p.power, true
		}
	}
	return 0, false
}

// splitExponent takes "²", "^2" or "2" off the end of a symbol.
func splitExponent(word string) (bare string, exponent int) {
	last, size := utf8.DecodeLastRuneInString(word)
	raised := map[rune]int{'²': 2, '³': 3, '2': 2, '3': 3, '4': 4}
	e, ok := raised[last]
	if !ok || len(word) == size {
		return word, 1
	}
	return strings.TrimSuffix(word[:len(word)-size], "^"), e
}

// Find reads a unit by its symbol, with prefix: "kHz", "mV", "%", "V/µs".
func Find(text string) (Unit, bool) {
	text = strings.TrimSpace(text)
	for _, k := range table {
		if k.unit.Symbol == text || k.unit.Word != "" && k.unit.Word == text {
			return k.unit, true
		}
	}
	m, ok := readSymbol(text)
	if !ok {
		return Unit{}, false
	}
	u := Unit{Symbol: text, Dimension: m.dimension, Scale: m.factor * powerOfTen(m.power)}
	for _, k := range table {
		same := k.unit.Dimension == u.Dimension && k.unit.Scale == u.Scale
		if same && sortOf(k.unit) == m.sort {
			return k.unit, true
		}
	}
	return u, true
}

// powerOfTen is the float64 nearest to 10^n.
func powerOfTen(n int) float64 {
	v, _ := strconv.ParseFloat("1e"+strconv.Itoa(n), 64)
	return v
}
