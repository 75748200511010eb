package cli

import (
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"runtime"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"
)

// The keys that scripts of other people rely on, as the README lists them.
// `[]` is every entry of a list, of which there must be one.
var spreadKeys = strings.Fields(`
	build seed
	outputs.[].output outputs.[].condition outputs.[].unit outputs.[].nominal
	outputs.[].worst_case.low outputs.[].worst_case.high
	outputs.[].root_sum_square.standard_uncertainty
	outputs.[].simulated.mean outputs.[].simulated.standard_deviation
	outputs.[].simulated.quantiles.0:005 outputs.[].simulated.quantiles.0:025 outputs.[].simulated.quantiles.0:5
	outputs.[].simulated.quantiles.0:975 outputs.[].simulated.quantiles.0:995
	outputs.[].contributions.[].ref outputs.[].contributions.[].parameter
	outputs.[].contributions.[].sensitivity outputs.[].contributions.[].share
	trims.[].turn trims.[].reached_share trims.[].short_low trims.[].short_high
	trims.[].setting.nominal trims.[].setting.mean
	targets.[].name targets.[].output targets.[].met targets.[].share targets.[].share_interval.[] targets.[].worst_case
	yield.unit_share yield.interval.[]
	yield.batch.units yield.batch.median_good yield.batch.p05_good yield.batch.all_good_share
	simulation.batches simulation.units
	bench.[].point bench.[].reading bench.[].instrument bench.[].condition bench.[].step bench.[].unit
	bench.[].nominal bench.[].unloaded bench.[].expected.low bench.[].expected.high bench.[].accept bench.[].uncertainty
`)

var planKeys = strings.Fields(`
	picks.[].positions.[] picks.[].refs.[] picks.[].family picks.[].tolerance picks.[].value picks.[].combine
	picks.[].parts.[] picks.[].unit_cost
	pick.proved_cheapest pick.cost_per_unit pick.candidates pick.alternates
	order.lines.[].refs.[] order.lines.[].family order.lines.[].value order.lines.[].tolerance order.lines.[].marking
	order.lines.[].per_unit order.lines.[].needed order.lines.[].spares order.lines.[].buy order.lines.[].price
	order.total order.currency files.[]
`)

var compareKeys = strings.Fields(`
	build seed simulation.batches simulation.units lines.[].positions.[] lines.[].refs.[] currency demonstration left_out notes
	cases.[].label cases.[].base cases.[].families.[] cases.[].tolerances.[] cases.[].values.[] cases.[].lots
	cases.[].drift_per_kelvin.[].output cases.[].drift_per_kelvin.[].unit cases.[].drift_per_kelvin.[].mean
	cases.[].drift_per_kelvin.[].lot_to_lot cases.[].drift_per_kelvin.[].unit_to_unit
	cases.[].targets.[].name cases.[].targets.[].met cases.[].targets.[].share cases.[].targets.[].share_interval.[]
	cases.[].targets.[].difference.share cases.[].targets.[].difference.interval.[] cases.[].targets.[].difference.shown
	cases.[].trims.[].turn cases.[].trims.[].reached_share
	cases.[].yield.unit_share cases.[].yield.interval.[] cases.[].yield.difference.share cases.[].yield.batch.units
	cases.[].unit_cost cases.[].batch_cost cases.[].sizes.[] cases.[].temperatures.low cases.[].verdict cases.[].why
`)

var reviewKeys = strings.Fields(`
	build plan unread_units.[] batch.points.[].point batch.points.[].mean batch.points.[].expected_mean batch.points.[].shift_score
	batch.points.[].units batch.points.[].spread_ratio batch.points.[].slope batch.points.[].remarks
	batch.counted batch.lots batch.unclear batch.rest batch.why notes files
	units.[].unit units.[].verdict units.[].suspects units.[].further units.[].healthy units.[].accused units.[].distance units.[].distance_limit
	units.[].points.[].point units.[].points.[].reading units.[].points.[].inside units.[].points.[].accepted units.[].points.[].score units.[].points.[].predicted
	units.[].trims.[].turn units.[].trims.[].reading units.[].trims.[].inside
	workbook.digest workbook.seed workbook.simulate workbook.typed workbook.lost
	workbook.findings.[].kind workbook.findings.[].sheet workbook.findings.[].cell workbook.findings.[].what
`)

