package proto_test

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/reflect/protodesc"
	"google.golang.org/protobuf/reflect/protoreflect"
	"google.golang.org/protobuf/reflect/protoregistry"
	"google.golang.org/protobuf/types/descriptorpb"

	meniscusv1 "meniscus.example/proto/meniscus/v1"
)

// suffixes are the endings of field names and the UCUM code that each stands for. The longest ending that
// fits a name counts.
var suffixes = map[string]string{
	"_d":      "[diop]",
	"_deg":    "deg",
	"_g_cm3":  "g/cm3",
	"_logmar": "1",
	"_mg":     "mg",
	"_mm":     "mm",
	"_mm3":    "mm3",
	"_pd":     "[p'diop]",
	"_px":     "1",
	"_ul":     "uL",
	"_um":     "um",
}

// symbols are the field names that are the trade's own symbol, which says the unit by itself.
var symbols = map[string]string{
	"dk":              "10*-11.cm2/s/mm[Hg]",
	"dk_t_centre":     "10*-9.cm/s/mm[Hg]",
	"dk_t_optic_zone": "10*-9.cm/s/mm[Hg]",
}

// unitOf gives the UCUM code that a field's name promises, and "" where it promises none.
func unitOf(name string) string {
	if unit, ok := symbols[name]; ok {
		return unit
	}
	longest := ""
	for suffix := range suffixes {
		if strings.HasSuffix(name, suffix) && len(suffix) > len(longest) {
			longest = suffix
		}
	}
	return suffixes[longest]
}

var (
	rangeText  = regexp.MustCompile(`[\[(](-?\d+(?:\.\d+)?), (-?\d+(?:\.\d+)?)[\])]`)
	numberText = regexp.MustCompile(`[+-]?\d+(?:\.\d+)?`)
)

// quantityProblems says what is wrong with how the schema describes a field's number.
func quantityProblems(fd protoreflect.FieldDescriptor, comment string) []string {
	var problems []string
	problem := func(format string, args ...any) { problems = append(problems, fmt.Sprintf(format, args...)) }

	q := proto.GetExtension(fd.Options(), meniscusv1.E_Quantity).(*meniscusv1.Quantity)
	given := proto.HasExtension(fd.Options(), meniscusv1.E_Quantity)
	integer := false
	switch fd.Kind() {
	case protoreflect.DoubleKind:
	case protoreflect.Int32Kind, protoreflect.Int64Kind:
		integer = true
	case protoreflect.BoolKind, protoreflect.StringKind, protoreflect.BytesKind,
		protoreflect.EnumKind, protoreflect.MessageKind:
		if given {
			problem("has a quantity and is no number")
		}
		return problems
	default:
		problem("is a %v: a number is a double, an int32 or an int64", fd.Kind())
		return problems
	}
	if !given {
		problem("is a number without (meniscus.v1.quantity)")
		return problems
	}

	if q.HasUnitField() {
		sibling := fd.ContainingMessage().Fields().ByName(protoreflect.Name(q.GetUnitField()))
		if sibling == nil || sibling.Kind() != protoreflect.StringKind || sibling.IsList() {
			problem("unit_field %q is no string field beside it", q.GetUnitField())
		}
		if q.HasUnit() || q.HasMinimum() || q.HasMaximum() || q.HasStep() || len(q.GetLookalikes()) > 0 {
			problem("has a unit_field, and a unit or limits as well")
		}
		return problems
	}

	switch promised := unitOf(string(fd.Name())); {
	case promised == "" && q.GetUnit() != "1":
		problem("unit %q, and a name without a unit's ending is dimensionless", q.GetUnit())
	case promised == "" && !integer && !strings.Contains(comment, "dimensionless"):
		problem("a name without a unit's ending needs the word dimensionless in its comment")
	case promised != "" && q.GetUnit() != promised:
		problem("unit %q, and the name says %q", q.GetUnit(), promised)
	}
	if !(q.HasMinimum() && q.HasMaximum() && q.GetMinimum() < q.GetMaximum()) {
		problem("minimum %v is not below maximum %v, or one is absent", q.GetMinimum(), q.GetMaximum())
	}
	if !(q.GetStep() > 0 && q.GetStep() <= q.GetMaximum()-q.GetMinimum()) {
		problem("step %v is not above 0 and within the limits", q.GetStep())
	}
	for _, l := range q.GetLookalikes() {
		if !(l.GetMinimum() < l.GetMaximum()) {
			problem("lookalike [%v, %v] is empty", l.GetMinimum(), l.GetMaximum())
		}
		if l.GetMinimum() < q.GetMaximum() && l.GetMaximum() > q.GetMinimum() {
			problem("lookalike [%v, %v] overlaps the limits", l.GetMinimum(), l.GetMaximum())
		}
		if l.GetLooksLike() == "" {
			problem("lookalike [%v, %v] does not say what it looks like", l.GetMinimum(), l.GetMaximum())
		}
	}
	return append(problems, limitProblems(q, comment)...)
}

