package order

import (
	"flag"
	"os"
	"testing"
)

// TestMain gives the random tests one seed, so that a run can be repeated, and
// keeps them from leaving files behind.
func TestMain(m *testing.M) {
	for name, value := range map[string]string{"rapid.seed": "23", "rapid.nofailfile": "true"} {
		if err := flag.Set(name, value); err != nil {
			panic("order: " + err.Error())
		}
	}
	os.Exit(m.Run())
}
