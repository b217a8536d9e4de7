package notation

import (
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// scanner reads a text from left to right. It knows words (ASCII letters), numbers and marks, and passes white space
// before each.
type scanner struct {
	text string
	at   int // the byte that is next
}

// space passes white space, the kinds that word processors make included.
func (s *scanner) space() {
	s.at = len(s.text) - len(strings.TrimLeftFunc(s.text[s.at:], unicode.IsSpace))
}

// done reports whether the text has been read to its end.
func (s *scanner) done() bool {
	s.space()
	return s.at == len(s.text)
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
	for end < len(s.text) && isLetter(s.text[end]) {
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

func isLetter(c byte) bool { return c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' }

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// number is a number that was read.
type number struct {
	value  float64
	signed bool // whether it was written with a sign
}

// signs are what is read as a sign: the ASCII ones, the typographic minus, and the en dash that word processors make of a
// hyphen.
var signs = []struct{ text, sign string }{{"+", ""}, {"-", "-"}, {"\u2212", "-"}, {"\u2013", "-"}}

// sign passes a sign and the space after it. It gives "-" or "".
func (s *scanner) sign() (sign string, signed bool) {
	s.space()
	for _, m := range signs {
		if s.mark(m.text) {
			s.space()
			return m.sign, true
		}
	}
	return "", false
}

// numberAhead reports whether a number stands next.
func (s *scanner) numberAhead() bool {
	ahead := *s
	ahead.sign()
	return ahead.at < len(s.text) && (isDigit(s.text[ahead.at]) || s.text[ahead.at] == '.')
}

// number passes a power, a radius or a distance. The error names the field and says what was wanted.
func (s *scanner) number(field, wanted string) (number, error) {
	n, ok := s.scan(true)
	if ok {
		return n, nil
	}
	if s.commaBetweenDigits() {
		wanted = "a space after the comma, or only one kind of decimal mark in the text"
	}
	return number{}, s.expected(field, wanted)
}

// angle passes an axis or a meridian, and its degree sign. A comma after it separates, whatever follows.
func (s *scanner) angle(field, wanted string) (number, error) {
	n, ok := s.scan(false)
	if !ok {
		return number{}, s.expected(field, wanted)
	}
	s.mark("°", "º")
	return n, nil
}

// scan passes a number with a decimal point or, by the rule in the package comment, a decimal comma. Where there is none it
// stays where it was, but for a comma of which it cannot be told what it means: it stands there then.
func (s *scanner) scan(decimalComma bool) (number, bool) {
	s.space()
	begin := s.at
	sign, signed := s.sign()
	first := s.at
	count := s.digits()
	if s.follows('.') {
		count += s.digits()
	} else if decimalComma && s.commaBetweenDigits() {
		if strings.Contains(s.text, ".") {
			return number{}, false
		}
		s.at++
		s.digits()
	}
	x, err := strconv.ParseFloat(sign+strings.Replace(s.text[first:s.at], ",", ".", 1), 64)
	if count == 0 || err != nil || s.follows('.') {
		s.at = begin
		return number{}, false
	}
	return number{x + 0, signed}, true // + 0: no negative zero
}

// follows passes a character that stands next, without white space before it.
func (s *scanner) follows(c byte) bool {
	if s.at < len(s.text) && s.text[s.at] == c {
		s.at++
		return true
	}
	return false
}

// digits passes digits and counts them.
func (s *scanner) digits() int {
	begin := s.at
	for s.at < len(s.text) && isDigit(s.text[s.at]) {
		s.at++
	}
	return s.at - begin
}

// commaBetweenDigits reports whether a comma is next, with a digit on both sides of it.
func (s *scanner) commaBetweenDigits() bool {
	return s.at > 0 && s.at+1 < len(s.text) &&
		isDigit(s.text[s.at-1]) && s.text[s.at] == ',' && isDigit(s.text[s.at+1])
}

// expected is the error for what stands next.
func (s *scanner) expected(field, wanted string) *Error {
	s.space()
	return &Error{Field: field, Text: s.text, At: s.at, Expected: wanted}
}

// character is the number of the character at a byte, from 1.
func character(text string, at int) int { return utf8.RuneCountInString(text[:at]) + 1 }
