package proto_test

import (
	"slices"
	"strings"
	"testing"

	"google.golang.org/protobuf/reflect/protoreflect"
	"google.golang.org/protobuf/types/descriptorpb"
)

func TestEveryEnumStartsWithUnspecified(t *testing.T) {
	t.Parallel()
	seen := 0
	check := func(enums protoreflect.EnumDescriptors) {
		for i := range enums.Len() {
			seen++
			zero := enums.Get(i).Values().ByNumber(0)
			if zero == nil || !strings.HasSuffix(string(zero.Name()), "_UNSPECIFIED") {
				t.Errorf("%s: its value 0 is not ..._UNSPECIFIED", enums.Get(i).FullName())
			}
		}
	}
	for _, file := range files(t) {
		check(file.Enums())
	}
	for _, message := range messages(t) {
		check(message.Enums())
	}
	if seen == 0 {
		t.Error("no enum was looked at")
	}
}

func TestEveryRPCHasNoSideEffectsAndAComment(t *testing.T) {
	t.Parallel()
	comments := comments(t)
	seen := 0
	for _, file := range files(t) {
		for i := range file.Services().Len() {
			methods := file.Services().Get(i).Methods()
			for j := range methods.Len() {
				seen++
				method := methods.Get(j)
				options := method.Options().(*descriptorpb.MethodOptions)
				if options.GetIdempotencyLevel() != descriptorpb.MethodOptions_NO_SIDE_EFFECTS {
					t.Errorf("%s: is not NO_SIDE_EFFECTS, and every call keeps nothing", method.FullName())
				}
				if comments[strings.TrimPrefix(string(method.FullName()), "meniscus.v1.")] == "" {
					t.Errorf("%s: no comment found", method.FullName())
				}
			}
		}
	}
	if seen == 0 {
		t.Error("no rpc was looked at")
	}
}

// identity are the words in a field's name that ask who somebody is.
var identity = []string{
	"account", "address", "age", "birth", "birthday", "birthdate", "city", "clinic", "country", "customer",
	"dob", "doctor", "email", "fax", "forename", "gender", "insurance", "insurer", "mail", "mobile", "mrn",
	"patient", "person", "phone", "photo", "postcode", "practitioner", "record", "sex", "ssn", "street",
	"surname", "telephone", "user", "username", "zip",
}

// named are the fields that hold the name of a thing. Any other field called a name may be a person's.
var named = map[string]string{
	"DerivationStep.name":            "a step of the calculation",
	"Material.name":                  "a material",
	"Method.name":                    "a published method",
	"NamedValue.name":                "a symbol in a formula",
	"CheckOrderRequest.series_name":  "a series of lenses",
	"RankLensesRequest.series_names": "series of lenses",
	"RankedLens.series_name":         "a series of lenses",
	"Series.name":                    "a series of lenses",
}

// asksForIdentity reports whether a field, by its name ("Message.field"), may hold who somebody is.
func asksForIdentity(field string) bool {
	_, name, _ := strings.Cut(field, ".")
	for _, word := range strings.Split(name, "_") {
		if slices.Contains(identity, word) {
			return true
		}
		if word == "name" || word == "names" {
			if _, ok := named[field]; !ok {
				return true
			}
		}
	}
	return false
}

func TestNoFieldAsksWhoSomebodyIs(t *testing.T) {
	t.Parallel()
	seen := map[string]bool{}
	for _, message := range messages(t) {
		for i := range message.Fields().Len() {
			name := strings.TrimPrefix(string(message.Fields().Get(i).FullName()), "meniscus.v1.")
			seen[name] = true
			if asksForIdentity(name) {
				t.Errorf("%s: nothing here takes an identity; a caller correlates by its own request id", name)
			}
		}
	}
	for name := range named {
		if !seen[name] {
			t.Errorf("%s: is on the list of names of things and not in the schema", name)
		}
	}
	for _, name := range []string{"Eye.patient_id", "Eye.name", "Eye.birth_date", "Lens.first_name", "Eye.email"} {
		if !asksForIdentity(name) {
			t.Errorf("%s: the rule does not see that it asks for an identity", name)
		}
	}
}
