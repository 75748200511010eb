package document

import (
	"bytes"
	"strings"
	"unicode/utf8"
)

// Span is where a text stands in a file: bytes from Start to before End, as the
// file was brought, its byte order mark and line ends included. End is -1 where
// that could not be made out.
type Span struct{ Start, End int }

// uncertain is the span of what could not be placed.
var uncertain = Span{-1, -1}

// certain says whether the span is known.
func (s Span) certain() bool { return s.Start >= 0 && s.End >= s.Start }

// holds says whether all of t lies within s.
func (s Span) holds(t Span) bool { return s.Start <= t.Start && t.End <= s.End }

// meets says whether t and s have a part in common.
func (s Span) meets(t Span) bool {
	return s.Start < t.End && t.Start < s.End || s.holds(t) || t.holds(s)
}

// source is a file's text as it was brought, and where its lines begin.
type source struct {
	text  []byte
	lines []int
	// The place found last: tokens come in the order of the text, so that most
	// are found from the one before.
	line, col, offset int
}

func newSource(text []byte) *source {
	s := &source{text: text, lines: []int{0}}
	if bytes.HasPrefix(text, []byte("\uFEFF")) {
		s.lines[0] = len("\uFEFF")
	}
	for i := 0; i < len(text); {
		if i = s.lineEnd(i); i < len(text) {
			i = s.nextLine(i)
			s.lines = append(s.lines, i)
		}
	}
	return s
}

// find is the offset of a line and column, both from 1; -1 where there is none.
func (s *source) find(line, column int) int {
	if line < 1 || line > len(s.lines) || column < 1 {
		return -1
	}
	if s.line != line || s.col > column {
		s.line, s.col, s.offset = line, 1, s.lines[line-1]
	}
	for s.col < column {
		if s.offset >= len(s.text) || isBreak(s.text[s.offset]) {
			return -1
		}
		_, size := utf8.DecodeRune(s.text[s.offset:])
		s.col, s.offset = s.col+1, s.offset+size
	}
	return s.offset
}

func isBreak(b byte) bool { return b == '\n' || b == '\r' }
func isBlank(b byte) bool { return b == ' ' || b == '\t' }

// lineEnd is where the line of an offset ends, before its line break.
func (s *source) lineEnd(i int) int {
	for i < len(s.text) && !isBreak(s.text[i]) {
		i++
	}
	return i
}

// nextLine is where the line behind the break at i begins.
func (s *source) nextLine(i int) int {
	if i+1 < len(s.text) && s.text[i] == '\r' && s.text[i+1] == '\n' {
		return i + 2
	}
	return min(i+1, len(s.text))
}

// lineStart is where the line of an offset begins, behind a byte order mark.
func (s *source) lineStart(i int) int {
	for i > s.lines[0] && !isBreak(s.text[i-1]) {
		i--
	}
	return i
}

// blanks is the first offset from i on that is no space or tab.
func (s *source) blanks(i int) int {
	for i < len(s.text) && isBlank(s.text[i]) {
		i++
	}
	return i
}

// byteAt is the byte at i, 0 beyond the text.
func (s *source) byteAt(i int) byte {
	if i < 0 || i >= len(s.text) {
		return 0
	}
	return s.text[i]
}

// gap is the first offset from i on that is no white space, comma or comment.
func (s *source) gap(i int) int {
	for i >= 0 && i < len(s.text) {
		switch c := s.text[i]; {
		case c == '#':
			i = s.lineEnd(i)
		case isBlank(c), isBreak(c), c == ',':
			i++
		default:
			return i
		}
	}
	return i
}

// comma is where the next comma stands before any other word, or -1.
func (s *source) comma(i int) int {
	for i < len(s.text) {
		switch c := s.text[i]; {
		case c == ',':
			return i
		case c == '#':
			i = s.lineEnd(i)
		case isBlank(c), isBreak(c):
			i++
		default:
			return -1
		}
	}
	return -1
}

// closed is the span of a list or mapping in brackets whose last entry ends at
// last.
func (s *source) closed(start, last int, mark byte) Span {
	if last < 0 {
		return uncertain
	}
	if end := s.gap(last); s.byteAt(end) == mark {
		return Span{start, end + 1}
	}
	return uncertain
}

// quoted is the span of a text in quotes.
func (s *source) quoted(start int) Span {
	mark := s.byteAt(start)
	if mark != '"' && mark != '\'' {
		return uncertain
	}
	for i := start + 1; i < len(s.text); i++ {
		switch {
		case mark == '"' && s.text[i] == '\\':
			if !s.escape(i + 1) {
				return uncertain
			}
			i++
		case mark == '\'' && s.text[i] == mark && s.byteAt(i+1) == mark:
			i++
		case s.text[i] == mark:
			return Span{start, i + 1}
		}
	}
	return uncertain
}

// escape says whether what stands behind a backslash has the digits it needs:
// the scanner takes whatever comes for them, a closing quote too.
func (s *source) escape(i int) bool {
	digits := map[byte]int{'x': 2, 'u': 4, 'U': 8}[s.byteAt(i)]
	for range digits {
		i++
		if !bytes.ContainsRune([]byte("0123456789abcdefABCDEF"), rune(s.byteAt(i))) {
			return false
		}
	}
	return true
}

// plain is the span of a plain scalar: its value's letters, between which the
// text may have other white space, over lines.
func (s *source) plain(start int, value string) Span {
	if start < 0 {
		return uncertain
	}
	end := start
	for _, word := range strings.FieldsFunc(value, func(r rune) bool { return r == ' ' || r == '\t' || r == '\n' }) {
		for end < len(s.text) && (isBlank(s.text[end]) || isBreak(s.text[end])) && end > start {
			end++
		}
		if !bytes.HasPrefix(s.text[end:], []byte(word)) {
			return uncertain
		}
		end += len(word)
	}
	return Span{start, end}
}

// block is the span of a text in the lines below its mark, which are indented
// by lead spaces. It ends with its last line that is not blank.
func (s *source) block(start, lead int) Span {
	if start < 0 || lead < 1 {
		return uncertain
	}
	end := s.lineEnd(start)
	for next := end; next < len(s.text); {
		line := s.nextLine(next)
		next = s.lineEnd(line)
		text := string(s.text[line:next])
		bare := strings.TrimLeft(text, " ")
		switch {
		case strings.TrimSpace(bare) == "":
		case len(text)-len(bare) < lead:
			return Span{start, end}
		default:
			end = next
		}
	}
	return Span{start, end}
}
