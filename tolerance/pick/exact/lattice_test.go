package exact

import "testing"

func TestLattice(t *testing.T) {
	// Floors 10, 40 and 5, 65: sums 7+15 = 22, 52, 82, 112; step gcd(30, 60) = 30.
	p := &Problem{Base: 7, Lines: []Line{
		{Options: []Option{{Floor: 10}, {Floor: 40}}},
		{Options: []Option{{Floor: 5}, {Floor: 65}}},
	}}
	l := p.lattice(p.all())
	if (l != lattice{22, 30}) {
		t.Fatalf("lattice %v, want origin 22, step 30", l)
	}
	for bound, want := range map[float64]int64{22: 22, 22.0000001: 22, 22.1: 52, 52: 52, 60: 82, -9: -8, -8.5: -8, -38: -38} {
		if got := l.up(bound); got != want {
			t.Errorf("up(%v) = %d, want %d", bound, got, want)
		}
	}
	for cost, want := range map[int64]int64{22: 22, 21: -8, 51: 22, 52: 52, 100: 82} {
		if got := l.down(cost); got != want {
			t.Errorf("down(%d) = %d, want %d", cost, got, want)
		}
	}
}

// With one sum only there is no step.
func TestLatticeOfOnePoint(t *testing.T) {
	l := flat(3, 2).lattice([][]int{{0, 1}, {0, 1}, {0, 1}})
	if l.up(3) != 21 || l.down(30) != 21 || l.down(20) != 20 {
		t.Errorf("up(3) = %d, down(30) = %d, down(20) = %d; want 21, 21, 20", l.up(3), l.down(30), l.down(20))
	}
}
