package main

import (
	"testing"

	"google.golang.org/genproto/googleapis/rpc/errdetails"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/status"
	"google.golang.org/protobuf/proto"
	"google.golang.org/protobuf/protoadapt"

	pb "meniscus.example/proto/meniscus/v1"
)

// The answers below are made up to show every part of a page. No engine computed them, and the numbers need not agree.

func sphereCylinder(sphere, cylinder, axis float64) *pb.SphereCylinder {
	m := pb.SphereCylinder_builder{SphereD: &sphere, CylinderD: &cylinder}.Build()
	if cylinder != 0 {
		m.SetAxisDeg(axis)
	}
	return m
}

func provenance() *pb.Provenance {
	return pb.Provenance_builder{
		EngineVersion: proto.String("9.9.9"), SchemaVersion: proto.String("meniscus.v1"),
		Notice: proto.String("A calculated starting point, to be confirmed on the eye by a licensed practitioner under local rules. Fixed for a test."),
	}.Build()
}

func startingPoint() *pb.Caution {
	return pb.Caution_builder{
		Code: pb.CautionCode_CAUTION_CODE_STARTING_POINT.Enum(), Severity: pb.Severity_SEVERITY_NOTE.Enum(),
		Message: proto.String("This is a calculated starting point."), Action: proto.String("confirm it on the eye"), Source: proto.String("definition"),
	}.Build()
}

func value(name string, x float64, unit string) *pb.NamedValue {
	return pb.NamedValue_builder{Name: &name, Value: &x, Unit: &unit}.Build()
}

func derivation() []*pb.DerivationStep {
	step := func(name, formula, source string, result *pb.NamedValue, inputs ...*pb.NamedValue) *pb.DerivationStep {
		return pb.DerivationStep_builder{Name: &name, Formula: &formula, Inputs: inputs, Result: result, Source: &source}.Build()
	}
	return []*pb.DerivationStep{
		step("refraction at the spectacles, M", "S + C/2", "A paper, 1999", value("F_M", -5, "[diop]"), value("S", -4.25, "[diop]"), value("C", -1.5, "[diop]")),
		step("reduced distance", "d/(1000*n)", "definition", value("q", 0.012, "m"), value("d", 12, "mm"), value("n", 1, "1")),
		step("a step with a name so long that the line does not hold it together with its formula", "2*S + J0 - q*q*(S*S)", "A paper, 1999",
			value("X", 123456.789, "m-1"), value("S", 4.25, "[diop]"), value("J0", 0, "[diop]"), value("q", 0.012, "m"), value("a", 175, "deg")),
	}
}

func sphericalFit() *pb.FitResponse {
	over := pb.Refraction_builder{
		SphereD: proto.Float64(0.2502), CylinderD: proto.Float64(-0.2875), AxisDeg: proto.Float64(153.62), VertexDistanceMm: proto.Float64(12),
	}.Build()
	return pb.FitResponse_builder{
		Side: pb.Side_SIDE_RIGHT.Enum(),
		Lens: pb.Lens_builder{
			Kind: pb.LensKind_LENS_KIND_RIGID.Enum(), Toricity: pb.Toricity_TORICITY_SPHERICAL.Enum(),
			BackSurface:     pb.BackSurface_builder{OpticZoneRadiusMm: proto.Float64(7.8), OpticZoneDiameterMm: proto.Float64(8.4)}.Build(),
			TotalDiameterMm: proto.Float64(9.8), CentreThicknessMm: proto.Float64(0.16),
			Material: pb.Material_builder{RefractiveIndex: proto.Float64(1.45)}.Build(),
			Power:    sphereCylinder(-4.25, 0, 0),
		}.Build(),
		RequiredPower:    sphereCylinder(-3.9964, -0.2912, 153.6125),
		OcularRefraction: sphereCylinder(-4.0438, -1.3350, 175),
		TearLens: pb.TearLens_builder{
			Power: sphereCylinder(0, -1.1387, 180), ApexClearanceUm: proto.Float64(0), Index: proto.Float64(1.3375),
		}.Build(),
		OverRefraction: over,
		Residual: pb.Residual_builder{
			BlurStrengthD: proto.Float64(0.1792), AcuityLossLogmar: proto.Float64(0.0137), DecimalAcuity: proto.Float64(0.9689),
			AcuityModel: proto.String("a model of how sight suffers from blur (A paper, 2001)"),
		}.Build(),
		Cautions: []*pb.Caution{startingPoint()},
		Choices: []*pb.Choice{
			pb.Choice_builder{Field: proto.String("lens.total_diameter_mm"), Rule: proto.String("a rule that goes on for so long that it needs a second line of its own"), Source: proto.String("A book, 2001")}.Build(),
			pb.Choice_builder{Field: proto.String("lens.power"), Rule: proto.String("another rule"), Source: proto.String("common practice")}.Build(),
			pb.Choice_builder{Field: proto.String("some.new_field"), Rule: proto.String("a rule of a later version"), Source: proto.String("A book, 2030")}.Build(),
		},
		Provenance: provenance(),
	}.Build()
}

