package document

import (
	"slices"
	"strings"
)

// rewrite is the change of one mapping.
type rewrite struct {
	*Editor
	mapping *Node
	at      string
	drop    []string
	set     []Pair // entries whose value changes where they stand
	put     []Pair // entries that take the place of the one at
}

// index finds the entry of a key as it is written in the mapping, or -1.
func (r *rewrite) index(key string) int {
	if r.mapping == nil {
		return -1
	}
	return slices.IndexFunc(r.mapping.entries, func(e entry) bool { return e.key != nil && e.key.Value == key })
}

// divide sorts pairs into those whose keys are written in the mapping and the
// others, and returns what the mapping is to hold.
func (r *rewrite) divide(pairs []Pair) []Pair {
	for _, p := range pairs {
		if p.Key.Value != r.at && r.index(p.Key.Value) >= 0 {
			r.set = append(r.set, p)
		} else {
			r.put = append(r.put, p)
		}
	}
	var wanted []Pair
	for _, p := range r.mapping.Pairs {
		key := p.Key.Value
		switch {
		case key == r.at:
			wanted = append(wanted, r.put...)
		case slices.Contains(r.drop, key), find(r.put, key) >= 0: // merged, and now written
		case find(r.set, key) >= 0:
			wanted = append(wanted, r.set[find(r.set, key)])
		default:
			wanted = append(wanted, p)
		}
	}
	return wanted
}

func find(pairs []Pair, key string) int {
	return slices.IndexFunc(pairs, func(p Pair) bool { return p.Key.Value == key })
}

// goes says whether an entry is dropped without anything in its place.
func (r *rewrite) goes(e entry) bool {
	return e.key != nil && (slices.Contains(r.drop, e.key.Value) || e.key.Value == r.at && len(r.put) == 0)
}

// edit notes an edit.
func (r *rewrite) edit(s Span, text string) {
	r.edits = append(r.edits, placed{Edit{s, text}, r.mapping})
}

// make notes the edits of the whole mapping.
func (r *rewrite) make() {
	list := r.mapping.entries
	if r.mapping.style == rows && !slices.ContainsFunc(list, func(e entry) bool { return !r.goes(e) }) {
		r.refuse(r.mapping, "mapping of which nothing would be left", "an entry that stays")
		return
	}
	for i := 0; i < len(list); i++ {
		switch e := list[i]; {
		case e.key == nil:
		case r.goes(e) && r.mapping.style == rows:
			r.dropRow(e)
		case r.goes(e):
			last := i
			for last+1 < len(list) && r.goes(list[last+1]) {
				last++
			}
			if last+1 < len(list) && list[last+1].key != nil && list[last+1].key.Value == r.at {
				last++ // what takes its place stands where the run began
				r.exchangeRun(i, last)
			} else {
				r.dropRun(i, last)
			}
			i = last
		case e.key.Value == r.at && r.mapping.style == rows:
			r.exchangeRow(e)
		case e.key.Value == r.at:
			r.exchangeRun(i, i)
		case find(r.set, e.key.Value) >= 0:
			r.replaceValue(e, r.set[find(r.set, e.key.Value)].Value)
		}
	}
}

// replaceValue writes another value in the place of one, in the same quotes.
// An anchor before it stays; an alias is written out.
func (r *rewrite) replaceValue(e entry, value *Node) {
	first := r.source.byteAt(e.at.Start)
	if first == '*' {
		r.edit(e.at, flowText(value))
		return
	}
	was, text := e.value.Span, flowText(value)
	switch quote := r.source.byteAt(was.Start); {
	case was.Start == was.End && r.source.byteAt(was.Start-1) == ':':
		text = " " + text
	case e.value.block, e.value.Kind == Mapping, e.value.Kind == Sequence, was.Start == was.End:
		r.refuse(e.key, "value of "+e.key.Value+" that cannot be replaced in its place", "a value on the same line")
		return
	case value.Kind == Scalar && e.value.lead == 1:
		text = scalarText(value.Value, quote)
	}
	r.edit(was, text)
}

