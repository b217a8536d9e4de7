package unit

import "strings"

// FieldError says what is wrong with one value that was given. Field is its path in the words of the
// schema, joined by dots ("keratometry.flat.radius_mm"), relative to whatever the constructor that
// returned the error was given; Within puts a prefix before it. LooksLike is what the value looks
// like, as the end of a sentence that begins so; it may be empty.
//
// Source: definition.
type FieldError struct {
	Field     string
	Problem   string
	LooksLike string
}

// Error gives the field, the problem and what the value looks like, in one sentence.
//
// Source: definition.
func (e *FieldError) Error() string {
	s := e.Problem
	if e.Field != "" {
		s = e.Field + ": " + s
	}
	if e.LooksLike != "" {
		s += "; looks like " + e.LooksLike
	}
	return s
}

// ImpossibleError says that the values, each fine by itself, can make no lens together. Fields are
// their paths as in FieldError; Remedy is what would work, as a sentence, and may be empty.
//
// Source: definition.
type ImpossibleError struct {
	Fields  []string
	Problem string
	Remedy  string
}

// Error gives the fields, the problem and the remedy, in one sentence.
//
// Source: definition.
func (e *ImpossibleError) Error() string {
	s := e.Problem
	if len(e.Fields) > 0 {
		s = strings.Join(e.Fields, ", ") + ": " + s
	}
	if e.Remedy != "" {
		s += "; " + e.Remedy
	}
	return s
}

// Within puts a prefix before the paths of a FieldError or an ImpossibleError, joined by a dot. Another error is
// returned as it is.
//
// Source: definition.
func Within(prefix string, err error) error {
	switch e := err.(type) {
	case *FieldError:
		w := *e
		w.Field = join(prefix, e.Field)
		return &w
	case *ImpossibleError:
		w := *e
		w.Fields = make([]string, len(e.Fields))
		for i, f := range e.Fields {
			w.Fields[i] = join(prefix, f)
		}
		return &w
	}
	return err
}

func join(prefix, field string) string {
	switch {
	case prefix == "":
		return field
	case field == "":
		return prefix
	}
	return prefix + "." + field
}

// At puts a path in the place of whatever fields an ImpossibleError names. Another error is returned as it is.
//
// Source: definition.
func At(field string, err error) error {
	if e, ok := err.(*ImpossibleError); ok {
		w := *e
		w.Fields = []string{field}
		return &w
	}
	return err
}
