package build_test

import (
	"fmt"
	"strings"
	"testing"

	"batchwright/bom/document"
	"batchwright/tolerance/stage"
)

// TestFragments puts every kind's fragment into a build of its own, with an
// oscillator for each stage that it takes in. Its parts can be bought.
func TestFragments(t *testing.T) {
	for _, name := range stage.Names() {
		t.Run(name, func(t *testing.T) {
			k, _ := stage.Find(name)
			if k.Fragment == "" {
				t.Fatal("no fragment")
			}
			text := around(t, k)
			b, err := read(text)
			if err != nil {
				t.Fatalf("%v\n%s", err, text)
			}
			if last := b.Stages[len(b.Stages)-1]; last.Kind != k {
				t.Errorf("the fragment is a stage of kind %s", last.Kind.Name)
			}
			if _, err := b.Compile(); err != nil {
				t.Errorf("%v\n%s", err, text)
			}
			for _, p := range b.Parts() {
				if _, sold := b.Book.Offer(p); p.Family != "" && !sold {
					t.Errorf("the demonstration book does not sell %s", p.Ref)
				}
			}
		})
	}
}

// around is a build with the stages that a kind's fragment takes in, and the
// fragment last.
func around(t testing.TB, k *stage.Kind) string {
	t.Helper()
	root, faults := document.Parse("fragment.yaml", []byte(k.Fragment))
	if len(faults) > 0 || root.Kind != document.Mapping || len(root.Pairs) != 1 {
		t.Fatalf("not one entry: %v\n%s", faults, k.Fragment)
	}
	text := "build: around a fragment\nunits: 1\nconditions: {bench: {}}\nstages:\n"
	for i, from := range taken(root.Pairs[0].Value.Get("in")) {
		text += fmt.Sprintf(`  %s:
    kind: tuned-tank
    parts: {coil: {ref: L%d, value: 1 mH}, tank: {ref: C%d, value: %d pF}}
`, from, 901+i, 901+i, 220+i)
	}
	return text + "  " + strings.ReplaceAll(strings.Trim(k.Fragment, "\n"), "\n", "\n  ") + "\n"
}

// taken are the stages that an `in` names.
func taken(in *document.Node) []string {
	switch {
	case in == nil:
		return nil
	case in.Kind == document.Scalar:
		return []string{in.Value}
	}
	var names []string
	for _, p := range in.Pairs {
		names = append(names, p.Value.Value)
	}
	return names
}
