package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"strings"
	"text/tabwriter"
	"unicode/utf8"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/encoding/protojson"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// width is how many columns a line may have.
const width = 80

// print prints an answer: with --json exactly as it came, else as text lays it out.
func (a *app) print(res proto.Message, text func(*page)) error {
	if a.json {
		return printJSON(a.out, res)
	}
	p := &page{}
	text(p)
	_, err := a.out.Write(p.buffer.Bytes())
	return err
}

// printJSON prints a message as proto JSON, with the names of the schema. The white space is made the same every time.
func printJSON(w io.Writer, m proto.Message) error {
	compact, err := protojson.MarshalOptions{UseProtoNames: true}.Marshal(m)
	if err != nil {
		return err
	}
	var out bytes.Buffer
	if err := json.Indent(&out, compact, "", "  "); err != nil {
		return err
	}
	out.WriteByte('\n')
	_, err = w.Write(out.Bytes())
	return err
}

// printError prints what a service had against a request, every fault on lines of its own.
func (a *app) printError(w io.Writer, err error) {
	st := status.Convert(err)
	if a.json {
		if printJSON(w, st.Proto()) == nil {
			return
		}
	}
	p := &page{}
	faults := 0
	fault := func(field, text string) {
		faults++
		p.wrap("  ", field+": "+text)
	}
	for _, d := range st.Details() {
		switch d := d.(type) {
		case *errdetails.BadRequest:
			for _, v := range d.GetFieldViolations() {
				fault(v.GetField(), v.GetDescription())
			}
		case *errdetails.PreconditionFailure:
			for _, v := range d.GetViolations() {
				fault(v.GetSubject(), v.GetDescription())
			}
		}
	}
	switch {
	case faults == 0 && st.Code() == codes.Unavailable:
		fmt.Fprintf(w, "meniscus: no server answers at %s\n", a.server)
	case faults == 0 && st.Code() == codes.DeadlineExceeded:
		fmt.Fprintf(w, "meniscus: no answer within %v\n", a.timeout)
	case faults == 0:
		fmt.Fprintf(w, "meniscus: %s: %s\n", st.Code(), st.Message())
	case st.Code() == codes.FailedPrecondition:
		fmt.Fprintf(w, "meniscus: these values can make no lens together:\n%s", p.buffer.Bytes())
	default:
		fmt.Fprintf(w, "meniscus: something is wrong with what was given:\n%s", p.buffer.Bytes())
	}
}

// page is a text being laid out.
type page struct{ buffer bytes.Buffer }

// title begins a part.
func (p *page) title(text string) {
	if p.buffer.Len() > 0 {
		p.buffer.WriteByte('\n')
	}
	p.buffer.WriteString(text + "\n")
}

// table lays out rows of cells in columns; a row of no value is left out.
func (p *page) table(rows ...[]string) {
	w := tabwriter.NewWriter(&p.buffer, 0, 0, 2, ' ', 0)
	for _, row := range rows {
		if len(row) > 1 {
			fmt.Fprintln(w, "  "+strings.TrimRight(strings.Join(row, "\t"), "\t"))
		}
	}
	// The buffer takes everything.
	_ = w.Flush()
}

// wrap writes a text between the indent and the width; a text with a label (up to a colon) has its further lines
// indented by two more.
func (p *page) wrap(indent, text string) {
	hanging := ""
	if strings.Contains(text, ": ") {
		hanging = "  "
	}
	line, used := indent, utf8.RuneCountInString(indent)
	for i, word := range strings.Fields(text) {
		n := utf8.RuneCountInString(word)
		if i > 0 && used+1+n > width {
			p.buffer.WriteString(line + "\n")
			line = indent + hanging
			used = utf8.RuneCountInString(line)
		} else if i > 0 {
			line += " "
			used++
		}
		line += word
		used += n
	}
	p.buffer.WriteString(line + "\n")
}

// cautionsAndNotice end every answer.
func (p *page) cautionsAndNotice(cautions []*pb.Caution, from *pb.Provenance) {
	p.title("Cautions")
	names := map[pb.Severity]string{
		pb.Severity_SEVERITY_NOTE: "note", pb.Severity_SEVERITY_ADVICE: "advice", pb.Severity_SEVERITY_WARNING: "WARNING",
	}
	if len(cautions) == 1 && cautions[0].GetCode() == pb.CautionCode_CAUTION_CODE_STARTING_POINT {
		p.wrap("  ", "none but the notice below")
	}
	for _, c := range cautions {
		if c.GetCode() == pb.CautionCode_CAUTION_CODE_STARTING_POINT {
			continue // the notice below says it
		}
		text := names[c.GetSeverity()] + ": " + c.GetMessage()
		if c.HasAction() {
			text += " Next: " + c.GetAction() + "."
		}
		p.wrap("  ", text)
	}
	p.title("Notice")
	p.wrap("  ", from.GetNotice())
	p.wrap("  ", "(engine "+from.GetEngineVersion()+", schema "+from.GetSchemaVersion()+")")
}

// derivation writes the steps of a calculation, numbered.
func (p *page) derivation(steps []*pb.DerivationStep) {
	if len(steps) == 0 {
		return
	}
	p.title("Derivation")
	for i, s := range steps {
		p.wrap("  ", fmt.Sprintf("%d. %s", i+1, s.GetName()))
		r := s.GetResult()
		p.wrap("     ", fmt.Sprintf("%s = %s = %s", r.GetName(), s.GetFormula(), quantity(r)))
		inputs := make([]string, len(s.GetInputs()))
		for j, in := range s.GetInputs() {
			inputs[j] = in.GetName() + " = " + quantity(in)
		}
		p.wrap("     ", "with "+strings.Join(inputs, ", "))
		p.wrap("     ", "source: "+s.GetSource())
	}
}

// quantity writes a number of a derivation with its unit.
func quantity(v *pb.NamedValue) string {
	text := fmt.Sprintf("%.6g", v.GetValue())
	switch v.GetUnit() {
	case "1":
		return text
	case "[diop]":
		return text + " D"
	case "deg":
		return text + "°"
	case "m-1":
		return text + " 1/m"
	}
	return text + " " + v.GetUnit()
}
