package plan

import (
	"context"
	"math"
	"regexp"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/bom/order"
	"batchwright/data"
	"batchwright/export/workbook"
	"batchwright/tolerance/bench"
	"batchwright/tolerance/build"
	"batchwright/tolerance/pick"
	"batchwright/tolerance/spread"
)

const lamp = `build: Two lamps
units: 4
conditions:
  bench: {temperature: 23 °C, warmup: 1, humidity: 50 %, age: 24 h, supply: 9 V}
  warm:  {temperature: 35 °C}
  fresh: {warmup: 0, supply: 8 V}
  same:  {}
stages:
  half:
    kind: divider
    settings: {input: supply}
    parts:
      upper: {ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}
      lower: {ref: R2, same_as: half.upper}
  tank:
    kind: tuned-tank
    parts:
      coil:  {ref: L1, value: 1 mH, family: drum-choke, tolerance: 5 %}
      tank:  {ref: C1, value: 220 pF, family: c0g, tolerance: 5 %, lots: mixed}
      pad:   {ref: C2, value: 10 pF}
      tuner: {ref: CT1, value: 4..34 pF, family: film-trimmer}
trims:
  - {turn: tank.tuner, output: tank.frequency, to: 318 kHz, within: 20 Hz}
targets:
  - {name: warm drift, output: tank.frequency, change_from: bench, at: [warm], limit: 3 kHz, share: 95 %}
`

// lampWork is everything found out about a build that has one of everything.
func lampWork(t *testing.T) Work { return workOn(t, lamp) }

