package formula

import (
	"strings"
	"unicode/utf8"
)

// Equation is one line `name = expression`.
type Equation struct {
	Name       string
	Expression *Expression
	Line       int // of its name, from 1
}

// ParseEquations reads a list of equations, one a line, each name once. A line
// goes on while a bracket is open; # starts a remark; empty lines do not count.
// Mistakes carry the line and, in Offset, the rune within it.
func ParseEquations(text string) ([]Equation, Mistakes) {
	var list []Equation
	var mistakes Mistakes
	seen := map[string]bool{}
	for _, s := range statements(text) {
		e, ms := s.parse()
		if e.Name != "" && seen[e.Name] {
			ms = append(ms, Mistake{Line: s.line, Offset: s.offset(0), Message: "this name has an equation already", Found: e.Name, Expected: "one equation a name"})
		}
		seen[e.Name] = true
		mistakes = append(mistakes, ms...)
		if len(ms) == 0 {
			list = append(list, e)
		}
	}
	if len(mistakes) > 0 {
		return nil, mistakes
	}
	return list, nil
}

// statement is the text of one equation, remarks blanked out.
type statement struct {
	text string
	line int // of its first character
}

// statements splits a text at the ends of lines outside brackets.
func statements(text string) []statement {
	var list []statement
	var open []string
	first, depth := 0, 0
	for i, line := range strings.Split(text, "\n") {
		line, _, _ = strings.Cut(line, "#")
		if len(open) == 0 {
			if strings.TrimSpace(line) == "" {
				continue
			}
			first = i + 1
		}
		open = append(open, line)
		depth += strings.Count(line, "(") - strings.Count(line, ")")
		if depth <= 0 {
			list = append(list, statement{strings.Join(open, "\n"), first})
			open, depth = nil, 0
		}
	}
	if len(open) > 0 {
		list = append(list, statement{strings.Join(open, "\n"), first})
	}
	return list
}

// offset is the column of the first character that is not a space after byte
// from.
func (s statement) offset(from int) int {
	rest := s.text[from:]
	return utf8.RuneCountInString(s.text[:len(s.text)-len(strings.TrimLeft(rest, " \t\r"))])
}

func (s statement) parse() (Equation, Mistakes) {
	equals := strings.IndexByte(s.text, '=')
	if equals < 0 {
		return Equation{}, Mistakes{{Line: s.line, Offset: s.offset(0), Message: "not an equation", Found: strings.TrimSpace(s.text), Expected: "name = expression"}}
	}
	name := strings.TrimSpace(s.text[:equals])
	if m, ok := nameMistake(name); ok {
		m.Line, m.Offset = s.line, s.offset(0)
		return Equation{}, Mistakes{m}
	}
	body := s.text[equals+1:]
	trimmed := strings.TrimLeft(body, " \t\r")
	e, ms := Parse(strings.TrimRight(trimmed, " \t\r\n"))
	for i := range ms {
		ms[i] = s.moved(ms[i], s.text[:len(s.text)-len(trimmed)])
	}
	return Equation{Name: name, Expression: e, Line: s.line}, ms
}

// moved turns an offset in the expression into a line and an offset in it;
// before is the text in front of the expression.
func (s statement) moved(m Mistake, before string) Mistake {
	runes := []rune(s.text)
	at := min(utf8.RuneCountInString(before)+m.Offset, len(runes))
	m.Line = s.line
	for i, r := range runes[:at] {
		if r == '\n' {
			m.Line++
			m.Offset = at - i - 1
		}
	}
	if m.Line == s.line {
		m.Offset = at
	}
	return m
}

// nameMistake judges the name on the left of an equation.
func nameMistake(name string) (Mistake, bool) {
	for i, r := range name {
		if !isLetter(r) && (i == 0 || !isDigit(r)) {
			return Mistake{Message: "not a name for an equation", Found: name, Expected: "letters, digits and _, a letter first"}, true
		}
	}
	if name == "" {
		return Mistake{Message: "an equation without a name", Expected: "name = expression"}, true
	}
	for _, list := range [][]string{wordOperators, refusedWords, Functions()} {
		for _, word := range list {
			if word == name {
				return Mistake{Message: "this word means something else in the language", Found: name, Expected: "another name"}, true
			}
		}
	}
	return Mistake{}, false
}
