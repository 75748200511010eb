package order

import (
	"cmp"
	"slices"
	"strconv"
	"strings"
)

// Less is the natural order of references: C2 before C10, and C before R. It
// reports whether a comes before b.
func Less(a, b string) bool { return compare(a, b) < 0 }

// compare orders runs of digits by what they count and everything else by
// letter. References that differ in leading zeros alone are ordered by text.
func compare(a, b string) int {
	restA, restB := a, b
	for restA != "" && restB != "" {
		var headA, headB string
		headA, restA = chunk(restA)
		headB, restB = chunk(restB)
		if c := compareChunk(headA, headB); c != 0 {
			return c
		}
	}
	if c := cmp.Compare(len(restA), len(restB)); c != 0 {
		return c
	}
	return strings.Compare(a, b)
}

// chunk splits the leading run of digits, or of anything else, off a reference.
func chunk(s string) (head, rest string) {
	n := 1
	for n < len(s) && isDigit(s[n]) == isDigit(s[0]) {
		n++
	}
	return s[:n], s[n:]
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// compareChunk compares numbers of any length without converting them.
func compareChunk(a, b string) int {
	if !isDigit(a[0]) || !isDigit(b[0]) {
		return strings.Compare(a, b)
	}
	a, b = strings.TrimLeft(a, "0"), strings.TrimLeft(b, "0")
	if c := cmp.Compare(len(a), len(b)); c != 0 {
		return c
	}
	return strings.Compare(a, b)
}

// Runs writes references in natural order with consecutive ones drawn
// together: "C1–C4, C10". Two in a row are written out.
func Runs(refs []string) string {
	sorted := slices.Clone(refs)
	slices.SortFunc(sorted, compare)
	var parts []string
	for i := 0; i < len(sorted); {
		j := i + 1
		for j < len(sorted) && follows(sorted[j-1], sorted[j]) {
			j++
		}
		if j-i >= 3 {
			parts = append(parts, sorted[i]+"–"+sorted[j-1])
		} else {
			parts = append(parts, sorted[i:j]...)
		}
		i = j
	}
	return strings.Join(parts, ", ")
}

// follows reports whether b is the reference after a: the same letters, and the
// next number, written without leading zeros.
func follows(a, b string) bool {
	lettersA, numberA := splitRef(a)
	lettersB, numberB := splitRef(b)
	if numberA == "" || lettersA != lettersB {
		return false
	}
	n, err := strconv.Atoi(numberA)
	return err == nil && numberA == strconv.Itoa(n) && numberB == strconv.Itoa(n+1)
}

// splitRef splits the trailing number off a reference.
func splitRef(ref string) (letters, number string) {
	n := len(ref)
	for n > 0 && isDigit(ref[n-1]) {
		n--
	}
	return ref[:n], ref[n:]
}
