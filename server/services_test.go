package server

import (
	"context"
	"slices"
	"testing"

	"google.golang.org/grpc/codes"
	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/reflect/protoreflect"
	"pgregory.net/rapid"

	pb "meniscus.example/proto/meniscus/v1"
)

func TestTransferVertexAnswersAsPublished(t *testing.T) {
	t.Parallel()
	s := refractionService{door: newDoor(requests()...)}
	// AAO, BCSC Clinical Optics: -7.00 D at 15 mm is -6.3 D at the cornea.
	res, err := s.TransferVertex(context.Background(), pb.TransferVertexRequest_builder{
		Refraction: pb.Refraction_builder{SphereD: proto.Float64(-7), VertexDistanceMm: proto.Float64(15)}.Build(),
	}.Build())
	if err != nil || !near(res.GetPower().GetSphereD(), -6.3, 0.05) || res.GetPower().HasAxisDeg() || res.GetVertexDistanceMm() != 0 {
		t.Errorf("%v, %v", res, err)
	}
}

func TestCombineAnswersAsPublished(t *testing.T) {
	t.Parallel()
	s := refractionService{door: newDoor(requests()...)}
	term := func(sphere, cylinder, axis float64) *pb.Term {
		return pb.Term_builder{SphereCylinder: pb.SphereCylinder_builder{SphereD: &sphere, CylinderD: &cylinder, AxisDeg: &axis}.Build()}.Build()
	}
	// The Indian Optician, May-June 2022, p. 105.
	res, err := s.Combine(context.Background(), pb.CombineRequest_builder{Terms: []*pb.Term{term(1.75, 0.5, 45), term(-2.25, -1, 135)}}.Build())
	if p := res.GetPower(); err != nil || !near(p.GetSphereD(), 0, 1e-12) || !near(p.GetCylinderD(), -1.5, 1e-12) || !near(p.GetAxisDeg(), 135, 1e-9) {
		t.Errorf("%v, %v", res, err)
	}
}

func TestBadInputOfTheOtherServicesNamesItsFields(t *testing.T) {
	t.Parallel()
	d := newDoor(requests()...)
	r, c, ctx := refractionService{door: d}, corneaService{door: d}, context.Background()
	transfer := func(m pb.TransferVertexRequest_builder) error { _, err := r.TransferVertex(ctx, m.Build()); return err }
	combine := func(m pb.CombineRequest_builder) error { _, err := r.Combine(ctx, m.Build()); return err }
	express := func(m pb.ExpressRequest_builder) error { _, err := r.Express(ctx, m.Build()); return err }
	describe := func(m pb.DescribeCorneaRequest_builder) error { _, err := c.DescribeCornea(ctx, m.Build()); return err }
	x := proto.Float64
	strong := pb.Term_builder{SphereCylinder: pb.SphereCylinder_builder{SphereD: x(90)}.Build()}.Build()
	short := pb.Keratometry_builder{Flat: pb.MeridianReading_builder{RadiusMm: x(4.5)}.Build(), Steep: pb.MeridianReading_builder{RadiusMm: x(4.5)}.Build()}.Build()
	for name, e := range map[string]struct {
		err    error
		code   codes.Code
		fields []string
	}{
		"no refraction": {transfer(pb.TransferVertexRequest_builder{}), codes.InvalidArgument, []string{"refraction"}},
		"far away": {transfer(pb.TransferVertexRequest_builder{ToVertexDistanceMm: x(99), Refraction: pb.Refraction_builder{SphereD: x(-5), CylinderD: x(1)}.Build()}),
			codes.InvalidArgument, []string{"to_vertex_distance_mm", "refraction.axis_deg"}},
		"a focus on the way": {transfer(pb.TransferVertexRequest_builder{ToVertexDistanceMm: x(20),
			Refraction: pb.Refraction_builder{SphereD: x(-40), CylinderD: x(-12), AxisDeg: x(5), VertexDistanceMm: x(0)}.Build()}),
			codes.FailedPrecondition, []string{"to_vertex_distance_mm"}},
		"no terms":        {combine(pb.CombineRequest_builder{}), codes.InvalidArgument, []string{"terms"}},
		"an empty term":   {combine(pb.CombineRequest_builder{Terms: []*pb.Term{strong, {}}}), codes.InvalidArgument, []string{"terms[1]"}},
		"beyond any":      {combine(pb.CombineRequest_builder{Terms: []*pb.Term{strong, strong}}), codes.FailedPrecondition, []string{"terms"}},
		"no power":        {express(pb.ExpressRequest_builder{}), codes.InvalidArgument, []string{"sphere_cylinder"}},
		"no mean":         {express(pb.ExpressRequest_builder{PowerVector: &pb.PowerVector{}}), codes.InvalidArgument, []string{"power_vector.mean_d"}},
		"too strong":      {express(pb.ExpressRequest_builder{PowerVector: pb.PowerVector_builder{MeanD: x(99), J0D: x(20)}.Build()}), codes.FailedPrecondition, []string{"power_vector"}},
		"no sphere":       {express(pb.ExpressRequest_builder{SphereCylinder: &pb.SphereCylinder{}}), codes.InvalidArgument, []string{"sphere_cylinder.sphere_d"}},
		"no readings":     {describe(pb.DescribeCorneaRequest_builder{}), codes.InvalidArgument, []string{"keratometry"}},
		"past the limbus": {describe(pb.DescribeCorneaRequest_builder{Keratometry: short, ChordsMm: []float64{9, 13}}), codes.InvalidArgument, []string{"chords_mm[1]"}},
		"past its end": {describe(pb.DescribeCorneaRequest_builder{Keratometry: short, ChordsMm: []float64{8, 11}, CorneaShape: pb.CorneaShape_builder{ShapeFactorP: x(1)}.Build()}),
			codes.FailedPrecondition, []string{"chords_mm[1]"}},
		"too many chords": {describe(pb.DescribeCorneaRequest_builder{Keratometry: short, ChordsMm: slices.Repeat([]float64{8}, 33)}), codes.InvalidArgument, []string{"chords_mm"}},
	} {
		if code, _, fields := details(t, e.err); code != e.code || !slices.Equal(fields, e.fields) {
			t.Errorf("%s: %v %v, want %v %v (%v)", name, code, fields, e.code, e.fields, e.err)
		}
	}
}