// fullFit has everything that an answer can have: a toric back, a material with a name and Dk, cautions of every severity and
// one of a later version, and a derivation.
func fullFit() *pb.FitResponse {
	m := sphericalFit()
	m.SetSide(pb.Side_SIDE_LEFT)
	lens := m.GetLens()
	lens.SetToricity(pb.Toricity_TORICITY_BITORIC)
	lens.GetBackSurface().SetOpticZoneRadiusMm(8.125)
	lens.GetBackSurface().SetSteepRadiusMm(7.5)
	lens.GetBackSurface().SetFlatMeridianDeg(172.5)
	lens.GetMaterial().SetName("invented XP")
	lens.GetMaterial().SetDk(100)
	lens.SetPower(sphereCylinder(12.375, -3.125, 172.5))
	m.SetRequiredPower(sphereCylinder(-12.3964, -13.2912, 153.6125))
	m.SetOxygen(pb.Oxygen_builder{DkTCentre: proto.Float64(62.5)}.Build())
	m.SetDerivation(derivation())
	m.SetCautions([]*pb.Caution{
		pb.Caution_builder{
			Code: pb.CautionCode_CAUTION_CODE_VERTEX_ASSUMED.Enum(), Severity: pb.Severity_SEVERITY_NOTE.Enum(),
			Message: proto.String("No vertex distance was given: 12 mm is assumed."), Field: proto.String("eye.refraction.vertex_distance_mm"),
			Action: proto.String("measure the vertex distance and give it"), Source: proto.String("common practice"),
		}.Build(),
		pb.Caution_builder{
			Code: pb.CautionCode(57).Enum(), Severity: pb.Severity_SEVERITY_ADVICE.Enum(), Message: proto.String("Something that this program has not heard of."),
			Value: proto.Float64(15.25), Unit: proto.String("deg"),
		}.Build(),
		pb.Caution_builder{
			Code: pb.CautionCode_CAUTION_CODE_RESIDUAL_ASTIGMATISM.Enum(), Severity: pb.Severity_SEVERITY_WARNING.Enum(),
			Message: proto.String("The lens is predicted to leave 1.62 D of astigmatism; 0.75 D and more may reduce vision."),
			Value:   proto.Float64(1.62), Limit: proto.Float64(1.5), Unit: proto.String("[diop]"), Field: proto.String("over_refraction.cylinder_d"),
			Action: proto.String("check with an over-refraction"), Source: proto.String("A paper, 2002"),
		}.Build(),
		startingPoint(),
	})
	return m
}

// refused is a status with details.
func refused(t *testing.T, code codes.Code, message string, details ...protoadapt.MessageV1) error {
	t.Helper()
	st, err := status.New(code, message).WithDetails(details...)
	if err != nil {
		t.Fatal(err)
	}
	return st.Err()
}

func invalid(t *testing.T) error {
	t.Helper()
	violation := func(field, text string) *errdetails.BadRequest_FieldViolation {
		return &errdetails.BadRequest_FieldViolation{Field: field, Description: text}
	}
	return refused(t, codes.InvalidArgument, "all of it in one line", &errdetails.BadRequest{FieldViolations: []*errdetails.BadRequest_FieldViolation{
		violation("eye.refraction.sphere_d", "is -425 D, outside [-40, 30] D; looks like a power in hundredths of a dioptre (-425 for -4.25)"),
		violation("eye.refraction.vertex_distance_mm", "is 62 mm, outside [0, 20] mm; looks like a pupillary distance"),
		violation("eye.keratometry.flat.radius_mm", "is 43 mm, outside [4.5, 11] mm"),
		violation("plan.some_new_field", "is missing"),
	}}, &errdetails.ErrorInfo{Reason: "INVALID_FIELDS", Domain: "meniscus.example"})
}

func impossible(t *testing.T) error {
	t.Helper()
	violation := func(field string) *errdetails.PreconditionFailure_Violation {
		return &errdetails.PreconditionFailure_Violation{Type: "IMPOSSIBLE_LENS", Subject: field, Description: "leave no lens; a smaller one would work"}
	}
	return refused(t, codes.FailedPrecondition, "all of it in one line", &errdetails.PreconditionFailure{Violations: []*errdetails.PreconditionFailure_Violation{
		violation("lens.back_surface.optic_zone_radius_mm"), violation("lens.total_diameter_mm"),
	}}, &errdetails.ErrorInfo{Reason: "IMPOSSIBLE_LENS", Domain: "meniscus.example"})
}
