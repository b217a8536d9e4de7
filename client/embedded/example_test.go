package embedded_test

import (
	"context"
	"fmt"

	"google.golang.org/protobuf/proto"

	"meniscus.example/client/embedded"
	"meniscus.example/client/notation"
	pb "meniscus.example/proto/meniscus/v1"
	"meniscus.example/server"
)

// A fit, with the engine in the process.
func Example() {
	conn := embedded.New(server.Options{}) // or grpc.NewClient(...)
	res, err := pb.NewFittingServiceClient(conn).Fit(context.Background(), pb.FitRequest_builder{
		Eye: pb.Eye_builder{
			Side: pb.Side_SIDE_RIGHT.Enum(),
			Refraction: pb.Refraction_builder{
				SphereD: proto.Float64(-5.50), CylinderD: proto.Float64(-1.75), AxisDeg: proto.Float64(170),
				VertexDistanceMm: proto.Float64(13),
			}.Build(),
			Keratometry: pb.Keratometry_builder{
				Flat:  pb.MeridianReading_builder{RadiusMm: proto.Float64(7.95), MeridianDeg: proto.Float64(175)}.Build(),
				Steep: pb.MeridianReading_builder{RadiusMm: proto.Float64(7.70), MeridianDeg: proto.Float64(85)}.Build(),
			}.Build(),
		}.Build(),
	}.Build())
	if err != nil {
		fmt.Println(err) // names every field that is wrong, and what it looks like
		return
	}
	fmt.Println(notation.FormatPower(res.GetLens().GetPower(), 2))
	fmt.Println(res.GetProvenance().GetNotice())
	// Output:
	// -5.25
	// A calculated starting point, to be confirmed on the eye by a licensed practitioner under local rules. It diagnoses nothing, and nothing about a patient is stored.
}
