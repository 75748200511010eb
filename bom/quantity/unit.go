package quantity

// Unit is what a number counts. A figure x in the unit is Scale·x + Offset in
// SI, with one exception that Quantity states.
type Unit struct {
	Symbol    string // as people print it: "Ω", "ppm/K"
	Word      string // the name of the unit constant in equations; "" for units that have none
	Dimension Dimension
	Scale     float64
	Offset    float64
}

// si makes the dimension with the given whole exponents.
func si(kg, m, s, a, k int16) Dimension {
	return Dimension{twelfths * kg, twelfths * m, twelfths * s, twelfths * a, twelfths * k}
}

// The units that settings, parts and outputs have.
var (
	One             = Unit{Symbol: "1", Scale: 1}
	Percent         = Unit{Symbol: "%", Scale: 1e-2}
	PPM             = Unit{Symbol: "ppm", Scale: 1e-6}
	PPMPerKelvin    = Unit{Symbol: "ppm/K", Scale: 1e-6, Dimension: si(0, 0, 0, 0, -1)}
	PPMPerPercentRH = Unit{Symbol: "ppm/% RH", Scale: 1e-4}
	Ohm             = Unit{Symbol: "\u03a9", Word: "ohm", Scale: 1, Dimension: si(1, 2, -3, -2, 0)}
	Siemens         = Unit{Symbol: "S", Word: "siemens", Scale: 1, Dimension: si(-1, -2, 3, 2, 0)}
	Farad           = Unit{Symbol: "F", Word: "farad", Scale: 1, Dimension: si(-1, -2, 4, 2, 0)}
	Henry           = Unit{Symbol: "H", Word: "henry", Scale: 1, Dimension: si(1, 2, -2, -2, 0)}
	Volt            = Unit{Symbol: "V", Word: "volt", Scale: 1, Dimension: si(1, 2, -3, -1, 0)}
	Ampere          = Unit{Symbol: "A", Word: "ampere", Scale: 1, Dimension: si(0, 0, 0, 1, 0)}
	Watt            = Unit{Symbol: "W", Word: "watt", Scale: 1, Dimension: si(1, 2, -3, 0, 0)}
	Hertz           = Unit{Symbol: "Hz", Word: "hertz", Scale: 1, Dimension: si(0, 0, -1, 0, 0)}
	Second          = Unit{Symbol: "s", Word: "second", Scale: 1, Dimension: si(0, 0, 1, 0, 0)}
	Hour            = Unit{Symbol: "h", Scale: 3600, Dimension: si(0, 0, 1, 0, 0)}
	Metre           = Unit{Symbol: "m", Word: "metre", Scale: 1, Dimension: si(0, 1, 0, 0, 0)}
	Kelvin          = Unit{Symbol: "K", Word: "kelvin", Scale: 1, Dimension: si(0, 0, 0, 0, 1)}
	Celsius         = Unit{Symbol: "°C", Scale: 1, Offset: 273.15, Dimension: si(0, 0, 0, 0, 1)}
	VoltPerKelvin   = Unit{Symbol: "V/K", Scale: 1, Dimension: si(1, 2, -3, -1, -1)}
	VoltPerSecond   = Unit{Symbol: "V/s", Scale: 1, Dimension: si(1, 2, -4, -1, 0)}
	Decibel         = Unit{Symbol: "dB", Scale: 1}
	Cent            = Unit{Symbol: "cents", Scale: 1}
	PerKelvin       = Unit{Symbol: "1/K", Scale: 1, Dimension: si(0, 0, 0, 0, -1)}
	PerKelvin2      = Unit{Symbol: "1/K²", Scale: 1, Dimension: si(0, 0, 0, 0, -2)}
	PerKelvin3      = Unit{Symbol: "1/K³", Scale: 1, Dimension: si(0, 0, 0, 0, -3)}
)

// step is one way to print a unit: the power of ten that is taken out.
type step struct {
	power  int
	symbol string
}

// kind is what the package knows of a unit beside the unit.
type kind struct {
	unit      Unit
	noun      string // "a resistance"
	example   string
	low, high float64 // magnitudes in SI that some part, setting or reading has; zero always passes
	steps     []step  // coarser last; empty: never a prefix
	names     bool    // Dimension.String may use the symbol
}

