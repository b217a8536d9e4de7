package server

import (
	"context"
	"math"
	"slices"
	"strings"
	"testing"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// call answers a Fit in the process, through the interceptors.
func call(req *pb.FitRequest) (*pb.FitResponse, error) {
	res, err := New(Options{}).Call(context.Background(), pb.FittingService_Fit_FullMethodName, func(in any) error {
		proto.Merge(in.(*pb.FitRequest), req)
		return nil
	})
	if err != nil {
		return nil, err
	}
	return res.(*pb.FitResponse), nil
}

// codeAndFields are the code of an error, its message, and the fields that it names.
func codeAndFields(err error) (codes.Code, string, []string) {
	st := status.Convert(err)
	var fields []string
	for _, d := range st.Details() {
		switch d := d.(type) {
		case *errdetails.BadRequest:
			for _, f := range d.GetFieldViolations() {
				fields = append(fields, f.GetField())
			}
		case *errdetails.PreconditionFailure:
			for _, f := range d.GetViolations() {
				fields = append(fields, f.GetSubject())
			}
		}
	}
	return st.Code(), st.Message(), fields
}

// details are the code, the reason, and the fields that an error names; it fails on a status without exactly one ErrorInfo.
func details(t testing.TB, err error) (codes.Code, string, []string) {
	t.Helper()
	code, message, fields := codeAndFields(err)
	var reason string
	infos := 0
	for _, d := range status.Convert(err).Details() {
		switch d := d.(type) {
		case *errdetails.ErrorInfo:
			infos++
			reason = d.GetReason()
			if d.GetDomain() != domain {
				t.Errorf("domain %q", d.GetDomain())
			}
		case *errdetails.BadRequest:
			for _, f := range d.GetFieldViolations() {
				if f.GetDescription() == "" || !strings.Contains(message, f.GetField()) {
					t.Errorf("%s: %q; the message is %q", f.GetField(), f.GetDescription(), message)
				}
			}
		}
	}
	if err != nil && infos != 1 {
		t.Errorf("%d ErrorInfo in %v", infos, err)
	}
	return code, reason, fields
}

func near(got, want, tol float64) bool { return math.Abs(got-want) <= tol }

func TestAFitIsConsistent(t *testing.T) {
	t.Parallel()
	req := fitRequest()
	res, err := call(req)
	if err != nil {
		t.Fatal(err)
	}
	// By hand. At the cornea: -5.50/(1 + 0.013 × 5.50) and -7.25/(1 + 0.013 × 7.25). The tear lens: nothing along the flat meridian,
	// where the lens is on K, and 337.5/7.95 - 337.5/7.70 along the steep one.
	k, tears := res.GetOcularRefraction(), res.GetTearLens()
	if !near(k.GetSphereD(), -5.5/1.0715, 1e-12) || !near(k.GetSphereD()+k.GetCylinderD(), -7.25/1.09425, 1e-12) || !near(k.GetAxisDeg(), 170, 1e-9) {
		t.Errorf("at the cornea %v", k)
	}
	if p := tears.GetPower(); !near(p.GetSphereD(), 0, 1e-12) || !near(p.GetCylinderD(), 337.5/7.95-337.5/7.7, 1e-12) || !near(p.GetAxisDeg(), 175, 1e-9) || tears.GetIndex() != 1.3375 {
		t.Errorf("tear lens %v", tears)
	}
	if l := res.GetLens(); l.GetBackSurface().GetOpticZoneRadiusMm() != 7.95 || l.GetPower().GetSphereD() != -5.25 || l.GetToricity() != pb.Toricity_TORICITY_SPHERICAL ||
		l.GetKind() != pb.LensKind_LENS_KIND_RIGID || !l.GetPower().HasCylinderD() || l.GetPower().HasAxisDeg() {
		t.Errorf("lens %v", l)
	}
	if res.GetSide() != pb.Side_SIDE_RIGHT || res.GetOverRefraction().GetVertexDistanceMm() != 13 || len(res.GetDerivation()) > 0 {
		t.Errorf("%v", res)
	}

	// The lens of the answer, sent back, is kept and leaves the same.
	again := proto.CloneOf(req)
	again.SetLens(res.GetLens())
	kept, err := call(again)
	if err != nil {
		t.Fatal(err)
	}
	if !proto.Equal(kept.GetOverRefraction(), res.GetOverRefraction()) || !proto.Equal(kept.GetLens(), res.GetLens()) {
		t.Errorf("kept: %v leaves %v", kept.GetLens(), kept.GetOverRefraction())
	}

	plus := proto.CloneOf(req)
	plus.SetPlan(pb.FitPlan_builder{CylinderForm: pb.CylinderForm_CYLINDER_FORM_PLUS.Enum(), Explain: proto.Bool(true)}.Build())
	turned, err := call(plus)
	if err != nil || turned.GetRequiredPower().GetCylinderD() <= 0 || len(turned.GetDerivation()) < 40 {
		t.Errorf("plus form: %v, %v", turned.GetRequiredPower(), err)
	}
}

func TestEveryToricityGoesBackToTheServer(t *testing.T) {
	t.Parallel()
	for _, toricity := range []pb.Toricity{pb.Toricity_TORICITY_SPHERICAL, pb.Toricity_TORICITY_FRONT, pb.Toricity_TORICITY_BACK, pb.Toricity_TORICITY_BITORIC} {
		for _, form := range []pb.CylinderForm{pb.CylinderForm_CYLINDER_FORM_MINUS, pb.CylinderForm_CYLINDER_FORM_PLUS} {
			req := fitRequest()
			req.GetEye().GetKeratometry().GetSteep().SetRadiusMm(7.4)
			req.SetPlan(pb.FitPlan_builder{Toricity: toricity.Enum(), CylinderForm: form.Enum()}.Build())
			res, err := call(req)
			if err != nil {
				t.Fatal(err)
			}
			if res.GetLens().GetToricity() != toricity {
				t.Errorf("asked for %v, got %v", toricity, res.GetLens().GetToricity())
			}
			req.SetLens(res.GetLens())
			kept, err := call(req)
			if err != nil {
				t.Fatalf("%v: %v", toricity, err)
			}
			if a, b := kept.GetResidual().GetBlurStrengthD(), res.GetResidual().GetBlurStrengthD(); !near(a, b, 1e-9) {
				t.Errorf("%v: leaves %v, sent back %v", toricity, b, a)
			}
		}
	}
}

func TestBadInputNamesItsFields(t *testing.T) {
	t.Parallel()
	nan, inf := math.NaN(), math.Inf(1)
	for name, c := range map[string]struct {
		change func(*pb.FitRequest)
		want   []string
	}{
		"an empty request": {func(r *pb.FitRequest) { proto.Reset(r) }, []string{"eye"}},
		"an empty eye":     {func(r *pb.FitRequest) { r.SetEye(&pb.Eye{}) }, []string{"eye.refraction", "eye.keratometry"}},
		"empty parts": {func(r *pb.FitRequest) {
			r.SetEye(pb.Eye_builder{Refraction: &pb.Refraction{}, Keratometry: &pb.Keratometry{}, CorneaShape: &pb.CorneaShape{}}.Build())
		}, []string{"eye.cornea_shape", "eye.refraction.sphere_d", "eye.keratometry.flat", "eye.keratometry.steep"}},
		"no numbers": {func(r *pb.FitRequest) {
			r.GetEye().GetRefraction().SetSphereD(nan)
			r.GetEye().GetRefraction().SetVertexDistanceMm(inf)
			r.GetEye().GetKeratometry().GetFlat().SetRadiusMm(-inf)
			r.GetEye().GetKeratometry().GetSteep().SetMeridianDeg(1e308)
		}, []string{"eye.refraction.sphere_d", "eye.refraction.vertex_distance_mm", "eye.keratometry.flat.radius_mm", "eye.keratometry.steep.meridian_deg"}},
		"unknown enum values": {func(r *pb.FitRequest) {
			r.GetEye().SetSide(99)
			r.SetLens(pb.Lens_builder{Kind: pb.LensKind(77).Enum(), Toricity: pb.Toricity(-1).Enum()}.Build())
		}, []string{"eye.side", "lens.kind", "lens.toricity"}},
		"dioptres as millimetres": {func(r *pb.FitRequest) { r.GetEye().GetKeratometry().GetFlat().SetRadiusMm(43) }, []string{"eye.keratometry.flat.radius_mm"}},
		"millimetres as dioptres": {func(r *pb.FitRequest) { r.GetEye().GetKeratometry().GetFlat().SetPowerD(7.8) }, []string{"eye.keratometry.flat.power_d"}},
		"flat and steep exchanged": {func(r *pb.FitRequest) {
			k := r.GetEye().GetKeratometry()
			flat, steep := k.GetFlat(), k.GetSteep()
			k.SetFlat(steep)
			k.SetSteep(flat)
		}, []string{"eye.keratometry.flat.radius_mm"}},
		"axis 181":              {func(r *pb.FitRequest) { r.GetEye().GetRefraction().SetAxisDeg(181) }, []string{"eye.refraction.axis_deg"}},
		"axis -1":               {func(r *pb.FitRequest) { r.GetEye().GetRefraction().SetAxisDeg(-1) }, []string{"eye.refraction.axis_deg"}},
		"cylinder without axis": {func(r *pb.FitRequest) { r.GetEye().GetRefraction().ClearAxisDeg() }, []string{"eye.refraction.axis_deg"}},
		"no vertex distance":    {func(r *pb.FitRequest) { r.GetEye().GetRefraction().ClearVertexDistanceMm() }, []string{"eye.refraction.vertex_distance_mm"}},
		"wider than any eye":    {func(r *pb.FitRequest) { r.SetLens(pb.Lens_builder{TotalDiameterMm: proto.Float64(26)}.Build()) }, []string{"lens.total_diameter_mm"}},
		"wider than a cornea":   {func(r *pb.FitRequest) { r.SetLens(pb.Lens_builder{TotalDiameterMm: proto.Float64(15)}.Build()) }, []string{"lens.total_diameter_mm"}},
		"a toric power with only a sphere": {func(r *pb.FitRequest) {
			r.SetLens(pb.Lens_builder{Toricity: pb.Toricity_TORICITY_BITORIC.Enum(), Power: pb.SphereCylinder_builder{SphereD: proto.Float64(-3)}.Build()}.Build())
		}, []string{"lens.power.cylinder_d"}},
		"what this version does not compute": {func(r *pb.FitRequest) {
			r.SetLens(pb.Lens_builder{
				Kind: pb.LensKind_LENS_KIND_SOFT.Enum(), PrismPd: proto.Float64(1), AddD: proto.Float64(1), FrontSurface: &pb.FrontSurface{},
				BackSurface: pb.BackSurface_builder{OpticZoneShape: &pb.CorneaShape{}, PeripheralZones: []*pb.Zone{{}}, OpticZoneRadiusMm: proto.Float64(7.8)}.Build(),
			}.Build())
			r.SetPlan(pb.FitPlan_builder{
				BackCurveRule: pb.BackCurveRule_BACK_CURVE_RULE_CLEARANCE.Enum(), WantedApexClearanceUm: proto.Float64(15), Wear: pb.Wear_WEAR_OVERNIGHT.Enum(),
				Uncertainties: &pb.Uncertainties{}, BackCurveOffsetD: proto.Float64(0.5),
			}.Build())
			r.GetEye().GetRefraction().SetAddD(2)
		}, []string{"lens.kind", "plan.back_curve_rule", "plan.wanted_apex_clearance_um", "plan.uncertainties", "plan.wear", "lens.front_surface",
			"lens.back_surface.optic_zone_shape", "lens.back_surface.peripheral_zones", "lens.prism_pd", "lens.add_d", "eye.refraction.add_d",
			"plan.back_curve_offset_d"}},
	} {
		req := fitRequest()
		c.change(req)
		res, err := call(req)
		code, reason, fields := details(t, err)
		if code != codes.InvalidArgument || reason != reasonInvalidFields || !slices.Equal(fields, c.want) {
			t.Errorf("%s: %v %s %v, want %v (%v)", name, code, reason, fields, c.want, res)
		}
	}
}

func TestUnusualInputGetsTheRightAnswer(t *testing.T) {
	t.Parallel()
	answer := func(change func(*pb.FitRequest)) *pb.FitResponse {
		t.Helper()
		req := fitRequest()
		change(req)
		res, err := call(req)
		if err != nil {
			t.Fatal(err)
		}
		return res
	}
	same := func(name string, a, b *pb.FitResponse) {
		t.Helper()
		if !proto.Equal(a, b) {
			t.Errorf("%s: %v and %v", name, a, b)
		}
	}
	axis := func(deg float64) func(*pb.FitRequest) {
		return func(r *pb.FitRequest) { r.GetEye().GetRefraction().SetAxisDeg(deg) }
	}
	same("an axis of 0 and of 180", answer(axis(0)), answer(axis(180)))
	same("a negative zero of an axis", answer(axis(math.Copysign(0, -1))), answer(axis(180)))
	sphere := func(d float64) func(*pb.FitRequest) {
		return func(r *pb.FitRequest) { r.GetEye().GetRefraction().SetSphereD(d) }
	}
	same("a negative zero", answer(sphere(math.Copysign(0, -1))), answer(sphere(0)))
	if res := answer(sphere(5e-324)); !near(res.GetRequiredPower().GetSphereD(), answer(sphere(0)).GetRequiredPower().GetSphereD(), 1e-12) {
		t.Errorf("a denormal: %v", res.GetRequiredPower())
	}
	weak := answer(func(r *pb.FitRequest) {
		r.GetEye().GetRefraction().SetSphereD(-2)
		r.GetEye().GetRefraction().ClearVertexDistanceMm()
	})
	if weak.GetOverRefraction().GetVertexDistanceMm() != 12 || !slices.ContainsFunc(weak.GetCautions(), func(c *pb.Caution) bool {
		return c.GetCode() == pb.CautionCode_CAUTION_CODE_VERTEX_ASSUMED && c.GetField() == "eye.refraction.vertex_distance_mm"
	}) {
		t.Errorf("no vertex distance and a weak refraction: %v", weak)
	}
	if res := answer(func(r *pb.FitRequest) { r.GetEye().GetRefraction().SetVertexDistanceMm(0) }); !near(res.GetOcularRefraction().GetSphereD(), -5.5, 0) {
		t.Errorf("at the cornea: %v", res.GetOcularRefraction())
	}
}

func TestImpossibleLensesAreFailedPreconditions(t *testing.T) {
	t.Parallel()
	req := fitRequest()
	req.SetLens(pb.Lens_builder{Power: pb.SphereCylinder_builder{SphereD: proto.Float64(60)}.Build()}.Build())
	_, err := call(req)
	if code, reason, fields := details(t, err); code != codes.FailedPrecondition || reason != reasonImpossibleLens || !slices.Equal(fields, []string{"lens.power"}) {
		t.Errorf("%v %s %v", code, reason, fields)
	}
}

func TestEveryCautionCodeIsListed(t *testing.T) {
	t.Parallel()
	res, err := referenceService{}.ListCautions(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	values := pb.CautionCode(0).Descriptor().Values()
	if len(res.GetCautions()) != values.Len()-1 {
		t.Errorf("%d cautions for %d codes", len(res.GetCautions()), values.Len()-1)
	}
	names := map[pb.CautionCode]string{}
	for _, c := range res.GetCautions() {
		names[c.GetCode()] = c.GetMeaning()
	}
	// The numbers of the core are those of the schema: one of each kind, by its meaning.
	for code, text := range map[pb.CautionCode]string{
		pb.CautionCode_CAUTION_CODE_STARTING_POINT: "calculated", pb.CautionCode_CAUTION_CODE_VERTEX_ASSUMED: "vertex",
		pb.CautionCode_CAUTION_CODE_CORNEA_STEEP: "above 47.2 D", pb.CautionCode_CAUTION_CODE_CORNEA_FLAT: "below 38.8 D",
		pb.CautionCode_CAUTION_CODE_CORNEAL_ASTIGMATISM_HIGH: "corneal astigmatism", pb.CautionCode_CAUTION_CODE_RESIDUAL_ASTIGMATISM: "over-refraction has a cylinder",
		pb.CautionCode_CAUTION_CODE_MERIDIANS_NOT_PERPENDICULAR: "perpendicular", pb.CautionCode_CAUTION_CODE_POWER_UNCOMMON: "20.00 D",
		pb.CautionCode_CAUTION_CODE_KERATOMETRY_EXTENDED: "auxiliary", pb.CautionCode_CAUTION_CODE_STABILISATION_NEEDED: "ballast",
		pb.CautionCode_CAUTION_CODE_RESIDUAL_SPHERE: "spherical equivalent",
	} {
		if !strings.Contains(names[code], text) {
			t.Errorf("%v: %q", code, names[code])
		}
	}
	methods, err := referenceService{}.ListMethods(context.Background(), nil)
	if err != nil || len(methods.GetMethods()) == 0 {
		t.Error(methods, err)
	}
	for _, m := range methods.GetMethods() {
		if m.GetName() == "" || m.GetPurpose() == "" || m.GetFormula() == "" || m.GetSource() == "" {
			t.Error(m)
		}
	}
}
