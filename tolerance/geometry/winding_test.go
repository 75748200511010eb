package geometry_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mathext"
)

// sheet is the inductance of a current sheet, exact (Lorentz), H: with
// k² = d²/(d² + l²)
//
//	L = μ0·N²·d³/(3l²)·((2k² − 1)/k³·E(k) + (1 − k²)/k³·K(k) − 1)
//
// mathext takes the parameter m = k².
func sheet(turns, diameter, length float64) float64 {
	const permeability = 4e-7 * math.Pi // H/m, to 2e-10
	m := diameter * diameter / (diameter*diameter + length*length)
	k3 := math.Pow(m, 1.5)
	bracket := (2*m-1)/k3*mathext.CompleteE(m) + (1-m)/k3*mathext.CompleteK(m) - 1
	return permeability * turns * turns * diameter * diameter * diameter / (3 * length * length) * bracket
}

func wound(turns, diameter, length float64) dimensions {
	return dimensions{"turns": turns, "diameter": diameter, "length": length}
}

// TestSheet: a coil of 100 turns, radius 2.7 mm, length 9 mm has 25.22 µH (open
// metrology notebook on Nagaoka's formula); more digits from the same formula
// evaluated apart.
func TestSheet(t *testing.T) {
	got := sheet(100, 2*2.7e-3, 9e-3)
	near(t, "to all digits", got, 2.521506084e-05, 1e-9)
	near(t, "printed", got, 25.22e-6, 5e-4)
}

// TestWinding holds Wheeler's formula against examples that were printed.
func TestWinding(t *testing.T) {
	const inch = 0.0254
	// S. Bhooshan, Fundamentals of Engineering Electromagnetics, Ex. 9.14: 20
	// turns of 1 cm on 1 inch (inputs and method read; result computed).
	near(t, "Bhooshan 9.14", value(t, "winding", wound(20, 0.01, inch)), 1.316725041e-6, 1e-9)
	// ARRL Handbook, d²n²/(18d + 40l): 48 turns, 3/4 inch across, 1.5 inches
	// long, 17.6 µH (from memory); and 26.1 turns for 10 µH on 1 inch by 1.25.
	near(t, "48 turns", value(t, "winding", wound(48, 0.75*inch, 1.5*inch)), 17.63265306e-6, 1e-9)
	near(t, "26.1 turns", value(t, "winding", wound(26.07680962, inch, 1.25*inch)), 10e-6, 1e-9)
	// The notebook's coil above: within the spread of the model.
	near(t, "notebook", value(t, "winding", wound(100, 2*2.7e-3, 9e-3)), 2.521506084e-05, 0.01)
}

// TestWheelerAgainstTheSheet: how far off the formula is, computed from both
// apart; and that it keeps to ±1 % wherever it is allowed.
func TestWheelerAgainstTheSheet(t *testing.T) {
	for _, c := range []struct{ ratio, off float64 }{
		{0.4, -0.005442149092}, {0.5, -0.001215161924}, {1, -0.0009587495992}, {2, -0.00494958187}, {5, -0.005628937082},
	} {
		got := value(t, "winding", wound(1, 1, c.ratio))/sheet(1, 1, c.ratio) - 1
		if math.Abs(got-c.off) > 1e-8 {
			t.Errorf("length of %g diameters: off by %.10f, want %.10f", c.ratio, got, c.off)
		}
	}
	for ratio := 0.4; ratio < 40; ratio *= 1.05 {
		if off := value(t, "winding", wound(1, 1, ratio))/sheet(1, 1, ratio) - 1; !(math.Abs(off) < 0.01) {
			t.Errorf("length of %g diameters: off by %.4f", ratio, off)
		}
	}
}

// TestWindingReach: short coils are refused, and turns count squared.
func TestWindingReach(t *testing.T) {
	if figure(t, "winding", "reach", wound(10, 0.1, 0.04)) != 1 || figure(t, "winding", "reach", wound(10, 0.1, 0.039)) != 0 {
		t.Error("the formula holds from 0.4 diameters on")
	}
	near(t, "twice the turns", value(t, "winding", wound(60, 0.03, 0.06)), 4*value(t, "winding", wound(30, 0.03, 0.06)), 1e-12)
}
