package server

import (
	"bytes"
	"flag"
	"fmt"
	"go/format"
	"os"
	"strings"
	"testing"

	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/reflect/protoreflect"

	pb "meniscus.example/proto/meniscus/v1"
)

var update = flag.Bool("update", false, "write look.go anew from the schema")

// look.go is what the schema makes it: this test is its generator. After a change of the schema: go test ./server -run Look -update.
func TestTheQuickLookIsThatOfTheSchema(t *testing.T) {
	want, err := format.Source(lookSource())
	if err != nil {
		t.Fatal(err)
	}
	if *update {
		if err := os.WriteFile("look.go", want, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	got, err := os.ReadFile("look.go")
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Error("look.go is not that of the schema; go test ./server -run Look -update writes it anew")
	}
}

// goName is the name that protoc-gen-go gives a field.
func goName(name protoreflect.Name) string {
	var out string
	for part := range strings.SplitSeq(string(name), "_") {
		out += strings.ToUpper(part[:1]) + part[1:]
	}
	return out
}

func lookSource() []byte {
	var out bytes.Buffer
	p := func(format string, args ...any) { fmt.Fprintf(&out, format+"\n", args...) }
	p("// Code generated from the schema by TestTheQuickLookIsThatOfTheSchema. DO NOT EDIT.\n\npackage server\n")
	p("import (\n\"unicode/utf8\"\n\n\"google.golang.org/protobuf/proto\"\n\npb \"meniscus.example/proto/meniscus/v1\"\n)\n")
	p("// looksFine reports that every value of a request is within what the schema allows. Of a message that it does not know, or")
	p("// where anything is wrong, it is false: the door then says what.")
	p("func looksFine(m proto.Message) bool {\nswitch m := m.(type) {")
	for _, r := range requests() {
		p("case *pb.%s:\nreturn fine%s(m)", r.Name(), r.Name())
	}
	p("}\nreturn false\n}")
	done := map[protoreflect.FullName]bool{}
	var write func(m protoreflect.MessageDescriptor)
	write = func(m protoreflect.MessageDescriptor) {
		if done[m.FullName()] {
			return
		}
		done[m.FullName()] = true
		var inside []protoreflect.MessageDescriptor
		p("\nfunc fine%s(m *pb.%s) bool {", m.Name(), m.Name())
		for i := range m.Fields().Len() {
			f := m.Fields().Get(i)
			name := goName(f.Name())
			wrong := func(v string) string {
				switch f.Kind() {
				case protoreflect.MessageKind:
					inside = append(inside, f.Message())
					return fmt.Sprintf("!fine%s(%s)", f.Message().Name(), v)
				case protoreflect.StringKind:
					return fmt.Sprintf("utf8.RuneCountInString(%s) > longest", v)
				case protoreflect.EnumKind:
					last := f.Enum().Values().Len() - 1
					if f.Enum().Values().Get(last).Number() != protoreflect.EnumNumber(last) {
						panic(fmt.Sprint(f.Enum().FullName(), " has a gap"))
					}
					return fmt.Sprintf("!(%s >= 0 && %s <= %d)", v, v, last)
				case protoreflect.DoubleKind, protoreflect.Int32Kind:
					if q := proto.GetExtension(f.Options(), pb.E_Quantity).(*pb.Quantity); q.HasMinimum() {
						return fmt.Sprintf("!(%s >= %v && %s <= %v)", v, q.GetMinimum(), v, q.GetMaximum())
					}
				}
				return ""
			}
			switch bad := wrong("x"); {
			case bad == "" && !f.IsList():
			case f.IsList():
				p("if len(m.Get%s()) > mostItems {\nreturn false\n}", name)
				if bad != "" {
					p("for _, x := range m.Get%s() {\nif %s {\nreturn false\n}\n}", name, bad)
				}
			default:
				p("if m.Has%s() {\nif x := m.Get%s(); %s {\nreturn false\n}\n}", name, name, bad)
			}
		}
		p("return true\n}")
		for _, n := range inside {
			write(n)
		}
	}
	for _, r := range requests() {
		write(r)
	}
	return out.Bytes()
}
