package spread_test

import (
	"context"
	"testing"

	"batchwright/tolerance/build"
	"batchwright/tolerance/spread"
)

// TestDrift sweeps a uniform resistor of 1 kΩ ± 10 % and 1000 ppm/K from 5 to
// 45 °C in four steps, with 25 °C its reference: it moves by r·0.001·ΔT, and of
// a uniform scatter 95 % lies within 0.95 of its limits.
func TestDrift(t *testing.T) {
	b, err := build.Read("test.yaml", []byte(`
build: drift
units: 10
conditions: {bench: {temperature: 25 °C}}
stages:
  s:
    kind: formula
    parts: {r: {ref: R1, value: 1 kΩ, tolerance: 10 %, shape: uniform, temperature_coefficient: 1000 ppm/K}}
    outputs: {r1: {expression: r, unit: Ω}}
`), nil)
	if err != nil {
		t.Fatal(err)
	}
	output := build.OutputName{Stage: "s", Output: "r1"}
	rows, err := spread.Drift(context.Background(), b, output, 5, 45, 4, spread.Options{Seed: 1, Units: 40_000})
	if err != nil {
		t.Fatal(err)
	}
	if len(rows) != 5 {
		t.Fatalf("%d rows, want 5", len(rows))
	}
	for i, row := range rows {
		kelvin := float64(10*i - 20)
		low, high := 0.905*kelvin, 1.095*kelvin
		if kelvin < 0 {
			low, high = high, low
		}
		near(t, "temperature", spread.Figure(row.Celsius), 25+kelvin, 1e-9)
		near(t, "nominal", row.Nominal, kelvin, 1e-9)
		near(t, "low", row.Low, low, 0.05)
		near(t, "high", row.High, high, 0.05)
	}
}
