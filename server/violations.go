package server

import (
	"context"
	"errors"
	"strings"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/protoadapt"

	"meniscus.example/optics/unit"
)

// domain is the domain of every ErrorInfo.
const domain = "meniscus.example"

// The reasons of every ErrorInfo. They are stable: clients may switch on them.
const (
	reasonInvalidFields  = "INVALID_FIELDS"
	reasonImpossibleLens = "IMPOSSIBLE_LENS"
	reasonNotServed      = "NOT_SERVED"
	reasonDeadline       = "DEADLINE_EXCEEDED"
	reasonCancelled      = "CANCELLED"
	reasonStopping       = "STOPPING"
	reasonInternal       = "INTERNAL"
)

// mostFaults is the greatest number of faults that one error lists: every value of a pair of eyes may be wrong. A status travels in the
// header of a response, and one that is too long costs the caller the connection; a list without an end costs us the search of it.
const mostFaults = 150

// violations are the faults of one request, in the order in which they were found.
type violations struct {
	list []unit.FieldError
	more bool // there are faults that the list has no room for
}

func (v *violations) add(field, problem, looksLike string) {
	v.put(unit.FieldError{Field: field, Problem: problem, LooksLike: looksLike})
}

func (v *violations) put(f unit.FieldError) {
	if len(v.list) == mostFaults {
		v.more = true
		return
	}
	v.list = append(v.list, f)
}

// has reports whether a fault is known of the field itself, of a message or list that holds it, or of a field or item that it
// holds.
func (v *violations) has(field string) bool {
	for i := range v.list {
		if known := v.list[i].Field; holds(known, field) || holds(field, known) {
			return true
		}
	}
	return false
}

// holds reports whether the path inner is outer, or lies within it.
func holds(outer, inner string) bool {
	rest, ok := strings.CutPrefix(inner, outer)
	return ok && (rest == "" || rest[0] == '.' || rest[0] == '[')
}

// merge adds what the core found, but for fields of which a fault is known already: a number outside its limits is
// named once.
func (v *violations) merge(faults []error) {
	for _, err := range faults {
		if v.more {
			return
		}
		var f *unit.FieldError
		if errors.As(err, &f) && !v.has(f.Field) {
			v.put(*f)
		}
	}
}

// err is nil without faults, else INVALID_ARGUMENT with all of them.
func (v *violations) err() error {
	if len(v.list) == 0 {
		return nil
	}
	bad := &errdetails.BadRequest{}
	text := make([]string, len(v.list))
	for i := range v.list {
		f := v.list[i]
		text[i] = f.Error()
		field := f.Field
		f.Field = ""
		bad.FieldViolations = append(bad.FieldViolations, &errdetails.BadRequest_FieldViolation{
			Field:       field,
			Description: f.Error(),
		})
	}
	if v.more {
		text = append(text, "and more, which are not listed")
	}
	return failure(codes.InvalidArgument, reasonInvalidFields, strings.Join(text, " | "), bad)
}

// statusFrom is the status of an error of the core, or of several that are joined: an error of the caller's where it is one, else
// INTERNAL, which says nothing of the cause. Values that are wrong come before values that do not go together.
func statusFrom(err error) error {
	var v violations
	for _, f := range fieldErrors(err) {
		v.put(*f)
	}
	var impossible *unit.ImpossibleError
	switch {
	case v.list != nil:
		return v.err()
	case errors.As(err, &impossible):
		says := *impossible
		says.Fields = nil
		p := &errdetails.PreconditionFailure{}
		for _, f := range impossible.Fields {
			p.Violations = append(p.Violations, &errdetails.PreconditionFailure_Violation{
				Type:        reasonImpossibleLens,
				Subject:     f,
				Description: says.Error(),
			})
		}
		return failure(codes.FailedPrecondition, reasonImpossibleLens, impossible.Error(), p)
	case errors.Is(err, context.Canceled), errors.Is(err, context.DeadlineExceeded):
		return ended(err, "before it was answered")
	}
	return internal()
}

// fieldErrors are the FieldErrors in an error, those of joined errors in their order.
func fieldErrors(err error) []*unit.FieldError {
	switch e := err.(type) {
	case *unit.FieldError:
		return []*unit.FieldError{e}
	case interface{ Unwrap() error }:
		return fieldErrors(e.Unwrap())
	case interface{ Unwrap() []error }:
		var all []*unit.FieldError
		for _, one := range e.Unwrap() {
			all = append(all, fieldErrors(one)...)
		}
		return all
	}
	return nil
}

// ended is the status of a call whose context has ended.
func ended(err error, when string) error {
	if errors.Is(err, context.DeadlineExceeded) {
		return failure(codes.DeadlineExceeded, reasonDeadline, "the deadline passed "+when)
	}
	return failure(codes.Canceled, reasonCancelled, "the call was cancelled "+when)
}

// internal is the status of a mistake of ours. The cause goes to the log, never to the caller.
func internal() error {
	return failure(codes.Internal, reasonInternal, "internal error: the request was not answered; please report it with its x-request-id")
}

// failure is a status with one ErrorInfo and the details.
func failure(code codes.Code, reason, message string, details ...protoadapt.MessageV1) error {
	details = append(details, &errdetails.ErrorInfo{Reason: reason, Domain: domain})
	st, err := status.New(code, message).WithDetails(details...)
	if err != nil {
		return status.Error(code, message)
	}
	return st.Err()
}
