package server

import (
	"context"
	"net"
	"testing"

	"google.golang.org/grpc"
	"google.golang.org/grpc/credentials/insecure"
	"google.golang.org/grpc/test/bufconn"
	"google.golang.org/protobuf/proto"

	pb "meniscus.example/proto/meniscus/v1"
)

// fitRequest is an invented eye.
func fitRequest() *pb.FitRequest {
	return pb.FitRequest_builder{
		Eye: pb.Eye_builder{
			Side: pb.Side_SIDE_RIGHT.Enum(),
			Refraction: pb.Refraction_builder{
				SphereD: proto.Float64(-5.5), CylinderD: proto.Float64(-1.75), AxisDeg: proto.Float64(170), VertexDistanceMm: proto.Float64(13),
			}.Build(),
			Keratometry: pb.Keratometry_builder{
				Flat:  pb.MeridianReading_builder{RadiusMm: proto.Float64(7.95), MeridianDeg: proto.Float64(175)}.Build(),
				Steep: pb.MeridianReading_builder{RadiusMm: proto.Float64(7.7), MeridianDeg: proto.Float64(85)}.Build(),
			}.Build(),
		}.Build(),
	}.Build()
}

// benchmarkFitRequest is an eye with all that can be known of it, and a lens of which some is decided.
func benchmarkFitRequest() *pb.FitRequest {
	req := fitRequest()
	req.GetEye().SetIrisDiameterMm(11.8)
	req.GetEye().SetPupilDiameterMm(6)
	req.SetLens(pb.Lens_builder{
		TotalDiameterMm: proto.Float64(9.6),
		Material:        pb.Material_builder{RefractiveIndex: proto.Float64(1.45), Dk: proto.Float64(100)}.Build(),
	}.Build())
	req.SetPlan(pb.FitPlan_builder{PowerStepD: proto.Float64(0.25), TearIndex: proto.Float64(1.336)}.Build())
	return req
}

// dial serves s on a connection in memory.
func dial(t testing.TB, s *Server) *grpc.ClientConn {
	t.Helper()
	listener := bufconn.Listen(1 << 20)
	g := s.GRPC()
	done := make(chan struct{})
	go func() {
		defer close(done)
		_ = g.Serve(listener) // ends with the test
	}()
	t.Cleanup(func() {
		g.Stop()
		<-done
	})
	return dialListener(t, listener)
}

// dialListener connects in memory.
func dialListener(t testing.TB, listener *bufconn.Listener) *grpc.ClientConn {
	t.Helper()
	conn, err := grpc.NewClient("passthrough:memory", grpc.WithTransportCredentials(insecure.NewCredentials()),
		grpc.WithContextDialer(func(ctx context.Context, _ string) (net.Conn, error) { return listener.DialContext(ctx) }))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { conn.Close() })
	return conn
}
