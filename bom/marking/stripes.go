package marking

import "fmt"

// stripeTolerances are those of the fourth stripe on old film capacitors. Red
// for 2 % is that of the worked example cited in the test; the others are from
// memory.
var stripeTolerances = map[string]float64{"black": 0.2, "white": 0.1, "green": 0.05, "red": 0.02, "brown": 0.01}

// stripeVoltages are those of the fifth stripe, in volts. Brown is that of the
// same example; the others are from memory.
var stripeVoltages = map[string]float64{"brown": 100, "red": 250, "yellow": 400}

// ReadStripes reads the five stripes of an old film capacitor in words: two
// figures and a power of ten in picofarads, tolerance, voltage.
func ReadStripes(stripes []string) (r Reading, volts float64, err error) {
	if len(stripes) != 5 {
		return Reading{}, 0, fmt.Errorf("found %d stripes, expected 5", len(stripes))
	}
	value, _, err := ReadBands(stripes[:3])
	if err != nil {
		return Reading{}, 0, err
	}
	tolerance, ok := stripeTolerances[stripes[3]]
	if !ok {
		return Reading{}, 0, fmt.Errorf("stripe 4: found %q, expected a tolerance", stripes[3])
	}
	volts, ok = stripeVoltages[stripes[4]]
	if !ok {
		return Reading{}, 0, fmt.Errorf("stripe 5: found %q, expected a voltage", stripes[4])
	}
	return symmetric(value.Value/1e12, tolerance), volts, nil
}
