package stage

import (
	"slices"
	"strings"
	"testing"
	"unicode/utf8"
)

// drawn are the lines of a drawing without the line breaks that frame it.
func drawn(sketch string) []string { return strings.Split(strings.Trim(sketch, "\n"), "\n") }

func TestSketchesShowEveryRole(t *testing.T) {
	for _, k := range table {
		t.Run(k.Name, func(t *testing.T) {
			if k.Sketch == "" {
				t.Fatal("not drawn")
			}
			lines := drawn(k.Sketch)
			if len(lines) > 9 {
				t.Errorf("%d lines, at most 9", len(lines))
			}
			for _, l := range lines {
				if n := utf8.RuneCountInString(l); n > 60 || strings.TrimRight(l, " ") != l {
					t.Errorf("%d columns, at most 60, and no blanks at the end: %q", n, l)
				}
				if i := strings.IndexFunc(l, undrawable); i >= 0 {
					t.Errorf("%q is neither ASCII nor a line", l[i:])
				}
			}
			for _, r := range k.Roles {
				if !names(k.Sketch, r.Name) {
					t.Errorf("role %s is not in it", r.Name)
				}
				if strings.Contains(k.Sketch, "("+r.Name+")") != r.Optional {
					t.Errorf("role %s: optional parts stand in ( ), and only they", r.Name)
				}
			}
		})
	}
}

// reaches are the directions in which each line character goes on.
var reaches = map[rune]string{
	'─': "lr", '│': "ud", '┌': "rd", '┐': "ld", '└': "ru", '┘': "lu",
	'├': "udr", '┤': "udl", '┬': "lrd", '┴': "lru", '┼': "lrud",
}

func undrawable(r rune) bool { return reaches[r] == "" && !(r >= ' ' && r <= '~') }

// Up and down every line of a drawing goes on to something; to the left and
// right it may end.
func TestSketchesJoinUp(t *testing.T) {
	for _, k := range table {
		t.Run(k.Name, func(t *testing.T) {
			var rows [][]rune
			for _, l := range drawn(k.Sketch) {
				rows = append(rows, []rune(l))
			}
			at := func(row, column int) rune {
				if row < 0 || row >= len(rows) || column >= len(rows[row]) {
					return ' '
				}
				return rows[row][column]
			}
			for i, row := range rows {
				for j, r := range row {
					for _, way := range reaches[r] {
						if next := i + map[rune]int{'u': -1, 'd': 1}[way]; next != i && !meets(at(next, j), way) {
							t.Errorf("line %d, column %d: %c meets %q", i+1, j+1, r, at(next, j))
						}
					}
				}
			}
		})
	}
}

// meets says whether a line that goes up or down finds a part's name, or a
// line that comes to meet it.
func meets(r rune, way rune) bool {
	back := map[rune]string{'u': "d", 'd': "u"}[way]
	return r != ' ' && (reaches[r] == "" || strings.Contains(reaches[r], back))
}

// A fragment is an entry of the kind and no more.
func TestFragmentsAreOfTheirKind(t *testing.T) {
	for _, k := range table {
		t.Run(k.Name, func(t *testing.T) {
			if k.Fragment == "" {
				t.Fatal("no fragment")
			}
			lines := drawn(k.Fragment)
			if !strings.HasSuffix(lines[0], ":") || !slices.Contains(lines, "  kind: "+k.Name) {
				t.Errorf("no entry of kind %s:%s", k.Name, k.Fragment)
			}
			for _, l := range lines[1:] {
				if !strings.HasPrefix(l, "  ") {
					t.Errorf("%q is no part of the entry", l)
				}
			}
		})
	}
}
