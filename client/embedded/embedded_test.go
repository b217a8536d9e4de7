package embedded_test

import (
	"context"
	"net"
	"testing"
	"time"

	"go.uber.org/goleak"
	"google.golang.org/grpc"
	"google.golang.org/grpc/codes"
	"google.golang.org/grpc/credentials/insecure"
	"google.golang.org/grpc/metadata"
	"google.golang.org/grpc/status"
	"google.golang.org/grpc/test/bufconn"
	"google.golang.org/protobuf/proto"

	"meniscus.example/client/embedded"
	pb "meniscus.example/proto/meniscus/v1"
	"meniscus.example/server"
)

func TestMain(m *testing.M) { goleak.VerifyTestMain(m) }

func eye(sphere float64) *pb.FitRequest {
	return pb.FitRequest_builder{
		Eye: pb.Eye_builder{
			Refraction: pb.Refraction_builder{SphereD: &sphere, VertexDistanceMm: proto.Float64(12)}.Build(),
			Keratometry: pb.Keratometry_builder{
				Flat:  pb.MeridianReading_builder{RadiusMm: proto.Float64(7.9), MeridianDeg: proto.Float64(10)}.Build(),
				Steep: pb.MeridianReading_builder{RadiusMm: proto.Float64(7.75)}.Build(),
			}.Build(),
		}.Build(),
		Plan: pb.FitPlan_builder{Explain: proto.Bool(true)}.Build(),
	}.Build()
}

// The engine in the process and the server on a wire give the same answers, errors and headers.
func TestTheProcessAnswersAsTheWireDoes(t *testing.T) {
	t.Parallel()
	listener := bufconn.Listen(1 << 20)
	g := server.New(server.Options{}).GRPC()
	done := make(chan struct{})
	go func() {
		defer close(done)
		_ = g.Serve(listener) // ends with the test
	}()
	defer func() { g.Stop(); <-done }()
	wire, err := grpc.NewClient("passthrough:memory", grpc.WithTransportCredentials(insecure.NewCredentials()),
		grpc.WithContextDialer(func(ctx context.Context, _ string) (net.Conn, error) { return listener.DialContext(ctx) }))
	if err != nil {
		t.Fatal(err)
	}
	defer wire.Close()

	lens := eye(-3)
	lens.SetLens(pb.Lens_builder{Power: pb.SphereCylinder_builder{SphereD: proto.Float64(60)}.Build()}.Build())
	for name, req := range map[string]*pb.FitRequest{"an answer": eye(-3), "bad input": eye(-300), "nothing": {}, "impossible": lens} {
		before := proto.CloneOf(req)
		call := func(conn grpc.ClientConnInterface) (*pb.FitResponse, metadata.MD, error) {
			var header metadata.MD
			ctx := metadata.AppendToOutgoingContext(context.Background(), "x-request-id", "same")
			res, err := pb.NewFittingServiceClient(conn).Fit(ctx, req, grpc.Header(&header))
			return res, header, err
		}
		a, headerA, errA := call(embedded.New(server.Options{}))
		b, headerB, errB := call(wire)
		if !proto.Equal(a, b) || !proto.Equal(status.Convert(errA).Proto(), status.Convert(errB).Proto()) {
			t.Errorf("%s: in the process %v, %v; on the wire %v, %v", name, a, errA, b, errB)
		}
		if len(headerA.Get("x-request-id")) != 1 || len(headerB.Get("x-request-id")) != 1 {
			t.Errorf("%s: headers %v and %v", name, headerA, headerB)
		}
		if !proto.Equal(req, before) {
			t.Errorf("%s: the request was changed", name)
		}
	}
	process := embedded.New(server.Options{})
	_, errA := pb.NewChartServiceClient(process).DrawFit(context.Background(), &pb.DrawFitRequest{})
	_, errB := pb.NewChartServiceClient(wire).DrawFit(context.Background(), &pb.DrawFitRequest{})
	if status.Code(errA) != codes.Unimplemented || !proto.Equal(status.Convert(errA).Proto(), status.Convert(errB).Proto()) {
		t.Errorf("not served: %v and %v", errA, errB)
	}
	_, errA = pb.NewFittingServiceClient(process).FitStream(context.Background())
	stream, err := pb.NewFittingServiceClient(wire).FitStream(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	_, errB = stream.Recv()
	if status.Code(errA) != codes.Unimplemented || !proto.Equal(status.Convert(errA).Proto(), status.Convert(errB).Proto()) {
		t.Errorf("a stream: %v and %v", errA, errB)
	}
	const nothing = "/meniscus.v1.FittingService/Nothing"
	errA, errB = process.Invoke(context.Background(), nothing, eye(-3), &pb.FitResponse{}), wire.Invoke(context.Background(), nothing, eye(-3), &pb.FitResponse{})
	if status.Code(errA) != codes.Unimplemented || !proto.Equal(status.Convert(errA).Proto(), status.Convert(errB).Proto()) {
		t.Errorf("an unknown method: %v and %v", errA, errB)
	}
}

// What somebody who calls from within a handler was sent himself stays there, as it does when he calls over a wire.
func TestMetadataOfACallerAreNotThoseOfHisCaller(t *testing.T) {
	t.Parallel()
	client := pb.NewFittingServiceClient(embedded.New(server.Options{}))
	within := metadata.NewIncomingContext(context.Background(), metadata.Pairs("x-request-id", "outer"))
	var header metadata.MD
	if _, err := client.Fit(within, eye(-3), grpc.Header(&header)); err != nil || len(header) != 0 {
		t.Errorf("%v, header %v", err, header)
	}
	if _, err := client.Fit(metadata.AppendToOutgoingContext(within, "x-request-id", "inner"), eye(-3), grpc.Header(&header)); err != nil {
		t.Fatal(err)
	}
	if id := header.Get("x-request-id"); len(id) != 1 || id[0] != "inner" {
		t.Errorf("request id %v", id)
	}
}

func TestAnAnswerIsTheCallersOwn(t *testing.T) {
	t.Parallel()
	conn := embedded.New(server.Options{})
	out := &pb.FitResponse{}
	out.SetSide(pb.Side_SIDE_LEFT) // must not stay
	if err := conn.Invoke(context.Background(), pb.FittingService_Fit_FullMethodName, eye(-3), out); err != nil {
		t.Fatal(err)
	}
	if out.HasSide() || !out.HasLens() {
		t.Error(out)
	}
	if err := conn.Invoke(context.Background(), pb.FittingService_Fit_FullMethodName, "text", out); status.Code(err) != codes.Internal {
		t.Error(err)
	}
}

func TestACallThatIsLateIsNotAnswered(t *testing.T) {
	t.Parallel()
	ctx, cancel := context.WithDeadline(context.Background(), time.Now().Add(-time.Second))
	defer cancel()
	_, err := pb.NewFittingServiceClient(embedded.New(server.Options{})).Fit(ctx, eye(-3))
	if status.Code(err) != codes.DeadlineExceeded {
		t.Error(err)
	}
	if _, err := pb.NewFittingServiceClient(embedded.New(server.Options{})).FitStream(context.Background()); status.Code(err) != codes.Unimplemented {
		t.Error(err)
	}
}

func BenchmarkFit(b *testing.B) {
	client, req := pb.NewFittingServiceClient(embedded.New(server.Options{})), eye(-3)
	req.ClearPlan()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := client.Fit(context.Background(), req); err != nil {
			b.Fatal(err)
		}
	}
}
