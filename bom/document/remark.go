package document

import "strings"

// remarks are the comments in a span, each from its # to the end of its line,
// given where the scalars in it stand, whose # are none.
func (s *source) remarks(in Span, scalars []Span) []string {
	var list []string
	for i := in.Start; i < in.End; i++ {
		for len(scalars) > 0 && scalars[0].End <= i {
			scalars = scalars[1:]
		}
		if len(scalars) > 0 && scalars[0].Start <= i {
			i = scalars[0].End - 1
			continue
		}
		if s.text[i] == '#' {
			end := s.lineEnd(i)
			list = append(list, strings.TrimRight(string(s.text[i:end]), " \t"))
			i = end - 1
		}
	}
	return list
}

// scalars appends where the scalars that are written under a node stand, keys
// and aliases included. Of a text in the lines below its mark those lines are
// meant: behind the mark a comment may stand.
func (s *source) scalars(n *Node, list []Span) []Span {
	for _, e := range n.entries {
		list = s.scalarsOf(e, list)
	}
	if n.Kind != Mapping && n.Kind != Sequence {
		span := n.Span
		if n.block {
			span.Start = min(span.End, s.lineEnd(span.Start))
		}
		list = append(list, span)
	}
	return list
}

// scalarsOf is scalars of an entry.
func (s *source) scalarsOf(e entry, list []Span) []Span {
	if e.key != nil {
		list = append(list, e.key.Span)
	}
	if s.byteAt(e.at.Start) == '*' {
		return append(list, e.at) // what it stands for is written elsewhere
	}
	return s.scalars(e.value, list)
}
