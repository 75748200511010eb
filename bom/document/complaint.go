// Package document reads the text files people bring, and keeps for every word
// the file, line and column it stood at, so that a mistake found at the very
// end can still be pointed out.
package document

import (
	"cmp"
	"fmt"
	"slices"
	"strconv"
	"strings"
)

// Complaint is one mistake in a file. Line and Column count from 1, the column
// in characters; a Line of 0 is the file as a whole.
type Complaint struct {
	File         string
	Line, Column int
	Message      string // lower case, no full stop
	Found        string // the text at fault, "" where there is none to show
	Expected     string
	Nearest      string // the nearest valid word
}

// longestFound is how much of a faulty text a complaint repeats.
const longestFound = 60

// Error prints the complaint in one line:
//
//	lamp.yaml:12:15: unknown family: found "cog", expected a capacitor family; nearest: c0g
func (c Complaint) Error() string {
	var b strings.Builder
	b.WriteString(c.File)
	if c.Line > 0 {
		fmt.Fprintf(&b, ":%d:%d", c.Line, c.Column)
	}
	if b.Len() > 0 {
		b.WriteString(": ")
	}
	b.WriteString(c.Message)
	separator := ": "
	if c.Found != "" {
		b.WriteString(separator + "found " + strconv.Quote(shorten(c.Found)))
		separator = ", "
	}
	if c.Expected != "" {
		b.WriteString(separator + "expected " + c.Expected)
	}
	if c.Nearest != "" {
		b.WriteString("; nearest: " + c.Nearest)
	}
	return b.String()
}

func shorten(text string) string {
	runes := []rune(text)
	if len(runes) <= longestFound {
		return text
	}
	return string(runes[:longestFound]) + "…"
}

// Complaints are mistakes in the order of their places.
type Complaints []Complaint

// Error prints one complaint a line.
func (c Complaints) Error() string {
	lines := make([]string, len(c))
	for i, one := range c {
		lines[i] = one.Error()
	}
	return strings.Join(lines, "\n")
}

// tidy sorts by file, line and column and drops repetitions.
func (c Complaints) tidy() Complaints {
	if len(c) == 0 {
		return nil
	}
	sorted := slices.Clone(c)
	slices.SortStableFunc(sorted, func(a, b Complaint) int {
		return cmp.Or(cmp.Compare(a.File, b.File), cmp.Compare(a.Line, b.Line),
			cmp.Compare(a.Column, b.Column), cmp.Compare(a.Message, b.Message),
			cmp.Compare(a.Found, b.Found), cmp.Compare(a.Expected, b.Expected))
	})
	return slices.Compact(sorted)
}
