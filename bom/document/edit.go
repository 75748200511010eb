package document

import (
	"bytes"
	"cmp"
	"fmt"
	"slices"
)

// Edit puts a text in the place of another.
type Edit struct {
	Span
	Text string
}

// Replace is text with edits made, in whatever order they are listed; what lies
// between them is kept byte for byte. Edits that overlap, or lie outside of the
// text, are an error.
func Replace(text []byte, edits []Edit) ([]byte, error) {
	sorted := slices.Clone(edits)
	slices.SortStableFunc(sorted, func(a, b Edit) int {
		return cmp.Or(cmp.Compare(a.Start, b.Start), cmp.Compare(a.End, b.End))
	})
	var out bytes.Buffer
	last := 0
	for _, e := range sorted {
		if !e.certain() || e.End > len(text) {
			return nil, fmt.Errorf("edit of bytes %d to %d of %d", e.Start, e.End, len(text))
		}
		if e.Start < last {
			return nil, fmt.Errorf("edit of bytes %d to %d, of which those before %d are changed already", e.Start, e.End, last)
		}
		out.Write(text[last:e.Start])
		out.WriteString(e.Text)
		last = e.End
	}
	out.Write(text[last:])
	return out.Bytes(), nil
}
