package notation

// ParseNumber reads one number as the parsers of this package read it: with a sign of any kind or none, a decimal point or
// comma, and one of the given units after it or none. In an error the number is called name. It fails with an *Error.
func ParseNumber(name, text string, units ...string) (float64, error) {
	s := &scanner{text: text}
	x, err := s.number(name, "a number")
	if err != nil {
		return 0, err
	}
	for _, u := range units {
		if s.mark(u) {
			break
		}
	}
	if !s.done() {
		wanted := "the end"
		if len(units) > 0 {
			wanted += " or " + units[0]
		}
		return 0, s.expected(name, wanted)
	}
	return x.value, nil
}
