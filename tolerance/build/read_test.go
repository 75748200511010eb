package build_test

import (
	"errors"
	"fmt"
	"io/fs"
	"math"
	"strings"
	"testing"

	"batchwright/bom/document"
	"batchwright/data"
	"batchwright/tolerance/build"
)

// good is a small build without faults; the tests break one line of it.
const good = `build: two tanks
units: 12
conditions:
  bench: {temperature: 23 °C, hand: 0 pF}
  warm:  {temperature: 33 °C}
stages:
  fixed:
    kind: colpitts
    settings: {stray: 8 pF, rise: 3 K}
    parts:
      coil:  {ref: L1, value: 1.8 mH, family: drum-choke, tolerance: 5 %}
      upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}
      lower: {ref: C2, same_as: fixed.upper}
      tuner: {ref: CT1, value: 4..34 pF, family: film-trimmer}
  moving:
    kind: tuned-tank
    settings: {sensor: hand}
    parts:
      coil: {ref: L2, same_as: fixed.coil}
      tank: {ref: C3, value: 130 pF, family: c0g, tolerance: 5 %}
  mixer:
    kind: multiplier
    in: {carrier: fixed, signal: moving}
  ratio:
    kind: formula
    settings: {scale: 2}
    parts: {r: {ref: R1, value: 10 kΩ}}
    outputs:
      value: {expression: "scale*mixer.offset/fixed.frequency"}
      noise: {expression: "r*0.001*ampere", unit: V}
trims:
  - {turn: fixed.tuner, output: mixer.offset, to: 0 Hz, within: 2 Hz}
targets:
  - {name: drift, output: mixer.offset, change_from: bench, at: [warm], limit: 40 Hz, share: 99 %}
  - {name: reach, trim: fixed.tuner, share: 99.5 %}
`

func read(text string) (*build.Build, error) {
	return build.Read("lamp.yaml", []byte(text), func(string) ([]byte, error) { return nil, fs.ErrNotExist })
}

func TestGood(t *testing.T) {
	b, err := read(good)
	if err != nil {
		t.Fatal(err)
	}
	if len(b.Stages) != 4 || len(b.Parts()) != 7 || len(b.Trims) != 1 || len(b.Targets) != 2 {
		t.Errorf("read %d stages, %d parts, %d trims, %d targets", len(b.Stages), len(b.Parts()), len(b.Trims), len(b.Targets))
	}
	if _, err := b.Compile(); err != nil {
		t.Error(err)
	}
}