// limitProblems says where a comment states other limits than the option: as one range in brackets, or, where
// only certain values are accepted, by naming the least and the greatest.
func limitProblems(q *meniscusv1.Quantity, comment string) []string {
	limits := []float64{q.GetMinimum(), q.GetMaximum()}
	ranges := rangeText.FindAllStringSubmatch(comment, -1)
	switch {
	case len(ranges) > 1:
		return []string{"the comment states more than one range"}
	case len(ranges) == 1:
		if got := []float64{number(ranges[0][1]), number(ranges[0][2])}; !slices.Equal(got, limits) {
			return []string{fmt.Sprintf("the comment states %s, and the option %v", ranges[0][0], limits)}
		}
	default:
		var stated []float64
		for _, s := range numberText.FindAllString(comment, -1) {
			stated = append(stated, number(s))
		}
		if !slices.Contains(stated, limits[0]) || !slices.Contains(stated, limits[1]) {
			return []string{fmt.Sprintf("the comment does not state the limits %v", limits)}
		}
	}
	return nil
}

// number reads a decimal that a regular expression has found.
func number(s string) float64 {
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		panic(err) // The expressions match decimals only.
	}
	return x
}

// messages gives every message of the package, nested ones included, but those that make up the option.
func messages(t *testing.T) []protoreflect.MessageDescriptor {
	t.Helper()
	var found []protoreflect.MessageDescriptor
	var walk func(protoreflect.MessageDescriptors)
	walk = func(list protoreflect.MessageDescriptors) {
		for i := range list.Len() {
			found = append(found, list.Get(i))
			walk(list.Get(i).Messages())
		}
	}
	for _, file := range files(t) {
		if file.Path() != meniscusv1.File_meniscus_v1_quantity_proto.Path() {
			walk(file.Messages())
		}
	}
	return found
}

// files gives the files of the package in the order of their paths.
func files(t *testing.T) []protoreflect.FileDescriptor {
	t.Helper()
	var found []protoreflect.FileDescriptor
	protoregistry.GlobalFiles.RangeFilesByPackage("meniscus.v1", func(fd protoreflect.FileDescriptor) bool {
		found = append(found, fd)
		return true
	})
	if len(found) < 2 {
		t.Fatal("the package meniscus.v1 is not linked in")
	}
	slices.SortFunc(found, func(a, b protoreflect.FileDescriptor) int { return strings.Compare(a.Path(), b.Path()) })
	return found
}

func TestEveryNumberHasAQuantityThatItsNameAndCommentAgreeWith(t *testing.T) {
	t.Parallel()
	comments := comments(t)
	for _, message := range messages(t) {
		for i := range message.Fields().Len() {
			fd := message.Fields().Get(i)
			name := strings.TrimPrefix(string(fd.FullName()), "meniscus.v1.")
			comment, found := comments[name]
			if !found || comment == "" {
				t.Errorf("%s: no comment found", name)
			}
			for _, problem := range quantityProblems(fd, comment) {
				t.Errorf("%s: %s", name, problem)
			}
		}
	}
}

