package server

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/reflect/protoreflect"
	"google.golang.org/protobuf/reflect/protoregistry"
	"google.golang.org/protobuf/types/dynamicpb"

	pb "meniscus.example/proto/meniscus/v1"
)

// place is a field of a request, and how to set it: the messages on the way to it are made.
type place struct {
	path string
	set  func(root protoreflect.Message, v protoreflect.Value)
}

// places calls f for every field of a request that holds a value, however deep.
func places(m protoreflect.MessageDescriptor, prefix string, in func(protoreflect.Message) protoreflect.Message, f func(protoreflect.FieldDescriptor, place)) {
	if strings.Count(prefix, ".") > 6 {
		return
	}
	for i := range m.Fields().Len() {
		field := m.Fields().Get(i)
		path := prefix + string(field.Name())
		if field.IsList() {
			path += "[0]"
		}
		if field.Message() != nil {
			places(field.Message(), path+".", func(root protoreflect.Message) protoreflect.Message {
				parent := in(root)
				if !field.IsList() {
					return parent.Mutable(field).Message()
				}
				list := parent.Mutable(field).List()
				if list.Len() == 0 {
					return list.AppendMutable().Message()
				}
				return list.Get(0).Message()
			}, f)
			continue
		}
		f(field, place{path, func(root protoreflect.Message, v protoreflect.Value) {
			parent := in(root)
			if field.IsList() {
				parent.Mutable(field).List().Append(v)
				return
			}
			parent.Set(field, v)
		}})
	}
}

// faults are the paths of what the door finds wrong with a request. The quick look, which knows the types that Go was generated for, must be of the
// same mind as the plan.
func faults(d *door, m protoreflect.ProtoMessage) []string {
	var v violations
	d.check(&v, m)
	kind, err := protoregistry.GlobalTypes.FindMessageByName(m.ProtoReflect().Descriptor().FullName())
	if err != nil {
		panic(err)
	}
	typed := kind.New().Interface()
	bytes, err := proto.Marshal(m)
	if err != nil {
		panic(err)
	}
	if err := proto.Unmarshal(bytes, typed); err != nil {
		panic(err)
	}
	if looksFine(typed) != (v.list == nil) {
		panic(fmt.Sprintf("the quick look at %v: %v, the plan: %v", typed, looksFine(typed), v.list))
	}
	var out []string
	for _, f := range v.list {
		out = append(out, f.Field)
	}
	return out
}

// Every number of every request, by the descriptors: its limits pass, what is just outside does not, nor what is no number.
func TestTheDoorHoldsEveryNumberToItsLimits(t *testing.T) {
	t.Parallel()
	d := newDoor(requests()...)
	numbers := 0
	for _, request := range requests() {
		places(request, "", func(m protoreflect.Message) protoreflect.Message { return m }, func(field protoreflect.FieldDescriptor, at place) {
			q := proto.GetExtension(field.Options(), pb.E_Quantity).(*pb.Quantity)
			try := func(x float64, wrong bool) {
				v := protoreflect.ValueOfFloat64(x)
				if field.Kind() == protoreflect.Int32Kind {
					if x != math.Trunc(x) || math.Abs(x) > math.MaxInt32 {
						return
					}
					v = protoreflect.ValueOfInt32(int32(x))
				}
				m := dynamicpb.NewMessage(request)
				at.set(m, v)
				want := []string(nil)
				if wrong {
					want = []string{at.path}
				}
				if got := faults(d, m); fmt.Sprint(got) != fmt.Sprint(want) {
					t.Errorf("%s.%s = %v: faults on %v, want %v", request.Name(), at.path, x, got, want)
				}
			}
			switch {
			case field.Kind() != protoreflect.DoubleKind && field.Kind() != protoreflect.Int32Kind:
				return
			case !q.HasMinimum():
				if !q.HasUnitField() {
					t.Errorf("%s.%s has no limits", request.Name(), at.path)
				}
				return
			}
			numbers++
			least, most := q.GetMinimum(), q.GetMaximum()
			try(least, false)
			try(most, false)
			try((least+most)/2, false)
			outside := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 1e308, -1e308, math.Nextafter(least, -1e9), math.Nextafter(most, 1e9), least - 1, most + 1}
			for _, x := range outside {
				try(x, true)
			}
			try(math.Copysign(0, -1), !(least <= 0 && most >= 0))
			try(5e-324, !(least <= 0 && most >= 5e-324))
		})
	}
	if numbers < 100 {
		t.Errorf("only %d numbers were tried", numbers)
	}
}