// putTexts are the entries that take the place of the one at.
func (r *rewrite) putTexts() []string {
	texts := make([]string, len(r.put))
	for i, p := range r.put {
		texts[i] = pairText(p)
	}
	return texts
}

// exchangeRow writes entries in the place of the one at, a line each.
func (r *rewrite) exchangeRow(e entry) {
	span, remarks := r.row(e)
	indent := r.source.newline() + r.source.column(e.Start)
	r.edit(span, strings.Join(append(remarks, r.putTexts()...), indent))
}

// exchangeRun writes entries between braces in the place of a run that ends
// with the one at.
func (r *rewrite) exchangeRun(first, last int) {
	list := r.mapping.entries
	gone := Span{list[first].Start, list[last].End}
	start, above := r.above(gone.Start, r.source.remarks(gone, r.scalarsOf(first, last)))
	r.edit(Span{start, gone.End}, above+strings.Join(r.putTexts(), ", "))
}

// scalarsOf are the scalars in a run of entries.
func (r *rewrite) scalarsOf(first, last int) (list []Span) {
	for _, e := range r.mapping.entries[first : last+1] {
		list = r.source.scalarsOf(e, list)
	}
	return list
}

// row is an entry that has its lines to itself, from its first character to the
// end of its last line, and the comments in it: those in lines below count that
// are indented further than it is.
func (r *rewrite) row(e entry) (Span, []string) {
	s := r.source
	end := s.lineEnd(e.End)
	indent := len(s.column(e.Start))
	for end < len(s.text) {
		line := s.nextLine(end)
		if first := s.blanks(line); s.byteAt(first) != '#' || first-line <= indent {
			break
		}
		end = s.lineEnd(line)
	}
	span := Span{e.Start, end}
	return span, s.remarks(span, s.scalarsOf(e, nil))
}

// dropRow takes an entry's lines out. Its comments stay in its place.
func (r *rewrite) dropRow(e entry) {
	s := r.source
	start := s.lineStart(e.Start)
	if s.blanks(start) != e.Start {
		r.refuse(e.key, "entry that cannot be taken out of its place", "a line of its own")
		return
	}
	span, remarks := r.row(e)
	if len(remarks) > 0 {
		r.edit(span, strings.Join(remarks, s.newline()+s.column(e.Start)))
		return
	}
	r.edit(Span{start, s.nextLine(span.End)}, "")
}

// above are comments as lines above what stands at i between brackets, and
// where the text begins that they and it are written in the place of.
func (r *rewrite) above(i int, remarks []string) (start int, text string) {
	if len(remarks) == 0 {
		return i, ""
	}
	s := r.source
	line := s.lineStart(i)
	if s.blanks(line) == i {
		indent := s.newline() + string(s.text[line:i])
		return i, strings.Join(remarks, indent) + indent
	}
	for isBlank(s.byteAt(i - 1)) {
		i--
	}
	indent := s.newline() + s.column(r.mapping.entries[0].Start)
	return i, indent + strings.Join(remarks, indent) + indent
}

// dropRun takes entries that follow each other out of a mapping in braces, with
// the commas that are then too many.
func (r *rewrite) dropRun(first, last int) {
	list, s := r.mapping.entries, r.source
	gone := Span{list[first].Start, list[last].End}
	comma := s.comma(gone.End)
	switch {
	case last+1 < len(list):
		gone.End = list[last+1].Start
	case first > 0 && len(s.remarks(Span{list[first-1].End, gone.Start}, nil)) == 0:
		gone.Start = list[first-1].End
	case comma >= 0:
		gone.End = comma + 1
	case first > 0:
		comma = s.comma(list[first-1].End)
		r.edit(Span{comma, comma + 1}, "")
	}
	start, above := r.above(gone.Start, s.remarks(gone, r.scalarsOf(first, last)))
	r.edit(Span{start, gone.End}, above)
}
