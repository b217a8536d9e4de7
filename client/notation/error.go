package notation

import (
	"fmt"
	"strings"
)

// Error says what could not be read: the field of the message, the text, where, and what was expected there.
type Error struct {
	// Field is the path of the field in the schema's names: refraction.sphere_d.
	Field string
	// Text is the whole text, and At the byte where reading stopped, at most len(Text).
	Text string
	At   int
	// Expected says what would have been read there.
	Expected string
}

// longestQuote is how many characters of a text an error repeats.
const longestQuote = 40

// Error gives all of it in a sentence.
func (e *Error) Error() string {
	at := max(0, min(e.At, len(e.Text)))
	rest := strings.TrimSpace(e.Text[at:])
	if rest == "" {
		if strings.TrimSpace(e.Text) == "" {
			return fmt.Sprintf("%s: the text is empty; expected %s", e.Field, e.Expected)
		}
		return fmt.Sprintf("%s: %s ends at character %d; expected %s", e.Field, quote(e.Text), character(e.Text, at), e.Expected)
	}
	return fmt.Sprintf("%s: %s at character %d of %s; expected %s", e.Field, quote(rest), character(e.Text, at), quote(e.Text), e.Expected)
}

// quote puts a text between quotes, cut where it is long.
func quote(text string) string {
	n := 0
	for i := range text {
		if n == longestQuote {
			return fmt.Sprintf("%q...", text[:i])
		}
		n++
	}
	return fmt.Sprintf("%q", text)
}