// within reports the numbers of an answer that are outside their own limits: an answer obeys the schema as a request does.
func within(t interface{ Fatalf(string, ...any) }, m protoreflect.ProtoMessage) {
	var v violations
	d := newDoor(m.ProtoReflect().Descriptor())
	for _, p := range d.plans {
		for i, c := range p.fields {
			if c.kind == protoreflect.StringKind {
				p.fields[i].kind = protoreflect.BoolKind // texts of an answer may be long
			}
		}
	}
	d.check(&v, m)
	if v.list != nil {
		t.Fatalf("outside their limits: %v in %v", v.list, m)
	}
}

// Whatever is sent within the limits of the schema gets an answer within them, with its cautions and its notice, or an error of the caller's.
func TestEveryRequestGetsAnAnswerWithinItsLimitsOrAClearError(t *testing.T) {
	t.Parallel()
	s := New(Options{})
	rapid.Check(t, func(t *rapid.T) {
		req := &pb.FitRequest{}
		fill(t, req.ProtoReflect(), "", 0)
		answered := answer(t, s, req)
		if res, ok := answered.(*pb.FitResponse); ok {
			within(t, res)
			if len(res.GetCautions()) == 0 || res.GetProvenance().GetNotice() == "" || !res.GetLens().HasPower() {
				t.Fatalf("%v", res)
			}
		}
	})
}

func answer(t *rapid.T, s *Server, req *pb.FitRequest) any {
	res, err := s.Call(context.Background(), pb.FittingService_Fit_FullMethodName, func(in any) error {
		proto.Merge(in.(*pb.FitRequest), req)
		return nil
	})
	if err == nil {
		return res
	}
	switch code, _, fields := codeAndFields(err); {
	case code != codes.InvalidArgument && code != codes.FailedPrecondition:
		t.Fatalf("%v for %v", err, req)
	case len(fields) == 0:
		t.Fatalf("%v names no field", err)
	}
	return nil
}

// fill puts numbers within their limits into the fields that a fit of this version takes.
func fill(t *rapid.T, m protoreflect.Message, path string, depth int) {
	required := map[string]bool{
		"eye": true, "eye.refraction": true, "eye.refraction.sphere_d": true, "eye.refraction.axis_deg": true, "eye.refraction.vertex_distance_mm": true,
		"eye.keratometry": true, "eye.keratometry.flat": true, "eye.keratometry.steep": true,
		"eye.keratometry.flat.meridian_deg": true, "eye.keratometry.flat.radius_mm": true, "eye.keratometry.steep.radius_mm": true,
	}
	left := map[string]bool{
		"eye.refraction.add_d": true, "lens.front_surface": true, "lens.back_surface.optic_zone_shape": true, "lens.add_d": true, "lens.prism_pd": true,
		"lens.kind": true, "plan.uncertainties": true, "plan.wear": true, "plan.back_curve_rule": true, "plan.wanted_apex_clearance_um": true,
		"eye.keratometry.flat.power_d": true, "eye.keratometry.steep.power_d": true, "eye.keratometry.steep.meridian_deg": true,
		"eye.keratometry.flat.auxiliary_lens_d": true, "eye.keratometry.steep.auxiliary_lens_d": true,
	}
	for i := range m.Descriptor().Fields().Len() {
		f := m.Descriptor().Fields().Get(i)
		at := path + string(f.Name())
		if left[at] || f.IsList() || !required[at] && !rapid.Bool().Draw(t, at+" there") {
			continue
		}
		switch f.Kind() {
		case protoreflect.MessageKind:
			fill(t, m.Mutable(f).Message(), at+".", depth+1)
		case protoreflect.DoubleKind:
			q := proto.GetExtension(f.Options(), pb.E_Quantity).(*pb.Quantity)
			m.Set(f, protoreflect.ValueOfFloat64(rapid.Float64Range(q.GetMinimum(), q.GetMaximum()).Draw(t, at)))
		case protoreflect.EnumKind:
			m.Set(f, protoreflect.ValueOfEnum(protoreflect.EnumNumber(rapid.IntRange(0, f.Enum().Values().Len()-1).Draw(t, at))))
		case protoreflect.BoolKind:
			m.Set(f, protoreflect.ValueOfBool(rapid.Bool().Draw(t, at)))
		}
	}
}

// FuzzFit sends whatever bytes are a FitRequest.
func FuzzFit(f *testing.F) {
	for _, req := range []*pb.FitRequest{{}, fitRequest(), benchmarkFitRequest()} {
		b, err := proto.Marshal(req)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(b)
	}
	s := New(Options{})
	f.Fuzz(func(t *testing.T, b []byte) {
		req := &pb.FitRequest{}
		if proto.Unmarshal(b, req) != nil {
			return
		}
		res, err := s.Call(context.Background(), pb.FittingService_Fit_FullMethodName, func(in any) error {
			proto.Merge(in.(*pb.FitRequest), req)
			return nil
		})
		if err != nil {
			if code, _, _ := codeAndFields(err); code != codes.InvalidArgument && code != codes.FailedPrecondition {
				t.Fatalf("%v for %v", err, req)
			}
			return
		}
		within(t, res.(*pb.FitResponse))
	})
}
