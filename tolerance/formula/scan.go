package formula

import (
	"slices"
	"strconv"
	"strings"
	"unicode"

	"batchwright/bom/document"
)

// Limits on a text, checked before any recursive reader sees it.
const (
	maxLength = 8192 // runes
	maxDepth  = 32   // brackets inside brackets
)

// wordOperators are the words of the grammar that are not names.
var wordOperators = []string{"and", "or", "not"}

// refusedWords mean something to the underlying parser that is not arithmetic.
var refusedWords = []string{
	"in", "matches", "contains", "startsWith", "endsWith", "let", "if", "else", "true", "false", "nil",
}

// scanner reads a text once, from left to right, and complains of everything
// that cannot be arithmetic: foreign characters, unknown functions, malformed
// numbers and names, too much text or depth. What passes is safe to hand to
// the parser, which knows a far larger language.
type scanner struct {
	text     []rune
	at       int
	open     []int // where the brackets stand that are open
	last     rune  // kind of the token before: 'n' name or number, or the character itself
	mistakes Mistakes
}

// scan returns the text in the form that the parser reads, rune for rune as
// long as the original.
func scan(text string) (string, Mistakes) {
	s := &scanner{text: []rune(text)}
	if len(s.text) > maxLength {
		s.complain(maxLength, "the expression is too long", "", "at most "+strconv.Itoa(maxLength)+" characters")
		return "", s.mistakes
	}
	for s.at < len(s.text) && len(s.mistakes) < 20 && len(s.open) <= maxDepth {
		s.token()
	}
	if n := len(s.open); n > 0 && len(s.mistakes) == 0 {
		s.complain(s.open[n-1], "a bracket that is not closed", "(", "brackets in pairs")
	}
	return string(s.text), s.mistakes
}

func (s *scanner) complain(at int, message, found, expected string) {
	s.mistakes = append(s.mistakes, Mistake{Offset: at, Message: message, Found: found, Expected: expected})
}

func (s *scanner) peek(ahead int) rune {
	if s.at+ahead < len(s.text) {
		return s.text[s.at+ahead]
	}
	return -1
}

func isLetter(r rune) bool {
	return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r == '_'
}

func isDigit(r rune) bool { return r >= '0' && r <= '9' }

func (s *scanner) token() {
	r := s.peek(0)
	switch {
	case r == ' ' || r == '\t' || r == '\n' || r == '\r':
		s.at++
	case isLetter(r):
		s.word()
	case isDigit(r) || r == '.' && isDigit(s.peek(1)) && s.last != 'n' && s.last != ')':
		s.number()
	case unicode.IsLetter(r) || unicode.IsDigit(r):
		s.complain(s.at, "unknown character", string(r), "names in plain letters, units as words (1e-6*farad, 10000*ohm)")
		s.at++
	default:
		s.sign(r)
	}
}

// sign reads one operator, bracket or comma.
func (s *scanner) sign(r rune) {
	start := s.at
	s.at++
	next := s.peek(0)
	switch {
	case r == '(':
		if s.open = append(s.open, start); len(s.open) > maxDepth {
			s.complain(start, "brackets are nested too deep", "", "at most "+strconv.Itoa(maxDepth)+" levels")
		}
	case r == ')' && len(s.open) == 0:
		s.complain(start, "a closing bracket without an opening one", ")", "brackets in pairs")
	case r == ')':
		s.open = s.open[:len(s.open)-1]
	case strings.ContainsRune("<>=!", r) && next == '=':
		s.at++
	case r == '<' || r == '>':
	case r == '/' && (next == '/' || next == '*'):
		s.complain(start, "remarks have no place in an expression", "/"+string(next), "one division sign")
		s.at++
	case r == '*' && next == '*':
		s.complain(start, "unknown operator", "**", "^ for powers")
		s.at++
	case r == '?' && (next == '?' || next == '.' || next == ':'):
		s.complain(start, "unknown operator", "?"+string(next), "condition ? value : value")
		s.at++
	case r == ':' && next == ':':
		s.complain(start, "unknown operator", "::", "condition ? value : value")
		s.at++
	case strings.ContainsRune("+-*/^,?:", r):
	default:
		s.foreign(start, r)
	}
	s.last = r
}

