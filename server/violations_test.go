package server

import (
	"context"
	"slices"
	"strings"
	"testing"
	"time"

	"google.golang.org/grpc/codes"
	"google.golang.org/protobuf/proto"

	"meniscus.example/optics/unit"
	pb "meniscus.example/proto/meniscus/v1"
)

func TestAFaultIsKnownOfWhatHoldsItAndOfWhatItHolds(t *testing.T) {
	t.Parallel()
	var v violations
	v.add("eye.keratometry.flat", "is missing", "")
	v.add("terms", "is too long", "")
	v.add("chords_mm[3]", "is wrong", "")
	for field, want := range map[string]bool{
		"eye": true, "eye.keratometry": true, "eye.keratometry.flat": true, "eye.keratometry.flat.radius_mm": true,
		"eye.keratometry.fla": false, "eye.keratometry.flatter": false, "eye.keratometry.steep": false,
		"terms[7]": true, "terms[7].sphere_cylinder": true, "term": false, "terms_mm": false,
		"chords_mm": true, "chords_mm[3]": true, "chords_mm[30]": false, "chords_mm[2]": false,
	} {
		if got := v.has(field); got != want {
			t.Errorf("%s: %v", field, got)
		}
	}
}

func TestWhatTheCoreFindsIsNamedOnce(t *testing.T) {
	t.Parallel()
	var v violations
	v.add("a.b", "is wrong", "")
	v.merge([]error{&unit.FieldError{Field: "a.b", Problem: "again"}, &unit.FieldError{Field: "a.c", Problem: "is wrong", LooksLike: "a d"}})
	if _, _, fields := details(t, v.err()); !slices.Equal(fields, []string{"a.b", "a.c"}) {
		t.Errorf("%v", fields)
	}
	if text := v.err().Error(); !strings.HasSuffix(text, "a.b: is wrong | a.c: is wrong; looks like a d") {
		t.Error(text)
	}
}

// A request of the greatest size, wrong in every item, is refused quickly, on a connection that lives on, with an error that fits a header.
func TestARequestWithMoreFaultsThanAnybodyReadsIsRefusedAtOnce(t *testing.T) {
	t.Parallel()
	client := pb.NewRefractionServiceClient(dial(t, New(Options{})))
	ctx, cancel := context.WithTimeout(context.Background(), 20*time.Second)
	defer cancel()
	for name, term := range map[string]*pb.Term{
		"nothing":   {},
		"no sphere": pb.Term_builder{SphereCylinder: &pb.SphereCylinder{}}.Build(),
	} {
		req := pb.CombineRequest_builder{Terms: slices.Repeat([]*pb.Term{term}, 250_000)}.Build()
		if size := proto.Size(req); size > 1<<20 {
			t.Fatalf("%d bytes are too many to be looked at", size)
		}
		_, err := client.Combine(ctx, req)
		code, reason, fields := details(t, err)
		if code != codes.InvalidArgument || reason != reasonInvalidFields || len(fields) == 0 || len(fields) > mostFaults || fields[0] != "terms" {
			t.Errorf("%s: %v with %d fields: %.200v", name, code, len(fields), err)
		}
	}
	if _, err := client.Combine(ctx, pb.CombineRequest_builder{Terms: slices.Repeat([]*pb.Term{{}}, 100)}.Build()); len(namedFields(err)) != 100 {
		t.Errorf("as many faults as there are terms: %d", len(namedFields(err)))
	}
	wrong := pb.SphereCylinder_builder{SphereD: proto.Float64(9999), CylinderD: proto.Float64(9999), AxisDeg: proto.Float64(9999)}.Build()
	_, err := client.Combine(ctx, pb.CombineRequest_builder{Terms: slices.Repeat([]*pb.Term{pb.Term_builder{SphereCylinder: wrong}.Build()}, 100)}.Build())
	if len(namedFields(err)) != mostFaults || !strings.HasSuffix(err.Error(), "and more, which are not listed") {
		t.Errorf("%d fields: %.200v", len(namedFields(err)), err)
	}
}

func namedFields(err error) []string {
	_, _, fields := codeAndFields(err)
	return fields
}
