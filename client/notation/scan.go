package notation

import (
	"fmt"
	"strconv"
	"strings"
	"unicode"
)

// Error says what could not be read: the field of the message, the text, and what was expected there.
type Error struct {
	// Field is the field of the message, as in the schema.
	Field string
	// Text is the whole text, At the byte where reading stopped.
	Text string
	At   int
	// Expected says what would have been read there.
	Expected string
}

// Error gives all of it in a sentence.
func (e *Error) Error() string {
	rest := strings.TrimSpace(e.Text[min(e.At, len(e.Text)):])
	if rest == "" {
		return fmt.Sprintf("%s: %q ends where %s was expected", e.Field, e.Text, e.Expected)
	}
	return fmt.Sprintf("%s: in %q, at %q, %s was expected", e.Field, e.Text, rest, e.Expected)
}

// scanner reads a text from left to right. It knows words (letters), numbers and marks.
type scanner struct {
	text string
	at   int
}

// space passes white space.
func (s *scanner) space() {
	for s.at < len(s.text) && (s.text[s.at] == ' ' || s.text[s.at] == '\t') {
		s.at++
	}
}

// mark passes one of the marks, where one stands.
func (s *scanner) mark(marks ...string) bool {
	s.space()
	for _, m := range marks {
		if strings.HasPrefix(s.text[s.at:], m) {
			s.at += len(m)
			return true
		}
	}
	return false
}

// word passes one of the words, where one stands by itself, in any case.
func (s *scanner) word(words ...string) bool {
	s.space()
	end := s.at
	for end < len(s.text) && unicode.IsLetter(rune(s.text[end])) && s.text[end] < 0x80 {
		end++
	}
	for _, w := range words {
		if strings.EqualFold(s.text[s.at:end], w) {
			s.at = end
			return true
		}
	}
	return false
}

// number passes a number: a sign (also the typographic minus), digits with a decimal point.
func (s *scanner) number() (float64, bool) {
	s.space()
	begin := s.at
	rest := s.text[begin:]
	sign := ""
	for _, m := range []struct{ text, sign string }{{"+", ""}, {"-", "-"}, {"−", "-"}, {"–", "-"}} {
		if strings.HasPrefix(rest, m.text) {
			sign, rest = m.sign, strings.TrimLeft(rest[len(m.text):], " ")
			break
		}
	}
	n := 0
	for n < len(rest) && (rest[n] >= '0' && rest[n] <= '9' || rest[n] == '.') {
		n++
	}
	x, err := strconv.ParseFloat(sign+rest[:n], 64)
	if err != nil {
		return 0, false
	}
	s.at = len(s.text) - len(rest) + n
	return x + 0, true
}

// done reports whether the text has been read to its end.
func (s *scanner) done() bool {
	s.space()
	return s.at == len(s.text)
}

func (s *scanner) expected(field, what string) *Error {
	s.space()
	return &Error{Field: field, Text: s.text, At: s.at, Expected: what}
}