// foreign complains of a character that is no part of the language, with what
// was probably meant.
func (s *scanner) foreign(at int, r rune) {
	message, expected := "not arithmetic", "numbers, names, + - * / ^ and brackets"
	switch r {
	case '=':
		message, expected = "nothing is assigned inside an expression", "== to compare"
	case '!':
		expected = "not"
	case '&':
		expected = "and"
	case '|':
		expected = "or"
	case '.':
		message, expected = "a dot out of place", "a number (0.5) or a name with one dot (in.level)"
	case '[', ']', '{', '}':
		expected = "round brackets"
	case '"', '\'', '`':
		message, expected = "texts have no value here", "a number or a name"
	case ';':
		expected = "one expression"
	}
	s.complain(at, message, string(r), expected)
}

// word reads a name, a function or a word operator.
func (s *scanner) word() {
	start := s.at
	head := s.run()
	if slices.Contains(wordOperators, head) {
		s.last = 'o'
		return
	}
	s.last = 'n'
	switch {
	case s.peek(0) == '.':
		s.dotted(start, head)
	case slices.Contains(refusedWords, head):
		s.complain(start, "not arithmetic", head, "numbers, names and functions")
	case s.called() && head != rootFunction:
		if _, ok := functionNamed(head); !ok {
			s.complain(start, "unknown function", head, "one of "+strings.Join(Functions(), ", "))
			s.mistakes[len(s.mistakes)-1].Nearest = document.Nearest(head, Functions())
		}
	}
}

// run reads letters and digits.
func (s *scanner) run() string {
	start := s.at
	for isLetter(s.peek(0)) || isDigit(s.peek(0)) {
		s.at++
	}
	return string(s.text[start:s.at])
}

// dotted reads on after the first half of a name. `in` is an operator to the
// parser and an everyday name to us, so it travels in disguise.
func (s *scanner) dotted(start int, head string) {
	dots := 0
	whole := true
	for s.peek(0) == '.' {
		s.at++
		dots++
		whole = whole && isLetter(s.peek(0))
		s.run()
	}
	full := string(s.text[start:s.at])
	switch {
	case dots > 1 || !whole:
		s.complain(start, "not a name", full, "a name with one dot at most, as in.level")
	case s.called():
		s.complain(start, "a name cannot be called", full, "one of "+strings.Join(Functions(), ", "))
	case head == "in":
		s.text[start] = disguise
	case slices.Contains(refusedWords, head):
		s.complain(start, "a reserved word cannot be a name", head, "another name")
	}
}

// disguise stands for the first letter of `in` in the parser's text. No name
// that passed the scan contains it.
const disguise = '$'

// called reports whether an opening bracket follows.
func (s *scanner) called() bool {
	for i := 0; ; i++ {
		switch s.peek(i) {
		case ' ', '\t', '\n', '\r':
		case '(':
			return true
		default:
			return false
		}
	}
}

// number reads a decimal literal and makes sure that it has a value.
func (s *scanner) number() {
	start := s.at
	s.digits()
	if s.peek(0) == '.' {
		s.at++
		s.digits()
	}
	if r := s.peek(0); r == 'e' || r == 'E' {
		signed := s.peek(1) == '+' || s.peek(1) == '-'
		if isDigit(s.peek(1)) || signed && isDigit(s.peek(2)) {
			s.at += 2
			s.digits()
		}
	}
	number := string(s.text[start:s.at])
	s.last = 'n'
	if tail := s.tail(); tail != "" {
		s.complain(start, "not a number", number+tail, "a plain number; a unit is multiplied on, as in 4700*ohm")
		return
	}
	value, err := strconv.ParseFloat(number, 64)
	mantissa, _, _ := strings.Cut(strings.ToLower(number), "e")
	switch {
	case err != nil, value == 0 && strings.ContainsAny(mantissa, "123456789"):
		s.complain(start, "a number out of range", number, "at most 1e308 and at least 1e-308")
	case len(number) > 18 && !strings.ContainsAny(number, ".eE"):
		s.complain(start, "a number with too many digits", number, "an exponent, as in 1e20")
	}
}

func (s *scanner) digits() {
	for isDigit(s.peek(0)) {
		s.at++
	}
}

// tail reads what is wrongly glued to a number: a unit, a second dot.
func (s *scanner) tail() string {
	start := s.at
	for r := s.peek(0); r == '.' || unicode.IsLetter(r) || unicode.IsDigit(r) || r == '_'; r = s.peek(0) {
		s.at++
	}
	return string(s.text[start:s.at])
}
