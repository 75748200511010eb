package cli

import (
	"encoding/json"
	"errors"
	"io"
	"os/exec"
	"strings"
	"testing"
)

// floors is the house, from the ground up: a package imports only packages of
// the project that stand on lower floors.
var floors = [][]string{
	{"data"},
	{"bom/quantity"},
	{"bom/document"},
	{"bom/part"},
	{"bom/series"},
	{"bom/marking"},
	{"bom/offer"},
	{"bom/order"},
	{"tolerance/formula", "tolerance/geometry", "tolerance/pick/exact"},
	{"tolerance/tape", "tolerance/stage", "tolerance/scatter"},
	{"tolerance/build"},
	{"tolerance/spread"},
	{"tolerance/pick", "tolerance/compare", "tolerance/bench"},
	{"tolerance/bench/explain"},
	{"export/table", "export/workbook", "export/chart"},
	{"export/plan"},
	{"cli"},
	{"cli/batchwright"},
}

// listed is what `go list` says of a package.
type listed struct {
	ImportPath string
	Imports    []string
}

func TestHouse(t *testing.T) {
	const module = "batchwright/"
	floor := map[string]int{}
	for i, packages := range floors {
		for _, p := range packages {
			floor[module+p] = i
		}
	}
	seen := 0
	for _, p := range packages(t) {
		if !strings.HasPrefix(p.ImportPath, module) {
			continue
		}
		seen++
		own, known := floor[p.ImportPath]
		if !known {
			t.Errorf("%s has no floor in the house: give it one in this test and in DEVELOPERS.md", p.ImportPath)
			continue
		}
		for _, i := range p.Imports {
			if below, ours := floor[i]; ours && below >= own {
				t.Errorf("%s imports %s, which does not stand below it", p.ImportPath, i)
			}
		}
	}
	if seen != len(floor) {
		t.Errorf("found %d packages, the house has %d", seen, len(floor))
	}
}

// packages lists everything that the program is built of.
func packages(t *testing.T) []listed {
	t.Helper()
	command := exec.Command("go", "list", "-deps", "-json=ImportPath,Imports", "./...")
	command.Dir = ".." // the module's root, so that nothing is left out
	text, err := command.Output()
	if errors.Is(err, exec.ErrNotFound) {
		t.Skip("the go command is not there")
	}
	if err != nil {
		t.Fatal(err)
	}
	var list []listed
	decoder := json.NewDecoder(strings.NewReader(string(text)))
	for {
		var p listed
		switch err := decoder.Decode(&p); {
		case err == io.EOF:
			return list
		case err != nil:
			t.Fatal(err)
		}
		list = append(list, p)
	}
}
