package cli

import (
	"bytes"
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// result is what one run left behind.
type result struct {
	code           int
	stdout, stderr string
}

// runHere runs a command in this process.
func runHere(t *testing.T, args ...string) result {
	t.Helper()
	var out, errs bytes.Buffer
	code := run(context.Background(), args, strings.NewReader(""), &out, &errs)
	return result{code, out.String(), errs.String()}
}

// faults are those of testdata/faults.yaml: the line each is on, and what must
// be said of it. Columns count characters from 1, taken from the file by hand.
var faults = []struct{ at, found, advice string }{
	{"2:8", `"0"`, "whole number from 1 to 200"},        // zero units
	{"3:1", `"colour"`, "unknown key"},                  //
	{"6:11", `"temprature"`, "nearest: temperature"},    //
	{"9:11", `"colpits"`, "nearest: colpitts"},          // unknown kind
	{"11:11", "", "loop_a -> loop_b -> loop_a"},         // cycle between stages
	{"24:16", `"stary"`, "level, stray, sensor"},        // unknown setting
	{"26:31", `"10 kΩ"`, "an inductance"},               // wrong unit
	{"27:31", `"240"`, "a number without a unit"},       //
	{"28:20", `"C1"`, "line 27 has it"},                 // duplicate reference
	{"28:49", `"film-trimer"`, "nearest: film-trimmer"}, // unknown family
	{"31:23", `"suply"`, "nearest: supply"},             // unknown reference
	{"33:33", `"half.lower"`, "same_as in a circle"},    //
	{"34:33", `"half.upper"`, "same_as in a circle"},    //
	{"39:7", "", "missing part shunt"},                  // missing role
	{"39:32", `"4,7 kΩ"`, "decimal mark is a dot"},      //
	{"45:36", `"Ω"`, "do not go together"},              // volts and ohms added
	{"48:56", `"1 Hz"`, "a length"},                     // dimension of the wrong unit
	{"50:32", "", "at least 0.4 diameters"},             // winding out of reach
	{"51:75", `"600 V"`, "at most 50 V"},                // above the rated voltage
	{"55:30", "", "two parts such as"},                  // pair of one
	{"56:16", `"R9X"`, "ends in a figure"},              // reference of a pair
	{"57:89", `"paralel"`, "nearest: parallel"},         // combination
	{"58:28", `"5 V"`, "leakage"},                       // steady voltage across two in series
	{"61:12", `"half.upper"`, "not a trimmer"},          // trim on a resistor
	{"63:23", `"half.voltge"`, "nearest: half.voltage"}, // unknown output
	{"64:42", `"hal"`, "nearest: hall"},                 // unknown condition
	{"65:65", "", "high above the low"},                 // limits the wrong way round
	{"65:78", `"150 %"`, "at most 100 %"},               // share
}

// Every fault of a bad build is reported in one run, each at its place, and
// nothing else is.
func TestEveryFaultInOneRun(t *testing.T) {
	const file = "testdata/faults.yaml"
	for _, command := range []string{"check", "spread", "plan"} {
		t.Run(command, func(t *testing.T) {
			r := runHere(t, command, file)
			if r.code != exitInput || r.stdout != "" {
				t.Errorf("exit code %d, standard output %q; expected %d and nothing", r.code, r.stdout, exitInput)
			}
			lines := strings.Split(strings.TrimSpace(r.stderr), "\n")
			if want := fmt.Sprintf("batchwright: %d faults; nothing was written", len(faults)); lines[len(lines)-1] != want {
				t.Errorf("last line %q, expected %q", lines[len(lines)-1], want)
			}
			lines = lines[:len(lines)-1]
			for i, f := range faults {
				if i >= len(lines) {
					t.Errorf("nothing is said of %s", f.at)
				} else if l := lines[i]; !strings.HasPrefix(l, file+":"+f.at+": ") || !strings.Contains(l, f.found) || !strings.Contains(l, f.advice) {
					t.Errorf("line %d is\n\t%s\nexpected it at %s with %s and %q", i+1, l, f.at, f.found, f.advice)
				}
			}
			for _, l := range lines[min(len(lines), len(faults)):] {
				t.Errorf("not expected: %s", l)
			}
		})
	}
}

// hostile are files that are no build in ways that cost more than reading them.
func hostile() map[string]string {
	deep := "build: " + strings.Repeat("[", 5000) + strings.Repeat("]", 5000)
	var anchors strings.Builder
	anchors.WriteString("a0: &a0 [x, x, x, x, x, x, x, x]\n")
	for i := 1; i < 12; i++ { // eight to the twelfth, if each were written out
		fmt.Fprintf(&anchors, "a%d: &a%d [%s]\n", i, i, strings.TrimSuffix(strings.Repeat(fmt.Sprintf("*a%d, ", i-1), 8), ", "))
	}
	return map[string]string{
		"deep nesting":       deep,
		"expanding anchors":  anchors.String(),
		"anchor in itself":   "build: &a [*a]\n",
		"too large":          "build: x\n#" + strings.Repeat("x", 50<<20),
		"not text":           "build: \xff\xfe\n",
		"empty":              "",
		"a list":             "- build\n",
		"two documents":      "build: a\n---\nbuild: b\n",
		"a thousand million": "build: a\nunits: 1000000000\nconditions: {bench: {}}\nstages: {}\n",
	}
}

func TestHostileFiles(t *testing.T) {
	for name, text := range hostile() {
		t.Run(name, func(t *testing.T) {
			file := filepath.Join(t.TempDir(), "build.yaml")
			if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
				t.Fatal(err)
			}
			r := runHere(t, "check", file)
			if r.code != exitInput || r.stdout != "" || !strings.HasPrefix(r.stderr, file+":") {
				t.Errorf("exit code %d, standard output %q, standard error %.300q", r.code, r.stdout, r.stderr)
			}
		})
	}
}

// A title cannot move the cursor of the terminal it is printed on.
func TestControlCharacters(t *testing.T) {
	small, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(t.TempDir(), "build.yaml")
	text := strings.Replace(string(small), "build: Small pair", `build: "Small \e[2J pair\u202e"`, 1)
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	r := runHere(t, "check", file)
	if r.code != exitDone || !strings.HasPrefix(r.stdout, "Small [2J pair: 6 units") {
		t.Errorf("exit code %d, standard output %.60q, standard error %q", r.code, r.stdout, r.stderr)
	}
}