// The bounds are the project's own and wide on purpose: they catch a slipped
// exponent or prefix (5 MF, 10 Hz for 10 MHz by 1e12), not a strange design.
var table = []kind{
	{unit: One, noun: "a plain number", example: "0.5", low: 1e-30, high: 1e30},
	{unit: Percent, noun: "a share", example: "5 %", low: 1e-15, high: 1e4},
	{unit: PPM, noun: "a share", example: "30 ppm", low: 1e-15, high: 1e4},
	{unit: PPMPerKelvin, noun: "a temperature coefficient", example: "30 ppm/K", low: 1e-15, high: 1},
	{unit: PPMPerPercentRH, noun: "a humidity coefficient", example: "100 ppm/% RH", low: 1e-15, high: 10},
	{unit: Ohm, noun: "a resistance", example: "4.7 kΩ", low: 1e-6, high: 1e13, steps: prefixed("\u03a9", -6, 12), names: true},
	{unit: Siemens, noun: "a conductance", example: "2 mS", low: 1e-13, high: 1e6, steps: prefixed("S", -12, 3), names: true},
	{unit: Farad, noun: "a capacitance", example: "220 pF", low: 1e-18, high: 10, steps: prefixed("F", -15, 0), names: true},
	{unit: Henry, noun: "an inductance", example: "470 µH", low: 1e-12, high: 1e4, steps: prefixed("H", -12, 0), names: true},
	{unit: Volt, noun: "a voltage", example: "12 V", low: 1e-12, high: 1e5, steps: prefixed("V", -9, 3), names: true},
	{unit: Ampere, noun: "a current", example: "2 mA", low: 1e-18, high: 1e4, steps: prefixed("A", -15, 3), names: true},
	{unit: Watt, noun: "a power", example: "250 mW", low: 1e-18, high: 1e6, steps: prefixed("W", -15, 6), names: true},
	{unit: Hertz, noun: "a frequency", example: "455 kHz", low: 1e-9, high: 1e12, steps: prefixed("Hz", 0, 12), names: true},
	{unit: Second, noun: "a time", example: "10 ms", low: 1e-15, high: 1e11, steps: prefixed("s", -15, 0), names: true},
	{unit: Hour, noun: "a time", example: "1000 h", low: 1e-15, high: 1e11},
	{unit: Metre, noun: "a length", example: "40 cm", low: 1e-12, high: 1e6, steps: prefixed("m", -9, 3), names: true},
	{unit: Kelvin, noun: "a temperature difference", example: "3 K", low: 1e-9, high: 1e4, names: true},
	{unit: Celsius, noun: "a temperature", example: "23 °C", high: 2000},
	{unit: VoltPerKelvin, noun: "a voltage slope", example: "-2 mV/K", low: 1e-12, high: 1e3, steps: over("V", -9, 3, "/K"), names: true},
	{unit: VoltPerSecond, noun: "a slew rate", example: "13 V/µs", low: 1e-9, high: 1e13,
		steps: []step{{0, "V/s"}, {3, "V/ms"}, {6, "V/µs"}, {9, "V/ns"}}, names: true},
	{unit: Decibel, noun: "a level", example: "-3 dB", low: 1e-12, high: 1e3},
	{unit: Cent, noun: "a musical interval", example: "20 cents", low: 1e-9, high: 1e5},
	{unit: PerKelvin, noun: "a temperature coefficient", example: "30 ppm/K", low: 1e-15, high: 1, steps: []step{{-6, "ppm/K"}}, names: true},
	{unit: PerKelvin2, noun: "a second-order temperature coefficient", example: "-0.035 ppm/K²", low: 1e-18, high: 1, steps: []step{{-6, "ppm/K²"}}, names: true},
	{unit: PerKelvin3, noun: "a third-order temperature coefficient", example: "0.0001 ppm/K³", low: 1e-21, high: 1, steps: []step{{-6, "ppm/K³"}}, names: true},
}

// prefixed lists the printed forms of a symbol from one power of ten to another.
func prefixed(symbol string, from, to int) []step { return over(symbol, from, to, "") }

func over(symbol string, from, to int, below string) []step {
	var steps []step
	for power := from; power <= to; power += 3 {
		steps = append(steps, step{power, prefixText(power) + symbol + below})
	}
	return steps
}

// describe finds what is known of a unit. A unit of the user's making is
// described by its symbol alone.
func describe(u Unit) kind {
	for _, k := range table {
		if k.unit == u {
			return k
		}
	}
	return kind{unit: u, noun: "a quantity in " + u.Symbol, example: "1 " + u.Symbol, low: 1e-60, high: 1e60}
}

// Words lists the units that equations know by name, each of scale 1.
func Words() []Unit {
	var words []Unit
	for _, k := range table {
		if k.unit.Word != "" {
			words = append(words, k.unit)
		}
	}
	return words
}