// TestExamples reads every embedded example.
func TestExamples(t *testing.T) {
	files, err := fs.Glob(data.Examples, "examples/*.yaml")
	if err != nil || len(files) == 0 {
		t.Fatalf("no examples: %v", err)
	}
	for _, name := range files {
		text, err := fs.ReadFile(data.Examples, name)
		if err != nil {
			t.Fatal(err)
		}
		b, err := build.Read(name, text, nil)
		if err != nil {
			t.Errorf("%s:\n%v", name, err)
			continue
		}
		if _, err := b.Compile(); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// TestFaults breaks the good build in one place each and asks for a complaint
// at that line that holds every word given.
func TestFaults(t *testing.T) {
	for _, c := range []struct {
		name, old, new string
		line           int
		words          []string
	}{
		{"unknown top key", "units: 12", "unitz: 12", 2, []string{"unitz", "units"}},
		{"zero units", "units: 12", "units: 0", 2, []string{"1 to 200"}},
		{"a thousand million units", "units: 12", "units: 1000000000", 2, []string{"1 to 200"}},
		{"unknown kind", "kind: colpitts", "kind: colpits", 8, []string{"colpits", "nearest: colpitts"}},
		{"unknown family", "family: c0g, tolerance: 5 %}\n      lower", "family: cog, tolerance: 5 %}\n      lower", 12, []string{`"cog"`, "nearest: c0g"}},
		{"family of another type", "family: drum-choke", "family: c0g", 11, []string{"c0g"}},
		{"wrong unit", "value: 220 pF", "value: 220 Ω", 12, []string{"220 Ω", "capacitance"}},
		{"bare number", "value: 220 pF", "value: 220", 12, []string{"220"}},
		{"comma", "value: 1.8 mH", "value: \"1,8 mH\"", 11, []string{"dot"}},
		{"missing role", "      upper: {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %}\n", "", 11, []string{"upper"}},
		{"unknown role", "tuner: {ref", "tunr: {ref", 14, []string{"tunr", "tuner"}},
		{"trim on no trimmer", "turn: fixed.tuner", "turn: fixed.coil", 32, []string{"not a trimmer", "fixed.coil is a coil"}},
		{"trim of nothing", "turn: fixed.tuner", "turn: fixed.tunr", 32, []string{"fixed.tuner"}},
		{"no such condition", "at: [warm]", "at: [warn]", 34, []string{"warn", "nearest: warm"}},
		{"no such output", "output: mixer.offset, change", "output: mixer.ofset, change", 34, []string{"mixer.offset"}},
		{"duplicate reference", "ref: C3", "ref: C1", 20, []string{"C1", "line 12"}},
		{"bad reference", "ref: C3", "ref: c 3", 20, []string{"c 3"}},
		{"same as itself", "same_as: fixed.upper", "same_as: fixed.lower", 13, []string{"circle"}},
		{"same as nothing", "same_as: fixed.upper", "same_as: fixed.uper", 13, []string{"fixed.upper"}},
		{"same as another type", "same_as: fixed.upper", "same_as: fixed.coil", 13, []string{"coil", "capacitor"}},
		{"misspelt variable", "sensor: hand", "sensor: hnd", 17, []string{"hnd", "nearest: hand"}},
		{"reference of the wrong unit", "sensor: hand", "sensor: fixed.frequency", 17, []string{"F", "Hz"}},
		{"missing input", "in: {carrier: fixed, signal: moving}", "in: {carrier: fixed}", 23, []string{"signal"}},
		{"unknown stage", "signal: moving", "signal: mooving", 23, []string{"mooving", "nearest: moving"}},
		{"misspelt name in an expression", "scale*mixer.offset", "scal*mixer.offset", 29, []string{"scal", "nearest: scale"}},
		{"dimensions that do not fit", "r*0.001*ampere", "r + 0.001*ampere", 30, []string{"A", "Ω"}},
		{"wrong unit of an output", "unit: V", "unit: Hz", 30, []string{"V"}},
		{"syntax", "scale*mixer.offset", "scale**", 29, nil},
		{"variable out of range", "temperature: 33 °C", "temperature: 3300 °C", 5, []string{"3300 °C"}},
		{"share beyond all", "share: 99.5 %", "share: 101 %", 35, []string{"100 %"}},
		{"limits that do not rise", "limit: 40 Hz", "between: [4 Hz, 2 Hz]", 34, []string{"2 Hz"}},
		{"value the family is not made in", "value: 1.8 mH", "value: 180 H", 11, []string{"drum-choke"}},
		{"stage name", "  ratio:", "  my ratio:", 24, []string{"my ratio"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			if strings.Count(good, c.old) != 1 {
				t.Fatalf("%q stands %d times in the good build", c.old, strings.Count(good, c.old))
			}
			_, err := read(strings.Replace(good, c.old, c.new, 1))
			var faults document.Complaints
			if !errors.As(err, &faults) {
				t.Fatalf("no complaints: %v", err)
			}
			at := fmt.Sprintf("lamp.yaml:%d:", c.line)
			for _, f := range faults {
				if strings.HasPrefix(f.Error(), at) && containsAll(f.Error(), c.words) {
					return
				}
			}
			t.Errorf("no complaint at line %d with %q in:\n%v", c.line, c.words, err)
		})
	}
}

func containsAll(text string, words []string) bool {
	for _, w := range words {
		if !strings.Contains(text, w) {
			return false
		}
	}
	return true
}

// TestCycle is two stages that need each other, and one that needs itself.
func TestCycle(t *testing.T) {
	const loop = `build: loop
units: 2
conditions: {bench: {}}
stages:
  a: {kind: divider, settings: {input: b.voltage}, parts: {upper: {ref: R1, value: 1 kΩ}, lower: {ref: R2, value: 1 kΩ}}}
  b: {kind: divider, settings: {input: a.voltage}, parts: {upper: {ref: R3, value: 1 kΩ}, lower: {ref: R4, value: 1 kΩ}}}
  c:
    kind: formula
    outputs: {x: {expression: y + 1}, y: {expression: x - 1}}
`
	_, err := read(loop)
	if err == nil || !containsAll(err.Error(), []string{"a -> b -> a", "lamp.yaml:9:"}) {
		t.Errorf("got %v", err)
	}
}

// TestAllFaults asks for every fault of a file in one run.
func TestAllFaults(t *testing.T) {
	text := strings.NewReplacer("units: 12", "units: 0", "ref: C3", "ref: C1", "kind: multiplier", "kind: multiplyer",
		"turn: fixed.tuner", "turn: fixed.coil", "at: [warm]", "at: [warn]").Replace(good)
	_, err := read(text)
	var faults document.Complaints
	if !errors.As(err, &faults) {
		t.Fatal(err)
	}
	for _, line := range []int{2, 20, 22, 32, 34} {
		if !strings.Contains(err.Error(), fmt.Sprintf("lamp.yaml:%d:", line)) {
			t.Errorf("nothing about line %d in:\n%v", line, err)
		}
	}
}

// TestCents has a limit in cents at a note: 20 cents about 440 Hz are
// 440·(2^(±20/1200) − 1) Hz, 5.112 Hz above and 5.053 Hz below.
func TestCents(t *testing.T) {
	b, err := read(strings.Replace(good, "limit: 40 Hz", "limit: 20 cents, note: 440 Hz", 1))
	if err != nil {
		t.Fatal(err)
	}
	d := b.Targets[0]
	if math.Abs(d.High-5.1124) > 1e-3 || math.Abs(d.Low+5.0537) > 1e-3 || !strings.Contains(d.Asked, "20 cents at 440 Hz") {
		t.Errorf("%g to %g: %s", d.Low, d.High, d.Asked)
	}
}

// TestMissingFile keeps the file system's error, so that it can be told from a
// fault of the build.
func TestMissingFile(t *testing.T) {
	_, err := read("price_book: nowhere.csv\n" + good)
	if !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("got %v", err)
	}
}

func FuzzRead(f *testing.F) {
	f.Add(good)
	f.Add("build: x\nunits: 1\nconditions: {a: {}}\nstages: {s: {kind: formula, outputs: {y: {expression: 1/0}}}}")
	f.Add("a: &a [*a]")
	f.Add(paired)
	f.Add(openingText("capacitor", "value: 219 pF, choose: {families: [c0g], combine: [single, parallel, series], within: 0.5 %, series: E12, lots: [one, mixed]}"))
	text, err := data.Examples.ReadFile("examples/lantern.yaml")
	if err != nil {
		f.Fatal(err)
	}
	f.Add(string(text))
	f.Fuzz(func(t *testing.T, text string) {
		b, err := read(text)
		if err != nil {
			return
		}
		if _, err := b.Compile(); err != nil {
			t.Errorf("read but not compiled: %v", err)
		}
	})
}
