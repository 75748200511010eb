package stage

import "batchwright/bom/quantity"

// junctionBias is the steady current of an NPN transistor whose base hangs on a
// divider between the rails and whose emitter resistor goes to the negative
// one; `base_foot` is the divider's lower arm. junctionMixer tells the law and
// the bracket of its root. Outputs: current, base_voltage, emitter_voltage, and
// the finding starved. A meter at the base (`base_meter`, S) joins the divider;
// one at the emitter (`emitter_meter`) makes with the emitter resistor a lesser
// resistor (`emitter_dc`) to a voltage nearer ground (`emitter_foot`).
const junctionBias = `
warmth = temperature - zero_celsius - 25*kelvin
thermal = boltzmann*temperature/charge
base_resistance = 1/(1/base_upper + 1/base_foot + base_meter)
base_open = (positive/base_upper + negative/base_foot)*base_resistance
emitter_part = 1 + emitter*emitter_meter
emitter_foot = negative/emitter_part
emitter_dc = emitter/emitter_part
drive = base_open - emitter_foot
junction = transistor.vbe + transistor.vbe_slope*warmth
slope = base_resistance/transistor.beta + (1 + 1/transistor.beta)*emitter_dc
most = max(drive/slope, 1e-9*ampere)
least = max((drive - junction - thermal*ln(most/(0.001*ampere)))/slope, 1e-12*ampere)
more = min(max((drive - junction - thermal*ln(least/(0.001*ampere)))/slope, least), most)
current = root(i, least, more, drive - i*slope - junction - thermal*ln(i/(0.001*ampere)))
base_voltage = base_open - current/transistor.beta*base_resistance
emitter_voltage = emitter_foot + current*(1 + 1/transistor.beta)*emitter_dc
starved = current < 1e-6*ampere
`

// restingCollector is where the collector of that transistor rests behind
// `load`, no lower than the emitter + 0.2 V. A meter there (`meter`, S) divides
// with the load, which is also what the next stage sees.
const restingCollector = `
resting = (positive - current*load)/(1 + load*meter)
floor = emitter_voltage + 0.2*volt
saturated = resting < floor
collector = max(resting, floor)
dc = collector
source_resistance = load
`

// smallSignal is the base of that transistor seen by what comes in through
// `couple`: the hybrid-π model without output resistance or capacitances, of
//
//	r_π = β·V_T/I_C,  emitter to ground: Z_E = emitter_ac ∥ 1/(jω·emitter_shunt)
//
// which presents r_π + (β+1)·Z_E, beside the divider, to a source of resistance
// R behind the capacitor. With x = ω·emitter_ac·emitter_shunt, c = ω·couple,
// D = r_π + (β+1)·emitter_ac + j·r_π·x and G the divider's conductance, the base
// current for 1 V from the source is
//
//	jc·(1 + jx) / (jc·D + (1 + jcR)·(G·D + 1 + jx))
//
// and `denominator` the size of what stands below the stroke. Nothing in it is
// divided by the frequency, so a note of 0 Hz has gain 0 and a finite slope.
var smallSignal = `
base_drop = transistor.beta*thermal/current
base_series = base_drop + (transistor.beta + 1)*emitter_ac
emitter_source = (base_drop + parallel(base_resistance, in.source_resistance))/(transistor.beta + 1)
` + atEach(`
at_turn = 2*pi*in.at_frequency*emitter_ac*emitter_shunt
at_passing = 2*pi*in.at_frequency*couple
at_real = 1 + base_series/base_resistance
at_imaginary = at_turn*(1 + base_drop/base_resistance)
at_lag = at_passing*in.source_resistance
at_denominator = sqrt((at_real - at_lag*at_imaginary - at_passing*base_drop*at_turn)^2 + (at_imaginary + at_lag*at_real + at_passing*base_series)^2)
`)

// transistorOutputs are what every amplifier of one transistor shows besides.
var transistorOutputs = []Output{
	{"current", quantity.Ampere, "collector current"},
	{"base_voltage", quantity.Volt, "steady base voltage"},
	{"emitter_voltage", quantity.Volt, "steady emitter voltage"},
	{"input_resistance", quantity.Ohm, "resistance that comes after couple, well above its corner"},
}

var basePoint = Point{Name: "base_voltage", Reading: "dc voltage", Instrument: "dmm",
	At: "base of the transistor, to ground", Conductance: "base_meter"}

var starvedFinding = Finding{"starved", "the base does not turn the transistor on: less than 1 µA flows; raise the bias"}
