package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"slices"
	"strings"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/encoding/protojson"
	"google.golang.org/protobuf/proto"
)

// outputError is an answer that could not be written.
type outputError struct{ error }

// print prints an answer: with --json exactly as it came, else as text lays it out.
func (a *app) print(res proto.Message, flags origins, text func(*page)) error {
	p := &page{flags: flags}
	if a.json {
		if err := writeJSON(&p.buffer, res); err != nil {
			return outputError{err}
		}
	} else {
		text(p)
	}
	if _, err := a.out.Write(p.buffer.Bytes()); err != nil {
		return outputError{err}
	}
	return nil
}

// writeJSON writes a message as proto JSON with the names of the schema. The library varies the white space from build to
// build; indenting makes it always the same.
func writeJSON(w io.Writer, m proto.Message) error {
	varied, err := protojson.MarshalOptions{UseProtoNames: true}.Marshal(m)
	if err != nil {
		return err
	}
	var compact, out bytes.Buffer
	if err := json.Compact(&compact, varied); err != nil {
		return err
	}
	if err := json.Indent(&out, compact.Bytes(), "", "  "); err != nil {
		return err
	}
	out.WriteByte('\n')
	_, err = w.Write(out.Bytes())
	return err
}

// fault is something that a service has against a request: fields, and what is wrong with them.
type fault struct {
	fields []string
	says   string
}

// faultsOf are all the faults in the details of a status. What is said of several fields in a row is one fault.
func faultsOf(st *status.Status) []fault {
	var faults []fault
	add := func(field, says string) {
		if n := len(faults) - 1; n >= 0 && faults[n].says == says {
			faults[n].fields = append(faults[n].fields, field)
			return
		}
		faults = append(faults, fault{[]string{field}, says})
	}
	for _, d := range st.Details() {
		switch d := d.(type) {
		case *errdetails.BadRequest:
			for _, v := range d.GetFieldViolations() {
				add(v.GetField(), v.GetDescription())
			}
		case *errdetails.PreconditionFailure:
			for _, v := range d.GetViolations() {
				add(v.GetSubject(), v.GetDescription())
			}
		}
	}
	return faults
}

// printRefusal prints what a call came back with instead of an answer: every fault, with the fields of the request and the
// flags that they come from.
func (a *app) printRefusal(r *refusal) {
	st := status.Convert(r.err)
	if a.json && writeJSON(a.errOut, st.Proto()) == nil {
		return
	}
	p := &page{}
	p.wrap("", "  ", "meniscus: "+a.headline(st))
	for _, f := range faultsOf(st) {
		p.item(f.name(r.flags) + ": " + f.says)
	}
	_, _ = a.errOut.Write(p.buffer.Bytes()) // There is nowhere left to say that this failed.
}

// headline says what kind of refusal it is.
func (a *app) headline(st *status.Status) string {
	faults := len(faultsOf(st)) > 0
	switch st.Code() {
	case codes.InvalidArgument:
		if faults {
			return "what was given is wrong:"
		}
	case codes.FailedPrecondition:
		if faults {
			return "each value is fine by itself, but they do not go together:"
		}
	case codes.Unavailable:
		text := fmt.Sprintf("no answer from %s: %s.", a.server, st.Message())
		if a.encrypted() {
			text += " It was called with TLS; --plaintext calls without."
		}
		return text
	case codes.DeadlineExceeded:
		return fmt.Sprintf("no answer within %v; --timeout gives it longer", a.timeout)
	case codes.Canceled:
		return "interrupted"
	}
	return fmt.Sprintf("%s: %s", st.Code(), st.Message())
}

// name names the fields of a fault, each flag once.
func (f fault) name(flags origins) string {
	var from []string
	for _, field := range f.fields {
		if flag := flags.of(field); flag != "" && !slices.Contains(from, flag) {
			from = append(from, flag)
		}
	}
	text := strings.Join(f.fields, ", ")
	if from != nil {
		text += " (" + strings.Join(from, ", ") + ")"
	}
	return text
}