// workOn is everything found out about a build.
func workOn(t *testing.T, text string) Work {
	t.Helper()
	b, err := build.Read("lamp.yaml", []byte(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	w := Work{File: "lamp.yaml", Text: []byte(text), Seed: 3, Simulate: 400, Version: "9.9.9"}
	ctx, o := context.Background(), spread.Options{Seed: 3, Units: 400}
	if w.Pick, w.Build, err = pick.Choose(ctx, b, pick.Options{Seed: 3, Units: 400}); err != nil {
		t.Fatal(err)
	}
	if w.Model, err = w.Build.Compile(); err != nil {
		t.Fatal(err)
	}
	if w.Report, err = spread.Analyse(ctx, w.Model, o); err != nil {
		t.Fatal(err)
	}
	if w.Drifts, err = Drifts(ctx, w.Build, o); err != nil {
		t.Fatal(err)
	}
	w.Sheet = bench.NewSheet(w.Model, w.Report)
	w.Order = order.New(w.Build.Parts(), w.Build.Units, w.Build.Spares, w.Build.Book, w.Build.Families)
	return w
}

func TestConditionsInWords(t *testing.T) {
	want := []workbook.Condition{
		{Name: "bench", Text: "23 °C, warmed up, 50 % relative humidity, 24 h old, supply 9 V"},
		{Name: "warm", Text: "35 °C"},
		{Name: "fresh", Text: "just switched on, supply 8 V"},
		{Name: "same", Text: "as bench"},
	}
	if diff := cmp.Diff(want, Compose(lampWork(t)).Conditions); diff != "" {
		t.Error(diff)
	}
}

// Values and codes are those of the build above; 10 kΩ ±1 % is brown black
// black red brown and 220 pF ±5 % 220pJ by IEC 60062, whose reading is
// bom/marking's matter: here the field must not be empty.
func TestPositions(t *testing.T) {
	got := Compose(lampWork(t)).Positions
	for i := range got {
		if got[i].Marking == "" && got[i].Ref != "CT1" && got[i].Ref != "C2" {
			t.Errorf("%s has no marking", got[i].Ref)
		}
		got[i].Marking = ""
	}
	trim := "trimmer, set in step "
	want := []workbook.Position{
		{Stage: "half", Kind: "divider", Ref: "R1", Role: "upper", Value: "10 kΩ", Family: "Metal film, 100 ppm/K", Tolerance: "±1 %", Note: "one lot for R1, R2"},
		{Stage: "half", Kind: "divider", Ref: "R2", Role: "lower", Value: "10 kΩ", Family: "Metal film, 100 ppm/K", Tolerance: "±1 %", Note: "one lot for R1, R2"},
		{Stage: "tank", Kind: "tuned-tank", Ref: "L1", Role: "coil", Value: "1 mH", Family: "Ferrite drum choke", Tolerance: "±5 %"},
		{Stage: "tank", Kind: "tuned-tank", Ref: "C1", Role: "tank", Value: "220 pF", Family: "Ceramic C0G (NP0)", Tolerance: "±5 %", Note: "from mixed lots"},
		{Stage: "tank", Kind: "tuned-tank", Ref: "C2", Role: "pad", Value: "10 pF", Family: "no family given"},
		{Stage: "tank", Kind: "tuned-tank", Ref: "CT1", Role: "tuner", Value: "4..34 pF", Family: "Film trimmer capacitor", Tolerance: got[5].Tolerance, Note: trim},
	}
	if note, ok := strings.CutPrefix(got[5].Note, trim); !ok || strings.Trim(note, "0123456789") != "" {
		t.Errorf("the tuner's note is %q", got[5].Note)
	}
	got[5].Note = trim
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

// Every reference that the bench is sent to stands on the sheet of parts by
// stage, in all three examples: of readings, trims and samples.
func TestReferencesAreThoseOfTheParts(t *testing.T) {
	reference := regexp.MustCompile(`\b[A-Z]{1,3}[0-9]+[AB]?\b`)
	for _, name := range []string{"lantern", "nightowl", "shoreline"} {
		text, err := data.Examples.ReadFile("examples/" + name + ".yaml")
		if err != nil {
			t.Fatal(err)
		}
		b, err := build.Read(name, text, nil)
		if err != nil {
			t.Fatal(err)
		}
		m, err := b.Compile()
		if err != nil {
			t.Fatal(err)
		}
		sheet := bench.NewSheet(m, &spread.Report{Readings: make([]spread.ReadingReport, len(m.Points)), Samples: make([]spread.SampleReport, len(m.Samples))})
		parts := map[string]bool{}
		for _, p := range positions(Work{Build: b, Sheet: sheet}) {
			parts[p.Ref] = true
		}
		var words []string
		for _, r := range sheet.Readings {
			words = append(words, r.At)
		}
		for _, x := range sheet.Turns {
			words = append(words, x.At, x.Ref)
		}
		for _, x := range sheet.Samples {
			words = append(words, x.At)
		}
		seen := 0
		for _, w := range words {
			for _, ref := range reference.FindAllString(w, -1) {
				if seen++; !parts[ref] && ref != "AC" {
					t.Errorf("%s: %q names %s, which is no part", name, w, ref)
				}
			}
		}
		if seen < 8 {
			t.Errorf("%s: only %d references seen", name, seen)
		}
	}
}

// What the sheet found goes to the workbook and into the JSON result.
func TestSheetIsHandedOn(t *testing.T) {
	w := lampWork(t)
	w.Cards = true
	p := Compose(w)
	if !p.Cards || len(p.Samples) != 1 || p.Samples[0].Target != "warm drift" || p.Samples[0].Needs != "35 °C, 12 K warmer than the bench" {
		t.Errorf("cards %v, samples %+v", p.Cards, p.Samples)
	}
	if got := NewResult(w).Samples; len(got) != 1 || got[0].Every != 1 { // 4 units: 3 are tested
		t.Errorf("got %+v", got)
	}
}

// What changes the figures changes the digest; nothing else does.
func TestDigest(t *testing.T) {
	w := Work{Text: []byte(lamp), Seed: 1, Simulate: 100, Version: "1", Build: &build.Build{Units: 4}}
	first := w.Digest()
	if len(first) != 64 || w.Digest() != first {
		t.Fatalf("digest %q, then %q", first, w.Digest())
	}
	for name, change := range map[string]func(*Work){
		"seed":     func(w *Work) { w.Seed = 2 },
		"simulate": func(w *Work) { w.Simulate = 101 },
		"version":  func(w *Work) { w.Version = "2" },
		"units":    func(w *Work) { w.Build = &build.Build{Units: 5} },
		"text":     func(w *Work) { w.Text = append([]byte(lamp), '\n') },
	} {
		other := w
		if change(&other); other.Digest() == first {
			t.Errorf("another %s, the same digest", name)
		}
	}
	moved := w
	if moved.File = "elsewhere.yaml"; moved.Digest() != first {
		t.Error("another name, another digest")
	}
}

func TestBasisNamesSources(t *testing.T) {
	w := lampWork(t)
	text := map[string]workbook.Basis{}
	for _, b := range Compose(w).Basis {
		if b.Heading == "" || b.Text == "" {
			t.Errorf("empty basis %+v", b)
		}
		text[b.Heading] = b
	}
	for _, heading := range []string{"Family metal-film-100", "Family drum-choke", "Family c0g", "Family film-trimmer", "Kind divider", "Kind tuned-tank"} {
		if text[heading].Source == "" {
			t.Errorf("%s: no source", heading)
		}
	}
	for heading, part := range map[string]string{
		"Versions": "batchwright 9.9.9", "Prices": "invented", "Lots": "whole batch",
	} {
		if !strings.Contains(text[heading].Text, part) {
			t.Errorf("%s is %q, expected %q in it", heading, text[heading].Text, part)
		}
	}
	if _, ok := text["Instrument counter"]; !ok {
		t.Error("the counter that reads the tank is not described")
	}
}

// The sweep spans 15 K to either side of the bench, ends included, and at the
// bench's own temperature nothing has moved.
func TestDrifts(t *testing.T) {
	drifts := lampWork(t).Drifts
	if len(drifts) != 1 {
		t.Fatalf("%d drifts, expected that of the one target", len(drifts))
	}
	d := drifts[0]
	if d.Output != "tank.frequency" || d.Unit != "Hz" || d.Target != "warm drift" {
		t.Errorf("drift of %s in %s for %q", d.Output, d.Unit, d.Target)
	}
	if diff := cmp.Diff(&spread.Limits{Low: -3000, High: 3000}, d.Limits); diff != "" {
		t.Error(diff)
	}
	if n := len(d.Rows); n != driftSteps+1 || d.Rows[0].Celsius != 8 || d.Rows[n-1].Celsius != 38 {
		t.Fatalf("%d rows from %v to %v", len(d.Rows), d.Rows[0].Celsius, d.Rows[len(d.Rows)-1].Celsius)
	}
	for _, r := range d.Rows {
		if !(r.Low <= r.High) {
			t.Errorf("at %v °C low %v, high %v", r.Celsius, r.Low, r.High)
		}
		if r.Celsius == 23 && math.Abs(float64(r.Nominal)) > 1e-6 {
			t.Errorf("moved by %v Hz at the reference itself", r.Nominal)
		}
	}
}

func TestShare(t *testing.T) {
	for _, c := range []struct {
		name  string
		share float64
		want  string
	}{
		{"all", 1, "100 %"}, {"none", 0, "0 %"}, {"plain", 0.9345, "93.5 %"},
		{"all but one in 24,000", 1 - 1.0/24000, "99.99 %"},
		{"all but one in a thousand million", 1 - 1e-9, "99.99 %"},
		{"one in 24,000", 1.0 / 24000, "0.01 %"}, {"one in a thousand million", 1e-9, "0.01 %"},
		{"two in ten thousand", 0.9998, "99.98 %"}, {"few", 0.0004, "0.04 %"},
		{"unknown", math.NaN(), "–"},
	} {
		if got := Share(spread.Figure(c.share)); got != c.want {
			t.Errorf("%s: Share(%v) = %q, want %q", c.name, c.share, got, c.want)
		}
	}
}

func TestContributors(t *testing.T) {
	o := spread.OutputReport{Contributions: []spread.Contribution{
		{Ref: "C6", Parameter: "temperature", Share: 0.14}, {Ref: "L1", Parameter: "value", Share: 0.71},
		{Ref: "R1", Parameter: "value", Share: 0.049}, {Ref: "C7", Parameter: "value", Share: 0.101},
	}}
	for most, want := range map[int]string{0: "", 1: "L1 71 %", 2: "L1 71 %, C6 temperature 14 %", 9: "L1 71 %, C6 temperature 14 %, C7 10 %"} {
		if got := Contributors(o, most); got != want {
			t.Errorf("Contributors(%d) = %q, want %q", most, got, want)
		}
	}
	if o.Contributions[0].Ref != "C6" {
		t.Error("the report was reordered")
	}
}