// Each rule is shown a field that breaks it.
func TestQuantityRulesReportWhatBreaksThem(t *testing.T) {
	t.Parallel()
	const stated = "A number, dimensionless, in [1, 2]."
	good := func() *meniscusv1.Quantity_builder {
		return &meniscusv1.Quantity_builder{
			Unit: proto.String("mm"), Minimum: proto.Float64(1), Maximum: proto.Float64(2), Step: proto.Float64(0.1),
		}
	}
	like := func(minimum, maximum float64, text string) []*meniscusv1.Lookalike {
		return []*meniscusv1.Lookalike{meniscusv1.Lookalike_builder{
			Minimum: &minimum, Maximum: &maximum, LooksLike: &text,
		}.Build()}
	}
	const double, i32, text = descriptorpb.FieldDescriptorProto_TYPE_DOUBLE,
		descriptorpb.FieldDescriptorProto_TYPE_INT32, descriptorpb.FieldDescriptorProto_TYPE_STRING
	for _, c := range []struct {
		rule    string
		field   string
		kind    descriptorpb.FieldDescriptorProto_Type
		comment string
		change  func(*meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder
		want    string // "" where nothing is wrong
	}{
		{rule: "right", field: "x_mm", kind: double, comment: stated},
		{rule: "right count", field: "count", kind: i32, comment: "How many, in [1, 2].",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.Unit = proto.String("1")
				return q
			}},
		{rule: "right choice", field: "x_mm", kind: double, comment: "Either 1 mm or +2.00 mm."},
		{rule: "right half-open", field: "x_mm", kind: double, comment: "In (1, 2]."},
		{rule: "right unit beside it", field: "x", kind: double,
			change: func(*meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				return &meniscusv1.Quantity_builder{UnitField: proto.String("unit")}
			}},
		{rule: "float", field: "x_mm", kind: descriptorpb.FieldDescriptorProto_TYPE_FLOAT, want: "is a float"},
		{rule: "unsigned", field: "x_mm", kind: descriptorpb.FieldDescriptorProto_TYPE_UINT32, want: "is a uint32"},
		{rule: "unsigned fixed", field: "x_mm", kind: descriptorpb.FieldDescriptorProto_TYPE_FIXED64, want: "is a fixed64"},
		{rule: "none", field: "x_mm", kind: double, want: "without",
			change: func(*meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder { return nil }},
		{rule: "none on an integer", field: "count", kind: i32, want: "without",
			change: func(*meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder { return nil }},
		{rule: "text", field: "x_mm", kind: text, comment: stated, want: "is no number"},
		{rule: "other unit", field: "x_um", kind: double, comment: stated, want: `the name says "um"`},
		{rule: "longest ending", field: "x_mm3", kind: double, comment: stated, want: `the name says "mm3"`},
		{rule: "no ending", field: "x", kind: double, comment: stated, want: "is dimensionless"},
		{rule: "not said", field: "x", kind: double, comment: "In [1, 2].", want: "the word dimensionless",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.Unit = proto.String("1")
				return q
			}},
		{rule: "limits exchanged", field: "x_mm", kind: double, comment: stated, want: "is not below",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.Minimum, q.Maximum = q.Maximum, q.Minimum
				return q
			}},
		{rule: "no maximum", field: "x_mm", kind: double, comment: stated, want: "is absent",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder { q.Maximum = nil; return q }},
		{rule: "no step", field: "x_mm", kind: double, comment: stated, want: "step 0",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder { q.Step = nil; return q }},
		{rule: "wide step", field: "x_mm", kind: double, comment: stated, want: "step 3",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.Step = proto.Float64(3)
				return q
			}},
		{rule: "lookalike inside", field: "x_mm", kind: double, comment: stated, want: "overlaps",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.Lookalikes = like(1.5, 9, "a")
				return q
			}},
		{rule: "lookalike empty", field: "x_mm", kind: double, comment: stated, want: "is empty",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.Lookalikes = like(9, 8, "a")
				return q
			}},
		{rule: "lookalike silent", field: "x_mm", kind: double, comment: stated, want: "does not say",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.Lookalikes = like(8, 9, "")
				return q
			}},
		{rule: "no such sibling", field: "x", kind: double, want: "no string field",
			change: func(*meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				return &meniscusv1.Quantity_builder{UnitField: proto.String("missing")}
			}},
		{rule: "unit twice", field: "x_mm", kind: double, want: "as well",
			change: func(q *meniscusv1.Quantity_builder) *meniscusv1.Quantity_builder {
				q.UnitField = proto.String("unit")
				return q
			}},
		{rule: "other limits", field: "x_mm", kind: double, comment: "In [1, 3].", want: "the comment states [1, 3]"},
		{rule: "two ranges", field: "x_mm", kind: double, comment: "In [1, 2] or [1, 3].", want: "more than one"},
		{rule: "no range", field: "x_mm", kind: double, comment: "At least 1.", want: "does not state"},
	} {
		t.Run(c.rule, func(t *testing.T) {
			t.Parallel()
			q := good()
			if c.change != nil {
				q = c.change(q)
			}
			got := quantityProblems(field(t, c.field, c.kind, q), c.comment)
			switch {
			case c.want == "" && got != nil:
				t.Errorf("a field that is right gives %q", got)
			case c.want != "" && !(len(got) > 0 && strings.Contains(strings.Join(got, "; "), c.want)):
				t.Errorf("got %q, want %q in it", got, c.want)
			}
		})
	}
}

// field makes a field of a message that has a string field "unit" beside it.
func field(t *testing.T, name string, kind descriptorpb.FieldDescriptorProto_Type, q *meniscusv1.Quantity_builder) protoreflect.FieldDescriptor {
	t.Helper()
	options := &descriptorpb.FieldOptions{}
	if q != nil {
		proto.SetExtension(options, meniscusv1.E_Quantity, q.Build())
	}
	optional := descriptorpb.FieldDescriptorProto_LABEL_OPTIONAL
	text := descriptorpb.FieldDescriptorProto_TYPE_STRING
	file, err := protodesc.NewFile(&descriptorpb.FileDescriptorProto{
		Name:       proto.String("made_up.proto"),
		Package:    proto.String("made.up"),
		Syntax:     proto.String("editions"),
		Edition:    descriptorpb.Edition_EDITION_2023.Enum(),
		Dependency: []string{meniscusv1.File_meniscus_v1_quantity_proto.Path()},
		MessageType: []*descriptorpb.DescriptorProto{{
			Name: proto.String("Message"),
			Field: []*descriptorpb.FieldDescriptorProto{
				{Name: &name, Number: proto.Int32(1), Label: &optional, Type: &kind, Options: options},
				{Name: proto.String("unit"), Number: proto.Int32(2), Label: &optional, Type: &text},
			},
		}},
	}, protoregistry.GlobalFiles)
	if err != nil {
		t.Fatal(err)
	}
	return file.Messages().Get(0).Fields().Get(0)
}
