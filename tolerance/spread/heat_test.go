package spread_test

import (
	"math"
	"testing"
)

// TestOwnHeat has a regulator of 12 V that loses 10 mV/K, 6 V above it and
// 100 mA through it, 50 K/W to the air at 30 °C. Its warming r solves
//
//	r = 50·0.1·(18 − 12 + 0.01·(30 + r − 25)),  r = 5·6.05/0.95 K
//
// A neighbour that takes it as its rise has its coil of 100 ppm/K warmed by as
// much; half warmed up, both are by half.
func TestOwnHeat(t *testing.T) {
	r := analyse(t, `
build: heat
units: 10
conditions:
  warm: {temperature: 30 °C, warmup: 1}
  half: {warmup: 0.5}
stages:
  plus:
    kind: fixed-regulator
    settings: {input: 18 V, load_current: 100 mA, thermal_resistance: 50 K/W}
    parts:
      regulator: {ref: U1, value: 12 V, parameters: {output_slope: -10 mV/K, dropout: 1 V}}
      input_c: {ref: C1, value: 330 nF}
      output_c: {ref: C2, value: 100 nF}
  tank:
    kind: tuned-tank
    settings: {rise: plus.warming}
    parts:
      coil: {ref: L1, value: 1 mH, temperature_coefficient: 100 ppm/K}
      tank: {ref: C3, value: 100 pF}
`, 1000)
	warming := 5 * 6.05 / 0.95
	near(t, "warming", find(t, r, "plus.warming", "warm", "").Nominal, warming, 1e-9)
	near(t, "voltage", find(t, r, "plus.voltage", "warm", "").Nominal, 12-0.01*(5+warming), 1e-9)
	f := func(rise float64) float64 { return 1 / (2 * math.Pi * math.Sqrt(1e-3*100e-12*(1+100e-6*(5+rise)))) }
	near(t, "neighbour", find(t, r, "tank.frequency", "warm", "").Nominal, f(warming), 1e-6)

	// Half warmed up, the regulator is ½·r above ambient, r being what its heat
	// then makes: r = 5·(6 + 0.01·(5 + r/2)).
	half := 5 * 6.05 / 0.975
	near(t, "voltage, half warm", find(t, r, "plus.voltage", "half", "").Nominal, 12-0.01*(5+half/2), 1e-9)
	near(t, "neighbour, half warm", find(t, r, "tank.frequency", "half", "").Nominal, f(half/2), 1e-6)
}

// TestPushing has an oscillator whose transistor lays 10 pF across 90 pF, less
// 2 % for each volt over 9 V and more by 1000 ppm/K.
func TestPushing(t *testing.T) {
	r := analyse(t, `
build: pushing
units: 10
conditions:
  rest: {temperature: 25 °C, supply: 9 V}
  high: {supply: 10 V}
  hot:  {temperature: 45 °C}
stages:
  a:
    kind: tuned-tank
    settings:
      loading: {value: 10 pF, temperature_coefficient: 1000 ppm/K}
      pushing: -2 %/V
      supply: supply
      supply_rest: 9 V
    parts:
      coil: {ref: L1, value: 1 mH}
      tank: {ref: C1, value: 90 pF}
`, 1000)
	f := func(picofarad float64) float64 { return 1 / (2 * math.Pi * math.Sqrt(1e-3*picofarad*1e-12)) }
	near(t, "at rest", find(t, r, "a.frequency", "rest", "").Nominal, f(100), 1e-6)
	near(t, "a volt higher", find(t, r, "a.frequency", "high", "").Nominal, f(99.8), 1e-6)
	near(t, "20 K warmer", find(t, r, "a.frequency", "hot", "").Nominal, f(100.2), 1e-6)
}
