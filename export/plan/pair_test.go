package plan

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"batchwright/export/workbook"
)

// pairs are the lamps with parts that two pieces make up.
var pairs = strings.NewReplacer(
	"{ref: R1, value: 10 kΩ, family: metal-film-100, tolerance: 1 %}", "{ref: R1, series: [{value: 9.1 kΩ, family: metal-film-100, tolerance: 1 %}, {value: 910 Ω, family: carbon-film, tolerance: 5 %}]}",
	"{ref: C1, value: 220 pF, family: c0g, tolerance: 5 %, lots: mixed}", "{ref: C1, parallel: [{value: 110 pF, family: c0g, tolerance: 5 %}, {value: 110 pF, family: c0g, tolerance: 5 %}], lots: mixed}",
	"{ref: C2, value: 10 pF}", "{ref: C2, parallel: [{value: 4.7 pF}, {value: 5.6 pF, family: c0g, tolerance: 5 %}]}",
).Replace(lamp)

// TestPairPositions lists both pieces of a pair, each with what it is joined to
// and which bag it comes from.
func TestPairPositions(t *testing.T) {
	w := workOn(t, pairs)
	got := Compose(w).Positions
	for i := range got {
		if got[i].Marking == "" && got[i].Family != "no family given" && got[i].Ref != "CT1" {
			t.Errorf("%s has no marking", got[i].Ref)
		}
		got[i].Marking = ""
	}
	half := func(ref, role, value, family, tolerance, note string) workbook.Position {
		return workbook.Position{Stage: "half", Kind: "divider", Ref: ref, Role: role, Value: value, Family: family, Tolerance: tolerance, Note: note}
	}
	tank := func(ref, role, value, family, tolerance, note string) workbook.Position {
		p := half(ref, role, value, family, tolerance, note)
		p.Stage, p.Kind = "tank", "tuned-tank"
		return p
	}
	const c0g, film, carbon = "Ceramic C0G (NP0)", "Metal film, 100 ppm/K", "Carbon film"
	want := []workbook.Position{
		half("R1A", "upper", "9.1 kΩ", film, "±1 %", "in series with R1B, together R1; one lot for R1A, R2A"),
		half("R1B", "upper", "910 Ω", carbon, "±5 %", "in series with R1A, together R1; one lot for R1B, R2B"),
		half("R2A", "lower", "9.1 kΩ", film, "±1 %", "in series with R2B, together R2; one lot for R1A, R2A"),
		half("R2B", "lower", "910 Ω", carbon, "±5 %", "in series with R2A, together R2; one lot for R1B, R2B"),
		tank("L1", "coil", "1 mH", "Ferrite drum choke", "±5 %", ""),
		tank("C1A", "tank", "110 pF", c0g, "±5 %", "in parallel with C1B, together C1; from mixed lots"),
		tank("C1B", "tank", "110 pF", c0g, "±5 %", "in parallel with C1A, together C1; from mixed lots"),
		tank("C2A", "pad", "4.7 pF", "no family given", "", "in parallel with C2B, together C2"),
		tank("C2B", "pad", "5.6 pF", c0g, "±5 %", "in parallel with C2A, together C2"),
	}
	if diff := cmp.Diff(want, got[:len(got)-1]); diff != "" {
		t.Error(diff)
	}
}

// TestPairElsewhere looks for both pieces where references are listed: the
// order, what to check where a trim does not reach, the pages.
func TestPairElsewhere(t *testing.T) {
	w := workOn(t, pairs)
	p := Compose(w)
	if got := p.Advice["tank.tuner"]; !strings.Contains(got, " Check C1A, C1B, C2A, C2B, L1 against") {
		t.Errorf("advice: %s", got)
	}
	var lines []string
	for _, l := range append(p.Order.Lines, p.Order.Unoffered...) {
		lines = append(lines, strings.Join(l.Refs, "+"))
	}
	if got, want := strings.Join(lines, " "), "C1A+C1B C2B CT1 L1 R1A+R2A R1B+R2B C2A"; got != want {
		t.Errorf("lines are %s, want %s", got, want)
	}
	var at []string
	for _, r := range p.Readings {
		at = append(at, r.At)
	}
	if got := strings.Join(at, "; "); !strings.Contains(got, "R1A + R1B (upper) and R2A + R2B (lower)") {
		t.Errorf("read at %s", got)
	}
}