// TestReviewKeys reads a workbook back of which one thing is to be said.
func TestReviewKeys(t *testing.T) {
	small, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	if err := os.WriteFile("tone-box.yaml", small, 0o600); err != nil {
		t.Fatal(err)
	}
	comeBack(t)
	f, err := excelize.OpenFile("filled.xlsx")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := errors.Join(f.SetCellValue("Test sheet", "B8", "Point"), f.Save()); err != nil {
		t.Fatal(err)
	}
	r := runHere(t, "review", "tone-box.yaml", "filled.xlsx", "--json")
	if r.code != exitDone || r.stderr != "" {
		t.Fatalf("exit code %d, standard error %q", r.code, r.stderr)
	}
	var v any
	if err := json.Unmarshal([]byte(r.stdout), &v); err != nil {
		t.Fatal(err)
	}
	for _, key := range reviewKeys {
		if err := holds(v, strings.Split(key, ".")); err != nil {
			t.Errorf("%s: %v", key, err)
		}
	}
}

func TestResultKeys(t *testing.T) {
	for command, keys := range map[string][]string{
		"spread": spreadKeys, "plan": append(spreadKeys[:len(spreadKeys):len(spreadKeys)], planKeys...), "compare": compareKeys,
	} {
		t.Run(command, func(t *testing.T) {
			args := []string{command, "testdata/small.yaml", "--simulate", "600", "--json"}
			if command == "plan" {
				args = append(args, "--out", t.TempDir())
			}
			if command == "compare" {
				args = append(args, "--at", "tank.tank")
			}
			r := runHere(t, args...)
			if r.code != exitDone || r.stderr != "" {
				t.Fatalf("exit code %d, standard error %q", r.code, r.stderr)
			}
			var v any // NaN and infinity are no JSON and would fail here
			if err := json.Unmarshal([]byte(r.stdout), &v); err != nil {
				t.Fatal(err)
			}
			for _, key := range keys {
				if err := holds(v, strings.Split(key, ".")); err != nil {
					t.Errorf("%s: %v", key, err)
				}
			}
		})
	}
}

// holds looks a key up; in a key of the path a colon stands for a dot.
func holds(v any, path []string) error {
	if len(path) == 0 {
		return nil
	}
	if path[0] == "[]" {
		list, ok := v.([]any)
		if !ok || len(list) == 0 {
			return fmt.Errorf("%v is no list with an entry", v)
		}
		for _, entry := range list {
			if err := holds(entry, path[1:]); err != nil && !empty(entry, path[1:]) {
				return err
			}
		}
		return nil
	}
	object, _ := v.(map[string]any)
	inner, ok := object[strings.ReplaceAll(path[0], ":", ".")]
	if !ok {
		return fmt.Errorf("no %s in %v", path[0], v)
	}
	return holds(inner, path[1:])
}

// empty says whether the path leads to an empty list, as the contributions of
// an output to which nothing contributes do.
func empty(v any, path []string) bool {
	for len(path) > 0 && path[0] != "[]" {
		object, _ := v.(map[string]any)
		v, path = object[path[0]], path[1:]
	}
	list, ok := v.([]any)
	return ok && len(list) == 0
}

// What is printed and written does not depend on the number of processors.
func TestSameBytesForAnyProcessors(t *testing.T) {
	small, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	type outcome struct {
		Plan, JSON, Spread, Compare result
		Workbook                    string
	}
	var all []outcome
	for _, processors := range []int{1, 2} {
		t.Run(fmt.Sprintf("GOMAXPROCS %d", processors), func(t *testing.T) {
			defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(processors))
			t.Chdir(t.TempDir())
			if err := os.WriteFile("small.yaml", small, 0o600); err != nil {
				t.Fatal(err)
			}
			// 20,000 units are several runs of the simulation
			o := outcome{
				Plan:    runHere(t, "plan", "small.yaml", "--simulate", "20000"),
				JSON:    runHere(t, "plan", "small.yaml", "--simulate", "20000", "--compare", "tank.tank", "--json"),
				Compare: runHere(t, "compare", "small.yaml", "--at", "tank.tank", "--simulate", "20000", "--json"),
				Spread:  runHere(t, "spread", "small.yaml", "--simulate", "20000", "--json"),
			}
			book, err := os.ReadFile("small-pair.xlsx")
			if err != nil {
				t.Fatal(err)
			}
			o.Workbook = string(book)
			all = append(all, o)
		})
	}
	if len(all) != 2 || all[0].Plan.stdout == "" {
		t.Fatal("nothing to compare")
	}
	if all[0].Workbook != all[1].Workbook {
		t.Error("the workbooks differ")
	}
	all[0].Workbook, all[1].Workbook = "", ""
	if diff := cmp.Diff(all[0], all[1], cmp.AllowUnexported(result{})); diff != "" {
		t.Errorf("1 and 2 processors differ:\n%s", diff)
	}
}
