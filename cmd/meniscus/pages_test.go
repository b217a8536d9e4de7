package main

import (
	"testing"

	"google.golang.org/protobuf/encoding/protojson"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

func vectorOf(m, j0, j45 float64) *pb.PowerVector {
	return pb.PowerVector_builder{MeanD: &m, J0D: &j0, J45D: &j45}.Build()
}

func meridianOf(radius, power float64, along *float64) *pb.PrincipalMeridian {
	return pb.PrincipalMeridian_builder{RadiusMm: &radius, PowerD: &power, MeridianDeg: along}.Build()
}

func powerAlong(power float64, along *float64) *pb.MeridianPower {
	return pb.MeridianPower_builder{PowerD: &power, MeridianDeg: along}.Build()
}

// The other commands: what they ask for, and how they lay out an answer that is made up.
func TestEveryCommandAsksForWhatWasWrittenAndLaysOutTheAnswer(t *testing.T) {
	t.Parallel()
	deg := proto.Float64
	starting := []*pb.Caution{startingPoint()}
	transfer := pb.TransferVertexResponse_builder{
		Power: sphereCylinder(-6.4576, -2.471, 180), PowerVector: vectorOf(-7.6931, 1.2355, 0), VertexDistanceMm: proto.Float64(0),
		Cautions: starting, Derivation: derivation(), Provenance: provenance(),
	}.Build()
	sum := pb.CombineResponse_builder{
		Power: sphereCylinder(0, -1.5, 135), PowerVector: vectorOf(-0.75, 0, -0.75), Cautions: starting, Provenance: provenance(),
	}.Build()
	forms := pb.ExpressResponse_builder{
		MinusCylinder: sphereCylinder(7, -5, 120), PlusCylinder: sphereCylinder(2, 5, 30), PowerVector: vectorOf(4.5, -1.25, -2.165),
		Meridians: []*pb.MeridianPower{powerAlong(7, deg(120)), powerAlong(2, deg(30))}, BlurStrengthD: proto.Float64(5.148),
		Cautions: starting, Provenance: provenance(),
	}.Build()
	even := pb.ExpressResponse_builder{
		MinusCylinder: sphereCylinder(-3, 0, 0), PlusCylinder: sphereCylinder(-3, 0, 0), PowerVector: vectorOf(-3, 0, 0),
		Meridians: []*pb.MeridianPower{powerAlong(-3, nil), powerAlong(-3, nil)}, BlurStrengthD: proto.Float64(3),
		Cautions: starting, Provenance: provenance(),
	}.Build()
	cornea := pb.DescribeCorneaResponse_builder{
		Flat: meridianOf(7.8035, 43.25, deg(180)), Steep: meridianOf(7.5843, 44.5, deg(90)), MeanRadiusMm: proto.Float64(7.6939),
		AstigmatismD: proto.Float64(1.25), CorrectingCylinder: sphereCylinder(0, -1.25, 180), FrontSurfacePower: sphereCylinder(48.184, 1.393, 180),
		AsphericityQ: proto.Float64(-0.3),
		SagittalHeights: []*pb.SagittalHeight{
			pb.SagittalHeight_builder{ChordMm: proto.Float64(9), FlatUm: proto.Float64(1383.4), SteepUm: proto.Float64(1429)}.Build(),
			pb.SagittalHeight_builder{ChordMm: proto.Float64(10.5), FlatUm: proto.Float64(1737.5), SteepUm: proto.Float64(1797)}.Build(),
		},
		Cautions: starting, Choices: []*pb.Choice{
			pb.Choice_builder{Field: proto.String("cornea_shape"), Rule: proto.String("a mean"), Source: proto.String("A paper")}.Build(),
		},
		Provenance: provenance(),
	}.Build()
	sphere := pb.DescribeCorneaResponse_builder{
		Flat: meridianOf(7.8, 43.269, nil), Steep: meridianOf(7.8, 43.269, nil), MeanRadiusMm: proto.Float64(7.8), AstigmatismD: proto.Float64(0),
		CorrectingCylinder: sphereCylinder(0, 0, 0), FrontSurfacePower: sphereCylinder(48.2, 0, 0), AsphericityQ: proto.Float64(0),
		Cautions: starting, Provenance: provenance(),
	}.Build()
	cautions := pb.ListCautionsResponse_builder{Cautions: []*pb.CautionDescription{
		pb.CautionDescription_builder{
			Code: pb.CautionCode_CAUTION_CODE_CORNEA_STEEP.Enum(), Severity: pb.Severity_SEVERITY_ADVICE.Enum(), Meaning: proto.String("the mean reading is above a limit"),
			Threshold: proto.Float64(47.2), Unit: proto.String("[diop]"), Action: proto.String("look again"), Source: proto.String("A paper"),
		}.Build(),
		pb.CautionDescription_builder{
			Code: pb.CautionCode_CAUTION_CODE_STARTING_POINT.Enum(), Severity: pb.Severity_SEVERITY_NOTE.Enum(), Meaning: proto.String("always"),
			Action: proto.String("confirm it on the eye"), Source: proto.String("definition"),
		}.Build(),
	}}.Build()
	methods := pb.ListMethodsResponse_builder{Methods: []*pb.Method{
		pb.Method_builder{
			Name: proto.String("A method"), Purpose: proto.String("what it is for"), Formula: proto.String("a = b + c"), Source: proto.String("A book, 2001"),
		}.Build(),
	}}.Build()

	for _, c := range []struct {
		name          string
		args          []string
		answer        proto.Message
		method, asked string
		asking        proto.Message
	}{
		{
			"vertex.txt", []string{"vertex", "-7.00 / -3.00 x 180", "--from", "12"}, transfer,
			"RefractionService/TransferVertex", `{"refraction":{"sphere_d":-7,"cylinder_d":-3,"axis_deg":180,"vertex_distance_mm":12}}`, &pb.TransferVertexRequest{},
		},
		{
			"vertex_explained.txt", []string{"vertex", "-7.00, vertex 12", "--to", "0", "--plus-cylinder", "--explain"}, transfer,
			"RefractionService/TransferVertex",
			`{"refraction":{"sphere_d":-7,"vertex_distance_mm":12},"to_vertex_distance_mm":0,"cylinder_form":"CYLINDER_FORM_PLUS","explain":true}`, &pb.TransferVertexRequest{},
		},
		{
			"vertex_absent.txt", []string{"vertex", "-2.00"}, transfer,
			"RefractionService/TransferVertex", `{"refraction":{"sphere_d":-2}}`, &pb.TransferVertexRequest{},
		},
		{
			"combine.txt", []string{"combine", "+1.75/+0.50x45", "--minus", "-1.00", "-2.25/-1.00x135", "--minus", "pl"}, sum,
			"RefractionService/Combine",
			`{"terms":[{"sphere_cylinder":{"sphere_d":1.75,"cylinder_d":0.5,"axis_deg":45}},{"sphere_cylinder":{"sphere_d":-2.25,"cylinder_d":-1,"axis_deg":135}},
			{"sphere_cylinder":{"sphere_d":-1},"subtract":true},{"sphere_cylinder":{"sphere_d":0},"subtract":true}]}`, &pb.CombineRequest{},
		},
		{
			"express.txt", []string{"express", "+2.00/+5.00x30", "--turn", "-10"}, forms,
			"RefractionService/Express", `{"sphere_cylinder":{"sphere_d":2,"cylinder_d":5,"axis_deg":30},"rotation_deg":-10}`, &pb.ExpressRequest{},
		},
		{
			"express_even.txt", []string{"express", "-3.00"}, even,
			"RefractionService/Express", `{"sphere_cylinder":{"sphere_d":-3}}`, &pb.ExpressRequest{},
		},
		{
			"cornea.txt", []string{"cornea", "44.50 @ 90 / 43.25 @ 180", "--chord", "9,10.5", "--chord", "11 mm", "--shape-q", "-0.3", "--keratometric-index", "1.332"}, cornea,
			"CorneaService/DescribeCornea",
			`{"keratometry":{"flat":{"power_d":43.25,"meridian_deg":180},"steep":{"power_d":44.5,"meridian_deg":90},"keratometric_index":1.332},
			"cornea_shape":{"asphericity_q":-0.3},"chords_mm":[9,10.5,11]}`, &pb.DescribeCorneaRequest{},
		},
		{
			"cornea_explained.txt", []string{"cornea", "7.80", "--explain"}, sphere,
			"CorneaService/DescribeCornea", `{"keratometry":{"flat":{"radius_mm":7.8},"steep":{"radius_mm":7.8}},"explain":true}`, &pb.DescribeCorneaRequest{},
		},
		{"cautions.txt", []string{"cautions"}, cautions, "ReferenceService/ListCautions", `{}`, &pb.ListCautionsRequest{}},
		{"methods.txt", []string{"methods"}, methods, "ReferenceService/ListMethods", `{}`, &pb.ListMethodsRequest{}},
		{"methods.json", []string{"methods", "--json"}, methods, "ReferenceService/ListMethods", `{}`, &pb.ListMethodsRequest{}},
		{
			"express.json", []string{"express", "+2.00/+5.00x30", "--json"}, forms,
			"RefractionService/Express", `{"sphere_cylinder":{"sphere_d":2,"cylinder_d":5,"axis_deg":30}}`, &pb.ExpressRequest{},
		},
	} {
		t.Run(c.name, func(t *testing.T) {
			t.Parallel()
			if err := protojson.Unmarshal([]byte(c.asked), c.asking); err != nil {
				t.Fatal(err)
			}
			f := &fake{answer: c.answer}
			got := call(t, f, "", c.args...)
			if got.code != exitFine || got.err != "" {
				t.Fatalf("exit code %d, standard error %q", got.code, got.err)
			}
			if f.method != "/meniscus.v1."+c.method || !proto.Equal(f.asked, c.asking) {
				t.Errorf("asked %s for\n%v\nwant %s for\n%v", f.method, f.asked, c.method, c.asking)
			}
			golden(t, c.name, got.out)
		})
	}
}

func TestTextIsWrappedBetweenWordsAndNotBeforeAUnit(t *testing.T) {
	t.Parallel()
	p := &page{}
	p.wrap("12345678 ", "  ", "0123456789 0123456789 0123456789 0123456789 0123456789 0123456789 012345 6789"+noBreak+"mm  end\nof it")
	p.wrap("", "  ", "a-word-that-is-longer-than-a-line-is-wide-stands-by-itself-and-is-not-broken-anywhere-at-all short")
	p.wrap("  ", "  ", "")
	want := "12345678 0123456789 0123456789 0123456789 0123456789 0123456789 0123456789\n" +
		"  012345 6789 mm end of it\n" +
		"a-word-that-is-longer-than-a-line-is-wide-stands-by-itself-and-is-not-broken-anywhere-at-all\n  short\n"
	if got := p.buffer.String(); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

func TestWordsForNumbers(t *testing.T) {
	t.Parallel()
	for got, want := range map[string]string{
		mm(7.8, 2):                "7.80 mm",
		mm(7.8125, 2):             "7.813 mm",
		mm(12, 0):                 "12 mm",
		mm(12.5, 0):               "12.5 mm",
		mm(9.8000000000000007, 1): "9.8 mm",
		quantity(-4.25, "[diop]"): "-4.25" + noBreak + "D",
		quantity(4.25, "[diop]"):  "+4.25" + noBreak + "D",
		quantity(0, "[diop]"):     "0" + noBreak + "D",
		quantity(1.3375, "1"):     "1.3375",
		quantity(175, "deg"):      "175°",
		quantity(15, "um"):        "15" + noBreak + "µm",
		quantity(1.5, "[p'diop]"): "1.5" + noBreak + "prism D",
		quantity(1.1, "g/cm3"):    "1.1" + noBreak + "g/cm3",
		twoDecimals(0.5, "1"):     "0.50",
		order(sphereCylinder(-5.3499999999999996, -1.1, 175)): "-5.35 / -1.10 D x 175°",
		order(sphereCylinder(-4.1875, 0, 0)):                  "-4.1875 D",
		order(sphereCylinder(0, 0, 0)):                        "plano",
		order(sphereCylinder(0, -0.75, 90)):                   "plano / -0.75 D x 90°",
		distance(0):                                           "at the cornea",
		along(perpendicular(180)):                             "along 90°",
		along(perpendicular(90)):                              "along 180°",
		along(perpendicular(0)):                               "along 90°",
		sideName(pb.Side_SIDE_UNSPECIFIED):                    "",
		toricityName(pb.Toricity_TORICITY_FRONT):              "front toric",
		toricityName(pb.Toricity_TORICITY_BACK):               "back toric",
		toricityName(pb.Toricity(9)):                          "number 9",
		reading(pb.MeridianReading_builder{PowerD: proto.Float64(51), AuxiliaryLensD: proto.Float64(1.25), MeridianDeg: proto.Float64(90)}.Build()): "51.00 D with +1.25 D along 90°",
		reading(nil): "absent",
	} {
		if got != want {
			t.Errorf("got %q, want %q", got, want)
		}
	}
}
