package document

import (
	"bytes"
	"strings"
	"unicode/utf8"

	"github.com/goccy/go-yaml/token"
)

const (
	// largest is the biggest file that is read at all, in bytes.
	largest = 1 << 20
	// deepest is how far mappings and lists may nest.
	deepest = 32
	// blankRun is how many blank lines may follow each other: the scanner's
	// time grows with the square of a run inside a block of text.
	blankRun = 100
	// decorations is how many anchors and tags may stand in a row.
	decorations = 8
)

// clean prepares the text of a file: the byte order mark off, line ends
// uniform. A complaint says why the text is not worth reading further.
func clean(file string, text []byte) (string, *Complaint) {
	if len(text) > largest {
		return "", &Complaint{File: file, Message: "the file is too large", Expected: "at most 1 MiB of text"}
	}
	text = bytes.TrimPrefix(text, []byte("\uFEFF"))
	s := strings.ReplaceAll(string(text), "\r\n", "\n")
	s = strings.ReplaceAll(s, "\r", "\n")
	if c := badCharacter(s); c != nil {
		c.File = file
		return "", c
	}
	return s, nil
}

// badCharacter finds the first byte that is no UTF-8 and the first control
// character other than tab and line feed.
func badCharacter(text string) *Complaint {
	line, column := 1, 1
	for i, r := range text {
		switch {
		case r == utf8.RuneError && !strings.HasPrefix(text[i:], "\uFFFD"):
			return &Complaint{Line: line, Column: column, Message: "not valid UTF-8", Expected: "a file saved as UTF-8"}
		case r == '\n':
			line, column = line+1, 0
		case r < ' ' && r != '\t' || r >= 0x7f && r < 0xa0 || r == '\u2028' || r == '\u2029' || r == '\uFEFF':
			return &Complaint{Line: line, Column: column, Message: "a control character", Found: string(r), Expected: "printable text"}
		}
		column++
	}
	return nil
}

// badLayout finds what the YAML scanner handles badly: a tab in the
// indentation, and long runs of blank lines.
func badLayout(text string) *Complaint {
	blank := 0
	for number, line := range strings.Split(text, "\n") {
		rest := strings.TrimLeft(line, " \t")
		if rest == "" {
			if blank++; blank > blankRun {
				return &Complaint{Line: number + 1, Column: 1, Message: "too many blank lines in a row", Expected: "at most 100"}
			}
			continue
		}
		blank = 0
		indent := line[:len(line)-len(rest)]
		if i := strings.IndexByte(indent, '\t'); i >= 0 && rest[0] != '#' {
			return &Complaint{Line: number + 1, Column: i + 1, Message: "a tab in the indentation", Expected: "spaces"}
		}
	}
	return nil
}

// badNesting walks the tokens before they are parsed, for the parser recurses
// and remembers a path for each: it finds what nests too deep, and what
// decorates too much.
func badNesting(tokens token.Tokens) *Complaint {
	flow, row, headers := 0, 0, 0
	var columns []int // of the open block entries
	for _, t := range tokens {
		if t.Position == nil {
			continue
		}
		at := Complaint{Line: t.Position.Line, Column: t.Position.Column}
		switch t.Type {
		case token.MappingStartType, token.SequenceStartType:
			flow++
		case token.MappingEndType, token.SequenceEndType:
			flow = max(0, flow-1)
		case token.DocumentHeaderType:
			if headers++; headers > 1 {
				at.Message, at.Expected = "a second document in one file", "one document a file"
				return &at
			}
		case token.AnchorType, token.TagType, token.MappingKeyType:
			row += 2
		case token.SequenceEntryType:
			columns = open(columns, t.Position.Column)
		case token.MappingValueType:
			if t.Prev != nil && t.Prev.Position != nil && flow == 0 {
				columns = open(columns, t.Prev.Position.Column)
			}
		}
		row = max(0, row-1)
		if flow+len(columns) > deepest {
			at.Message, at.Expected = "nested too deep", "at most 32 levels"
			return &at
		}
		if row > decorations {
			at.Message, at.Expected = "too many anchors, tags or question marks in a row", "plain keys and values"
			return &at
		}
	}
	return nil
}

// open closes the block entries at or right of the column and opens one there.
func open(columns []int, column int) []int {
	for len(columns) > 0 && columns[len(columns)-1] >= column {
		columns = columns[:len(columns)-1]
	}
	return append(columns, column)
}
