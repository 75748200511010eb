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
	// mostTokens is how many words and marks a YAML file may have, and mostKeys
	// how many keys a mapping in block style: the parser's time grows with the
	// square of either, and it recurses from key to key.
	mostTokens = 100_000
	mostKeys   = 5_000
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
// and remembers a path for each: it finds what nests too deep, what is too
// much, and a second document.
func badNesting(tokens token.Tokens) *Complaint {
	if len(tokens) > mostTokens {
		return at(tokens[mostTokens], "the file is too long", "at most 100000 words and marks")
	}
	var w walk
	for _, t := range tokens {
		if t.Position == nil {
			continue
		}
		if c := w.step(t); c != nil {
			return c
		}
	}
	return nil
}

func at(t *token.Token, message, expected string) *Complaint {
	return &Complaint{Line: t.Position.Line, Column: t.Position.Column, Message: message, Expected: expected}
}

// walk is where in a document the tokens have come to.
type walk struct {
	flow    int     // open brackets and braces
	blocks  []block // open mappings and lists in block style
	row     int     // decorations that follow each other
	headers int
}

// block is an open mapping or list: the column of its entries, and how many.
type block struct{ column, entries int }

// step takes a token.
func (w *walk) step(t *token.Token) *Complaint {
	switch t.Type {
	case token.MappingStartType, token.SequenceStartType:
		w.flow++
	case token.MappingEndType, token.SequenceEndType:
		w.flow = max(0, w.flow-1)
	case token.DocumentHeaderType:
		w.headers++
	case token.AnchorType:
		w.row += 3 // its name is a token too
	case token.TagType, token.MappingKeyType:
		w.row += 2
	case token.SequenceEntryType:
		w.entry(t.Position.Column)
	case token.MappingValueType:
		if t.Prev != nil && t.Prev.Position != nil && w.flow == 0 {
			w.entry(t.Prev.Position.Column)
		}
	}
	w.row = max(0, w.row-1)
	switch {
	case w.headers > 1:
		return at(t, "a second document in one file", "one document a file")
	case w.flow+len(w.blocks) > deepest:
		return at(t, "nested too deep", "at most 32 levels")
	case w.row > decorations:
		return at(t, "too many anchors, tags or question marks in a row", "plain keys and values")
	case len(w.blocks) > 0 && w.blocks[len(w.blocks)-1].entries > mostKeys:
		return at(t, "too many entries in one block", "at most 5000")
	}
	return nil
}

// entry takes an entry at a column: it closes the blocks to the right, and
// goes on with the one at that column or opens it.
func (w *walk) entry(column int) {
	for len(w.blocks) > 0 && w.blocks[len(w.blocks)-1].column > column {
		w.blocks = w.blocks[:len(w.blocks)-1]
	}
	if last := len(w.blocks) - 1; last >= 0 && w.blocks[last].column == column {
		w.blocks[last].entries++
		return
	}
	w.blocks = append(w.blocks, block{column, 1})
}
