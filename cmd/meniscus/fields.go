package main

import (
	"fmt"
	"strings"

	"github.com/spf13/pflag"
	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/reflect/protoreflect"

	pb "meniscus.example/proto/meniscus/v1"
)

// field is a number of a request that a flag gives: the name of the flag, the path of the field in the schema's names, and what
// the help says of it. The unit and the limits in the help are the schema's.
type field struct{ flag, path, help string }

// fields are the flags that give numbers of one request.
type fields struct {
	list   []field
	values []*number
}

// newFields adds a flag for each field to flags.
func newFields(flags *pflag.FlagSet, request proto.Message, list ...field) *fields {
	f := &fields{list: list}
	for _, one := range list {
		q := quantityOf(request, one.path)
		n := &number{units: unitsOf(q)}
		f.values = append(f.values, n)
		flags.Var(n, one.flag, one.help+limits(q))
	}
	return f
}

// put sets the fields whose flags were given, and nothing else: absent stays absent.
func (f *fields) put(request proto.Message) {
	for i, n := range f.values {
		if n.value != nil {
			holder, last := holderOf(request.ProtoReflect(), f.list[i].path)
			holder.Set(last, protoreflect.ValueOfFloat64(*n.value))
		}
	}
}

// given names the flags that were given.
func (f *fields) given() []string {
	var flags []string
	for i, n := range f.values {
		if n.value != nil {
			flags = append(flags, "--"+f.list[i].flag)
		}
	}
	return flags
}

// origins says of each field which flag gives it.
func (f *fields) origins() origins {
	o := origins{}
	for _, one := range f.list {
		o[one.path] = "--" + one.flag
	}
	return o
}

// holderOf is the message that holds the field at a path, made where it is absent, and the field.
func holderOf(m protoreflect.Message, path string) (protoreflect.Message, protoreflect.FieldDescriptor) {
	name, rest, more := strings.Cut(path, ".")
	fd := m.Descriptor().Fields().ByName(protoreflect.Name(name))
	if !more {
		return m, fd
	}
	return holderOf(m.Mutable(fd).Message(), rest)
}

// quantityOf is what the schema says of the number at a path.
func quantityOf(request proto.Message, path string) *pb.Quantity {
	_, fd := holderOf(request.ProtoReflect().New(), path)
	q, _ := proto.GetExtension(fd.Options(), pb.E_Quantity).(*pb.Quantity)
	return q
}

// symbol is the customary symbol of a UCUM code; a number without dimension has none.
func symbol(ucum string) string {
	switch ucum {
	case "1":
		return ""
	case "[diop]":
		return "D"
	case "[p'diop]":
		return "prism D"
	case "deg":
		return "°"
	case "um":
		return "µm"
	case "m-1":
		return "1/m"
	case "10*-11.cm2/s/mm[Hg]":
		return "10⁻¹¹ (cm²/s)(mL O2/(mL·mmHg))"
	case "10*-9.cm/s/mm[Hg]":
		return "10⁻⁹ (cm/s)(mL O2/(mL·mmHg))"
	}
	return ucum
}

// unitsOf are the ways to write a unit behind a number, the customary symbol first.
func unitsOf(q *pb.Quantity) []string {
	if q.GetUnit() == "1" {
		return nil
	}
	return []string{symbol(q.GetUnit()), q.GetUnit()}
}

// limits ends a help text with the limits and the unit.
func limits(q *pb.Quantity) string {
	return fmt.Sprintf("; %v to %s", q.GetMinimum(), quantity(q.GetMaximum(), q.GetUnit()))
}

// origins says what on the command line a field of a request comes from, by the path of the field or of a message that holds
// it.
type origins map[string]string

// of is where a field comes from, or empty.
func (o origins) of(path string) string {
	for path != "" {
		if from, ok := o[path]; ok {
			return from
		}
		path = path[:max(0, strings.LastIndexAny(path, ".["))]
	}
	return ""
}