func TestTheDoorKnowsEnumsTextsAndLists(t *testing.T) {
	t.Parallel()
	d := newDoor(requests()...)
	for _, request := range requests() {
		places(request, "", func(m protoreflect.Message) protoreflect.Message { return m }, func(field protoreflect.FieldDescriptor, at place) {
			try := func(v protoreflect.Value, want ...string) {
				m := dynamicpb.NewMessage(request)
				at.set(m, v)
				if got := faults(d, m); !slices.Equal(got, want) {
					t.Errorf("%s.%s = %v: faults on %v, want %v", request.Name(), at.path, v, got, want)
				}
			}
			switch field.Kind() {
			case protoreflect.EnumKind:
				try(protoreflect.ValueOfEnum(1))
				try(protoreflect.ValueOfEnum(99), at.path)
				try(protoreflect.ValueOfEnum(-1), at.path)
			case protoreflect.StringKind:
				for _, character := range []string{"a", "é", "鏡", "👁"} {
					try(protoreflect.ValueOfString(strings.Repeat(character, longest)))
					try(protoreflect.ValueOfString(strings.Repeat(character, longest+1)), at.path)
				}
			}
		})
	}
	var terms []*pb.Term
	for range mostItems + 1 {
		terms = append(terms, &pb.Term{})
	}
	if got := faults(d, pb.CombineRequest_builder{Terms: terms}.Build()); fmt.Sprint(got) != "[terms]" {
		t.Errorf("too many terms: %v", got)
	}
	if got := faults(d, pb.CombineRequest_builder{Terms: terms[1:]}.Build()); got != nil {
		t.Errorf("as many terms as may be: %v", got)
	}
}

func TestTheDoorSaysWhatAValueLooksLike(t *testing.T) {
	t.Parallel()
	d := newDoor(requests()...)
	for want, m := range map[string]*pb.MeridianReading{
		"is 43 mm, outside [4.5, 11] mm; looks like a keratometer power in dioptres: give it in power_d": pb.MeridianReading_builder{RadiusMm: proto.Float64(43)}.Build(),
		"is 7.8 D, outside [28, 75] D; looks like a radius in millimetres: give it in radius_mm":         pb.MeridianReading_builder{PowerD: proto.Float64(7.8)}.Build(),
		"is -1°, outside [0, 180]°; looks like a meridian counted clockwise: add 180":                    pb.MeridianReading_builder{MeridianDeg: proto.Float64(-1)}.Build(),
		"is not a number": pb.MeridianReading_builder{MeridianDeg: proto.Float64(math.NaN())}.Build(),
		"is infinite":     pb.MeridianReading_builder{MeridianDeg: proto.Float64(math.Inf(-1))}.Build(),
	} {
		var v violations
		d.check(&v, m)
		if len(v.list) != 1 || !strings.HasSuffix(v.list[0].Error(), ": "+want) {
			t.Errorf("%v, want %s", v.list, want)
		}
	}
}

func BenchmarkDoor(b *testing.B) {
	d := newDoor(requests()...)
	req := benchmarkFitRequest()
	b.ReportAllocs()
	for b.Loop() {
		var v violations
		d.check(&v, req)
		if v.list != nil {
			b.Fatal(v.list)
		}
	}
}
